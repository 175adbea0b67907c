"""Keys of the tender file behind derived rates: prices, dates, profiles, cooling, methods, the basis of the losses."""

from __future__ import annotations

import datetime
from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Finding, Place
from lossworth.intake.linked_files import linked_files
from lossworth.intake.tender_folder import InputFile
from lossworth.records.tender import CoolingValuation, Method, PresentValueDate, Tender
from support.profile_texts import LOADED, TYPICAL, day_rows, text_of, year_rows
from support.tender_folders import TENDER, told, valid_tender, write_folder
from support.tender_folders import tender_of as tender_of_text

PROFILES = {
    "profiles/town.csv": text_of(year_rows()),
    "profiles/prices.csv": text_of([(time, "0.05") for time, _ in year_rows()], "time,price [NCU/kWh]"),
    "prices_by_year.csv": "year,price [NCU/kWh]\n" + "".join(f"{year},0.08\n" for year in range(1, 31)),
}
BLOCKS = """
[[economics.board.block]]
name = "day"
price_per_kwh = 0.12
days = ["workday"]
months = [11, 12, 1, 2]
from = 07:00:00
to = 21:00:00
[[economics.board.block]]
name = "rest"
price_per_kwh = 0.06
[loading.town]"""
BLOCKED = LOADED.replace("energy_price_per_kwh = 0.08\n", "").replace("\n[loading.town]", BLOCKS)
STAGES = """peak_load_pu = 0.6
[[loading.town.cooling_stage]]
above_load_pu = 0.5
share_of_auxiliary_loss = 0.4
[[loading.town.cooling_stage]]
above_load_pu = 0.55
share_of_auxiliary_loss = 0.6
[loading.rest]
"""
#: Cooling stages stand behind the keys of their loading condition.
STAGED = LOADED.replace(
    "peak_load_pu = 0.6\npeak_responsibility_factor = 0.9\n",
    "peak_responsibility_factor = 0.9\n" + STAGES.replace("[loading.rest]\n", ""),
)
BASIS = """
[lot.loss_basis]
reference_temperature_c = 75
load_loss_rating_mva = 0.8
conductor = "copper"
convert = ["rating", "temperature", "total loss"]
"""


def changed(old: str, new: str, text: str = TENDER) -> str:
    """Tender text in which one passage reads otherwise."""
    assert old in text, old
    return text.replace(old, new, 1)


def tender_of(folder: Path, text: str) -> tuple[Tender | None, tuple[Finding, ...]]:
    """Tender of a text, beside the files that it may name."""
    write_folder(folder, tender=text, more=PROFILES)
    return tender_of_text(folder, text)


def valid(folder: Path, text: str) -> Tender:
    """Tender of a text that has no faults."""
    write_folder(folder, tender=text, more=PROFILES)
    return valid_tender(folder, text)


def economics_with(*lines: str, text: str = TENDER) -> str:
    """Tender with more keys in its economics."""
    return changed("energy_price_per_kwh = 0.08", "\n".join(("energy_price_per_kwh = 0.08", *lines)), text)


def test_read_tender__terms(tmp_path: Path) -> None:
    """Rate and prices are typed, both alike."""
    economics = valid(tmp_path, TENDER).economics["board"]
    assert (economics.price_terms, economics.discount_rate_terms) == ("real", "real")


def test_read_tender__real_rate_with_nominal_price(tmp_path: Path) -> None:
    """A real rate does not discount a nominal price; the remedy has the formula."""
    _, (finding,) = tender_of(tmp_path, changed('price_terms = "real"', 'price_terms = "nominal"'))
    assert (finding.kind, finding.field) == ("tender-conflict", "economics.board.discount_rate_terms")
    assert "r_nominal = (1 + r_real) * (1 + inflation) - 1" in finding.remedy


@pytest.mark.parametrize("name", ["price_terms", "discount_rate_terms"])
def test_read_tender__terms_are_needed(tmp_path: Path, name: str) -> None:
    """Neither of the two is assumed."""
    _, (finding,) = tender_of(tmp_path, changed(f'{name} = "real"\n', ""))
    assert (finding.kind, finding.field) == ("tender-key-missing", f"economics.board.{name}")


def test_read_tender__blocks(tmp_path: Path) -> None:
    """Blocks of a tariff have names, prices and conditions, and one may take the rest."""
    day, rest = valid(tmp_path, BLOCKED).economics["board"].energy_price_blocks
    assert (day.name.value, day.price_per_kwh.value, day.price_per_kwh.unit) == ("day", Decimal("0.12"), "NCU/kWh")
    assert (day.day_types, day.months) == (("workday",), (11, 12, 1, 2))
    assert (day.starts, day.ends) == (datetime.time(7), datetime.time(21))
    assert day.price_per_kwh.place == Place("tender.toml", line=31, key="economics.board.block[1].price_per_kwh")
    assert rest.is_rest


