"""The evaluation page: one self-contained file without scripts, for the screen and for paper."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal

from .figures import CostPart, StackedBars, StackedCost, stacked_bars
from .formats import amount, number, percent
from .page_environment import environment as _environment
from .page_environment import visible as _visible
from .page_prices import PriceTable, price_groups, price_tables
from .page_rates import Line, RatesSheet, behind, rates_sheet
from .view import CostView, EvaluationView, Fact, FindingView, LotView, OfferView, ShownFigure

__all__ = ["page_html"]

_PARTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
_AMOUNTS = (*_PARTS, "total_owning_cost")
#: Kinds of findings that are questions to the bidder.
_ASKED = "apparent-error"
#: Heading and explanation of each part of the findings; the first part has none.
_FINDING_PARTS = {
    "": ("", ""),
    "asked": (
        "Questions put to bidders",
        "A figure looks like a slip of the pen. It is evaluated as read; only a recorded answer of the bidder can "
        "change it, as far as the tender's rules allow.",
    ),
    "waived": (
        "Waived by decision",
        "Set aside by a recorded decision, and without effect on the status of the offer.",
    ),
}


@dataclass(frozen=True, slots=True)
class _OfferSheet:
    """One offer as the page shows it: its arithmetic in groups, and where each figure's line stands."""

    offer: OfferView
    anchor: str
    groups: tuple[tuple[str, tuple[Line, ...]], ...]
    anchors: Mapping[str, str]
    tied: bool
    above: str
    above_percent: str


@dataclass(frozen=True, slots=True)
class _Information:
    """What stands beside the money: a column for each label, a row for each offer, None where an offer lacks it."""

    columns: tuple[tuple[str, str], ...]
    rows: tuple[tuple[_OfferSheet, tuple[Fact | None, ...]], ...]


@dataclass(frozen=True, slots=True)
class _LotSheet:
    """One lot as the page shows it."""

    lot: LotView
    anchor: str
    quantity: str
    has_auxiliary: bool
    ranked: tuple[_OfferSheet, ...]
    non_responsive: tuple[_OfferSheet, ...]
    not_evaluated: tuple[_OfferSheet, ...]
    chart: StackedBars | None
    chart_is_of_lot: bool
    rates: RatesSheet
    information: _Information | None
    prices: tuple[PriceTable, ...]

    @property
    def sheets(self) -> tuple[_OfferSheet, ...]:
        """All offers, in the order of the page."""
        return self.ranked + self.non_responsive + self.not_evaluated

    @property
    def first(self) -> tuple[_OfferSheet, ...]:
        """The offer of rank 1; several if they tie."""
        return tuple(sheet for sheet in self.ranked if sheet.offer.rank == 1)

    @property
    def assumed(self) -> tuple[_OfferSheet, ...]:
        """The offers of which a value was converted on an assumption."""
        return tuple(sheet for sheet in self.sheets if sheet.offer.assumptions)

    @property
    def corrected(self) -> tuple[_OfferSheet, ...]:
        """The offers of which a value was corrected or confirmed."""
        return tuple(sheet for sheet in self.sheets if sheet.offer.corrections)

    @property
    def has_preference(self) -> bool:
        """Whether the tender applies a preference, so that there are two rankings."""
        return any(sheet.offer.rank_without_preference is not None for sheet in self.ranked)

    @property
    def has_margins(self) -> bool:
        """Whether a ranked offer has another behind it."""
        return any(sheet.offer.margin for sheet in self.ranked)


def page_html(view: EvaluationView) -> str:
    """Evaluation report as one HTML file that asks for nothing outside itself.

    Parameters
    ----------
    view : EvaluationView
        What is shown; texts from bidders' files are escaped here.

    Returns
    -------
    str
        The page; the same view gives the same text.

    Raises
    ------
    KeyError
        If the view names a figure that it does not hold.
    """
    lots = tuple(_lot_sheet(view.figures, lot, f"lot-{count}") for count, lot in enumerate(view.lots, start=1))
    return (
        _environment()
        .get_template("page.html.j2")
        .render(view=view, figures=view.figures, lots=lots, findings=_sorted_findings(view.findings))
    )


def _sorted_findings(findings: Iterable[FindingView]) -> tuple[tuple[str, str, tuple[FindingView, ...]], ...]:
    """Findings in parts: those that act, questions that bidders were asked, and those that a decision set aside."""
    parts: dict[str, list[FindingView]] = {name: [] for name in _FINDING_PARTS}
    for finding in findings:
        part = "waived" if finding.waiver else "asked" if finding.kind.startswith(_ASKED) else ""
        parts[part].append(finding)
    return tuple((*_FINDING_PARTS[name], tuple(found)) for name, found in parts.items() if found)


