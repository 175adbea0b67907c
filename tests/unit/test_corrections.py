"""Arithmetic of the price schedule: what counts as an error, which figure governs, and the bidder's answer."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.corrections import schedule_error
from lossworth.records.tender import RoundingPoint
from lossworth.trail import walk
from support import commercial as make
from support import records

CORRECT = {"arithmetic_errors": "correct", "misplaced_decimal": "no exception"}
UNIT = {**CORRECT, "unit_price_against_total": "unit price governs"}
TOTAL = {**CORRECT, "unit_price_against_total": "total governs"}


def error(price: str, total: str, lot=None, **terms):
    """Error of a schedule of ten units."""
    offer = make.bid("Alder", price, total_price=make.quantity(total, "NCU"), **terms)
    return schedule_error(offer, lot or records.lot(), D("0.01"))


@pytest.mark.parametrize(
    ("price", "total"),
    [
        ("4000", "40000"),
        ("4000.00", "40000.00"),
        ("4000.04", "40000"),  # half a unit of the last digit of a whole total
        ("4000.0004", "40000.00"),
        ("0.005", "0.05"),
    ],
)
def test_schedule_error__agrees_within_the_last_digit(price, total):
    """A total that is rounded to its own last digit is right."""
    assert error(price, total) is None


@pytest.mark.parametrize(("price", "total"), [("4000.06", "40000"), ("4000.001", "40000.00"), ("4000", "42000")])
def test_schedule_error__differs(price, total):
    """Beyond half a unit of the last digit the figures do not agree."""
    assert error(price, total).shifted_places == 0


@pytest.mark.parametrize(("price", "places"), [("400", 1), ("40", 2), ("40000", -1), ("4000000", -3)])
def test_schedule_error__misplaced_decimal_mark(price, places):
    """A power of ten between the two is a misplaced decimal mark, and the message says to which side."""
    found = error(price, "40000")
    assert found.shifted_places == places
    assert f"{abs(places)} places too far {'left' if places > 0 else 'right'}" in found.description


def test_schedule_error__total_of_the_lot_with_items_or_discount():
    """A total may hold the further items, and stand after the unconditional discount."""
    lot = records.lot(items=(make.item(pieces="4"), make.item("tool", "2", counts=False)))
    prices = {"spare bushing": make.quantity("100", "NCU"), "Tool": make.quantity("50", "NCU")}
    assert error("4000", "40500", lot, item_prices=prices) is None
    assert error("4000", "40000", lot, item_prices=prices) is None
    assert error("4000", "38475", lot, item_prices=prices, unconditional_discount_percent=make.quantity("5")) is None
    assert error("4000", "40400", lot, item_prices=prices) is not None


def test_schedule_error__another_quantity_is_not_arithmetic():
    """A bid for another number of units has a finding of its own."""
    assert error("4000", "20000", quantity=make.quantity("5")) is None


def corrected(settings, *decisions, price="4000", total="42000", lot=None, **terms):
    """The evaluated offer of one bidder with an arithmetic error."""
    offer = make.bid("Alder", price, total_price=make.quantity(total, "NCU"), **terms)
    lots = () if lot is None else (lot,)
    return make.only(make.tender(*lots, settings=settings), offer, decisions=decisions)


def test_correct_schedule__unit_price_governs():
    """The total is corrected, the unit price and the evaluation stay."""
    found = corrected(UNIT)
    (correction,) = found.corrections
    assert (correction.field, correction.as_read.value, correction.corrected.value) == ("total_price", 42000, 40000)
    assert "the unit price governs (tender.toml:22)" in correction.rule
    assert found.per_unit.evaluated_price.value == D("4000.00")
    assert (found.contract_price.value, make.kinds(found)) == (D("40000.00"), ["arithmetic-error-corrected"])


def test_correct_schedule__total_governs():
    """The unit price is the total over the quantity, in three layers: as read, as corrected, as evaluated."""
    found = corrected(TOTAL)
    (correction,) = found.corrections
    assert (correction.field, correction.as_read.value, correction.corrected.value) == ("unit_price", 4000, 4200)
    assert found.per_unit.evaluated_price.value == D("4200.00")
    assert found.offer.unit_price.value == 4000
    assert correction.corrected.id in {figure.id for figure in walk(found.lot.total_owning_cost)}
    assert [step.name for step in found.price_steps] == ["quoted", "corrected", "evaluated"]


@pytest.mark.parametrize("point", RoundingPoint)
def test_correct_schedule__total_that_the_quantity_does_not_divide(point):
    """A total of 100,000 for seven units is paid in full, whatever the rounding of the evaluation makes of it."""
    lot = records.lot(quantity=make.quantity("7"))
    settings = {**TOTAL, "point": point}
    found = corrected(settings, price="14000", total="100000.00", lot=lot)
    assert found.contract_price.value == D("100000.00")
    expected = {RoundingPoint.PART_PER_UNIT: D("99999.97"), RoundingPoint.PART_PER_LOT: D("100000.00")}
    assert found.lot.evaluated_price.value == expected[point]


def test_correct_schedule__total_less_items():
    """Where the total governs the priced items come off before it is divided."""
    lot = records.lot(items=(make.item(pieces="4"),))
    found = corrected(TOTAL, total="42400", lot=lot, item_prices={"spare bushing": make.quantity("100", "NCU")})
    assert found.corrections[0].corrected.value == 4200
    assert found.contract_price.value == D("42400.00")


def test_correct_schedule__total_smaller_than_the_items():
    """A total that leaves nothing for the units is the total of the units."""
    lot = records.lot(items=(make.item(pieces="4"),))
    prices = {"spare bushing": make.quantity("20000", "NCU")}
    found = corrected(TOTAL, total="42000", lot=lot, item_prices=prices)
    assert found.corrections[0].corrected.value == 4200


def test_correct_schedule__as_read():
    """Without correction the unit price as read is evaluated, and the papers say that it does not add up."""
    found = corrected({"arithmetic_errors": "take as read"})
    assert (found.corrections, found.status) == ((), "ranked")
    assert make.kinds(found) == ["arithmetic-error-not-corrected"]


def test_correct_schedule__rejected():
    """Where the sum as read is final an error makes the offer non-responsive."""
    found = corrected({"arithmetic_errors": "reject"})
    assert (found.status, make.kinds(found)) == ("non-responsive", ["arithmetic-error-rejected"])
    assert "unit price times quantity is 40000, the stated total 42000" in found.findings[-1].rule


def test_correct_schedule__accepted():
    """The bidder's acceptance stands beside the correction."""
    accepted = make.decide("accept correction")
    found = corrected(TOTAL, accepted)
    assert (found.status, found.corrections[0].decision, found.decisions) == ("ranked", accepted, (accepted,))


def test_correct_schedule__refused():
    """A refusal leaves the offer out, with its reason; the last answer holds."""
    refused = make.decide("refuse correction", line=9)
    found = corrected(TOTAL, make.decide("accept correction"), refused)
    assert (found.status, found.corrections[0].decision) == ("non-responsive", refused)
    assert "correction-refused" in make.kinds(found)
    assert "by decision of 2026-09-25 (decisions.toml:9)" in found.findings[-1].rule


def test_correct_schedule__mark_governs_before_the_unit_price():
    """With the exception for a misplaced mark the total governs, also where else the unit price does."""
    found = corrected({**UNIT, "misplaced_decimal": "total governs"}, price="400", total="40000")
    assert found.corrections[0].corrected.value == 4000
    assert "decimal mark" in found.corrections[0].rule
