"""Corrections, price steps, contract price and decisions in the view: ids of figures, texts made harmless."""

from __future__ import annotations

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.report.build_view import build_view
from lossworth.report.view import RecordView
from support import commercial as make
from support import records


@pytest.fixture
def view():
    """A lot with a corrected total, a discount, an item, a preference, a broken tie and an alternative."""
    settings = {
        "arithmetic_errors": "correct",
        "unit_price_against_total": "total governs",
        "unconditional_discounts": "deduct",
        "preference": "margin added to other prices",
        "alternatives": "as offers of their own",
        "tie_order": ("earlier delivery",),
    }
    priced = {"spare bushing": make.quantity("100", "NCU")}
    offers = [
        make.bid("Al\u202eder", "4000", total_price=make.quantity("42000", "NCU"), item_prices=priced),
        make.bid("Birch", "4400", origin=make.entry("home"), item_prices=priced, delivery_weeks=make.quantity("9")),
        make.bid("Cedar", "4400", origin=make.entry("home"), item_prices=priced),
        make.bid("Cedar", "5000", alternative="ester", item_prices=priced,
                 unconditional_discount_percent=make.quantity("5")),
    ]  # fmt: skip
    tender = make.tender(records.lot(items=(make.item(),)), settings=settings, preference=make.preference())
    decisions = (make.decide("accept correction", "Al\u202eder"),)
    return build_view(evaluate(tender, offers, (), decisions), RecordView("0", "", ()))


def offers(view):
    """Offers of the lot by name."""
    return {offer.bidder: offer for offer in view.lots[0].offers}


def value(view, identity):
    """Value of a figure as printed."""
    return view.figures[identity].text


def test_build_view__correction_in_three_layers(view):
    """As read, as corrected with rule, reason and the bidder's answer; as evaluated in the costs."""
    alder = offers(view)["Al\\u202eder"]
    (correction,) = alder.corrections
    assert (value(view, correction.as_read), value(view, correction.corrected)) == ("4,000.00", "4,160.00")
    assert "the total governs" in correction.rule
    assert correction.decision.startswith("accept correction: letter of the bidder; by the committee on 2026-09-25")
    assert alder.decisions == (correction.decision,)


def test_build_view__steps_end_in_the_amounts(view):
    """The last step of each scope is the amount in the costs."""
    for offer in offers(view).values():
        ends = {step.scope: step.price for step in offer.price_steps}
        assert ends == {"unit": offer.per_unit.evaluated_price, "lot": offer.lot.evaluated_price}


def test_build_view__alternative_has_its_own_name(view):
    """An alternative stands under its own name, with its own figures."""
    found = offers(view)["Cedar, alternative ester"]
    assert [step.name for step in found.price_steps][:2] == ["quoted", "unconditional discount"]
    assert found.contract_price.startswith("lot 1/Cedar%2C alternative ester/")


def test_build_view__preference_and_tie(view):
    """Both rankings, and the criterion that broke the tie."""
    shown = {name: (o.rank_text, o.rank_without_preference, o.tie_decided_by) for name, o in offers(view).items()}
    assert shown == {
        "Birch": ("1", 2, "earlier delivery"),
        "Cedar": ("2", 3, "earlier delivery"),
        "Al\\u202eder": ("3", 1, ""),
        "Cedar, alternative ester": ("4", 4, ""),
    }


def test_build_view__every_id_is_a_figure(view):
    """No step, correction or price refers to a figure that is not there."""
    ids = set()
    for offer in offers(view).values():
        ids |= {identity for step in offer.price_steps for identity in (step.price, step.change)}
        ids |= {identity for each in offer.corrections for identity in (each.as_read, each.corrected)}
        ids |= {offer.contract_price, offer.total_without_preference}
    assert ids - {None} <= set(view.figures)
