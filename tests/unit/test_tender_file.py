"""The tender file: records with places and characters, and findings with lines."""

from __future__ import annotations

import dataclasses
import datetime
from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Finding, Place
from lossworth.money import Rounding, RoundingMode
from lossworth.records import tender as records
from lossworth.records.quantity import Quantity
from support.tender_folders import TENDER, tender_of, told, valid_tender

SPARE = """\
[economics.spare]
energy_price_per_kwh = 1
discount_rate_percent = 6
evaluation_period_years = 1
timing = "mid-year"
price_terms = "nominal"
discount_rate_terms = "nominal"
"""


def changed(old: str, new: str, text: str = TENDER) -> str:
    """Tender text in which one passage reads otherwise."""
    assert old in text
    return text.replace(old, new, 1)


def findings_of(path: Path, old: str, new: str) -> tuple[Finding, ...]:
    """Findings on a tender in which one passage reads otherwise."""
    return tender_of(path, changed(old, new))[1]


def only_finding(path: Path, old: str, new: str) -> Finding:
    """The one finding on a tender in which one passage reads otherwise."""
    (finding,) = findings_of(path, old, new)
    return finding


def test_read_tender__no_findings(tmp_path: Path) -> None:
    """The tender that the tests change has no findings."""
    assert tender_of(tmp_path)[1] == ()


def test_read_tender__identity(tmp_path: Path) -> None:
    """Texts stand in the record with their lines and keys."""
    identity = valid_tender(tmp_path).identity
    assert identity.reference.value == "TEST-1"
    assert identity.reference.place == Place("tender.toml", line=4, key="tender.reference")
    assert identity.opening_date is None


def test_read_tender__quantity(tmp_path: Path) -> None:
    """A number has its unit, its characters and its place, in which the key goes by the lot's id."""
    rates = valid_tender(tmp_path, changed("no_load = 11000", "no_load = 11_000.50")).lots[0].rates
    assert rates is not None
    assert rates.no_load == Quantity(
        value=Decimal("11000.50"),
        stated=Decimal("11000.50"),
        unit="NCU/kW",
        text="11_000.50",
        place=Place("tender.toml", line=44, key="lot.1.rates.no_load"),
    )


def test_read_tender__rates_stay_as_stated(tmp_path: Path) -> None:
    """A rate per W stays one: the record says what it is quoted per, and the evaluation converts."""
    rates = valid_tender(tmp_path, changed('per = "kW"', 'per = "W"')).lots[0].rates
    assert rates is not None
    assert (rates.no_load.value, rates.no_load.unit, rates.per) == (11000, "NCU/W", "W")


@pytest.mark.parametrize(
    ("old", "new", "field", "value", "stated", "unit"),
    [
        ("rated_power_kva = 100\n", "rated_power_mva = 0.1\n", "rated_power_kva", "100", "0.1", "MVA"),
        ("quantity = 10", "quantity = 10\nmaximum_no_load_loss_w = 130", "maximum_no_load_loss_kw", "0.13", "130", "W"),
        ("quantity = 10", "quantity = 10\nmaximum_load_loss_w = 1250", "maximum_load_loss_kw", "1.25", "1250", "W"),
        ("quantity = 10", "quantity = 10\nmaximum_load_loss_kw = 1.25", "maximum_load_loss_kw", "1.25", "1.25", "kW"),
    ],
)
def test_read_tender__unit_by_key(
    tmp_path: Path, old: str, new: str, field: str, value: str, stated: str, unit: str
) -> None:
    """The ending of a key says its unit; the record holds one unit and remembers the other."""
    quantity = getattr(valid_tender(tmp_path, changed(old, new)).lots[0], field)
    assert (quantity.value, quantity.stated, quantity.unit) == (Decimal(value), Decimal(stated), unit)


def test_read_tender__rules(tmp_path: Path) -> None:
    """Smallest amount and mode become one rounding, which derived rates share where they are rounded."""
    tender = valid_tender(tmp_path, changed('"half away from zero"', '"down"'))
    assert tender.rules.rounding == Rounding(Decimal("0.01"), RoundingMode.DOWN)
    assert tender.rules.rounding_applies_to is records.RoundingPoint.PART_PER_UNIT
    derivation, study = tender.lots[1].derivation, tender.lots[0].study
    assert derivation is not None
    assert study is not None
    assert (derivation.rounding, study.rounding) == (Rounding(Decimal("0.01"), RoundingMode.DOWN), None)


