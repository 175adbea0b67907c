"""Sheet of the prices: for every offer the live way from the quoted to the evaluated price, and what stands behind."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from .view import CostView, EvaluationView, OfferView, PriceStepView
from .workbook_cells import Cell, behind, wording_of
from .workbook_look import decimals_of
from .workbook_sheet import Book, Column, Sheet, capital

__all__ = ["PRICES", "PricePlan", "has_prices", "plan_prices", "price_ids", "write_prices"]

PRICES = "Prices"

_CHANGE, _PRICE = 2, 4
_COLUMNS = (
    Column("Step, or figure behind it", 50),
    Column("", 5),
    Column("Change", 20, numeric=True),
    Column("Unit", 12),
    Column("Price after it,\nor value", 20, numeric=True),
    Column("Unit", 12),
    Column("Why, or how it comes about", 70),
)
_NOTE = (
    "From the quoted to the evaluated price, live from bids and inputs. Which steps an offer has was decided before: "
    "a limit of weeks, a liquid or an origin is not decided again here."
)


@dataclass(frozen=True, slots=True)
class PricePlan:
    """The sheet, begun, and what each of its rows will hold; every figure has its cell already."""

    sheet: Sheet
    rows: tuple[tuple[str, str | PriceStepView], ...]


def has_prices(view: EvaluationView) -> bool:
    """Whether a price is more than converted, a figure corrected, or a preference applied.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    bool
        False for a view that gets no sheets of prices.
    """
    offers = (offer for lot in view.lots for offer in lot.offers)
    return any(o.has_price_steps or o.corrections or o.total_without_preference is not None for o in offers)


def price_ids(offer: OfferView) -> Iterator[str]:
    """What the way of the price, its corrections and the contract price are made of.

    Parameters
    ----------
    offer : OfferView
        One offer.

    Yields
    ------
    str
        Ids of figures.
    """
    found: list[str | None] = []
    for step in offer.price_steps:
        found += [step.price, step.change]
    for correction in offer.corrections:
        found += [correction.as_read, correction.corrected, correction.evaluated]
    yield from filter(None, (*found, offer.contract_price, offer.total_without_preference))


def plan_prices(book: Book) -> PricePlan:
    """Begin the sheet and give every figure of it its cell, before any formula refers to one.

    Parameters
    ----------
    book : Book
        The workbook, in which inputs, bids and rates stand already.

    Returns
    -------
    PricePlan
        To be written when the evaluation has its cells too.
    """
    sheet = Sheet(book, PRICES, "Prices: from the quoted to the evaluated price", _COLUMNS, _NOTE)
    rows: list[tuple[str, str | PriceStepView]] = []
    first, elsewhere = sheet.row, _in_the_evaluation(book.view)

    def settle(identity: str | None, column: int) -> None:
        if identity is not None and identity not in elsewhere and identity not in book.addresses:
            book.addresses.settle(identity, Cell(PRICES, first + len(rows), column))

    for lot in book.view.lots:
        rows.append(("band", f"Lot {lot.id} · {lot.description}"))
        for offer in lot.offers:
            rows.append(("part", offer.bidder if offer.status == "ranked" else f"{offer.bidder}, {offer.status}"))
            for step in offer.price_steps:
                settle(step.change, _CHANGE)
                settle(step.price, _PRICE)
                rows.append(("step", step))
            without = _only_without_preference(book, offer)
            for identity in _others(book, offer, elsewhere):
                settle(identity, _PRICE)
                rows.append(("without preference" if identity in without else "figure", identity))
    return PricePlan(sheet, tuple(rows))


def _in_the_evaluation(view: EvaluationView) -> set[str]:
    """Figures that have a column on the sheet of the evaluation, and those behind the losses."""
    found: set[str] = set()
    for lot in view.lots:
        for offer in lot.offers:
            found |= set(filter(None, (*_amounts(offer.per_unit), *_amounts(offer.lot), offer.unit_price)))
            losses = filter(None, (offer.no_load_loss, offer.load_loss, offer.auxiliary_loss))
            found |= {figure.id for loss in losses for figure in behind(loss, view.figures)}
            corrected = {identity for c in offer.corrections for identity in (c.as_read, c.corrected)}
            found -= corrected - {offer.no_load_loss, offer.load_loss, offer.auxiliary_loss, offer.unit_price}
    return found


def _amounts(cost: CostView) -> tuple[str | None, ...]:
    parts = (cost.evaluated_price, cost.no_load_cost, cost.load_cost, cost.auxiliary_cost)
    return (*parts, cost.total_owning_cost)


def _others(book: Book, offer: OfferView, elsewhere: set[str]) -> tuple[str, ...]:
    """Figures of an offer that are no step themselves and have no cell yet, operands before results."""
    ids = (figure.id for root in price_ids(offer) for figure in behind(root, book.view.figures))
    return tuple(identity for identity in dict.fromkeys(ids) if _is_new(book, identity, elsewhere))


def _only_without_preference(book: Book, offer: OfferView) -> set[str]:
    """Figures that only the total without preference is made of: their labels are those of the evaluation."""
    if offer.total_without_preference is None:
        return set()
    evaluated = [*_amounts(offer.lot), *_amounts(offer.per_unit), offer.contract_price]
    evaluated += [identity for step in offer.price_steps for identity in (step.price, step.change)]
    known = {figure.id for root in filter(None, evaluated) for figure in behind(root, book.view.figures)}
    return {figure.id for figure in behind(offer.total_without_preference, book.view.figures)} - known


def _is_new(book: Book, identity: str, elsewhere: set[str]) -> bool:
    return identity not in book.addresses and identity not in elsewhere


def write_prices(book: Book, plan: PricePlan) -> None:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook; every figure has its cell.
    plan : PricePlan
        What each row holds.
    """
    sheet = plan.sheet
    for kind, content in plan.rows:
        if isinstance(content, PriceStepView):
            _step(sheet, content)
        elif kind in ("figure", "without preference"):
            _figure(book, sheet, content, "" if kind == "figure" else f", {kind}")
        else:
            if kind == "band":
                sheet.new_page()
            sheet.paragraph(content, kind)
    sheet.finish()


