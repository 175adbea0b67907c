"""Sheets of the bid form on the bid as a whole: its labels and answers, and what is asked of each lot."""

from __future__ import annotations

from dataclasses import dataclass

from .bid_form_sheet import FormBook, FormSheet
from .bid_form_view import FormField

__all__ = ["BID", "LOTS", "CoverCells", "write_cover", "write_lots"]

BID = "Bid"
LOTS = "Lots"
_FILL = (
    "Fill in the framed cells of this sheet, and in the price schedule the row of each lot that is offered; a lot that "
    "is not offered stays blank. Shaded cells are needed, white ones may stay blank, all others are locked. The sheet "
    "Self-check says what is missing. Give figures as numbers without units, and days as 2026-12-31."
)
_SIGNATURE_HEIGHT = 44


@dataclass(frozen=True, slots=True)
class CoverCells:
    """Where the answers on the whole bid stand.

    Parameters
    ----------
    needed, declarations, shares : tuple of str
        References from other sheets: answers that must be there, declarations, payments.
    """

    needed: tuple[str, ...]
    declarations: tuple[str, ...]
    shares: tuple[str, ...]


def write_cover(book: FormBook) -> CoverCells:
    """Write the sheet of the bid: a label, and beside it the answer and nothing else.

    Parameters
    ----------
    book : FormBook
        The workbook.

    Returns
    -------
    CoverCells
        Where the answers stand.

    Notes
    -----
    Whoever reads the form takes the first text beside a label for its value. Hints therefore stand above a group and
    in the message of a cell, never in a cell at its right.
    """
    view = book.view
    sheet = FormSheet(book, BID, "Bid form", (72, 62), _FILL)
    if view.opening_date:
        sheet.paragraph(f"Opening of the bids: {view.opening_date}", "note")
    sheet.paragraph(f"Rules of the evaluation, fingerprint (SHA-256): {view.fingerprint}", "note")
    needed: list[str] = []
    declarations: list[str] = []
    shares: list[str] = []
    for group in view.groups:
        sheet.row += 1
        sheet.height(sheet.row - 1, 8)
        sheet.paragraph(group.title, "band")
        if group.note:
            sheet.paragraph(group.note, "quiet paragraph")
        for field in group.fields:
            cell = f"{BID}!$B${sheet.row + 1}"
            _write_field(sheet, field)
            if group.title == "Declarations":
                declarations.append(cell)
            elif field.needed:
                needed.append(cell)
            if field.is_share:
                shares.append(cell)
    sheet.page.fit_to_pages(1, 1)
    sheet.page.activate()
    sheet.finish()
    return CoverCells(tuple(needed), tuple(declarations), tuple(shares))


def _write_field(sheet: FormSheet, field: FormField) -> None:
    row = sheet.row
    sheet.text(row, 0, field.label)
    numbers = {"number": "0.0##", "date": "yyyy-mm-dd"}.get(field.answer.kind, "@")
    if field.fixed:
        sheet.text(row, 1, field.fixed)
    else:
        use = "needed" if field.needed else "optional"
        sheet.answer(row, 1, field.answer, numbers, use, field.label, left=True)
    sheet.height(row, _SIGNATURE_HEIGHT if field.label.startswith("Signature") else 20)
    sheet.row += 1


def write_lots(book: FormBook) -> None:
    """Write the sheet of the lots: what is asked, how losses are valued, which limits hold.

    Parameters
    ----------
    book : FormBook
        The workbook.
    """
    headings = ("Lot", "Description", "Units asked", "Rated power", "Cooling asked", "Value of losses", "Limits")
    note = "What the tender asks. Nothing is filled in here."
    sheet = FormSheet(book, LOTS, "Lots of the tender", (7, 30, 9, 12, 14, 30, 52), note)
    first = sheet.row
    for column, heading in enumerate(headings):
        sheet.text(first, column, heading, "head number" if column == 2 else "head")
    sheet.row += 1
    sheet.page.freeze_panes(sheet.row, 0)
    sheet.page.repeat_rows(first)
    for lot in book.view.lots:
        texts = (lot.id, lot.description, "", lot.rated_power, lot.cooling, lot.valued, lot.limits)
        for column, text in enumerate(texts):
            sheet.text(sheet.row, column, text, "strong text" if column == 0 else "text")
        sheet.page.write_number(sheet.row, 2, float(lot.quantity), book.look.style("number", "#,##0"))
        sheet.row += 1
    sheet.finish()
