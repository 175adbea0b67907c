"""The bid form as a workbook: what the reader finds in it, what can be typed where, and what stays text."""

from __future__ import annotations

import re
from collections.abc import Iterator
from io import BytesIO
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from lossworth.findings import Finding
from lossworth.intake.bid_files import read_bids
from lossworth.intake.bid_workbook import read_workbook
from lossworth.intake.sheet import MOST_COLUMNS
from lossworth.intake.table_header import is_header, recognized_columns
from lossworth.intake.tender_folder import InputFile
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from lossworth.report.build_form import build_form
from support import records as make
from support.bid_forms import answers, filled, form_bytes, form_of, headings, schedule_rows
from support.rules_tenders import full_lot, full_tender, ruled

HOSTILE = ('=HYPERLINK("http://invalid","x")', "+1+1", "-2", "@SUM(A1)", "<script>alert(1)</script>", "a\x00b\x1b")
ROW = {
    "Unit price [NCU]": 4000,
    "Total price [NCU]": 40000,
    "No-load loss [kW]": 0.12,
    "Load loss [kW]": 1.2,
    "Total loss [kW]": 1.32,
}


def book_of(tender: Tender) -> Any:
    """Form as openpyxl opens it."""
    return openpyxl.load_workbook(BytesIO(form_of(tender)))


def read_back(content: bytes, tender: Tender, folder: Path) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """What intake makes of a form."""
    path = folder / "form.xlsx"
    path.write_bytes(content)
    return read_bids([InputFile(path, "bids/form.xlsx")], tender)


def told(findings: tuple[Finding, ...]) -> list[tuple[str, str]]:
    """Kinds and fields, but for headings that the reader does not know yet."""
    return [
        (finding.kind, finding.field)
        for finding in findings
        if finding.kind != "column-not-read" or recognized_columns([finding.got or ""])
    ]


def validations(page: Any) -> dict[str, Any]:
    """Rule of each cell that has one."""
    return {
        cell: rule
        for rule in page.data_validations.dataValidation
        for area in str(rule.sqref).split()
        for cell in [area]
    }


def open_cells(page: Any) -> Iterator[Any]:
    """Cells in which somebody may type."""
    return (cell for row in page.iter_rows() for cell in row if not cell.protection.locked)


def test_bid_form_bytes__identical_for_the_same_view() -> None:
    """The clock does not enter."""
    view = build_form(full_tender())
    assert form_bytes(view) == form_bytes(view)


@pytest.mark.parametrize("tender", [make.tender(), full_tender()], ids=["plain", "full"])
def test_form__one_table_of_offers_and_no_other(tender: Tender) -> None:
    """Only the price schedule and the alternatives have a header, and each heading means what the form asks."""
    book = read_workbook(form_of(tender), "form.xlsx")
    assert not isinstance(book, Finding)
    headers = {sheet.name: [row for row in sheet.rows if is_header(row)] for sheet in book.sheets}
    found = {name: len(rows) for name, rows in headers.items() if rows}
    assert found == {"Price schedule": 1} | ({"Alternatives": 1} if "Alternatives" in headers else {})
    (header,) = headers["Price schedule"]
    texts = [cell.text for cell in header.cells if not cell.is_blank]
    assert ["Lot", *(column.heading for column in build_form(tender).columns)] == texts


def test_form__filled_reads_back_without_a_word(tmp_path: Path) -> None:
    """Labels, figures and a lot that is left blank: one offer, nothing to say."""
    tender = make.tender(make.lot(), make.lot("2"))
    form = form_of(tender)
    content = filled(form, answers("Alder", None, form), {"1": ROW | {"Remarks": "none", "Cooling": "ONAN"}})
    (offer,), findings = read_back(content, tender, tmp_path)
    assert told(findings) == []
    assert (
        offer.bidder.value,
        offer.lot.value,
        str(offer.currency),
        str(offer.remark),
    ) == ("Alder", "1", "NCU", "none")
    stated = (offer.unit_price, offer.no_load_loss_kw, offer.load_loss_kw, offer.total_loss_kw)
    assert [str(each.value) for each in stated if each is not None] == ["4000", "0.12", "1.2", "1.32"]


def test_form__blank_is_no_offer(tmp_path: Path) -> None:
    """A form that nobody filled in offers nothing and is told once."""
    offers, findings = read_back(form_of(full_tender()), full_tender(), tmp_path)
    assert (offers, told(findings)) == ((), [("no-offers", "bids")])


