"""What the page shows of prices: the way from the quoted to the evaluated price, offers side by side."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

from .formats import THIN_SPACE, amount
from .view import OfferView, PriceStepView, ShownFigure

__all__ = ["PriceCell", "PriceRow", "PriceTable", "price_groups", "price_tables"]

_HEADINGS = {
    "quoted": "Quoted price",
    "corrected": "Corrected price",
    "unconditional discount": "Discount",
    "prompt payment discount": "Prompt payment",
    "currency": "Exchange rate",
    "tax": "Tax",
    "delivered point": "Delivered point",
    "item": "Further items",
    "missing item": "Missing items, price of others",
    "payment terms": "Payment terms",
    "delivery time": "Delivery time",
    "site cost": "Site",
    "preference": "Preference margin",
    "evaluated": "Evaluated price",
}
#: Title and explanation of each table.
_TITLES = {
    "unit": (
        "Per unit",
        "Each step changes the price to its left: in the currency of the bid up to the exchange rate, then in the "
        "evaluation currency; shown to two places, exact in the arithmetic.",
    ),
    "lot": (
        "Further items of the lot",
        "Added to the price of all units, in the evaluation currency; a price of others stands in for comparison only.",
    ),
}


@dataclass(frozen=True, slots=True)
class PriceCell:
    """One step in its column: the figure that it shows, its text with its sign, to two places, and its currency."""

    figure: str
    text: str
    unit: str


@dataclass(frozen=True, slots=True)
class PriceRow:
    """One offer: the steps in each column, and where the lines of its figures stand."""

    offer: OfferView
    anchors: Mapping[str, str]
    cells: tuple[tuple[PriceCell, ...], ...]


@dataclass(frozen=True, slots=True)
class PriceTable:
    """Offers side by side, a column for each kind of step that some offer has."""

    title: str
    note: str
    columns: tuple[tuple[str, str], ...]
    rows: tuple[PriceRow, ...]


def price_tables(
    figures: Mapping[str, ShownFigure], offers: Iterable[tuple[OfferView, Mapping[str, str]]]
) -> tuple[PriceTable, ...]:
    """Tables of the way from the quoted to the evaluated price.

    Parameters
    ----------
    figures : mapping of str to ShownFigure
        Of the view.
    offers : iterable of (OfferView, mapping of str to str)
        The offers of a lot, each with the anchors of its figures.

    Returns
    -------
    tuple of PriceTable
        Per unit, then for the further items; none where no offer has more steps than a currency.
    """
    offers = tuple(offers)
    if not any(offer.has_price_steps for offer, _ in offers):
        return ()
    return tuple(_tables(figures, offers))


def _tables(
    figures: Mapping[str, ShownFigure], offers: tuple[tuple[OfferView, Mapping[str, str]], ...]
) -> Iterator[PriceTable]:
    for scope, (title, note) in _TITLES.items():
        found = {step.name for offer, _ in offers for step in offer.price_steps if step.scope == scope}
        names = tuple(name for name in _HEADINGS if name in found)
        if not names:
            continue
        columns = tuple((name, _heading(name, scope)) for name in names)
        rows = tuple(PriceRow(offer, anchors, _cells(figures, offer, scope, names)) for offer, anchors in offers)
        yield PriceTable(title, note, columns, tuple(row for row in rows if any(row.cells)))


def _heading(name: str, scope: str) -> str:
    return "Evaluated price of the lot" if (name, scope) == ("evaluated", "lot") else _HEADINGS[name]


def _cells(
    figures: Mapping[str, ShownFigure], offer: OfferView, scope: str, names: tuple[str, ...]
) -> tuple[tuple[PriceCell, ...], ...]:
    steps = [step for step in offer.price_steps if step.scope == scope]
    return tuple(tuple(_cell(figures, step) for step in steps if step.name == name) for name in names)


def _cell(figures: Mapping[str, ShownFigure], step: PriceStepView) -> PriceCell:
    figure = figures[step.change or step.price]
    is_money = step.sign not in ("×", "÷")
    text = amount(figure.value) if is_money else figure.text
    return PriceCell(
        figure.id, f"{step.sign}{THIN_SPACE}{text}" if step.sign else text, "" if step.sign else figure.unit
    )


def price_groups(offer: OfferView) -> Iterator[tuple[str, tuple[str, ...]]]:
    """Figures of an offer beside its costs, in groups of the arithmetic.

    Parameters
    ----------
    offer : OfferView
        The offer.

    Yields
    ------
    title : str
        Of the group.
    roots : tuple of str
        Ids of figures, of which those behind them belong to the group too.
    """
    steps = [identity for step in offer.price_steps for identity in (step.change, step.price)]
    yield "From the quoted to the evaluated price", tuple(filter(None, steps))
    layers = [identity for c in offer.corrections for identity in (c.as_read, c.corrected, c.evaluated)]
    yield "As read and as corrected", tuple(filter(None, layers))
    yield "Without preference", tuple(filter(None, [offer.total_without_preference]))
    yield "What the contract pays", tuple(filter(None, [offer.contract_price]))
