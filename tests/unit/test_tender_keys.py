"""The table of keys agrees with the records."""

from __future__ import annotations

from lossworth.intake.tender_keys import TABLES, Reads
from lossworth.records import tender as records


def test_tables__fill_the_records() -> None:
    """Every key fills a field of the record, and every field that the record requires has a key."""
    of_table = {
        "tender": records.Identity,
        "bids": records.BidFileRules,
        "exchange": records.Exchange,
        "economics": records.Economics,
        "loading": records.LoadingCondition,
        "lot": records.Lot,
        "lot.rates": records.AnnouncedRates,
        "lot.derivation": records.Derivation,
        "lot.study": records.Derivation,
    }
    for table, record in of_table.items():
        filled = {key.fills for key in TABLES[table]}
        required = {name for name, field in record.model_fields.items() if field.is_required()}
        assert filled <= set(record.model_fields), table
        assert required - {"place", "rates"} <= filled, table


def test_tables__words_are_those_of_the_records() -> None:
    """The words that a key allows are those that the record allows."""
    words = {key.name: key.words for keys in TABLES.values() for key in keys if key.reads is Reads.WORD}
    for record in (records.BidFileRules, records.AnnouncedRates):
        for name, field in record.model_fields.items():
            if name in words:
                assert words[name] == field.annotation.__args__  # type: ignore[union-attr]
