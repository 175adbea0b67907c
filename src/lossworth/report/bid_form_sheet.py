"""Sheets of the bid form: head, answers that can be typed, everything else locked, print set-up."""

from __future__ import annotations

import datetime
from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Any

from .bid_form_view import Answer, BidFormView
from .workbook_cells import column_name
from .workbook_look import FONT, INK, RULE, Look
from .workbook_sheet import safe_text
from .workbook_text import lines_of

__all__ = ["FormBook", "FormSheet", "literal_choices"]

_POINTS_A_LINE = 12.75
_SIDES = 2.0
_HIGHEST = 409.0
_LONGEST_IN_FOOTER = 90
_LONGEST_PROMPT = 255
_FIRST_DAY = datetime.date(2000, 1, 1)
#: What a protected sheet still lets people do: nothing that moves a cell.
_ALLOWED = {"format_columns": True, "format_rows": True}
_GREEN = {"bg_color": "#DDEBDD", "font_color": "#1D5B33", "bold": True}
_COPPER = {"font_color": "#86461B", "bold": True}


@dataclass(slots=True)
class FormBook:
    """What the sheets share: the view, the file, its look, the formats of answers, and the lists of choices."""

    view: BidFormView
    file: Any
    look: Look
    lists: dict[tuple[str, ...], str] = field(default_factory=dict)
    _made: dict[tuple[str, str, bool], Any] = field(default_factory=dict)

    def answer_format(self, numbers: str, use: str, *, left: bool = False) -> Any:
        """Format of a cell in which somebody types.

        Parameters
        ----------
        numbers : str
            Number format; ``"@"`` for text.
        use : str
            ``"needed"``, ``"optional"``, or ``"closed"`` for what is not asked.
        left : bool
            Whether also figures stand at the left, as under a label.

        Returns
        -------
        xlsxwriter.format.Format
            Unlocked, unless it is closed.
        """
        left = left or numbers == "@"
        key = (numbers, use, left)
        if key not in self._made:
            wash = self.look.style("input")
            text = {"align": "left", "indent": 1, "text_wrap": True} if left else {"align": "right"}
            looks = {
                "needed": {"bg_color": wash.bg_color, "border_color": wash.bottom_color},
                "optional": {"border_color": RULE},
                "closed": {"bg_color": self.look.style("head").bg_color, "border_color": RULE},
            }[use]
            base = {"font_name": FONT, "font_size": 10, "font_color": INK, "valign": "vcenter", "border": 1}
            more = {**text, **looks, "num_format": numbers, "locked": use == "closed"}
            self._made[key] = self.file.add_format({**base, **more})
        return self._made[key]

    def group_format(self) -> Any:
        """Format of the words above neighboring columns, with a gap to those before."""
        band = self.look.style("band")
        font = {"font_name": FONT, "font_size": 10, "bold": True, "font_color": band.font_color}
        place = {"align": "left", "indent": 1, "valign": "vcenter"}
        return self.file.add_format({**font, **place, "bg_color": band.bg_color, "left": 5, "left_color": "#FFFFFF"})

    def mark(self, page: Any, area: tuple[int, int, int, int], good: str, neutral: Sequence[str]) -> None:
        """Let cells turn green on one text, and stand out on every text but some.

        Parameters
        ----------
        page : xlsxwriter.worksheet.Worksheet
            Their sheet.
        area : tuple of int
            First row and column, last row and column.
        good : str
            Text that turns a cell green.
        neutral : sequence of str
            Texts that change nothing.
        """
        first = f"{column_name(area[1])}{area[0] + 1}"
        plain = "".join(f',{first}<>"{text}"' for text in (good, *neutral))
        bad = f'=AND({first}<>""{plain})'
        green, copper = self.look.highlight(_GREEN), self.look.highlight(_COPPER)
        page.conditional_format(*area, {"type": "cell", "criteria": "==", "value": f'"{good}"', "format": green})
        page.conditional_format(*area, {"type": "formula", "criteria": bad, "format": copper})


