"""Keys of the tender file that level prices: do they fit together, and with what they need?"""

from __future__ import annotations

from pathlib import Path

import pytest

from lossworth.findings import Finding
from support.commercial_texts import US, changed, us_tender
from support.tender_folders import TENDER, tender_of

#: Old passage, new passage; kinds and keys of all findings.
CONFLICTS: dict[str, tuple[str, str, list[tuple[str, str]]]] = {
    "criterion twice": (
        '["earlier delivery", "drawing of lots"]',
        '["earlier delivery", "earlier delivery"]',
        [("tender-conflict", "rules.tie_order")],
    ),
    "criterion behind the drawing": (
        '["earlier delivery", "drawing of lots"]',
        '["drawing of lots", "earlier delivery"]',
        [("tender-conflict", "rules.tie_order")],
    ),
    "days before opening not stated": (
        'exchange_rate_day = "day of opening"',
        'exchange_rate_day = "days before opening"',
        [("tender-key-missing", "rules.exchange_rate_days_before")],
    ),
    "days stated for another day": (
        'exchange_rate_day = "day of opening"',
        'exchange_rate_day = "day of opening"\nexchange_rate_days_before = 7',
        [("tender-conflict", "rules.exchange_rate_days_before")],
    ),
    "days that are none": (
        'exchange_rate_day = "day of opening"',
        'exchange_rate_day = "days before opening"\nexchange_rate_days_before = 0.5',
        [("tender-value", "rules.exchange_rate_days_before")],
    ),
    "opening not stated": ("opening_date = 2026-09-15\n", "", [("tender-key-missing", "tender.opening_date")]),
    "award not stated": (
        "[award]\nplanned = 2026-11-30\n",
        "",
        [],
    ),
    "award without a day": ("planned = 2026-11-30\n", "", [("tender-key-missing", "award.planned")]),
    "award before the opening": ("2026-11-30", "2026-09-14", [("tender-conflict", "award.planned")]),
    "tolerance beside a ceiling": (
        'loss_tolerance = "none',
        'loss_tolerance_percent = 10\nloss_tolerance = "none',
        [("tender-conflict", "rules.loss_tolerance_percent")],
    ),
    "margin without the rule": (
        '"margin added to other prices"',
        '"none"',
        [("tender-key-not-used", "preference")],
    ),
    "point not named": ('point = "DDP site"\n', "", [("tender-key-missing", "delivery.point")]),
    "level without adder": (
        "amount_per_unit = 90\n",
        "",
        [("tender-key-missing", "delivery.level[2].percent_of_price")],
    ),
    "term twice": ('term = "FCA"', 'term = "EXW"', [("tender-conflict", "delivery.level[2].term")]),
    "adder to the point itself": ('term = "FCA"', 'term = "DDP"', [("tender-conflict", "delivery.level[2].term")]),
    "shares do not make 100": (
        "share_percent = 70",
        "share_percent = 60",
        [("tender-conflict", "payment.part[2].share_percent")],
    ),
    "interest without payments": (
        "[[payment.part]]\nshare_percent = 30\nweeks_after_order = 0\n"
        "[[payment.part]]\nshare_percent = 70\nweeks_after_order = 36\n",
        "",
        [("tender-key-missing", "payment.part")],
    ),
    "adder twice": (
        "delivery_adder_percent_per_week = 0.5",
        "delivery_adder_percent_per_week = 0.5\ndelivery_adder_per_week = 25",
        [("tender-conflict", "lot.1.delivery_adder_per_week")],
    ),
    "adder without a beginning": (
        "delivery_without_adder_weeks = 30\n",
        "",
        [("tender-key-missing", "lot.1.delivery_without_adder_weeks")],
    ),
    "beginning without an adder": (
        "delivery_adder_percent_per_week = 0.5\n",
        "",
        [("tender-key-missing", "lot.1.delivery_adder_percent_per_week")],
    ),
    "adder from the latest delivery on": (
        "delivery_without_adder_weeks = 30",
        "delivery_without_adder_weeks = 36",
        [("tender-conflict", "lot.1.delivery_without_adder_weeks")],
    ),
    "adder above 100 percent": (
        "delivery_adder_percent_per_week = 0.5",
        "delivery_adder_percent_per_week = 101",
        [("tender-value", "lot.1.delivery_adder_percent_per_week")],
    ),
    "item twice": (
        'name = "supervision"',
        'name = "Spare  Bushing set"',
        [("tender-conflict", "lot.1.item[2].name")],
    ),
    "site cost twice": (
        'name = "sound barrier"',
        'name = "fire-rated vault"',
        [("tender-conflict", "lot.1.site_cost[2].name")],
    ),
    "site cost for another liquid": (
        'liquids = ["mineral oil"]',
        'liquids = ["mineral-oil"]',
        [("tender-conflict", "lot.1.site_cost[1].liquids")],
    ),
    "site cost beyond the limit": (
        "sound_above_db = 42",
        "sound_above_db = 45",
        [("tender-conflict", "lot.1.site_cost[2].sound_above_db")],
    ),
    "equipment of another regulation": (
        'equipment = "liquid medium"',
        'equipment = "liquid-immersed"',
        [("tender-value", "lot.1.regulation.equipment")],
    ),
    "voltages not stated": (
        "primary_voltage_kv = 12\nsecondary_voltage_kv = 1.1\n",
        "",
        [
            ("tender-key-missing", "lot.1.regulation.primary_voltage_kv"),
            ("tender-key-missing", "lot.1.regulation.secondary_voltage_kv"),
        ],
    ),
    "neither tier nor date": (
        "tier = 2\ndate = 2026-09-15\n",
        "",
        [("tender-key-missing", "lot.1.regulation.tier")],
    ),
    "single phase": ("tier = 2", "tier = 2\nphases = 1", [("tender-value", "lot.1.regulation.phases")]),
}