def _lot_sheet(figures: Mapping[str, ShownFigure], lot: LotView, anchor: str) -> _LotSheet:
    winner = next((offer for offer in lot.offers if offer.rank == 1), None)
    winning_cost = figures[winner.lot.total_owning_cost].value if winner and winner.lot.total_owning_cost else None
    sheets = [
        _offer_sheet(figures, lot, offer, f"{anchor}-offer-{count}", winning_cost)
        for count, offer in enumerate(lot.offers, start=1)
    ]
    ranked = _with_status(sheets, "ranked")
    return _LotSheet(
        lot=lot,
        anchor=anchor,
        quantity=number(Decimal(lot.quantity)),
        has_auxiliary=lot.rates.auxiliary is not None,
        ranked=ranked,
        non_responsive=_with_status(sheets, "non-responsive"),
        not_evaluated=_with_status(sheets, "not evaluated"),
        chart=_chart(figures, ranked),
        chart_is_of_lot=_has_items(ranked),
        rates=rates_sheet(figures, lot, anchor),
        information=_information(sheets),
        prices=price_tables(figures, ((sheet.offer, sheet.anchors) for sheet in sheets)),
    )


def _with_status(sheets: Iterable[_OfferSheet], status: str) -> tuple[_OfferSheet, ...]:
    return tuple(sheet for sheet in sheets if sheet.offer.status == status)


def _offer_sheet(
    figures: Mapping[str, ShownFigure], lot: LotView, offer: OfferView, anchor: str, winning_cost: Decimal | None
) -> _OfferSheet:
    groups = []
    anchors: dict[str, str] = {}
    owners = {other.lot.total_owning_cost: other.bidder for other in lot.offers if other is not offer}
    for title, ids in _groups(figures, lot, offer):
        new = [key for key in ids if key not in anchors]
        numbered = enumerate(new, start=len(anchors) + 1)
        lines = tuple(Line(f"{anchor}-{count}", figures[key], owners.get(key, "")) for count, key in numbered)
        anchors |= {line.figure.id: line.anchor for line in lines}
        if lines:
            groups.append((title, lines))
    above = offer.above_winner
    return _OfferSheet(
        offer=offer,
        anchor=anchor,
        groups=tuple(groups),
        anchors=anchors,
        tied=offer.rank is not None and sum(other.rank == offer.rank for other in lot.offers) > 1,
        above="" if above is None else amount(above, _places(above)),
        above_percent=percent(above / winning_cost * 100) if above is not None and winning_cost else "",
    )


def _groups(
    figures: Mapping[str, ShownFigure], lot: LotView, offer: OfferView
) -> Iterator[tuple[str, tuple[str, ...]]]:
    """Figures of an offer in the order of the calculation; what other offers and the rates explain is not opened."""
    rates = {key for key in (lot.rates.no_load, lot.rates.load, lot.rates.auxiliary) if key}
    totals = {other.lot.total_owning_cost for other in lot.offers if other.lot.total_owning_cost}
    read = (offer.unit_price, offer.no_load_loss, offer.load_loss, offer.auxiliary_loss)
    yield "Per unit", behind(figures, [*_ids(offer.per_unit), *filter(None, read)], closed=rates)
    yield "Whole lot", behind(figures, _ids(offer.lot), closed=rates)
    for title, roots in price_groups(offer):
        yield title, behind(figures, roots, closed=rates)
    if offer.margin:
        yield f"Margin to {offer.margin.to}", behind(figures, [offer.margin.amount], closed=rates | totals)


def _ids(costs: CostView) -> list[str]:
    return [key for key in (getattr(costs, name) for name in _AMOUNTS) if key]


def _has_items(ranked: Iterable[_OfferSheet]) -> bool:
    return any(sheet.offer.has_items for sheet in ranked)


def _chart(figures: Mapping[str, ShownFigure], ranked: tuple[_OfferSheet, ...]) -> StackedBars | None:
    """Costs of one unit; of the lot where further items count, since they decide the rank too."""
    if not ranked:
        return None
    of_lot = _has_items(ranked)
    return stacked_bars([_stacked_cost(figures, sheet.offer, of_lot=of_lot) for sheet in ranked])


def _stacked_cost(figures: Mapping[str, ShownFigure], offer: OfferView, *, of_lot: bool) -> StackedCost:
    costs = offer.lot if of_lot else offer.per_unit
    total = costs.total_owning_cost
    named = ((name, getattr(costs, name)) for name in _PARTS)
    parts = tuple(
        part
        for name, key in named
        if key
        for part in _parts(CostPart(name, figures[key].value, figures[key].text), offer.items_price if of_lot else None)
    )
    return StackedCost(offer.rank_text, str(_visible(offer.bidder)), figures[total].text if total else "", parts)


def _parts(part: CostPart, items: Decimal | None) -> Iterator[CostPart]:
    """A part of a cost; the price of a lot as that of its units and that of its further items."""
    if items is None or part.name != "evaluated_price":
        yield part
        return
    units = part.amount - items
    yield CostPart(part.name, units, amount(units))
    yield CostPart("items_price", items, amount(items))


def _information(sheets: Iterable[_OfferSheet]) -> _Information | None:
    """Facts of the offers side by side, in the order in which their labels first appear."""
    informed = [sheet for sheet in sheets if sheet.offer.information]
    columns = tuple(dict.fromkeys((fact.label, fact.unit) for sheet in informed for fact in sheet.offer.information))
    if not columns:
        return None
    rows = []
    for sheet in informed:
        facts = {(fact.label, fact.unit): fact for fact in sheet.offer.information}
        rows.append((sheet, tuple(facts.get(column) for column in columns)))
    return _Information(columns, tuple(rows))


def _places(value: Decimal) -> int:
    return max(0, -int(value.as_tuple().exponent))
