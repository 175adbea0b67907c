"""Further particulars, which inform and are not evaluated, and the lists behind the choices."""

from __future__ import annotations

from collections.abc import Iterator

from .bid_form_sheet import FormBook, FormSheet, literal_choices
from .bid_form_view import Answer, FormLot
from .workbook_cells import column_name

__all__ = ["LISTS", "listed_choices", "particulars_sheets", "write_lists", "write_particulars"]

LISTS = "Lists"
_LOTS_A_SHEET = 6
_NOTE = (
    "For information only: NOT evaluated. Nothing on this sheet changes the ranking; guaranteed values stand in the "
    "price schedule. One column for each lot that is offered."
)


def particulars_sheets(book: FormBook) -> tuple[tuple[str, tuple[FormLot, ...]], ...]:
    """Sheets of the further particulars, each with its lots: as many as fit side by side.

    Parameters
    ----------
    book : FormBook
        The workbook.

    Returns
    -------
    tuple of tuple
        Name of the sheet, and its lots.
    """
    lots = book.view.lots
    parts = [lots[first : first + _LOTS_A_SHEET] for first in range(0, len(lots), _LOTS_A_SHEET)]
    if len(parts) == 1:
        return (("Particulars", parts[0]),)
    return tuple((f"Particulars {number}", part) for number, part in enumerate(parts, start=1))


def write_particulars(book: FormBook) -> None:
    """Write the sheets of the further particulars.

    Parameters
    ----------
    book : FormBook
        The workbook.
    """
    for name, lots in particulars_sheets(book):
        width = max(16.0, min(34.0, 96 / len(lots)))
        sheet = FormSheet(book, name, "Further particulars", (52, 9, *(width for _ in lots)), _NOTE)
        heads = sheet.row
        for column, text in enumerate(("Particular", "Unit", *(f"Lot {lot.id}" for lot in lots))):
            sheet.text(heads, column, text, "head")
        sheet.row += 1
        sheet.page.freeze_panes(sheet.row, 2)
        sheet.page.repeat_rows(heads)
        for part in book.view.particulars:
            sheet.paragraph(part.title, "band", 1 + len(lots))
            for label, unit in part.rows:
                sheet.text(sheet.row, 0, label)
                sheet.text(sheet.row, 1, unit, "quiet text")
                for column in range(2, 2 + len(lots)):
                    sheet.answer(sheet.row, column, Answer(), "@", "optional", label)
                sheet.height(sheet.row, 18)
                sheet.row += 1
        sheet.page.fit_to_pages(1, 1)
        sheet.finish()


def listed_choices(book: FormBook) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Choices that need cells of their own, as they hold the tender's own words.

    Parameters
    ----------
    book : FormBook
        The workbook.

    Returns
    -------
    tuple of tuple
        What is chosen, and the choices; each set once.
    """
    found: dict[tuple[str, ...], str] = {}
    for title, choices in _choices(book):
        if choices and not literal_choices(choices):
            found.setdefault(choices, title)
    return tuple((title, choices) for choices, title in found.items())


def _choices(book: FormBook) -> Iterator[tuple[str, tuple[str, ...]]]:
    if book.view.alternative_rows:
        yield "lots of the tender", tuple(lot.id for lot in book.view.lots)
    for group in book.view.groups:
        yield from ((f"{field.label}, choices", field.answer.choices) for field in group.fields)
    for lot in book.view.lots:
        for field, cell in lot.cells.items():
            yield f"{field.replace('_', ' ')}, lot {lot.id}", cell.answer.choices


def write_lists(book: FormBook) -> None:
    """Write the lists behind the choices, and note where each stands; called before the cells that use them.

    Parameters
    ----------
    book : FormBook
        The workbook.
    """
    lists = listed_choices(book)
    if not lists:
        return
    sheet = FormSheet(book, LISTS, "Lists", [30.0 for _ in lists], "Choices of the other sheets.")
    heads = sheet.row
    for column, (title, choices) in enumerate(lists):
        sheet.text(heads, column, f"Choices: {title}", "head")
        for row, choice in enumerate(choices, start=heads + 1):
            sheet.text(row, column, choice)
        letter, last = column_name(column), heads + 1 + len(choices)
        book.lists[choices] = f"={LISTS}!${letter}${heads + 2}:${letter}${last}"
        sheet.row = max(sheet.row, last)
    sheet.finish()
