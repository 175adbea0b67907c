"""What a fingerprint of rules covers, and what may change without moving it."""

from __future__ import annotations

import datetime
import hashlib
import json
from collections.abc import Callable
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.rules_content import canonical_text, fingerprint, rules_content
from lossworth.findings import Place
from lossworth.records.rules import RULE_KINDS
from lossworth.records.tender import Lot, Tender
from support import records as make
from support.rules_tenders import full_lot, full_tender, ruled
from support.tender_folders import TENDER, valid_tender


def print_of(tender: Tender) -> str:
    """Fingerprint of a tender."""
    return fingerprint(rules_content(tender))


def test_canonical_text__has_one_form() -> None:
    """Keys sorted, no blanks, no escapes that need not be; the fingerprint is the hash of exactly these bytes."""
    content = {"b": ["ü", True, None], "a": {"d": "0.13", "c": 1}}
    text = '{"a":{"c":1,"d":"0.13"},"b":["ü",true,null]}'
    assert text == canonical_text(content)
    assert hashlib.sha256(text.encode()).hexdigest() == fingerprint(content)


def test_canonical_text__refuses_fractions() -> None:
    """A float has no certain text."""
    with pytest.raises(TypeError, match=r"0\.5"):
        canonical_text({"a": [{"b": 0.5}]})


def test_rules_content__has_no_places_and_survives_json() -> None:
    """Neither lines nor files of the tender stand in the content, and JSON gives it back."""
    content = rules_content(full_tender())
    text = canonical_text(content)
    assert json.loads(text) == content
    assert "tender.toml" not in text
    assert '"place' not in text


def test_rules_content__numbers_in_one_form() -> None:
    """Trailing zeros and the unit in which a limit is stated do not matter; the number does."""
    stated = full_lot(maximum_no_load_loss_kw=make.quantity("0.13", "W", "130"))
    assert print_of(full_tender(full_lot())) == print_of(full_tender(stated))
    other = full_lot(maximum_no_load_loss_kw=make.quantity("0.131", "kW"))
    assert print_of(full_tender(full_lot())) != print_of(full_tender(other))


def test_rules_content__rates_per_kw_whatever_they_are_quoted_per() -> None:
    """11 per W, 1,100 per 0.1 kW and 11,000 per kW are one announcement."""
    tenders = [
        make.tender(make.lot(rates=make.rates(*rates, per=per)))
        for per, rates in (("kW", ("11000", "660")), ("W", ("11", "0.66")), ("0.1 kW", ("1100", "66.0")))
    ]
    assert len({print_of(tender) for tender in tenders}) == 1
    content = rules_content(tenders[1])
    assert content["lots"]["1"]["rates"] == {"no_load_per_kw": "11000", "load_per_kw": "660"}


@pytest.mark.parametrize(
    "edit",
    [
        lambda text: text.replace("# ", "#   another comment "),
        lambda text: "# a new first line\n\n" + text.replace("\n[", "\n\n\n["),
        lambda text: text.replace("rated_power_kva = 1000", "rated_power_mva = 1.0"),
        lambda text: text.replace("demand_charge_per_kw_year = 50", "demand_charge_per_kw_year = 50.000"),
        lambda text: text.replace("[economics.board]", "[economics.other]").replace('"board"', '"other"'),
        lambda text: text.replace("FCU = 1.25", "FCU = 1.31"),
        lambda text: text.replace('evidence = "Invented record"', 'evidence = "Another record"'),
        lambda text: text.replace('title = "Two lots for tests"', 'title = "Two lots"'),
    ],
)
def test_fingerprint__not_moved_by(edit: Callable[[str], str], tmp_path: Path) -> None:
    """Comments, layout, units, names of tables, the rate of the day and the title are no rules."""
    before, after = TENDER, edit(TENDER)
    assert print_of(valid_tender(tmp_path, before)) == print_of(valid_tender(tmp_path, after))


def test_fingerprint__not_moved_by_the_order_of_lots() -> None:
    """Lots go by their names."""
    one, two = full_lot(), make.lot("2")
    assert print_of(full_tender(one, two)) == print_of(full_tender(two, one))


def test_fingerprint__profile_or_its_settings_are_the_same() -> None:
    """Whether a profile or single keys set the rules does not matter; what they set does."""
    by_name = full_tender(rules=ruled(profile=make.entry("corrected, firm"), preference="margin added to other prices"))
    settings = rules_content(by_name)["rules"]
    order = tuple(settings.pop("tie_order"))
    assert print_of(by_name) == print_of(full_tender(rules=ruled(**settings, tie_order=order)))
    other = ruled(**(settings | {"taxes": "included"}), tie_order=order)
    assert print_of(by_name) != print_of(full_tender(rules=other))


@pytest.mark.parametrize("kind", RULE_KINDS, ids=lambda kind: kind.key)
def test_fingerprint__moved_by_every_rule(kind: Any) -> None:
    """Each setting of each rule has a fingerprint of its own, and silence another."""
    settings = [(setting,) if kind.key == "tie_order" else setting for setting in kind.sentences]
    prints = {print_of(full_tender(rules=ruled(**{kind.key: setting}))) for setting in settings}
    assert len(prints | {print_of(full_tender(rules=ruled()))}) == len(settings) + 1


