"""The result in the terminal: one ranked table a lot, rates with their arithmetic, findings."""

from __future__ import annotations

import io
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal

from rich import box
from rich.console import Console
from rich.padding import Padding
from rich.table import Table
from rich.text import Text

from .formats import amount, percent
from .view import (
    EvaluationView,
    Fact,
    LoadView,
    LotView,
    OfferView,
    RatesReport,
    RatesView,
    SensitivityRow,
    ShownFigure,
    YearColumn,
    YearTableView,
)

__all__ = ["evaluation_text", "rates_text"]

#: Digits behind the decimal mark in the columns of a year table; money where a column is not named.
_YEAR_PLACES = {
    "year": 0,
    "discount_factor": 6,
    "energy_price_per_kwh": 5,
    "carbon_cost_per_kwh": 5,
    "peak_load_pu": 5,
    "cooling_hours": 1,
    "cooling_share_at_peak": 3,
}
#: Columns of the terminal between two columns of a table.
_GAP = 3
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
    for line in _against_published(view):
        console.print(_text(line, "bold"))
    for lot in view.lots:
        console.print()
        console.print(_text(f"Lot {lot.id} · {lot.description} · {lot.quantity:,} units", "bold"))
        console.print(_text(_rates_line(view, lot)))
        if any(offer.rank is not None for offer in lot.offers):
            console.print(_ranking(view, lot))
        for offer in lot.offers:
            if offer.rank is None:
                console.print(_text(f"{offer.status}: {offer.bidder} — {'; '.join(offer.reasons)}"))
        for line in _notes(view, lot):
            console.print(_text(line))
        console.print(_text(lot.recommendation, "bold"))
    return _captured(console)


def _against_published(view: EvaluationView) -> Iterator[str]:
    """That the rules are not the published ones, key by key; nothing where they are, or no file was kept."""
    proof = view.rules_proof
    if proof is None or proof.holds or not proof.fingerprint:
        return
    yield f"NOT BY THE RULES AS PUBLISHED: {proof.sentence}"
    for each in proof.differences:
        yield f"  {each.key}: published {each.published or 'not stated'}; used {each.used or 'not stated'}"


def _notes(view: EvaluationView, lot: LotView) -> Iterator[str]:
    """What stands beside the ranking: corrections, decisions, contract prices, the ranking without preference."""
    for offer in lot.offers:
        for correction in offer.corrections:
            before, after = view.figures[correction.as_read], view.figures[correction.corrected]
            yield f"corrected: {offer.bidder} — {before.text} {before.unit} as read, now {after.text} {after.unit}"
        if offer.tie_decided_by:
            yield f"tie: {offer.bidder} — rank {offer.rank_text}, decided by {offer.tie_decided_by}"
        for decision in offer.decisions:
            yield f"decision: {offer.bidder} — {decision}"
    if any(offer.has_price_steps for offer in lot.offers):
        yield "contract price of the lot: " + "; ".join(_contract_prices(view, lot))
    moved = [offer for offer in lot.offers if offer.rank_without_preference not in (None, offer.rank)]
    if moved:
        yield "without preference: " + "; ".join(
            f"{offer.bidder} rank {offer.rank_without_preference}" for offer in moved
        )


def _contract_prices(view: EvaluationView, lot: LotView) -> Iterator[str]:
    for offer in lot.offers:
        if offer.contract_price:
            price = view.figures[offer.contract_price]
            tax = f" ({offer.tax_note})" if offer.tax_note else ""
            yield f"{offer.bidder} {price.text} {price.unit}{tax}"


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
            console.print()
            _print_rates(console, report, lot.study, years=years)
        for sentence in lot.comparison:
            console.print(_text(sentence, "bold"))
        if lot.sensitivity:
            console.print(
                _text(f"What a change of one input does to the rates, in {lot.used.unit} (exact derivatives):")
            )
            console.print(_sensitivity(lot.sensitivity))
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
    has_items = any(offer.has_items for offer in lot.offers)
    if has_items:
        table.add_column("items\nof the lot", justify="right", no_wrap=True)
    table.add_column("lot total", justify="right", no_wrap=True)
    table.add_column("above\nwinner", justify="right", no_wrap=True)
    ranked = [offer for offer in lot.offers if offer.rank is not None]
    lowest = _lowest(view, ranked)
    for offer in ranked:
        cells = [_amount(view, getattr(offer.per_unit, name)) for _, name in columns]
        above = offer.above_winner or Decimal(0)
        share = percent(100 * above / lowest) if lowest else ""
        cells += ["–" if offer.items_price is None else amount(offer.items_price)] if has_items else []
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
    if rates.method:
        console.print(_text(f"Method: {rates.method}"))
    for formula in rates.formulas:
        console.print(Padding(_text(formula), (0, 0, 0, 2)))
    for name, identity in (("A", rates.no_load), ("B", rates.load), ("C", rates.auxiliary)):
        if identity is not None:
            figure = report.figures[identity]
            console.print(_text(f"  {name} = {figure.text} {rates.unit}"))
    console.print(_arithmetic(_behind(report, rates)))
    if rates.load_profile is not None:
        _print_load(console, rates.load_profile)
    if years and rates.year_table is not None:
        for table in _years(rates.year_table, console.width):
            console.print(table)