def test_read_tender__price_series_and_prices_by_year(tmp_path: Path) -> None:
    """A file stands in the place of a price."""
    series = changed("energy_price_per_kwh = 0.08", 'energy_price_series = "profiles/prices.csv"', LOADED)
    assert valid(tmp_path, series).economics["board"].energy_price_series is not None
    by_year = changed("energy_price_per_kwh = 0.08", 'energy_price_by_year = "prices_by_year.csv"')
    assert len(valid(tmp_path, by_year).economics["board"].energy_price_by_year_per_kwh or ()) == 30


def test_linked_files__for_the_record_of_a_run(tmp_path: Path) -> None:
    """Every file that a tender rests on is listed once, by its path from the tender's folder."""
    second = '[economics.more]\nprice_terms = "real"\ndiscount_rate_terms = "real"\ndiscount_rate_percent = 6\n'
    second += (
        'evaluation_period_years = 30\ntiming = "mid-year"\nenergy_price_by_year = "prices_by_year.csv"\n[loading.town]'
    )
    text = changed("energy_price_per_kwh = 0.08", 'energy_price_series = "profiles/prices.csv"', LOADED)
    tender, _ = tender_of(tmp_path, changed("[loading.town]", second, text))
    assert tender is not None
    files = linked_files(tender, InputFile(tmp_path / "tender.toml", "tender.toml"))
    assert [file.shown_as for file in files] == ["profiles/prices.csv", "prices_by_year.csv", "profiles/town.csv"]
    assert all(file.path == tmp_path / file.shown_as for file in files)
    assert linked_files(valid(tmp_path, TENDER), InputFile(tmp_path / "tender.toml", "tender.toml")) == ()


def test_read_tender__carbon_dates_and_charges(tmp_path: Path) -> None:
    """Carbon cost, dates, monthly charge and fixed charge rate fill the economics."""
    text = economics_with(
        "carbon_cost_per_kwh = 0.02",
        "carbon_cost_escalation_percent = 2",
        "carbon_cost_counts = true",
        "carbon_intensity_kg_per_kwh = 0.35",
        "fixed_charge_rate_percent = 12",
        "price_date = 2026-01-01",
        "service_date = 2028-01-01",
        'present_value_at = "price date"',
    )
    text = changed("demand_charge_per_kw_year = 50", "demand_charge_per_kw_month = 4.5", text)
    economics = valid(tmp_path, text).economics["board"]
    assert economics.carbon_cost_per_kwh is not None
    assert economics.demand_charge_per_kw_month is not None
    assert (economics.carbon_cost_counts, economics.demand_charge_per_kw_month.unit) == (True, "NCU/(kW month)")
    assert (economics.price_date, economics.service_date) == (datetime.date(2026, 1, 1), datetime.date(2028, 1, 1))
    assert economics.present_value_at is PresentValueDate.PRICE


def test_read_tender__cooling_stages(tmp_path: Path) -> None:
    """Stages have a loading and a share, with their lines."""
    first, second = valid(tmp_path, STAGED).loading["town"].cooling_stages
    assert (first.above_load_pu.value, second.share_of_auxiliary_loss.value) == (Decimal("0.5"), Decimal("0.6"))
    assert second.place == Place("tender.toml", line=38, key="loading.town.cooling_stage[2]")


def test_read_tender__peak_loads_by_year(tmp_path: Path) -> None:
    """A table of peak loads stands in place of peak load and growth."""
    loads = "peak_load_by_year_pu = [" + "0.5, " * 30 + "]"
    loading = valid(tmp_path, changed("peak_load_pu = 0.6", loads)).loading["town"]
    assert (loading.peak_load_pu, len(loading.peak_load_by_year_pu or ())) == (None, 30)


@pytest.mark.parametrize(("unit", "needed"), [("kVA", False), ("pu", False), ("kW", True), ("A", True)])
def test_read_tender__peak_load_of_a_profile(tmp_path: Path, unit: str, needed: bool) -> None:
    """A profile in kVA or per unit has its own peak load; active power and current have none over the rating."""
    text = changed("peak_load_pu = 0.6\n", "", LOADED)
    write_folder(tmp_path, tender=text, more={"profiles/town.csv": text_of(year_rows(), f"time,load [{unit}]")})
    _, findings = tender_of_text(tmp_path, text)
    assert ("tender-key-missing" in {finding.kind for finding in findings}) == needed


