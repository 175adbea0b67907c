"""Sheet of the evaluation: for every offer its losses, its five amounts per unit and for the lot, and its rank."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from decimal import Decimal

from .view import CostView, EvaluationView, LotView, OfferView
from .workbook_cells import ARITHMETIC, Cell, behind, column_name, wording_of
from .workbook_inputs import rate_figures
from .workbook_look import decimals_of
from .workbook_prices import price_ids
from .workbook_sheet import Book, Column, Sheet, capital
from .workbook_text import width_of

__all__ = ["AMOUNTS", "EVALUATION", "LotCells", "bidder_width", "money_width", "write_evaluation"]

EVALUATION = "Evaluation"
#: The five amounts of an offer, in the order of their columns.
AMOUNTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost", "total_owning_cost")

_ENTERING = ("unit_price", "", "exchange_rate", "no_load_loss", "load_loss", "auxiliary_loss")
_FIRST_AMOUNT = 7
_TOTAL = _FIRST_AMOUNT + len(AMOUNTS) - 1
_RANK = _TOTAL + 1
_ORDER = _RANK + 1
_TIE = _ORDER + 1
_NOTE = (
    "Total owning cost = evaluated price + A × P0 + B × Pk + C × Paux. Every amount is a formula; its operands stand "
    "in the same row, in the row of the rates, or on the sheets with bids, rates and inputs."
)


@dataclass(frozen=True, slots=True)
class LotCells:
    """Where the ranked offers of a lot stand on this sheet.

    Parameters
    ----------
    unit_row, lot_row : int
        First row of the amounts per unit and of those for the lot, counted from 0.
    count : int
        Number of ranked offers.
    decimals : int
        Decimals of the total owning costs of the lot, on which ranks are decided.
    """

    unit_row: int
    lot_row: int
    count: int
    decimals: int

    def of_lot(self, column: int) -> str:
        """Range of a column over the ranked offers, in the rows for the lot.

        Parameters
        ----------
        column : int
            Counted from 0.

        Returns
        -------
        str
            ``"Evaluation!$L$20:$L$25"``.
        """
        return self._range(column, self.lot_row)

    def per_unit(self, column: int) -> str:
        """Range of a column over the ranked offers, in the rows per unit.

        Parameters
        ----------
        column : int
            Counted from 0.

        Returns
        -------
        str
            As `of_lot`.
        """
        return self._range(column, self.unit_row)

    def _range(self, column: int, row: int) -> str:
        letters = column_name(column)
        return f"{EVALUATION}!${letters}${row + 1}:${letters}${row + self.count}"

    @property
    def order(self) -> str:
        """Range of the positions in the ranking."""
        return self.of_lot(_ORDER)

    @property
    def rank(self) -> str:
        """Range of the ranks."""
        return self.of_lot(_RANK)

    def amount_columns(self) -> tuple[int, ...]:
        """Columns of the five amounts.

        Returns
        -------
        tuple of int
            Counted from 0.
        """
        return tuple(range(_FIRST_AMOUNT, _TOTAL + 1))


def write_evaluation(book: Book) -> dict[str, LotCells]:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook; every amount gets its cell.

    Returns
    -------
    dict of str to LotCells
        By id of the lot, where its ranked offers stand.
    """
    sheet = Sheet(book, EVALUATION, "Evaluation", _columns(book.view), _NOTE)
    cells = {}
    for lot in book.view.lots:
        sheet.new_page()
        cells[lot.id] = _lot(book, sheet, lot)
    sheet.finish()
    return cells


def _columns(view: EvaluationView) -> tuple[Column, ...]:
    currency, money = view.currency, money_width(view)
    return (
        Column("Bidder", bidder_width(view)),
        Column("Quoted price\nper unit", money, numeric=True),
        Column("Currency", 10),
        Column("Exchange\nrate", 10, numeric=True),
        Column("No-load\nloss P0\n[kW]", 10, numeric=True),
        Column("Load\nloss Pk\n[kW]", 10, numeric=True),
        Column("Auxiliary\nloss Paux\n[kW]", 11, numeric=True),
        Column(f"Evaluated\nprice\n[{currency}]", money, numeric=True),
        Column(f"No-load loss\nA × P0\n[{currency}]", money, numeric=True),
        Column(f"Load loss\nB × Pk\n[{currency}]", money, numeric=True),
        Column(f"Auxiliary loss\nC × Paux\n[{currency}]", money, numeric=True),
        Column(f"Total\nowning cost\n[{currency}]", money, numeric=True),
        Column("Rank,\nor status", 16, numeric=True),
        Column("helper: place in the order", 9, helper=True),
        *((Column("helper: place in a tie", 9, helper=True),) if _parts_ties(view) else ()),
    )


def _parts_ties(view: EvaluationView) -> bool:
    """Whether the announced order broke a tie in some lot."""
    return any(offer.tie_decided_by for lot in view.lots for offer in lot.offers)