def _print_load(console: Console, load: LoadView) -> None:
    console.print(_text(f"Load from {load.file}"))
    console.print(_two_columns((f"  {fact.label}", _with_unit(fact)) for fact in load.facts))
    last = len(load.peak_load_by_year_pu)
    for stage in load.stages:
        first, final = (f"{hours:,.0f} h" for hours in (stage.hours_by_year[0], stage.hours_by_year[-1]))
        ran = f"{first} in year 1, {final} in year {last}"
        share = f"{stage.share_percent:.4g} % of the auxiliary loss"
        text = f"cooling above {stage.above_load_pu:.4g} per unit ({share}): {ran}"
        console.print(Padding(_text(text), (0, 0, 0, 2)))
    for remark in load.remarks:
        console.print(Padding(_text(remark, "dim"), (0, 0, 0, 2)))


def _with_unit(fact: Fact) -> str:
    return fact.text if fact.unit in ("", "1") else f"{fact.text} {fact.unit}"


def _sensitivity(rows: Iterable[SensitivityRow]) -> Table:
    """Rates across, inputs down; a column only for a rate that some input moves."""
    rows = tuple(rows)
    rates = [name for name in ("a", "b", "c") if any(getattr(row, name) is not None for row in rows)]
    table = Table(box=box.SIMPLE_HEAD, pad_edge=False, show_edge=False, header_style="dim")
    table.add_column("input", overflow="fold", min_width=12)
    table.add_column("now", justify="right", overflow="fold")
    table.add_column("change", justify="right", overflow="fold")
    for name in rates:
        table.add_column(name.upper(), justify="right", no_wrap=True)
    for row in rows:
        now = row.value if row.unit in ("", "1") else f"{row.value} {row.unit}"
        table.add_row(_text(row.input), _text(now), _text(row.change), *(_change(getattr(row, name)) for name in rates))
    return table


def _change(value: float | None) -> Text:
    if value is None:
        return _text("–", "dim")
    text = amount(Decimal(repr(value)))
    return _text(f"+{text}" if value > 0 else text)


def _behind(report: RatesReport, rates: RatesView) -> Iterable[ShownFigure]:
    """Figures behind the rates, each once, operands first."""
    roots = [identity for identity in (rates.no_load, rates.load, rates.auxiliary) if identity is not None]
    wanted: set[str] = set()
    while roots:
        identity = roots.pop()
        if identity not in wanted:
            wanted.add(identity)
            roots.extend(report.figures[identity].operands)
    return [f for identity, f in report.figures.items() if identity in wanted and not _is_plain_number(f)]


def _is_plain_number(figure: ShownFigure) -> bool:
    """A constant without unit, such as the one of 1 + rate, which the lines that use it show already."""
    return figure.operator == "constant" and figure.unit == "1"


def _arithmetic(figures: Iterable[ShownFigure]) -> Table:
    return _two_columns((f"  {figure.label}", figure.arithmetic) for figure in figures)


def _two_columns(lines: Iterable[tuple[str, str]]) -> Table:
    table = Table(box=None, pad_edge=False, show_header=False, padding=(0, 2, 0, 0))
    table.add_column(style="dim", overflow="fold", ratio=2)
    table.add_column(overflow="fold", ratio=5)
    for left, right in lines:
        table.add_row(_text(left), _text(right))
    return table


@dataclass(frozen=True, slots=True)
class _YearColumn:
    """A column of a year table as text, and the width below which something of it would be cut off."""

    heading: str
    cells: tuple[str, ...]
    width: int


def _years(years: YearTableView, width: int) -> Iterator[Table]:
    """The year table, in as many tables below each other as the width demands."""
    first, *columns = (_year_column(column) for column in years.columns)
    block = [first]
    for column in columns:
        if sum(c.width + _GAP for c in (*block, column)) > width and len(block) > 1:
            yield _year_block(block)
            block = [first]
        block.append(column)
    yield _year_block(block)


def _year_column(column: YearColumn) -> _YearColumn:
    unit = "" if column.unit == "1" else f"\n{column.unit}"
    heading = column.heading.replace(", ", ",\n") + unit
    cells = tuple(f"{value:,.{_YEAR_PLACES.get(column.name, 2)}f}" for value in column.values)
    return _YearColumn(heading, cells, max(len(text) for text in (*heading.split(), *cells)))


def _year_block(columns: Sequence[_YearColumn]) -> Table:
    table = Table(box=box.SIMPLE_HEAD, pad_edge=False, show_edge=False, header_style="dim")
    for column in columns:
        table.add_column(column.heading, justify="right", min_width=column.width)
    for row in zip(*(column.cells for column in columns), strict=True):
        table.add_row(*row)
    return table
