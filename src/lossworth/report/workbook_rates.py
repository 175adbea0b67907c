"""Sheet of the rates that value the losses, with the steps that lead to them."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from decimal import Decimal

from .view import LoadView, LotView, RatesView, ShownFigure
from .workbook_cells import ARITHMETIC, YEAR_TABLE, behind, wording_of
from .workbook_inputs import rate_figures
from .workbook_sheet import Book, Column, Sheet, capital
from .workbook_years import write_years, years_sheet

__all__ = ["RATES", "write_rates"]

RATES = "Rates"

_COLUMNS = (
    Column("Rate, or step towards it", 44),
    Column("Value", 18, numeric=True),
    Column("Unit", 17),
    Column("How it comes about", 74),
)
_NOTE = (
    "What a kilowatt of loss is worth: A for no-load loss, B for load loss, C for auxiliary loss, as present values."
)

_EQUIVALENT = "equivalent peak load"
_STAYS = (
    "The equivalent peak load follows from loads, prices and discount factors of all years: it is a value, and does "
    "not move when one of them is changed in this workbook."
)


def write_rates(book: Book) -> None:
    """Write the sheet, and the sheet of the rates by year where rates are derived.

    Parameters
    ----------
    book : Book
        The workbook; the rates and all steps to them get their cells.
    """
    sheet = Sheet(book, RATES, "Loss capitalization rates", _COLUMNS, _NOTE)
    years = years_sheet(book) if any(lot.rates.year_table for lot in book.view.lots) else None
    for lot in book.view.lots:
        sheet.paragraph(f"Lot {lot.id} · {lot.description} · rates {lot.rates.basis}", "band")
        for text in _sentences(lot.rates):
            sheet.paragraph(text)
        if lot.rates.load_profile is not None:
            _load(sheet, lot.rates.load_profile)
        if any(figure.label == _EQUIVALENT for figure in _rules(book, lot)):
            sheet.paragraph(_STAYS, "quiet paragraph")
        if years is not None and lot.rates.year_table is not None:
            _lines(book, sheet, _computed(book, lot.rates.year_table.inputs.values()))
            write_years(years, lot)
        used = rate_figures(lot)
        _lines(book, sheet, (figure for figure in _computed(book, used) if figure.id not in used), known=False)
        for identity in used:
            _line(book, sheet, book.figure(identity), "total")
    if years is not None:
        years.finish()
    sheet.finish()


def _rules(book: Book, lot: LotView) -> Iterator[ShownFigure]:
    """Figures behind the rates that a rule or a computation beside the workbook gives."""
    found = (figure for identity in rate_figures(lot) for figure in behind(identity, book.view.figures))
    return (figure for figure in found if figure.operator == "rule")


def _sentences(rates: RatesView) -> Iterator[str]:
    """Where the rates come from, the method, and its formulas a line each."""
    yield from rates.sources
    if rates.method:
        yield f"Method: {rates.method}"
    yield from rates.formulas


def _load(sheet: Sheet, load: LoadView) -> None:
    """What the load profile gives: values, since they follow from a file and not from cells."""
    last = len(load.peak_load_by_year_pu)
    for fact in load.facts:
        _value(sheet, fact.label, fact.value, fact.unit, f"from {load.file}")
    for stage in load.stages:
        above, share = f"{stage.above_load_pu:.4g}", f"{stage.share_percent:.4g} % of the auxiliary loss"
        for year in dict.fromkeys((1, last)):
            hours = Decimal(f"{stage.hours_by_year[year - 1]:.1f}")
            _value(sheet, f"hours above {above} per unit, year {year}", hours, "h/year", f"cooling stage, {share}")
    for remark in load.remarks:
        sheet.paragraph(remark, "quiet paragraph")


def _value(sheet: Sheet, label: str, value: Decimal, unit: str, source: str) -> None:
    sheet.text(sheet.row, 0, capital(label), "quiet text")
    sheet.number(sheet.row, 1, value, "quiet number")
    sheet.text(sheet.row, 2, "" if unit == "1" else unit, "quiet text")
    sheet.text(sheet.row, 3, source, "quiet text")
    sheet.row += 1


def _computed(book: Book, roots: Iterable[str]) -> Iterator[ShownFigure]:
    """Figures behind some roots that are not leaves, operands before results, each once."""
    seen: set[str] = set()
    for root in roots:
        for figure in behind(root, book.view.figures):
            if figure.id not in seen and (figure.operator in ARITHMETIC or figure.operator == YEAR_TABLE):
                seen.add(figure.id)
                yield figure


def _lines(book: Book, sheet: Sheet, figures: Iterable[ShownFigure], *, known: bool = True) -> None:
    """One line a figure; steps that stand on this sheet already are passed over unless `known` says otherwise."""
    for figure in figures:
        here = figure.id in book.addresses and book.addresses.find(figure.id).sheet == RATES
        if known or not here:
            _line(book, sheet, figure, "quiet number")


def _line(book: Book, sheet: Sheet, figure: ShownFigure, style: str) -> None:
    row, bold = sheet.row, style == "total"
    sheet.text(row, 0, capital(figure.label), "strong text" if bold else "quiet text")
    sheet.figure(row, 1, figure.id, style)
    sheet.text(row, 2, "" if figure.unit == "1" else figure.unit, "strong text" if bold else "quiet text")
    sheet.text(row, 3, wording_of(figure, book.view.figures), "quiet text")
    sheet.row += 1
