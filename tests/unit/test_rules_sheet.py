"""The rules sheet: every rule with its sentence, everything that is not announced, page and data alike."""

from __future__ import annotations

import json
import re

import pytest

from lossworth.evaluation.rules_content import fingerprint, rules_content
from lossworth.records.rules import RULE_KINDS
from lossworth.records.tender import CoolingValuation, Tender
from lossworth.report.build_rules import build_rules
from lossworth.report.rules_sheet import rules_html, rules_json, rules_text
from lossworth.report.rules_view import RulesView
from support import records as make
from support.rules_tenders import full_lot, full_tender, ruled

SCRIPT = "<script>alert(1)</script>"


def view_of(tender: Tender) -> RulesView:
    """Sheet of a tender, with fixed program and time."""
    return build_rules(tender, "0", "2026-08-01T10:00:00Z")


def sentences(view: RulesView) -> str:
    """All sentences on the whole tender and its lots, a line each."""
    parts = [*view.sections, *view.lots]
    return "\n".join(sentence for part in parts for sentence in part.sentences)


def test_build_rules__every_rule_is_either_announced_or_not() -> None:
    """No rule of the list is passed over, and none stands on both sides."""
    for tender in (make.tender(), full_tender(), full_tender(rules=ruled(taxes="excluded"))):
        view = view_of(tender)
        keys = [rule.key for rule in view.rules] + [rule.key for rule in view.silent_rules]
        assert sorted(kind.key for kind in RULE_KINDS) == sorted(keys)


@pytest.mark.parametrize("kind", RULE_KINDS, ids=lambda kind: kind.key)
def test_build_rules__sentence_of_every_setting(kind: object) -> None:
    """Each setting prints the sentence that the list of rules has for it."""
    for setting, sentence in kind.sentences.items():  # type: ignore[attr-defined]
        key = kind.key  # type: ignore[attr-defined]
        stated = (setting,) if key == "tie_order" else setting
        (rule,) = view_of(make.tender(rules=ruled(**{key: stated}))).rules
        assert (setting, "stated in the tender") == (rule.setting, rule.origin)
        assert rule.sentence.startswith(sentence)


def test_build_rules__says_what_the_profile_sets() -> None:
    """The profile is named with its purpose, and each rule says who set it."""
    view = view_of(full_tender())
    origins = {rule.key: rule.origin for rule in view.rules}
    assert (origins["preference"], origins["taxes"]) == ("stated in the tender", "set by profile “corrected, firm”")
    assert view.profile.startswith("Profile “corrected, firm”. For units ")


def test_build_rules__numbers_that_rules_need_stand_in_their_sentences() -> None:
    """Days before opening and a tolerance are printed with the rule."""
    rules = ruled(
        exchange_rate_day="days before opening",
        exchange_rate_days_before=make.quantity("28"),
        loss_tolerance="evaluate at guarantee plus tolerance",
        loss_tolerance_percent=make.quantity("15"),
    )
    by_key = {rule.key: rule.sentence for rule in view_of(make.tender(rules=rules)).rules}
    assert by_key["exchange_rate_day"].endswith("The number of days is 28.")
    assert by_key["loss_tolerance"].endswith("The tolerance is 15 %.")


def test_build_rules__terms_of_the_tender_in_sentences() -> None:
    """Adders, taxes, payments, preference and award are all told."""
    text = sentences(view_of(full_tender()))
    for part in (
        "rounded to 0.01 NCU, half away from zero",
        "Prices are compared as delivered: DDP site.",
        "To a price EXW is added: 4 % of the price after discounts and 120 NCU per unit.",
        "To a price FCA is added: 90 NCU per unit.",
        "tax rate of 10 %",
        "pays 30 % with the order, 70 % 36 weeks after the order. The interest rate for other terms is 8 % a year.",
        "7.5 % is added, for comparison only, to the prices of offers outside the group “home”",
        "planned award, 2026-11-30",
        "mid rates of 2026-09-15, invented bulletin. Currencies beside NCU: FCU.",
    ):
        assert part in text


