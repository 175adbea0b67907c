"""Price series and prices by year out of csv files."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Place
from lossworth.records.profile import PriceSeries
from support.profile_texts import (
    LOADED,
    PRICED,
    daylight_saving_rows,
    series_of,
    step_rows,
    text_of,
    with_value,
    year_rows,
)
from support.tender_folders import tender_of, told, valid_tender, write_folder

BY_YEAR = LOADED.replace("energy_price_per_kwh = 0.08", 'energy_price_by_year = "prices.csv"')


def prices(minutes: int = 60) -> list[tuple[str, str]]:
    """Invented prices of a year: 0.040 to 0.079."""
    return [(time, f"0.0{40 + number % 40}") for number, (time, _) in enumerate(year_rows(minutes=minutes))]


def read(folder: Path, text: str, tender: str = PRICED) -> PriceSeries:
    """Price series that has no faults."""
    series, findings = series_of(folder, text, tender)
    assert {finding.kind for finding in findings} <= {"profile-remark"}, [str(finding) for finding in findings]
    assert series is not None
    return series


@pytest.mark.parametrize("minutes", [60, 30, 15])
def test_read_price_series__year(tmp_path: Path, minutes: int) -> None:
    """A price for each step, with the file and the key that names it."""
    series = read(tmp_path, text_of(prices(minutes), "time,price [NCU/kWh]"))
    assert series.prices_per_kwh == tuple(float(price) for _, price in prices(minutes))
    assert (series.file, len(series.grid.months)) == ("profiles/prices.csv", 525600 // minutes)
    assert series.place == Place("tender.toml", line=23, key="economics.board.energy_price_series")


def test_read_price_series__per_megawatt_hour(tmp_path: Path) -> None:
    """A price per MWh is a thousandth per kWh, exactly."""
    in_mwh = [(time, str(Decimal(price) * 1000)) for time, price in prices()]
    per_kwh = read(tmp_path, text_of(prices(), "time,price [NCU/kWh]"))
    assert read(tmp_path, text_of(in_mwh, "time,energy price [NCU/MWh]")).prices_per_kwh == per_kwh.prices_per_kwh


def test_read_price_series__numbered_steps(tmp_path: Path) -> None:
    """Prices may have numbers in place of times."""
    rows = [(number, "0.05") for number, _ in step_rows(17520)]
    assert read(tmp_path, text_of(rows, "step,price [NCU/kWh]")).grid.step_hours == 0.5


def test_read_price_series__local_time(tmp_path: Path) -> None:
    """A series in local time says so by a key of its own."""
    rows = [(time, price) for (time, _), (_, price) in zip(daylight_saving_rows(), prices(), strict=True)]
    text = text_of(rows, "time,price [NCU/kWh]")
    _, findings = series_of(tmp_path, text)
    assert [(finding.kind, "energy_price_clock" in finding.remedy) for finding in findings] == [
        ("profile-daylight-saving", True)
    ]
    declared = PRICED.replace("\ndemand", '\nenergy_price_clock = "local time with daylight saving"\ndemand', 1)
    assert sum(read(tmp_path, text, declared).grid.hours) == 8760


def test_read_price_series__dear_hour(tmp_path: Path) -> None:
    """A price far above the others is questioned, and stands."""
    series, findings = series_of(tmp_path, text_of(with_value(prices(), 7, "3.9"), "time,price [NCU/kWh]"))
    assert series is not None
    assert told(findings) == [("profile-questioned", "profiles/prices.csv:9[price [NCU/kWh]]", "3.9")]


def test_read_prices_by_year__file(tmp_path: Path) -> None:
    """Prices of a file are those of the inline list, each with its own line, and the file's name is kept."""
    rows = [(str(year), f"{80 + year}.50") for year in range(1, 31)]
    files = {"prices.csv": text_of(rows, "year,price [NCU/MWh]"), "profiles/town.csv": text_of(year_rows())}
    write_folder(tmp_path, tender=BY_YEAR, more=files)
    read_prices = valid_tender(tmp_path, BY_YEAR).economics["board"].energy_price_by_year_per_kwh
    assert read_prices is not None
    assert [price.value for price in read_prices[:2]] == [Decimal("0.0815"), Decimal("0.0825")]
    assert (read_prices[0].stated, read_prices[0].unit, read_prices[0].text) == (Decimal("81.5"), "NCU/MWh", "81.50")
    assert read_prices[29].place == Place("prices.csv", line=31, column="price [NCU/MWh]")


def test_read_prices_by_year__beside_a_list(tmp_path: Path) -> None:
    """The file and the list say the same thing twice."""
    both = BY_YEAR.replace("demand_charge_per", "energy_price_by_year_per_kwh = [0.08]\ndemand_charge_per", 1)
    write_folder(tmp_path, tender=both, more={"prices.csv": "year,price [NCU/kWh]\n1,0.08\n"})
    _, findings = tender_of(tmp_path, both)
    assert "tender-conflict" in {finding.kind for finding in findings}


def test_read_price_series__without_a_currency(tmp_path: Path) -> None:
    """Where the tender's own currency cannot be read, no fault of the prices is invented."""
    tender = PRICED.replace('currency = "NCU"', 'currency = "Ncu"')
    series, findings = series_of(tmp_path, text_of(prices(), "time,price [NCU/kWh]"), tender)
    assert (series, told(findings)) == (None, [("tender-value", "tender.toml:7", "Ncu")])
