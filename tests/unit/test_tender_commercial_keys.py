"""Keys of the tender file on rules, adders, limits beside losses, regulations and items."""

from __future__ import annotations

import datetime
import re
from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.evaluation.regulation_limits import _INSULATION, regulation_limits
from lossworth.findings import Place
from lossworth.intake.check_regulation import EQUIPMENT
from lossworth.records.rule_profiles import profile_named, settled_rules
from lossworth.records.rules import RULE_KINDS
from lossworth.records.tender import Tender
from lossworth.regulations.us_efficiency import UsEquipment
from support.commercial_texts import FULL, US, changed, line_of, us_tender
from support.tender_folders import TENDER, tender_of, told, valid_tender

STARTER = Path(__file__).resolve().parents[2] / "templates" / "start" / "tender.toml"


@pytest.fixture(scope="module")
def tender(tmp_path_factory: pytest.TempPathFactory) -> Tender:
    """The tender with everything."""
    return valid_tender(tmp_path_factory.mktemp("full"), FULL)


def test_read_tender__rules(tender: Tender) -> None:
    """Every rule is read with its line."""
    announced = tender.rules.announced
    for kind in RULE_KINDS:
        assert getattr(announced, kind.key) is not None, kind.key
        assert announced.places[kind.key].line == line_of(FULL, f"\n{kind.key} = ") + 1
    assert announced.tie_order == ("earlier delivery", "drawing of lots")
    assert (announced.profile, announced.exchange_rate_days_before, announced.loss_tolerance_percent) == (None,) * 3


def test_read_tender__profile_and_numbers(tmp_path: Path) -> None:
    """A profile sets what no key sets; numbers beside rules are kept with their units."""
    text = TENDER.replace(
        "[exchange]",
        'profile = "series, average of lot"\nloss_tolerance_percent = 10\nexchange_rate_day = "days before opening"\n'
        "exchange_rate_days_before = 7\n[exchange]",
        1,
    ).replace('currency = "NCU"\n', 'currency = "NCU"\nopening_date = 2026-09-15\n', 1)
    announced = valid_tender(tmp_path, text).rules.announced
    assert announced.profile is not None
    assert (announced.profile.value, announced.arithmetic_errors) == ("series, average of lot", None)
    assert settled_rules(announced).arithmetic_errors == "correct"
    assert settled_rules(announced).exchange_rate_day == "days before opening"
    assert announced.exchange_rate_days_before is not None
    assert announced.loss_tolerance_percent is not None
    assert (announced.exchange_rate_days_before.value, announced.exchange_rate_days_before.unit) == (7, "days")
    assert (announced.loss_tolerance_percent.value, announced.loss_tolerance_percent.unit) == (10, "%")


def test_read_tender__commercial_tables(tender: Tender) -> None:
    """Delivered point, taxes, payments, preference and award, each in the unit of the record."""
    assert str(tender.delivered_point) == "DDP site"
    levels = [(each.term, each.percent_of_price, each.amount_per_unit) for each in tender.delivery_levels]
    stated = [(term, percent and percent.value, amount and amount.value) for term, percent, amount in levels]
    assert stated == [("EXW", 4, 120), ("FCA", None, 90)]
    assert levels[0][2] is not None
    assert levels[0][2].unit == "NCU"
    assert tender.taxes is not None
    assert tender.preference is not None
    assert tender.payment_terms is not None
    assert (tender.taxes.rate_percent.value, tender.preference.margin_percent.value) == (10, Decimal("7.5"))
    assert tender.preference.group.value == "home"
    parts = [
        (part.share.value, part.share.text, part.weeks_after_order.value) for part in tender.payment_terms.payments
    ]
    assert parts == [(Decimal("0.3"), "30", 0), (Decimal("0.7"), "70", 36)]
    assert tender.payment_terms.interest_rate_percent.value == 8
    assert tender.planned_award == datetime.date(2026, 11, 30)
    line = line_of(FULL, '[[delivery.level]]\nterm = "FCA"')
    assert tender.delivery_levels[1].place == Place("tender.toml", line=line, key="delivery.level[2]")


