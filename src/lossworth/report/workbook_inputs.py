"""Sheet of the tender's inputs: every number that the tender states, in a cell that may be changed."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from .view import LotView, ShownFigure
from .workbook_cells import ARITHMETIC, YEAR_TABLE, Cell, behind
from .workbook_sheet import Book, Column, Sheet, capital

__all__ = ["INPUTS", "rate_figures", "write_inputs"]

INPUTS = "Inputs"

_COLUMNS = (
    Column("Input", 48),
    Column("Value", 18, numeric=True),
    Column("Unit", 18),
    Column("Where it stands, or which rule gives it", 64),
)
_NOTE = (
    "Framed cells on warm ground are inputs: change one, recalculate, and rates, costs and ranks follow. "
    "Whether an offer keeps the limits of the tender was decided before and is not decided again here."
)


def rate_figures(lot: LotView) -> tuple[str, ...]:
    """Identities of the rates that value the losses of a lot.

    Parameters
    ----------
    lot : LotView
        The lot.

    Returns
    -------
    tuple of str
        No-load, load and, where there is one, auxiliary.
    """
    rates = lot.rates
    return tuple(identity for identity in (rates.no_load, rates.load, rates.auxiliary) if identity is not None)


def write_inputs(book: Book) -> None:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook; the tender's figures get their cells.
    """
    sheet = Sheet(book, INPUTS, "Inputs of the tender", _COLUMNS, _NOTE)
    linked: dict[tuple[str, ...], str] = {}
    sheet.paragraph("Rules", "band")
    for rule in book.view.rules:
        sheet.paragraph(rule)
    _exchange(book, sheet, linked)
    _commercial(book, sheet, linked)
    for lot in book.view.lots:
        sheet.paragraph(f"Lot {lot.id} · {lot.description}", "band")
        sheet.paragraph("; ".join((f"Rated power {lot.rated_power}", *lot.limits)))
        for figure in _leaves_of_lot(book, lot):
            _leaf(book, sheet, figure, linked)
        _validate_period(book, sheet, lot)
    _definitions(book, sheet)
    sheet.finish()


def _exchange(book: Book, sheet: Sheet, linked: dict[tuple[str, ...], str]) -> None:
    exchange = book.view.exchange
    if exchange is None:
        return
    sheet.paragraph("Exchange rates", "band")
    sheet.paragraph(f"{exchange.source}; {exchange.kind}; {exchange.date}. Evidence: {exchange.evidence}")
    for _, identity in exchange.rates:
        _leaf(book, sheet, book.figure(identity), linked)


def _commercial(book: Book, sheet: Sheet, linked: dict[tuple[str, ...], str]) -> None:
    """Adders, margins, interest and tax that the tender announces and some price uses."""
    offers = [offer for lot in book.view.lots for offer in lot.offers]
    own = tuple(f"{price.rpartition('/')[0]}/" for offer in offers if (price := offer.contract_price) is not None)
    leaves: dict[str, ShownFigure] = {}
    for root in (identity for offer in offers for step in offer.price_steps for identity in (step.change, step.price)):
        for figure in () if root is None else behind(root, book.view.figures):
            if figure.operator == "read" and not figure.id.startswith(own) and figure.id not in book.addresses:
                leaves.setdefault(figure.id, figure)
    if not leaves:
        return
    sheet.paragraph("Commercial terms of the tender", "band")
    for figure in leaves.values():
        _leaf(book, sheet, figure, linked)


def _leaves_of_lot(book: Book, lot: LotView) -> Iterator[ShownFigure]:
    """Quantity and what the rates rest on, in the order of the derivation, each once."""
    table = lot.rates.year_table
    roots = (lot.quantity_figure, *(table.inputs.values() if table else ()), *rate_figures(lot))
    seen: set[str] = set()
    for root in roots:
        for figure in behind(root, book.view.figures):
            if figure.id not in seen and figure.operator not in {*ARITHMETIC, YEAR_TABLE, "constant"}:
                seen.add(figure.id)
                yield figure


def _leaf(book: Book, sheet: Sheet, figure: ShownFigure, linked: dict[tuple[str, ...], str]) -> None:
    """One input; a value that stands in the same place of the tender as an earlier one follows that cell."""
    if figure.id in book.addresses:
        return
    row = sheet.row
    sheet.text(row, 0, capital(figure.label))
    key = (figure.label, figure.source, str(figure.value), figure.unit)
    if figure.operator == "read" and key in linked:
        book.addresses.settle(figure.id, Cell(INPUTS, row, 1))
        same = book.addresses.find(linked[key]).seen_from(INPUTS)
        sheet.formula(row, 1, f"={same}", figure.value)
    else:
        linked[key] = figure.id
        sheet.figure(row, 1, figure.id, "input")
    sheet.text(row, 2, _unit(figure), "quiet text")
    sheet.text(row, 3, figure.source, "quiet text")
    sheet.row += 1


def _unit(figure: ShownFigure) -> str:
    return "" if figure.unit == "1" else figure.unit


def _validate_period(book: Book, sheet: Sheet, lot: LotView) -> None:
    """Forbid an evaluation period with more years than the year table has rows."""
    table = lot.rates.year_table
    if table is None:
        return
    cell = book.addresses.find(table.inputs["evaluation_period_years"])
    years = len(table.columns[0].values)
    message = f"A whole number from 1 to {years}: the sheet with the rates by year has {years} rows for this lot."
    rule = {
        "validate": "integer",
        "criteria": "between",
        "minimum": 1,
        "maximum": years,
        "input_title": "Evaluation period",
        "input_message": message,
        "error_title": "Evaluation period",
        "error_message": message,
    }
    sheet.page.data_validation(cell.row, cell.column, cell.row, cell.column, rule)


def _definitions(book: Book, sheet: Sheet) -> None:
    constants: Iterable[ShownFigure] = [
        figure
        for figure in book.view.figures.values()
        if figure.operator == "constant" and figure.id not in book.addresses
    ]
    if not constants:
        return
    sheet.paragraph("True by definition", "band")
    for figure in constants:
        sheet.text(sheet.row, 0, capital(figure.label))
        sheet.figure(sheet.row, 1, figure.id)
        sheet.text(sheet.row, 2, _unit(figure), "quiet text")
        sheet.text(sheet.row, 3, figure.source, "quiet text")
        sheet.row += 1