def test_read_tender__exchange(tmp_path: Path) -> None:
    """Exchange rates stand by currency, with their day."""
    exchange = valid_tender(tmp_path).exchange
    assert exchange is not None
    assert exchange.date == datetime.date(2026, 9, 15)
    assert {code: rate.value for code, rate in exchange.rates.items()} == {"FCU": Decimal("1.25")}
    assert exchange.rates["FCU"].unit == "NCU/FCU"


def test_read_tender__marks(tmp_path: Path) -> None:
    """Decimal marks are declared for all files and for single ones."""
    assert valid_tender(tmp_path).bid_files.decimal_mark == "."
    text = '[bids]\nthousands_mark = " "\n[bids.decimal_mark_of]\n"a.csv" = ","\n[[lot]]'
    rules = valid_tender(tmp_path, changed("[[lot]]", text)).bid_files
    assert (rules.decimal_mark, rules.thousands_mark, rules.decimal_mark_of) == (".", " ", {"a.csv": ","})


def test_read_tender__prices_by_year(tmp_path: Path) -> None:
    """A price for each year keeps the line of each."""
    prices = "energy_price_by_year_per_kwh = [\n" + "0.08,\n" * 30 + "]"
    economics = valid_tender(tmp_path, changed("energy_price_per_kwh = 0.08", prices)).economics["board"]
    assert economics.energy_price_by_year_per_kwh is not None
    assert [price.place.line for price in economics.energy_price_by_year_per_kwh] == list(range(24, 54))


def test_read_tender__byte_order_mark_and_windows_lines(tmp_path: Path) -> None:
    """A file of a simple editor reads the same."""
    data = b"\xef\xbb\xbf" + TENDER.replace("\n", "\r\n").encode()
    assert tender_of(tmp_path, data)[0] == valid_tender(tmp_path)


def test_read_tender__did_you_mean(tmp_path: Path) -> None:
    """A misspelled key is told with its nearest neighbor, beside the key that is then missing."""
    missing, unknown = findings_of(tmp_path, "peak_load_pu", "peak_laod_pu")
    assert (missing.kind, missing.field) == ("tender-key-missing", "loading.town.peak_load_pu")
    assert (unknown.kind, unknown.field) == ("tender-key-unknown", "loading.town.peak_laod_pu")
    assert unknown.remedy == 'Did you mean "peak_load_pu"?'


def test_read_tender__key_in_the_wrong_table(tmp_path: Path) -> None:
    """A known key in a wrong table is sent home."""
    finding = only_finding(tmp_path, "[exchange.rates]", "load_factor = 1\n[exchange.rates]")
    assert finding.remedy == "Move it to the table where it belongs: [loading.NAME]."


def test_read_tender__message(tmp_path: Path) -> None:
    """The message has place, key, rule, value and remedy."""
    text = str(only_finding(tmp_path, "load_factor = 0.5", "load_factor = 1.5"))
    assert text == (
        'tender.toml:31: loading.town.load_factor: must lie between 0 and 1, got "1.5"\n  fix: Correct the value.'
    )


