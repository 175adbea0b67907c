"""What the page shows of a lot's rates: lines of arithmetic, the year table, its picture, and the load behind them."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from decimal import Decimal

from .figures_load import LoadOfYear, LoadPicture, StageMark, load_picture
from .figures_years import YearBars, year_bars
from .formats import THIN_SPACE, amount, significant
from .view import CoolingStageView, LoadView, LotView, RatesView, ShownFigure, YearColumn

__all__ = [
    "Line",
    "LoadSheet",
    "RatesSheet",
    "StageRow",
    "YearPanel",
    "YearTableSheet",
    "behind",
    "rates_sheet",
]

_SYMBOLS = {"no_load": ("A", "no-load loss"), "load": ("B", "load loss"), "auxiliary": ("C", "auxiliary loss")}
#: Digits behind the decimal mark in the columns of a year table; money where a column is not named.
_YEAR_PLACES = {
    "year": 0,
    "discount_factor": 6,
    "energy_price_per_kwh": 5,
    "carbon_cost_per_kwh": 5,
    "peak_load_pu": 4,
    "cooling_hours": 1,
    "cooling_share_at_peak": 3,
}
_OF_COOLING = ("cooling_hours", "cooling_share_at_peak")


@dataclass(frozen=True, slots=True)
class Line:
    """One line of arithmetic: the anchor under which the page finds it, and whose it is if it is another offer's."""

    anchor: str
    figure: ShownFigure
    owner: str


@dataclass(frozen=True, slots=True)
class YearTableSheet:
    """The year table as text: headings with units, rows, and the id of each column's sum."""

    columns: tuple[YearColumn, ...]
    rows: tuple[tuple[str, ...], ...]
    sums: tuple[str | None, ...]


@dataclass(frozen=True, slots=True)
class YearPanel:
    """One panel of the year-by-year picture: the rate, values of first, last and greatest year, the geometry."""

    symbol: str
    name: str
    part: str
    years: int
    first: str
    last: str
    greatest: str
    greatest_year: int
    bars: YearBars


@dataclass(frozen=True, slots=True)
class StageRow:
    """A cooling stage in the table below the picture; hours in the years that the picture shows."""

    name: str
    above: str
    share: str
    hours: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class LoadSheet:
    """The load behind the rates: the view, its picture, which years it shows, and the hours of the stages."""

    view: LoadView
    picture: LoadPicture
    years: tuple[str, ...]
    peaks: tuple[str, ...]
    stages: tuple[StageRow, ...]


@dataclass(frozen=True, slots=True)
class RatesSheet:
    """The rates of a lot as the page shows them.

    Parameters
    ----------
    view : RatesView
        Of the lot.
    ids : tuple of (str, str, str)
        Symbol, name and id of each rate.
    lines : tuple of Line
        Arithmetic behind the rates.
    anchors : mapping of str to str
        From the id of a figure to the anchor of its line.
    year_table : YearTableSheet or None
        Where rates are derived year by year.
    panels : tuple of YearPanel
        The picture of that table.
    load : LoadSheet or None
        Where the load comes from a profile.
    """

    view: RatesView
    ids: tuple[tuple[str, str, str], ...]
    lines: tuple[Line, ...]
    anchors: Mapping[str, str]
    year_table: YearTableSheet | None
    panels: tuple[YearPanel, ...]
    load: LoadSheet | None


def rates_sheet(figures: Mapping[str, ShownFigure], lot: LotView, anchor: str) -> RatesSheet:
    """Rates of a lot, ready for the template.

    Parameters
    ----------
    figures : mapping of str to ShownFigure
        Of the view.
    lot : LotView
        The lot.
    anchor : str
        Of the lot.

    Returns
    -------
    RatesSheet
        Lines, tables and pictures.
    """
    rates = lot.rates
    used = {name: identity for name, identity in _rate_ids(rates).items() if identity is not None}
    opened = enumerate(behind(figures, used.values()), start=1)
    lines = tuple(Line(f"{anchor}-rates-{count}", figures[key], "") for count, key in opened)
    return RatesSheet(
        view=rates,
        ids=tuple((*_SYMBOLS[name], key) for name, key in used.items()),
        lines=lines,
        anchors={line.figure.id: line.anchor for line in lines},
        year_table=_year_table(figures, rates),
        panels=_panels(rates, used),
        load=None if rates.load_profile is None else _load_sheet(rates.load_profile),
    )


def _rate_ids(rates: RatesView) -> dict[str, str | None]:
    return {"no_load": rates.no_load, "load": rates.load, "auxiliary": rates.auxiliary}


