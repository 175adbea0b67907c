"""The published two-bid comparison as files: a tender file and a csv in; JSON, workbook and page out.

Source: two-bid comparison of a 161/34.5 kV 30/40/50 MVA unit in the form of REA Bulletin 65-2 (1978) / RUS Bulletin
1724E-301 (1997), as printed in the article 'Take into account the losses when purchasing power transformer' of
Electrical Engineering Portal; that it stems from the bulletin is inferred. Names and dates here are invented.
"""

from __future__ import annotations

import json
import re
from pathlib import Path

import openpyxl
import pytest

from support.command_line import call

TENDER = """
format_version = 1
[tender]
reference = "Two bids"
title = "One unit of 30/40/50 MVA, 161/34.5 kV"
buyer = "A utility"
currency = "USD"
[rules]
round_money_to = 1
rounding = "half away from zero"
rounding_applies_to = "each cost part per unit"
[[lot]]
id = "1"
description = "30/40/50 MVA, 161/34.5 kV"
rated_power_mva = 50
quantity = 1
cooling = "ONAN/ONAF/ONAF"
[lot.rates]
no_load = 2450
load = 1304
auxiliary = 756
per = "kW"
"""
BIDS = """lot,bidder,unit price [USD],no-load loss [kW],load loss [kW],auxiliary loss [kW]
1,Bid A,424500,59,224,2.0
1,Bid B,436000,53,218,2.5
"""
PRINTED = {
    "Bid A": ["424500", "144550", "292096", "1512", "862658"],
    "Bid B": ["436000", "129850", "284272", "1890", "852012"],
}
FIELDS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost", "total_owning_cost")


@pytest.fixture(scope="module")
def papers(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Papers of the comparison."""
    folder = tmp_path_factory.mktemp("two bids")
    (folder / "bids").mkdir()
    (folder / "tender.toml").write_text(TENDER, encoding="utf-8")
    (folder / "bids/bids.csv").write_text(BIDS, encoding="utf-8")
    outcome = call("evaluate", folder, "--as-of", "2026-09-15T10:00:00Z")
    assert outcome.code == 0, outcome.err
    return folder / "papers"


def test_two_bids__json(papers: Path):
    """The dearer price comes first, with the printed amounts."""
    offers = json.loads((papers / "evaluation.json").read_text(encoding="utf-8"))["lots"][0]["offers"]
    assert [(o["bidder"], o["rank"]) for o in offers] == [("Bid B", 1), ("Bid A", 2)]
    assert {o["bidder"]: [o[field] for field in FIELDS] for o in offers} == PRINTED
    assert offers[0]["margin"]["amount"] == "10646"


def test_two_bids__workbook(papers: Path):
    """The workbook's ranking shows the same order and amounts as computed values."""
    sheet = openpyxl.load_workbook(papers / "evaluation.xlsx", data_only=True)["Ranking"]
    rows = [[cell.value for cell in row] for row in sheet.iter_rows()]
    found = [[name for name in PRINTED if name in row] for row in rows if any(name in row for name in PRINTED)]
    assert found[:2] == [["Bid B"], ["Bid A"]]
    for name, amounts in PRINTED.items():
        row = next(row for row in rows if name in row)
        assert {float(amount) for amount in amounts} <= {float(v) for v in row if isinstance(v, int | float)}


def test_two_bids__page(papers: Path):
    """The page carries the same amounts, the dearer price first."""
    page = (papers / "evaluation.html").read_text(encoding="utf-8")
    values = set(re.findall(r'data-value="([^"]+)"', page))
    assert {amount for amounts in PRINTED.values() for amount in amounts} <= values
    assert page.index("Bid B") < page.index("Bid A")
    assert "852,012" in page
