"""What the internal paper on suppositions shows: texts and figures, chosen and ordered."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

__all__ = ["CaseView", "ComparedOfferView", "InternalPaperView", "SuppositionView", "SuspicionView"]


@dataclass(frozen=True, slots=True)
class SuppositionView:
    """A supposed figure beside the one as read."""

    field: str
    as_read: str
    place: str
    supposed: str
    unit: str
    reason: str
    proof: str
    is_proved_by_bid: bool


@dataclass(frozen=True, slots=True)
class SuspicionView:
    """One apparent error.

    Parameters
    ----------
    offer, lot : str
        Whose.
    kind, title : str
        Kind of the finding.
    statement, place : str
        Why it looks wrong, and where.
    question : str
        What the letter asks.
    suppositions : tuple of SuppositionView
        Figures if it is right; empty where only the bidder can know.
    """

    offer: str
    lot: str
    kind: str
    title: str
    statement: str
    place: str
    question: str
    suppositions: tuple[SuppositionView, ...]


@dataclass(frozen=True, slots=True)
class ComparedOfferView:
    """One offer of a lot, as evaluated and as supposed; ranks and amounts are None where there are none.

    Parameters
    ----------
    offer : str
        Its name.
    is_suspected : bool
        Whether a figure of it is supposed.
    status_before, status_after : str
        ``"ranked"``, ``"non-responsive"``, ``"not evaluated"``.
    rank_before, rank_after : int or None
        Ranks.
    total_before, total_after : Decimal or None
        Total owning cost of one unit, or of the lot where `CaseView.is_of_lot`. [evaluation currency]
    """

    offer: str
    is_suspected: bool
    status_before: str
    status_after: str
    rank_before: int | None
    rank_after: int | None
    total_before: Decimal | None
    total_after: Decimal | None


@dataclass(frozen=True, slots=True)
class CaseView:
    """One lot with one suspicion taken to be right, or with all of the lot.

    Parameters
    ----------
    lot, description : str
        The lot.
    suspicions : tuple of int
        Which ones of `InternalPaperView.suspicions`, counted from 1.
    sentence : str
        What would change, in one or two sentences.
    offers : tuple of ComparedOfferView
        In the order after; empty where the evaluation would stop.
    is_of_lot : bool
        Whether amounts are those of the lot: where further items count, they decide the rank too.
    """

    lot: str
    description: str
    suspicions: tuple[int, ...]
    sentence: str
    offers: tuple[ComparedOfferView, ...]
    is_of_lot: bool = False


@dataclass(frozen=True, slots=True)
class InternalPaperView:
    """The paper.

    Parameters
    ----------
    reference, title, buyer, currency, remark : str
        The tender.
    mark : str
        Stands on every page and in the data: the paper is internal and no part of the evaluation.
    notes : tuple of str
        What the paper is, and how it may be used.
    suspicions : tuple of SuspicionView
        All apparent errors.
    cases : tuple of CaseView
        Rankings before and after.
    generated_at, tool_version : str
        As the other papers of the run.
    """

    reference: str
    title: str
    buyer: str
    currency: str
    remark: str
    mark: str
    notes: tuple[str, ...]
    suspicions: tuple[SuspicionView, ...]
    cases: tuple[CaseView, ...]
    generated_at: str
    tool_version: str