def money_width(view: EvaluationView) -> float:
    """Width of a column that holds any amount of the evaluation.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    float
        Room for the longest amount in bold. [widths of a digit]
    """
    offers = [offer for lot in view.lots for offer in lot.offers]
    ids = {identity for offer in offers for identity in (*_ids(offer.per_unit), *_ids(offer.lot), offer.unit_price)}
    values = (view.figures[identity].value for identity in ids if identity is not None)
    longest = max((width_of(f"{value:,.{decimals_of(value)}f}", bold=True) for value in values), default=0.0)
    return max(longest + 1.5, 12.5)


def bidder_width(view: EvaluationView) -> float:
    """Width of a column that holds the names of the bidders, long ones in several lines.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    float
        Room for the longest name in bold, within bounds. [widths of a digit]
    """
    names = (width_of(offer.bidder, bold=True) for lot in view.lots for offer in lot.offers)
    return min(max(max(names, default=0.0) + 3, 18.0), 34.0)


def _lot(book: Book, sheet: Sheet, lot: LotView) -> LotCells:
    block = f"lot {lot.id}"
    sheet.paragraph(f"Lot {lot.id} · {lot.description} · {lot.quantity:,} units", "band")
    _rates_and_quantity(book, sheet, lot, block)
    ranked = [offer for offer in lot.offers if offer.status == "ranked"]
    unit_row = sheet.row + 1
    lot_row = unit_row + len(lot.offers) + 1
    steps = _settle(book, lot, unit_row, lot_row)
    totals = (offer.lot.total_owning_cost for offer in ranked)
    decimals = decimals_of(*(book.figure(identity).value for identity in totals if identity is not None))
    cells = LotCells(unit_row, lot_row, len(ranked), decimals)
    sheet.paragraph("Per unit", "part")
    _amount_rows(book, sheet, lot, block, unit=True)
    sheet.paragraph("Whole lot", "part")
    _amount_rows(book, sheet, lot, block, unit=False)
    ties = _places_in_ties(book, ranked) if _parts_ties(book.view) else None
    for position, offer in enumerate(ranked):
        _rank(sheet, cells, position, offer, None if ties is None else ties[position])
    _steps(book, sheet, steps, block)
    for statement in _rules(book, lot):
        sheet.paragraph(capital(statement), "quiet paragraph")
    sheet.row += 1
    return cells


def _rates_and_quantity(book: Book, sheet: Sheet, lot: LotView, block: str) -> None:
    """The quantity, and the rates in the columns that they make."""
    rates = {8: lot.rates.no_load, 9: lot.rates.load, 10: lot.rates.auxiliary}
    lines: tuple[tuple[str, dict[int, str | None]], ...] = (
        ("Quantity [units]", {1: lot.quantity_figure}),
        (f"Rate [{lot.rates.unit}]", dict(rates)),
    )
    for label, shown in lines:
        row = sheet.row
        sheet.text(row, 0, label, "quiet text")
        for column in range(1, sheet.last + 1):
            identity = shown.get(column)
            if identity is None:
                sheet.text(row, column, "", "quiet text")
            else:
                sheet.figure(row, column, identity, "rate")
                book.addresses.repeat(identity, block, Cell(EVALUATION, row, column))
        sheet.row += 1


def _settle(book: Book, lot: LotView, unit_row: int, lot_row: int) -> list[str]:
    """Give every figure of the block its cell before any formula is written; returns those without a column."""
    addresses = book.addresses
    for position, offer in enumerate(lot.offers):
        for column, name in enumerate(_ENTERING, start=1):
            identity = getattr(offer, name) if name else None
            if identity is None:
                continue
            cell = Cell(EVALUATION, unit_row + position, column)
            if identity in addresses:
                addresses.repeat(identity, _row_scope(cell.row), cell)
            else:
                addresses.settle(identity, cell)
        for row, cost in ((unit_row, offer.per_unit), (lot_row, offer.lot)):
            for column, identity in enumerate(_ids(cost), start=_FIRST_AMOUNT):
                if identity is not None and identity not in addresses:
                    addresses.settle(identity, Cell(EVALUATION, row + position, column))
    first = lot_row + len(lot.offers) + 1
    steps = list(_without_cell(book, lot))
    for position, identity in enumerate(steps):
        addresses.settle(identity, Cell(EVALUATION, first + position, _FIRST_AMOUNT))
    return steps


def _without_cell(book: Book, lot: LotView) -> Iterator[str]:
    seen: set[str] = set()
    for offer in lot.offers:
        for identity in (*_ids(offer.per_unit), *_ids(offer.lot), *price_ids(offer)):
            for figure in behind(identity, book.view.figures) if identity is not None else ():
                if figure.id not in book.addresses and figure.id not in seen:
                    seen.add(figure.id)
                    yield figure.id


def _rules(book: Book, lot: LotView) -> dict[str, None]:
    """The rules that gave a value where no bidder stated one, each once."""
    ids = (identity for offer in lot.offers for identity in _ids(offer.lot) if identity is not None)
    figures = (figure for identity in ids for figure in behind(identity, book.view.figures))
    rates = {figure.id for rate in rate_figures(lot) for figure in behind(rate, book.view.figures)}
    return {figure.source: None for figure in figures if figure.operator == "rule" and figure.id not in rates}


