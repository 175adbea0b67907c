"""Papers say one thing once: limits, ties, items, taxes, decisions and remedies agree wherever they stand. INVENTED."""

from __future__ import annotations

import datetime
import io
import re
from dataclasses import replace
from typing import Any

import openpyxl
import pytest

from lossworth.cli.findings_text import echo_findings
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.suppositions import open_suspicions, suppose_right
from lossworth.records.tender import RoundingPoint, Tender
from lossworth.report.build_internal_paper import build_internal_paper
from lossworth.report.build_rates_report import build_rates_report
from lossworth.report.build_rules import build_rules
from lossworth.report.build_told_findings import told_findings
from lossworth.report.build_view import build_view
from lossworth.report.internal_paper import internal_paper_html, internal_paper_json
from lossworth.report.page import page_html
from lossworth.report.terminal import evaluation_text, rates_text
from lossworth.report.view import EvaluationView, RecordView
from lossworth.report.wording import limits
from lossworth.report.workbook import workbook_bytes
from support import commercial as make
from support import records
from support.confirmed import PROVED, tender_with
from support.page_views import page_view
from support.priced_views import priced_view
from support.rules_tenders import full_lot, full_tender, ruled
from support.schedules import plain_lot, rivals, schedule

RECORD = RecordView("0", "2026-09-26T08:00:00Z", ())
BUSHING = {"spare bushing": make.quantity("100", "NCU")}
DEAR_BUSHING = {"spare bushing": make.quantity("900", "NCU")}


def view_of(tender: Tender, *offers: Any, decisions: tuple[Any, ...] = ()) -> EvaluationView:
    """View of these offers."""
    return build_view(evaluate(tender, offers, (), decisions), RECORD)


def gaps(tender: Tender) -> str:
    """What the rules sheet calls incomplete."""
    return "\n".join(build_rules(tender, "0", "").gaps)


@pytest.fixture(scope="module")
def by_lot() -> EvaluationView:
    """Alder is cheaper by the unit, Birch by the lot."""
    tender = make.tender(records.lot(items=(make.item(),)))
    return view_of(tender, make.bid(item_prices=DEAR_BUSHING), make.bid("Birch", "4100", item_prices=BUSHING))


# Limits


def test_limits__sound_liquid_pcb_and_regulation_stand_on_the_page() -> None:
    """The evaluation names every limit that the rules sheet announces."""
    phrases = limits(full_lot())
    for part in ("sound level at most", "insulating liquid", "free of PCB", "the limits of"):
        assert any(part in phrase for phrase in phrases), part
    (sentence,) = (s for s in build_rules(full_tender(), "0", "").lots[0].sentences if "only within these limits" in s)
    assert sentence == f"An offer is responsive only within these limits: {'; '.join(phrases)}."
    lot = records.lot(maximum_sound_level_db=make.quantity("55"))
    html = page_html(view_of(make.tender(lot), make.bid(sound_level_db=make.quantity("50"))))
    assert "sound level at most 55 dB(A)" in html


# Rules sheet


@pytest.mark.parametrize(("setting", "is_stated"), [("none", False), ("margin added to other prices", True)])
def test_build_rules__preference_only_where_the_rule_uses_it(setting: str, *, is_stated: bool) -> None:
    """A margin that the rule leaves out is not announced as one that is added."""
    view = build_rules(full_tender(rules=ruled(preference=setting)), "0", "")
    prices = "\n".join(view.sections[1].sentences)
    assert ("is added, for comparison only" in prices) is is_stated
    assert any("is not used, since the rule applies none" in each for each in view.silent) is not is_stated


def test_build_rules__gaps_name_what_is_missing() -> None:
    """Each rule that cannot work is named with the table that it lacks."""
    assert "[taxes]" in gaps(make.tender(settings={"taxes": "excluded"}))
    assert "[payment]" in gaps(make.tender(settings={"payment_terms": "discount to a common date"}))
    assert "[preference]" in gaps(make.tender(settings={"preference": "margin added to other prices"}))
    assert "rules.preference" in gaps(make.tender(preference=make.preference()))
    assert "[[delivery.level]]" in gaps(make.tender(delivered_point=make.entry("the substation")))
    assert gaps(make.tender(delivered_point=make.entry("DDP site"))) == ""
    late = records.lot(delivery_adder_per_week=make.quantity("5"))
    assert "delivery_without_adder_weeks" in gaps(make.tender(late))


