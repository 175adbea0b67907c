"""Confirmed values: put beside what was read, and only as far as the announced rule lets them."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.evaluation.clerical_errors import find_clerical_errors
from lossworth.evaluation.decisions import Confirmed, apply_confirmations, settled_by
from lossworth.findings import Finding
from lossworth.records.bid import Offer
from lossworth.records.decision import Decision
from support.confirmed import FIXED, PROVED, confirm, tender_with
from support.schedules import plain_lot, power_lot, rivals, schedule

SLIP = {"load": "8.04", "total": "8.04"}


def applied(setting: str | None, *decisions: Decision, offer: Offer | None = None) -> Confirmed:
    """Decisions applied to one offer with a slip, beside ordinary ones."""
    own = schedule(**SLIP) if offer is None else offer
    return apply_confirmations(tender_with(setting, plain_lot()), [own, *rivals()], decisions)


def kinds(findings: tuple[Finding, ...]) -> list[str]:
    """Kinds of findings."""
    return [finding.kind for finding in findings]


def test_apply_confirmations__a_proved_value_takes_the_place_of_the_one_read() -> None:
    """The new offer has the confirmed value with its own place; the old one and the rest stay as they were."""
    own = schedule(**SLIP)
    result = applied(PROVED, confirm("load_loss_kw", "7.400", "kW"), offer=own)
    confirmed = result.offers[0].load_loss_kw
    assert confirmed is not None
    assert (confirmed.value, str(confirmed.place)) == (Decimal("7.400"), "decisions.toml:3")
    assert own.load_loss_kw is not None
    assert own.load_loss_kw.value == Decimal("8.04")
    (confirmation,) = result.confirmations
    assert confirmation.as_read == own.load_loss_kw
    assert confirmation.changes_the_value
    assert result.findings == ()
    assert result.settled == {("Alder", "1", "load_loss_kw")}


def test_as_correction__keeps_both_layers() -> None:
    """The correction shows the figure as read and as confirmed, each with its place, and the decision."""
    result = applied(PROVED, confirm("load_loss_kw", "7.400", "kW"))
    correction = result.confirmations[0].as_correction()
    assert correction is not None
    assert (correction.as_read.value, correction.corrected.value) == (Decimal("8.04"), Decimal("7.400"))
    assert str(correction.as_read.source) == "bids/alder.xlsx[Offers]!B4"
    assert correction.decision is not None
    assert "may confirm a value that the bid itself proves" in correction.rule


def test_apply_confirmations__other_offers_are_the_same_objects() -> None:
    """Nobody else is touched."""
    others = rivals()
    decision = confirm("load_loss_kw", "7.4", "kW")
    result = apply_confirmations(tender_with(PROVED, plain_lot()), [schedule(**SLIP), *others], [decision])
    assert [id(offer) for offer in result.offers[1:]] == [id(offer) for offer in others]


@pytest.mark.parametrize(
    ("setting", "field", "value", "unit", "kind"),
    [
        (None, "load_loss_kw", "7.4", "kW", "rule-unset"),
        (FIXED, "load_loss_kw", "7.4", "kW", "confirmation-not-allowed"),
        (FIXED, "unit_price", "20000", "NCU", "confirmation-not-allowed"),
        (FIXED, "delivery_weeks", "20", "weeks", "confirmation-not-allowed"),
        (PROVED, "load_loss_kw", "7.3", "kW", "confirmation-not-allowed"),
        (PROVED, "load_loss_kw", "7", "kW", "confirmation-not-allowed"),
        (PROVED, "no_load_loss_kw", "0.60", "kW", "confirmation-not-allowed"),
        (PROVED, "unit_price", "20000", "NCU", "confirmation-not-allowed"),
    ],
)
def test_apply_confirmations__what_the_rule_does_not_allow(
    setting: str | None, field: str, value: str, unit: str, kind: str
) -> None:
    """The offer stays as read, and a finding says why; without a rule the evaluation stops."""
    result = applied(setting, confirm(field, value, unit))
    assert kinds(result.findings) == [kind]
    assert result.offers[0] == schedule(**SLIP)
    assert result.confirmations == ()


def test_apply_confirmations__what_only_fits_the_others_is_not_proved() -> None:
    """A load loss of 0.74 kW beside others of 7.4 looks like a slip, and the bid does not prove it."""
    decision = confirm("load_loss_kw", "7.4", "kW")
    assert kinds(applied(PROVED, decision, offer=schedule(load="0.74")).findings) == ["confirmation-not-allowed"]
    assert applied(PROVED, decision, offer=schedule(load="0.74", total="8.04")).findings == ()


def test_apply_confirmations__unset_rule_names_key_settings_and_decision() -> None:
    """Who must enter the rule reads its key, its settings and which decision needs it."""
    (finding,) = applied(None, confirm("load_loss_kw", "7.4", "kW")).findings
    assert finding.field == "rules.clarifications"
    assert all(words in finding.rule for words in (FIXED, PROVED, "decisions.toml:3"))


@pytest.mark.parametrize("setting", [None, FIXED, PROVED])
def test_apply_confirmations__as_read_needs_no_rule(setting: str | None) -> None:
    """A bidder that stands by its figure changes nothing, and is not asked again."""
    result = applied(setting, confirm("load_loss_kw", "8.040", "kW"))
    assert (result.findings, len(result.confirmations)) == ((), 1)
    assert result.confirmations[0].as_correction() is None
    again = find_clerical_errors(tender_with(setting, plain_lot()), result.offers, result.settled)
    assert again == ()


@pytest.mark.parametrize(("setting", "allowed"), [(FIXED, True), (PROVED, True), (None, False)])
def test_apply_confirmations__the_basis_of_a_loss_may_be_explained(setting: str | None, allowed: bool) -> None:
    """A rating says what a stated loss means: no price and no guarantee changes."""
    result = applied(setting, confirm("load_loss_rating_kva", "1000", "kVA"))
    assert (len(result.confirmations) == 1) is allowed


def test_apply_confirmations__rounded_to_no_fewer_digits_than_read() -> None:
    """57.2 kW at 20 MVA are 141.89175 kW at 31.5 MVA: 141.892 and 142 are that figure, 140 is not."""
    own = schedule(price="661000", no_load="14.4", load="57.2", impedance="7.9")
    tender = tender_with(PROVED, power_lot())
    used = [
        len(apply_confirmations(tender, [own], [confirm("load_loss_kw", value, "kW")]).confirmations)
        for value in ("141.89175", "141.892", "142", "1.4E+2", "140", "143")
    ]
    assert used == [1, 1, 1, 0, 0, 0]


def test_apply_confirmations__a_later_decision_holds() -> None:
    """Of two decisions on one value the later one is used, and the earlier one is named."""
    result = applied(
        PROVED, confirm("load_loss_kw", "7.4", "kW", line=3), confirm("load_loss_kw", "8.04", "kW", line=12)
    )
    assert kinds(result.findings) == ["decision-superseded"]
    assert result.offers[0].load_loss_kw is not None
    assert result.offers[0].load_loss_kw.value == Decimal("8.04")


@pytest.mark.parametrize(
    ("bidder", "field"), [("Nobody", "load_loss_kw"), ("Alder", "no_such_field"), ("Alder", "remark")]
)
def test_apply_confirmations__names_nothing_that_is_there(bidder: str, field: str) -> None:
    """A decision that fits no offer or no figure changes nothing, and says so."""
    result = applied(PROVED, confirm(field, "7.4", "kW", bidder=bidder))
    assert kinds(result.findings) == ["decision-not-applied"]


def test_apply_confirmations__missing_load_loss_from_the_stated_total() -> None:
    """What nobody wrote down is proved by total and no-load loss, and by nothing else."""
    with_total = schedule(load=None, total="8.04")
    without = schedule(load=None)
    decision = confirm("load_loss_kw", "7.40", "kW")
    assert len(applied(PROVED, decision, offer=with_total).confirmations) == 1
    assert kinds(applied(PROVED, decision, offer=without).findings) == ["confirmation-not-allowed"]


def test_apply_confirmations__a_commercial_term() -> None:
    """A total price is no field of the offer but of its terms, and is confirmed there."""
    own = schedule(total_price="210000")
    result = applied(PROVED, confirm("total_price", "210000", "NCU"), offer=own)
    assert result.offers[0].terms.total_price is not None
    assert result.offers[0].terms.total_price.place.file == "decisions.toml"


def test_settled_by__a_confirmed_value_answers_what_was_missing() -> None:
    """The finding of intake becomes a note; that of another bidder stays."""
    own = schedule(load=None, total="8.04")
    result = applied(PROVED, confirm("load_loss_kw", "7.40", "kW"), offer=own)
    missing = Finding("value-missing", "load loss", "must be stated", own.place, "", "Alder", "1")
    other = Finding("value-missing", "load loss", "must be stated", own.place, "", "Birch", "1")
    assert kinds(settled_by([missing, other], result.confirmations, result.offers)) == [
        "value-confirmed",
        "value-missing",
    ]


@pytest.mark.parametrize(("setting", "value"), [(FIXED, "7.4"), (PROVED, "7.3")])
def test_apply_confirmations__rule_is_a_clause(setting: str, value: str) -> None:
    """The announced rule stands in the middle of a message, without a full stop."""
    (finding,) = applied(setting, confirm("load_loss_kw", value, "kW")).findings
    assert not finding.rule.endswith(".")
