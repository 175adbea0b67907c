"""Decided cases, as invented tenders with the cases' differences: unit of the rate, rating base, missing losses.

INVENTED DATA: bidders, ratings, losses and prices are made up. Out of the decisions come the rate of 61 USD for each
0.1 kW, the 10.1 kW by which the low bid's loss was understated, and the 2,792.60 USD between the two lowest bids
(19,167.60 less 16,375; whether these are prices or evaluated amounts was not readable). The sums are ours.

References
----------
.. [1] US Comptroller General, decision B-147715 (1961): "evaluated at $61 for each one-tenth of one kilowatt"; the low
   bidder's total loss of 25.24 kW seems "calculated at the normal KV.-A rating", 35.34 kW intended.
.. [2] US Comptroller General, decision B-234857 (1989): a bid without its transformer losses was properly rejected.
"""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.result import EvaluatedOffer, Evaluation, Status
from lossworth.evaluation.suppositions import open_suspicions, suppose_right
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from lossworth.report.build_internal_paper import build_internal_paper
from lossworth.report.build_questions import build_letters
from lossworth.report.internal_paper import internal_paper_html
from lossworth.report.letters import letter_text
from lossworth.report.view import RecordView
from support import records
from support.confirmed import PROVED, confirm, tender_with
from support.schedules import plain_lot, schedule

#: Between the two lowest bids, and what 10.1 kW cost at the rate per 0.1 kW and, misread, per kW. [USD]
DIFFERENCE = Decimal("2792.60")
PER_TENTH, PER_KW = Decimal("6161.00"), Decimal("616.10")


def case_tender(per: str) -> Tender:
    """Invented: one unit of 1000/1500 kVA, 6 % impedance at 1500 kVA, 61 for each unit of loss."""
    lot = plain_lot(
        rated_power_kva=records.quantity("1500", "kVA"),
        description=records.entry("INVENTED after B-147715: 1000/1500 kVA"),
        cooling=records.entry("ONAN/ONAF"),
        quantity=records.quantity("1"),
        impedance_percent=records.quantity("6", "%"),
        rates=records.rates("61", "61", per=per),
    )
    return tender_with(PROVED, lot)


def case_offers(per_kw: int) -> list[Offer]:
    """Invented: the low bid states its load loss of 8.08 kW and 4 % at 1000 kVA; the other is dearer by the difference.

    At 1500 kVA the low bid has 18.18 kW, 10.1 kW more.
    """
    low_price, no_load, load = Decimal(16375), Decimal("2.4"), Decimal("8.08")
    other_losses = Decimal("2.3") + Decimal("17.9")
    other_price = low_price + DIFFERENCE + per_kw * (no_load + load - other_losses)
    return [
        schedule("Alder", price=str(low_price), no_load="2.4", load="8.08", impedance="4"),
        schedule("Birch", price=str(other_price), no_load="2.3", load="17.9", impedance="6"),
    ]


def offer_of(evaluation: Evaluation, bidder: str) -> EvaluatedOffer:
    """One bidder's offer."""
    return next(offer for offer in evaluation.lots[0].offers if offer.bidder == bidder)


def total(offer: EvaluatedOffer) -> Decimal:
    """Total owning cost of the unit."""
    figure = offer.per_unit.total_owning_cost
    assert figure is not None
    return figure.value


@pytest.mark.parametrize(
    ("per", "per_kw", "after", "first"),
    [("0.1 kW", 610, DIFFERENCE - PER_TENTH, "Birch"), ("kW", 61, DIFFERENCE - PER_KW, "Alder")],
)
def test_b_147715__unit_of_the_rate_and_rating_base_decide(per: str, per_kw: int, after: Decimal, first: str) -> None:
    """As read the low bid leads by 2,792.60; on the right base it loses by 3,368.40 per 0.1 kW, and leads per kW."""
    tender, offers = case_tender(per), case_offers(per_kw)
    as_read = evaluate(tender, offers)
    assert total(offer_of(as_read, "Birch")) - total(offer_of(as_read, "Alder")) == DIFFERENCE
    confirmed = evaluate(tender, offers, (), [confirm("load_loss_kw", "18.18", "kW")])
    lead = total(offer_of(confirmed, "Birch")) - total(offer_of(confirmed, "Alder"))
    assert lead == after
    assert [offer.name for offer in confirmed.lots[0].winners] == [first]


