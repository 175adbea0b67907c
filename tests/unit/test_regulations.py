"""Loader of the regulation tables and look-ups of the European Union: what is refused, chosen, cautioned."""

from __future__ import annotations

import re
from datetime import UTC, date, datetime
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from lossworth.regulations.eu_losses import maximum_losses
from lossworth.regulations.eu_peak_efficiency import minimum_peak_efficiency_index
from lossworth.regulations.eu_transformer import DualVoltage, Edition, Insulation, tier_for
from lossworth.regulations.table_file import read_table, table, table_names
from support.regulation_rows import DATA, US_TABLES, eu_unit, raw_rows

PAGE = Path(__file__).resolve().parents[2] / "docs" / "regulations.md"
HEADER = {"title": "Invented limits", "source": "Invented data of a test", "columns": "kva [kVA]; loss_w [W]"}
DAY = date(2026, 1, 1)
D = Decimal


def table_text(*, rows: str = "kva,loss_w\n25,63\n", extra: str = "", **changes: str | None) -> str:
    """A table file, valid unless something is changed; None leaves a header line out."""
    header = {**HEADER, **changes}
    return "".join(f"# {key}: {value}\n" for key, value in header.items() if value is not None) + extra + rows


# Loader


def test_read_table__keeps_header_and_cells() -> None:
    """Header lines and the text of every cell."""
    read = read_table("invented", table_text(edition="2nd", note="a note"))
    assert (read.name, read.title, read.source) == ("invented", HEADER["title"], HEADER["source"])
    assert (read.columns, read.edition, read.note) == (HEADER["columns"], "2nd", "a note")
    assert [dict(row) for row in read.rows] == [{"kva": "25", "loss_w": "63"}]


@pytest.mark.parametrize("key", ["title", "source", "columns"])
@pytest.mark.parametrize("value", [None, "", "   "])
def test_read_table__refuses_a_header_without(key: str, value: str | None) -> None:
    """No title, no source, no columns, or an empty one: refused with the name of file and line."""
    with pytest.raises(ValueError, match=f"invented: a table must have a header line '# {key}: ...'"):
        read_table("invented", table_text(**{key: value}))


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (table_text(extra="# sources: another\n"), "unknown header line '# sources: another'"),
        (table_text(extra="# source: another\n"), "two lines '# source: ...'"),
        (table_text(rows=""), "at least one row"),
        (table_text(rows="kva,loss_w\n"), "at least one row"),
        (table_text(rows="kva,loss_w\n25\n"), "row 1 of values has 1 cells for 2 columns"),
        (table_text(rows="kva,loss_w\n25,63\n50,81,1\n"), "row 2 of values has 3 cells"),
        (table_text(rows="kva,kva\n25,63\n"), "a name of its own"),
        (table_text(rows="kva,\n25,63\n"), "a name of its own"),
        ("kva,loss_w\n25,63\n", "'# title: ...'"),
        ("", "'# title: ...'"),
    ],
)
def test_read_table__refuses_what_cannot_be_read(text: str, message: str) -> None:
    """Unknown or doubled header lines, absent rows, rows of another length, columns without a name."""
    with pytest.raises(ValueError, match=re.escape(message)):
        read_table("invented", text)


def test_table__every_file_of_the_package() -> None:
    """Every file is accepted by the loader, and a name that is none lists them."""
    assert list(table_names()) == sorted(path.stem for path in DATA.iterdir())
    assert len(table_names()) == 11
    for name in table_names():
        assert [dict(row) for row in table(name).rows] == raw_rows(name)
    with pytest.raises(LookupError, match="plausible-loss-bands"):
        table("../../money")


# Tiers


@pytest.mark.parametrize(
    ("day", "expected"),
    [
        (date(2015, 7, 1), 1),
        (date(2021, 6, 30), 1),
        (date(2021, 7, 1), 2),
        (datetime(2021, 7, 1, 8, tzinfo=UTC), 2),
        (date(2026, 9, 15), 2),
    ],
)
def test_tier_for__by_date(day: date, expected: int) -> None:
    """Tier 1 from 2015-07-01, tier 2 from 2021-07-01 (Regulation (EU) No 548/2014, Table I.1)."""
    assert expected == tier_for(on=day).number


