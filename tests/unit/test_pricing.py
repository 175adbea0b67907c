"""From the quoted to the evaluated price: each step with its figures, only where it is announced and needed."""

from __future__ import annotations

from decimal import Decimal as D
from itertools import pairwise

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.price_adders import point_term
from lossworth.records.tender import RoundingPoint
from lossworth.trail import Operation, walk
from support import commercial as make
from support import records

HOME = {"delivered_point": make.entry("DDP site"), "delivery_levels": (make.level("EXW", "4", "120"),)}


def steps(offer, scope="unit"):
    """Names of the steps with the price after each."""
    return [(step.name, step.price.value) for step in offer.price_steps if step.scope == scope]


def price(tender, **terms):
    """Evaluated price of one unit of an offer at 4,000."""
    return make.only(tender, make.bid(**terms)).per_unit.evaluated_price.value


def test_unit_price__plain_bid_has_no_step():
    """Where nothing is announced the quoted price is the evaluated one."""
    assert steps(make.only(make.tender(), make.bid())) == [("quoted", 4000), ("evaluated", D("4000.00"))]


def test_unit_price__discounts_one_after_the_other():
    """5 percent off 4,000, then 2 percent off what is left."""
    settings = {"unconditional_discounts": "deduct", "prompt_payment_discounts": "deduct"}
    terms = {
        "unconditional_discount_percent": make.quantity("5"),
        "prompt_payment_discount_percent": make.quantity("2"),
    }
    found = make.only(make.tender(settings=settings), make.bid(**terms))
    assert steps(found) == [
        ("quoted", 4000),
        ("unconditional discount", 3800),
        ("prompt payment discount", D("3724.00")),
        ("evaluated", D("3724.00")),
    ]
    assert [step.change.value for step in found.price_steps if step.change] == [200, 76]


def test_unit_price__discount_not_counted_is_told():
    """A discount that the rule ignores is named, and still granted in the contract price."""
    tender = make.tender(settings={"unconditional_discounts": "ignore"})
    found = make.only(tender, make.bid(unconditional_discount_percent=make.quantity("5")))
    assert (found.per_unit.evaluated_price.value, found.contract_price.value) == (D("4000.00"), D("38000.00"))
    assert make.kinds(found) == ["discount-not-counted"]


def test_unit_price__discount_before_currency():
    """The contract price stays in the currency of the bid; the price alone is converted."""
    tender = make.tender(settings={"unconditional_discounts": "deduct"}, exchange=records.exchange(FCU="1.25"))
    offer = make.bid(currency=make.entry("FCU"), unconditional_discount_percent=make.quantity("10"))
    found = make.only(tender, offer)
    assert steps(found)[-2:] == [("currency", 4500), ("evaluated", D("4500.00"))]
    assert (found.contract_price.value, found.contract_price.unit) == (D("36000.00"), "FCU")


def test_unit_price__delivered_point_by_percent_and_amount():
    """EXW comes to the delivered point by 4 percent of the price and 120 a unit; DDP is there."""
    assert price(make.tender(**HOME), delivery_term=make.entry("exw")) == D("4280.00")
    assert price(make.tender(**HOME), delivery_term=make.entry("DDP")) == D("4000.00")


def test_unit_price__delivery_term_without_adder():
    """A term for which no adder is announced is not priced, and no total is made up."""
    found = make.only(make.tender(**HOME), make.bid(delivery_term=make.entry("FOB")))
    assert (found.status, make.kinds(found)) == ("not evaluated", ["delivery-term-without-adder"])
    assert found.lot.total_owning_cost is None


@pytest.mark.parametrize("rule", ["excluded", "included"])
def test_unit_price__same_bid_with_and_without_tax(rule):
    """A bid quoted with tax comes to the price of the same bid quoted without, also with adders for EXW."""
    tender = make.tender(settings={"taxes": rule}, taxes=make.taxes("10"), **HOME)
    term = make.entry("EXW")
    without = make.bid("Alder", "4000", tax_included=False, delivery_term=term)
    with_tax = make.bid("Birch", "4400", tax_included=True, delivery_term=term)
    prices = {make.only(tender, without, with_tax, bidder=b).per_unit.evaluated_price.value for b in ("Alder", "Birch")}
    assert prices == {D("4280.00") if rule == "excluded" else D("4696.00")}


