"""Waivers and statuses by decision: who, when and why stand in the result, beside what they set aside."""

from __future__ import annotations

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Effect
from support import commercial as make
from support import records

LOT = records.lot(latest_delivery_weeks=make.quantity("30"), maximum_load_loss_kw=make.quantity("2", "kW"))
LATE = make.bid(delivery_weeks=make.quantity("31"))
ON_TIME = make.bid("Birch", "4100", delivery_weeks=make.quantity("30"))


def evaluated(*decisions, offers=(LATE, ON_TIME), lot=LOT):
    """The evaluation, and the offer of the first bidder in it."""
    result = evaluate(make.tender(lot), offers, (), decisions)
    return result, next(offer for offer in result.lots[0].offers if offer.name == "Alder")


def test_decided__waived_finding_keeps_its_text():
    """A waived deviation is a note with the decision beside it, and the offer is ranked."""
    waiver = make.decide("waive", field="delivery-too-late")
    result, found = evaluated(waiver)
    (finding,) = found.findings
    assert (found.status, found.rank, finding.kind, finding.effect) == ("ranked", 1, "delivery-too-late", Effect.NOTE)
    assert finding.rule == "must not exceed 30 weeks (tender.toml:1)"
    assert finding.statement.endswith(
        "; waived by the committee on 2026-09-25: letter of the bidder; evidence: file 7 (decisions.toml:3)"
    )
    assert found.decisions == (waiver,)
    assert finding in result.findings


def test_decided__a_waiver_that_moves_the_ranking_is_told():
    """An offer that leads by a waiver is named with those that it stands before."""
    result, _ = evaluated(make.decide("waive", field="delivery-too-late"))
    (told,) = (finding for finding in result.findings if finding.kind == "waiver-moves-ranking")
    assert (told.field, told.rule) == ("rank 1", "is by a waiver before Birch")
    dear = make.bid(price="5000", delivery_weeks=make.quantity("31"))
    result, _ = evaluated(make.decide("waive", field="delivery-too-late"), offers=(dear, ON_TIME))
    assert not any(finding.kind == "waiver-moves-ranking" for finding in result.findings)


def test_decided__waives_one_kind_only():
    """A second deviation still leaves the offer out."""
    both = make.bid(delivery_weeks=make.quantity("31"), load_loss_kw=make.quantity("2.1", "kW"))
    _, found = evaluated(make.decide("waive", field="delivery-too-late"), offers=(both,))
    assert found.status == "non-responsive"


def test_decided__a_value_for_a_limit_alone_can_be_waived():
    """An offer can be ranked without the value that only a limit needs."""
    silent = make.bid()
    _, found = evaluated(make.decide("waive", field="limit-not-answered"), offers=(silent,))
    assert (found.status, found.rank) == ("ranked", 1)


@pytest.mark.parametrize("decision", [{"field": "value-missing"}, {"status": "evaluate"}])
def test_decided__a_missing_loss_cannot(decision):
    """Nobody can decide a missing loss away, and the papers say that the decision has no effect."""
    kind = "waive" if "field" in decision else "change status"
    without = make.bid(load_loss_kw=None, delivery_weeks=make.quantity("9"))
    result, found = evaluated(make.decide(kind, **decision), offers=(without, ON_TIME))
    assert (found.status, found.decisions) == ("not evaluated", ())
    assert any(finding.kind == "decision-not-applied" for finding in result.findings)


def test_decided__a_refused_correction_cannot():
    """The bidder's own refusal stands."""
    settings = {"arithmetic_errors": "correct", "unit_price_against_total": "total governs"}
    offer = make.bid(total_price=make.quantity("42000", "NCU"))
    decisions = (make.decide("refuse correction"), make.decide("waive", field="correction-refused", line=9))
    found = make.only(make.tender(settings=settings), offer, decisions=decisions)
    assert found.status == "non-responsive"


