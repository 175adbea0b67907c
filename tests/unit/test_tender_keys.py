"""The table of keys agrees with the records."""

from __future__ import annotations

from enum import StrEnum
from typing import Any, Literal, get_args, get_origin

from lossworth.intake.tender_keys import INSIDE, TABLES
from lossworth.records import commercial
from lossworth.records import tender as records
from lossworth.records.profile import PriceBlock
from lossworth.records.quantity import Record
from lossworth.records.rules import RULE_KINDS, AnnouncedRules

OF_TABLE: dict[str, type[Record]] = {
    "tender": records.Identity,
    "bids": records.BidFileRules,
    "exchange": records.Exchange,
    "economics": records.Economics,
    "economics.block": PriceBlock,
    "loading": records.LoadingCondition,
    "loading.cooling_stage": records.CoolingStage,
    "lot": records.Lot,
    "lot.rates": records.AnnouncedRates,
    "lot.derivation": records.Derivation,
    "lot.study": records.Derivation,
    "lot.loss_basis": records.LossBasis,
    "delivery.level": commercial.DeliveryLevel,
    "taxes": commercial.Taxes,
    "payment": commercial.PaymentTerms,
    "payment.part": commercial.Payment,
    "preference": commercial.Preference,
    "lot.regulation": commercial.RegulationLimit,
    "lot.item": commercial.Item,
    "lot.site_cost": commercial.SiteCost,
}
#: Keys of the rounding, which are no announced rules.
ROUNDING = {"round_money_to", "rounding", "rounding_applies_to"}


def test_tables__fill_the_records() -> None:
    """Every key fills a field of the record, and every field that the record requires has a key."""
    for table, record in OF_TABLE.items():
        filled = {key.fills for key in TABLES[table] if not key.for_reading}
        filled |= {inside.field for inside in INSIDE.get(table, ()) if inside.field}
        required = {name for name, field in record.model_fields.items() if field.is_required()}
        assert filled <= set(record.model_fields), table
        assert required - {"place", "rates"} <= filled, table


def words_of(annotation: Any) -> tuple[Any, ...]:
    """Texts that a field of a record takes: of a literal or an enumeration, also where it may be absent or a list."""
    if isinstance(annotation, type) and issubclass(annotation, StrEnum):
        return tuple(annotation)
    inner = [part for part in get_args(annotation) if part not in (type(None), Ellipsis)]
    return tuple(inner) if get_origin(annotation) is Literal else words_of(inner[0])


def test_tables__words_are_those_of_the_records() -> None:
    """The words that a key allows are those that the record allows."""
    compared = 0
    for table, record in OF_TABLE.items():
        for key in TABLES[table]:
            words = key.words or key.numbers
            if words and not key.for_reading:
                assert words == words_of(record.model_fields[key.fills].annotation), key.name
                compared += 1
    assert compared >= 16


def test_tables__rules_are_those_of_the_records() -> None:
    """Every rule that the record has can be set by its key, with the settings whose sentences are printed."""
    keys = {key.name: key for key in TABLES["rules"] if key.name not in ROUNDING}
    assert set(AnnouncedRules.model_fields) - {"places"} == set(keys)
    for kind in RULE_KINDS:
        assert keys[kind.key].words == tuple(kind.sentences)
        assert keys[kind.key].words == words_of(AnnouncedRules.model_fields[kind.key].annotation), kind.key