@pytest.mark.parametrize(
    ("old", "new", "kind", "field", "got"),
    [
        ("round_money_to = 0.01", "round_money_to = 0.05", "tender-value", "rules.round_money_to", "0.05"),
        ("round_money_to = 0.01\n", "", "tender-key-missing", "rules.round_money_to", None),
        ("round_rates_to = 0.01", "round_rates_to = 0", "tender-value", "lot.2.derivation.round_rates_to", "0"),
        ('"half away from zero"', '"half even"', "tender-value", "rules.rounding", "half even"),
        ('currency = "NCU"', 'currency = "Ncu"', "tender-value", "tender.currency", "Ncu"),
        ('title = "Two lots for tests"', "title = 7", "tender-value", "tender.title", "7"),
        ('title = "Two lots for tests"', 'title = " "', "tender-value", "tender.title", " "),
        ("date = 2026-09-15", 'date = "2026"', "tender-value", "exchange.date", "2026"),
        ("date = 2026-09-15", "date = 2026-09-15T00:00:00", "tender-value", "exchange.date", "2026-09-15T00:00:00"),
        ("FCU = 1.25", "FCU = 1.25\nNCU = 1", "tender-conflict", "exchange.rates.NCU", "1"),
        ("FCU = 1.25", "FCU = 1.25\ncrown = 1", "tender-value", "exchange.rates.crown", "crown"),
        ("[exchange.rates]\nFCU = 1.25\n", "", "tender-key-missing", "exchange.rates", None),
        ("energy_price_per_kwh = 0.08", "", "tender-key-missing", "economics.board.energy_price_per_kwh", None),
        (
            "energy_price_per_kwh = 0.08",
            "energy_price_by_year_per_kwh = [0.08, 0.09]",
            "tender-conflict",
            "economics.board.energy_price_by_year_per_kwh",
            "2 prices",
        ),
        (
            "energy_price_per_kwh = 0.08",
            "energy_price_by_year_per_kwh = 0.08",
            "tender-value",
            "economics.board.energy_price_by_year_per_kwh",
            "0.08",
        ),
        (
            "evaluation_period_years = 30",
            "evaluation_period_years = 300",
            "tender-value",
            "economics.board.evaluation_period_years",
            "300",
        ),
        (
            "demand_charge_per_kw_year = 50",
            "demand_charge_escalation_percent = 1",
            "tender-key-missing",
            "economics.board.demand_charge_per_kw_year",
            None,
        ),
        (
            "peak_responsibility_factor = 0.9\n",
            "",
            "tender-key-missing",
            "loading.town.peak_responsibility_factor",
            None,
        ),
        (
            "loss_factor_coefficient = 0.15",
            "",
            "tender-key-missing",
            "loading.town.loss_factor_coefficient",
            None,
        ),
        ("load_factor = 0.5\nloss", "loss", "tender-key-missing", "loading.town.load_factor", None),
        (
            "peak_load_pu = 0.6",
            "peak_load_pu = 0.6\npeak_load_cap_pu = 0.5",
            "tender-conflict",
            "loading.town.peak_load_cap_pu",
            "0.5",
        ),
        (
            "peak_load_pu = 0.6",
            "peak_load_pu = 0.6\ncooling_hours = 600",
            "tender-key-missing",
            "loading.town.cooling_share_at_peak",
            None,
        ),
        (
            "peak_load_pu = 0.6",
            "peak_load_pu = 0.6\ncooling_share_at_peak = 1",
            "tender-key-missing",
            "loading.town.cooling_hours",
            None,
        ),
        (
            'quantity = 5\ncooling = "ONAN"',
            'quantity = 5\ncooling = "ONAN/ONAF"',
            "tender-key-missing",
            "loading.town.cooling_hours",
            None,
        ),
        ("impedance_percent = 6\n", "", "tender-key-missing", "lot.2.impedance_percent", None),
        (
            "impedance_tolerance_percentage_points = 0.6\n",
            "",
            "tender-key-missing",
            "lot.2.impedance_tolerance_percentage_points",
            None,
        ),
        (
            "quantity = 10",
            "quantity = 10\nminimum_peak_efficiency_index_percent = 100",
            "tender-value",
            "lot.1.minimum_peak_efficiency_index_percent",
            "100",
        ),
        ("quantity = 10", "quantity = 10.5", "tender-value", "lot.1.quantity", "10.5"),
        ("rated_power_kva = 100\n", "", "tender-key-missing", "lot.1.rated_power_kva (or rated_power_mva)", None),
        (
            "rated_power_kva = 100\n",
            "rated_power_kva = 100\nrated_power_mva = 0.1\n",
            "tender-conflict",
            "lot.1.rated_power_mva",
            None,
        ),
        ('per = "kW"', 'per = "MW"', "tender-value", "lot.1.rates.per", "MW"),
        (
            "[[lot]]",
            '[bids]\ndecimal_mark = ","\nthousands_mark = ","\n[[lot]]',
            "tender-conflict",
            "bids.thousands_mark",
            ",",
        ),
        ("[[lot]]", f"{SPARE}[[lot]]", "tender-key-not-used", "economics.spare", None),
    ],
)
def test_read_tender__one_fault(tmp_path: Path, old: str, new: str, kind: str, field: str, got: str | None) -> None:
    """One fault makes one finding, which names the key and what stood there."""
    finding = only_finding(tmp_path, old, new)
    assert (finding.kind, finding.field, finding.got) == (kind, field, got)
    assert finding.place is not None
    assert finding.place.line is not None


