"""From the blank form to filled forms to the evaluation: the demo once more, also after LibreOffice."""

from __future__ import annotations

import json
import shutil
from decimal import Decimal
from pathlib import Path

import openpyxl
import pytest
from click.testing import CliRunner

from lossworth.cli.main import lossworth
from lossworth.findings import Finding
from lossworth.intake.bid_files import read_bids
from lossworth.intake.table_header import recognized_columns
from lossworth.intake.tender_file import read_tender
from lossworth.intake.tender_folder import InputFile
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from support.bid_forms import answers, demo_answers, demo_figures, filled, form_of, headings, with_alternative
from support.demo_figures import differences
from support.libreoffice import recalculated
from support.rules_tenders import full_tender, ruled

_SAMPLE = Path(__file__).parents[2] / "sample_bids"
_FIELDS = {
    "price": "unit_price",
    "no_load": "no_load_loss_kw",
    "load": "load_loss_kw",
    "auxiliary": "auxiliary_loss_kw",
    "impedance": "impedance_percent",
    "delivery": "delivery_weeks",
}


@pytest.fixture(scope="module")
def tender() -> Tender:
    read, _ = read_tender(InputFile(_SAMPLE / "tender.toml", "tender.toml"))
    assert read is not None
    return read


@pytest.fixture(scope="module")
def forms(tender: Tender, tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, ...]:
    """The demo's bids as filled forms."""
    folder = tmp_path_factory.mktemp("forms")
    paths = []
    for bidder, content in demo_answers(form_of(tender)).items():
        path = folder / f"{bidder.lower()}.xlsx"
        path.write_bytes(content)
        paths.append(path)
    return tuple(paths)


@pytest.fixture(scope="module")
def saved_anew(forms: tuple[Path, ...], tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, ...]:
    """The same, opened and saved by LibreOffice."""
    return recalculated(forms, tmp_path_factory.mktemp("saved-anew"))


def read_forms(paths: tuple[Path, ...], tender: Tender) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """What intake makes of the forms."""
    return read_bids([InputFile(path, f"bids/{path.name}") for path in paths], tender)


def words(findings: tuple[Finding, ...]) -> list[str]:
    """Findings on the forms, but for those on headings that the reader does not know yet, which are notes."""
    return [
        str(finding)
        for finding in findings
        if finding.kind != "tender-key-not-used"
        and (finding.kind != "column-not-read" or recognized_columns([finding.got or ""]))
    ]


def stated(offers: tuple[Offer, ...]) -> dict[tuple[str, str], dict[str, Decimal | None]]:
    """Figures of offers by bidder and lot."""
    return {
        (offer.bidder.value, offer.lot.value): {
            name: None if (value := getattr(offer, field)) is None else value.value for name, field in _FIELDS.items()
        }
        for offer in offers
    }


def expected() -> dict[tuple[str, str], dict[str, Decimal | None]]:
    """The demo's own figures."""
    return {
        who: {name: Decimal(values[name]) if values[name] else None for name in _FIELDS}
        for who, values in demo_figures().items()
    }


def test_forms__read_back_without_a_word(forms: tuple[Path, ...], tender: Tender) -> None:
    """Filled forms state the demo's figures; a lot that is not offered is none; only the blank load loss is told."""
    offers, findings = read_forms(forms, tender)
    assert expected() == stated(offers)
    birchlune = "bids/birchlune.xlsx[Price schedule]!I9: load loss: must be stated, got a blank (Birchlune, lot 3)"
    assert [birchlune] == [text.splitlines()[0] for text in words(findings)]


def test_forms__saved_by_libreoffice_read_alike(
    saved_anew: tuple[Path, ...], forms: tuple[Path, ...], tender: Tender
) -> None:
    """Saving a form anew in another program changes nothing that it states."""
    offers, findings = read_forms(saved_anew, tender)
    assert expected() == stated(offers)
    assert words(read_forms(forms, tender)[1]) == words(findings)


def test_forms__evaluate_to_the_known_result(forms: tuple[Path, ...], tmp_path: Path) -> None:
    """Forms filled by a script give the demo's costs and ranks to the cent."""
    shutil.copy(_SAMPLE / "tender.toml", tmp_path)
    (tmp_path / "bids").mkdir()
    for path in forms:
        shutil.copy(path, tmp_path / "bids")
    done = CliRunner().invoke(lossworth, ["evaluate", str(tmp_path)], catch_exceptions=False)
    assert done.exit_code == 0, done.output
    assert differences(json.loads((tmp_path / "papers" / "evaluation.json").read_text(encoding="utf-8"))) == []