def test_form__a_row_with_words_alone_is_told(tmp_path: Path) -> None:
    """A lot that is not offered says nothing; one that is answered in words, and without a figure, does."""
    tender = make.tender(make.lot(), make.lot("2"))
    form = form_of(tender)
    content = filled(form, answers("Alder", None, form), {"1": ROW, "2": {"Remarks": "on request"}})
    offers, findings = read_back(content, tender, tmp_path)
    assert (len(offers), told(findings)) == (1, [("row-not-read", "row")])


def test_form__blank_labels_take_no_hint_for_an_answer(tmp_path: Path) -> None:
    """Whoever forgets name and currency is told so; no text of the form stands in for them."""
    tender = make.tender(exchange=make.exchange(FCU="1.25"))
    row = {heading.removesuffix(" [NCU]"): value for heading, value in ROW.items()}
    offers, findings = read_back(filled(form_of(tender), {}, {"1": row}), tender, tmp_path)
    assert offers == ()
    assert told(findings) == [("bidder-missing", "bidder"), ("value-missing", "currency")]


def test_form__numbers_as_text_renamed_sheets_and_new_rows_are_read(tmp_path: Path) -> None:
    """What people do to forms: the values are found, or a finding says where they are not."""
    tender = make.tender(make.lot(), make.lot("2"))
    form = form_of(tender)
    book = openpyxl.load_workbook(
        BytesIO(filled(form, answers("Alder", None, form), {"1": ROW, "2": ROW | {"Load loss [kW]": "1,2 kW"}}))
    )
    page = book["Price schedule"]
    top, columns = headings(page)
    page.cell(schedule_rows(page)["1"], columns["No-load loss [kW]"]).value = "0.12"
    page.insert_rows(top)
    page.title = "Prices"
    book["Bid"].title = "Cover"
    stream = BytesIO()
    book.save(stream)
    offers, findings = read_back(stream.getvalue(), tender, tmp_path)
    assert [str(offer.no_load_loss_kw.value) for offer in offers if offer.no_load_loss_kw] == ["0.12", "0.12"]
    assert told(findings) == [("value-unreadable", "load loss")]


def test_form__everything_else_is_locked_without_a_password() -> None:
    """Each sheet is protected; open are the answers, and only those."""
    tender = full_tender()
    book, view = book_of(tender), build_form(tender)
    for page in book.worksheets:
        assert page.protection.sheet, page.title
        assert page.protection.password is None
    opened = {page.title: sum(1 for _ in open_cells(page)) for page in book.worksheets}
    asked = sum(len(lot.cells) for lot in view.lots)
    assert asked == opened["Price schedule"]
    assert sum(not field.fixed for group in view.groups for field in group.fields) == opened["Bid"]
    assert (opened["Lots"], opened["Self-check"], opened["Lists"]) == (0, 0, 0)
    assert all(cell.value is None for page in book.worksheets for cell in open_cells(page))


def test_form__limits_warn_and_senseless_values_stop() -> None:
    """Beyond a limit one may go on, below zero or outside a list not; messages say why."""
    tender = full_tender(full_lot())
    page = book_of(tender)["Price schedule"]
    rules, (_, columns) = validations(page), headings(page)
    row = schedule_rows(page)["1"]

    def rule(heading: str) -> Any:
        return rules[page.cell(row, columns[heading]).coordinate]

    loss = rule("No-load loss [kW]")
    assert (loss.type, loss.operator or "between", loss.errorStyle) == ("decimal", "between", "warning")
    assert (float(loss.formula1), float(loss.formula2)) == (1e-9, 0.13)
    assert "non-responsive" in loss.error
    price = rule("Unit price")
    assert (price.type, price.operator, price.formula1) == ("decimal", "greaterThan", "0")
    assert price.errorStyle in (None, "stop")
    assert rule("PCB free").formula1 == '"yes,no"'
    assert rule("Insulating liquid").formula1.startswith("Lists!$")


def test_form__choices_of_the_bid() -> None:
    """Currencies, price terms, yes and no are lists; the last day is a date after the planned award."""
    page = book_of(full_tender())["Bid"]
    rules = validations(page)
    by_label = {row[0].value: rules.get(row[1].coordinate) for row in page.iter_rows(max_col=2) if row[0].value}
    assert by_label["Currency"].formula1 == '"NCU,FCU"'
    assert by_label["Price terms"].formula1 == '"EXW,FCA,DDP"'
    assert by_label["Tax included"].formula1 == '"yes,no"'
    valid = by_label["Valid until"]
    assert (valid.type, valid.operator) == ("date", "greaterThanOrEqual")
    assert "2026-11-30" in valid.prompt


