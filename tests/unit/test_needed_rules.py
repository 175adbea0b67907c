"""Rules and adders that are needed and not announced stop the evaluation, by name and place; others may stay unset."""

from __future__ import annotations

import datetime

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.needed_rules import needed_rules
from lossworth.records.rules import AnnouncedRules
from support import commercial as make
from support import records

OPENING = datetime.date(2026, 9, 15)


def unset(tender, *offers):
    """Keys that are needed and not announced."""
    return [finding.field for finding in needed_rules(tender, offers)]


def identity(**changes):
    """Identity of a tender that opens on a day."""
    return records.tender().identity.model_copy(update={"opening_date": OPENING, **changes})


def test_needed_rules__plain_bids_need_none():
    """A tender without any rule evaluates bids that need none."""
    assert unset(make.tender(), make.bid(), make.bid("Birch", "4100")) == []


def test_needed_rules__names_key_place_and_settings():
    """The finding says which key, in which cell it is needed, and which settings there are."""
    discount = make.quantity("3", "%")
    (finding,) = needed_rules(make.tender(), [make.bid(unconditional_discount_percent=discount)])
    assert (finding.kind, finding.field, finding.place) == (
        "rule-unset",
        "rules.unconditional_discounts",
        discount.place,
    )
    assert (finding.got, finding.bidder, finding.lot) == ("3 %", "Alder", "1")
    assert 'to "deduct" or "ignore"' in finding.remedy
    assert "[rules] (tender.toml:9)" in finding.remedy


def test_needed_rules__each_key_once_and_in_the_order_of_names():
    """Two bids that need one rule give one finding, at the first of them whatever their order."""
    offers = [make.bid(name, price_basis="variable") for name in ("Birch", "Alder")]
    (finding,) = needed_rules(make.tender(), offers)
    assert finding.bidder == "Alder"


def test_needed_rules__all_at_once():
    """A buyer reads all missing rules in one run."""
    offer = make.bid(price_basis="variable", tax_included=True, claimed_tolerance_percent=make.quantity("5"))
    assert unset(make.tender(), offer) == ["rules.taxes", "rules.loss_tolerance", "rules.price_variation"]


@pytest.mark.parametrize(
    ("settings", "keys"),
    [
        ({}, ["rules.arithmetic_errors"]),
        ({"arithmetic_errors": "take as read"}, []),
        ({"arithmetic_errors": "correct"}, ["rules.misplaced_decimal"]),
        ({"arithmetic_errors": "correct", "misplaced_decimal": "total governs"}, []),
        (
            {"arithmetic_errors": "correct", "misplaced_decimal": "no exception"},
            ["rules.unit_price_against_total"],
        ),
    ],
)
def test_needed_rules__arithmetic_only_as_far_as_the_error_goes(settings, keys):
    """A misplaced mark asks for its exception first, and for the governing figure where there is none."""
    offer = make.bid(price="400", total_price=make.quantity("40000", "NCU"))
    lot = records.lot(estimated_unit_price=make.quantity("4100", "NCU"))
    assert unset(make.tender(lot, settings=settings), offer) == keys


def test_needed_rules__undecided_power_of_ten_is_an_ordinary_error():
    """Where nothing tells which figure is misplaced the exception for a misplaced mark is not asked for."""
    offer = make.bid(price="400", total_price=make.quantity("40000", "NCU"))
    assert unset(make.tender(settings={"arithmetic_errors": "correct"}), offer) == ["rules.unit_price_against_total"]


@pytest.mark.parametrize(
    ("settings", "fields", "offer", "key"),
    [
        ({"taxes": "excluded"}, {}, {"tax_included": True}, "taxes.rate_percent"),
        ({"taxes": "included"}, {}, {"tax_included": False}, "taxes.rate_percent"),
        (
            {"payment_terms": "discount to a common date"},
            {},
            {"payments": (make.payment("1", "0"),)},
            "payment.interest_rate_percent",
        ),
        (
            {"payment_terms": "discount to a common date"},
            {"payment_terms": make.payment_terms().model_copy(update={"payments": ()})},
            {"payments": (make.payment("1", "0"),)},
            "payment.part",
        ),
        ({"preference": "margin added to other prices"}, {}, {}, "preference.margin_percent"),
    ],
)
def test_needed_rules__adders_of_a_rule(settings, fields, offer, key):
    """A rule that changes an amount needs the figure by which it does."""
    assert unset(make.tender(settings=settings, **fields), make.bid(**offer)) == [key]


