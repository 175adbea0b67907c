"""The references of the input files, and the starter tender, name what the code knows."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from lossworth.intake import bid_csv, sheet, tender_file, workbook_guard
from lossworth.intake.columns import COLUMNS
from lossworth.intake.file_bytes import MEGABYTE
from lossworth.intake.tender_keys import TABLES
from support.tender_folders import read_folder, told

CHECKOUT = Path(__file__).resolve().parents[2]
STARTER = CHECKOUT / "templates" / "start"


def text_of(name: str) -> str:
    """A file of the repository."""
    return (CHECKOUT / name).read_text(encoding="utf-8")


def sections(page: str) -> dict[str, str]:
    """Text below each heading that names a table of the tender file."""
    parts = re.split(r"^##+ .*?`\[+([\w.]+)\]+`.*$", page, flags=re.MULTILINE)
    return dict(zip(parts[1::2], parts[2::2], strict=True))


@pytest.mark.parametrize("table", TABLES)
def test_tender_file_page__every_key(table: str) -> None:
    """Every key stands in the section of its table, with the words it allows, and no other key has a row there."""
    outer, _, inner_name = table.partition(".")
    heading = f"{outer}.NAME.{inner_name}".rstrip(".") if outer in ("economics", "loading") else table
    if table == "lot.study":
        return  # the page refers to the keys of the derivation
    section = sections(text_of("docs/tender_file.md"))[heading]
    rows = set(re.findall(r"^\| `(\w+)`", section, re.MULTILINE))
    inner = {"decimal_mark_of", "rates", "profile_day_weights"}
    names = {key.name for key in TABLES[table]}
    assert rows - inner <= names
    for key in TABLES[table]:
        assert f"`{key.name}`" in section, key.name
        for word in key.words:
            assert f'`"{word}"`' in section


def test_bid_files_page__every_column() -> None:
    """Every column stands in the table with its units and its other names."""
    page = text_of("docs/bid_files.md")
    lines = [[cell.strip() for cell in line.strip("|").split("|")] for line in page.splitlines() if line[:1] == "|"]
    rows = {line[0]: line for line in lines}
    for column in COLUMNS:
        _, others, units, _ = rows[column.name]
        if column.needs_unit:
            assert {unit.strip() for unit in units.split(",")} == set(column.units)
        for symbol in column.symbols:
            assert symbol == "po" or symbol in others.casefold()


def test_bid_files_page__bounds() -> None:
    """The bounds on the page are those of the code."""
    page = text_of("docs/bid_files.md").partition("## Bounds")[2]
    for number in (sheet.MOST_ROWS, sheet.MOST_COLUMNS, sheet.MOST_CELLS, workbook_guard.MOST_MEMBERS):
        assert f"{number:,}" in page
    for size in (bid_csv.LARGEST_CSV, workbook_guard.LARGEST_WORKBOOK, workbook_guard.LARGEST_MEMBER):
        assert f"{size // MEGABYTE} MB" in page
    assert f"at most {tender_file.LARGEST_TENDER_FILE // MEGABYTE} MB" in text_of("docs/tender_file.md")


def test_starter__reads_without_findings() -> None:
    """The tender that `lossworth start` writes is complete: two lots, three bidders each, nothing to mend."""
    tender, offers, findings = read_folder(STARTER)
    assert tender is not None
    assert told(findings) == []
    assert [(lot.rates is None, lot.derivation is None) for lot in tender.lots] == [(False, True), (True, False)]
    assert len({(offer.bidder.value, offer.lot.value) for offer in offers}) == 6


def test_starter__explains_every_key() -> None:
    """Every key of the format stands in the starter, used or behind a comment sign, with a comment of its own."""
    text = (STARTER / "tender.toml").read_text(encoding="utf-8")
    for keys in TABLES.values():
        for key in keys:
            assert re.search(rf"^(?:# )?{key.name} = .+", text, re.MULTILINE) or f"or {key.name}" in text, key.name
    inside = ("economics.network.block", "loading.substation.cooling_stage", "lot.loss_basis")
    for table in ("exchange.rates", "bids.decimal_mark_of", *inside):
        assert f"[{table}]" in text
    assert "# profile_day_weights = {" in text


def test_starter__commented_keys_are_known() -> None:
    """A key behind a comment sign is one of the format, so that taking the sign away works."""
    text = (STARTER / "tender.toml").read_text(encoding="utf-8")
    known = {key.name for keys in TABLES.values() for key in keys} | {"profile_day_weights"}
    assert set(re.findall(r"^# (\w+) = ", text, re.MULTILINE)) <= known


def test_starter__says_that_it_is_invented() -> None:
    """Nobody takes the figures of the starter for real ones."""
    for file in (STARTER / "tender.toml", STARTER / "bids" / "offers.csv"):
        assert "INVENTED DATA" in file.read_text(encoding="utf-8")