@pytest.mark.parametrize(
    ("status", "kind"),
    [("non-responsive", "status-set-non-responsive"), ("not evaluated", "status-set-not-evaluated")],
)
def test_decided__left_out_by_hand(status, kind):
    """A recorded status takes a ranked offer out, with reason and name in the finding."""
    decision = make.decide("change status", "Birch", status=status)
    result, _ = evaluated(decision)
    found = next(offer for offer in result.lots[0].offers if offer.name == "Birch")
    assert (found.status, found.rank, found.decisions) == (status, None, (decision,))
    assert found.findings[-1].kind == kind
    assert "by the committee on 2026-09-25: letter of the bidder" in found.findings[-1].rule


def test_decided__taken_in_by_hand():
    """The status "evaluate" sets aside whatever makes the offer non-responsive; each finding keeps its text."""
    both = make.bid(delivery_weeks=make.quantity("31"), load_loss_kw=make.quantity("2.1", "kW"))
    _, found = evaluated(make.decide("change status", status="evaluate"), offers=(both,))
    assert found.status == "ranked"
    assert make.kinds(found) == ["load-loss-above-maximum", "delivery-too-late", "status-set-evaluated"]
    assert [bool(finding.waiver) for finding in found.findings] == [True, True, False]


def test_decided__the_last_status_holds():
    """The file is append-only: a later status replaces an earlier one, which is reported as not applied."""
    first = make.decide("change status", "Birch", status="non-responsive")
    last = make.decide("change status", "Birch", line=9, status="not evaluated")
    result, _ = evaluated(first, last)
    found = next(offer for offer in result.lots[0].offers if offer.name == "Birch")
    assert (found.status, found.decisions) == ("not evaluated", (last,))
    (unused,) = (finding for finding in result.findings if finding.kind == "decision-not-applied")
    assert unused.place == first.place


@pytest.mark.parametrize(
    "decision",
    [
        make.decide("waive", "Nobody", field="delivery-too-late"),
        make.decide("waive", "Alder", "9", field="delivery-too-late"),
        make.decide("waive", "Birch", field="delivery-too-late"),
        make.decide("accept correction", "Birch"),
        make.decide("break tie", "Birch", order=1),
        make.decide("change status", "Birch", status="evaluate"),
    ],
)
def test_unused_decisions__what_fits_nothing_is_reported(decision):
    """A decision that names no offer, or finds nothing to act on, is not passed over in silence."""
    result, _ = evaluated(decision)
    (finding,) = (finding for finding in result.findings if finding.kind == "decision-not-applied")
    assert (finding.place, finding.effect) == (decision.place, Effect.NOTE)


def test_decided__alternative_is_named_in_full():
    """A decision on a bidder's base offer does not act on its alternative."""
    tender = make.tender(LOT, settings={"alternatives": "as offers of their own"})
    other = make.bid(alternative="ester", delivery_weeks=make.quantity("31"))
    waiver = make.decide("waive", field="delivery-too-late")
    statuses = {
        offer.name: offer.status.value for offer in evaluate(tender, [LATE, other], (), [waiver]).lots[0].offers
    }
    assert statuses == {"Alder": "ranked", "Alder, alternative ester": "non-responsive"}


def test_evaluate__confirmed_value_in_three_layers():
    """As read, as confirmed, as evaluated: none overwrites another."""
    from support.confirmed import PROVED, confirm

    tender = make.tender(settings={"clarifications": PROVED})
    offer = make.bid(load_loss_kw=make.quantity("1.32", "kW"), total_loss_kw=make.quantity("1.32", "kW"))
    decision = confirm("load_loss_kw", "1.20", "kW")
    found = make.only(tender, offer, decisions=(decision,))
    (correction,) = found.corrections
    assert (str(correction.as_read.value), str(correction.corrected.value)) == ("1.32", "1.20")
    assert (str(found.offer.load_loss_kw.value), str(found.on_basis.load_loss.value)) == ("1.32", "1.20")
    assert found.per_unit.load_cost.value == 792
    assert found.decisions == (decision,)
