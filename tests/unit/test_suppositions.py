"""Rankings if a suspicion is right: beside the evaluation, never in it."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation import suppositions
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.result import Status
from lossworth.evaluation.suppositions import SupposedRanking, open_suspicions, suppose_right
from lossworth.findings import Finding
from lossworth.records.bid import Offer
from lossworth.records.decision import Decision
from lossworth.records.tender import Tender
from support import records
from support.confirmed import PROVED, confirm, tender_with
from support.schedules import plain_lot, rivals, schedule

MAXIMUM = {"maximum_load_loss_kw": records.quantity("7.6", "kW")}


def supposed(tender: Tender, offers: list[Offer], decisions: tuple[Decision, ...] = ()) -> tuple[SupposedRanking, ...]:
    """All rankings if suspicions are right."""
    evaluation = evaluate(tender, offers, (), decisions)
    return suppose_right(evaluation, offers, open_suspicions(evaluation, offers))


def per_unit(price: int, no_load: str, load: str) -> Decimal:
    """Total owning cost by hand, at 11,000 and 660 per kW."""
    return price + 11000 * Decimal(no_load) + 660 * Decimal(load)


def test_suppose_right__before_and_after() -> None:
    """A load loss above the maximum as read, and first if it is the total loss."""
    tender = tender_with(PROVED, plain_lot(**MAXIMUM))
    (ranking,) = supposed(tender, [schedule(price="20000", load="8.04", total="8.04"), *rivals()])
    (own,) = (offer for offer in ranking.offers if offer.is_suspected)
    assert (own.name, own.status_before, own.rank_before) == ("Alder", Status.NON_RESPONSIVE, None)
    assert (own.status_after, own.rank_after) == (Status.RANKED, 1)
    assert own.per_unit_before is not None
    assert own.per_unit_after is not None
    assert own.per_unit_before.value == per_unit(20000, "0.64", "8.04")
    assert own.per_unit_after.value == per_unit(20000, "0.64", "7.4")
    assert ranking.first_before != ranking.first_after == ("Alder",)


def test_suppose_right__the_evaluation_stays_as_it_is() -> None:
    """Supposing changes neither the offers nor the result that it starts from."""
    tender = tender_with(PROVED, plain_lot(**MAXIMUM))
    offers = [schedule(load="8.04", total="8.04"), *rivals()]
    evaluation = evaluate(tender, offers)
    suppose_right(evaluation, offers, open_suspicions(evaluation, offers))
    assert evaluate(tender, offers) == evaluation
    assert offers[0].load_loss_kw is not None
    assert offers[0].load_loss_kw.value == Decimal("8.04")


def test_suppose_right__several_of_one_lot_also_together() -> None:
    """Two suspicions of a lot give three rankings, one of another lot gives its own."""
    lots = [plain_lot(id="1"), plain_lot(id="2")]
    slips = [schedule("Alder", "1", load="8.04", total="8.04"), schedule("Zelkova", "1", load="0.74"),
             schedule("Alder", "2", no_load="640")]  # fmt: skip
    found = supposed(tender_with(PROVED, *lots), [*slips, *rivals("1"), *rivals("2")])
    assert [(ranking.before.lot.id, len(ranking.suspicions)) for ranking in found] == [
        ("1", 1),
        ("1", 1),
        ("1", 2),
        ("2", 1),
    ]
    assert [offer.name for offer in found[2].offers if offer.is_suspected] == ["Alder", "Zelkova"]


def test_suppose_right__a_suspicion_without_a_figure_gives_none() -> None:
    """What only the bidder can say is not supposed."""
    assert supposed(tender_with(PROVED, plain_lot()), [schedule(no_load="0.200"), *rivals()]) == ()


def test_suppose_right__a_tie_has_two_names() -> None:
    """A supposed figure that makes a tie puts both first."""
    twin = schedule("Birch", price="21000", no_load="0.640", load="7.40")
    (ranking,) = supposed(tender_with(PROVED, plain_lot()), [schedule(load="8.04", total="8.04"), twin])
    assert (ranking.first_before, ranking.first_after) == (("Birch",), ("Alder", "Birch"))


def test_suppose_right__where_the_evaluation_would_stop(monkeypatch: pytest.MonkeyPatch) -> None:
    """A supposed figure that needs a rule which is not announced is said, not raised."""
    tender = tender_with(PROVED, plain_lot())
    offers = [schedule(load="8.04", total="8.04"), *rivals()]
    evaluation = evaluate(tender, offers)

    def stopped(*_: object) -> None:
        raise EvaluationStopped([Finding("rule-unset", "rules.tie_order", "must be announced")])

    monkeypatch.setattr(suppositions, "evaluate", stopped)
    (ranking,) = suppose_right(evaluation, offers, open_suspicions(evaluation, offers))
    assert (ranking.after, ranking.offers, ranking.first_after) == (None, (), ())
    assert ranking.why_none == "rules.tie_order: must be announced"


def test_open_suspicions__a_confirmed_value_is_no_longer_open() -> None:
    """After the answer there is no suspicion, and the evaluation uses the confirmed value."""
    tender = tender_with(PROVED, plain_lot(**MAXIMUM))
    offers = [schedule(price="20000", load="8.04", total="8.04"), *rivals()]
    evaluation = evaluate(tender, offers, (), [confirm("load_loss_kw", "7.4", "kW")])
    assert open_suspicions(evaluation, offers) == ()
    winner = evaluation.lots[0].winners[0]
    assert (winner.name, winner.per_unit.total_owning_cost is not None) == ("Alder", True)
    assert [finding.kind for finding in evaluation.findings if finding.kind.startswith("apparent")] == []


def test_open_suspicions__are_the_questions_of_the_evaluation() -> None:
    """The same findings stand in the evaluation, as notes."""
    offers = [schedule(load="8.04", total="8.04"), *rivals()]
    evaluation = evaluate(tender_with(PROVED, plain_lot()), offers)
    asked = {finding for finding in evaluation.findings if finding.kind.startswith("apparent-error-")}
    assert asked == {each.finding for each in open_suspicions(evaluation, offers)} != set()


def test_suppose_right__other_decisions_count_as_they_do_in_the_evaluation() -> None:
    """A confirmed value of another bidder stands in both rankings."""
    tender = tender_with(PROVED, plain_lot(**MAXIMUM))
    slips = [schedule("Alder", load="8.04", total="8.04"), schedule("Zelkova", load="8.04", total="8.04")]
    (ranking,) = supposed(tender, [*slips, *rivals()], (confirm("load_loss_kw", "7.4", "kW", "Zelkova"),))
    other = next(offer for offer in ranking.offers if offer.name == "Zelkova")
    assert (other.is_suspected, other.status_before, other.status_after) == (False, Status.RANKED, Status.RANKED)