def test_form__texts_of_the_tender_stay_text() -> None:
    """Nothing that a tender says becomes a formula, also not as a choice."""
    lots = [
        full_lot(id=str(number), description=make.entry(text), cooling=make.entry(text), accepted_liquids=(text, "b"))
        for number, text in enumerate(HOSTILE, start=1)
    ]
    lots.append(full_lot(id="=1+1"))
    tender = full_tender(*lots, rules=ruled(alternatives="as offers of their own"))
    book = book_of(tender)
    texts = {cell.value for row in book["Price schedule"].iter_rows() for cell in row if cell.data_type == "s"}
    assert {"=1+1", *HOSTILE[:5]} <= texts
    formulas = [
        cell.value for page in book.worksheets for row in page.iter_rows() for cell in row if cell.data_type == "f"
    ]
    assert [text for text in formulas if "HYPERLINK" in str(text) or "SUM(A1)" in str(text)] == []
    assert {"Price schedule", "Self-check"} == {
        page.title for page in book.worksheets for row in page.iter_rows() for cell in row if cell.data_type == "f"
    }


def test_form__many_lots_stay_within_the_bounds_of_the_reader(tmp_path: Path) -> None:
    """Thirty lots fill several sheets of particulars, none wider than a bid may be, and read back."""
    tender = make.tender(*(make.lot(str(number)) for number in range(1, 31)))
    form = form_of(tender)
    book = openpyxl.load_workbook(BytesIO(form))
    assert [name for name in book.sheetnames if name.startswith("Particulars")] == [
        f"Particulars {number}" for number in range(1, 6)
    ]
    assert max(page.max_column for page in book.worksheets) < MOST_COLUMNS
    lots = {str(number): ROW for number in (1, 17, 30)}
    offers, findings = read_back(filled(form, answers("Alder", None, form), lots), tender, tmp_path)
    assert ([offer.lot.value for offer in offers], told(findings)) == (["1", "17", "30"], [])


def test_form__prints_on_a4_across_with_headings_and_footers() -> None:
    """Paper, direction, repeated headings, page numbers, and lots at the left of every page."""
    for page in book_of(full_tender()).worksheets:
        assert (page.page_setup.orientation, int(page.page_setup.paperSize)) == ("landscape", 9), page.title
        assert "&P" in page.oddFooter.right.text
        assert page.print_area
    schedule = book_of(full_tender())["Price schedule"]
    top, _ = headings(schedule)
    assert f"${top - 1}:${top}" == schedule.print_title_rows
    assert schedule.print_title_cols == "$A:$D"
    assert len(schedule.col_breaks.brk) >= 1


@pytest.mark.parametrize("remark", [None, "INVENTED DATA"])
def test_form__results_stand_where_the_schedule_looks_for_them(remark: str | None) -> None:
    """The self-check is where the price schedule refers to, with a remark in the head and without."""
    tender = make.tender()
    identity = tender.identity.model_copy(update={"remark": remark and make.entry(remark)})
    book = book_of(tender.model_copy(update={"identity": identity}))
    page = book["Price schedule"]
    formula = page.cell(schedule_rows(page)["1"], 4).value
    cell = formula.removeprefix("='Self-check'!").replace("$", "")
    row = book["Self-check"][cell].row
    assert (book["Self-check"].cell(row, 1).value, "COUNTA" in book["Self-check"][cell].value) == ("1", True)


def test_form__formulas_are_those_of_every_spreadsheet_program() -> None:
    """The self-check uses nothing that an older program would not know."""
    tender = full_tender(full_lot(minimum_peak_efficiency_index_percent=make.quantity("99")), make.lot("2"))
    tender = tender.model_copy(update={"rules": ruled(alternatives="as offers of their own")})
    formulas = [
        cell.value
        for page in book_of(tender).worksheets
        for row in page.iter_rows()
        for cell in row
        if cell.data_type == "f"
    ]
    used = set(re.findall(r"([A-Z][A-Z0-9.]+)\(", " ".join(formulas)))
    assert used == {"ABS", "AND", "COUNT", "COUNTA", "COUNTIF", "IF", "ROUND", "SQRT", "SUM"}
    assert max(map(len, formulas)) < 8192  # the longest that a cell can hold


def test_form__without_choices_of_its_own_has_no_lists() -> None:
    """The sheet of lists is there only where a choice needs it."""
    assert "Lists" not in book_of(make.tender()).sheetnames
    assert "Lists" in book_of(full_tender()).sheetnames
