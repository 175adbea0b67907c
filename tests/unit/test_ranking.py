"""Ranks, ties, margins, and what leaves an offer unranked."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.ranking import competition_ranks
from lossworth.findings import Finding
from support import records as make


def ranked(*offers, lot=None):
    """Bidder, status and rank of each offer, in the order of the papers."""
    result = evaluate(make.tender(lot or make.lot()), offers).lots[0]
    return [(o.bidder, o.status.value, o.rank) for o in result.offers]


def test_competition_ranks__tie_skips():
    """Two on rank 1 leave no rank 2."""
    assert competition_ranks([D("2"), D("1"), D("1.00"), D("3")]) == (3, 1, 1, 4)


def test_rank_offers__dearer_low_loss_bid_wins():
    """The lower price loses where its losses cost more."""
    cheap = make.priced("Cheap", "4000", "0.130", "1.250")
    lean = make.priced("Lean", "4700", "0.058", "1.150")
    assert ranked(cheap, lean) == [("Lean", "ranked", 1), ("Cheap", "ranked", 2)]


def test_rank_offers__tie_to_the_cent():
    """Equal totals share the rank and stand in the order of names; the run says so."""
    one = make.priced("Birch", "100", "0.1", "1")
    other = make.priced("Alder", "100", "0.1", "1")
    assert ranked(one, other) == [("Alder", "ranked", 1), ("Birch", "ranked", 1)]
    assert [f.kind for f in evaluate(make.tender(), (one, other)).findings] == ["tie"]


def test_rank_offers__one_cent_is_no_tie():
    """A cent a unit decides."""
    assert ranked(make.priced("A", "100.01", "0.1", "1"), make.priced("B", "100", "0.1", "1"))[0][0] == "B"


def test_rank_offers__margin_in_money_percent_and_kw():
    """The winner's margin is stated to the next offer, in all four ways."""
    first, second = (
        evaluate(make.tender(), (make.priced("A", "4000", "0.1", "1"), make.priced("B", "4110", "0.1", "1")))
        .lots[0]
        .offers
    )
    margin = first.margin
    assert (margin.to, margin.amount.value) == ("B", D("1100.00"))
    assert (margin.no_load_loss_kw, round(margin.load_loss_kw, 6)) == (D("0.01"), D("0.166667"))
    assert round(margin.percent_of_winner, 6) == D("1.909722")
    assert second.margin is None


def test_rank_offers__margin_inside_a_tie_is_zero():
    """Members of a tie name each other, at zero."""
    a, b, c = (
        evaluate(make.tender(), [make.priced(n, p, "0.1", "1") for n, p in (("A", "10"), ("B", "10"), ("C", "11"))])
        .lots[0]
        .offers
    )
    assert (a.margin.to, a.margin.amount.value) == ("B", 0)
    assert (b.margin.to, b.margin.amount.value) == ("A", 0)
    assert c.margin is None


def test_evaluate__missing_load_loss_is_not_zero():
    """An offer without load loss is listed and not ranked."""
    assert ranked(make.offer("A", load_loss_kw=None), make.offer("B")) == [
        ("B", "ranked", 1),
        ("A", "not evaluated", None),
    ]


def test_evaluate__beyond_a_limit_is_not_ranked():
    """The cheapest offer above the maximum is non-responsive, and the next one leads."""
    lot = make.lot(maximum_load_loss_kw=make.quantity("1.250", "kW"))
    offers = (make.priced("A", "1000", "0.1", "1.251"), make.priced("B", "4000", "0.1", "1.250"))
    assert ranked(*offers, lot=lot) == [("B", "ranked", 1), ("A", "non-responsive", None)]


def test_evaluate__not_evaluated_comes_before_non_responsive():
    """An offer with both faults counts as not evaluated: what is not known cannot be judged."""
    lot = make.lot(maximum_no_load_loss_kw=make.quantity("0.1", "kW"))
    assert ranked(make.offer("A", load_loss_kw=None), lot=lot) == [("A", "not evaluated", None)]


def test_evaluate__unknown_currency():
    """A price without an exchange rate is not evaluated."""
    result = evaluate(make.tender(), [make.offer(currency=make.entry("XXX"))]).lots[0].offers[0]
    assert [f.kind for f in result.findings] == ["currency-unknown"]
    assert result.status == "not evaluated"


def test_evaluate__intake_finding_is_not_repeated():
    """What intake found about a field is not found again."""
    known = Finding("value-unreadable", "load loss", "must be a number", None, "n/a", "Alder", "1")
    result = evaluate(make.tender(), [make.offer(load_loss_kw=None)], [known]).lots[0].offers[0]
    assert result.findings == (known,)


def test_evaluate__stops_on_a_stopping_finding():
    """No evaluation comes out where a finding stops it."""
    with pytest.raises(EvaluationStopped) as stopped:
        evaluate(make.tender(), [], [Finding("lot-unknown", "lot", "must be in the tender", None, "9")])
    assert [f.kind for f in stopped.value.findings] == ["lot-unknown"]


def test_evaluate__lot_without_offers():
    """A lot that nobody offers is reported."""
    assert [f.kind for f in evaluate(make.tender(), []).findings] == ["lot-without-ranking"]
