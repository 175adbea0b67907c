"""A tender file with every key that levels prices or limits more than losses. All figures are invented."""

from __future__ import annotations

from lossworth.records.rules import RULE_KINDS

from .tender_folders import TENDER

__all__ = ["FULL", "US", "changed", "line_of", "us_tender"]

COMMERCIAL = """\
[delivery]
point = "DDP site"
[[delivery.level]]
term = "EXW"
percent_of_price = 4
amount_per_unit = 120
[[delivery.level]]
term = "FCA"
amount_per_unit = 90
[taxes]
rate_percent = 10
[payment]
interest_rate_percent = 8
[[payment.part]]
share_percent = 30
weeks_after_order = 0
[[payment.part]]
share_percent = 70
weeks_after_order = 36
[preference]
group = "home"
margin_percent = 7.5
[award]
planned = 2026-11-30
"""
RULES = "".join(
    f'{kind.key} = "{next(iter(kind.sentences))}"\n' for kind in RULE_KINDS if kind.key not in ("tie_order",)
)
LOT = """\
latest_delivery_weeks = 36
delivery_without_adder_weeks = 30
delivery_adder_percent_per_week = 0.5
maximum_sound_level_db = 45
accepted_liquids = ["mineral oil", "natural ester"]
pcb_free_required = true
estimated_unit_price = 4321
[lot.regulation]
regulation = "EU 548/2014"
equipment = "liquid medium"
tier = 2
date = 2026-09-15
primary_voltage_kv = 12
secondary_voltage_kv = 1.1
on_load_tap_changer = false
[[lot.item]]
name = "spare bushing set"
quantity = 4
counts = true
[[lot.item]]
name = "supervision"
quantity = 1
counts = false
[[lot.site_cost]]
name = "fire-rated vault"
amount_per_unit = 1500
liquids = ["mineral oil"]
[[lot.site_cost]]
name = "sound barrier"
amount_per_unit = 900
sound_above_db = 42
"""
FULL = TENDER.replace("[exchange]", f"{COMMERCIAL}\n[exchange]").replace("[lot.rates]", f"{LOT}[lot.rates]", 1)
FULL = FULL.replace('per unit"\n', 'per unit"\ntie_order = ["earlier delivery", "drawing of lots"]\n' + RULES, 1)
FULL = FULL.replace('preference = "none"', 'preference = "margin added to other prices"')
FULL = FULL.replace('currency = "NCU"\n', 'currency = "NCU"\nopening_date = 2026-09-15\n', 1)


def changed(old: str, new: str, text: str = FULL) -> str:
    """Tender text in which one passage reads otherwise."""
    assert old in text, old
    return text.replace(old, new, 1)


def line_of(text: str, passage: str) -> int:
    """Line on which a passage begins."""
    return text[: text.index(passage)].count("\n") + 1


US = """\
regulation = "US 10 CFR 431"
equipment = "liquid-immersed"
date = 2026-09-15
phases = 3
"""


def us_tender(regulation: str) -> str:
    """Tender of a lot under the tables of the United States."""
    return TENDER.replace("[lot.rates]", f"[lot.regulation]\n{regulation}[lot.rates]", 1)