def _step(sheet: Sheet, step: PriceStepView) -> None:
    row, style = sheet.row, "total" if step.name == "evaluated" else "number"
    sheet.text(row, 0, capital(step.label), "strong text" if step.name == "evaluated" else "text")
    sheet.text(row, 1, step.sign, "text")
    _value(sheet, _CHANGE, step.change, "number")
    _value(sheet, _PRICE, step.price, style)
    sheet.text(row, 6, step.rule, "quiet text")
    sheet.row += 1


def _value(sheet: Sheet, column: int, identity: str | None, style: str) -> None:
    if identity is None:
        sheet.text(sheet.row, column, "", "quiet text")
        sheet.text(sheet.row, column + 1, "", "quiet text")
        return
    figure = sheet.book.figure(identity)
    unit, decimals = figure.unit, decimals_of(figure.value)
    is_money = unit.isalpha() and unit.isupper()
    sheet.figure(sheet.row, column, identity, style, max(2, decimals) if is_money else decimals)
    sheet.text(sheet.row, column + 1, "" if unit == "1" else unit, "quiet text")


def _figure(book: Book, sheet: Sheet, identity: str, of: str) -> None:
    figure = book.figure(identity)
    sheet.text(sheet.row, 0, f"   {capital(figure.label)}{of}", "quiet text")
    for column in (1, 2, 3):
        sheet.text(sheet.row, column, "", "quiet text")
    _value(sheet, _PRICE, identity, "quiet number" if figure.operands or figure.operator != "read" else "input")
    sheet.text(sheet.row, 6, wording_of(figure, book.view.figures), "quiet text")
    sheet.row += 1
