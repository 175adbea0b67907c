"""Further items of a lot: counted for the lot, missing ones by rule, never in the contract price."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Finding, Place
from lossworth.records.tender import RoundingPoint
from lossworth.trail import walk
from support import commercial as make
from support import records

HIGHEST = {"missing_item": "highest of the others", "missing_item_among": "all offers received"}
AVERAGE = {**HIGHEST, "missing_item": "average of the others"}
LOT = records.lot(quantity=make.quantity("7"), items=(make.item(pieces="4"), make.item("tool", "1", counts=False)))


def prices(value: str, **others: str):
    """Prices of a piece of the item that counts, and of others."""
    stated = {"Spare  Bushing": value} | others
    return {name: make.quantity(each, "NCU") for name, each in stated.items()}


@pytest.mark.parametrize(
    ("point", "lot_price"), [(RoundingPoint.PART_PER_UNIT, "28401.32"), (RoundingPoint.PART_PER_LOT, "28401.32")]
)
def test_items_price__an_amount_of_the_lot(point, lot_price):
    """Four pieces at 100.331 are added to seven units, rounded once; nothing is divided by the quantity."""
    tender = make.tender(LOT, settings={"point": point})
    found = make.only(tender, make.bid(item_prices=prices("100.331", tool="9")))
    assert found.per_unit.evaluated_price.value == D("4000")
    assert found.lot.evaluated_price.value == D(lot_price)
    assert found.lot.total_owning_cost.value == D(lot_price) + 7 * D("2112.00")
    assert [(s.name, s.scope) for s in found.price_steps[-2:]] == [("item", "lot"), ("evaluated", "lot")]


def test_items_price__decides_the_rank():
    """The offer with the cheaper units loses by its spares."""
    cheap = make.bid("Alder", "4000", item_prices=prices("500"))
    dear = make.bid("Birch", "4100", item_prices=prices("10"))
    assert make.first(make.tender(LOT), cheap, dear) == ["Birch"]


def test_items_price__item_that_does_not_count():
    """An item that does not count is in neither price, and may be left unpriced."""
    found = make.only(make.tender(LOT), make.bid(item_prices=prices("100", tool="777")))
    assert (found.lot.evaluated_price.value, found.contract_price.value) == (D("28400.00"), D("28400.00"))
    assert make.kinds(make.only(make.tender(LOT), make.bid(item_prices=prices("100")))) == []


def test_items_price__discount_currency_and_tax_act_on_items():
    """What acts on the price of a bid acts on all its prices."""
    tender = make.tender(
        LOT,
        settings={"unconditional_discounts": "deduct", "taxes": "excluded"},
        taxes=make.taxes("10"),
        exchange=records.exchange(FCU="1.25"),
    )
    stated = {"Spare Bushing": make.quantity("88", "FCU")}
    terms = {"unconditional_discount_percent": make.quantity("10"), "tax_included": True, "item_prices": stated}
    found = make.only(tender, make.bid(price="880", currency=make.entry("FCU"), **terms))
    assert found.per_unit.evaluated_price.value == D("900.00")
    assert found.lot.evaluated_price.value == 7 * D("900.00") + 4 * D("90.00")
    assert found.contract_price.value == (7 * 880 + 4 * 88) * D("0.9")


def missing(settings, *others, lot=LOT):
    """The evaluated offer of a bidder that does not price the item, beside others."""
    return make.only(make.tender(lot, settings=settings), make.bid(), *others)


OTHERS = (
    make.bid("Birch", "4100", item_prices=prices("100")),
    make.bid("Cedar", "4200", item_prices=prices("130.01")),
)


@pytest.mark.parametrize(("settings", "amount"), [(HIGHEST, "520.04"), (AVERAGE, "460.02")])
def test_stand_in__highest_and_average(settings, amount):
    """The stand-in is in the evaluated price, not in the contract price; a note names it."""
    found = missing(settings, *OTHERS)
    assert found.lot.evaluated_price.value == 28000 + D(amount)
    assert found.contract_price.value == D("28000.00")
    assert make.kinds(found) == ["item-price-stands-in"]
    assert "for comparison only" in found.findings[-1].rule
    leaves = {figure.id for figure in walk(found.lot.evaluated_price)}
    assert "lot 1/Cedar/item/spare bushing" in leaves


def test_stand_in__own_alternative_is_no_other():
    """The bidder's own alternative does not stand in for it."""
    settings = {**HIGHEST, "alternatives": "as offers of their own"}
    own = make.bid(price="5000", alternative="ester", item_prices=prices("999"))
    assert missing(settings, own, *OTHERS).lot.evaluated_price.value == D("28520.04")


def test_stand_in__rejected():
    """Where the rule rejects, the offer is non-responsive and its total is not made up."""
    found = missing({"missing_item": "reject"}, *OTHERS)
    assert (found.status, make.kinds(found)) == ("non-responsive", ["item-missing-rejected"])
    assert found.lot.total_owning_cost is None
    assert found.per_unit.total_owning_cost.value == D("6112.00")


