"""The demo's two mis-stated bids: asked about with their proofs, and, once confirmed, at the places that they take."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.cli.inputs import Reading, read_everything
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.responsiveness import peak_efficiency_index_percent
from lossworth.evaluation.result import EvaluatedOffer, Evaluation, Status
from lossworth.evaluation.suppositions import open_suspicions, suppose_right
from lossworth.findings import any_stops
from lossworth.intake.decision_file import read_decisions
from lossworth.intake.tender_folder import InputFile
from lossworth.records.decision import Decision
from lossworth.records.tender import Tender
from lossworth.report.build_questions import build_letters
from lossworth.report.letters import letter_html, letter_text
from support.confirmed import PROVED

SAMPLE = Path(__file__).resolve().parents[2] / "sample_bids"

ANSWERS = """\
[[decision]]
kind = "confirm value"
bidder = "Cedarfell Transformers"
lot = "3"
field = "load_loss_kw"
value = 7.400
reason = "INVENTED: letter of the bidder, total loss written as load loss"
who = "INVENTED: evaluation committee"
when = 2026-09-25
evidence = "INVENTED: file 7, page 1"

[[decision]]
kind = "confirm value"
bidder = "Damsonby Power Apparatus"
lot = "4"
field = "load_loss_kw"
value = 141.89175
reason = "INVENTED: letter of the bidder, stated at 20 MVA"
who = "INVENTED: evaluation committee"
when = 2026-09-25
evidence = "INVENTED: file 7, page 2"

[[decision]]
kind = "confirm value"
bidder = "Damsonby Power Apparatus"
lot = "4"
field = "impedance_percent"
value = 12.4425
reason = "INVENTED: letter of the bidder, stated at 20 MVA"
who = "INVENTED: evaluation committee"
when = 2026-09-25
evidence = "INVENTED: file 7, page 2"
"""


@pytest.fixture(scope="module")
def demo() -> tuple[Tender, Reading]:
    """The demo, with a rule that lets a clarification confirm what the bid itself proves."""
    reading = read_everything(SAMPLE, ())
    assert reading.tender is not None
    assert not any_stops(reading.findings)
    rules = reading.tender.rules
    announced = rules.announced.model_copy(update={"clarifications": PROVED})
    tender = reading.tender.model_copy(update={"rules": rules.model_copy(update={"announced": announced})})
    return tender, reading


@pytest.fixture(scope="module")
def as_read(demo: tuple[Tender, Reading]) -> Evaluation:
    """The demo without decisions of bidders."""
    tender, reading = demo
    return evaluate(tender, reading.offers, reading.findings)


@pytest.fixture(scope="module")
def answers(demo: tuple[Tender, Reading], tmp_path_factory: pytest.TempPathFactory) -> tuple[Decision, ...]:
    """The bidders' answers, read from a file."""
    path = tmp_path_factory.mktemp("answers") / "decisions.toml"
    path.write_text(ANSWERS, encoding="utf-8")
    tender, reading = demo
    decisions, findings = read_decisions(InputFile(path, path.name), tender, reading.offers)
    assert findings == ()
    return decisions


def offer_of(evaluation: Evaluation, lot: str, bidder: str) -> EvaluatedOffer:
    """One offer of the result."""
    (result,) = (each for each in evaluation.lots if each.lot.id == lot)
    return next(offer for offer in result.offers if offer.bidder.startswith(bidder))


def total(offer: EvaluatedOffer) -> Decimal:
    """Total owning cost of one unit."""
    figure = offer.per_unit.total_owning_cost
    assert figure is not None
    return figure.value


def test_demo__two_questions_and_no_other(demo: tuple[Tender, Reading], as_read: Evaluation) -> None:
    """Of 27 offers two are asked about; amorphous cores and low prices are not."""
    found = open_suspicions(as_read, demo[1].offers)
    asked = [(each.offer, each.finding.lot, each.finding.kind) for each in found]
    assert asked == [
        ("Cedarfell Transformers", "3", "apparent-error-total-as-load-loss"),
        ("Damsonby Power Apparatus", "4", "apparent-error-rating"),
    ]


def test_demo__proofs_by_the_bidders_own_schedules(demo: tuple[Tender, Reading], as_read: Evaluation) -> None:
    """8.040 less 0.640 kW by the total column; 57.2 kW and 7.9 % times 31.5/20, squared and plain."""
    total_as_load, rating = open_suspicions(as_read, demo[1].offers)
    assert {s.label: (s.text, str(s.place)) for s in total_as_load.statements} == {
        "load loss": ("8.04 kW", "bids/cedarfell.xlsx[Offers]!E4"),
        "total loss": ("8.04 kW", "bids/cedarfell.xlsx[Offers]!F4"),
        "no-load loss": ("0.64 kW", "bids/cedarfell.xlsx[Offers]!D4"),
    }
    figures = {s.field: s.value.value for each in (total_as_load, rating) for s in each.suppositions}
    assert figures == {"load_loss_kw": Decimal("141.89175"), "impedance_percent": Decimal("12.4425")}
    assert [s.value.value for s in total_as_load.suppositions] == [Decimal("7.4")]
    assert all(s.is_proved_by_bid for each in (total_as_load, rating) for s in each.suppositions)