def test_read_tender__lot_terms(tender: Tender) -> None:
    """Adders, limits beside losses, regulation, items and site costs of a lot."""
    lot, other = tender.lots
    numbers = {
        "delivery_without_adder_weeks": ("30", "weeks"),
        "delivery_adder_percent_per_week": ("0.5", "%/week"),
        "maximum_sound_level_db": ("45", "dB"),
        "estimated_unit_price": ("4321", "NCU"),
    }
    assert numbers == {name: (str(getattr(lot, name).value), getattr(lot, name).unit) for name in numbers}
    assert (lot.accepted_liquids, lot.pcb_free_required) == (("mineral oil", "natural ester"), True)
    assert lot.regulation is not None
    assert lot.regulation.tier == 2
    assert [limit.value for limit in regulation_limits(lot)] == [Decimal("0.130"), Decimal("1.250")]
    assert [(item.name.value, item.quantity.value, item.counts) for item in lot.items] == [
        ("spare bushing set", 4, True),
        ("supervision", 1, False),
    ]
    vault, barrier = lot.site_costs
    assert (vault.amount_per_unit.value, vault.liquids, vault.sound_above_db) == (1500, ("mineral oil",), None)
    assert barrier.sound_above_db is not None
    assert (barrier.liquids, barrier.sound_above_db.value) == ((), 42)
    assert (other.items, other.site_costs, other.regulation, other.pcb_free_required) == ((), (), None, False)


def test_read_tender__adder_as_amount(tmp_path: Path) -> None:
    """The adder for each week may be an amount in the evaluation currency."""
    text = changed("delivery_adder_percent_per_week = 0.5", "delivery_adder_per_week = 25")
    adder = valid_tender(tmp_path, text).lots[0].delivery_adder_per_week
    assert adder is not None
    assert (adder.value, adder.unit) == (25, "NCU/week")


def test_equipment__is_that_of_the_tables() -> None:
    """The words of the tender file are those by which the tables are read."""
    assert set(EQUIPMENT["EU 548/2014"]) == set(_INSULATION)
    assert EQUIPMENT["US 10 CFR 431"] == tuple(UsEquipment)


Case = tuple[str, str, str, str | None]

#: Old passage, new passage; kind of the finding, value as read. The finding stands on the line of the new passage.
UNREADABLE: dict[str, Case] = {
    "setting unknown": ('taxes = "excluded"', 'taxes = "exclude"', "tender-value", "exclude"),
    "profile unknown": ('taxes = "excluded"', 'profile = "corected, firm"', "tender-value", "corected, firm"),
    "tie order with another word": ('"drawing of lots"]', '"lots"]', "tender-value", "lots"),
    "tie order without brackets": (
        'tie_order = ["earlier delivery", "drawing of lots"]',
        'tie_order = "drawing of lots"',
        "tender-value",
        "drawing of lots",
    ),
    "term unknown": ('term = "FCA"', 'term = "DAT"', "tender-value", "DAT"),
    "adder negative": ("amount_per_unit = 90", "amount_per_unit = -90", "tender-value", "-90"),
    "percent above 100": ("percent_of_price = 4", "percent_of_price = 400", "tender-value", "400"),
    "tax above 100": ("rate_percent = 10", "rate_percent = 101", "tender-value", "101"),
    "share above 100": ("share_percent = 70", "share_percent = 170", "tender-value", "170"),
    "margin negative": ("margin_percent = 7.5", "margin_percent = -1", "tender-value", "-1"),
    "award in quotes": ("planned = 2026-11-30", 'planned = "2026-11-30"', "tender-value", "2026-11-30"),
    "sound level of zero": ("maximum_sound_level_db = 45", "maximum_sound_level_db = 0", "tender-value", "0"),
    "liquids without brackets": (
        'liquids = ["mineral oil"]',
        'liquids = "mineral oil"',
        "tender-value",
        "mineral oil",
    ),
    "flag in quotes": ("pcb_free_required = true", 'pcb_free_required = "yes"', "tender-value", "yes"),
    "tier unknown": ("tier = 2", "tier = 3", "tender-value", "3"),
    "tier in quotes": ("tier = 2", 'tier = "2"', "tender-value", "2"),
    "tier that is a truth": ("tier = 2", "tier = true", "tender-value", "true"),
    "phases unknown": ("tier = 2", "tier = 2\nphases = 2", "tender-value", "2"),
    "regulation unknown": ('regulation = "EU 548/2014"', 'regulation = "EU 548"', "tender-value", "EU 548"),
    "item uncounted": ("counts = false", "counts = 0", "tender-value", "0"),
    "key misspelled": ("counts = false", "count = false", "tender-key-unknown", "false"),
}