def test_papers__rules_that_differ_stand_at_the_head() -> None:
    """Page and terminal say it before any ranking; silent where nothing was kept."""
    view = priced_view()
    html, text = page_html(view), evaluation_text(view, 140)
    assert html.index("Not by the rules as published.") < html.index('class="summary"')
    assert text.index("NOT BY THE RULES AS PUBLISHED") < text.index("Lot 1")
    assert "taxes <a>: published included; used excluded" in text
    silent = replace(view, rules_proof=None)
    assert "NOT BY THE RULES" not in evaluation_text(silent, 140)
    assert "Not by the rules as published" not in page_html(silent)


# Items


def test_evaluation_text__column_for_items_only_where_they_count(by_lot: EvaluationView) -> None:
    """Units, items and lot total add up; without items the table is as it was."""
    text = evaluation_text(by_lot, 140)
    (birch,) = (line for line in text.splitlines() if re.match(r"1 +Birch ", line))
    assert re.split(r" {2,}", birch)[5:8] == ["6,212.00", "400.00", "62,520.00"]
    assert "items" not in evaluation_text(view_of(make.tender(), make.bid()), 140)


@pytest.mark.parametrize("point", list(RoundingPoint))
def test_build_view__items_price_under_both_roundings(point: RoundingPoint) -> None:
    """The items' part does not depend on where money is rounded."""
    rules = make.rules(point)
    view = view_of(records.tender(records.lot(items=(make.item(),)), rules=rules), make.bid(item_prices=BUSHING))
    assert view.lots[0].offers[0].items_price == 400


def test_page_html__chart_follows_the_rank_of_the_lot(by_lot: EvaluationView) -> None:
    """Bars are those of the lot with their items, shortest on top; of the unit where there are none."""
    html = page_html(by_lot)
    assert re.findall(r'class="total"[^>]*>([^<]*)<', html) == ["62,520.00", "64,720.00"]
    assert html.count('<rect class="part items_price"') == 3
    assert "NCU for the whole lot, all bars from zero" in html
    plain = page_html(page_view())
    assert "per unit, all bars from zero" in plain
    assert 'rect class="part items_price"' not in plain


def test_build_internal_paper__amounts_of_the_lot_where_items_count() -> None:
    """Ranks and amounts stand in one order."""
    lot = plain_lot(items=(make.item(),), maximum_load_loss_kw=records.quantity("7.6", "kW"))
    everybody = [schedule(price="20000", load="8.04", total="8.04"), *rivals()]
    everybody = [
        offer.model_copy(update={"terms": offer.terms.model_copy(update={"item_prices": BUSHING})})
        for offer in everybody
    ]
    evaluation = evaluate(tender_with(PROVED, lot), everybody)
    suspicions = open_suspicions(evaluation, everybody)
    rankings = suppose_right(evaluation, everybody, suspicions)
    paper = build_internal_paper(evaluation.tender, suspicions, rankings, RECORD)
    case = paper.cases[0]
    totals = [offer.total_after for offer in case.offers if offer.rank_after is not None]
    assert totals == sorted(totals, key=lambda total: total or 0)
    assert case.is_of_lot
    assert "for the lot, rank 1" in case.sentence
    assert "total_owning_cost_of_lot" in internal_paper_json(paper)
    assert "Total owning cost of the lot in NCU" in internal_paper_html(paper)


# Prices


@pytest.mark.parametrize(
    ("included", "note"), [(True, "tax included"), (False, "without tax"), (None, "tax not stated")]
)
def test_papers__tax_beside_the_contract_price(*, included: bool | None, note: str) -> None:
    """Page, terminal and workbook say whether the contract price holds tax."""
    offer = make.bid(tax_included=included, unconditional_discount_percent=make.quantity("5"))
    settings = {"taxes": "excluded", "unconditional_discounts": "deduct"}
    view = view_of(make.tender(settings=settings, taxes=make.taxes()), offer)
    assert f"NCU ({note})" in evaluation_text(view, 140)
    assert f">{note}</span>" in page_html(view)
    sheet = openpyxl.load_workbook(io.BytesIO(workbook_bytes(view)))["Contract prices"]
    assert note in {cell.value for row in sheet.iter_rows() for cell in row}


def test_workbook_bytes__price_without_preference_is_labelled() -> None:
    """No label stands twice at an offer with a margin for two different amounts."""
    rows = openpyxl.load_workbook(io.BytesIO(workbook_bytes(priced_view())))["Prices"].iter_rows(values_only=True)
    labels = [str(row[0]).strip() for row in rows]
    first = labels.index("<script>alert(1)</script>")
    own = labels[first + 1 : labels.index("Damsonby")]
    assert own.count("Evaluated price per unit") == 1
    assert "Evaluated price per unit, without preference" in own
    assert "Total owning cost of the lot, without preference" in own