def behind(figures: Mapping[str, ShownFigure], roots: Iterable[str], closed: Iterable[str] = ()) -> tuple[str, ...]:
    """Ids of the figures behind some roots and the roots, operands before results, each once.

    Parameters
    ----------
    figures : mapping of str to ShownFigure
        Of the view.
    roots : iterable of str
        Where to begin.
    closed : iterable of str
        Ids that are not opened.

    Returns
    -------
    tuple of str
        In the order of the calculation.
    """
    seen: dict[str, None] = {}
    shut = frozenset(closed)
    waiting = list(reversed(list(roots)))
    while waiting:  # a stack, since a chain of figures may be longer than Python's recursion allows
        key = waiting[-1]
        missing = [] if key in shut else [operand for operand in figures[key].operands if operand not in seen]
        if missing and key not in seen:
            waiting.extend(reversed(missing))
        else:
            seen.setdefault(waiting.pop())
    return tuple(seen)


def _year_table(figures: Mapping[str, ShownFigure], rates: RatesView) -> YearTableSheet | None:
    if rates.year_table is None:
        return None
    ids = _rate_ids(rates)
    left_out = ("auxiliary", *_OF_COOLING) if rates.auxiliary is None else ()
    columns = tuple(column for column in rates.year_table.columns if column.name not in left_out)
    sums = [_column_sum(figures, ids.get(column.name)) for column in columns]
    texts = [[_exact(value, _YEAR_PLACES.get(c.name, 2)) for value in c.values] for c in columns]
    return YearTableSheet(columns, tuple(zip(*texts, strict=True)), tuple(sums))


def _exact(value: float, places: int = 2) -> str:
    return amount(Decimal(repr(value)), places)


def _column_sum(figures: Mapping[str, ShownFigure], rate: str | None) -> str | None:
    found = behind(figures, [rate]) if rate else ()
    return next((key for key in found if figures[key].operator == "year table"), None)


def _panels(rates: RatesView, used: Iterable[str]) -> tuple[YearPanel, ...]:
    if rates.year_table is None:
        return ()
    columns = {column.name: column.values for column in rates.year_table.columns}
    return tuple(_panel(name, columns[name]) for name in used)


def _panel(name: str, values: tuple[float, ...]) -> YearPanel:
    greatest = max(range(len(values)), key=lambda position: values[position])
    return YearPanel(
        *_SYMBOLS[name],
        part=f"{name}_cost",
        years=len(values),
        first=_exact(values[0]),
        last=_exact(values[-1]),
        greatest=_exact(values[greatest]),
        greatest_year=greatest + 1,
        bars=year_bars(values),
    )


def _load_sheet(view: LoadView) -> LoadSheet:
    peaks = view.peak_load_by_year_pu
    shown = (0, len(peaks) - 1) if len(set(peaks)) > 1 else (0,)
    years = tuple(f"year {position + 1}" for position in shown) if len(shown) > 1 else ("every year",)
    texts = tuple(significant(Decimal(repr(peaks[position])), 4) for position in shown)
    curves = [
        LoadOfYear(f"{year}, peak {text}", peaks[position])
        for year, text, position in zip(years, texts, shown, strict=True)
    ]
    rows = [_stage_row(stage, count, len(view.stages), shown) for count, stage in enumerate(view.stages, start=1)]
    marks = [
        StageMark(
            above_pu=stage.above_load_pu,
            label=f"{row.name} above {row.above}",
            hours_text=_in_words(row.hours, years),
            hours=tuple(stage.hours_by_year[position] for position in shown),
        )
        for stage, row in zip(view.stages, rows, strict=True)
    ]
    return LoadSheet(view, load_picture(view.duration, curves, marks), years, texts, tuple(rows))


def _stage_row(stage: CoolingStageView, count: int, stages: int, shown: tuple[int, ...]) -> StageRow:
    return StageRow(
        name=f"cooling stage {count}" if stages > 1 else "cooling",
        above=significant(Decimal(repr(stage.above_load_pu)), 4),
        share=f"{significant(Decimal(repr(stage.share_percent)), 4)}{THIN_SPACE}%",
        hours=tuple(_exact(stage.hours_by_year[position], 0) for position in shown),
    )


def _in_words(hours: tuple[str, ...], years: tuple[str, ...]) -> str:
    if len(hours) == 1:
        return f"{hours[0]} h a year"
    return ", ".join(f"{text} h in {year}" for text, year in zip(hours, years, strict=True))
