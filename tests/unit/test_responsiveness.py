"""Limits: the guarantee at the limit passes, one last digit beyond it fails, and silence is not consent."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.loss_basis import on_basis
from lossworth.evaluation.responsiveness import check_offer, peak_efficiency_index_percent
from lossworth.records.commercial import OfferTerms
from support import records as make

LIMITS = {
    "maximum_no_load_loss_kw": make.quantity("0.130", "kW"),
    "maximum_load_loss_kw": make.quantity("1.250", "kW"),
    "impedance_percent": make.quantity("12.5", "%"),
    "impedance_tolerance_percentage_points": make.quantity("0.5", "%"),
    "latest_delivery_weeks": make.quantity("36", "weeks"),
}
AT_THE_LIMIT = {
    "no_load_loss_kw": make.quantity("0.130", "kW"),
    "load_loss_kw": make.quantity("1.250", "kW"),
    "impedance_percent": make.quantity("13.0", "%"),
    "delivery_weeks": make.quantity("36", "weeks"),
}


def check(offer, lot):
    """Findings on the limits of an offer as read."""
    return check_offer(on_basis(offer, lot), lot)


def kinds(**changes) -> list[str]:
    """Kinds of the findings on an offer at all limits, with changes."""
    return [f.kind for f in check(make.offer(**(AT_THE_LIMIT | changes)), make.lot(**LIMITS))]


def test_check_offer__at_the_limits():
    """A guarantee equal to its limit passes."""
    assert kinds() == []


@pytest.mark.parametrize(
    ("field", "value", "kind"),
    [
        ("no_load_loss_kw", "0.131", "no-load-loss-above-maximum"),
        ("load_loss_kw", "1.251", "load-loss-above-maximum"),
        ("impedance_percent", "13.01", "impedance-outside"),
        ("impedance_percent", "11.99", "impedance-outside"),
        ("delivery_weeks", "36.1", "delivery-too-late"),
    ],
)
def test_check_offer__one_digit_beyond(field, value, kind):
    """One unit of the last digit beyond a limit fails."""
    assert kinds(**{field: make.quantity(value, AT_THE_LIMIT[field].unit)}) == [kind]


@pytest.mark.parametrize("field", ["impedance_percent", "delivery_weeks"])
def test_check_offer__limit_not_answered(field):
    """A value that a limit needs and the bidder does not state is a finding."""
    assert kinds(**{field: None}) == ["limit-not-answered"]


def test_check_offer__no_limits():
    """Without limits nothing is asked."""
    assert check(make.offer(), make.lot()) == ()


def test_check_offer__several_faults_at_once():
    """All faults come at once."""
    assert kinds(no_load_loss_kw=make.quantity("1", "kW"), load_loss_kw=make.quantity("9", "kW")) == [
        "no-load-loss-above-maximum",
        "load-loss-above-maximum",
    ]


@pytest.mark.parametrize(
    ("no_load", "load", "index"),
    [
        ("15.2", "134", "99.7135"),
        ("14.4", "57.2", "99.8178"),
        ("14.4", "141.892", "99.7130"),
        ("15.8", "139", "99.7025"),
    ],
)
def test_peak_efficiency_index_percent__demo(no_load, load, index):
    """Peak efficiency indexes of lot 4 of the demonstration (invented bids; formula of Regulation (EU) 548/2014)."""
    assert round(peak_efficiency_index_percent(D(no_load), D(load), D(31500)), 4) == D(index)


def test_check_peak_efficiency_index__exact_at_the_limit():
    """P0 Pk exactly at the square of the limit passes, a hair more fails."""
    lot = make.lot(
        minimum_peak_efficiency_index_percent=make.quantity("99"), rated_power_kva=make.quantity("200", "kVA")
    )
    at_limit = make.offer(no_load_loss_kw=make.quantity("0.5", "kW"), load_loss_kw=make.quantity("2", "kW"))
    beyond = make.offer(no_load_loss_kw=make.quantity("0.5", "kW"), load_loss_kw=make.quantity("2.000001", "kW"))
    assert check(at_limit, lot) == ()
    assert [f.kind for f in check(beyond, lot)] == ["efficiency-below-minimum"]


def terms(lot_changes, **stated):
    """Kinds of the findings on an offer with these commercial terms."""
    offer = make.offer(terms=OfferTerms(**stated))
    return [finding.kind for finding in check(offer, make.lot(**lot_changes))]


@pytest.mark.parametrize(
    ("sound", "kinds"), [("45", []), ("45.1", ["sound-level-above-maximum"]), (None, ["limit-not-answered"])]
)
def test_check_sound_level__at_the_limit(sound, kinds):
    """A guarantee at the limit passes, a tenth above fails, silence is a finding."""
    stated = None if sound is None else make.quantity(sound, "dB(A)")
    assert terms({"maximum_sound_level_db": make.quantity("45", "dB(A)")}, sound_level_db=stated) == kinds


@pytest.mark.parametrize(
    ("liquid", "kinds"),
    [(" Natural  ESTER", []), ("mineral oil", ["liquid-not-accepted"]), (None, ["limit-not-answered"])],
)
def test_check_insulating_liquid__one_of_those_accepted(liquid, kinds):
    """Case and blanks do not matter, another liquid does."""
    stated = None if liquid is None else make.entry(liquid)
    assert terms({"accepted_liquids": ("natural ester", "synthetic ester")}, insulating_liquid=stated) == kinds


@pytest.mark.parametrize(
    ("declared", "kinds"), [(True, []), (False, ["pcb-free-not-declared"]), (None, ["limit-not-answered"])]
)
def test_check_pcb_free__required_declaration(declared, kinds):
    """A declaration that the tender requires; nothing is asked where it requires none."""
    assert terms({"pcb_free_required": True}, pcb_free=declared) == kinds
    assert terms({}, pcb_free=declared) == []