def test_unit_price__tax_not_stated_is_taken_as_asked():
    """A silent bid keeps its price, and where others speak of tax the papers say so."""
    tender = make.tender(settings={"taxes": "excluded"}, taxes=make.taxes())
    found = make.only(tender, make.bid(), make.bid("Birch", "4400", tax_included=True))
    assert (found.per_unit.evaluated_price.value, make.kinds(found)) == (D("4000.00"), ["commercial-term-not-stated"])
    assert make.kinds(make.only(tender, make.bid())) == []


def test_unit_price__delivery_adder_per_week():
    """Weeks after the window cost; weeks before it give no credit; parts of a week count in proportion."""
    lot = records.lot(
        delivery_without_adder_weeks=make.quantity("20"),
        delivery_adder_percent_per_week=make.quantity("0.5"),
        latest_delivery_weeks=make.quantity("40"),
    )
    prices = {w: price(make.tender(lot), delivery_weeks=make.quantity(w)) for w in ("10", "20", "24", "24.5")}
    assert prices == {"10": D("4000.00"), "20": D("4000.00"), "24": D("4080.00"), "24.5": D("4090.00")}


def test_unit_price__delivery_adder_as_amount():
    """An adder in money a week."""
    lot = records.lot(delivery_without_adder_weeks=make.quantity("20"), delivery_adder_per_week=make.quantity("12.5"))
    assert price(make.tender(lot), delivery_weeks=make.quantity("24")) == D("4050.00")


def test_unit_price__delivery_time_needed_for_its_adder():
    """Without a delivery time the price is not known."""
    lot = records.lot(delivery_without_adder_weeks=make.quantity("20"), delivery_adder_per_week=make.quantity("12.5"))
    found = make.only(make.tender(lot), make.bid())
    assert (found.status, make.kinds(found)) == ("not evaluated", ["value-missing"])


def test_unit_price__delivery_adder_on_the_delivered_price():
    """The share for late delivery is one of the price at the delivered point, so that EXW and DDP compare."""
    lot = records.lot(
        delivery_without_adder_weeks=make.quantity("20"), delivery_adder_percent_per_week=make.quantity("1")
    )
    found = price(make.tender(lot, **HOME), delivery_term=make.entry("EXW"), delivery_weeks=make.quantity("21"))
    assert found == D("4322.80")


def test_unit_price__site_costs_by_liquid_and_sound():
    """A bund for mineral oil, a barrier above 60 dB, a foundation for all."""
    lot = records.lot(
        site_costs=(
            make.site_cost("bund", "300", liquids=("mineral oil",)),
            make.site_cost("barrier", "50", sound_above_db=make.quantity("60", "dB")),
            make.site_cost("foundation", "7"),
        )
    )
    tender = make.tender(lot)

    def of(liquid, sound):
        return price(tender, insulating_liquid=make.entry(liquid), sound_level_db=make.quantity(sound, "dB"))

    assert of("Mineral Oil", "60") == D("4307.00")
    assert of("ester", "60.1") == D("4057.00")


def test_unit_price__site_cost_hangs_on_what_is_not_stated():
    """A site cost that hangs on the liquid needs the liquid."""
    lot = records.lot(site_costs=(make.site_cost(liquids=("mineral oil",)),))
    found = make.only(make.tender(lot), make.bid())
    assert (found.status, make.kinds(found)) == ("not evaluated", ["value-missing"])


def test_contract_price__nothing_of_the_comparison():
    """Adders, margin and interest stay out of what is paid."""
    lot = records.lot(site_costs=(make.site_cost(),))
    tender = make.tender(
        lot, settings={"preference": "margin added to other prices"}, preference=make.preference(), **HOME
    )
    found = make.only(tender, make.bid(delivery_term=make.entry("EXW")))
    assert found.per_unit.evaluated_price.value == D("4901.00")
    assert found.contract_price.value == D("40000.00")


