"""The evaluation workbook as its readers find it: values, formulas, text that stays text, set-up."""

from __future__ import annotations

import io
import re
import zipfile
from dataclasses import replace
from decimal import Decimal
from pathlib import Path

import openpyxl
import pytest

from lossworth.findings import Finding
from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from support import records as make
from support.sample_views import HOSTILE, offer, view_of, workbook_tender, workbook_view
from support.workbook_cells import cells, formulas

SHEETS = [
    "Summary",
    "Ranking",
    "Evaluation",
    "Rates",
    "Rates by year",
    "Inputs",
    "Bids",
    "Information",
    "Findings",
    "Comparison",
    "Record",
]


def written(view: EvaluationView, folder: Path) -> Path:
    """The workbook of a view as a file."""
    path = folder / "evaluation.xlsx"
    path.write_bytes(workbook_bytes(view))
    return path


@pytest.fixture(scope="module")
def path(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The workbook of the usual view."""
    return written(workbook_view(), tmp_path_factory.mktemp("workbook"))


def test_workbook_bytes__sheets(path: Path) -> None:
    """From the result to what it rests on."""
    assert openpyxl.load_workbook(path).sheetnames == SHEETS


def test_workbook_bytes__no_year_tables_without_derived_rates(tmp_path: Path) -> None:
    """Where all rates are announced, there is no sheet of the rates by year."""
    view = view_of(make.tender(), (make.offer(),))
    assert [name for name in SHEETS if name != "Rates by year"] == openpyxl.load_workbook(
        written(view, tmp_path)
    ).sheetnames


def test_workbook_bytes__identical_for_the_same_view() -> None:
    """The clock does not enter, and nothing is left over from the workbook before."""
    assert workbook_bytes(workbook_view()) == workbook_bytes(workbook_view())


def test_workbook_bytes__time_of_the_run_is_the_documents_date(path: Path) -> None:
    """The document's date is that of the record, and no member of the archive has another one."""
    made = openpyxl.load_workbook(path).properties.created
    assert made is not None
    assert made.isoformat() == "2026-09-15T10:00:00"
    assert {(1980, 1, 1, 0, 0, 0)} == {member.date_time for member in zipfile.ZipFile(path).infolist()}


def test_workbook_bytes__every_formula_has_a_value(path: Path) -> None:
    """A previewer that does not calculate shows every cell."""
    shown = cells(path)
    assert len(formulas(path)) > 200
    assert [place for place in formulas(path) if shown.get(place) is None] == []


def test_workbook_bytes__every_figure_has_its_cell(path: Path) -> None:
    """Every figure but the margins, which the ranking makes anew from sorted rows, stands in a cell of its own."""
    numbers = {round(float(value), 6) for value in cells(path).values() if isinstance(value, int | float)}
    figures = workbook_view().figures
    missing = [name for name, figure in figures.items() if round(float(figure.value), 6) not in numbers]
    assert [name for name in missing if not name.endswith("/margin")] == []


def test_workbook_bytes__amounts_are_formulas_of_their_operands(path: Path) -> None:
    """Products, rounding and sums refer to the cells of losses, rates and quantity."""
    found = {text.removeprefix("\0") for (sheet, _), text in formulas(path).items() if sheet == "Evaluation"}
    patterns = (
        r"=ROUND\(I7\*E9,2\)",  # rate A times P0
        r"=ROUND\(B\d+\*D\d+,2\)",  # price times exchange rate
        r"=H9\+I9\+J9",  # total per unit
        r"=B6\*L9",  # quantity times total per unit
        r"=Bids!\$D\$\d+/Inputs!\$B\$\d+",  # watts to kilowatts
    )
    assert [p for p in patterns if not any(re.fullmatch(p, text) for text in found)] == []


def test_workbook_bytes__only_functions_of_old_spreadsheets(path: Path) -> None:
    """No function that Excel 2010 or LibreOffice lacks."""
    used = {name for text in formulas(path).values() for name in re.findall(r"([A-Z]+)\(", text)}
    known = {"ROUND", "SUM", "SUMPRODUCT", "IF", "MIN", "INDEX", "MATCH", "COUNTIF", "ISNUMBER", "ROW", "LEN", "LEFT"}
    assert used - known == set()


@pytest.mark.parametrize("name", HOSTILE)
def test_workbook_bytes__hostile_name_stays_text(name: str, tmp_path: Path) -> None:
    """A bidder's name is a text cell wherever it is written, and the text of a formula's value elsewhere."""
    view = view_of(make.tender(), (make.offer(name), make.offer("Birch", load_loss_kw=None)))
    made = written(view, tmp_path)
    names = {offer.bidder for offer in view.lots[0].offers}
    shown, columns = cells(made), {"Bids": "B", "Evaluation": "A", "Ranking": "B"}
    for sheet, column in columns.items():
        held = {value for (where, cell), value in shown.items() if where == sheet and cell[0] == column}
        assert names - held == set(), sheet
    assert [text for text in formulas(made).values() if "cmd" in text or "HYPERLINK" in text] == []
    archive = zipfile.ZipFile(made)
    assert [member for member in archive.namelist() if "hyperlink" in archive.read(member).decode()] == []


def test_workbook_bytes__control_characters_are_replaced(tmp_path: Path) -> None:
    """What XML cannot hold becomes the replacement character, in texts and in values of formulas."""
    view = workbook_view()
    lot = replace(view.lots[1], offers=tuple(replace(each, bidder="a\x07\ufffe") for each in view.lots[1].offers))
    shown = cells(written(replace(view, title="b\x00", lots=(view.lots[0], lot)), tmp_path))
    assert shown["Summary", "A2"] == "T-1 · b\ufffd · Invented Board"
    assert shown["Summary", "C8"] == "a\ufffd\ufffd"


def test_workbook_bytes__text_too_long_for_a_cell_is_shortened(tmp_path: Path) -> None:
    """A text beyond 32,767 characters is cut with a mark and not dropped."""
    view = replace(workbook_view(), recommendation="long " * 10_000)
    texts = [value for value in cells(written(view, tmp_path)).values() if isinstance(value, str)]
    assert [text.endswith("[…]") for text in texts if text.startswith("long ")] == [True]


def test_workbook_bytes__bids_stand_in_their_own_units(path: Path) -> None:
    """A loss stated in watts is a real number in watts, with its place."""
    rows = {tuple(cell.value for cell in row) for row in openpyxl.load_workbook(path)["Bids"].iter_rows(min_row=5)}
    assert ("1", HOSTILE[1], "No-load loss P0", 350, "W", "bids/bids.csv:3[P0]", "ranked") in rows
    assert ("1", "Birchlune", "Load loss Pk", "not stated", None, "bids/bids.csv:6[Pk]", "not evaluated") in rows


def test_workbook_bytes__ties_share_a_rank(path: Path) -> None:
    """Two equal totals are both first, the next is third, and neither of the two has a margin."""
    shown = cells(path)
    assert [shown["Ranking", f"A{row}"] for row in (6, 7, 8)] == [1, 1, 3]
    assert [shown["Ranking", f"J{row}"] for row in (6, 7, 8)] == [0, 0, "–"]


def test_workbook_bytes__offers_not_ranked_stand_apart(path: Path) -> None:
    """They are listed below the ranked ones, with status and reason, and have no rank."""
    shown = cells(path)
    assert [shown["Ranking", f"C{row}"] for row in (10, 11)] == ["non-responsive", "not evaluated"]
    assert "load loss" in shown["Ranking", "E10"]
    assert [shown["Ranking", f"A{row}"] for row in (10, 11)] == ["–", "–"]


def test_workbook_bytes__rank_and_margin_are_the_views(path: Path) -> None:
    """What the ranking shows is what page and JSON show."""
    shown, view = cells(path), workbook_view()
    row = next(
        int(cell[1:])
        for (sheet, cell), v in shown.items()
        if (sheet, v) == ("Ranking", "Lot 2 · 20/31.5 MVA · 10 units")
    )
    for position, ranked in enumerate(view.lots[1].offers, start=row + 1):
        assert ranked.bidder == shown["Ranking", f"B{position}"]
        assert ranked.rank == shown["Ranking", f"A{position}"]
        assert ranked.lot.total_owning_cost is not None
        total = view.figures[ranked.lot.total_owning_cost].value
        assert total == Decimal(str(shown["Ranking", f"G{position}"]))
        if ranked.margin is not None:
            assert view.figures[ranked.margin.amount].value == Decimal(str(shown["Ranking", f"J{position}"]))
            assert float(ranked.margin.percent_of_winner) == shown["Ranking", f"K{position}"]
            assert float(ranked.margin.no_load_loss_kw or 0) == pytest.approx(
                shown["Ranking", f"L{position}"], rel=1e-5
            )


def test_workbook_bytes__period_cannot_exceed_the_table(path: Path) -> None:
    """The cell of the evaluation period takes whole numbers up to the rows of the year table."""
    (rule,) = openpyxl.load_workbook(path)["Inputs"].data_validations.dataValidation
    assert (rule.type, rule.formula1, rule.formula2) == ("whole", "1", "30")


def test_workbook_bytes__same_value_at_the_same_place_is_one_input(tmp_path: Path) -> None:
    """Two lots derived from the same economics have one energy price to change; the second follows the first."""
    lots = (make.lot("1", derivation=make.derivation()), make.lot("2", derivation=make.derivation()))
    made = written(view_of(make.tender(*lots), (make.offer(), make.offer(lot="2"))), tmp_path)
    shown, found = cells(made), formulas(made)
    rows = [cell[1:] for (sheet, cell), value in shown.items() if (sheet, value) == ("Inputs", "Energy price")]
    assert [None, f"\0=B{rows[0]}"] == [found.get(("Inputs", f"B{row}")) for row in rows]


def test_workbook_bytes__set_up_for_print_and_screen(path: Path) -> None:
    """Landscape A4, one page wide, heading rows frozen and repeated, reference and page number below."""
    for sheet in openpyxl.load_workbook(path):
        assert (sheet.page_setup.orientation, int(sheet.page_setup.paperSize)) == ("landscape", 9), sheet.title
        assert (sheet.sheet_properties.pageSetUpPr.fitToPage, sheet.page_setup.fitToHeight) == (True, 0), sheet.title
        top = re.fullmatch(r"A(\d+)", sheet.freeze_panes or "")
        assert top is not None, sheet.title
        assert f"$1:${int(top[1]) - 1}" == sheet.print_title_rows, sheet.title
        assert "T-1" in sheet.oddFooter.left.text, sheet.title
        assert sheet.oddFooter.right.text == "Page &P of &N", sheet.title
        assert sheet.print_area, sheet.title


def test_workbook_bytes__ampersand_in_the_footer(tmp_path: Path) -> None:
    """A reference with an ampersand does not become a code of the footer."""
    sheet = openpyxl.load_workbook(written(replace(workbook_view(), reference="A&B 1"), tmp_path))["Summary"]
    assert "A&&B 1" in sheet.oddFooter.left.text


def test_workbook_bytes__one_picture_for_each_ranked_lot(tmp_path: Path) -> None:
    """Three stacked parts where no auxiliary loss is valued, four where it is; none for a lot without ranking."""
    view = view_of(
        workbook_tender(), (offer("Alder", "2", 2, ("1", "1", "1"), auxiliary_loss_kw=make.quantity("1", "kW")),)
    )
    members = zipfile.ZipFile(io.BytesIO(workbook_bytes(workbook_view())))
    charts = [members.read(f"xl/charts/chart{n}.xml").decode() for n in (1, 2)]
    assert [chart.count("<c:ser>") for chart in charts] == [3, 4]
    assert sum("charts/chart" in name for name in zipfile.ZipFile(written(view, tmp_path)).namelist()) == 1


def test_workbook_bytes__findings_in_full(tmp_path: Path) -> None:
    """Effect, place, statement and remedy of every finding."""
    finding = Finding("value-missing", "load loss", "must be stated", None, "", "Alder", "1", "ask the bidder")
    view = view_of(make.tender(), (make.offer(load_loss_kw=None),), (finding,))
    values = {value for (sheet, _), value in cells(written(view, tmp_path)).items() if sheet == "Findings"}
    assert {"ask the bidder", *(found.statement for found in view.findings)} <= values


def test_workbook_bytes__no_offer_at_all(tmp_path: Path) -> None:
    """A tender without bids makes a workbook that says so."""
    shown = cells(written(view_of(make.tender(), ()), tmp_path))
    assert "no offer is ranked" in shown.values()
    assert "No offer is ranked." in shown.values()


def test_workbook_bytes__record_of_the_inputs(path: Path) -> None:
    """Hashes, version and time stand on the sheet of the record."""
    values = {value for (sheet, _), value in cells(path).items() if sheet == "Record"}
    assert {"ab" * 32, "bids/bids.csv", "lossworth 0.1.0", "2026-09-15T10:00:00+00:00"} <= values
