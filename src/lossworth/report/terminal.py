"""The result in the terminal: one ranked table a lot, rates with their arithmetic, findings."""

from __future__ import annotations

import io
from collections.abc import Iterable
from decimal import Decimal

from rich import box
from rich.console import Console
from rich.table import Table
from rich.text import Text

from .formats import amount, percent
from .view import EvaluationView, LotView, OfferView, RatesReport, RatesView, ShownFigure, YearTableView

__all__ = ["evaluation_text", "rates_text"]

_COST_COLUMNS = (
    ("evaluated\nprice", "evaluated_price"),
    ("no-load\nloss", "no_load_cost"),
    ("load\nloss", "load_cost"),
    ("auxiliary\nloss", "auxiliary_cost"),
    ("total owning\ncost", "total_owning_cost"),
)


def evaluation_text(view: EvaluationView, width: int, *, color: bool = False) -> str:
    """Ranked tables of all lots.

    Parameters
    ----------
    view : EvaluationView
        The view.
    width : int
        Columns of the terminal.
    color : bool
        Whether escape codes for bold and dim text are wanted.

    Returns
    -------
    str
        Text for the terminal.
    """
    console = _console(width, color=color)
    console.print(_text(f"{view.reference} · {view.title}", "bold"))
    if view.remark:
        console.print(_text(view.remark, "italic"))
    for lot in view.lots:
        console.print()
        console.print(_text(f"Lot {lot.id} · {lot.description} · {lot.quantity:,} units", "bold"))
        console.print(_text(_rates_line(view, lot)))
        if any(offer.rank is not None for offer in lot.offers):
            console.print(_ranking(view, lot))
        for offer in lot.offers:
            if offer.rank is None:
                console.print(_text(f"{offer.status}: {offer.bidder} — {'; '.join(offer.reasons)}"))
        console.print(_text(lot.recommendation, "bold"))
    return _captured(console)


def rates_text(report: RatesReport, width: int, *, years: bool = False, color: bool = False) -> str:
    """Rates of all lots with the arithmetic behind them.

    Parameters
    ----------
    report : RatesReport
        The rates.
    width : int
        Columns of the terminal.
    years : bool
        Whether the year-by-year tables are wanted.
    color : bool
        Whether escape codes are wanted.

    Returns
    -------
    str
        Text for the terminal.
    """
    console = _console(width, color=color)
    console.print(_text(f"{report.reference} · {report.title}", "bold"))
    for lot in report.lots:
        console.print()
        console.print(_text(f"Lot {lot.id} · {lot.description}", "bold"))
        _print_rates(console, report, lot.used, years=years)
        if lot.study is not None:
            _print_rates(console, report, lot.study, years=years)
    return _captured(console)


def _console(width: int, *, color: bool) -> Console:
    return Console(
        file=io.StringIO(),
        width=width,
        force_terminal=color,
        color_system="standard" if color else None,
        highlight=False,
        emoji=False,
        markup=False,
    )


def _captured(console: Console) -> str:
    file = console.file
    if not isinstance(file, io.StringIO):
        raise TypeError("the console writes into memory")
    return "\n".join(line.rstrip() for line in file.getvalue().splitlines()) + "\n"


def _text(text: str, style: str = "") -> Text:
    return Text(text, style=style)


def _rates_line(view: EvaluationView, lot: LotView) -> str:
    rates = (("A", lot.rates.no_load), ("B", lot.rates.load), ("C", lot.rates.auxiliary))
    shown = ", ".join(f"{name} = {view.figures[figure].text}" for name, figure in rates if figure is not None)
    return f"{shown} {lot.rates.unit} ({lot.rates.basis}); amounts in {view.currency} per unit"


def _ranking(view: EvaluationView, lot: LotView) -> Table:
    columns = [column for column in _COST_COLUMNS if column[1] != "auxiliary_cost" or lot.rates.auxiliary is not None]
    table = Table(box=box.SIMPLE_HEAD, pad_edge=False, show_edge=False, header_style="dim")
    table.add_column("rank")
    table.add_column("bidder", overflow="fold", min_width=12)
    for heading, _ in columns:
        table.add_column(heading, justify="right", no_wrap=True)
    table.add_column("lot total", justify="right", no_wrap=True)
    table.add_column("above\nwinner", justify="right", no_wrap=True)
    ranked = [offer for offer in lot.offers if offer.rank is not None]
    lowest = _lowest(view, ranked)
    for offer in ranked:
        cells = [_amount(view, getattr(offer.per_unit, name)) for _, name in columns]
        above = offer.above_winner or Decimal(0)
        share = percent(100 * above / lowest) if lowest else ""
        table.add_row(
            _text(offer.rank_text),
            _text(offer.bidder),
            *(_text(cell) for cell in cells),
            _text(_amount(view, offer.lot.total_owning_cost)),
            _text(share),
            style="bold" if offer.rank == 1 else "",
        )
    return table


def _lowest(view: EvaluationView, ranked: list[OfferView]) -> Decimal:
    figure = ranked[0].lot.total_owning_cost
    return Decimal(0) if figure is None else view.figures[figure].value


def _amount(view: EvaluationView, figure: str | None) -> str:
    return "" if figure is None else amount(view.figures[figure].value)


def _print_rates(console: Console, report: RatesReport, rates: RatesView, *, years: bool) -> None:
    for source in rates.sources:
        console.print(_text(source))
    for name, identity in (("A", rates.no_load), ("B", rates.load), ("C", rates.auxiliary)):
        if identity is not None:
            figure = report.figures[identity]
            console.print(_text(f"  {name} = {figure.text} {rates.unit}"))
    console.print(_arithmetic(_behind(report, rates)))
    if years and rates.year_table is not None:
        console.print(_years(rates.year_table))


def _behind(report: RatesReport, rates: RatesView) -> Iterable[ShownFigure]:
    """Figures behind the rates, each once, operands first."""
    roots = [identity for identity in (rates.no_load, rates.load, rates.auxiliary) if identity is not None]
    wanted: set[str] = set()
    while roots:
        identity = roots.pop()
        if identity not in wanted:
            wanted.add(identity)
            roots.extend(report.figures[identity].operands)
    return [figure for identity, figure in report.figures.items() if identity in wanted]


def _arithmetic(figures: Iterable[ShownFigure]) -> Table:
    table = Table(box=None, pad_edge=False, show_header=False, padding=(0, 2, 0, 0))
    table.add_column(style="dim", overflow="fold", ratio=2)
    table.add_column(overflow="fold", ratio=5)
    for figure in figures:
        table.add_row(_text(f"  {figure.label}"), _text(figure.arithmetic))
    return table


def _years(years: YearTableView) -> Table:
    table = Table(box=box.SIMPLE_HEAD, pad_edge=False, show_edge=False, header_style="dim")
    for column in years.columns:
        unit = "" if column.unit == "1" else f"\n{column.unit}"
        table.add_column(column.heading.replace(", ", ",\n") + unit, justify="right")
    for row in zip(*(column.values for column in years.columns), strict=True):
        table.add_row(
            f"{row[0]:.0f}",
            f"{row[1]:.6f}",
            f"{row[2]:.5f}",
            f"{row[3]:.2f}",
            f"{row[4]:.5f}",
            *(f"{value:,.2f}" for value in row[5:]),
        )
    return table
