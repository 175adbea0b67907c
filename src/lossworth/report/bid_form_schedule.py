"""The price schedule of the bid form: one row for each lot, in the columns that the reader of bids knows."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import groupby

from .bid_form_sheet import FormBook, FormSheet
from .bid_form_view import Answer, FormCell, FormColumn, FormLot
from .workbook_cells import column_name

__all__ = ["ALTERNATIVES", "SCHEDULE", "OfferRow", "write_alternatives", "write_schedule"]

SCHEDULE = "Price schedule"
ALTERNATIVES = "Alternatives"
_NOTE = (
    "Guaranteed values of one unit at the principal tap. One row for each lot that is offered; the row of a lot that "
    "is not offered stays blank."
)
#: Width of A4 across at full size, less the margins, and the most that is put on it by a smaller scale. [digits]
_PAGE = 128
_WIDEST = 165
_LEAST_SCALE = 55
#: Least height of a row of answers. [pt]
_ROW = 30


@dataclass(frozen=True, slots=True)
class OfferRow:
    """One row of offers, for the self-check.

    Parameters
    ----------
    lot : FormLot or None
        Its lot; None for an alternative, whose lot the bidder names.
    id, name, quantity : str
        References to lot and name of the alternative (empty for a lot's own row), and an expression of the quantity.
    inputs : str
        Reference to all cells in which the bidder types figures.
    cells : mapping of str to str
        References by field.
    """

    lot: FormLot | None
    id: str
    name: str
    quantity: str
    inputs: str
    cells: Mapping[str, str]


@dataclass(frozen=True, slots=True)
class _Table:
    """A table with its printed columns at the left, and the columns of answers."""

    sheet: FormSheet
    columns: Sequence[FormColumn]
    first_answer: int
    top: int

    def reference(self, row: int, column: int) -> str:
        return f"'{self.sheet.name}'!${column_name(column)}${row + 1}"

    def cells(self, row: int) -> dict[str, str]:
        return {each.field: self.reference(row, self.first_answer + number) for number, each in enumerate(self.columns)}

    def inputs(self, row: int) -> str:
        last = self.first_answer + len(self.columns) - 1
        return f"{self.reference(row, self.first_answer)}:${column_name(last)}${row + 1}"


def write_schedule(book: FormBook, results: Sequence[str]) -> tuple[OfferRow, ...]:
    """Write the price schedule.

    Parameters
    ----------
    book : FormBook
        The workbook.
    results : sequence of str
        References to the results of the self-check, one a lot.

    Returns
    -------
    tuple of OfferRow
        One a lot.

    Notes
    -----
    The reader finds its columns by the row of headings. What is printed and not read has its heading in the row above
    and a blank in that row, so that no reader takes it for an answer.
    """
    view = book.view
    printed = (("Description", 27), ("Units of the lot", 9), ("Self-check", 16))
    table = _table(book, SCHEDULE, "Price schedule", _NOTE, [], printed, view.columns)
    rows = []
    for lot, result in zip(view.lots, results, strict=True):
        rows.append(_write_lot(table, lot, result))
        table.sheet.row += 1
    area = (table.top + 2, 3, table.sheet.row - 1, 3)
    book.mark(table.sheet.page, area, "complete", ("not offered",))
    _finish(table)
    return tuple(rows)


def _write_lot(table: _Table, lot: FormLot, result: str) -> OfferRow:
    sheet, row = table.sheet, table.sheet.row
    sheet.text(row, 0, lot.id, "strong text")
    sheet.text(row, 1, lot.description)
    sheet.page.write_number(row, 2, float(lot.quantity), sheet.book.look.style("number", "#,##0"))
    sheet.formula(row, 3, f"={result}", "not offered", "strong text")
    for number, column in enumerate(table.columns, start=table.first_answer):
        _write_answer(sheet, row, number, column, lot.cells.get(column.field))
    sheet.height(row, _ROW)
    quantity = table.reference(row, 2)
    return OfferRow(lot, table.reference(row, 0), "", quantity, table.inputs(row), table.cells(row))


def _write_answer(sheet: FormSheet, row: int, number: int, column: FormColumn, cell: FormCell | None) -> None:
    if cell is None:
        sheet.close(row, number)
        return
    use = "needed" if cell.needed else "optional"
    sheet.answer(row, number, cell.answer, column.numbers, use, column.heading)


def write_alternatives(book: FormBook, lots: Sequence[OfferRow]) -> tuple[OfferRow, ...]:
    """Write the sheet of the alternatives, where the tender accepts them; nothing stands in its rows before.

    Parameters
    ----------
    book : FormBook
        The workbook.
    lots : sequence of OfferRow
        Rows of the price schedule, for the quantity of a lot.

    Returns
    -------
    tuple of OfferRow
        One a row.
    """
    view = book.view
    own = (
        FormColumn("lot", "Lot", "Offer", 9, "@"),
        FormColumn("alternative", "Alternative", "Offer", 24, "@"),
    )
    note = f"{view.alternatives_rule} Choose the lot, give the alternative a name, and fill in the row as for the lot."
    table = _table(book, ALTERNATIVES, "Alternatives", note, own, (), view.columns)
    rows = []
    for _ in range(view.alternative_rows):
        rows.append(_write_alternative(table, own, lots))
        table.sheet.row += 1
    _finish(table)
    return tuple(rows)


def _write_alternative(table: _Table, own: Sequence[FormColumn], lots: Sequence[OfferRow]) -> OfferRow:
    sheet, row = table.sheet, table.sheet.row
    ids = tuple(lot.id for lot in sheet.book.view.lots)
    answers = (Answer("choice", choices=ids), Answer(prompt="A short name, as amorphous core."))
    for number, (column, answer) in enumerate(zip(own, answers, strict=True)):
        sheet.answer(row, number, answer, column.numbers, "optional", column.heading)
    for number, column in enumerate(table.columns, start=table.first_answer):
        asked = (cell for lot in sheet.book.view.lots if (cell := lot.cells.get(column.field)))
        sheet.answer(row, number, _without_limits(next(asked).answer), column.numbers, "optional", column.heading)
    sheet.height(row, _ROW)
    lot = table.reference(row, 0)
    terms = (f'({each.id}&""={lot}&"")*{each.quantity}' for each in lots)
    quantity = f"({'+'.join(terms)})"
    return OfferRow(None, lot, table.reference(row, 1), quantity, table.inputs(row), table.cells(row))


def _without_limits(answer: Answer) -> Answer:
    """Of an answer that a limit of one lot bounds, only its kind: the lot of the row is not known yet."""
    if answer.kind != "number":
        return Answer() if answer.kind == "choice" and len(answer.choices) > 2 else answer
    return Answer("number", above_zero=answer.above_zero)


def _table(
    book: FormBook,
    name: str,
    title: str,
    note: str,
    own: Sequence[FormColumn],
    printed: Sequence[tuple[str, float]],
    columns: Sequence[FormColumn],
) -> _Table:
    """Head of a table: groups above, headings below."""
    left: list[float] = [each.width for each in own] or [7, *(width for _, width in printed)]
    sheet = FormSheet(book, name, title, (*left, *(each.width for each in columns)), note, len(left))
    top, first = sheet.row, len(left)
    page, head = sheet.page, book.look.style("head")
    if printed:
        page.write_blank(top, 0, None, book.look.highlight({"bg_color": head.bg_color}))
        sheet.text(top + 1, 0, "Lot", "head")
    for column, (heading, _) in enumerate(printed, start=1):
        page.merge_range(top, column, top + 1, column, heading, head)
    _groups(sheet, top, 0, own)
    _groups(sheet, top, first, columns)
    for column, each in enumerate((*own, *columns), start=0 if own else first):
        sheet.text(top + 1, column, each.heading, "head" if each.numbers == "@" else "head number")
    sheet.row = top + 2
    page.freeze_panes(sheet.row, first)
    page.repeat_rows(top, top + 1)
    page.repeat_columns(0, first - 1)
    return _Table(sheet, columns, first, top)


def _groups(sheet: FormSheet, row: int, first: int, columns: Sequence[FormColumn]) -> None:
    for group, members in groupby(columns, key=lambda column: column.group):
        last = first + len(list(members)) - 1
        if last > first:
            sheet.page.merge_range(row, first, row, last, group, sheet.book.group_format())
        else:
            sheet.page.write_string(row, first, group, sheet.book.group_format())
        first = last + 1
    sheet.height(row, 18)


def _finish(table: _Table) -> None:
    """Break the print between groups so that each page has the lots at its left and is as wide as the paper."""
    sheet = table.sheet
    left = sum(sheet.widths[: table.first_answer])
    pages, used, breaks, column = [left], 0.0, [], table.first_answer
    for _, members in groupby(table.columns, key=lambda each: each.group):
        widths = [each.width for each in members]
        if used and left + used + sum(widths) > _WIDEST:
            breaks.append(column)
            pages.append(left)
            used = 0.0
        used += sum(widths)
        pages[-1] = left + used
        column += len(widths)
    scale = max(_LEAST_SCALE, min(100, int(100 * _PAGE / max(pages))))
    sheet.page.set_print_scale(scale)
    sheet.page.set_v_pagebreaks(breaks)
    sheet.finish()