def _row_scope(row: int) -> str:
    return f"row {row}"


def _ids(cost: CostView) -> tuple[str | None, ...]:
    return tuple(getattr(cost, name) for name in AMOUNTS)


def _amount_rows(book: Book, sheet: Sheet, lot: LotView, block: str, *, unit: bool) -> None:
    for offer in lot.offers:
        if unit:
            _entering(book, sheet, lot, offer, block)
        else:
            sheet.text(sheet.row, 0, offer.bidder, _bidder_style(offer))
            for column in range(1, _FIRST_AMOUNT):
                sheet.text(sheet.row, column, "")
        _amounts(book, sheet, lot, offer, block, unit=unit)
        sheet.row += 1


def _bidder_style(offer: OfferView) -> str:
    return "text" if offer.status == "ranked" else "quiet text"


def _entering(book: Book, sheet: Sheet, lot: LotView, offer: OfferView, block: str) -> None:
    sheet.text(sheet.row, 0, offer.bidder, _bidder_style(offer))
    sheet.text(sheet.row, 2, offer.currency or "–", "quiet text")
    for column, name in enumerate(_ENTERING, start=1):
        if name:
            decimals = _decimals(book, (getattr(other, name) for other in lot.offers))
            scopes = (_row_scope(sheet.row), block)
            sheet.figure(sheet.row, column, getattr(offer, name), _number_style(offer), decimals, scopes)


def _number_style(offer: OfferView) -> str:
    return "number" if offer.status == "ranked" else "quiet number"


def _amounts(book: Book, sheet: Sheet, lot: LotView, offer: OfferView, block: str, *, unit: bool) -> None:
    ids = _ids(offer.per_unit if unit else offer.lot)
    others = [_ids(other.per_unit if unit else other.lot) for other in lot.offers]
    scopes = (_row_scope(sheet.row), block)
    for index, identity in enumerate(ids):
        style = "total" if AMOUNTS[index] == "total_owning_cost" and offer.status == "ranked" else _number_style(offer)
        decimals = _decimals(book, (other[index] for other in others))
        sheet.figure(sheet.row, _FIRST_AMOUNT + index, identity, style, decimals, scopes)
    sheet.text(sheet.row, _RANK, "" if offer.status == "ranked" else offer.status, "quiet number")


def _decimals(book: Book, ids: Iterable[str | None]) -> int:
    return decimals_of(*(book.figure(identity).value for identity in ids if identity is not None))


def _places_in_ties(book: Book, ranked: Iterable[OfferView]) -> list[int]:
    """Place of each offer among those of the same total, as the announced order parted them; 0 for the first."""
    ids = [(offer.lot.total_owning_cost, offer.rank or 0) for offer in ranked]
    known = [(book.figure(identity).value, rank) for identity, rank in ids if identity is not None]
    first: dict[Decimal, int] = {}
    for total, rank in known:
        first[total] = min(rank, first.get(total, rank))
    return [rank - first[total] for total, rank in known]


def _rank(sheet: Sheet, cells: LotCells, position: int, offer: OfferView, tie: int | None) -> None:
    """Rank on rounded money, equal amounts alike; and the place in the order, in which ties keep their rows.

    Where the announced order broke ties, the place in a tie is a value: it parts offers that are equal again.
    """
    row = cells.lot_row + position

    def span(column: int) -> str:
        letters = column_name(column)
        return f"{letters}${cells.lot_row + 1}:{letters}${cells.lot_row + cells.count}"

    rank = f"{column_name(_RANK)}{row + 1}"
    totals = f"ROUND({span(_TOTAL)},{cells.decimals})"
    own = f"ROUND({column_name(_TOTAL)}{row + 1},{cells.decimals})"
    before, same = f"=1+SUMPRODUCT(--({totals}<{own}))", f"({totals}={own})"
    if tie is not None:
        key = f"{column_name(_TIE)}{row + 1}"
        before += f"+SUMPRODUCT({same}*({span(_TIE)}<{key}))"
        same += f"*({span(_TIE)}={key})"
        sheet.number(row, _TIE, Decimal(tie), "helper")
    sheet.formula(row, _RANK, before, float(offer.rank or 0), "total")
    order = f"={rank}+SUMPRODUCT({same}*(ROW({span(_TOTAL)})<ROW()))"
    sheet.formula(row, _ORDER, order, float(position + 1), "helper")


def _steps(book: Book, sheet: Sheet, steps: Iterable[str], block: str) -> None:
    ids = list(steps)
    if not ids:
        return
    sheet.paragraph("Steps in between", "part")
    for identity in ids:
        figure = book.figure(identity)
        sheet.text(sheet.row, 0, figure.label, "quiet text")
        sheet.spread(sheet.row, wording_of(figure, book.view.figures), "quiet text", 1, _FIRST_AMOUNT - 1)
        style = "quiet number" if figure.operator in ARITHMETIC else "input"
        sheet.figure(sheet.row, _FIRST_AMOUNT, identity, style, None, (block,))
        sheet.text(sheet.row, _FIRST_AMOUNT + 1, figure.unit, "quiet text")
        sheet.row += 1
