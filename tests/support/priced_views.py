"""An evaluation with every price step, corrections, decisions, a preference and a broken tie. INVENTED DATA.

Lot 1 has everything that moves a price; lot 2 has nothing but a tie that the announced order breaks.
"""

from __future__ import annotations

import datetime
from dataclasses import replace
from decimal import Decimal
from typing import Any

from lossworth.evaluation.evaluate import evaluate
from lossworth.money import Rounding, RoundingMode
from lossworth.records.bid import Offer
from lossworth.records.decision import Decision
from lossworth.records.tender import RoundingPoint, Rules, Tender
from lossworth.report.build_view import build_view
from lossworth.report.view import EvaluationView, RuleDifferenceView, RulesProofView
from support import commercial as make
from support import records
from support.confirmed import confirm
from support.sample_views import HOSTILE, RECORD

__all__ = ["DECISIONS", "HOSTILE_NAME", "priced_offers", "priced_tender", "priced_view"]

HOSTILE_NAME = HOSTILE[1]
SETTINGS: dict[str, Any] = {
    "arithmetic_errors": "correct",
    "unit_price_against_total": "total governs",
    "unconditional_discounts": "deduct",
    "prompt_payment_discounts": "deduct",
    "taxes": "excluded",
    "payment_terms": "discount to a common date",
    "missing_item": "highest of the others",
    "missing_item_among": "all offers received",
    "preference": "margin added to other prices",
    "exchange_rate_day": "day of opening",
    "clarifications": "may confirm what the bid itself proves",
    "tie_order": ("earlier delivery", "lower no-load loss"),
    "alternatives": "as offers of their own",
}


def priced_tender(
    *, margin: str = "7.5", interest: str = "10", per_week: str = "0.5", per_lot: bool = False, down: bool = False
) -> Tender:
    """The tender; arguments are inputs that a reader of the workbook may change."""
    lots = (
        records.lot(
            "1",
            description=make.entry("100 kVA, everything"),
            items=(make.item(), make.item("tool set", "1")),
            site_costs=(
                make.site_cost("bund", "300", liquids=("mineral oil",)),
                make.site_cost("sound barrier", "111.11", sound_above_db=make.quantity("50")),
            ),
            delivery_without_adder_weeks=make.quantity("20"),
            delivery_adder_percent_per_week=make.quantity(per_week),
            delivery_adder_per_week=make.quantity("3.33"),
            latest_delivery_weeks=make.quantity("40"),
        ),
        records.lot("2", description=make.entry("100 kVA, a tie")),
    )
    identity = records.tender().identity.model_copy(update={"opening_date": datetime.date(2026, 9, 15)})
    return records.tender(
        *lots,
        identity=identity,
        taxes=make.taxes("7.7"),
        payment_terms=make.payment_terms(interest, make.payment("0.3", "0"), make.payment("0.7", "36")),
        preference=make.preference(margin),
        exchange=records.exchange(FCU="1.2537"),
        delivered_point=make.entry("DDP site"),
        delivery_levels=(make.level("EXW", "4", "120"), make.level("CIP", "1.5")),
        rules=_rules(per_lot=per_lot, down=down),
    )


def _rules(*, per_lot: bool, down: bool) -> Rules:
    point = RoundingPoint.PART_PER_LOT if per_lot else RoundingPoint.PART_PER_UNIT
    mode = RoundingMode.DOWN if down else RoundingMode.HALF_AWAY_FROM_ZERO
    return make.rules(point, **SETTINGS).model_copy(update={"rounding": Rounding(Decimal("0.01"), mode)})


def _terms(**changes: Any) -> dict[str, Any]:
    fields = {
        "delivery_weeks": make.quantity("18"),
        "insulating_liquid": make.entry("natural ester"),
        "sound_level_db": make.quantity("45"),
        "item_prices": {"spare bushing": make.quantity("100", "NCU"), "tool set": make.quantity("650", "NCU")},
        "tax_included": False,
        "origin": make.entry("home"),
        "delivery_term": make.entry("DDP"),
    }
    return fields | changes


def priced_offers() -> tuple[Offer, ...]:
    """Offers of both lots."""
    everything = _terms(
        currency=make.entry("FCU"),
        unit_price=make.quantity("2975.05", "FCU"),
        unconditional_discount_percent=make.quantity("3"),
        prompt_payment_discount_percent=make.quantity("2"),
        tax_included=True,
        delivery_term=make.entry("EXW"),
        payments=(make.payment("0.5", "0"), make.payment("0.5", "30")),
        delivery_weeks=make.quantity("23"),
        insulating_liquid=make.entry("mineral oil"),
        sound_level_db=make.quantity("52"),
        origin=make.entry("abroad"),
        item_prices={"spare bushing": make.quantity("81", "FCU")},
    )
    corrected = _terms(total_price=make.quantity("41950", "NCU"))
    late = _terms(delivery_weeks=make.quantity("44"))
    tied = {"delivery_weeks": make.quantity("12"), "origin": make.entry("home")}
    return (
        make.bid(HOSTILE_NAME, "2975.05", **everything),
        make.bid("Birchlune", "4000", **corrected),
        make.bid(
            "Cedarfell",
            "4100",
            **_terms(load_loss_kw=records.quantity("0.0012", "W", "1.2"), total_loss_kw=records.quantity("1.32", "kW")),
        ),
        make.bid("Cedarfell", "4400", alternative="ester", **_terms(delivery_term=make.entry("CIP"))),
        make.bid("Damsonby", "3900", **late),
        make.bid("Elderquill", "4000", "2", **tied),
        make.bid("Firthwane", "4000", "2", **(tied | {"delivery_weeks": make.quantity("10")})),
        make.bid("Gorsemere", "4000", "2", **tied),
        make.bid("Hazel", "4200", "2", **tied),
        make.bid("Ivydale", "9000", "2", load_loss_kw=records.quantity("0.0012", "W", "1.2"), **tied),
    )


DECISIONS: tuple[Decision, ...] = (
    make.decide("accept correction", "Birchlune", line=3),
    make.decide("waive", "Damsonby", line=13, field="delivery-too-late"),
    make.decide("change status", "Hazel", "2", line=23, status="non-responsive"),
    confirm("load_loss_kw", "1.2", "kW", "Cedarfell", line=33),
)


def priced_view(**changes: Any) -> EvaluationView:
    """The view, with decisions and a proof that the rules differ."""
    view = build_view(evaluate(priced_tender(**changes), priced_offers(), (), DECISIONS), RECORD)
    difference = RuleDifferenceView("taxes <a>", "included", "excluded")
    sentence = "The rules used differ from the rules published in 1 place."
    return replace(view, rules_proof=RulesProofView(sentence, False, "ab" * 32, (difference,)))
