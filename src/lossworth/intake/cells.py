"""One cell of a bidder's table, and the number in it: by the declared marks, never by a guess."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum, auto
from functools import cache

from .numbers import LARGEST, is_beyond_meaning

__all__ = ["BLANK", "Cell", "Content", "Marks", "NoNumber", "collapsed", "number_in", "text_cell"]

#: Space, no-break space, thin space, narrow no-break space: all group thousands.
_GROUPING_SPACES = " \u00a0\u2009\u202f"
#: Hyphens, dashes and minus signs: all are a minus before a number. An apostrophe may be typographic.
_SIGNS = str.maketrans(dict.fromkeys("\u2010\u2011\u2012\u2013\u2014\u2212\ufe63\uff0d", "-") | {"\u2019": "'"})
#: Characters without width, which nobody sees at the ends of a cell.
_INVISIBLE = "\u00ad\u200b\u200c\u200d\u200e\u200f\u2060\ufeff"
_AROUND = _INVISIBLE + "".join(chr(code) for code in range(0x3001) if chr(code).isspace())
#: A number that means the same by every declaration but that of a comma for its point, and is far inside all bounds.
_PLAIN = re.compile(r"[0-9]+(?:\.[0-9]+)?")
_LONGEST_PLAIN = 12


class Content(Enum):
    """What a cell holds."""

    BLANK = auto()
    TEXT = auto()
    NUMBER = auto()
    PERCENTAGE = auto()  # a number formatted with a percent sign: 0.04 that shows as 4 %
    DATE = auto()
    TRUTH = auto()
    ERROR = auto()
    FORMULA = auto()  # without a computed value


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell as read.

    Parameters
    ----------
    content : Content
        What it holds.
    text : str
        What stands there, as a person sees it.
    number : Decimal, optional
        Of a number; of a percentage in percent.
    """

    content: Content
    text: str
    number: Decimal | None = None

    @property
    def is_blank(self) -> bool:
        """Whether nothing stands there but spaces."""
        return self.content is Content.BLANK


BLANK = Cell(Content.BLANK, "")


@dataclass(frozen=True, slots=True)
class Marks:
    """How numbers stand in text.

    Parameters
    ----------
    decimal : str
        Decimal mark, point or comma.
    thousands : str
        Mark between groups of three digits; empty for none. Spaces group in any case.
    """

    decimal: str = "."
    thousands: str = ""


@dataclass(frozen=True, slots=True)
class NoNumber:
    """Why a cell holds no number that can be used.

    Parameters
    ----------
    kind : str
        Slug of the kind of finding.
    rule : str
        What was expected.
    fix : str
        A closer remedy, where there is one.
    """

    kind: str
    rule: str
    fix: str = ""


def text_cell(text: str) -> Cell:
    """Cell of a text; blank where it is nothing but spaces.

    Parameters
    ----------
    text : str
        As it stands.

    Returns
    -------
    Cell
        With the spaces around taken off, and what has no width.
    """
    text = text.strip()
    if not text.isascii():
        text = text.strip(_AROUND)
    return Cell(Content.TEXT, text) if text else BLANK


def collapsed(text: str) -> str:
    """Text with every run of white space as one space.

    Parameters
    ----------
    text : str
        Any text.

    Returns
    -------
    str
        Without white space at its ends.
    """
    return " ".join(text.split())


def number_in(cell: Cell, marks: Sequence[Marks], unit: str) -> Decimal | NoNumber:
    """Number of a cell that is not blank.

    Parameters
    ----------
    cell : Cell
        The cell.
    marks : sequence of Marks
        The declared marks; several only where no declaration could be read, and then any will do.
    unit : str
        Unit of the column; a percent sign in the cell must agree with it.

    Returns
    -------
    Decimal or NoNumber
        The number in the unit of the column, or why there is none.
    """
    if cell.content is Content.TEXT:
        if len(cell.text) <= _LONGEST_PLAIN and marks[0].decimal == "." and _PLAIN.fullmatch(cell.text):
            return Decimal(cell.text)
        found = _number_of_text(cell.text, marks, unit)
    elif cell.content is Content.NUMBER or (cell.content is Content.PERCENTAGE and unit == "%"):
        found = cell.number
    else:
        return NoNumber("value-unreadable", *_OTHER_CONTENT[cell.content])
    if found is None:
        return NoNumber("value-unreadable", "must be a number", _closer_remedy(cell.text, marks, unit))
    if is_beyond_meaning(found):
        return NoNumber("value-out-of-bounds", f"must be a finite number below {LARGEST:,}, and not almost zero")
    return found or abs(found)  # never a negative zero


_OTHER_CONTENT = {
    Content.PERCENTAGE: ("must be a number without a percent format",),
    Content.DATE: (
        "must be a number, not a date",
        "Ask the bidder what was meant: a spreadsheet turns entries such as 1.2 or 3-4 into dates.",
    ),
    Content.TRUTH: ("must be a number, not true or false",),
    Content.ERROR: ("must be a number, not a spreadsheet error",),
    Content.FORMULA: (
        "must be a number; the formula has no computed value",
        "Open the file in a spreadsheet program, let it calculate, and save it anew.",
    ),
    Content.BLANK: ("must be a number",),
}


def _number_of_text(text: str, marks: Sequence[Marks], unit: str) -> Decimal | None:
    text = text.translate(_SIGNS).strip()
    if unit == "%":
        text = text.removesuffix("%").rstrip()
    return next((number for each in marks if (number := _parsed(text, each)) is not None), None)


def _parsed(text: str, marks: Marks) -> Decimal | None:
    match = _pattern(marks).fullmatch(text)
    if match is None or not (match["whole"] or match["fraction"]):
        return None
    whole = re.sub(r"[^0-9]", "", match["whole"] or "")
    fraction = f".{match['fraction']}" if match["fraction"] else ""
    return Decimal(f"{match['sign']}{whole or '0'}{fraction}{match['exponent'] or ''}")


@cache
def _pattern(marks: Marks) -> re.Pattern[str]:
    group = _GROUPING_SPACES + (marks.thousands if marks.thousands != marks.decimal else "")
    in_groups = rf"[0-9]{{1,3}}(?P<group>[{re.escape(group)}])[0-9]{{3}}(?:(?P=group)[0-9]{{3}})*"
    fraction = rf"{re.escape(marks.decimal)}(?P<fraction>[0-9]+)"
    exponent = r"[eE][+-]?[0-9]{1,3}"
    return re.compile(rf"(?P<sign>[+-]?) ?(?P<whole>{in_groups}|[0-9]*)(?:{fraction})?(?P<exponent>{exponent})?")


def _closer_remedy(text: str, marks: Sequence[Marks], unit: str) -> str:
    if len(marks) != 1:
        return ""
    other = "," if marks[0].decimal == "." else "."
    if _number_of_text(text, [Marks(other)], unit) is None:
        return ""
    return f'If "{other}" is a decimal mark or a thousands mark in this file, declare it under [bids] in the tender.'
