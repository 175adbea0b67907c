"""Arithmetic of the price schedule: what counts as an error, which figure governs, and the bidder's answer."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.announced import rule_sentence
from lossworth.evaluation.schedule_error import PriceCheck, schedule_error
from lossworth.money import Rounding, RoundingMode
from lossworth.records.tender import RoundingPoint
from lossworth.trail import walk
from support import commercial as make
from support import records

CORRECT = {"arithmetic_errors": "correct", "misplaced_decimal": "no exception"}
UNIT = {**CORRECT, "unit_price_against_total": "unit price governs"}
TOTAL = {**CORRECT, "unit_price_against_total": "total governs"}
MARK = {**UNIT, "misplaced_decimal": "total governs"}
ESTIMATED = records.lot(estimated_unit_price=make.quantity("4100", "NCU"))
DISCOUNT = {"unconditional_discount_percent": make.quantity("5")}


def error(price: str, total: str, lot=None, check=None, **terms):
    """Error of a schedule of ten units."""
    offer = make.bid("Alder", price, total_price=make.quantity(total, "NCU"), **terms)
    return schedule_error(offer, lot or records.lot(), check)


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
    """A power of ten that brings the unit price to a usual one is its mark; the message says to which side."""
    found = error(price, "40000", check=PriceCheck((D(price) / 4100,)))
    assert (found.shifted_places, found.misplaced) == (places, "unit price")
    assert f"too far {'left' if places > 0 else 'right'}" in found.description


@pytest.mark.parametrize(
    ("check", "misplaced"),
    [
        (PriceCheck((D(1),)), "total"),
        (PriceCheck((D("0.1"),)), "unit price"),
        (PriceCheck((D("0.1"), D(1))), None),
        (PriceCheck(()), None),
        (PriceCheck((D(5),)), None),
        (PriceCheck((D("0.1"),), is_confirmed=True), "total"),
    ],
)
def test_schedule_error__which_of_the_two_is_misplaced(check, misplaced):
    """Usual prices tell which of the two is wrong; a confirmed unit price is not."""
    found = error("400", "40000", check=check)
    assert (found.shifted_places, found.misplaced) == (1, misplaced)
    assert ("cannot be told" in found.description) is (misplaced is None)


def test_schedule_error__bound_from_the_digits_of_the_total():
    """An evaluation in hundreds does not make a total of 179,249 agree with 179,200."""
    rules = make.rules(**UNIT).model_copy(update={"rounding": Rounding(D(100), RoundingMode.HALF_AWAY_FROM_ZERO)})
    offer = make.bid(price="17920", total_price=make.quantity("179249", "NCU"))
    assert make.kinds(make.only(records.tender(rules=rules), offer)) == ["arithmetic-error-corrected"]


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
    """A total of 100,000 for seven units is paid and compared in full, whatever the rounding of the evaluation."""
    lot = records.lot(quantity=make.quantity("7"))
    settings = {**TOTAL, "point": point}
    found = corrected(settings, price="14000", total="100000.00", lot=lot)
    assert found.contract_price.value == D("100000.00")
    assert found.lot.evaluated_price.value == D("100000.00")


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


def test_rule_sentence__take_as_read():
    """The rule says what the evaluation does: the unit price as read, not the total."""
    tender = make.tender(settings={"arithmetic_errors": "take as read"})
    sentence = "The unit price as read is evaluated; arithmetic errors are not corrected"
    assert rule_sentence(tender, "arithmetic_errors").startswith(sentence)


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
    found = corrected(MARK, price="400", total="40000", lot=ESTIMATED)
    assert found.corrections[0].corrected.value == 4000
    assert "decimal mark" in found.corrections[0].rule


def test_correct_schedule__shifted_unit_price_and_a_total_net_of_discount():
    """A total that stands after the discount moves the mark, and the discount comes off once."""
    settings = {**MARK, "unconditional_discounts": "deduct"}
    found = corrected(settings, price="400", total="38000", lot=ESTIMATED, **DISCOUNT)
    assert found.corrections[0].corrected.value == 4000
    assert (found.lot.evaluated_price.value, found.contract_price.value) == (D("38000.00"), D("38000.00"))


def test_correct_schedule__undecided_total_net_of_discount_governs():
    """A governing total that stands after the discount is brought back before it comes off."""
    found = corrected({**TOTAL, "unconditional_discounts": "deduct"}, price="400", total="38000", **DISCOUNT)
    assert found.corrections[0].corrected.value == 4000
    assert (found.lot.evaluated_price.value, found.contract_price.value) == (D("38000.00"), D("38000.00"))


@pytest.mark.parametrize(("total", "unit"), [("40000", 4000), ("40200", 4000)])
@pytest.mark.parametrize("settings", [MARK, TOTAL])
def test_correct_schedule__items_only_out_of_a_total_that_holds_them(settings, total, unit):
    """Whether the total holds the items is seen from the reading that explains it."""
    estimate = make.quantity("4100", "NCU") if settings is MARK else None
    lot = records.lot(items=(make.item(pieces="2"),), estimated_unit_price=estimate)
    prices = {"spare bushing": make.quantity("100", "NCU")}
    found = corrected(settings, price="400", total=total, lot=lot, item_prices=prices)
    assert (found.corrections[0].field, found.corrections[0].corrected.value) == ("unit_price", unit)


@pytest.mark.parametrize("against", ["unit price governs", "total governs"])
def test_correct_schedule__misplaced_total(against):
    """Where the mark of the total is the wrong one the unit price governs, with that reason."""
    settings = {**MARK, "unit_price_against_total": against}
    found = corrected(settings, price="4000", total="4000", lot=ESTIMATED)
    (correction,) = found.corrections
    assert (correction.field, correction.corrected.value) == ("total_price", 40000)
    assert "the decimal mark of the total stands 1 place too far left" in correction.reason
    assert found.per_unit.evaluated_price.value == D("4000.00")


def test_correct_schedule__misplaced_total_without_exception():
    """A tender that announces no exception for a misplaced mark treats it as any other error."""
    found = corrected(TOTAL, price="4000", total="4000", lot=ESTIMATED)
    assert found.corrections[0].corrected.value == 400


def test_correct_schedule__median_of_the_others_decides():
    """Other offers tell which figure is misplaced; alone the error is an ordinary one."""
    others = [make.bid(name, price) for name, price in (("Birch", "4100"), ("Cedar", "4200"))]
    for total, field in (("4000", "total_price"), ("400000", "total_price")):
        offer = make.bid(price="4000", total_price=make.quantity(total, "NCU"))
        assert make.only(make.tender(settings=MARK), offer, *others).corrections[0].field == field
    offer = make.bid(price="400", total_price=make.quantity("40000", "NCU"))
    assert make.only(make.tender(settings=MARK), offer, *others).corrections[0].field == "unit_price"
    assert make.only(make.tender(settings=MARK), offer, others[0]).corrections[0].field == "unit_price"
    others = [make.bid("Birch", "410"), make.bid("Cedar", "4200")]
    assert make.only(make.tender(settings=MARK), offer, *others).corrections[0].field == "total_price"
    assert make.only(make.tender(settings=MARK), offer).corrections[0].field == "total_price"


def test_correct_schedule__confirmed_unit_price_ends_the_shift():
    """A bidder that confirms its unit price as read has said that the total is wrong."""
    confirmed = make.decide("confirm value", field="unit_price", value=make.quantity("400", "NCU"))
    found = corrected(MARK, confirmed, price="400", total="40000", lot=ESTIMATED)
    assert found.per_unit.evaluated_price.value == D("400.00")


def test_correct_schedule__no_false_tie():
    """Three units for 100,000 in all are dearer than three at 33,333.33."""
    lot = records.lot(quantity=make.quantity("3"))
    alder = make.bid(price="5000", total_price=make.quantity("100000", "NCU"))
    lots = make.tender(lot, settings=TOTAL)
    assert make.first(lots, alder, make.bid("Birch", "33333.33")) == ["Birch"]
    assert make.only(lots, alder).lot.evaluated_price.value == D("100000.00")


def test_correct_schedule__governing_total_with_items():
    """Units of a governing total are rounded for the lot, and the items beside them."""
    lot = records.lot(quantity=make.quantity("3"), items=(make.item(pieces="4"),))
    prices = {"spare bushing": make.quantity("100", "NCU")}
    found = corrected(TOTAL, price="5000", total="100400", lot=lot, item_prices=prices)
    assert (found.lot.evaluated_price.value, found.contract_price.value) == (D("100400.00"), D("100400.00"))


def test_contract_price__not_by_the_quantum_of_the_evaluation():
    """What is paid is exact to the minor unit where the evaluation rounds to hundreds."""
    rules = make.rules().model_copy(update={"rounding": Rounding(D(100), RoundingMode.HALF_AWAY_FROM_ZERO)})
    assert make.only(records.tender(rules=rules), make.bid(price="4480.55")).contract_price.value == D("44805.50")
