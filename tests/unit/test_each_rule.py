"""Each announced rule by itself: the same bids under each of its settings, and another outcome."""

from __future__ import annotations

import datetime
from dataclasses import dataclass
from typing import Any

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.records.bid import Offer
from lossworth.records.decision import Decision
from lossworth.records.quantity import Quantity
from lossworth.records.rules import RULE_KINDS
from support import commercial as make
from support import records
from support.confirmed import FIXED, PROVED, confirm

LATER = {"loss_guarantee": "acts on test results, after the award"}


@dataclass(frozen=True)
class Case:
    """Bids whose outcome hangs on one rule.

    `outcomes` are, by setting, the names on rank 1, or what stops the evaluation. `beside` are other rules that the
    bids need, the same under every setting.
    """

    offers: tuple[Offer, ...]
    outcomes: dict[Any, tuple[str, ...] | str]
    beside: dict[str, Any]
    tender: dict[str, Any]
    decisions: tuple[Decision, ...] = ()


def case(*offers: Offer, outcomes: dict[Any, tuple[str, ...] | str], decisions=(), lot=None, beside=None, **tender):
    """A case in one lot."""
    return Case(offers, outcomes, beside or {}, {"lots": (lot or records.lot(),), **tender}, decisions)


def total(value: str) -> Quantity:
    """A stated total."""
    return make.quantity(value, "NCU")


def percent(value: str) -> Quantity:
    """A stated percentage."""
    return make.quantity(value, "%")


def priced(value: str) -> dict[str, Quantity]:
    """A price for the one item."""
    return {"spare bushing": make.quantity(value, "NCU")}


ALDER, BIRCH = ("Alder",), ("Birch",)
WRONG_TOTAL = make.bid("Alder", "4000", total_price=total("42000"))
WITH_ITEM = records.lot(items=(make.item(),), maximum_load_loss_kw=make.quantity("2", "kW"))
WITHOUT_ITEM = (make.bid("Alder", "4000"), make.bid("Birch", "4150", item_prices=priced("100")))
DEAR_ITEM = make.bid("Cedar", "9000", item_prices=priced("700"), load_loss_kw=make.quantity("2.001", "kW"))
FOREIGN = (make.bid("Alder", "3000", currency=make.entry("FCU")), make.bid("Birch", "4100"))
OPENED = datetime.date(2026, 9, 15)

CASES: dict[str, Case] = {
    "arithmetic_errors": case(
        WRONG_TOTAL,
        make.bid("Birch", "4100"),
        outcomes={"correct": BIRCH, "take as read": ALDER, "reject": BIRCH},
        beside={"unit_price_against_total": "total governs"},
    ),
    "unit_price_against_total": case(
        WRONG_TOTAL,
        make.bid("Birch", "4100"),
        outcomes={"unit price governs": ALDER, "total governs": BIRCH},
        beside={"arithmetic_errors": "correct"},
    ),
    "misplaced_decimal": case(
        make.bid("Alder", "400", total_price=total("40000")),
        make.bid("Birch", "3900"),
        lot=records.lot(estimated_unit_price=make.quantity("4100", "NCU")),
        outcomes={"total governs": BIRCH, "no exception": ALDER},
        beside={"arithmetic_errors": "correct", "unit_price_against_total": "unit price governs"},
    ),
    "missing_item": case(
        *WITHOUT_ITEM,
        DEAR_ITEM,
        lot=WITH_ITEM,
        outcomes={"highest of the others": BIRCH, "average of the others": ALDER, "reject": BIRCH},
        beside={"missing_item_among": "all offers received"},
    ),
    "missing_item_among": case(
        *WITHOUT_ITEM,
        DEAR_ITEM,
        lot=WITH_ITEM,
        outcomes={"all offers received": BIRCH, "responsive offers": ALDER},
        beside={"missing_item": "highest of the others"},
    ),
    "unconditional_discounts": case(
        make.bid("Alder", "4000"),
        make.bid("Birch", "4150", unconditional_discount_percent=percent("5")),
        outcomes={"deduct": BIRCH, "ignore": ALDER},
    ),
    "prompt_payment_discounts": case(
        make.bid("Alder", "4000"),
        make.bid("Birch", "4150", prompt_payment_discount_percent=percent("5")),
        outcomes={"deduct": BIRCH, "ignore": ALDER},
    ),
    "exchange_rate_day": case(
        *FOREIGN,
        outcomes={"day of opening": ALDER, "days before opening": "tender-conflict", "day of award": "tender-conflict"},
        beside={"exchange_rate_days_before": make.quantity("7")},
        exchange=records.exchange(FCU="1.25"),
        identity=records.tender().identity.model_copy(update={"opening_date": OPENED}),
        planned_award=datetime.date(2026, 11, 30),
    ),
    "taxes": case(
        make.bid("Alder", "4000", tax_included=False),
        make.bid(
            "Birch",
            "4647.50",
            tax_included=True,
            no_load_loss_kw=make.quantity("0.105", "kW"),
            load_loss_kw=make.quantity("1.100", "kW"),
        ),
        outcomes={"excluded": BIRCH, "included": ALDER},
        taxes=make.taxes("10"),
    ),
    "payment_terms": case(
        make.bid("Alder", "4000", payments=(make.payment("1", "0"),)),
        make.bid("Birch", "4100"),
        outcomes={"discount to a common date": BIRCH, "ignore": ALDER},
        payment_terms=make.payment_terms("10"),
    ),
    "loss_tolerance": case(
        make.bid("Alder", "4000", claimed_tolerance_percent=percent("10")),
        make.bid("Birch", "4100"),
        outcomes={
            "none, the guarantee is a ceiling": BIRCH,
            "allowed at test, money due above the guarantee": ALDER,
            "evaluate at guarantee plus tolerance": BIRCH,
        },
    ),
    "price_variation": case(
        make.bid("Alder", "4000", price_basis="variable"),
        make.bid("Birch", "4100"),
        outcomes={"evaluate at the base date": ALDER, "reject variable prices": BIRCH},
    ),
    "preference": case(
        make.bid("Alder", "4000", origin=make.entry("abroad")),
        make.bid("Birch", "4100", origin=make.entry("Home")),
        outcomes={"none": ALDER, "margin added to other prices": BIRCH},
        preference=make.preference("7.5"),
    ),
    "alternatives": case(
        make.bid("Alder", "4200"),
        make.bid("Alder", "3900", alternative="ester"),
        make.bid("Birch", "4100"),
        outcomes={
            "not accepted": BIRCH,
            "only if the base offer is responsive": ("Alder, alternative ester",),
            "only of the lowest ranked base bidder": BIRCH,
            "as offers of their own": ("Alder, alternative ester",),
        },
    ),
    "tie_order": case(
        records.priced("Alder", "4000", "0.12", "1.2", delivery_weeks=make.quantity("30")),
        records.priced("Birch", "3890", "0.13", "1.2", delivery_weeks=make.quantity("20")),
        records.priced("Cedar", "4022", "0.118", "1.2", delivery_weeks=make.quantity("25")),
        outcomes={
            ("lower no-load loss",): ("Cedar",),
            ("lower evaluated price",): BIRCH,
            ("earlier delivery",): BIRCH,
            ("drawing of lots",): ALDER,
        },
        decisions=(
            make.decide("break tie", "Alder", order=1),
            make.decide("break tie", "Birch", order=3),
            make.decide("break tie", "Cedar", order=2),
        ),
    ),
    "clarifications": case(
        make.bid("Alder", "4000", load_loss_kw=None, total_loss_kw=make.quantity("1.32", "kW")),
        make.bid("Birch", "4100"),
        outcomes={PROVED: ALDER, FIXED: BIRCH},
        decisions=(confirm("load_loss_kw", "1.20", "kW"),),
    ),
}
#: The rules that one tender of the case needs, taken away one at a time.
STOPPING = [
    "arithmetic_errors",
    "unit_price_against_total",
    "misplaced_decimal",
    "missing_item",
    "missing_item_among",
    "unconditional_discounts",
    "prompt_payment_discounts",
    "taxes",
    "payment_terms",
    "loss_tolerance",
    "price_variation",
    "preference",
    "alternatives",
    "clarifications",
]


