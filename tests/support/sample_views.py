"""Small evaluations for the papers: records that change one thing, through the engine, to a view. All invented."""

from __future__ import annotations

from typing import Any

from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Finding, Place
from lossworth.money import Rounding
from lossworth.records.bid import Offer
from lossworth.records.quantity import Entry, Quantity
from lossworth.records.tender import Lot, RoundingPoint, Rules, Tender
from lossworth.report.build_view import build_view
from lossworth.report.view import EvaluationView, InputFile, RecordView
from support import records as make

__all__ = ["HOSTILE", "RECORD", "offer", "offers", "view_of", "workbook_tender", "workbook_view"]

RECORD = RecordView(
    "0.1.0", "2026-09-15T10:00:00+00:00", (InputFile("tender.toml", "ab" * 32), InputFile("bids/bids.csv", "cd" * 32))
)

#: Names that a spreadsheet must not take for a formula, a link, a number, an error or markup.
HOSTILE = (
    "=cmd|' /C calc'!A0",
    "<script>alert(1)</script>",
    "+SUM(A1:A9)",
    "@import",
    "https://example.org/",
    "007",
    "A & B \"quoted\" 'single'",
    "bell \x07 and turned \u202eeman",
)


def number(value: str, unit: str, line: int, column: str) -> Quantity:
    """A number in a bidder's table, in the internal unit where it is in watts."""
    internal = str(make.Decimal(value) / 1000) if unit == "W" else value
    place = Place("bids/bids.csv", line=line, column=column)
    return Quantity(value=make.Decimal(internal), stated=make.Decimal(value), unit=unit, text=value, place=place)


def offer(
    bidder: str, lot: str, line: int, figures: tuple[str, str, str | None], *, unit: str = "kW", **changes: Any
) -> Offer:
    """An offer by its price, no-load loss and load loss, each with the place of its cell."""
    price, no_load, load = figures
    currency = changes.pop("currency", "NCU")
    fields: dict[str, Any] = {
        "bidder": Entry(value=bidder, place=Place("bids/bids.csv", line=line)),
        "lot": make.entry(lot),
        "currency": make.entry(currency),
        "unit_price": number(price, currency, line, "unit price"),
        "no_load_loss_kw": number(no_load, unit, line, "P0"),
        "load_loss_kw": None if load is None else number(load, unit, line, "Pk"),
        "place": Place("bids/bids.csv", line=line),
        "columns": {"load_loss_kw": Place("bids/bids.csv", line=line, column="Pk")},
    }
    return Offer(**(fields | changes))


def lots() -> tuple[Lot, Lot]:
    """One lot of announced rates per watt with a limit, one of derived rates with an auxiliary rate."""
    announced = make.lot(
        "1",
        quantity=make.quantity("250"),
        rates=make.rates("11", "1.32", per="W"),
        maximum_load_loss_kw=make.quantity("3.25", "kW"),
    )
    derived = make.lot(
        "2", description=make.entry("20/31.5 MVA"), cooling=make.entry("ONAN/ONAF"), derivation=make.derivation()
    )
    return announced, derived


def workbook_tender(
    *,
    rounding: Rounding = make.CENT,
    applies_to: RoundingPoint = RoundingPoint.PART_PER_UNIT,
    economics: dict[str, Any] | None = None,
) -> Tender:
    """Two lots, a second currency, and a loading condition with cooling."""
    loading = make.loading(cooling_hours=make.quantity("600", "h/year"), cooling_share_at_peak=make.quantity("1"))
    return make.tender(
        *lots(),
        rules=Rules(rounding=rounding, rounding_applies_to=applies_to, place=make.place()),
        exchange=make.exchange(FCU="1.2500"),
        economics={"board": make.economics(**(economics or {}))},
        loading={"town": loading},
    )


def offers() -> tuple[Offer, ...]:
    """A tie to the cent, a bid in watts, a bid in another currency, hostile names, and two bids that are not ranked."""
    aux = {"auxiliary_loss_kw": make.quantity("1.5", "kW")}
    return (
        offer(HOSTILE[0], "1", 2, ("11520", "0.330", "3.100")),
        offer(HOSTILE[1], "1", 3, ("11432", "350", "3000"), unit="W"),
        offer("Firthwane", "1", 4, ("9080", "0.355", "3.120"), currency="FCU"),
        offer("Gorsemere", "1", 5, ("9000", "0.387", "3.900")),
        offer("Birchlune", "1", 6, ("9000", "0.387", None)),
        offer("Alder", "2", 7, ("655000", "15.2", "134"), **aux),
        offer("Firthwane", "2", 8, ("548000", "13.2", "132"), currency="FCU", **aux),
        offer("Cedarfell", "2", 9, ("691000.55", "12.613", "128.07"), **aux),
    )


def view_of(stated: Tender, read: tuple[Offer, ...], findings: tuple[Finding, ...] = ()) -> EvaluationView:
    """View of an evaluation, with a fixed record."""
    return build_view(evaluate(stated, read, findings), RECORD)


def workbook_view(**changes: Any) -> EvaluationView:
    """The view of the workbook tests."""
    return view_of(workbook_tender(**changes), offers())
