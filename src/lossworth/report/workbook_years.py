"""Sheet of the rates by year: discount factor, prices, peak load and present values, live from the inputs."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from decimal import Decimal

from .view import EvaluationView, LotView, RatesView, YearColumn, YearTableView
from .workbook_cells import YEAR_TABLE, Cell, behind, column_name
from .workbook_sheet import NOTHING, Book, Column, Sheet, capital
from .workbook_year_formulas import BY_TIME, year_formulas

__all__ = ["YEARS", "write_years", "years_sheet"]

YEARS = "Rates by year"

_NOTE = "Years beyond the evaluation period count zero: the period may be shortened on the sheet with the inputs."
_OF_THE_PROFILE = (
    "Cooling hours and cooling share at peak follow from the load profile: they are values, and do not move when the "
    "peak load, its growth or a price is changed in this workbook."
)
_BY_PRICE = (
    "The loss factor by price and hours by price follow from load and price together: they are values, and do not move "
    "when a price is changed in this workbook."
)
_RATES = ("no_load", "load", "auxiliary")
#: Columns in their order, with the decimals that they show.
_DECIMALS = {
    "year": 0,
    "discount_factor": 6,
    "energy_price_per_kwh": 5,
    "carbon_cost_per_kwh": 5,
    "demand_charge_per_kw_year": 2,
    "peak_load_pu": 5,
    "cooling_hours": 1,
    BY_TIME: 1,
    "cooling_share_at_peak": 3,
    "no_load": 4,
    "load": 4,
    "auxiliary": 4,
}
_OF_COOLING = ("cooling_hours", BY_TIME, "cooling_share_at_peak", "auxiliary")

#: Low enough for 35 years on one page.
_POINTS_A_YEAR = 13.0
#: Widths of the columns where they are few, and where they are many.
_WIDE, _NARROW, _FEW = 23.0, 16.0, 8


def years_sheet(book: Book) -> Sheet:
    """Begin the sheet.

    Parameters
    ----------
    book : Book
        The workbook, with at least one lot of rates derived year by year.

    Returns
    -------
    Sheet
        With its head written.
    """
    by_name = {column.name: column for rates in _derived(book.view) for column in _columns(rates)}
    shown = _shown(book.view)
    width = _WIDE if len(shown) <= _FEW else _NARROW
    columns = [Column(_heading(by_name[name]), 10 if name == "year" else width, numeric=True) for name in shown]
    return Sheet(book, YEARS, "Rates by year", columns, _NOTE)


def _derived(view: EvaluationView) -> Iterator[RatesView]:
    return (lot.rates for lot in view.lots if lot.rates.year_table is not None)


def _table(rates: RatesView) -> YearTableView:
    if rates.year_table is None:
        raise ValueError("the rates have no year table")
    return rates.year_table


def _columns(rates: RatesView) -> tuple[YearColumn, ...]:
    """Columns of the year table, and the cooling hours by time where the formulas need them."""
    columns = _table(rates).columns
    needed = {"carbon_cost_per_kwh", "cooling_hours"} <= {column.name for column in columns}
    if not needed or "loss_factor_by_time" not in _table(rates).inputs or rates.load_profile is None:
        return columns
    stages = rates.load_profile.stages
    hours = tuple(
        sum(stage.share_percent / 100 * stage.hours_by_year[year] for stage in stages)
        for year in range(len(columns[0].values))
    )
    return (*columns, YearColumn(BY_TIME, "cooling hours, by time", "h/year", hours))


def _shown(view: EvaluationView) -> tuple[str, ...]:
    """Columns that the sheet has: those that some lot has; those of cooling only where some lot has its rate."""
    found = {column.name for rates in _derived(view) for column in _columns(rates)}
    if not any(rates.auxiliary is not None for rates in _derived(view)):
        found -= {*_OF_COOLING}
    return tuple(name for name in _DECIMALS if name in found)


def _heading(column: YearColumn) -> str:
    heading = capital(column.heading)
    return heading if column.unit in ("", "1", "year") else f"{heading}\n[{column.unit}]"


def write_years(sheet: Sheet, lot: LotView) -> None:
    """Write the table of one lot and its sums, which are the rates before rounding.

    Parameters
    ----------
    sheet : Sheet
        The sheet of the rates by year.
    lot : LotView
        A lot with a year table.

    Raises
    ------
    ValueError
        If the lot has no year table.
    """
    columns = {column.name: column.values for column in _columns(lot.rates)}
    sheet.new_page()
    sheet.paragraph(f"Lot {lot.id} · {lot.description}", "band")
    if "cooling_hours" in columns and lot.rates.auxiliary is not None:
        sheet.paragraph(_OF_THE_PROFILE, "quiet paragraph")
    if "loss_factor_by_time" in _table(lot.rates).inputs:
        sheet.paragraph(_BY_PRICE, "quiet paragraph")
    first = sheet.row
    for position in range(len(columns["year"])):
        _year(sheet, _table(lot.rates), columns, position)
    _sums(sheet, lot, columns, first)


def _year(sheet: Sheet, table: YearTableView, columns: Mapping[str, tuple[float, ...]], position: int) -> None:
    shown = _shown(sheet.book.view)
    cells = {name: f"{column_name(index)}{sheet.row + 1}" for index, name in enumerate(shown) if name in columns}
    formulas = year_formulas(cells, position + 1, lambda name: _reference(sheet.book, table, name))
    for index, name in enumerate(shown):
        if name not in columns:
            sheet.text(sheet.row, index, NOTHING, "quiet number")
        elif name in formulas:
            sheet.formula(sheet.row, index, formulas[name], columns[name][position], "number", _DECIMALS[name])
        else:
            value, style = Decimal(repr(columns[name][position])), "number" if name == "year" else "quiet number"
            sheet.number(sheet.row, index, value, style, _DECIMALS[name])
    sheet.height(sheet.row, _POINTS_A_YEAR)
    sheet.row += 1


def _reference(book: Book, table: YearTableView, name: str) -> str | None:
    identity = table.inputs.get(name)
    return None if identity is None else book.addresses.find(identity).seen_from(YEARS)


def _sums(sheet: Sheet, lot: LotView, columns: Mapping[str, tuple[float, ...]], first: int) -> None:
    row, shown = sheet.row, _shown(sheet.book.view)
    sheet.text(row, 0, "Sum", "sum text")
    for index in range(1, sheet.last + 1):
        sheet.text(row, index, "", "sum text")
    for name, identity in zip(_RATES, (lot.rates.no_load, lot.rates.load, lot.rates.auxiliary), strict=True):
        if name not in shown:
            continue
        index = shown.index(name)
        letters = column_name(index)
        formula = f"=SUM({letters}{first + 1}:{letters}{row})"
        sum_of_years = None if identity is None else _year_sum(sheet.book, identity)
        value: Decimal | float = sum(columns[name])
        if sum_of_years is not None:
            sheet.book.addresses.settle(sum_of_years, Cell(YEARS, row, index))
            value = sheet.book.figure(sum_of_years).value
        sheet.formula(row, index, formula, value, "sum", _DECIMALS[name])
    sheet.row += 2


def _year_sum(book: Book, rate: str) -> str | None:
    return next((f.id for f in behind(rate, book.view.figures) if f.operator == YEAR_TABLE), None)
