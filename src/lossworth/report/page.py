"""The evaluation page: one self-contained file without scripts, for the screen and for paper."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from importlib.resources import files

from jinja2 import Environment, FunctionLoader, StrictUndefined
from markupsafe import Markup

from .figures import CostPart, StackedBars, StackedCost, shortened, stacked_bars
from .formats import amount, number, percent, plain, significant
from .view import CostView, EvaluationView, LotView, OfferView, ShownFigure, YearColumn

__all__ = ["page_html"]

_PARTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
_AMOUNTS = (*_PARTS, "total_owning_cost")
#: Marks that turn the direction of the text around them: a name could hide what follows it.
_TURNING = frozenset("\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")
#: Digits behind the decimal mark in the columns of a year table; money where a column is not named.
_YEAR_PLACES = {"year": 0, "discount_factor": 6, "energy_price_per_kwh": 5, "peak_load_pu": 4}


@dataclass(frozen=True, slots=True)
class _Line:
    """One line of arithmetic: the anchor under which the page finds it, and whose it is if it is another offer's."""

    anchor: str
    figure: ShownFigure
    owner: str


@dataclass(frozen=True, slots=True)
class _OfferSheet:
    """One offer as the page shows it: its arithmetic in groups, and where each figure's line stands."""

    offer: OfferView
    anchor: str
    groups: tuple[tuple[str, tuple[_Line, ...]], ...]
    anchors: Mapping[str, str]
    tied: bool
    above: str
    above_percent: str


@dataclass(frozen=True, slots=True)
class _YearTable:
    """The year table as text: headings with units, rows, and the id of each column's sum."""

    columns: tuple[YearColumn, ...]
    rows: tuple[tuple[str, ...], ...]
    sums: tuple[str | None, ...]


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
    rate_ids: tuple[tuple[str, str, str], ...]
    rate_lines: tuple[_Line, ...]
    rate_anchors: Mapping[str, str]
    year_table: _YearTable | None

    @property
    def sheets(self) -> tuple[_OfferSheet, ...]:
        """All offers, in the order of the page."""
        return self.ranked + self.non_responsive + self.not_evaluated

    @property
    def first(self) -> tuple[_OfferSheet, ...]:
        """The offer of rank 1; several if they tie."""
        return tuple(sheet for sheet in self.ranked if sheet.offer.rank == 1)

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
    return _environment().get_template("page.html.j2").render(view=view, figures=view.figures, lots=lots)