def _changes() -> dict[str, dict[str, Any]]:
    full = full_tender()
    level, tax, pay, group = full.delivery_levels[0], full.taxes, full.payment_terms, full.preference
    assert tax is not None
    assert pay is not None
    assert group is not None
    more = make.quantity("99")
    return {
        "rounding": {
            "rules": full.rules.model_copy(update={"rounding": make.Rounding(Decimal("0.1"), make.CENT.mode)})
        },
        "delivery level": {"delivery_levels": (level.model_copy(update={"amount_per_unit": more}),)},
        "tax": {"taxes": tax.model_copy(update={"rate_percent": more})},
        "interest": {"payment_terms": pay.model_copy(update={"interest_rate_percent": more})},
        "preference": {"preference": group.model_copy(update={"margin_percent": more})},
        "award": {"planned_award": datetime.date(2026, 12, 24)},
        "exchange source": {
            "exchange": make.exchange(FCU="1.25").model_copy(update={"source": make.entry("another bulletin")})
        },
        "exchange day": {"exchange": make.exchange(FCU="1.25").model_copy(update={"date": datetime.date(2026, 9, 16)})},
        "currencies": {"exchange": make.exchange(FCU="1.25", GCU="2")},
        "economics": {"economics": {"board": make.economics(discount_rate_percent=more)}},
        "loading": {"loading": {"town": make.loading(load_factor=make.quantity("0.6"))}},
    }


@pytest.mark.parametrize("name", list(_changes()))
def test_fingerprint__moved_by_terms(name: str) -> None:
    """Every term that can move a price or a rate moves the fingerprint."""
    assert print_of(full_tender()) != print_of(full_tender(**_changes()[name]))


#: Every field of a lot: how a test changes it, or why it is no rule.
_LOT: dict[str, Any] = {
    "description": make.entry("another"),
    "rated_power_kva": make.quantity("160", "kVA"),
    "quantity": make.quantity("11"),
    "cooling": make.entry("ONAF"),
    "maximum_no_load_loss_kw": make.quantity("0.2", "kW"),
    "maximum_load_loss_kw": make.quantity("2", "kW"),
    "minimum_peak_efficiency_index_percent": make.quantity("99"),
    "impedance_percent": make.quantity("5"),
    "impedance_tolerance_percentage_points": make.quantity("0.5"),
    "latest_delivery_weeks": make.quantity("40"),
    "delivery_without_adder_weeks": make.quantity("31"),
    "delivery_adder_percent_per_week": make.quantity("1"),
    "delivery_adder_per_week": make.quantity("10"),
    "maximum_sound_level_db": make.quantity("44"),
    "accepted_liquids": ("mineral oil",),
    "pcb_free_required": False,
    "regulation": None,
    "items": (),
    "site_costs": (),
    "rates": make.rates("12000"),
    "derivation": None,
    "cooling_valuation": "through A and B",
    "loss_basis": None,
}
_NO_RULE = {
    "id": "the key under which the lot stands",
    "estimated_unit_price": "the buyer's own estimate, which no bidder may see",
    "study": "a planner's derivation, which never enters the evaluation",
    "place": "a line of the file",
}


def test_fingerprint__covers_every_field_of_a_lot() -> None:
    """Whoever adds a field to a lot must say here whether it is a rule."""
    assert set(Lot.model_fields) == _LOT.keys() | _NO_RULE.keys()
    base = print_of(full_tender(full_lot()))
    still = [
        name
        for name, value in _LOT.items()
        if name != "derivation" and print_of(full_tender(full_lot().model_copy(update={name: value}))) == base
    ]
    assert still == []
    derived = full_lot().model_copy(update={"rates": None, "derivation": make.derivation()})
    assert print_of(full_tender(derived)) != base


def test_fingerprint__keeps_the_buyers_secrets() -> None:
    """Estimate and study neither stand in the content nor move the fingerprint."""
    text = canonical_text(rules_content(full_tender(full_lot())))
    assert "4321" not in text
    without = full_lot(estimated_unit_price=None, study=None)
    assert print_of(full_tender(full_lot())) == print_of(full_tender(without))


def test_rules_content__profile_by_its_own_fingerprint() -> None:
    """A file of loads counts by its content; its name and its remarks do not."""

    def tender(**changes: Any) -> Tender:
        profile = make.profile([0.5] * 8760, **changes)
        loading = make.loading(profile=profile, load_factor=None, loss_factor_coefficient=None)
        return make.tender(make.lot(derivation=make.derivation()), loading={"town": loading})

    assert print_of(tender()) == print_of(tender(file="profiles/renamed.csv", remarks=("a remark",)))
    assert print_of(tender()) != print_of(tender(sha256="1" * 64))


def test_rules_content__unknown_profile_of_rules_is_a_finding() -> None:
    """A name that no profile has stops with its place and the names that there are."""
    name = make.entry("corected, firm")
    with pytest.raises(EvaluationStopped) as stopped:
        rules_content(full_tender(rules=ruled(profile=name)))
    (finding,) = stopped.value.findings
    assert ("tender-value", "rules.profile", Place("tender.toml", line=1), "corected, firm") == (
        finding.kind,
        finding.field,
        finding.place,
        finding.got,
    )
    assert '"corrected, firm"' in finding.rule