def test_demo__what_the_ranking_would_be(demo: tuple[Tender, Reading], as_read: Evaluation) -> None:
    """Cedarfell first in lot 3 in place of Damsonby; Damsonby fourth in lot 4."""
    offers = demo[1].offers
    rankings = suppose_right(as_read, offers, open_suspicions(as_read, offers), demo[1].findings)
    told = {}
    for ranking in rankings:
        (own,) = (offer for offer in ranking.offers if offer.is_suspected)
        assert own.per_unit_after is not None
        told[ranking.before.lot.id] = (own.rank_before, own.rank_after, own.per_unit_after.value, ranking.first_after)
    assert told == {
        "3": (None, 1, Decimal("44128.64"), ("Cedarfell Transformers",)),
        "4": (None, 4, Decimal("1116630.42"), ("Birchlune Electric",)),
    }


def test_demo__once_confirmed(demo: tuple[Tender, Reading], as_read: Evaluation, answers: tuple[Decision, ...]) -> None:
    """The confirmed offers take these places, everything else stays, and no question is left."""
    tender, reading = demo
    confirmed = evaluate(tender, reading.offers, reading.findings, answers)
    cedarfell, damsonby = offer_of(confirmed, "3", "Cedarfell"), offer_of(confirmed, "4", "Damsonby")
    assert (cedarfell.rank, total(cedarfell)) == (1, Decimal("44128.64"))
    assert (damsonby.rank, total(damsonby)) == (4, Decimal("1116630.42"))
    assert offer_of(as_read, "3", "Cedarfell").status is Status.NON_RESPONSIVE
    assert offer_of(as_read, "4", "Damsonby").status is Status.NON_RESPONSIVE
    assert total(offer_of(as_read, "4", "Damsonby")) == Decimal("946400.00")
    assert confirmed.lots[:2] == as_read.lots[:2]
    assert open_suspicions(confirmed, reading.offers) == ()
    losses = (damsonby.on_basis.no_load_loss, damsonby.on_basis.load_loss)
    no_load, load = (figure.value for figure in losses if figure is not None)
    assert round(peak_efficiency_index_percent(no_load, load, Decimal(31500)), 4) == Decimal("99.7130")


def test_demo__a_stricter_rule_leaves_both_as_read(
    demo: tuple[Tender, Reading], as_read: Evaluation, answers: tuple[Decision, ...]
) -> None:
    """The same answers under the other setting change no rank: the rule alone decides lot 3."""
    tender, reading = demo
    announced = tender.rules.announced.model_copy(update={"clarifications": "may not change price or guarantee"})
    strict = tender.model_copy(update={"rules": tender.rules.model_copy(update={"announced": announced})})
    evaluation = evaluate(strict, reading.offers, reading.findings, answers)
    ranks = [[(offer.name, offer.rank) for offer in lot.offers] for lot in evaluation.lots]
    assert ranks == [[(offer.name, offer.rank) for offer in lot.offers] for lot in as_read.lots]
    kinds = [finding.kind for finding in evaluation.findings]
    assert kinds.count("confirmation-not-allowed") == 3


def test_demo__letters_do_not_mention_the_ranking(demo: tuple[Tender, Reading], as_read: Evaluation) -> None:
    """No rank, price or other bidder stands in a letter of the demo; its remark on invented data does."""
    tender, reading = demo
    letters = build_letters(tender, reading.offers, open_suspicions(as_read, reading.offers), as_read.findings)
    assert [letter.file_stem for letter in letters] == ["cedarfell-transformers", "damsonby-power-apparatus"]
    for letter in letters:
        others = {offer.bidder.value.split()[0] for offer in reading.offers} - {letter.bidder.split()[0]}
        amounts = {q.text for offer in reading.offers if (q := offer.unit_price) is not None}
        for printed in (letter_text(letter), letter_html(letter)):
            assert "INVENTED DATA" in printed
            body = " ".join(printed.split("</style>")[-1].split()).replace(letter.remark, "")
            told = [*others, *amounts, "7.4 kW", "141.89", "12.44", "44,128", "rank", "price", "first"]
            assert [word for word in told if word in body] == []
