"""Commercial terms against the rules: tolerance, firm price, validity, deviations."""

from __future__ import annotations

import datetime
from decimal import Decimal as D

import pytest

from lossworth.records.tender import CoolingValuation
from support import commercial as make
from support import records

PLUS = {"loss_tolerance": "evaluate at guarantee plus tolerance"}
CEILING = {"loss_tolerance": "none, the guarantee is a ceiling"}
AT_TEST = {"loss_tolerance": "allowed at test, money due above the guarantee"}


def claimed(settings, percent="10", lot=None, **fields):
    """An offer that claims a tolerance."""
    lots = () if lot is None else (lot,)
    return make.only(
        make.tender(*lots, settings=settings), make.bid(claimed_tolerance_percent=make.quantity(percent), **fields)
    )


def test_check_tolerance__evaluated_at_guarantee_plus_tolerance():
    """All losses carry the tolerance that the bidder claims, and a note says so."""
    lot = records.lot(rates=records.rates(auxiliary="1000"))
    found = claimed(PLUS, lot=lot, auxiliary_loss_kw=make.quantity("0.5", "kW"))
    unit = found.per_unit
    assert [f.value for f in (unit.no_load_cost, unit.load_cost, unit.auxiliary_cost)] == [1452, D("871.20"), 550]
    assert make.kinds(found) == ["tolerance-added"]


def test_check_tolerance__limits_see_the_guarantee():
    """A tolerance acts between guarantee and test, never between guarantee and limit."""
    lot = records.lot(maximum_no_load_loss_kw=make.quantity("0.120", "kW"))
    assert claimed(PLUS, lot=lot).status == "ranked"


def test_check_tolerance__cooling_through_a_and_b():
    """Cooling powers are guaranteed losses too."""
    lot = records.lot(rates=records.rates("1000", "100"), cooling_valuation=CoolingValuation.THROUGH_A_AND_B,
                      cooling=make.entry("ONAN/ONAF"))  # fmt: skip
    powers = {
        "cooling_power_no_load_kw": make.quantity("0.01", "kW"),
        "cooling_power_rated_kw": make.quantity("0.02", "kW"),
    }
    found = claimed(PLUS, lot=lot, **powers)
    assert (found.per_unit.no_load_cost.value, found.per_unit.load_cost.value) == (D("143.00"), D("133.10"))


@pytest.mark.parametrize(
    ("settings", "status", "kinds"), [(CEILING, "non-responsive", ["tolerance-not-accepted"]), (AT_TEST, "ranked", [])]
)
def test_check_tolerance__ceiling_or_test(settings, status, kinds):
    """A claimed tolerance contradicts a ceiling; allowed at test it changes no figure of the evaluation."""
    found = claimed(settings)
    assert (found.status, make.kinds(found), found.per_unit.no_load_cost.value) == (status, kinds, D("1320.00"))


@pytest.mark.parametrize("settings", [PLUS, AT_TEST])
def test_check_tolerance__above_what_is_allowed(settings):
    """Beyond the announced percentage a tolerance is not accepted."""
    most = {**settings, "loss_tolerance_percent": make.quantity("9.9")}
    assert claimed(most).status == "non-responsive"
    assert claimed({**most, "loss_tolerance_percent": make.quantity("10")}).status == "ranked"


def test_check_tolerance__zero_is_no_claim():
    """A tolerance of zero needs no rule."""
    assert claimed({}, percent="0").status == "ranked"


def test_check_price_basis__variable_price_rejected():
    """A variable price is non-responsive where only firm ones are accepted."""
    tender = make.tender(settings={"price_variation": "reject variable prices"})
    found = make.only(tender, make.bid(price_basis="variable"))
    assert (found.status, make.kinds(found)) == ("non-responsive", ["price-variable"])


def test_check_price_basis__variable_at_base_date_is_a_note():
    """A variable price that the rule lets in is marked."""
    found = make.only(make.tender(settings={"price_variation": "evaluate at the base date"}),
                      make.bid(price_basis="variable"))  # fmt: skip
    assert (found.status, make.kinds(found)) == ("ranked", ["price-variable-at-base-date"])
    assert make.only(make.tender(), make.bid(price_basis="firm")).findings == ()


@pytest.mark.parametrize(("ends", "kinds"), [("2026-11-29", ["validity-before-award"]), ("2026-11-30", [])])
def test_check_validity__against_the_planned_award(ends, kinds):
    """A bid that ends a day before the planned award is questioned; one that ends on the day is not."""
    tender = make.tender(planned_award=datetime.date(2026, 11, 30))
    assert make.kinds(make.only(tender, make.bid(valid_until=datetime.date.fromisoformat(ends)))) == kinds


def test_check_deviations__stated_in_words():
    """Deviations that a bidder states are listed with its own words."""
    found = make.only(make.tender(), make.bid(deviations=make.entry("Tank painted gray")))
    assert [(f.kind, f.got) for f in found.findings] == [("deviation-stated", "Tank painted gray")]
    assert make.only(make.tender(), make.bid(deviations=make.entry("  "))).findings == ()


def test_check_silence__delivery_term_of_some():
    """Where some state a delivery term, silence is worth a note."""
    found = make.only(make.tender(), make.bid(), make.bid("Birch", "4100", delivery_term=make.entry("DDP")))
    assert [(f.kind, f.field) for f in found.findings] == [("commercial-term-not-stated", "delivery term")]


@pytest.mark.parametrize("field", ["unconditional_discount_percent", "prompt_payment_discount_percent"])
@pytest.mark.parametrize(
    ("percent", "status", "kinds"),
    [
        ("100", "not evaluated", ["value-out-of-bounds"]),
        ("99", "ranked", ["discount-unusual"]),
        ("30.1", "ranked", ["discount-unusual"]),
        ("30", "ranked", []),
        ("1", "ranked", []),
        ("0.99", "ranked", ["discount-unusual"]),
        ("0.05", "ranked", ["discount-unusual"]),
        ("0", "ranked", []),
    ],
)
def test_check_discounts__what_cannot_be_and_what_is_asked(field, percent, status, kinds):
    """Nothing is left of a price less 100 percent; a very small or very large discount is a question."""
    settings = {"unconditional_discounts": "deduct", "prompt_payment_discounts": "deduct"}
    found = make.only(make.tender(settings=settings), make.bid(**{field: make.quantity(percent)}))
    assert (found.status, make.kinds(found)) == (status, kinds)


@pytest.mark.parametrize(
    ("asked", "offered", "kinds"),
    [("ONAN/ONAF", "ONAN", ["cooling-differs"]), ("ONAN/ONAF", "ONAN/ONAF", []), ("ONAN", "ONAN/ONAF", [])],
)
def test_check_completeness__cooling_other_than_asked(asked, offered, kinds):
    """A unit without fans where the tender asks for some is a question to the bidder."""
    lot = records.lot(cooling=make.entry(asked))
    found = make.only(make.tender(lot), make.bid(cooling=make.entry(offered)))
    assert (found.status, make.kinds(found)) == ("ranked", kinds)
    assert all(f.fix.startswith("Ask the bidder: the tender asks for cooling ONAN/ONAF.") for f in found.findings)