def test_read_tender__method_valuation_and_basis(tmp_path: Path) -> None:
    """Method, valuation of the cooling and basis of the losses fill the lot."""
    text = changed('loading = "town"\nround', 'loading = "town"\nmethod = "fixed charge rate"\nround')
    text = changed("quantity = 5\n", 'quantity = 5\ncooling_valuation = "through A and B"\n', text) + BASIS
    lot = valid(tmp_path, economics_with("fixed_charge_rate_percent = 12", text=text)).lots[1]
    assert lot.derivation is not None
    assert lot.loss_basis is not None
    assert lot.loss_basis.load_loss_rating_kva is not None
    assert lot.derivation.method is Method.FIXED_CHARGE_RATE
    assert lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B
    assert (lot.loss_basis.load_loss_rating_kva.value, lot.loss_basis.conductor) == (800, "copper")
    assert lot.loss_basis.convert == ("rating", "temperature", "total loss")


ECONOMICS = [
    (economics_with("carbon_cost_per_kwh = 0.02"), "tender-key-missing", "carbon_cost_counts"),
    (economics_with("carbon_cost_counts = true"), "tender-key-missing", "carbon_cost_per_kwh"),
    (economics_with("carbon_cost_per_kwh = 0.02", 'carbon_cost_counts = "yes"'), "tender-value", "carbon_cost_counts"),
    (economics_with("carbon_cost_escalation_percent = 2"), "tender-key-missing", "carbon_cost_per_kwh"),
    (economics_with("demand_charge_per_kw_month = 4"), "tender-conflict", "demand_charge_per_kw_month"),
    (economics_with("price_date = 2026-01-01"), "tender-key-missing", "service_date"),
    (economics_with("service_date = 2026-01-01"), "tender-key-missing", "price_date"),
    (economics_with('present_value_at = "price date"'), "tender-key-missing", "price_date"),
    (economics_with("price_date = 2028-01-01", "service_date = 2026-01-01"), "tender-conflict", "service_date"),
    (economics_with("price_date = 1828-01-01", "service_date = 2026-01-01"), "tender-value", "service_date"),
    (economics_with("energy_price_clock = 'standard time'"), "tender-conflict", "energy_price_clock"),
    (
        economics_with("energy_price_series = 'profiles/prices.csv'", text=LOADED),
        "tender-conflict",
        "energy_price_series",
    ),
    (
        changed(
            "energy_price_per_kwh = 0.08",
            "energy_price_by_year = 'prices_by_year.csv'",
            BLOCKED.replace("demand_charge_per_kw_year", "energy_price_per_kwh = 0.08\ndemand_charge_per_kw_year", 1),
        ),
        "tender-conflict",
        "block[1]",
    ),
    (changed("to = 21:00:00\n", "", BLOCKED), "tender-key-missing", "block[1].to"),
    (changed("to = 21:00:00", "to = 07:00:00", BLOCKED), "tender-value", "block[1].to"),
    (changed("to = 21:00:00", 'to = "21:00"', BLOCKED), "tender-value", "block[1].to"),
    (changed("to = 21:00:00", "to = 21:00:30", BLOCKED), "tender-value", "block[1].to"),
    (changed("to = 21:00:00", "to = 21:30:00", BLOCKED), "tender-conflict", "block[1].to"),
    (changed('["workday"]', '["weekday"]', BLOCKED), "tender-value", "block[1].days"),
    (changed('["workday"]', '"workday"', BLOCKED), "tender-value", "block[1].days"),
    (changed("12, 1, 2]", "12, 13]", BLOCKED), "tender-value", "block[1].months[3]"),
    (changed("price_per_kwh = 0.06", "price_per_kwh = -0.06", BLOCKED), "tender-value", "block[2].price_per_kwh"),
    (changed("price_per_kwh = 0.06\n", "", BLOCKED), "tender-key-missing", "block[2].price_per_kwh"),
    (changed('name = "rest"', 'name = "rest"\nday = "x"', BLOCKED), "tender-key-unknown", "block[2].day"),
    (
        changed('name = "rest"', 'name = "more"\nprice_per_kwh = 0\n[[economics.board.block]]\nname = "rest"', BLOCKED),
        "tender-conflict",
        "block[3]",
    ),
    (
        changed('[[economics.board.block]]\nname = "rest"\nprice_per_kwh = 0.06\n', "", BLOCKED).replace(
            "[[economics.board.block]]", "[economics.board.block]"
        ),
        "tender-value",
        "block",
    ),
]


