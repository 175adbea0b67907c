"""What the bid form asks, from what the tender announces."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.evaluation.rules_content import fingerprint, rules_content
from lossworth.intake.columns import COLUMNS
from lossworth.intake.table_header import recognized_columns
from lossworth.records.bid_columns import BID_HEADINGS, heading_text, payment_label
from lossworth.records.tender import CoolingValuation, Tender
from lossworth.report.bid_form_view import BidFormView, FormField
from lossworth.report.build_form import build_form
from support import records as make
from support.rules_tenders import full_lot, full_tender, ruled


def fields(tender: Tender) -> list[str]:
    """Columns of the price schedule."""
    return [column.field for column in build_form(tender).columns]


def labels(view: BidFormView) -> dict[str, FormField]:
    """Questions on the whole bid by their labels."""
    return {field.label: field for group in view.groups for field in group.fields}


def test_headings__those_that_the_reader_knows_mean_the_same_field() -> None:
    """A heading of the form fills the field for which the form asks it, or is not known yet; never another."""
    for heading in BID_HEADINGS:
        known = recognized_columns([heading_text(heading.field)])
        assert known in ({heading.field}, set()), heading
    known_fields = {column.field for column in COLUMNS} - {"quantity"}  # printed, never asked
    assert known_fields <= {heading.field for heading in BID_HEADINGS}


def test_build_form__plain_tender_asks_what_every_lot_needs() -> None:
    """Without limits and terms the form asks price, losses, impedance, delivery and words."""
    assert fields(make.tender()) == [
        "unit_price",
        "total_price",
        "unconditional_discount_percent",
        "no_load_loss_kw",
        "load_loss_kw",
        "auxiliary_loss_kw",
        "total_loss_kw",
        "impedance_percent",
        "delivery_weeks",
        "cooling",
        "deviations",
        "remark",
    ]


def test_build_form__full_tender_asks_more() -> None:
    """Limits, adders, items, a basis of losses and a preference ask for their values."""
    more = set(fields(full_tender())) - set(fields(make.tender()))
    assert more == {
        "item: spare bushing set",
        "load_loss_rating_kva",
        "reference_temperature_c",
        "resistive_loss_kw",
        "stray_loss_kw",
        "insulating_liquid",
        "pcb_free",
        "sound_level_db",
        "origin",
    }


def test_build_form__a_lot_is_asked_only_what_it_needs() -> None:
    """What another lot needs is closed in this one."""
    one, two = build_form(full_tender()).lots
    assert {"item: spare bushing set", "pcb_free", "sound_level_db"} <= one.cells.keys() - two.cells.keys()


@pytest.mark.parametrize(
    ("changes", "needed"),
    [
        ({}, False),
        ({"rates": make.rates(auxiliary="1500")}, False),
        ({"cooling": make.entry("ONAN/ONAF")}, False),
        ({"rates": make.rates(auxiliary="1500"), "cooling": make.entry("ONAN/ONAF")}, True),
    ],
)
def test_build_form__auxiliary_loss_is_needed_where_fans_run_and_are_valued(
    changes: dict[str, object], needed: bool
) -> None:
    """A unit without fans, or a tender without a rate for them, may leave it blank."""
    (lot,) = build_form(make.tender(make.lot(**changes))).lots
    assert needed is lot.cells["auxiliary_loss_kw"].needed


def test_build_form__cooling_power_where_it_is_valued_through_a_and_b() -> None:
    """Then the two cooling powers are asked, and the auxiliary loss is not needed."""
    lot = make.lot(cooling=make.entry("ONAF"), cooling_valuation=CoolingValuation.THROUGH_A_AND_B)
    (asked,) = build_form(make.tender(lot)).lots
    assert asked.cells["cooling_power_rated_kw"].needed
    assert not asked.cells["auxiliary_loss_kw"].needed


def test_build_form__losses_in_the_unit_of_the_limits() -> None:
    """Limits in W make a form in W, with bounds in W; mixed ones a form in kW."""
    in_w = make.quantity("0.130", "W", "130")
    form = build_form(make.tender(make.lot(maximum_no_load_loss_kw=in_w)))
    assert "No-load loss [W]" in [column.heading for column in form.columns]
    answer = form.lots[0].cells["no_load_loss_kw"].answer
    assert (Decimal(130), True) == (answer.at_most, answer.is_limit)
    assert form.lots[0].power_in_loss_unit == 100_000
    mixed = make.lot(maximum_no_load_loss_kw=in_w, maximum_load_loss_kw=make.quantity("1.25", "kW"))
    assert "No-load loss [kW]" in [column.heading for column in build_form(make.tender(mixed)).columns]


def test_build_form__currency_in_the_headings_only_where_there_is_one() -> None:
    """One currency is given and stands with the price; of several the bidder chooses one."""
    alone = build_form(make.tender())
    assert (alone.columns[0].heading, labels(alone)["Currency"].fixed) == ("Unit price [NCU]", "NCU")
    several = build_form(make.tender(exchange=make.exchange(FCU="1.25")))
    assert (several.columns[0].heading, labels(several)["Currency"].fixed) == ("Unit price", "")
    assert labels(several)["Currency"].answer.choices == ("NCU", "FCU")


def test_build_form__price_terms_of_the_tender() -> None:
    """The rules for which there are adders and that of the delivered point; all of them where there are no adders."""
    assert labels(build_form(full_tender()))["Price terms"].answer.choices == ("EXW", "FCA", "DDP")
    assert len(labels(build_form(make.tender()))["Price terms"].answer.choices) == 11


def test_build_form__settings_open_and_close_questions() -> None:
    """What a rule ignores is not asked; what it refuses cannot be chosen."""
    ignored = build_form(make.tender(rules=ruled(prompt_payment_discounts="ignore", unconditional_discounts="ignore")))
    assert "Prompt payment discount [%]" not in labels(ignored)
    assert "unconditional_discount_percent" not in [column.field for column in ignored.columns]
    assert labels(ignored)["Price basis"].answer.choices == ("firm", "variable")
    firm = build_form(make.tender(rules=ruled(price_variation="reject variable prices")))
    assert labels(firm)["Price basis"].answer.choices == ("firm",)
    tolerant = ruled(loss_tolerance="evaluate at guarantee plus tolerance")
    assert "Claimed tolerance [%]" in labels(build_form(make.tender(rules=tolerant)))
    assert "Claimed tolerance [%]" not in labels(firm)


@pytest.mark.parametrize(
    ("setting", "rows"),
    [(None, 0), ("not accepted", 0), ("as offers of their own", 2), ("only if the base offer is responsive", 2)],
)
def test_build_form__alternatives_only_where_accepted(setting: str | None, rows: int) -> None:
    """A tender that is silent, or refuses them, has no rows for alternatives."""
    assert rows == build_form(make.tender(rules=ruled(alternatives=setting))).alternative_rows


def test_build_form__payments_of_the_tender() -> None:
    """Its own schedule stands in the note and gives the labels; order and delivery are there in any case."""
    (group,) = [group for group in build_form(full_tender()).groups if group.title == "Payment"]
    assert [field.label for field in group.fields] == [
        payment_label("0"),
        payment_label("36"),
        payment_label(None),
    ]
    assert "30 % with the order, 70 % 36 weeks after the order" in group.note
    assert "Payment" not in [group.title for group in build_form(make.tender()).groups]


def test_build_form__limits_stand_beside_the_answers() -> None:
    """A limit is a bound that warns, with its value in the message of the cell."""
    cells = build_form(full_tender(full_lot())).lots[0].cells
    impedance = cells["impedance_percent"].answer
    assert (Decimal("3.6"), Decimal("4.4"), True) == (impedance.at_least, impedance.at_most, impedance.is_limit)
    assert "at most 36" in cells["delivery_weeks"].answer.prompt
    assert "at most 0.130 kW" in cells["no_load_loss_kw"].answer.prompt
    assert cells["insulating_liquid"].answer.choices == ("mineral oil", "natural ester")


def test_build_form__carries_the_fingerprint_of_the_rules() -> None:
    """The bidder is told by which rules the offer will be judged."""
    tender = full_tender()
    assert fingerprint(rules_content(tender)) == build_form(tender).fingerprint


def test_build_form__names_no_estimate() -> None:
    """The buyer's own estimate is nowhere in the form."""
    assert "4321" not in repr(build_form(full_tender(full_lot())))
    assert "4,321" not in repr(build_form(full_tender(full_lot())))