def test_tier_for__dates_are_those_of_the_header() -> None:
    """Our table of tiers repeats the header of Table I.1."""
    note = table("eu-548-2014-table-I1-liquid-medium").note
    assert "Tier 1 from 2015-07-01, tier 2 from 2021-07-01" in note
    assert [str(tier_for(tier=n).effective_from) for n in (1, 2)] == ["2015-07-01", "2021-07-01"]


@pytest.mark.parametrize(
    ("asked", "error", "message"),
    [
        ({}, ValueError, "exactly one"),
        ({"tier": 2, "on": DAY}, ValueError, "exactly one"),
        ({"tier": 3}, LookupError, "no tier 3"),
        ({"on": date(2015, 6, 30)}, LookupError, "no tier in force on 2015-06-30"),
        ({"on": "2026-01-01"}, ValueError, "must be a date"),
    ],
)
def test_tier_for__refuses(asked: dict[str, Any], error: type[Exception], message: str) -> None:
    """Neither or both, a tier that is none, a day before the first."""
    with pytest.raises(error, match=message):
        tier_for(**asked)


# European Union


@pytest.mark.parametrize(
    ("changes", "error", "message"),
    [
        ({"phases": 1}, LookupError, "do not cover single-phase"),
        ({"phases": 2}, ValueError, "phases must be 1 or 3"),
        ({"rated_power_kva": D(0)}, ValueError, "rated_power_kva"),
        ({"rated_power_kva": D("NaN")}, ValueError, "rated_power_kva"),
        ({"rated_power_kva": D("Infinity")}, ValueError, "rated_power_kva"),
        ({"rated_power_kva": 1000.0}, ValueError, "rated_power_kva"),
        ({"lower_um_kv": D(24)}, ValueError, "exceeds higher_um_kv"),
        ({"insulation": "gas-filled"}, ValueError, "gas-filled"),
        ({"dual_voltage": "three voltages"}, ValueError, "three voltages"),
        ({"insulation": Insulation.DRY_TYPE, "is_pole_mounted_replacement": True}, ValueError, r"Table I\.6"),
    ],
)
def test_eu_transformer__refuses(changes: dict[str, Any], error: type[Exception], message: str) -> None:
    """What the tables do not cover, and numbers that are none."""
    with pytest.raises(error, match=message):
        eu_unit(**changes)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"rated_power_kva": D("3150.001")}, "large power transformer"),
        ({"rated_power_kva": D("1E+999999")}, "large power transformer"),
        ({"higher_um_kv": D("72.5")}, "large power transformer"),
        ({"higher_um_kv": D(30)}, "got Um = 30 kV"),
        ({"higher_um_kv": D("1.1")}, "got Um = 1.1 kV"),
        ({"is_pole_mounted_replacement": True, "rated_power_kva": D(400)}, "ends at 315 kVA, got 400 kVA"),
    ],
)
def test_maximum_losses__not_covered(changes: dict[str, Any], message: str) -> None:
    """Large units, voltages between the classes, ratings above the last row."""
    with pytest.raises(LookupError, match=message):
        maximum_losses(eu_unit(**changes), tier=2)


def test_maximum_losses__edition_2014_by_explicit_choice_only() -> None:
    """6.6 kV on the lower side: nothing added today with a caution on the pairing, 10 % in the superseded text."""
    unit = eu_unit(lower_um_kv=D("7.2"))
    today = maximum_losses(unit, on=DAY)
    before = maximum_losses(unit, on=DAY, edition=Edition.SUPERSEDED_2014)
    assert [today.no_load_loss.value, before.no_load_loss.value] == [D("0.693"), D("0.7623")]
    assert "pairing" in today.no_load_loss.cautions[0]
    assert "for old tenders only" in before.no_load_loss.cautions[0]