def test_b_147715__sums_of_the_case() -> None:
    """10.1 kW at 61 USD for each 0.1 kW turn the order, read as per kW they do not."""
    assert Decimal("35.34") - Decimal("25.24") == Decimal("10.1") == Decimal("18.18") - Decimal("8.08")
    assert (Decimal("10.1") * 610, Decimal("10.1") * 61) == (PER_TENTH, PER_KW)
    assert Decimal("19167.60") - 16375 == DIFFERENCE
    assert PER_KW < DIFFERENCE < PER_TENTH


def test_b_147715__the_error_is_questioned_with_its_proof() -> None:
    """Impedance and load loss at 1000 kVA are asked about; the letter gives nothing away."""
    tender, offers = case_tender("0.1 kW"), case_offers(610)
    evaluation = evaluate(tender, offers)
    (suspicion,) = open_suspicions(evaluation, offers)
    assert (suspicion.offer, suspicion.finding.kind) == ("Alder", "apparent-error-rating")
    figures = {each.field: (each.value.value, each.is_proved_by_bid) for each in suspicion.suppositions}
    assert figures == {"load_loss_kw": (Decimal("18.18"), True), "impedance_percent": (Decimal(6), True)}
    (letter,) = build_letters(tender, offers, [suspicion])
    text = letter_text(letter)
    assert "8.08 kW" in text
    assert [told for told in ("Birch", "16375", "16,375", "rank", "18.18") if told in text] == []


def test_b_147715__internal_paper_shows_both_rankings() -> None:
    """As evaluated and if right: the other bidder would be first, by 3,368.40."""
    tender, offers = case_tender("0.1 kW"), case_offers(610)
    evaluation = evaluate(tender, offers)
    suspicions = open_suspicions(evaluation, offers)
    (ranking,) = suppose_right(evaluation, offers, suspicions)
    after = {offer.name: offer for offer in ranking.offers}
    figures = [after[name].per_unit_after for name in ("Alder", "Birch")]
    low, other = (figure.value for figure in figures if figure is not None)
    assert low - other == PER_TENTH - DIFFERENCE == Decimal("3368.40")
    assert (after["Alder"].rank_after, after["Birch"].rank_after) == (2, 1)
    assert ranking.first_after == ("Birch",)
    record = RecordView("0", "2026-01-01T00:00:00Z", ())
    page = internal_paper_html(build_internal_paper(tender, suspicions, [ranking], record))
    assert "INTERNAL — NOT PART OF THE EVALUATION" in page
    assert all(shown in page for shown in (f"{low:,.2f}", f"{other:,.2f}"))


@pytest.mark.parametrize("missing", ["no_load", "load"])
def test_b_234857__a_bid_without_its_losses_is_not_evaluated(missing: str) -> None:
    """Missing is not zero: the cheapest bid without a loss is not ranked and has no total; as zero it would win."""
    tender, offers = case_tender("0.1 kW"), case_offers(610)
    silent = schedule("Cedar", **({"price": "14000", "no_load": "2.4", "load": "17.9"} | {missing: None}))
    evaluation = evaluate(tender, [*offers, silent])
    found = offer_of(evaluation, "Cedar")
    assert (found.status, found.rank, found.per_unit.total_owning_cost) == (Status.NOT_EVALUATED, None, None)
    assert "value-missing" in {finding.kind for finding in found.findings}
    as_zero = schedule("Cedar", **({"price": "14000", "no_load": "2.4", "load": "17.9"} | {missing: "0"}))
    stated = Decimal("17.9") if missing == "no_load" else Decimal("2.4")
    assert as_zero.unit_price is not None
    assert as_zero.unit_price.value + 610 * stated < total(offer_of(evaluation, "Birch"))


def test_b_234857__nothing_fills_the_gap_later() -> None:
    """A loss that the bid does not prove cannot be supplied by a clarification."""
    tender = case_tender("0.1 kW")
    silent = schedule("Cedar", price="14000", no_load="2.4", load=None)
    evaluation = evaluate(tender, [silent, *case_offers(610)], (), [confirm("load_loss_kw", "17.9", "kW", "Cedar")])
    assert offer_of(evaluation, "Cedar").status is Status.NOT_EVALUATED
    assert "confirmation-not-allowed" in {finding.kind for finding in evaluation.findings}
