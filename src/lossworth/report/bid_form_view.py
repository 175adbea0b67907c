"""What the bid form asks: labels for the whole bid, columns for each lot, bounds and choices of each answer."""

from __future__ import annotations

import datetime
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

__all__ = ["Answer", "BidFormView", "FormCell", "FormColumn", "FormField", "FormGroup", "FormLot", "Particulars"]


@dataclass(frozen=True, slots=True)
class Answer:
    """How one cell may be answered.

    Parameters
    ----------
    kind : str
        ``"text"``, ``"number"``, ``"choice"`` or ``"date"``.
    choices : tuple of str
        Of a choice.
    above_zero : bool
        Whether a number must be above zero; else it must not be negative.
    at_least, at_most : Decimal or None
        Bounds of a number, in the unit of the heading.
    is_limit : bool
        Whether the bounds are limits of the tender: then a value beyond them is warned of and not refused.
    earliest : datetime.date or None
        Of a date.
    prompt : str
        What the cell says when it is chosen.
    """

    kind: Literal["text", "number", "choice", "date"] = "text"
    choices: tuple[str, ...] = ()
    above_zero: bool = True
    at_least: Decimal | None = None
    at_most: Decimal | None = None
    is_limit: bool = False
    earliest: datetime.date | None = None
    prompt: str = ""


@dataclass(frozen=True, slots=True)
class FormField:
    """One question on the whole bid: a label with its answer.

    Parameters
    ----------
    label : str
        As the reader of bids knows it, where it reads it.
    answer : Answer
        How it is answered.
    needed : bool
        Whether the bid is incomplete without it.
    fixed : str
        Answer that the tender gives itself; the cell is locked.
    is_share : bool
        Whether it is one of the payments, which make 100 % together.
    """

    label: str
    answer: Answer
    needed: bool = True
    fixed: str = ""
    is_share: bool = False


@dataclass(frozen=True, slots=True)
class FormGroup:
    """Questions under a title, with a note above them."""

    title: str
    fields: tuple[FormField, ...]
    note: str = ""


@dataclass(frozen=True, slots=True)
class FormColumn:
    """One column of the price schedule.

    Parameters
    ----------
    field : str
        Field of an offer, or ``"item: NAME"``.
    heading : str
        With its unit, as the reader of bids knows it.
    group : str
        Words above neighboring columns.
    width : float
        In digits.
    numbers : str
        Number format; ``"@"`` for text.
    """

    field: str
    heading: str
    group: str
    width: float
    numbers: str


@dataclass(frozen=True, slots=True)
class FormCell:
    """What one column asks of one lot."""

    answer: Answer
    needed: bool


@dataclass(frozen=True, slots=True)
class FormLot:
    """One lot: what is printed, and what is asked.

    Parameters
    ----------
    id, description, rated_power, cooling : str
        Of the lot.
    quantity : Decimal
        Units.
    valued, limits : str
        How losses are valued, and which limits hold.
    cells : mapping of str to FormCell
        By field; a column that is not there is not asked of the lot.
    least_efficiency_percent : Decimal or None
        Least peak efficiency index.
    power_in_loss_unit : Decimal
        Rated power, in the unit of the losses: kW for kVA, W for VA.
    """

    id: str
    description: str
    rated_power: str
    cooling: str
    quantity: Decimal
    valued: str
    limits: str
    cells: Mapping[str, FormCell]
    least_efficiency_percent: Decimal | None
    power_in_loss_unit: Decimal


@dataclass(frozen=True, slots=True)
class Particulars:
    """Further particulars under a title: label and unit of each."""

    title: str
    rows: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class BidFormView:
    """The whole form.

    Parameters
    ----------
    reference, title, buyer, opening_date, remark : str
        Head of every sheet; empty where not stated.
    fingerprint : str
        Of the rules of the evaluation.
    currency : str
        Evaluation currency.
    groups : tuple of FormGroup
        Questions on the whole bid.
    columns : tuple of FormColumn
        Of the price schedule, in their order.
    lots : tuple of FormLot
        One row each.
    alternative_rows : int
        Rows for alternatives; none where the tender does not accept them.
    alternatives_rule : str
        What the tender announces on them.
    particulars : tuple of Particulars
        Asked for information.
    """

    reference: str
    title: str
    buyer: str
    opening_date: str
    remark: str
    fingerprint: str
    currency: str
    groups: tuple[FormGroup, ...]
    columns: tuple[FormColumn, ...]
    lots: tuple[FormLot, ...]
    alternative_rows: int
    alternatives_rule: str
    particulars: tuple[Particulars, ...]