def test_maximum_losses__edition_2014_is_named_where_it_changes_nothing() -> None:
    """The caution does not depend on the voltages."""
    limits = maximum_losses(eu_unit(), tier=1, edition=Edition.SUPERSEDED_2014)
    assert limits.load_loss.value == D("10.5")
    assert "for old tenders only" in limits.load_loss.cautions[0]


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"dual_voltage": DualVoltage.BOTH_WINDINGS}, "without factors for it"),
        (
            {"is_pole_mounted_replacement": True, "rated_power_kva": D(100), "lower_um_kv": D("3.6")},
            r"no increase of Table I\.6",
        ),
    ],
)
def test_maximum_losses__edition_2014_does_not_cover(changes: dict[str, Any], message: str) -> None:
    """The superseded factors are for Tables I.1 and I.2, and for voltages alone."""
    with pytest.raises(LookupError, match=message):
        maximum_losses(eu_unit(**changes), tier=2, edition=Edition.SUPERSEDED_2014)


def test_maximum_losses__increases_are_added_and_the_product_is_named() -> None:
    """36 kV with on-load tap-changer, tier 1: 770 W x 1.35; multiplied it would be 770 W x 1.15 x 1.20."""
    limits = maximum_losses(eu_unit(higher_um_kv=D(36), has_on_load_tap_changer=True), tier=1)
    assert (limits.no_load_loss.value, limits.load_loss.value) == (D("1.0395"), D("12.075"))
    assert "the limit would be 1.0626 kW" in limits.no_load_loss.cautions[-1]
    assert "Table I.3" not in maximum_losses(eu_unit(), tier=1).no_load_loss.source
    assert "Tables I.3a and I.3b" in limits.no_load_loss.source


def test_maximum_losses__one_increase_needs_no_caution() -> None:
    """Tier 2 raises the load loss for the voltage only: nothing is combined."""
    limits = maximum_losses(eu_unit(higher_um_kv=D(36), has_on_load_tap_changer=True), tier=2)
    assert [len(limits.no_load_loss.cautions), len(limits.load_loss.cautions)] == [1, 0]


def test_maximum_losses__no_allowance_for_tappings_in_table_6() -> None:
    """Point 1.3 names Tables I.1 and I.2."""
    pole = {"is_pole_mounted_replacement": True, "rated_power_kva": D(100)}
    limits = maximum_losses(eu_unit(**pole, has_on_load_tap_changer=True), tier=2)
    assert limits.no_load_loss.value == maximum_losses(eu_unit(**pole), tier=2).no_load_loss.value
    assert "no allowance" in limits.no_load_loss.cautions[0]


def test_maximum_losses__below_the_range_of_table_6() -> None:
    """The header of Table I.6 begins at 25 kVA: below it the first row is used with a caution, at it without."""
    small, first = (
        maximum_losses(eu_unit(is_pole_mounted_replacement=True, rated_power_kva=power), tier=2).no_load_loss
        for power in (D(16), D(25))
    )
    assert small.value == first.value
    assert ["below 25 kVA" in caution for caution in small.cautions] == [True]
    assert first.cautions == ()


def test_maximum_losses__row_table_and_dates() -> None:
    """The result says where it comes from; between rows it names both."""
    limit = maximum_losses(eu_unit(rated_power_kva=D(900)), tier=1).load_loss
    assert (limit.value, limit.table) == (D("9.45"), "I.1")
    assert limit.row == "tier 1, between 800 kVA: 8400 W and 1000 kVA: 10500 W"
    assert (limit.in_force_from, limit.in_force_to) == (date(2015, 7, 1), date(2021, 6, 30))
    assert (limit.source, limit.note) == (
        table("eu-548-2014-table-I1-liquid-medium").source,
        table("eu-548-2014-table-I1-liquid-medium").note,
    )


def test_maximum_losses__value_that_does_not_end() -> None:
    """Between 100 and 160 kVA a third of a watt remains: 50 digits, and no guarantee can lie between."""
    limit = maximum_losses(eu_unit(rated_power_kva=D(101)), tier=2).no_load_loss
    assert str(limit.value) == "0.130983" + 44 * "3"
    assert limit.is_kept_by(D("0." + "130983" + 34 * "3"))
    assert not limit.is_kept_by(D("0." + "130983" + 33 * "3" + "4"))


