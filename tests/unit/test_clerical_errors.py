"""Apparent clerical errors: what is asked, what the bidder's own schedule proves, and what is left alone."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from lossworth.evaluation.clerical_errors import CHECKS, find_clerical_errors
from lossworth.evaluation.clerical_errors_suspicion import ASK, Suspicion
from lossworth.findings import KINDS, Effect
from support import commercial as make
from support import records
from support.schedules import (
    POWER_RIVALS,
    kinds,
    plain_lot,
    power_lot,
    rivals,
    schedule,
    suspected,
    suspected_of,
)


def only(suspicions: tuple[Suspicion, ...]) -> Suspicion:
    """The one suspicion."""
    assert len(suspicions) == 1, kinds(suspicions)
    return suspicions[0]


def supposed(suspicion: Suspicion) -> dict[str, Decimal]:
    """Supposed figures by field."""
    return {each.field: each.value.value for each in suspicion.suppositions}


def are_proved(suspicion: Suspicion) -> set[bool]:
    """Whether the bid itself proves the figures."""
    return {each.is_proved_by_bid for each in suspicion.suppositions}


#: One slip each in an offer of 1000 kVA beside four ordinary ones: kind, figures if it is right, proved by the bid.
SLIPS: list[tuple[str, dict[str, Any], str, dict[str, str], bool]] = [
    ("W under kW", {"no_load": "640"}, "apparent-error-loss-unit", {"no_load_loss_kw": "0.64"}, False),
    ("kW under W", {"load": ("0.0074", "W", "7.4")}, "apparent-error-loss-unit", {"load_loss_kw": "7.4"}, False),
    (
        "both in W, total in kW",
        {"no_load": "640", "total": "8.04"},
        "apparent-error-loss-unit",
        {"no_load_loss_kw": "0.64"},
        True,
    ),
    (
        "total as load loss",
        {"load": "8.04", "total": "8.04"},
        "apparent-error-total-as-load-loss",
        {"load_loss_kw": "7.4"},
        True,
    ),
    (
        "load loss that includes the no-load loss, by its parts",
        {"load": "8.04", "resistive": "6.6", "stray": "0.8"},
        "apparent-error-total-as-load-loss",
        {"load_loss_kw": "7.4"},
        True,
    ),
    (
        "swapped",
        {"no_load": "7.4", "load": "0.64"},
        "apparent-error-losses-swapped",
        {"no_load_loss_kw": "0.64", "load_loss_kw": "7.4"},
        True,
    ),
    ("decimal mark", {"load": "0.74"}, "apparent-error-decimal-mark", {"load_loss_kw": "7.4"}, False),
    (
        "decimal mark, the other way",
        {"no_load": "6.4"},
        "apparent-error-decimal-mark",
        {"no_load_loss_kw": "0.64"},
        False,
    ),
    (
        "decimal mark of the impedance",
        {"impedance": "60"},
        "apparent-error-decimal-mark",
        {"impedance_percent": "6"},
        False,
    ),
    (
        "decimal mark, proved by the total",
        {"load": "0.74", "total": "8.04"},
        "apparent-error-decimal-mark",
        {"load_loss_kw": "7.4"},
        True,
    ),
    ("one phase by size", {"load": "2.47"}, "apparent-error-phases", {"load_loss_kw": "7.41"}, False),
    (
        "one phase by the total",
        {"no_load": "0.213", "load": "2.467", "total": "8.04"},
        "apparent-error-phases",
        {"no_load_loss_kw": "0.639", "load_loss_kw": "7.401"},
        True,
    ),
    (
        "one phase of the core, by the total",
        {"no_load": "0.213", "total": "8.039"},
        "apparent-error-phases",
        {"no_load_loss_kw": "0.639"},
        True,
    ),
    (
        "at 20 °C where its parts are at 75 °C",
        {"load": "6.480", "resistive": "6.4", "stray": "1.0"},
        "apparent-error-reference-temperature",
        {"load_loss_kw": "7.4"},
        True,
    ),
    ("temperature of no standard", {"temperature": "20"}, "apparent-error-reference-temperature", {}, False),
    ("parts and total", {"total": "8.60"}, "apparent-error-loss-sum", {}, False),
    ("parts of the load loss", {"resistive": "5.1", "stray": "1.0"}, "apparent-error-loss-sum", {}, False),
    (
        "resistance above impedance",
        {"impedance": "0.7"},
        "apparent-error-decimal-mark",
        {"impedance_percent": "7"},
        False,
    ),
    ("efficiency of other losses", {"efficiency": "98.20"}, "apparent-error-efficiency", {}, False),
    ("core too good", {"no_load": "0.240"}, "apparent-error-low-loss", {}, False),
    ("winding too good", {"load": "4.3"}, "apparent-error-low-loss", {}, False),
    ("price far below", {"price": "16000"}, "apparent-error-price", {}, False),
    ("price of ten units", {"price": "210000"}, "apparent-error-price", {"unit_price": "21000"}, False),
    (
        "price without its last digit, by the total",
        {"price": "2100", "total_price": "210000"},
        "apparent-error-price",
        {"unit_price": "21000"},
        True,
    ),
]


@pytest.mark.parametrize(("figures", "kind", "values", "proved"), [s[1:] for s in SLIPS], ids=[s[0] for s in SLIPS])
def test_find_clerical_errors__one_slip(
    figures: dict[str, Any], kind: str, values: dict[str, str], proved: bool
) -> None:
    """Each slip gives one question of its kind, its figure if right, and whether the bid itself proves it."""
    found = only(suspected_of(schedule(**figures), *rivals()))
    assert found.finding.kind == kind
    assert supposed(found) == {field: Decimal(value) for field, value in values.items()}
    assert are_proved(found) == ({proved} if values else set())


@pytest.mark.parametrize("figures", [s[1] for s in SLIPS], ids=[s[0] for s in SLIPS])
def test_find_clerical_errors__others_are_not_asked(figures: dict[str, Any]) -> None:
    """The slip of one bidder raises no question to another."""
    everybody = suspected(schedule(**figures), *rivals())
    assert {each.offer for each in everybody} == {"Alder"}


ORDINARY: list[tuple[str, dict[str, Any]]] = [
    ("as the others", {}),
    (
        "amorphous core, half the no-load loss",
        {"no_load": "0.330", "load": "6.90", "price": "26600", "impedance": "6.3"},
    ),
    ("above a maximum by the no-load loss, and nothing proves it", {"load": "8.04"}),
    ("total is the sum", {"total": "8.04"}),
    ("total is the sum, rounded", {"total": "8.0"}),
    ("total with fans", {"auxiliary": "0.2", "total": "8.24"}),
    ("watts stated as watts", {"no_load": ("0.64", "W", "640"), "load": ("7.4", "W", "7400")}),
    ("parts of the load loss", {"resistive": "6.6", "stray": "0.8", "temperature": "75"}),
    ("stated at 85 °C", {"temperature": "85"}),
    ("efficiency at full load", {"efficiency": "99.20"}),
    ("efficiency at half load", {"efficiency": "99.50"}),
    ("peak efficiency index", {"efficiency": "99.565"}),
    ("no impedance", {"impedance": None}),
    ("no losses", {"no_load": None, "load": None}),
    ("no price", {"price": None}),
    ("dearer by a half", {"price": "32000"}),
    ("a low core alone, a third of the others", {"no_load": "0.245"}),
]


@pytest.mark.parametrize("figures", [o[1] for o in ORDINARY], ids=[o[0] for o in ORDINARY])
def test_find_clerical_errors__ordinary_offers(figures: dict[str, Any]) -> None:
    """What a good engineer would not ask about is left alone."""
    assert kinds(suspected_of(schedule(**figures), *rivals())) == []


def test_check_rating__without_fans() -> None:
    """Impedance and load loss of the stage without fans: 31.5/20 and its square."""
    offer = schedule(price="661000", no_load="14.4", load="57.2", impedance="7.9")
    found = only(suspected_of(offer, *rivals(figures=POWER_RIVALS), lot=power_lot()))
    assert found.finding.kind == "apparent-error-rating"
    assert supposed(found) == {"load_loss_kw": Decimal("141.89175"), "impedance_percent": Decimal("12.4425")}
    assert are_proved(found) == {True}
    assert "31500/20000 is 12.4425 %" in found.finding.rule
    assert "median of the 4 other offers" in found.finding.rule


def test_check_rating__single_bid() -> None:
    """The tender's own stages and the impedance suffice where nobody else offers."""
    offer = schedule(price="661000", no_load="14.4", load="57.2", impedance="7.9")
    assert kinds(suspected_of(offer, lot=power_lot())) == ["apparent-error-rating"]