def test_price_steps__each_follows_from_the_one_before():
    """Every step's price is the one before with its change, and the chain ends in the evaluated price."""
    lot = records.lot(
        site_costs=(make.site_cost(),),
        delivery_without_adder_weeks=make.quantity("20"),
        delivery_adder_percent_per_week=make.quantity("0.5"),
    )
    tender = make.tender(
        lot,
        settings={
            "unconditional_discounts": "deduct",
            "taxes": "excluded",
            "preference": "margin added to other prices",
            "payment_terms": "discount to a common date",
        },
        taxes=make.taxes(),
        preference=make.preference(),
        payment_terms=make.payment_terms(),
        exchange=records.exchange(FCU="1.25"),
        **HOME,
    )
    found = make.only(
        tender,
        make.bid(
            currency=make.entry("FCU"),
            unconditional_discount_percent=make.quantity("3"),
            tax_included=True,
            delivery_term=make.entry("EXW"),
            delivery_weeks=make.quantity("23"),
            payments=(make.payment("0.3", "0"), make.payment("0.7", "52")),
        ),
    )
    act = {"+": lambda a, b: a + b, "−": lambda a, b: a - b, "×": lambda a, b: a * b, "÷": lambda a, b: a / b}
    chain = [step for step in found.price_steps if step.scope == "unit"]
    for before, step in pairwise(chain[:-1]):
        assert float(step.price.value) == pytest.approx(float(act[step.sign](before.price.value, step.change.value)))
    assert [step.name for step in chain] == [
        "quoted",
        "unconditional discount",
        "currency",
        "tax",
        "delivered point",
        "delivered point",
        "payment terms",
        "delivery time",
        "site cost",
        "preference",
        "evaluated",
    ]
    assert abs(chain[-1].price.value - chain[-2].price.value) <= D("0.005")
    assert all(step.rule for step in chain)


def test_unit_price__identities_are_unique():
    """No two figures of an evaluation with every step share an identity, and alternatives have their own."""
    tender = make.tender(settings={"alternatives": "as offers of their own", "unconditional_discounts": "deduct"})
    offers = [
        make.bid(unconditional_discount_percent=make.quantity("3")),
        make.bid(price="3900", alternative="ester", unconditional_discount_percent=make.quantity("4")),
    ]
    found = [make.only(tender, *offers, bidder=name) for name in ("Alder", "Alder, alternative ester")]
    seen = {}
    for offer in found:
        for root in (offer.lot.total_owning_cost, offer.contract_price, *(step.price for step in offer.price_steps)):
            for figure in walk(root):
                assert seen.setdefault(figure.id, figure) == figure


def test_unit_price__rounded_once():
    """Steps are exact; only the evaluated price is rounded."""
    tender = make.tender(settings={"unconditional_discounts": "deduct"})
    found = make.only(tender, make.bid(price="10.01", unconditional_discount_percent=make.quantity("3.3")))
    assert [value for _, value in steps(found)] == [D("10.01"), D("9.67967"), D("9.68")]
    per_lot = make.tender(settings={"unconditional_discounts": "deduct", "point": RoundingPoint.PART_PER_LOT})
    found = make.only(per_lot, make.bid(price="10.01", unconditional_discount_percent=make.quantity("3.3")))
    assert (found.per_unit.evaluated_price.value, found.lot.evaluated_price.value) == (D("9.67967"), D("96.80"))


def test_unit_price__operations_recompute():
    """The trail of a price with steps recomputes from its operands."""
    tender = make.tender(settings={"unconditional_discounts": "deduct"}, **HOME)
    offer = make.bid(unconditional_discount_percent=make.quantity("5"), delivery_term=make.entry("EXW"))
    root = make.only(tender, offer).lot.total_owning_cost
    names = {figure.source.operator.value for figure in walk(root) if isinstance(figure.source, Operation)}
    assert {"product", "sum", "difference", "quotient"} <= names


def test_unit_price__one_percent_sign_in_the_label():
    """A discount that has its sign in the cell is shown with one."""
    discount = make.quantity("5").model_copy(update={"text": "5 %"})
    tender = make.tender(settings={"unconditional_discounts": "deduct"})
    found = make.only(tender, make.bid(unconditional_discount_percent=discount))
    assert found.price_steps[1].label == "unconditional discount of 5 %"


@pytest.mark.parametrize("point", ["DDP, site", "site (DDP)", "Site,DDP"])
def test_point_term__among_other_signs(point):
    """The term of the delivered point is found whatever stands beside it."""
    assert point_term(make.tender(delivered_point=make.entry(point))) == "DDP"
    assert point_term(make.tender(delivered_point=make.entry("ADDPT site"))) is None


def test_check_delivered_point__without_a_term():
    """Adders that lead to no term stop the evaluation."""
    tender = make.tender(delivered_point=make.entry("site"), delivery_levels=(make.level("EXW", "4"),))
    with pytest.raises(EvaluationStopped) as stopped:
        evaluate(tender, [make.bid()])
    assert [(f.kind, f.field) for f in stopped.value.findings] == [("tender-value", "delivery.point")]