def test_build_rules__rates_limits_and_adders_of_a_lot() -> None:
    """Everything that is announced for a lot stands in a sentence."""
    text = sentences(view_of(full_tender(full_lot())))
    for part in (
        "A = 11,000.00 NCU per kW of no-load loss, B = 660.00 NCU per kW of load loss.",
        "The auxiliary loss is not valued.",
        "no-load loss at most 0.130 kW",
        "impedance 4 % within 0.4 percentage points",
        "sound level at most 41 dB(A)",
        "insulating liquid mineral oil or natural ester",
        "free of PCB",
        "EU 548/2014, liquid medium, tier 2, placed on the market 2026-09-15",
        "at 100 kVA, at 75 °C, with windings of copper",
        "another basis: rating, temperature.",
        "after 30 weeks adds 0.5 % of the price per unit",
        "offers with mineral oil: fire-rated vault, 1,500 NCU per unit",
        "spare bushing set, 4 for the lot, part of the evaluated price",
    ):
        assert part in text


def test_build_rules__derivation_with_every_input() -> None:
    """A derivation prints method, formulas, all inputs and what they give."""
    (lot,) = view_of(make.tender(make.lot(derivation=make.derivation()))).lots
    assert "A = 11,006.36 NCU per kW" in "\n".join(lot.sentences)
    assert any(formula.startswith("A = G") for formula in lot.formulas)
    inputs = dict(lot.inputs)
    assert (
        inputs["energy price [NCU/kWh]"],
        inputs["discount rate [%]"],
        inputs["load factor"],
        inputs["timing"],
    ) == ("0.085", "6", "0.55", "end of year")
    stated = rules_content(make.tender(make.lot(derivation=make.derivation())))["lots"]["1"]["derivation"]
    assert len(stated["economics"]) + len(stated["loading"]) == len(lot.inputs)


def test_build_rules__cooling_through_a_and_b() -> None:
    """Where cooling is valued through A and B, the sentence says how, and not that it is not valued."""
    lot = make.lot(cooling_valuation=CoolingValuation.THROUGH_A_AND_B)
    text = sentences(view_of(make.tender(lot)))
    assert "through A (at no load) and through B" in text
    assert "not valued" not in text


def test_build_rules__names_what_is_silent_and_what_is_incomplete() -> None:
    """Missing limits and terms are listed; a rule without what it needs is a gap."""
    view = view_of(make.tender(rules=ruled(payment_terms="discount to a common date", taxes="included")))
    assert "sound level" in view.lots[0].silent
    assert any("another currency" in sentence for sentence in view.silent)
    assert len(view.gaps) == 2
    assert view_of(full_tender()).gaps == ()


def test_rules_json__fingerprint_can_be_computed_by_anybody() -> None:
    """The fingerprint follows from the file alone, as the file itself explains."""
    file = json.loads(rules_json(view_of(full_tender())))
    assert file["fingerprint"] == fingerprint(file["content"])
    assert "sorted keys" in file["fingerprint_is"]


def test_rules_sheet__page_data_and_terminal_say_the_same() -> None:
    """Every sentence of the sheet stands in all three."""
    view = view_of(full_tender(rules=ruled(taxes="included")))
    wanted = [rule.sentence for rule in view.rules] + [rule.question for rule in view.silent_rules]
    wanted += [*view.silent, *view.gaps, *(text for part in (*view.sections, *view.lots) for text in part.sentences)]
    page = " ".join(re.sub(r"<[^>]+>", " ", rules_html(view)).replace("&#34;", '"').replace("&#39;", "'").split())
    data = rules_json(view)
    terminal = " ".join(rules_text(view, 100).split())
    for text in wanted:
        assert text in page
        assert text in data
        assert text in terminal
    assert view.fingerprint in page
    assert view.fingerprint in terminal


def test_rules_html__escapes_and_asks_for_nothing() -> None:
    """A tender's words are never markup, and the page loads nothing."""
    identity = make.tender().identity.model_copy(update={"title": make.entry(SCRIPT), "remark": make.entry(SCRIPT)})
    lot = full_lot(description=make.entry(SCRIPT), accepted_liquids=(SCRIPT,))
    page = rules_html(view_of(full_tender(lot, identity=identity)))
    assert "<script" not in page
    assert "&lt;script&gt;" in page
    assert re.findall(r'(?:src|href)="(?!#|data:)', page) == []


def test_rules_sheet__same_view_same_text() -> None:
    """Nothing but the view enters."""
    one, other = view_of(full_tender()), view_of(full_tender())
    assert (rules_html(one), rules_json(one)) == (rules_html(other), rules_json(other))


def test_rules_sheet__keeps_the_buyers_estimate() -> None:
    """The estimate stands in no form of the sheet."""
    view = view_of(full_tender(full_lot()))
    for text in (rules_html(view), rules_json(view), rules_text(view, 100)):
        assert "4321" not in text
        assert "4,321" not in text