@pytest.mark.parametrize(
    ("text", "kind", "key"), ECONOMICS, ids=[f"{key}-{n}" for n, (*_, key) in enumerate(ECONOMICS)]
)
def test_read_tender__one_fault_of_the_economics(tmp_path: Path, text: str, kind: str, key: str) -> None:
    """One fault makes one finding, which names the key and its line."""
    _, (finding,) = tender_of(tmp_path, text)
    assert (finding.kind, finding.field) == (kind, f"economics.board.{key}")
    assert finding.place is not None
    assert finding.place.line is not None


#: The peak of the profile, 670 kVA, is twice 335 kVA, and 0.67 of 1000 kVA.
TWICE = LOADED.replace("rated_power_kva = 100\n", "rated_power_kva = 335\n")

LOADING = [
    (changed("profile_clock", "load_factor = 0.5\nprofile_clock", LOADED), "tender-conflict", "load_factor"),
    (changed("profile_clock", "loss_factor = 0.5\nprofile_clock", LOADED), "tender-conflict", "loss_factor"),
    (changed("peak_load_pu", "profile_clock = 'standard time'\npeak_load_pu"), "tender-key-missing", "profile"),
    (changed("peak_load_pu", "profile_reverse_flow = 'magnitude'\npeak_load_pu"), "tender-key-missing", "profile"),
    (changed("peak_load_pu", "profile_day_weights = { a = 365 }\npeak_load_pu"), "tender-key-missing", "profile"),
    (changed('"standard time"', '"summer time"', LOADED), "tender-value", "profile_clock"),
    (changed("peak_load_pu", "profile_day_weights = 365\npeak_load_pu", LOADED), "tender-value", "profile_day_weights"),
    (
        changed("peak_load_pu", "profile_reverse_flow = 'sign'\npeak_load_pu", LOADED),
        "tender-value",
        "profile_reverse_flow",
    ),
    (changed("peak_load_pu = 0.6", "peak_load_by_year_pu = [0.5]"), "tender-conflict", "peak_load_by_year_pu"),
    (
        changed("peak_load_pu = 0.6", "peak_load_pu = 0.6\npeak_load_by_year_pu = [" + "0.5, " * 30 + "]"),
        "tender-conflict",
        "peak_load_pu",
    ),
    (
        changed("peak_load_pu = 0.6", "peak_load_growth_percent = 1\npeak_load_by_year_pu = [" + "0.5, " * 30 + "]"),
        "tender-conflict",
        "peak_load_growth_percent",
    ),
    (changed("= 0.4\n", "= 0.3\n", STAGED), "tender-value", "cooling_stage[2].share_of_auxiliary_loss"),
    (
        changed('profile = "profiles/town.csv"\nprofile_clock = "standard time"\n', "loss_factor = 0.5\n", STAGED),
        "tender-key-missing",
        "profile",
    ),
    (changed("above_load_pu = 0.5\n", "", STAGED), "tender-key-missing", "cooling_stage[1].above_load_pu"),
    (changed("peak_load_pu = 0.6", "peak_load_cap_pu = 1.9", TWICE), "tender-conflict", "peak_load_cap_pu"),
]


@pytest.mark.parametrize(("text", "kind", "key"), LOADING, ids=[f"{key}-{n}" for n, (*_, key) in enumerate(LOADING)])
def test_read_tender__one_fault_of_the_loading(tmp_path: Path, text: str, kind: str, key: str) -> None:
    """One fault makes one finding."""
    _, (finding,) = tender_of(tmp_path, text)
    assert (finding.kind, finding.field) == (kind, f"loading.town.{key}")


def test_read_tender__cooling_stages_beside_stated_hours(tmp_path: Path) -> None:
    """Stages exclude stated hours and the stated share at peak."""
    keys = "cooling_hours = 600\ncooling_share_at_peak = 1\npeak_responsibility"
    _, findings = tender_of(tmp_path, changed("peak_responsibility", keys, STAGED))
    assert [(finding.kind, finding.field) for finding in findings] == [
        ("tender-conflict", "loading.town.cooling_hours"),
        ("tender-conflict", "loading.town.cooling_share_at_peak"),
    ]