def _lot_sheet(figures: Mapping[str, ShownFigure], lot: LotView, anchor: str) -> _LotSheet:
    winner = next((offer for offer in lot.offers if offer.rank == 1), None)
    winning_cost = figures[winner.lot.total_owning_cost].value if winner and winner.lot.total_owning_cost else None
    sheets = [
        _offer_sheet(figures, lot, offer, f"{anchor}-offer-{count}", winning_cost)
        for count, offer in enumerate(lot.offers, start=1)
    ]
    ranked = _with_status(sheets, "ranked")
    rates = ("A", lot.rates.no_load), ("B", lot.rates.load), ("C", lot.rates.auxiliary)
    names = {"A": "no-load loss", "B": "load loss", "C": "auxiliary loss"}
    opened = enumerate(_behind(figures, [key for _, key in rates if key]), start=1)
    lines = tuple(_Line(f"{anchor}-rates-{count}", figures[key], "") for count, key in opened)
    return _LotSheet(
        lot=lot,
        anchor=anchor,
        quantity=number(Decimal(lot.quantity)),
        has_auxiliary=lot.rates.auxiliary is not None,
        ranked=ranked,
        non_responsive=_with_status(sheets, "non-responsive"),
        not_evaluated=_with_status(sheets, "not evaluated"),
        chart=stacked_bars([_stacked_cost(figures, sheet.offer) for sheet in ranked]) if ranked else None,
        rate_ids=tuple((symbol, names[symbol], key) for symbol, key in rates if key),
        rate_lines=lines,
        rate_anchors={line.figure.id: line.anchor for line in lines},
        year_table=_year_table(figures, lot),
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
        lines = tuple(_Line(f"{anchor}-{count}", figures[key], owners.get(key, "")) for count, key in numbered)
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
    yield "Per unit", _behind(figures, [*_ids(offer.per_unit), *filter(None, read)], closed=rates)
    yield "Whole lot", _behind(figures, _ids(offer.lot), closed=rates)
    if offer.margin:
        yield f"Margin to {offer.margin.to}", _behind(figures, [offer.margin.amount], closed=rates | totals)


def _ids(costs: CostView) -> list[str]:
    return [key for key in (getattr(costs, name) for name in _AMOUNTS) if key]


def _behind(figures: Mapping[str, ShownFigure], roots: Iterable[str], closed: Iterable[str] = ()) -> tuple[str, ...]:
    """Ids of the figures behind some roots and the roots, operands before results, each once."""
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


def _stacked_cost(figures: Mapping[str, ShownFigure], offer: OfferView) -> StackedCost:
    total = offer.per_unit.total_owning_cost
    parts = tuple(
        CostPart(name, figures[key].value, figures[key].text)
        for name, key in ((name, getattr(offer.per_unit, name)) for name in _PARTS)
        if key
    )
    return StackedCost(offer.rank_text, str(_visible(offer.bidder)), figures[total].text if total else "", parts)


def _year_table(figures: Mapping[str, ShownFigure], lot: LotView) -> _YearTable | None:
    table = lot.rates.year_table
    if table is None:
        return None
    rates = {"no_load": lot.rates.no_load, "load": lot.rates.load, "auxiliary": lot.rates.auxiliary}
    columns = tuple(column for column in table.columns if rates.get(column.name, "shown"))
    sums = [_column_sum(figures, rates.get(column.name)) for column in columns]
    texts = [[amount(Decimal(repr(value)), _YEAR_PLACES.get(c.name, 2)) for value in c.values] for c in columns]
    return _YearTable(columns, tuple(zip(*texts, strict=True)), tuple(sums))


def _column_sum(figures: Mapping[str, ShownFigure], rate: str | None) -> str | None:
    behind = _behind(figures, [rate]) if rate else ()
    return next((key for key in behind if figures[key].operator == "year table"), None)


def _places(value: Decimal) -> int:
    return max(0, -int(value.as_tuple().exponent))


@cache
def _environment() -> Environment:
    """Templates of the package, escaping on, and no silence about what is not there."""
    environment = Environment(
        loader=FunctionLoader(_template),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        finalize=_visible,
    )
    environment.filters |= {
        "css_text": _css_text,
        "percent": percent,
        "plain": plain,
        "shortened": shortened,
        "significant": significant,
    }
    return environment


def _template(name: str) -> str | None:
    file = files("lossworth.templates") / "report" / name
    return file.read_text(encoding="utf-8") if file.is_file() else None


def _visible(value: object) -> object:
    """Text with control characters and turning marks written out, so that no name can hide or forge what follows."""
    if not isinstance(value, str):
        return value
    text = "".join(c if _is_harmless(c) else f"\\u{ord(c):04x}" for c in value)
    return Markup(text) if isinstance(value, Markup) else text  # noqa: S704 - it was markup before, nothing is added


def _is_harmless(character: str) -> bool:
    if character in "\n\t":
        return True
    return character not in _TURNING and unicodedata.category(character) not in ("Cc", "Cs")


def _css_text(text: str) -> Markup:
    """Any text as a quoted string of a style sheet, with everything but letters and digits as an escape."""
    escaped = "".join(c if c.isascii() and c.isalnum() else f"\\{ord(c):06x} " for c in str(_visible(text)))
    return Markup(f'"{escaped}"')  # noqa: S704 - no character of markup can be left
