"""Limits of the regulation that a lot names, against guarantees: unrounded, without tolerance, with its cautions."""

from __future__ import annotations

import datetime

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.records.commercial import RegulationLimit
from support import commercial as make
from support import records


def regulation(**changes):
    """The EU regulation, tier 2, for liquid-immersed units of 12 and 1.1 kV."""
    fields = {
        "regulation": "EU 548/2014",
        "equipment": make.entry("liquid medium"),
        "tier": 2,
        "primary_voltage_kv": make.quantity("12"),
        "secondary_voltage_kv": make.quantity("1.1"),
        "place": records.place(80),
    }
    return RegulationLimit(**(fields | changes))


def lot(power="100", **changes):
    """A lot that names the regulation."""
    return records.lot(rated_power_kva=make.quantity(power, "kVA"), regulation=regulation(**changes))


def found(lot, no_load, load, **terms):
    """The evaluated offer with these losses."""
    losses = {"no_load_loss_kw": make.quantity(no_load, "kW"), "load_loss_kw": make.quantity(load, "kW")}
    return make.only(make.tender(lot), make.bid(**losses, **terms))


@pytest.mark.parametrize(
    ("no_load", "load", "kept"),
    [
        ("0.130", "1.250", True),
        ("0.131", "1.250", False),
        ("0.130", "1.251", False),
        ("0.1300000001", "1.250", False),
    ],
)
def test_check_regulation__eu_maxima_of_100_kva(no_load, load, kept):
    """Table I.1 of Regulation (EU) No 548/2014, tier 2: 130 W and 1250 W; at the limit passes, a hair above fails."""
    offer = found(lot(), no_load, load)
    assert (offer.status == "ranked") == kept
    assert ("regulation-limit-not-kept" in make.kinds(offer)) != kept


def test_check_regulation__finding_names_source_table_and_place():
    """Whoever is left out reads document, table, row and dates."""
    finding = next(f for f in found(lot(), "0.131", "1.2").findings if f.kind == "regulation-limit-not-kept")
    for words in ("must not exceed 0.13 kW", "(tender.toml:80)", "No 548/2014", "Table I.1", "tier 2", "in force from"):
        assert words in finding.rule
    assert (finding.field, finding.got) == ("no-load loss", "0.131 kW")


@pytest.mark.parametrize(("load", "kept"), [("1.333333333333", True), ("1.333333333334", False)])
def test_check_regulation__between_rows_unrounded(load, kept):
    """Between 100 and 160 kVA the limit is interpolated and compared without rounding: 1250 + 500 / 6 W at 110 kVA."""
    assert (found(lot("110"), "0.1", load).status == "ranked") == kept


def test_check_regulation__cautions_stand_once_for_the_lot():
    """What needs a check in the text in force is a note on the lot, and stands in the finding of a rejection."""
    raised = lot(primary_voltage_kv=make.quantity("24"), secondary_voltage_kv=make.quantity("12"))
    result = evaluate(make.tender(raised), [make.bid(no_load_loss_kw=make.quantity("0.2", "kW"))])
    cautions = {f.rule for f in result.findings if f.kind == "regulation-caution"}
    assert cautions
    beyond = next(f for f in result.findings if f.kind == "regulation-limit-not-kept")
    assert any(caution in beyond.rule for caution in cautions)


@pytest.mark.parametrize(("no_load", "kept"), [("15.2", True), ("15.8", False)])
def test_check_regulation__peak_efficiency_index(no_load, kept):
    """99.712 percent for 31.5 MVA in tier 2 (Table I.7), from the guaranteed losses."""
    large = lot("31500", equipment=make.entry("large liquid"), primary_voltage_kv=make.quantity("36"),
                secondary_voltage_kv=make.quantity("12"))  # fmt: skip
    load = {"15.2": "134", "15.8": "139"}[no_load]
    assert (found(large, no_load, load).status == "ranked") == kept


def test_check_regulation__cooling_power_at_no_load_counts():
    """The index is one of P0 + Pc0, where the bidder states a cooling power at no load."""
    large = lot("31500", equipment=make.entry("large liquid"), primary_voltage_kv=make.quantity("36"),
                secondary_voltage_kv=make.quantity("12"))  # fmt: skip
    assert found(large, "15.2", "134", cooling_power_no_load_kw=make.quantity("0.1", "kW")).status == "ranked"
    assert found(large, "15.2", "134", cooling_power_no_load_kw=make.quantity("1", "kW")).status == "non-responsive"


US = {
    "regulation": "US 10 CFR 431",
    "equipment": make.entry("liquid-immersed"),
    "tier": None,
    "phases": 3,
    "secondary_voltage_kv": make.quantity("0.48"),
    "date": datetime.date(2026, 1, 1),
}


@pytest.mark.parametrize(
    ("efficiency", "kinds"),
    [("99.35", []), ("99.34", ["regulation-limit-not-kept"]), (None, ["limit-not-answered"])],
)
def test_check_regulation__us_declared_efficiency(efficiency, kinds):
    """10 CFR 431.196: 99.35 percent for a three-phase liquid-immersed unit of 500 kVA; declared, never computed."""
    declared = None if efficiency is None else make.quantity(efficiency, "%")
    assert make.kinds(found(lot("500", **US), "0.5", "3", declared_efficiency_percent=declared)) == kinds


@pytest.mark.parametrize(
    ("power", "changes", "words"),
    [
        ("100", {"equipment": make.entry("dry big")}, "equipment must be one of"),
        ("100", {"primary_voltage_kv": None}, "must be given"),
        ("100", {"equipment": make.entry("large liquid")}, "medium power transformer"),
        ("100", {"tier": None}, "exactly one of tier and on"),
        ("9999999", {"equipment": make.entry("large liquid")}, "the table ends at"),
        ("500", {**US, "date": None}, "date (of manufacture) and phases must be given"),
        ("500", {**US, "equipment": make.entry("medium-voltage dry-type")}, "bil_kv must be given"),
    ],
)
def test_check_regulations_of_tender__what_does_not_fit_stops(power, changes, words):
    """A regulation that does not fit its lot is a finding of the tender, with the reason of the table."""
    with pytest.raises(EvaluationStopped) as stopped:
        evaluate(make.tender(lot(power, **changes)), [make.bid()])
    (finding,) = stopped.value.findings
    assert (finding.kind, finding.place) == ("tender-conflict", records.place(80))
    assert words in finding.rule


def test_check_regulations_of_tender__losses_on_another_rating():
    """Limits hold at the rated power; losses wanted on another rating cannot be held against them."""
    basis = records.loss_basis(load_loss_rating_kva=make.quantity("80", "kVA"))
    with pytest.raises(EvaluationStopped) as stopped:
        evaluate(make.tender(lot().model_copy(update={"loss_basis": basis})), [make.bid()])
    assert [f.kind for f in stopped.value.findings] == ["tender-conflict"]
