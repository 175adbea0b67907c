"""The whole evaluation as the papers show it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from .figure import ShownFigure
from .offer import OfferView
from .rates import RatesView
from .record import DecisionView, ExchangeView, FindingView, RecordView, RulesProofView

__all__ = ["EvaluationView", "LotView"]


@dataclass(frozen=True, slots=True)
class LotView:
    """One lot as the papers show it; offers stand ranked first, then non-responsive, then not evaluated."""

    id: str
    description: str
    quantity: int
    quantity_figure: str
    rated_power: str
    limits: tuple[str, ...]
    rates: RatesView
    offers: tuple[OfferView, ...]
    recommendation: str


@dataclass(frozen=True, slots=True)
class EvaluationView:
    """Everything that the papers of one evaluation show.

    Parameters
    ----------
    reference, title, buyer, currency, opening_date, remark : str
        Identity of the tender; the last two may be empty.
    recommendation : str
        The result in one sentence over all lots.
    rules : tuple of str
        The rules that were applied, in sentences.
    method : tuple of str
        The method in sentences with its sources.
    cautions : tuple of str
        What the papers do not prove.
    lots : tuple of LotView
        In the order of the tender.
    exchange : ExchangeView or None
        Exchange rates, where the tender states any.
    findings : tuple of FindingView
        All findings, weightiest first.
    record : RecordView
        Versions and fingerprints.
    figures : mapping of str to ShownFigure
        Every figure behind every amount, by id, operands before results.
    rules_proof : RulesProofView or None
        Comparison with the rules as published; None where it was not made.
    decisions : tuple of DecisionView
        Decisions by people that the evaluation read.
    """

    reference: str
    title: str
    buyer: str
    currency: str
    opening_date: str
    remark: str
    recommendation: str
    rules: tuple[str, ...]
    method: tuple[str, ...]
    cautions: tuple[str, ...]
    lots: tuple[LotView, ...]
    exchange: ExchangeView | None
    findings: tuple[FindingView, ...]
    record: RecordView
    figures: Mapping[str, ShownFigure]
    rules_proof: RulesProofView | None = None
    decisions: tuple[DecisionView, ...] = ()
