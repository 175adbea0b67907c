"""The bid form: a workbook that bidders fill in and that reads back without a word."""

from __future__ import annotations

import datetime
import io

import xlsxwriter

from .bid_form_check import CHECK, check_places, write_check
from .bid_form_cover import BID, LOTS, write_cover, write_lots
from .bid_form_particulars import LISTS, listed_choices, particulars_sheets, write_lists, write_particulars
from .bid_form_schedule import ALTERNATIVES, SCHEDULE, write_alternatives, write_schedule
from .bid_form_sheet import FormBook
from .bid_form_view import BidFormView
from .workbook_look import FONT, Look
from .workbook_sheet import safe_text

__all__ = ["bid_form_bytes"]


def bid_form_bytes(view: BidFormView, made: datetime.datetime, tool_version: str) -> bytes:
    """Blank bid form, ready to be written to a file.

    Parameters
    ----------
    view : BidFormView
        What is asked.
    made : datetime.datetime
        Time that the document carries.
    tool_version : str
        Which program writes it.

    Returns
    -------
    bytes
        An xlsx file; the same arguments give the same bytes.
    """
    memory = io.BytesIO()
    file = xlsxwriter.Workbook(memory, _options())
    file.set_properties(_properties(view, made, tool_version))
    book = FormBook(view, file, Look(file))
    for name in _sheets(book):
        file.add_worksheet(name)
    write_lists(book)
    cover = write_cover(book)
    write_lots(book)
    places = check_places(book)
    rows = write_schedule(book, places.lots)
    alternatives = write_alternatives(book, rows) if view.alternative_rows else ()
    write_particulars(book)
    write_check(book, places, cover, (*rows, *alternatives))
    file.close()
    return memory.getvalue()


def _sheets(book: FormBook) -> tuple[str, ...]:
    alternatives = (ALTERNATIVES,) if book.view.alternative_rows else ()
    particulars = tuple(name for name, _ in particulars_sheets(book))
    lists = (LISTS,) if listed_choices(book) else ()
    return (BID, LOTS, SCHEDULE, *alternatives, *particulars, CHECK, *lists)


def _options() -> dict[str, object]:
    """Text never becomes a formula, a link or a number; made anew, as XlsxWriter changes it."""
    return {
        "in_memory": True,
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
        "default_format_properties": {"font_name": FONT, "font_size": 10},
    }


def _properties(view: BidFormView, made: datetime.datetime, tool_version: str) -> dict[str, object]:
    if made.tzinfo is not None:
        made = made.astimezone(datetime.UTC).replace(tzinfo=None)
    return {
        "title": safe_text(f"{view.reference}: bid form"),
        "subject": safe_text(view.title),
        "author": f"lossworth {tool_version}",
        "created": made,
    }