def test_needed_rules__tax_rate_only_where_a_price_changes():
    """A bid that is on the tender's tax basis already needs no rate."""
    assert unset(make.tender(settings={"taxes": "excluded"}), make.bid(tax_included=False)) == []
    assert unset(make.tender(settings={"taxes": "included"}), make.bid(tax_included=True)) == []


def test_needed_rules__weekly_adder_without_a_window():
    """An adder a week needs the week from which it counts."""
    lot = records.lot(delivery_adder_per_week=make.quantity("5"))
    assert unset(make.tender(lot)) == ["lot.delivery_without_adder_weeks"]


def test_needed_rules__delivery_terms_of_one_lot():
    """Different terms in one lot need a delivered point; one term, or one a lot, does not."""
    exw, ddp = (make.bid(name, delivery_term=make.entry(term)) for name, term in (("A", "EXW"), ("B", "DDP")))
    elsewhere = make.bid("B", "4000", "2", delivery_term=make.entry("DDP"))
    lots = (records.lot("1"), records.lot("2"))
    assert unset(make.tender(*lots), exw, ddp) == ["delivery.point"]
    assert unset(make.tender(*lots), exw, elsewhere) == []
    assert unset(make.tender(*lots, delivered_point=make.entry("DDP site")), exw, ddp) == []


def test_needed_rules__payments_that_the_tender_asks_for():
    """A bid with the tender's own payments needs no rule."""
    tender = make.tender(payment_terms=make.payment_terms("8"))
    assert unset(tender, make.bid(payments=(make.payment("1", "52"),))) == []


def test_evaluate__profile_sets_the_rules():
    """A named profile announces what its bids need, and a key of its own overrides it."""
    offer = make.bid(unconditional_discount_percent=make.quantity("5"))
    profile = make.entry("corrected, firm")
    found = make.only(make.tender(settings={"profile": profile}), offer)
    assert found.per_unit.evaluated_price.value == 3800
    own = make.tender(settings={"profile": profile, "unconditional_discounts": "ignore"})
    assert make.only(own, offer).per_unit.evaluated_price.value == 4000
    result = evaluate(make.tender(settings={"profile": profile}), [offer])
    assert result.tender.rules.announced.unconditional_discounts == "deduct"
    assert isinstance(result.tender.rules.announced, AnnouncedRules)


def test_evaluate__unknown_profile_stops():
    """A profile that does not exist is a finding, not a failure."""
    with pytest.raises(EvaluationStopped) as stopped:
        evaluate(make.tender(settings={"profile": make.entry("none such")}), [make.bid()])
    assert [f.field for f in stopped.value.findings] == ["rules.profile"]


def exchange_findings(settings, **fields):
    """Kinds and fields that stop a tender with a foreign bid."""
    tender = make.tender(settings=settings, exchange=records.exchange(FCU="1.25"), **fields)
    try:
        evaluate(tender, [make.bid(currency=make.entry("FCU"))])
    except EvaluationStopped as stopped:
        return [(finding.kind, finding.field) for finding in stopped.findings]
    return []


BEFORE = {"exchange_rate_day": "days before opening"}


@pytest.mark.parametrize(
    ("settings", "fields", "findings"),
    [
        ({"exchange_rate_day": "day of opening"}, {"identity": identity()}, []),
        ({"exchange_rate_day": "day of opening"}, {}, [("rule-unset", "tender.opening_date")]),
        (
            {"exchange_rate_day": "day of opening"},
            {"identity": identity(opening_date=datetime.date(2026, 9, 16))},
            [("tender-conflict", "exchange.date")],
        ),
        (BEFORE, {"identity": identity()}, [("rule-unset", "rules.exchange_rate_days_before")]),
        (
            {**BEFORE, "exchange_rate_days_before": make.quantity("28")},
            {"identity": identity(opening_date=datetime.date(2026, 10, 13))},
            [],
        ),
        (
            {**BEFORE, "exchange_rate_days_before": make.quantity("999999999999")},
            {"identity": identity()},
            [("tender-conflict", "exchange.date")],
        ),
        ({"exchange_rate_day": "day of award"}, {}, [("rule-unset", "award.planned")]),
        ({"exchange_rate_day": "day of award"}, {"planned_award": OPENING}, []),
    ],
)
def test_check_exchange_day__the_stated_date_is_that_of_the_rule(settings, fields, findings):
    """The date beside the rates is the day that the rule names, and a day that is not known is asked for."""
    assert exchange_findings(settings, **fields) == findings


def test_check_exchange_day__no_foreign_bid():
    """Where nothing is converted nobody asks for the day."""
    tender = make.tender(settings={"exchange_rate_day": "day of opening"}, exchange=records.exchange(FCU="1.25"))
    assert make.first(tender, make.bid()) == ["Alder"]