def outcome(key: str, setting: object) -> tuple[str, ...] | str:
    """Names on rank 1, or the kind of the finding that stops the evaluation."""
    of = CASES[key]
    fields = {name: value for name, value in of.tender.items() if name != "lots"}
    settings = {**of.beside, **({} if setting is None else {key: setting})}
    tender = make.tender(*of.tender["lots"], settings=settings, **fields)
    try:
        lot = evaluate(tender, of.offers, (), of.decisions).lots[0]
    except EvaluationStopped as stopped:
        (finding,) = stopped.findings
        return f"{finding.kind} {finding.field}" if finding.kind == "rule-unset" else finding.kind
    return tuple(offer.name for offer in lot.winners)


def test_cases__every_rule_has_one() -> None:
    """Each rule that the tender can announce is here, or acts after the award."""
    assert {kind.key for kind in RULE_KINDS} - set(LATER) == set(CASES)


@pytest.mark.parametrize("key", CASES)
def test_cases__every_setting_has_an_outcome(key: str) -> None:
    """No setting of a rule is left out."""
    (kind,) = (kind for kind in RULE_KINDS if kind.key == key)
    stated = {setting[0] if isinstance(setting, tuple) else setting for setting in CASES[key].outcomes}
    assert set(kind.sentences) == stated


@pytest.mark.parametrize(("key", "setting"), [(key, setting) for key, of in CASES.items() for setting in of.outcomes])
def test_evaluate__rule_alone_decides(key: str, setting: object) -> None:
    """The same bids under each setting of one rule come to the outcome of that setting."""
    assert CASES[key].outcomes[setting] == outcome(key, setting)


@pytest.mark.parametrize("key", CASES)
def test_cases__settings_differ(key: str) -> None:
    """The cases of one rule would not pass whatever the rule is."""
    assert len(set(CASES[key].outcomes.values())) > 1


@pytest.mark.parametrize("key", STOPPING)
def test_evaluate__unset_rule_stops_with_its_name(key: str) -> None:
    """Without the rule that the bids need nothing is ranked, and the finding names its key."""
    assert outcome(key, None) == f"rule-unset rules.{key}"


def test_evaluate__tie_order_unset_leaves_a_tie() -> None:
    """Without an order of ties nothing stops: the tie stays, and is shown."""
    assert outcome("tie_order", None) == ("Alder", "Birch", "Cedar")


def test_evaluate__exchange_day_unset_needs_nothing() -> None:
    """A tender that states rates with their date has fixed the day itself."""
    assert outcome("exchange_rate_day", None) == ALDER
