"""Ties by the announced order, and the ranking with and without a preference margin."""

from __future__ import annotations

from decimal import Decimal as D

from lossworth.evaluation.evaluate import evaluate
from support import commercial as make
from support import records


def tied(*names_and_losses, order=(), decisions=()):
    """An evaluation of offers at the same total, with their no-load losses and delivery in weeks."""
    offers = [
        records.priced(name, str(D("5320") - 11000 * D(no_load)), no_load, "1.2", delivery_weeks=make.quantity(weeks))
        for name, no_load, weeks in names_and_losses
    ]
    return evaluate(make.tender(settings={"tie_order": order} if order else {}), offers, (), decisions)


def placed(result):
    """Name, rank and deciding criterion, in the order of the papers."""
    return [(offer.name, offer.rank, offer.tie_decided_by) for offer in result.lots[0].offers]


THREE = (("Alder", "0.12", "30"), ("Birch", "0.10", "30"), ("Cedar", "0.12", "20"))


def test_tie_order__first_criterion_then_the_next():
    """Losses part Birch from the two others, delivery these from each other; each says what parted it."""
    result = tied(*THREE, order=("lower no-load loss", "earlier delivery"))
    assert placed(result) == [
        ("Birch", 1, "lower no-load loss"),
        ("Cedar", 2, "lower no-load loss"),
        ("Alder", 3, "earlier delivery"),
    ]
    finding = next(f for f in result.findings if f.kind == "tie-broken")
    assert "1 Birch (lower no-load loss), 2 Cedar (lower no-load loss), 3 Alder (earlier delivery)" in finding.rule
    assert not any(f.kind == "tie" for f in result.findings)


def test_tie_order__what_no_criterion_parts_stays_a_tie():
    """Two offers alike in every criterion share the rank, and the next rank is skipped."""
    result = tied(*THREE[:1], ("Birch", "0.12", "30"), ("Cedar", "0.13", "1"), order=("lower no-load loss",))
    assert placed(result) == [
        ("Alder", 1, "lower no-load loss"),
        ("Birch", 1, "lower no-load loss"),
        ("Cedar", 3, "lower no-load loss"),
    ]
    assert {"tie", "tie-broken"} <= {f.kind for f in result.findings}


def test_tie_order__margins_of_a_broken_tie_are_zero():
    """A broken tie stays visible: the margin is zero."""
    first = tied(*THREE, order=("lower no-load loss",)).lots[0].offers[0]
    assert (first.margin.amount.value, first.above_winner) == (0, 0)


def test_tie_order__missing_delivery_comes_last():
    """An offer that states no delivery time is behind those that do."""
    offers = [records.priced("Alder", "4000", "0.1", "1"),
              records.priced("Birch", "4000", "0.1", "1", delivery_weeks=make.quantity("90"))]  # fmt: skip
    result = evaluate(make.tender(settings={"tie_order": ("earlier delivery",)}), offers)
    assert [name for name, _, _ in placed(result)] == ["Birch", "Alder"]


def drawn(**places):
    """Decisions that record a drawing."""
    return tuple(make.decide("break tie", name, order=place) for name, place in places.items())


def test_tie_order__drawing_of_lots():
    """Recorded lots break the tie, and the decisions count as applied."""
    result = tied(*THREE, order=("drawing of lots",), decisions=drawn(Alder=2, Birch=3, Cedar=1))
    assert placed(result) == [
        ("Cedar", 1, "drawing of lots"),
        ("Alder", 2, "drawing of lots"),
        ("Birch", 3, "drawing of lots"),
    ]
    assert not any(f.kind == "decision-not-applied" for f in result.findings)


def test_tie_order__not_all_drew():
    """While one of the tied offers has no lot the tie stays, and the others' lots are reported as unused."""
    result = tied(*THREE, order=("drawing of lots",), decisions=drawn(Alder=2, Cedar=1))
    assert {rank for _, rank, _ in placed(result)} == {1}
    assert sum(f.kind == "decision-not-applied" for f in result.findings) == 2