@pytest.mark.parametrize("name", CONFLICTS)
def test_read_tender__keys_that_do_not_fit(name: str, tmp_path: Path) -> None:
    """Keys that contradict each other, or lack what they need, are told by name; nothing else is."""
    old, new, expected = CONFLICTS[name]
    _, findings = tender_of(tmp_path, changed(old, new))
    assert sorted(expected) == sorted((finding.kind, finding.field) for finding in findings)


@pytest.mark.parametrize(
    ("old", "new", "expected"),
    [
        ("date = 2026-09-15\n", "", ("tender-key-missing", "lot.1.regulation.date")),
        ("phases = 3\n", "", ("tender-key-missing", "lot.1.regulation.phases")),
        ("phases = 3\n", "phases = 3\ntier = 2\n", ("tender-conflict", "lot.1.regulation.tier")),
        (
            "phases = 3\n",
            "phases = 3\non_load_tap_changer = true\n",
            ("tender-conflict", "lot.1.regulation.on_load_tap_changer"),
        ),
        ("liquid-immersed", "medium-voltage dry-type", ("tender-value", "lot.1.regulation.equipment")),
    ],
)
def test_read_tender__keys_of_the_us_tables(old: str, new: str, expected: tuple[str, str], tmp_path: Path) -> None:
    """Keys that the US tables need or do not know."""
    (finding,) = tender_of(tmp_path, us_tender(US.replace(old, new)))[1]
    assert expected == (finding.kind, finding.field)


@pytest.mark.parametrize(
    ("rule", "kind"),
    [
        ("loss_tolerance_percent = 10\n", "tender-key-missing"),
        ('loss_tolerance_percent = 10\nprofile = "corrected, firm"\n', "tender-conflict"),
        ('loss_tolerance_percent = 101\nprofile = "series, average of lot"\n', "tender-value"),
        ('exchange_rate_day = "day of award"\n', "tender-key-missing"),
        ('exchange_rate_days_before = 3\nprofile = "corrected, firm"\n', "tender-conflict"),
    ],
)
def test_read_tender__rules_of_the_profile_count(rule: str, kind: str, tmp_path: Path) -> None:
    """What a profile sets is compared like what a key sets."""
    (finding,) = tender_of(tmp_path, TENDER.replace("[exchange]", f"{rule}[exchange]", 1))[1]
    assert finding.kind == kind


def test_read_tender__one_fault_is_told_once(tmp_path: Path) -> None:
    """A profile or setting that cannot be read is not blamed a second time for what hangs on it."""
    rules = 'profile = "none of ours"\nloss_tolerance_percent = 10\nexchange_rate_days_before = 3\n'
    (finding,) = tender_of(tmp_path, TENDER.replace("[exchange]", f"{rules}[exchange]", 1))[1]
    assert (finding.kind, finding.field) == ("tender-value", "rules.profile")


def test_read_tender__table_that_must_have_double_brackets(tmp_path: Path) -> None:
    """What may stand several times stands in double brackets."""
    text = TENDER.replace("[exchange]", '[delivery]\npoint = "DDP site"\n[delivery.level]\nterm = "EXW"\n[exchange]', 1)
    (finding,) = tender_of(tmp_path, text)[1]
    assert finding.rule == "must be a table in double brackets, [[delivery.level]]"


def test_read_tender__tables_that_are_none(tmp_path: Path) -> None:
    """A number where a table belongs is told by the table's name."""
    text = TENDER.replace("[tender]", 'taxes = 10\naward = "soon"\n[tender]', 1)
    findings: tuple[Finding, ...] = tender_of(tmp_path, text)[1]
    assert [(each.kind, each.field, each.got) for each in findings] == [
        ("tender-value", "taxes", "10"),
        ("tender-value", "award", "soon"),
    ]