def test_check_rating__by_size_alone() -> None:
    """Without an impedance the size against three others raises the question, and proves nothing."""
    offer = schedule(price="661000", no_load="14.4", load="54", impedance=None)
    found = only(suspected_of(offer, *rivals(figures=POWER_RIVALS), lot=power_lot()))
    assert (found.finding.kind, are_proved(found)) == ("apparent-error-rating", {False})
    assert supposed(found) == {"load_loss_kw": Decimal("133.95375")}


def test_check_rating__preferred_rating_where_the_tender_names_none() -> None:
    """A unit of 630 kVA in a lot of 1000 kVA, by impedance and load loss."""
    offer = schedule(load="2.94", impedance="3.78")
    found = only(suspected_of(offer, *rivals()))
    assert found.finding.kind == "apparent-error-rating"
    assert supposed(found)["impedance_percent"] == Decimal(6)


@pytest.mark.parametrize(
    ("load", "impedance"),
    [("134", "12.4"), ("57.2", "12.5"), ("134", "7.9"), ("134", "11.1")],
    ids=["ordinary", "impedance as specified", "load loss as the others", "impedance a little low"],
)
def test_check_rating__needs_both_signs(load: str, impedance: str) -> None:
    """An impedance off by itself, or a loss off by itself, is no sign of another rating."""
    offer = schedule(price="661000", no_load="14.4", load=load, impedance=impedance)
    found = kinds(suspected_of(offer, *rivals(figures=POWER_RIVALS), lot=power_lot()))
    assert "apparent-error-rating" not in found