def test_stand_in__nobody_prices_it():
    """Where no other offer prices the item nothing can stand in, and the offer is not evaluated."""
    found = missing(HIGHEST, make.bid("Birch", "4100"))
    assert (found.status, make.kinds(found)) == ("not evaluated", ["item-priced-by-nobody"])


def test_stand_in__rejecting_a_bid_moves_nothing_under_all_received():
    """With all offers received, the price of a rejected one still counts; with responsive offers it does not."""
    lot = LOT.model_copy(update={"maximum_load_loss_kw": make.quantity("2", "kW")})
    rejected = make.bid("Dear", "4000", load_loss_kw=make.quantity("3", "kW"), item_prices=prices("900"))
    responsive = {**HIGHEST, "missing_item_among": "responsive offers"}
    assert missing(HIGHEST, *OTHERS, rejected, lot=lot).lot.evaluated_price.value == D("31600.00")
    assert missing(responsive, *OTHERS, rejected, lot=lot).lot.evaluated_price.value == D("28520.04")


def test_stand_in__a_waived_offer_is_responsive():
    """An offer that a recorded waiver takes in counts among the responsive ones."""
    lot = LOT.model_copy(update={"maximum_load_loss_kw": make.quantity("2", "kW")})
    late = make.bid("Dear", "4000", load_loss_kw=make.quantity("3", "kW"), item_prices=prices("900"))
    waiver = make.decide("waive", "Dear", field="load-loss-above-maximum")
    settings = {**HIGHEST, "missing_item_among": "responsive offers"}
    result = evaluate(make.tender(lot, settings=settings), (make.bid(), *OTHERS, late), (), (waiver,))
    (found,) = (offer for offer in result.lots[0].offers if offer.name == "Alder")
    assert found.lot.evaluated_price.value == D("31600.00")


def test_items_price__interest_and_margin():
    """Interest acts on the bidder's own items, the margin on all that is compared."""
    tender = make.tender(
        LOT,
        settings={
            "payment_terms": "discount to a common date",
            "preference": "margin added to other prices",
            **HIGHEST,
        },
        payment_terms=make.payment_terms("10"),
        preference=make.preference("10"),
    )
    early = (make.payment("1", "0"),)
    own = make.only(tender, make.bid(item_prices=prices("100"), payments=early), *OTHERS)
    assert own.per_unit.evaluated_price.value == D("4800.00")  # 4000 + 10 % interest + 10 % margin on 4000
    assert own.lot.evaluated_price.value == 7 * D("4800.00") + 400 + 40 + 40
    stood_in = make.only(tender, make.bid(payments=early), *OTHERS)
    assert stood_in.lot.evaluated_price.value == 7 * D("4800.00") + D("520.04") + D("52.00")
    assert own.total_without_preference.value == 7 * (D("4400.00") + 2112) + 440


@pytest.mark.parametrize(
    ("settings", "whose"),
    [
        (HIGHEST, "520.04 NCU for the lot, highest of the others (Cedar, tender.toml:1)"),
        (AVERAGE, "460.02 NCU for the lot, average of the others (Birch, tender.toml:1, Cedar, tender.toml:1)"),
    ],
)
def test_stand_in__finding_names_amount_and_cells(settings, whose):
    """The note says how much stands in, and out of whose cell."""
    assert whose in missing(settings, *OTHERS).findings[-1].rule


@pytest.mark.parametrize(
    ("rule", "amount"),
    [
        ("not accepted", "520.04"),
        ("only of the lowest ranked base bidder", "520.04"),
        ("only if the base offer is responsive", "520.04"),
        ("as offers of their own", "3996.00"),
    ],
)
def test_stand_in__excluded_alternative_supplies_none(rule, amount):
    """The price of an alternative that the rule leaves out stands in for nobody."""
    lot = LOT.model_copy(update={"maximum_no_load_loss_kw": make.quantity("0.2", "kW")})
    lossy = make.bid("Dogwood", "4300", item_prices=prices("1"), no_load_loss_kw=make.quantity("0.3", "kW"))
    other = make.bid("Dogwood", "4300", alternative="ester", item_prices=prices("999"))
    found = missing({**HIGHEST, "alternatives": rule}, *OTHERS, lossy, other, lot=lot)
    assert found.lot.evaluated_price.value == 28000 + D(amount)


def test_items_price__unreadable_is_not_missing():
    """A price that cannot be read is reported once, and not as left out."""
    at = Place("bids/alder.csv", line=2, column="item: spare bushing")
    offer = make.bid(columns={"item: spare bushing": at})
    unread = Finding("value-unreadable", "item: spare bushing", "must be a number", at, "?", "Alder", "1")
    result = evaluate(make.tender(LOT, settings=HIGHEST), [offer, *OTHERS], [unread])
    (found,) = (each for each in result.lots[0].offers if each.name == "Alder")
    assert (found.status, make.kinds(found)) == ("not evaluated", ["value-unreadable"])
