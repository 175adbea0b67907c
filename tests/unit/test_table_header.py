"""Header rows: names, units, symbols, machine names, and what is wrong with them."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.intake.cells import text_cell
from lossworth.intake.columns import COLUMNS
from lossworth.intake.sheet import Row, Sheet
from lossworth.intake.table_header import Header, find_header, is_header, recognized_columns
from support.tender_folders import told

NEEDED = ("Lot", "Unit price", "No-load loss [kW]", "Load loss [kW]")


def header_of(*headers: str) -> tuple[Header, list[tuple[str, str, str | None]]]:
    """Header of a csv table and its findings."""
    row = Row(1, tuple(text_cell(text) for text in headers))
    header, findings = find_header(Sheet("a.csv", None, (row,)), row)
    return header, told(findings)


@pytest.mark.parametrize(
    ("text", "field", "unit", "times"),
    [
        ("Lot", "lot", "", "1"),
        ("LOT NO.", "lot", "", "1"),
        ("Bidder", "bidder", "", "1"),
        ("unit price", "unit_price", "", "1"),
        ("Unit  price\n[NCU]", "unit_price", "NCU", "1"),
        ("unit_price", "unit_price", "", "1"),
        ("No-load loss [kW]", "no_load_loss_kw", "kW", "1"),
        ("no load losses (W)", "no_load_loss_kw", "W", "0.001"),
        ("NO-LOAD LOSS (P0) [kW]", "no_load_loss_kw", "kW", "1"),
        ("Guaranteed no-load loss, P0 [W]", "no_load_loss_kw", "W", "0.001"),
        ("P0 [W]", "no_load_loss_kw", "W", "0.001"),
        ("no_load_loss_w", "no_load_loss_kw", "W", "0.001"),
        ("guaranteed_load_loss_kw", "load_loss_kw", "kW", "1"),
        ("Load loss Pk (KW)", "load_loss_kw", "kW", "1"),
        ("Load loss [MW]", "load_loss_kw", "MW", "1000"),
        ("Auxiliary loss (Paux) [kW]", "auxiliary_loss_kw", "kW", "1"),
        ("Total losses [kW]", "total_loss_kw", "kW", "1"),
        ("Impedance (Z) [%]", "impedance_percent", "%", "1"),
        ("Short-circuit impedance [pu]", "impedance_percent", "pu", "100"),
        ("impedance_percent", "impedance_percent", "%", "1"),
        ("Delivery [weeks]", "delivery_weeks", "weeks", "1"),
        ("delivery_weeks", "delivery_weeks", "weeks", "1"),
        ("Quantity [units]", "quantity", "units", "1"),
        ("Remarks", "remark", "", "1"),
    ],
)
def test_find_header__understood(text: str, field: str, unit: str, times: str) -> None:
    """Capitals, spaces, hyphens, plurals and symbols do not matter; the unit does."""
    heading = header_of(text)[0].headings[field]
    assert (heading.unit, heading.times) == (unit, Decimal(times))


@pytest.mark.parametrize(
    "text",
    [
        "No-load loss",
        "No-load loss [mW]",
        "no_load_loss",
        "No-load loss [kVA]",
        "No-load loss [kW] (W)",
        "Impedance",
        "Impedance [ohm]",
        "Delivery",
        "Delivery [months]",
        "Unit price [1000 NCU]",
        "Unit price [ncu]",
        "Quantity [dozen]",
    ],
)
def test_find_header__unit_missing_or_not_known(text: str) -> None:
    """A unit that is missing, not known or given twice is a finding, and no value is taken."""
    header, findings = header_of(text)
    assert ("column-unit", f"a.csv:1[{text}]", text) in findings
    assert [heading.times for heading in header.headings.values() if heading.text == text] == [None]


def test_find_header__machine_name_in_milli_or_mega() -> None:
    """A machine name in small letters cannot tell milli from mega: it is not understood."""
    assert recognized_columns(["no_load_loss_mw"]) == set()


def test_find_header__columns_missing() -> None:
    """Each column that every lot needs is missed by name, with the header that comes nearest."""
    row = Row(1, tuple(text_cell(text) for text in ("Lot", "Unit price", "No-load loss [kW]", "Load lss [kW]")))
    _, findings = find_header(Sheet("a.csv", None, (row,)), row)
    missing, unread = findings
    assert (missing.kind, missing.field) == ("column-missing", "column load loss")
    assert missing.remedy == 'Did the bidder mean this by "Load lss [kW]"? Then write: load loss [kW].'
    assert (unread.kind, unread.got) == ("column-not-read", "Load lss [kW]")


def test_find_header__column_twice() -> None:
    """Of two columns with one meaning neither is taken."""
    header, findings = header_of(*NEEDED, "P0 [W]")
    assert findings == [("column-twice", "a.csv:1[P0 [W]]", "P0 [W]")]
    assert "no_load_loss_kw" not in header.headings
    assert header.twice == {"no_load_loss_kw"}


def test_find_header__other_columns() -> None:
    """A column that the evaluation does not use is noted; a blank header is not."""
    assert header_of(*NEEDED, "Oil [liter]", "")[1] == [("column-not-read", "a.csv:1[Oil [liter]]", "Oil [liter]")]


@pytest.mark.parametrize(
    ("headers", "expected"),
    [
        (NEEDED, True),
        (("Lot", "P0 [W]"), True),
        (("Unit price", "Remarks"), True),
        (("Lot", "Quantity", "Delivery"), False),
        (("Bidder", "Alder"), False),
        (("Load loss [kW]",), False),
        (("1", "Alder", "NCU"), False),
        ((), False),
    ],
)
def test_is_header__needs_two_columns(headers: tuple[str, ...], expected: bool) -> None:
    """Two known columns make a header, one of them a price or a loss."""
    assert is_header(Row(1, tuple(text_cell(text) for text in headers))) == expected


def test_columns__examples_are_understood() -> None:
    """The header that a remedy proposes for a column is that column."""
    for column in COLUMNS:
        assert recognized_columns([column.example]) == {column.field}
        assert recognized_columns([column.name, column.machine_name]) == {column.field}
