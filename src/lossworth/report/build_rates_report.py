"""Rates of a tender for the planner, without any offer: what the tender uses, and the study beside it."""

from __future__ import annotations

from collections.abc import Iterable

from ..evaluation.lot_rates import derived_rates, lot_rates
from ..evaluation.result import LotRates
from ..findings import one_line
from ..records.tender import Lot, Tender
from ..trail import Figure
from .build_view import rates_view
from .figure_text import shown_figures
from .view import LotRatesView, RatesReport
from .wording import derivation_sources, rate_sources

__all__ = ["build_rates_report"]


def build_rates_report(tender: Tender) -> RatesReport:
    """Rates of every lot, with the arithmetic behind them.

    Parameters
    ----------
    tender : Tender
        As announced or as drafted.

    Returns
    -------
    RatesReport
        For the terminal.
    """
    currency = tender.identity.currency.value
    used = {lot.id: lot_rates(tender, lot) for lot in tender.lots}
    studies = {lot.id: derived_rates(tender, lot, lot.study, "study") for lot in tender.lots if lot.study}
    return RatesReport(
        reference=one_line(tender.identity.reference.value),
        title=one_line(tender.identity.title.value),
        currency=currency,
        lots=tuple(_lot(tender, lot, used[lot.id], studies.get(lot.id)) for lot in tender.lots),
        figures=shown_figures(_roots((*used.values(), *studies.values())), currency),
    )


def _lot(tender: Tender, lot: Lot, used: LotRates, study: LotRates | None) -> LotRatesView:
    currency = tender.identity.currency.value
    study_view = None
    if study is not None and lot.study is not None:
        sources = derivation_sources(
            tender, lot.study, "Study beside the announced rates, never part of the evaluation"
        )
        study_view = rates_view(study, sources, currency)
    return LotRatesView(
        id=lot.id,
        description=one_line(lot.description.value),
        used=rates_view(used, rate_sources(tender, lot), currency),
        study=study_view,
    )


def _roots(rates: Iterable[LotRates]) -> Iterable[Figure]:
    for lot in rates:
        yield from (rate for rate in (lot.no_load, lot.load, lot.auxiliary) if rate is not None)