@pytest.mark.parametrize(
    "load", ["26", "60"], ids=["ten times as much is twice the others", "between a third and a half"]
)
def test_check_low_losses__no_factor_brings_it_to_the_others(load: str) -> None:
    """A load loss far below the others that no slip explains is asked about as it stands."""
    offer = schedule(price="661000", no_load="14.4", load=load, impedance="12.5")
    found = kinds(suspected_of(offer, *rivals(figures=POWER_RIVALS), lot=power_lot()))
    assert found == ["apparent-error-low-loss"]


def test_check_low_losses__below_the_band_without_others() -> None:
    """Half of the least plausible load loss is no slip of a decade, although ten times as much would be plausible."""
    assert kinds(suspected_of(schedule(load="1.9"))) == ["apparent-error-low-loss"]


def test_check_resistance__cannot_exceed_the_impedance() -> None:
    """7.4 kW of 100 kVA are 7.4 % resistance, more than 6 % impedance."""
    lot = plain_lot(rated_power_kva=records.quantity("100", "kVA"))
    assert "apparent-error-resistance" in kinds(suspected_of(schedule(no_load=None), lot=lot))


def test_check_resistance__at_the_stated_rating() -> None:
    """The rating that the bidder states for its load loss is the base."""
    assert kinds(suspected_of(schedule(rating="100"), *rivals())) == ["apparent-error-resistance"]


def test_check_price__against_the_estimate_alone() -> None:
    """A single bid is compared with the buyer's estimate."""
    lot = plain_lot(estimated_unit_price=records.quantity("30000", "NCU"))
    found = only(suspected_of(schedule(), lot=lot))
    assert found.finding.kind == "apparent-error-price"
    assert "30 % below the buyer's estimate" in found.finding.rule


def test_check_price__against_own_lots() -> None:
    """A bidder at the level of the others in two lots, and a third below that level in the third."""
    lots = [plain_lot(id=name) for name in ("1", "2", "3")]
    others = [offer for lot in lots for offer in rivals(lot.id)]
    own = [schedule(lot="1", price="28000"), schedule(lot="2", price="28000"), schedule(lot="3", price="19000")]
    found = only(suspected(*own, *others, tender=records.tender(*lots)))
    assert (found.finding.kind, found.finding.lot) == ("apparent-error-price", "3")
    assert "the bidder's 2 other lots" in found.finding.rule


def test_check_price__in_another_currency() -> None:
    """Prices are compared in the evaluation currency; without a rate they are not."""
    tender = records.tender(plain_lot(), exchange=records.exchange(FCU="1.25"))
    fair, low = (schedule(price=price, currency="FCU") for price in ("16800", "12000"))
    assert suspected(fair, *rivals(), tender=tender) == ()
    assert kinds(suspected(low, *rivals(), tender=tender)) == ["apparent-error-price"]
    assert suspected(low, *rivals()) == ()


def test_find_clerical_errors__two_others_that_disagree_tell_nothing() -> None:
    """Of two others one is wrong: which one, no median can say."""
    others = [schedule("Birch"), schedule("Cedar", load="0.74")]
    lot = plain_lot(rated_power_kva=records.quantity("10000", "kVA"))
    assert kinds(suspected_of(schedule(), *others, lot=lot)) == []


def test_find_clerical_errors__alternatives_are_compared_and_not_counted() -> None:
    """An alternative is asked about; the median is of base offers of others."""
    alternative = schedule(alternative="copper", load="0.74")
    found = only(suspected(schedule(), alternative, *rivals()))
    assert found.offer == "Alder, alternative copper"
    assert "the 4 other offers" in found.finding.rule


def test_find_clerical_errors__confirmed_values_are_not_asked_again() -> None:
    """What the bidder confirmed is settled."""
    slip = schedule(load="8.04", total="8.04")
    tender = records.tender(plain_lot())
    assert len(find_clerical_errors(tender, [slip])) == 1
    assert find_clerical_errors(tender, [slip], {("Alder", "1", "load_loss_kw")}) == ()