def test_shown_figures__other_currencies_have_two_places_too() -> None:
    """A sum in another currency prints as one in the evaluation currency does."""
    tender = make.tender(exchange=records.exchange(FCU="1.25"), settings={"exchange_rate_day": "day of opening"})
    offer = make.bid(currency=make.entry("FCU"), unit_price=make.quantity("3000", "FCU"))
    opened = tender.identity.model_copy(update={"opening_date": datetime.date(2026, 9, 15)})
    view = view_of(tender.model_copy(update={"identity": opened}), offer)
    contract = view.lots[0].offers[0].contract_price
    assert contract is not None
    assert view.figures[contract].text == "30,000.00"


# Decisions and findings


def test_decision_views__used_or_why_not() -> None:
    """A waiver of what is not there, and one that takes effect."""
    lot = records.lot(latest_delivery_weeks=make.quantity("30"))
    decisions = (make.decide("waive", field="delivery-too-late"), make.decide("waive", line=9, field="load-loss-high"))
    view = view_of(make.tender(lot), make.bid(delivery_weeks=make.quantity("31")), decisions=decisions)
    first, second = view.decisions
    assert first.outcome == "used"
    assert second.outcome.startswith("not used, because it finds no finding of this kind that can be waived")
    html = page_html(view)
    assert "<p>Used.</p>" in html
    assert "<strong>Not used, because it finds no finding" in html


def test_told_findings__nothing_left_to_do() -> None:
    """A waived finding and an answered correction ask for nothing; the same correction unanswered does."""
    lot = records.lot(latest_delivery_weeks=make.quantity("30"))
    settings = {"arithmetic_errors": "correct", "unit_price_against_total": "unit price governs"}
    offer = make.bid(delivery_weeks=make.quantity("31"), total_price=make.quantity("42000", "NCU"))
    answers = (make.decide("accept correction"), make.decide("waive", line=9, field="delivery-too-late"))

    def remedies(*decisions: Any) -> dict[str, str]:
        evaluation = evaluate(make.tender(lot, settings=settings), (offer,), (), decisions)
        return {finding.kind: finding.remedy for finding in told_findings(evaluation)}

    assert remedies(*answers)["delivery-too-late"] == "Nothing to do: the recorded decision sets it aside."
    assert remedies(*answers)["arithmetic-error-corrected"] == "Nothing to do: the bidder's answer is recorded."
    assert remedies()["arithmetic-error-corrected"].startswith("Tell the bidder")


def test_papers__short_name_of_each_finding(capsys: pytest.CaptureFixture[str]) -> None:
    """A waiver names the finding by it, so that screen and page print it."""
    lot = records.lot(latest_delivery_weeks=make.quantity("30"))
    evaluation = evaluate(make.tender(lot), (make.bid(delivery_weeks=make.quantity("31")),))
    echo_findings(evaluation.findings)
    assert re.search(r"must not exceed 30 weeks.* \[delivery-too-late\]\n  fix: ", capsys.readouterr().err)
    assert "[delivery-too-late]" in page_html(build_view(evaluation, RECORD))


# Ties


@pytest.mark.parametrize(
    ("order", "told"),
    [
        (None, "the tender announces no order for ties (tie_order)"),
        (("lower no-load loss",), "no announced criterion parts them, and the tender announces no drawing of lots"),
        (
            ("lower no-load loss", "drawing of lots"),
            "no announced criterion parts them; draw lots and record a decision “break tie” for each",
        ),
    ],
)
def test_lot_recommendation__tie_that_stays(order: tuple[str, ...] | None, told: str) -> None:
    """Nothing is said to decide that does not decide."""
    settings = {} if order is None else {"tie_order": order}
    view = view_of(make.tender(settings=settings), make.bid(), make.bid("Birch"))
    assert view.lots[0].recommendation.endswith(f"for the lot; {told}.")
    assert "decides" not in view.lots[0].recommendation


# Rates


def test_rates_text__no_line_for_a_pure_number() -> None:
    """The number one is no input of anybody."""
    text = rates_text(build_rates_report(full_tender()), 140)
    assert not re.search(r"^ +one\b", text, re.MULTILINE)
    assert "discount rate" in text