def test_tie_order__a_drawing_that_the_tender_does_not_announce():
    """Lots decide nothing where the announced order has no drawing."""
    result = tied(*THREE, order=("lower no-load loss",), decisions=drawn(Alder=1, Cedar=2))
    assert [(name, rank) for name, rank, _ in placed(result)] == [("Birch", 1), ("Alder", 2), ("Cedar", 2)]
    assert sum(f.kind == "decision-not-applied" for f in result.findings) == 2


PREFERENCE = {"settings": {"preference": "margin added to other prices"}, "preference": make.preference("7.5")}


def test_preference__on_prices_only_with_both_rankings():
    """7.5 percent lie on the price of 4,000 and not on losses; the ranking without the margin stands beside."""
    tender = make.tender(**PREFERENCE)
    result = evaluate(tender, [make.bid(), make.bid("Birch", "4100", origin=make.entry(" HOME "))])
    birch, alder = result.lots[0].offers
    assert (birch.name, birch.rank, birch.rank_without_preference) == ("Birch", 1, 2)
    assert (alder.name, alder.rank, alder.rank_without_preference) == ("Alder", 2, 1)
    assert (alder.per_unit.evaluated_price.value, alder.per_unit.no_load_cost.value) == (D("4300.00"), D("1320.00"))
    assert (alder.lot.total_owning_cost.value, alder.total_without_preference.value) == (D("64120.00"), D("61120.00"))
    assert birch.total_without_preference == birch.lot.total_owning_cost
    assert alder.contract_price.value == D("40000.00")


def test_preference__origin_not_stated_is_outside():
    """An offer that is silent on its origin carries the margin, and the papers say why."""
    tender = make.tender(**PREFERENCE)
    found = make.only(tender, make.bid(), make.bid("Birch", "4100", origin=make.entry("home")))
    assert make.kinds(found) == ["commercial-term-not-stated"]
    assert "outside of the group" in found.findings[-1].rule


def test_preference__nobody_in_the_group():
    """The announced rule is kept to the letter, and a note says that the margin lies on all."""
    result = evaluate(make.tender(**PREFERENCE), [make.bid(origin=make.entry("abroad"))])
    assert "preference-without-group" in {f.kind for f in result.findings}
    in_group = evaluate(make.tender(**PREFERENCE), [make.bid(origin=make.entry("home"))])
    assert "preference-without-group" not in {f.kind for f in in_group.findings}


def test_preference__rounded_once_with_the_price():
    """The price with the margin is rounded, not the margin and the price each."""
    found = make.only(make.tender(**PREFERENCE), make.bid(price="10.003"))
    assert found.per_unit.evaluated_price.value == D("10.75")  # 10.753225
    assert found.total_without_preference.value == 10 * (D("10.00") + 2112)


def test_preference__none_announced_gives_no_second_ranking():
    """Without a margin there is one ranking."""
    found = make.only(make.tender(), make.bid(origin=make.entry("abroad")))
    assert (found.rank_without_preference, found.total_without_preference) == (None, None)


def test_preference__tie_without_the_margin_by_the_price_without_it():
    """A tie of the ranking without preference is broken by prices without the margin."""
    settings = {"preference": "margin added to other prices", "tie_order": ("lower evaluated price",)}
    tender = make.tender(settings=settings, preference=make.preference("10"))
    loss = {"home": make.quantity("0.100", "kW"), "away": make.quantity("0.101", "kW")}
    offers = [
        make.bid("Alder", "5000", origin=make.entry("home"), no_load_loss_kw=loss["home"]),
        make.bid("Birch", "4989", origin=make.entry("away"), no_load_loss_kw=loss["away"]),
    ]
    found = {offer.name: offer.rank_without_preference for offer in evaluate(tender, offers).lots[0].offers}
    assert found == {"Alder": 2, "Birch": 1}
