"""Sheet of the rates by year: discount factor, prices, peak load and present values, live from the inputs."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal

from .view import LotView, YearColumn, YearTableView
from .workbook_cells import YEAR_TABLE, Cell, behind, column_name
from .workbook_sheet import Book, Column, Sheet, capital

__all__ = ["YEARS", "write_years", "years_sheet"]

YEARS = "Rates by year"

_NOTE = "Years beyond the evaluation period count zero: the period may be shortened on the sheet with the inputs."
_RATES = ("no_load", "load", "auxiliary")
_NAMES = (
    "year",
    "discount_factor",
    "energy_price_per_kwh",
    "demand_charge_per_kw_year",
    "peak_load_pu",
    *_RATES,
)
_DECIMALS = dict(zip(_NAMES, (0, 6, 5, 2, 5, 4, 4, 4), strict=True))

#: Low enough for 35 years on one page.
_POINTS_A_YEAR = 13.0

#: Reference to the cell of a named input on the inputs sheet; None where the table does not have it.
Inputs = Callable[[str], str | None]


def years_sheet(book: Book) -> Sheet:
    """Begin the sheet.

    Parameters
    ----------
    book : Book
        The workbook, with at least one lot of derived rates.

    Returns
    -------
    Sheet
        With its head written.
    """
    tables = (lot.rates.year_table for lot in book.view.lots)
    by_name = {column.name: column for column in next(table for table in tables if table is not None).columns}
    columns = [Column(_heading(by_name[name]), 10 if name == "year" else 23, numeric=True) for name in _shown(book)]
    return Sheet(book, YEARS, "Rates by year", columns, _NOTE)


def _shown(book: Book) -> tuple[str, ...]:
    """Columns that the sheet has: that of the auxiliary rate only where a derived lot has one."""
    derived = (lot.rates for lot in book.view.lots if lot.rates.year_table is not None)
    return _NAMES if any(rates.auxiliary is not None for rates in derived) else _NAMES[:-1]


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
    table = lot.rates.year_table
    if table is None:
        raise ValueError(f"lot {lot.id} has no year table")
    sheet.new_page()
    sheet.paragraph(f"Lot {lot.id} · {lot.description}", "band")
    first = sheet.row
    columns = {column.name: column.values for column in table.columns}
    for position in range(len(columns["year"])):
        _year(sheet, table, columns, position)
    _sums(sheet, lot, columns, first)


def _year(sheet: Sheet, table: YearTableView, columns: Mapping[str, tuple[float, ...]], position: int) -> None:
    formulas = year_formulas(sheet.row, position + 1, lambda name: _reference(sheet.book, table, name))
    sheet.number(sheet.row, 0, Decimal(position + 1))
    for index, name in enumerate(_shown(sheet.book)[1:], start=1):
        sheet.formula(sheet.row, index, formulas[name], columns[name][position], "number", _DECIMALS[name])
    sheet.height(sheet.row, _POINTS_A_YEAR)
    sheet.row += 1


def _reference(book: Book, table: YearTableView, name: str) -> str | None:
    identity = table.inputs.get(name)
    return None if identity is None else book.addresses.find(identity).seen_from(YEARS)


def year_formulas(row: int, year: int, inputs: Inputs) -> dict[str, str]:
    """Formulas of one year of the table.

    Parameters
    ----------
    row : int
        Row of the year, counted from 0.
    year : int
        The year, counted from 1.
    inputs : callable
        From the name of an input to a reference to its cell, or None.

    Returns
    -------
    dict of str to str
        By name of the column, all but the year itself.

    Notes
    -----
    With year t, discount rate r, payment before the end of the year phi, the formulas are those of the engine's year
    table: DF = (1 + r)^(phi - t); energy price and demand charge escalated; peak load grown and capped;
    A_t = G DF (p H + D), B_t = G DF beta^2 (p H LsF + D R^2), C_t = G DF (p h + D kappa).
    """
    cell = {name: f"{column_name(index)}{row + 1}" for index, name in enumerate(_NAMES)}
    t, discount, price, demand, peak = (cell[name] for name in _NAMES[:5])

    def need(name: str) -> str:
        reference = inputs(name)
        if reference is None:
            raise KeyError(name)
        return reference

    energy = inputs(f"energy_price_year_{year}")
    if energy is None:
        years = f"{t}-1+{need('escalate_before_year_1')}"
        energy = f"{need('energy_price_per_kwh')}*(1+{need('energy_price_escalation_percent')}/100)^({years})"
    grown = f"{need('peak_load_pu')}*(1+{need('peak_load_growth_percent')}/100)^({t}-1)"
    cap = inputs("peak_load_cap_pu")
    share = f"{need('upstream_gross_up')}*{discount}"
    rate = f"1+{need('discount_rate_percent')}/100"
    return {
        "discount_factor": f"=IF({t}<={need('evaluation_period_years')},({rate})^({need('years_before_end')}-{t}),0)",
        "energy_price_per_kwh": f"={energy}",
        "demand_charge_per_kw_year": (
            f"={need('demand_charge_per_kw_year')}*(1+{need('demand_charge_escalation_percent')}/100)^({t}-1)"
        ),
        "peak_load_pu": f"={grown}" if cap is None else f"=MIN({grown},{cap})",
        "no_load": f"={share}*({price}*{need('hours_energized')}+{demand})",
        "load": (
            f"={share}*{peak}^2*({price}*{need('hours_of_load')}*{need('loss_factor')}"
            f"+{demand}*{need('peak_responsibility_factor')}^2)"
        ),
        "auxiliary": f"={share}*({price}*{need('cooling_hours')}+{demand}*{need('cooling_share_at_peak')})",
    }


def _sums(sheet: Sheet, lot: LotView, columns: Mapping[str, tuple[float, ...]], first: int) -> None:
    row = sheet.row
    sheet.text(row, 0, "Sum", "sum text")
    for index in range(1, sheet.last + 1):
        sheet.text(row, index, "", "sum text")
    for name, identity in zip(_RATES, (lot.rates.no_load, lot.rates.load, lot.rates.auxiliary), strict=True):
        index = _NAMES.index(name)
        if index > sheet.last:
            continue
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
