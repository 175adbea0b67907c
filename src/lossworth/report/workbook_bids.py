"""Sheet of the bids as read: every particular of every offer, in its own unit, with the place where it stood."""

from __future__ import annotations

from .view import LotView, OfferView, Particular
from .workbook_cells import behind
from .workbook_sheet import Book, Column, Sheet, capital

__all__ = ["BIDS", "write_bids"]

BIDS = "Bids"

_COLUMNS = (
    Column("Lot", 7),
    Column("Bidder", 30),
    Column("Particular", 24),
    Column("As read", 18, numeric=True),
    Column("Unit", 10),
    Column("Where it stood", 52),
    Column("Status of the offer", 18),
)
_NOTE = "What the bidders stated, in the units in which they stated it; nothing is corrected or converted here."


def write_bids(book: Book) -> None:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook; the bidders' figures get their cells.
    """
    sheet = Sheet(book, BIDS, "Bids as read", _COLUMNS, _NOTE)
    heading = sheet.row - 1
    for lot in book.view.lots:
        for offer in lot.offers:
            for position, particular in enumerate(offer.particulars):
                _particular(book, sheet, lot, offer, particular, first=position == 0)
    if sheet.row > heading + 1:
        sheet.page.autofilter(heading, 0, sheet.row - 1, sheet.last)
    sheet.finish()


def _particular(
    book: Book, sheet: Sheet, lot: LotView, offer: OfferView, particular: Particular, *, first: bool
) -> None:
    row, named = sheet.row, "strong text" if first else "quiet text"
    sheet.text(row, 0, lot.id, named)
    sheet.text(row, 1, offer.bidder, named)
    sheet.text(row, 2, capital(particular.name))
    _as_read(book, sheet, particular)
    sheet.text(row, 5, particular.place, "quiet text")
    sheet.text(row, 6, offer.status, named)
    sheet.row += 1


def _as_read(book: Book, sheet: Sheet, particular: Particular) -> None:
    """The value: the figure that the costs rest on, else the number, else the words."""
    figure = _figure_as_read(book, particular)
    if figure is not None and figure not in book.addresses:
        sheet.figure(sheet.row, 3, figure, "input")
    elif figure is not None:
        sheet.figure(sheet.row, 3, figure)
    elif particular.value is not None:
        sheet.number(sheet.row, 3, particular.value)
    else:
        style = "text" if particular.text else "quiet text"
        sheet.spread(sheet.row, particular.text or "not stated", style, 3, 4)
        return
    sheet.text(sheet.row, 4, "" if particular.unit == "1" else particular.unit, "quiet text")


def _figure_as_read(book: Book, particular: Particular) -> str | None:
    """The leaf that stood in the bidder's cell; the figure in the costs may be a conversion of it."""
    if particular.figure is None:
        return None
    leaves = (figure for figure in behind(particular.figure, book.view.figures) if not figure.operands)
    return next((leaf.id for leaf in leaves if leaf.operator == "read" and leaf.source == particular.place), None)