FIXED = changed('loading = "town"\nround', 'loading = "town"\nmethod = "fixed charge rate"\nround')
THROUGH = changed("quantity = 5\n", 'quantity = 5\ncooling_valuation = "through A and B"\n')
LOTS = [
    (FIXED, "tender-key-missing", "economics.board.fixed_charge_rate_percent"),
    (
        changed(
            "energy_price_per_kwh = 0.08",
            "fixed_charge_rate_percent = 12\nenergy_price_by_year = 'prices_by_year.csv'",
            FIXED,
        ),
        "tender-conflict",
        "economics.board.energy_price_by_year",
    ),
    (
        economics_with("fixed_charge_rate_percent = 12", "energy_price_escalation_percent = 2", text=FIXED),
        "tender-key-not-used",
        "economics.board.energy_price_escalation_percent",
    ),
    (
        economics_with(
            "fixed_charge_rate_percent = 12",
            text=changed('loading = "town"\nround', 'loading = "town"\nmethod = "fixed charge rate"\nround', STAGED),
        ),
        "tender-conflict",
        "loading.town.cooling_stage[1]",
    ),
    (changed('"fixed charge rate"', '"fixed rate"', FIXED), "tender-value", "lot.2.derivation.method"),
    (
        changed("peak_load_pu", "cooling_hours = 9\ncooling_share_at_peak = 1\npeak_load_pu", THROUGH),
        "tender-conflict",
        "loading.town.cooling_hours",
    ),
    (
        changed("quantity = 5\n", 'quantity = 5\ncooling_valuation = "through A and B"\n', STAGED),
        "tender-conflict",
        "loading.town.cooling_stage[1]",
    ),
    (
        changed("quantity = 10\n", 'quantity = 10\ncooling_valuation = "through A and B"\n').replace(
            "load = 660", "load = 660\nauxiliary = 900"
        ),
        "tender-conflict",
        "lot.1.rates.auxiliary",
    ),
    (TENDER + BASIS.replace('conductor = "copper"\n', ""), "tender-key-missing", "lot.2.loss_basis.conductor"),
    (
        TENDER + BASIS.replace("reference_temperature_c = 75\n", ""),
        "tender-key-missing",
        "lot.2.loss_basis.reference_temperature_c",
    ),
    (TENDER + BASIS.replace("copper", "silver"), "tender-value", "lot.2.loss_basis.conductor"),
    (TENDER + BASIS.replace('"rating"', '"impedance"'), "tender-value", "lot.2.loss_basis.convert[1]"),
    (TENDER + BASIS + "load_loss_rating_kva = 800\n", "tender-conflict", "lot.2.loss_basis.load_loss_rating_mva"),
]


@pytest.mark.parametrize(("text", "kind", "key"), LOTS, ids=[f"{key}-{n}" for n, (*_, key) in enumerate(LOTS)])
def test_read_tender__one_fault_of_a_lot(tmp_path: Path, text: str, kind: str, key: str) -> None:
    """Method, valuation and basis have what they need, and nothing that contradicts them."""
    _, (finding,) = tender_of(tmp_path, text)
    assert (finding.kind, finding.field) == (kind, key)


def test_read_tender__fans_without_hours_of_their_own(tmp_path: Path) -> None:
    """A unit with fans needs hours or stages where cooling has a rate, and none where it is valued through A and B."""
    fans = changed('quantity = 5\ncooling = "ONAN"', 'quantity = 5\ncooling = "ONAN/ONAF"')
    assert told(tender_of(tmp_path, fans)[1]) == [("tender-key-missing", "tender.toml:30", None)]
    assert (
        tender_of(tmp_path, changed("quantity = 5\n", 'quantity = 5\ncooling_valuation = "through A and B"\n', fans))[1]
        == ()
    )
    assert (
        tender_of(tmp_path, changed('quantity = 5\ncooling = "ONAN"', 'quantity = 5\ncooling = "ONAN/ONAF"', STAGED))[1]
        == ()
    )


def test_read_tender__blocks_by_typical_days(tmp_path: Path) -> None:
    """The day types of blocks are those of the profile, whatever their names."""
    text = changed("\n[loading.town]", BLOCKS.replace("months = [11, 12, 1, 2]\n", ""), TYPICAL)
    text = text.replace("energy_price_per_kwh = 0.08\n", "")
    write_folder(tmp_path, tender=text, more={"profiles/town.csv": text_of(day_rows(), "day type,time,load [kVA]")})
    assert len(valid_tender(tmp_path, text).economics["board"].energy_price_blocks) == 2
    _, (finding,) = tender_of_text(tmp_path, text.replace('["workday"]', '["holiday"]'))
    assert (finding.kind, finding.got) == ("tender-value", "holiday")
