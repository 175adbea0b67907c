"""Sheets of the findings, of the record, and of the comparison between the recalculated workbook and the program."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal

from .view import LotView
from .workbook_evaluation import LotCells
from .workbook_sheet import Book, Column, Sheet

__all__ = ["COMPARISON", "FINDINGS", "RECORD", "write_comparison", "write_findings", "write_record"]

FINDINGS = "Findings"
COMPARISON = "Comparison"
RECORD = "Record"
AGREE = "all totals and ranks in this workbook are those that the program computed"


def write_findings(book: Book) -> None:
    """Write the sheet of the findings.

    Parameters
    ----------
    book : Book
        The workbook.
    """
    columns = (
        Column("Effect", 16),
        Column("Finding", 24),
        Column("Lot", 7),
        Column("Bidder", 24),
        Column("Where", 30),
        Column("What was found", 50),
        Column("What to do", 42),
    )
    sheet = Sheet(book, FINDINGS, "Findings", columns, "What the checks found in tender and bids, weightiest first.")
    for finding in book.view.findings:
        cells = (
            "waived" if finding.waiver else finding.effect,
            finding.title,
            finding.lot,
            finding.bidder,
            finding.place,
            finding.statement,
            "" if finding.waiver else finding.remedy,
        )
        for column, text in enumerate(cells):
            sheet.text(sheet.row, column, text, "strong text" if column == 0 else "text")
        sheet.row += 1
    if not book.view.findings:
        sheet.paragraph("No findings.")
    sheet.finish()


def write_record(book: Book) -> None:
    """Write the sheet of the record: versions, time, method, fingerprints of the inputs.

    Parameters
    ----------
    book : Book
        The workbook.
    """
    view = book.view
    sheet = Sheet(book, RECORD, "Record", (Column("Record", 44), Column("", 112)), "What makes the run repeatable.")
    for label, text in (
        ("Program", f"lossworth {view.record.tool_version}"),
        ("Time of the run", view.record.generated_at),
        ("Opening of the bids", view.opening_date or "–"),
        ("Evaluation currency", view.currency),
    ):
        sheet.text(sheet.row, 0, label)
        sheet.text(sheet.row, 1, text)
        sheet.row += 1
    sheet.row += 1
    sheet.paragraph("Inputs and their SHA-256", "band")
    for file in view.record.inputs:
        sheet.text(sheet.row, 0, file.path)
        sheet.text(sheet.row, 1, file.sha256)
        sheet.row += 1
    sheet.row += 1
    _rules_proof(book, sheet)
    sheet.paragraph("Method", "band")
    for text in view.method:
        sheet.paragraph(text)
    sheet.finish()


def _rules_proof(book: Book, sheet: Sheet) -> None:
    """Whether the rules used are the rules published, and where they differ."""
    proof = book.view.rules_proof
    if proof is None:
        return
    sheet.paragraph("Rules used and rules published", "band")
    sheet.paragraph(proof.sentence, "paragraph" if proof.holds else "assumption")
    if proof.fingerprint and not proof.holds:
        sheet.text(sheet.row, 0, "SHA-256 of the rules used")
        sheet.text(sheet.row, 1, proof.fingerprint)
        sheet.row += 1
    for difference in proof.differences:
        sheet.text(sheet.row, 0, difference.key)
        published, used = difference.published or "not stated", difference.used or "not stated"
        sheet.text(sheet.row, 1, f"published: {published}; used: {used}")
        sheet.row += 1
    sheet.row += 1


def write_comparison(book: Book, cells: Mapping[str, LotCells]) -> str:
    """Write the sheet that sets the totals of this workbook beside those of the program.

    Parameters
    ----------
    book : Book
        The workbook.
    cells : mapping of str to LotCells
        Where the ranked offers stand on the sheet of the evaluation.

    Returns
    -------
    str
        Reference to the cell that says in words whether they agree.
    """
    currency = book.view.currency
    columns = (
        Column("Lot", 8),
        Column("Bidder", 34),
        Column(f"Total owning cost of the lot,\nthis workbook [{currency}]", 26, numeric=True),
        Column(f"The same,\nthe program [{currency}]", 22, numeric=True),
        Column(f"Difference\n[{currency}]", 16, numeric=True),
        Column("Rank,\nthis workbook", 14, numeric=True),
        Column("Rank,\nthe program", 14, numeric=True),
    )
    note = "After a recalculation with unchanged inputs every difference is zero; it shows what a changed input does."
    sheet = Sheet(book, COMPARISON, "Workbook and program", columns, note)
    verdict, first = sheet.row, sheet.row + 2
    sheet.row = first
    for lot in book.view.lots:
        _compare(book, sheet, lot, cells[lot.id])
    last = sheet.row
    if last == first:
        sheet.text(verdict, 0, "no offer is ranked", "paragraph")
    else:
        differ = f"SUMPRODUCT(--(((E{first + 1}:E{last}<>0)+(F{first + 1}:F{last}<>G{first + 1}:G{last}))>0))"
        text = f'=IF({differ}=0,"{AGREE}",{differ}&" totals or ranks differ from those that the program computed")'
        sheet.formula(verdict, 0, text, AGREE, "verdict")
    sheet.finish()
    return f"{COMPARISON}!$A${verdict + 1}"


def _compare(book: Book, sheet: Sheet, lot: LotView, cells: LotCells) -> None:
    for position, offer in enumerate(offer for offer in lot.offers if offer.status == "ranked"):
        if offer.lot.total_owning_cost is None:
            continue
        row, figure = sheet.row, book.figure(offer.lot.total_owning_cost)
        rank = f"{cells.rank.partition(':')[0].rpartition('$')[0]}${cells.lot_row + position + 1}"
        sheet.text(row, 0, lot.id)
        sheet.text(row, 1, offer.bidder)
        sheet.figure(row, 2, figure.id, "number", cells.decimals)
        sheet.number(row, 3, figure.value, "number", cells.decimals)
        sheet.formula(row, 4, f"=ROUND(C{row + 1}-D{row + 1},{cells.decimals})", Decimal(0), "total", cells.decimals)
        sheet.formula(row, 5, f"={rank}", float(offer.rank or 0))
        sheet.number(row, 6, Decimal(offer.rank or 0))
        sheet.row += 1