@pytest.mark.parametrize("name", UNREADABLE)
def test_read_tender__value_that_cannot_be_read(name: str, tmp_path: Path) -> None:
    """A value of the wrong kind or out of bounds is told with its line and its characters."""
    old, new, kind, got = UNREADABLE[name]
    text = changed(old, new)
    _, findings = tender_of(tmp_path, text)
    line = line_of(text, new) + new.count("\n")
    assert (kind, f"tender.toml:{line}", got) in told(findings)


def test_read_tender__did_you_mean(tmp_path: Path) -> None:
    """Misspelled settings, profiles, equipment and keys are answered with the nearest word."""
    text = changed('taxes = "excluded"', 'taxes = "exluded"\nprofile = "corrected firm"\ntie_ordr = ["x"]')
    text = changed('equipment = "liquid medium"', 'equipment = "medium liquid"', text)
    text = changed('equipment = "medium liquid"', 'equipment = "liquid mediun"', text)
    remedies = [finding.remedy for finding in tender_of(tmp_path, text)[1]]
    meant = ("excluded", "corrected, firm", "tie_order", "liquid medium")
    assert [f'Did you mean "{each}"?' for each in meant] == remedies


def test_read_tender__regulation_of_the_us(tmp_path: Path) -> None:
    """The keys of the US tables are enough for a limit."""
    (limit,) = regulation_limits(valid_tender(tmp_path, us_tender(US)).lots[0])
    assert limit.bound == "minimum"


def test_starter__rules_behind_comment_signs_are_those_of_its_profile(tmp_path: Path) -> None:
    """Taking the signs away changes no rule, and the file still reads without a word."""
    text = STARTER.read_text(encoding="utf-8")
    for kind in RULE_KINDS:
        text = re.sub(rf"^# ({kind.key} = )", r"\1", text, flags=re.MULTILINE)
    announced = valid_tender(tmp_path, text).rules.announced
    profile = profile_named("corrected, firm")
    assert profile is not None
    assert {kind.key: getattr(announced, kind.key) for kind in RULE_KINDS} == dict(profile.settings)


@pytest.mark.parametrize("table", ["delivery", "preference", "lot.regulation", "lot.item", "lot.site_cost"])
def test_starter__tables_behind_comment_signs_are_right(table: str, tmp_path: Path) -> None:
    """A table of the starter may be used as it stands; the margin then waits for its rule."""
    text = STARTER.read_text(encoding="utf-8")
    block = re.search(rf"^# \[+{re.escape(table)}\]+.*\n(?:# .*\n)*", text, re.MULTILINE)
    assert block is not None
    used = "\n".join(line.removeprefix("# ") for line in block[0].splitlines())
    tender, findings = tender_of(tmp_path, text.replace(block[0], f"{used}\n"))
    assert tender is not None
    assert [finding.kind for finding in findings] == (["tender-key-not-used"] if table == "preference" else [])