def test_self_check__as_libreoffice_computes_it(saved_anew: tuple[Path, ...]) -> None:
    """Complete lots turn green; what is blank, does not add up, lies beyond a limit or is not offered is told apart."""
    results = {}
    for path in saved_anew:
        page = openpyxl.load_workbook(path, data_only=True)["Price schedule"]
        top, columns = headings(page)
        for row in range(top + 1, page.max_row + 1):
            if page.cell(row, columns["Lot"]).value is not None:
                results[path.stem, str(page.cell(row, columns["Lot"]).value)] = page.cell(row, 4).value
    others = {who: result for who, result in results.items() if result != "complete"}
    assert others == {
        ("gorsemere", "1"): "beyond a limit",
        ("birchlune", "3"): "not complete",
        ("cedarfell", "3"): "does not add up",
        ("damsonby", "4"): "beyond a limit",
        ("gorsemere", "4"): "beyond a limit",
        ("elderquill", "4"): "not offered",
    }
    verdicts = {path.stem: _verdict(path) for path in saved_anew}
    assert {"aldermist", "elderquill", "firthwane"} == {who for who, done in verdicts.items() if done}


@pytest.fixture(scope="module")
def full_form(tmp_path_factory: pytest.TempPathFactory) -> dict[str, dict[str, list[object]]]:
    """Rows of the self-check of a form with everything, filled in three ways, as LibreOffice computes them."""
    tender = full_tender(rules=ruled(alternatives="as offers of their own"))
    form = form_of(tender)
    whole = answers("Alder", "NCU", form)
    row = {
        "Unit price": 4000,
        "Total price": 40000,
        "Item: spare bushing set": 250,
        "No-load loss [kW]": 0.12,
        "Load loss [kW]": 1.2,
        "Total loss [kW]": 1.32,
        "Load loss rating [kVA]": 100,
        "Reference temperature [°C]": 75,
        "Impedance [%]": 4.4,
        "Delivery [weeks]": 36,
        "Insulating liquid": "mineral oil",
        "PCB free": "yes",
        "Sound level [dB(A)]": 41,
        "Origin": "home",
    }
    shares = {"Payment at order [%]": 30, "Payment at delivery [%]": 70}
    books = {
        "complete": with_alternative(filled(form, whole | shares, {"1": row}), "1", 4500, 45000),
        "beyond": filled(form, whole, {"1": row | {"Impedance [%]": 4.41, "PCB free": "no"}}),
        "faulty": filled(
            form,
            whole | shares | {"Payment at order [%]": 31},
            {"1": {key: value for key, value in row.items() if key != "Item: spare bushing set"}},
        ),
    }
    books["faulty"] = with_alternative(books["faulty"], "1", 4500, 4500)
    folder = tmp_path_factory.mktemp("full")
    for name, content in books.items():
        (folder / f"{name}.xlsx").write_bytes(content)
    paths = recalculated([folder / f"{name}.xlsx" for name in books], folder / "saved")
    return {path.stem: _check_rows(path) for path in paths}


def _check_rows(path: Path) -> dict[str, list[object]]:
    page = openpyxl.load_workbook(path, data_only=True)["Self-check"]
    rows = ([cell.value for cell in row] for row in page.iter_rows())
    return {f"{row[0] or ''} {row[1] or ''}".strip(): row[2:] for row in rows if row[0] and row[8]}


def test_self_check__of_everything_that_a_form_can_ask(full_form: dict[str, dict[str, list[object]]]) -> None:
    """At its limits a lot is complete; beyond, incomplete and wrong sums are told apart, also of alternatives."""
    ok = "ok"
    complete, beyond, faulty = full_form["complete"], full_form["beyond"], full_form["faulty"]
    assert complete["1 100 kVA"] == [ok, ok, ok, ok, ok, ok, "complete"]
    assert complete["1 amorphous core"] == [ok, ok, ok, ok, ok, "–", "complete"]
    assert complete["2 100 kVA"] == ["–"] * 6 + ["not offered"]
    assert complete["Sheet Bid: payments of an own schedule make 100 %"][-1] == ok
    assert beyond["1 100 kVA"] == [ok, ok, ok, ok, ok, "beyond", "beyond a limit"]
    assert beyond["Sheet Bid: payments of an own schedule make 100 %"][-1] == "–"
    assert faulty["1 100 kVA"] == ["missing", ok, ok, ok, ok, ok, "not complete"]
    assert faulty["1 amorphous core"] == [ok, "differs", ok, ok, ok, "–", "does not add up"]
    assert faulty["Sheet Bid: payments of an own schedule make 100 %"][-1] == "differs"


def _verdict(path: Path) -> bool:
    page = openpyxl.load_workbook(path, data_only=True)["Self-check"]
    texts = {cell.value for row in page.iter_rows() for cell in row if isinstance(cell.value, str)}
    assert len(texts & {"The form is complete and adds up.", "The form is not complete yet; see below."}) == 1
    return "The form is complete and adds up." in texts
