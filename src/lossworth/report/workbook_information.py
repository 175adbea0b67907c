"""Sheet beside the money: assumptions that bind nobody yet, and information that is no part of any amount."""

from __future__ import annotations

from .view import EvaluationView, LotView
from .workbook_sheet import Book, Column, Sheet, capital

__all__ = ["INFORMATION", "assuming", "has_information", "write_information"]

INFORMATION = "Information"

_COLUMNS = (
    Column("Lot", 7),
    Column("Bidder", 34),
    Column("What", 48),
    Column("Value", 18, numeric=True),
    Column("Unit", 12),
    Column("Status of the offer", 18),
)
_NOTE = (
    "Assumptions behind converted losses, and information that is no part of any amount and has no effect on the rank. "
    "Values, as evaluated: they do not follow changed inputs."
)
_BINDS = "A conversion made on an assumption binds nobody until the bidder confirms it."


def has_information(view: EvaluationView) -> bool:
    """Whether an offer has an assumption, or information beside the money.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    bool
        False for a view without either, which gets no such sheet.
    """
    return any(offer.assumptions or offer.information for lot in view.lots for offer in lot.offers)


def assuming(lot: LotView) -> str:
    """Which offers of a lot rest on assumptions, in a sentence.

    Parameters
    ----------
    lot : LotView
        The lot.

    Returns
    -------
    str
        Empty where none does.
    """
    names = [offer.bidder for offer in lot.offers if offer.assumptions]
    return f"Assumption, sheet {INFORMATION}: {', '.join(names)}. {_BINDS}" if names else ""


def write_information(book: Book) -> None:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook.
    """
    sheet = Sheet(book, INFORMATION, "Assumptions, and information beside the money", _COLUMNS, _NOTE)
    for lot in book.view.lots:
        if not any(offer.assumptions or offer.information for offer in lot.offers):
            continue
        sheet.paragraph(f"Lot {lot.id} · {lot.description}", "band")
        _assumptions(sheet, lot)
        _facts(sheet, lot)
    sheet.finish()


def _assumptions(sheet: Sheet, lot: LotView) -> None:
    assumed = [offer for offer in lot.offers if offer.assumptions]
    if not assumed:
        return
    sheet.paragraph(f"Assumptions. {_BINDS}", "part")
    for offer in assumed:
        for assumption in offer.assumptions:
            sheet.text(sheet.row, 0, lot.id)
            sheet.text(sheet.row, 1, offer.bidder, "strong text")
            sheet.spread(sheet.row, f"assumption: {assumption}", "text", 2, sheet.last)
            sheet.row += 1


def _facts(sheet: Sheet, lot: LotView) -> None:
    informed = [offer for offer in lot.offers if offer.information]
    if not informed:
        return
    sheet.paragraph("Beside the money", "part")
    for offer in informed:
        for position, fact in enumerate(offer.information):
            named = "strong text" if position == 0 else "quiet text"
            sheet.text(sheet.row, 0, lot.id, named)
            sheet.text(sheet.row, 1, offer.bidder, named)
            sheet.text(sheet.row, 2, capital(fact.label))
            sheet.number(sheet.row, 3, fact.value)
            sheet.text(sheet.row, 4, "" if fact.unit == "1" else fact.unit, "quiet text")
            sheet.text(sheet.row, 5, offer.status, "quiet text")
            sheet.row += 1