def test_read_tender__loss_factor_stated_and_computed(tmp_path: Path) -> None:
    """A loss factor beside a load factor is a contradiction, and must at least be possible."""
    findings = findings_of(tmp_path, "loss_factor_coefficient = 0.15", "loss_factor = 0.2")
    assert told(findings) == [
        ("tender-conflict", "tender.toml:32", "0.2"),
        ("tender-value", "tender.toml:32", "0.2"),
    ]


def test_read_tender__price_given_twice(tmp_path: Path) -> None:
    """A single price beside a table of prices, and whatever belongs to a single price, are contradictions."""
    prices = "energy_price_by_year_per_kwh = [" + "0.08, " * 30 + "]\nenergy_price_escalation_percent = 1"
    findings = findings_of(tmp_path, "energy_price_per_kwh = 0.08", f"energy_price_per_kwh = 0.08\n{prices}")
    assert [finding.field for finding in findings] == [
        "economics.board.energy_price_per_kwh",
        "economics.board.energy_price_escalation_percent",
    ]


def test_read_tender__contradictions_keep_the_record(tmp_path: Path) -> None:
    """Where keys contradict each other the record stands, so that bids are read in the same run."""
    tender, findings = tender_of(tmp_path, changed("[lot.study]", "[lot.derivation]"))
    assert tender is not None
    assert findings


def test_read_tender__contradiction_beside_a_wrong_value(tmp_path: Path) -> None:
    """A value out of bounds does not hide a contradiction elsewhere."""
    text = changed("load = 660", "load = -1", changed("[exchange.rates]", "[exchange.rates]\nNCU = 1"))
    tender, findings = tender_of(tmp_path, text)
    assert tender is None
    assert [finding.kind for finding in findings] == ["tender-conflict", "tender-value"]


@pytest.mark.parametrize(
    ("text", "fields"),
    [
        ("format_version = 1", ["tender", "rules", "lot"]),
        ("format_version = true\nlot = []", ["tender", "rules", "lot", "format_version"]),
        ("tender = 1\nrules = []\nlot = 2\nbids = 3\nexchange = 4\neconomics = 5\nloading = 6", None),
        ("[lot]\nid = '1'", ["tender", "rules", "format_version", "lot"]),
        ("[economics]\na = 1\n[[lot]]\nrates = 1\n[lot.study]\neconomics = [1]", None),
        ("[tender]\ncurrency = { a = 1 }\n[[lot]]\nid = [[1]]\n[lot.rates]\nper = ['kW']", None),
    ],
)
def test_read_tender__wrong_shapes(tmp_path: Path, text: str, fields: list[str] | None) -> None:
    """Tables that are values and values that are tables are findings, never a traceback."""
    tender, findings = tender_of(tmp_path, text)
    assert tender is None
    assert findings
    if fields is not None:
        assert [finding.field for finding in findings] == fields


@pytest.mark.parametrize(
    ("text", "line"),
    [
        ("a = 1\nb =\n", 2),
        ("a = 1\na = 2\n", 2),
        ("a = 'x", 1),
        ("d = 2026-02-30\n", 1),
        ("[a]\n[a]\n", 2),
        ("x = " + "[" * 5000, None),
        ("x = " + "9" * 5000, None),
    ],
)
def test_read_tender__syntax(tmp_path: Path, text: str, line: int | None) -> None:
    """What is no TOML is told with its line where there is one."""
    tender, (finding,) = tender_of(tmp_path, text)
    assert tender is None
    assert finding.kind == "tender-syntax"
    assert finding.place is not None
    assert finding.place.line == line


def test_read_tender__remedy_is_for_the_buyer(tmp_path: Path) -> None:
    """The tender file is the buyer's own: nobody is told to ask a bidder for it."""
    _, (finding,) = tender_of(tmp_path, b"")
    assert "bidder" not in finding.remedy


def test_read_tender__is_frozen(tmp_path: Path) -> None:
    """Places can be compared and sorted; nothing in a finding can be changed."""
    finding = only_finding(tmp_path, "load = 660", "load = -1")
    with pytest.raises(dataclasses.FrozenInstanceError):
        finding.kind = "tie"  # type: ignore[misc]