class FormSheet:
    """One sheet of the form.

    Parameters
    ----------
    book : FormBook
        The workbook.
    name : str
        Of the sheet, which exists already.
    title : str
        First line.
    widths : sequence of float
        Of all columns, in digits.
    note : str
        For the reader, under the title.
    head_columns : int, optional
        Columns over which the head runs; all where none is given.
    """

    def __init__(
        self,
        book: FormBook,
        name: str,
        title: str,
        widths: Sequence[float],
        note: str = "",
        head_columns: int | None = None,
    ) -> None:
        self.book, self.name, self.widths = book, name, tuple(widths)
        self.page: Any = book.file.get_worksheet_by_name(name)
        self._heights: dict[int, float] = {}
        self._last_of_head = (head_columns or len(self.widths)) - 1
        for column, width in enumerate(self.widths):
            self.page.set_column(column, column, width, book.look.style("paragraph"))
        self.row = 0
        self.text(0, 0, title, "title")
        self.height(0, 26)
        self.row = 1
        view = book.view
        self.paragraph(" · ".join(part for part in (view.reference, view.title, view.buyer) if part), "identity")
        if view.remark:
            self.paragraph(view.remark, "remark")
        if note:
            self.paragraph(note, "note")
        self._set_up_print()

    def _set_up_print(self) -> None:
        page, view = self.page, self.book.view
        page.set_landscape()
        page.set_paper(9)  # A4
        page.set_margins(left=0.5, right=0.5, top=0.55, bottom=0.7)
        page.hide_gridlines(2)
        reference = safe_text(view.reference).replace("\n", " ")[:_LONGEST_IN_FOOTER].replace("&", "&&")
        page.set_footer(f'&L&"Arial,Regular"&8 {reference} · {self.name}&R&"Arial,Regular"&8 Page &P of &N')
        page.fit_to_pages(1, 0)
        page.protect("", _ALLOWED)

    def text(self, row: int, column: int, text: str, style: str = "text") -> None:
        """Write a text as text, whatever it begins with.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        text : str
            Trusted or not.
        style : str
            Name of a style.
        """
        shown, text = self.book.look.style(style), safe_text(text)
        if not text:
            self.page.write_blank(row, column, None, shown)
            return
        self.page.write_string(row, column, text, shown)
        self._need(row, text, shown, column, column)

    def paragraph(self, text: str, style: str = "paragraph", last: int | None = None) -> None:
        """Write a text over several columns in a row of its own that is high enough, and go on below it.

        Parameters
        ----------
        text : str
            Trusted or not.
        style : str
            Name of a style.
        last : int, optional
            Last column; that of the head where none is given.
        """
        last = self._last_of_head if last is None else last
        shown, text = self.book.look.style(style), safe_text(text)
        if last:
            self.page.merge_range(self.row, 0, self.row, last, "", shown)
        self.page.write_string(self.row, 0, text, shown)
        self._need(self.row, text, shown, 0, last)
        self.row += 1

    def formula(self, row: int, column: int, formula: str, computed: str, style: str = "text") -> None:
        """Write a formula of text with its value in the blank form.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        formula : str
            Beginning with an equals sign.
        computed : str
            Its value while nothing is filled in.
        style : str
            Name of a style.
        """
        self.page.write_formula(row, column, formula, self.book.look.style(style), computed)

    def answer(
        self, row: int, column: int, answer: Answer, numbers: str, use: str, name: str, *, left: bool = False
    ) -> None:
        """Prepare a cell in which somebody types: format, bounds or choices, and what the cell says of itself.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        answer : Answer
            Its bounds and choices.
        numbers : str
            Number format.
        use : str
            ``"needed"`` or ``"optional"``.
        name : str
            What is asked, as the title of the message.
        left : bool
            Whether also a figure stands at the left.
        """
        self.page.write_blank(row, column, None, self.book.answer_format(numbers, use, left=left))
        rule = _rule(answer, self.book.lists)
        if not rule and not answer.prompt:
            return
        rule |= {"ignore_blank": True} if rule else {"validate": "any"}
        if answer.prompt:
            rule |= {"input_title": name[:32], "input_message": answer.prompt[:_LONGEST_PROMPT]}
        self.page.data_validation(row, column, row, column, rule)

    def close(self, row: int, column: int) -> None:
        """Mark a cell as not asked."""
        self.page.write_blank(row, column, None, self.book.answer_format("@", "closed"))

    def height(self, row: int, points: float) -> None:
        """Make a row at least so high, in points."""
        self._heights[row] = max(points, self._heights.get(row, 0.0))

    def _need(self, row: int, text: str, shown: Any, first: int, last: int) -> None:
        size = shown.font_size / 10
        width = (sum(self.widths[first : last + 1]) - _SIDES) / size
        lines = lines_of(text, width, bold=bool(shown.bold)) if shown.text_wrap else 1
        self.height(row, _POINTS_A_LINE * size * lines + 3.5)

    def finish(self) -> None:
        """Set the heights and bound the print; called last."""
        for row, points in self._heights.items():
            self.page.set_row(row, min(points, _HIGHEST))
        self.page.print_area(0, 0, max(self.row - 1, 0), len(self.widths) - 1)
        self.page.ignore_errors({"number_stored_as_text": f"A1:{column_name(len(self.widths) - 1)}{self.row + 1}"})


def literal_choices(choices: Sequence[str]) -> bool:
    """Whether choices may stand in the rule of a cell itself: words without any mark, short together.

    Parameters
    ----------
    choices : sequence of str
        All choices of a question.

    Returns
    -------
    bool
        False where they need cells of their own.
    """
    return all(choice.isascii() and choice.isalpha() for choice in choices) and len(",".join(choices)) <= 200


def _rule(answer: Answer, lists: dict[tuple[str, ...], str]) -> dict[str, Any]:
    if answer.kind == "choice":
        source = list(answer.choices) if literal_choices(answer.choices) else lists[answer.choices]
        return {"validate": "list", "source": source, **_refusal("Choose one of the list.", "stop")}
    if answer.kind == "date":
        first = answer.earliest or _FIRST_DAY
        message = f"A day from {first.isoformat()} on, written as 2026-12-31."
        kind = "stop" if answer.earliest is None else "warning"
        return {"validate": "date", "criteria": ">=", "value": first, **_refusal(message, kind)}
    return _bounds(answer) if answer.kind == "number" else {}


def _bounds(answer: Answer) -> dict[str, Any]:
    above = "above 0" if answer.above_zero else "0 or more"
    if answer.at_most is None and answer.at_least is None:
        criteria = ">" if answer.above_zero else ">="
        return {"validate": "decimal", "criteria": criteria, "value": 0, **_refusal(f"A number {above}.", "stop")}
    least = float(answer.at_least) if answer.at_least is not None else (1e-9 if answer.above_zero else 0)
    most = float(answer.at_most) if answer.at_most is not None else 1e15
    bounds = {"validate": "decimal", "criteria": "between", "minimum": least, "maximum": most}
    start = f"from {answer.at_least:f}" if answer.at_least is not None else f"{above} and"
    message = f"A number {start} {'to' if answer.at_least is not None else 'at most'} {answer.at_most}."
    if answer.is_limit:
        message += " A value beyond the tender's limit makes the offer non-responsive."
    return {**bounds, **_refusal(message, "warning" if answer.is_limit else "stop")}


def _refusal(message: str, kind: str) -> dict[str, Any]:
    return {"error_title": "Bid form", "error_message": message, "error_type": kind}