def test_find_clerical_errors__two_slips_in_one_offer_are_two_questions() -> None:
    """A price and a loss of one offer are asked about apart."""
    found = suspected_of(schedule(load="8.04", total="8.04", price="2100"), *rivals())
    assert kinds(found) == ["apparent-error-total-as-load-loss", "apparent-error-price"]


def test_find_clerical_errors__dry_type_has_bands_of_its_own() -> None:
    """A dry unit of 400 kVA with 5.5 kW load loss is ordinary, a liquid-immersed one of 0.2 kW is not."""
    lot = plain_lot(rated_power_kva=records.quantity("400", "kVA"), cooling=records.entry("AN"))
    assert suspected_of(schedule(no_load="0.68", load="5.5"), lot=lot) == ()
    assert kinds(suspected_of(schedule(no_load="0.15", load="5.5"), lot=lot)) == ["apparent-error-low-loss"]


def all_found() -> list[Suspicion]:
    """One suspicion of each slip, with that of the rating and that of the resistance."""
    rating = suspected_of(schedule(load="57.2", impedance="7.9", no_load=None), lot=power_lot())
    found = [each for _, figures, *_ in SLIPS for each in suspected_of(schedule(**figures), *rivals())]
    return [*found, *rating, *suspected_of(schedule(rating="100"), *rivals())]


def test_kinds__each_is_triggered() -> None:
    """Every kind of apparent error has a slip that triggers it, and is a note."""
    of_table = {slug for slug in KINDS if slug.startswith("apparent-error-")}
    assert {each.finding.kind for each in all_found()} == of_table
    assert {KINDS[slug].effect for slug in of_table} == {Effect.NOTE}
    assert len(of_table) == len(CHECKS)


@pytest.mark.parametrize("found", all_found(), ids=lambda each: each.finding.kind)
def test_find_clerical_errors__every_question_is_complete(found: Suspicion) -> None:
    """A question has its place, shows what the bidder states, and names no rank, price, other bidder or median."""
    question = found.finding.fix
    assert question.startswith(ASK)
    assert found.finding.place is not None
    assert found.statements
    assert {statement.place.file for statement in found.statements} == {"bids/alder.xlsx"}
    words = question.casefold()
    told = ("rank", "price", "median", "other offer", "bidders", "cheap", "lowest", "award", "birch", "cedar", "21000")
    assert [word for word in told if word in words] == []


def test_docs__have_a_row_for_every_kind() -> None:
    """The page on apparent errors describes each check, in the order in which they run."""
    page = (Path(__file__).parents[2] / "docs" / "apparent_errors.md").read_text(encoding="utf-8")
    rows = [line.split("`")[1] for line in page.splitlines() if line.startswith("| `")]
    assert {f"apparent-error-{row}" for row in rows} == {each.finding.kind for each in all_found()}
    assert len(rows) == len(CHECKS)


def test_check_rating__a_stated_rating_is_not_asked_again() -> None:
    """A bidder that states the lower rating itself is converted or asked by the loss basis, not suspected of it."""
    offer = records.offer(
        load_loss_kw=records.quantity("57.2", "kW"),
        no_load_loss_kw=records.quantity("14.4", "kW"),
        impedance_percent=records.quantity("7.9", "%"),
        load_loss_rating_kva=records.quantity("20000", "kVA"),
    )
    lot = records.lot(
        description=records.entry("20/31.5 MVA, 33/11 kV"),
        rated_power_kva=records.quantity("31500", "kVA"),
        cooling=records.entry("ONAN/ONAF"),
        impedance_percent=records.quantity("12.5", "%"),
        impedance_tolerance_percentage_points=records.quantity("0.5", "%"),
        loss_basis=records.loss_basis(),
    )
    silent = offer.model_copy(update={"load_loss_rating_kva": None})
    kinds = {
        name: {s.finding.kind for s in find_clerical_errors(records.tender(lot), [one], ())}
        for name, one in (("stated", offer), ("silent", silent))
    }
    assert "apparent-error-rating" in kinds["silent"]
    assert "apparent-error-rating" not in kinds["stated"]


def test_check_price__as_corrected_by_the_rule():
    """A price that is ordinary as read and far too low as corrected is asked about."""
    settings = {"arithmetic_errors": "correct", "unit_price_against_total": "total governs"}
    tender = make.tender(plain_lot(), settings={**settings, "misplaced_decimal": "no exception"})
    asked = [s for s in suspected(schedule(total_price="120000"), *rivals(), tender=tender) if s.offer == "Alder"]
    assert kinds(tuple(asked)) == ["apparent-error-price"]
    assert "as corrected by the announced rule, " in asked[0].finding.rule
    assert not [s for s in suspected(schedule(total_price="210000"), *rivals(), tender=tender) if s.offer == "Alder"]