@pytest.mark.parametrize("power", [D("160"), D("170")])
def test_maximum_losses__remark_on_an_unusual_row(power: Decimal) -> None:
    """The load loss of 160 kVA in Table I.6 exceeds that of 200 kVA, also where it is interpolated with."""
    limits = maximum_losses(eu_unit(is_pole_mounted_replacement=True, rated_power_kva=power), tier=1)
    assert "Table I.6, row of 160 kVA: 3102 W exceeds the 2750 W" in limits.load_loss.cautions[0]
    assert limits.no_load_loss.cautions == ()


def test_minimum_peak_efficiency_index__remark_on_the_probable_misprint() -> None:
    """Table I.9, tier 1, 2500 kVA; tier 2 and the row beside carry no remark."""
    unit = eu_unit(insulation=Insulation.DRY_TYPE, rated_power_kva=D(2500), higher_um_kv=D("72.5"))
    beside = eu_unit(insulation=Insulation.DRY_TYPE, rated_power_kva=D(2000), higher_um_kv=D("72.5"))
    assert "98.993" in minimum_peak_efficiency_index(unit, tier=1).cautions[0]
    assert minimum_peak_efficiency_index(unit, tier=2).cautions == ()
    assert minimum_peak_efficiency_index(beside, tier=1).cautions == ()


@pytest.mark.parametrize(
    ("insulation", "um_kv", "expected"),
    [
        (Insulation.LIQUID_IMMERSED, "36", "I.7"),
        (Insulation.LIQUID_IMMERSED, "36.1", "I.7"),
        (Insulation.DRY_TYPE, "36", "I.8"),
        (Insulation.DRY_TYPE, "36.1", "I.9"),
    ],
)
def test_minimum_peak_efficiency_index__table(insulation: Insulation, um_kv: str, expected: str) -> None:
    """By insulation and Um."""
    unit = eu_unit(insulation=insulation, rated_power_kva=D(5000), higher_um_kv=D(um_kv))
    assert expected == minimum_peak_efficiency_index(unit, tier=2).table


def test_minimum_peak_efficiency_index__not_for_medium_units() -> None:
    """A medium unit has maximum losses."""
    with pytest.raises(LookupError, match="medium power transformer"):
        minimum_peak_efficiency_index(eu_unit(rated_power_kva=D(3150)), tier=2)


# Rows, words and the page


def test_row_remarks__rest_on_rows_that_exist() -> None:
    """A remark names a table, a row and a column, and quotes the value that stands there."""
    rows = [{"table": "I.6", **row} for row in raw_rows("eu-548-2014-table-I6-pole-mounted-replacement")]
    rows += raw_rows("eu-548-2014-tables-I7-I9-peak-efficiency") + raw_rows(US_TABLES)
    for remark in raw_rows("row-remarks"):
        keys = ("table", "tier", "phases", "voltage_class", "rated_power_kva")
        (row,) = [row for row in rows if all(remark[key] in ("", row.get(key)) for key in keys)]
        assert remark["remark"].split()[0] == row[remark["column"]]


def test_dual_voltage__words_are_those_of_the_table() -> None:
    """Every case of Table I.3b, in its words."""
    rows = raw_rows("eu-548-2014-table-I3-voltage-factors")
    assert [row["case"] for row in rows if row["table"] == "I.3b"] == list(DualVoltage)


@pytest.mark.parametrize("name", table_names())
def test_page__names_every_table(name: str) -> None:
    """docs/regulations.md has a section for each file with its title, source and number of rows."""
    page = re.sub(r"\s+", " ", PAGE.read_text(encoding="utf-8"))
    file = table(name)
    assert f"`{name}.csv`" in page
    section = page.partition(f"`{name}.csv`")[2].partition("### ")[0]
    assert file.title in section
    assert file.source in section
    assert f"{len(file.rows)} rows" in section
