"""How many lines a text takes in a cell: spreadsheets do not fit heights by themselves when a program writes them."""

from __future__ import annotations

from collections.abc import Iterator

__all__ = ["lines_of", "width_of"]

#: Advance widths of the characters from space to tilde in Arial and in the fonts of the same metric. [1/1000 em]
_WIDTHS = (
    (278, 278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278)
    + (556,) * 10
    + (278, 278, 584, 584, 584, 556, 1015)
    + (667, 667, 722, 722, 667, 611, 778, 722, 278, 500, 667, 556, 833)
    + (722, 778, 667, 778, 722, 667, 611, 722, 667, 944, 667, 667, 611)
    + (278, 278, 278, 469, 556, 333)
    + (556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500, 222, 833)
    + (556, 556, 556, 556, 333, 500, 278, 556, 500, 722, 500, 500, 500)
    + (334, 260, 334, 584)
)
_DIGIT = 556
_LATIN = 620
_WIDE = 1000
#: Programs differ by a pixel here and there; a line too many is better than a line cut off.
_SAFETY = 1.04
_BOLD = 1.07


def width_of(text: str, *, bold: bool = False) -> float:
    """Width of a text in one line.

    Parameters
    ----------
    text : str
        Without line breaks.
    bold : bool
        Bold type.

    Returns
    -------
    float
        In widths of a digit, the unit of column widths.
    """
    units = sum(_width(character) for character in text) / _DIGIT
    return units * _SAFETY * (_BOLD if bold else 1.0)


def _width(character: str) -> int:
    code = ord(character)
    if 32 <= code < 127:
        return _WIDTHS[code - 32]
    return _LATIN if code < 0x2E80 else _WIDE


def lines_of(text: str, width: float, *, bold: bool = False) -> int:
    """Lines that a text takes in a cell that wraps it.

    Parameters
    ----------
    text : str
        With or without line breaks.
    width : float
        Room for text. [widths of a digit]
    bold : bool
        Bold type.

    Returns
    -------
    int
        One or more.
    """
    return sum(_wrapped(piece, max(width, 1.0), bold=bold) for piece in text.split("\n"))


def _wrapped(text: str, width: float, *, bold: bool) -> int:
    """Lines of a piece without breaks: words go to the next line, words longer than a line are cut."""
    space = width_of(" ", bold=bold)
    lines, used = 1, 0.0
    for word in _words(text, bold=bold):
        if used and used + space + word > width:
            lines, used = lines + 1, 0.0
        used += word + (space if used else 0.0)
        if used > width:
            lines += int(used // width)
            used %= width
    return lines


def _words(text: str, *, bold: bool) -> Iterator[float]:
    return (width_of(word, bold=bold) for word in text.split(" ") if word)
