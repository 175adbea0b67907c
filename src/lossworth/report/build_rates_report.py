"""Rates of a tender for the planner, without any offer: what the tender uses, and the study beside it."""

from __future__ import annotations

from collections.abc import Iterable
from decimal import Decimal

from ..evaluation.lot_rates import derived_rates, lot_rates
from ..evaluation.rate_study import Sensitivity, percent_above, sensitivities
from ..evaluation.result import LotRates
from ..findings import one_line
from ..records.tender import Lot, Tender
from ..trail import Figure
from .build_view import rates_view
from .figure_text import shown_figures, value_text
from .formats import percent
from .view import LotRatesView, RatesReport, SensitivityRow
from .wording import derivation_sources, rate_sources

__all__ = ["build_rates_report"]

_STUDY = "Study beside the announced rates, never part of the evaluation"
_VISIBLE = Decimal("0.05")  # percent; less prints as 0.0


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
        study_view = rates_view(study, lot, sources, currency)
    return LotRatesView(
        id=lot.id,
        description=one_line(lot.description.value),
        used=rates_view(used, lot, rate_sources(tender, lot), currency),
        study=study_view,
        comparison=() if study is None else tuple(_comparison(used, study, currency)),
        sensitivity=tuple(_row(found, study or used, currency) for found in sensitivities(study or used)),
    )


def _comparison(announced: LotRates, derived: LotRates, currency: str) -> Iterable[str]:
    """How far the announced rates lie from those of the study, a sentence each."""
    pairs = (
        ("A", announced.no_load, derived.no_load),
        ("B", announced.load, derived.load),
        ("C", announced.auxiliary, derived.auxiliary),
    )
    for name, one, other in pairs:
        if one is None and other is None:
            continue
        if one is None or other is None:
            yield f"{name} is {'derived' if one is None else 'announced'} only."
            continue
        above = percent_above(one, other)
        if above is None:
            yield f"The announced {name} stands beside a derived rate of zero."
            continue
        far = percent(abs(above), 1)
        place = f"{far} {'above' if above > 0 else 'below'}" if abs(above) >= _VISIBLE else "equal to"
        yield f"The announced {name} is {place} what these inputs give ({value_text(other, currency)} {other.unit})."


def _row(found: Sensitivity, rates: LotRates, currency: str) -> SensitivityRow:
    figure = found.figure
    return SensitivityRow(
        input=figure.label,
        unit="" if figure.unit == "1" else figure.unit,
        value=value_text(figure, currency),
        change=found.change,
        a=found.no_load or None,
        b=found.load or None,
        c=(found.auxiliary or None) if rates.auxiliary is not None else None,
    )


def _roots(rates: Iterable[LotRates]) -> Iterable[Figure]:
    for lot in rates:
        yield from (rate for rate in (lot.no_load, lot.load, lot.auxiliary) if rate is not None)
        yield from lot.inputs.values()
