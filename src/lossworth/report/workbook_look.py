"""Colors, type and number formats of the workbook, each made once."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from typing import Any

__all__ = ["CHART_FILLS", "FONT", "INK", "MUTED", "RULE", "Look", "decimals_of", "number_format"]

FONT = "Arial"
INK = "#17252D"
MUTED = "#4A5961"
RULE = "#C6CED1"
_FAINT = "#EEF1F0"
_WASH = "#FAF3E3"
_COPPER = "#86461B"
_PRICE = "#2B4655"
_MOST_DECIMALS = 6

#: Parts of a cost from the axis outwards: fill, second color, pattern; told apart in gray by lightness and hatching.
CHART_FILLS: tuple[tuple[str, str, str | None], ...] = (
    (_PRICE, _PRICE, None),
    ("#C98C36", "#C98C36", None),
    ("#F0E3C2", "#F0E3C2", None),
    (INK, "#FFFFFF", "wide_upward_diagonal"),
)

_BASE: Mapping[str, Any] = {"font_name": FONT, "font_size": 10, "font_color": INK, "valign": "vcenter"}
_LINE: Mapping[str, Any] = {"bottom": 1, "bottom_color": RULE}
_HEAD: Mapping[str, Any] = {
    "bold": True,
    "font_size": 9,
    "bg_color": _FAINT,
    "bottom": 2,
    "bottom_color": INK,
    "text_wrap": True,
    "valign": "bottom",
    "align": "left",
    "indent": 1,
}
_WORDS: Mapping[str, Any] = {**_LINE, "text_wrap": True, "align": "left", "indent": 1}
#: Without an indent: some programs forget it in right-aligned cells now and then, and columns of figures are torn.
_FIGURE: Mapping[str, Any] = {**_LINE, "align": "right"}
_SUM: Mapping[str, Any] = {
    "top": 1,
    "top_color": INK,
    "bottom": 2,
    "bottom_color": INK,
    "bold": True,
    "align": "left",
    "indent": 1,
}
_HELPER: Mapping[str, Any] = {"font_size": 8, "font_color": "#8B979C", "align": "right"}
_STYLES: Mapping[str, Mapping[str, Any]] = {
    "title": {"font_size": 18, "bold": True},
    "identity": {"font_color": MUTED, "text_wrap": True},
    "note": {"text_wrap": True},
    "remark": {"bold": True, "font_color": _COPPER, "text_wrap": True},
    "verdict": {"font_color": _COPPER, "bold": True},
    "head": _HEAD,
    "head number": {**_HEAD, "align": "right", "indent": 0},
    "band": {
        "bold": True,
        "font_color": "#FFFFFF",
        "bg_color": _PRICE,
        "align": "left",
        "indent": 1,
        "text_wrap": True,
    },
    "part": {
        "bold": True,
        "font_color": _COPPER,
        "bottom": 1,
        "bottom_color": _COPPER,
        "text_wrap": True,
        "align": "left",
        "indent": 1,
        "valign": "bottom",
    },
    "paragraph": {"text_wrap": True, "valign": "vcenter", "align": "left", "indent": 1},
    "quiet paragraph": {"text_wrap": True, "align": "left", "indent": 1, "font_color": MUTED},
    "assumption": {"text_wrap": True, "align": "left", "indent": 1, "font_color": _COPPER, "bold": True},
    "lead": {"text_wrap": True, "font_size": 13, "bold": True},
    "text": _WORDS,
    "strong text": {**_WORDS, "bold": True},
    "quiet text": {**_WORDS, "font_color": MUTED},
    "number": _FIGURE,
    "quiet number": {**_FIGURE, "font_color": MUTED},
    "total": {**_FIGURE, "bold": True},
    "rate": {**_FIGURE, "italic": True, "font_color": MUTED},
    "sum": {**_SUM, "align": "right", "indent": 0},
    "sum text": _SUM,
    "input": {"bg_color": _WASH, "border": 1, "border_color": _COPPER, "align": "right"},
    "helper": _HELPER,
    "helper head": {**_HELPER, "text_wrap": True, "valign": "bottom"},
}


def decimals_of(*values: Decimal) -> int:
    """Digits behind the decimal mark that show every one of some values, at most six.

    Parameters
    ----------
    *values : Decimal
        Numbers of one column.

    Returns
    -------
    int
        Zero for whole numbers and for no numbers at all.

    Examples
    --------
    >>> decimals_of(Decimal("0.13"), Decimal("0.058"))
    3
    """
    return min(max((0, *(-int(value.as_tuple().exponent) for value in values))), _MOST_DECIMALS)


def number_format(decimals: int) -> str:
    """Number format with thousands separators.

    Parameters
    ----------
    decimals : int
        Digits behind the decimal mark; none for zero and less.

    Returns
    -------
    str
        ``"#,##0.00"``.
    """
    return "#,##0" + ("." + "0" * decimals if decimals > 0 else "")


class Look:
    """The formats of one workbook, made on demand and shared.

    Parameters
    ----------
    file : xlsxwriter.Workbook
        The workbook that owns the formats.
    """

    def __init__(self, file: Any) -> None:
        self._file = file
        self._made: dict[tuple[str, str], Any] = {}

    def style(self, name: str, numbers: str = "General") -> Any:
        """Format of a style.

        Parameters
        ----------
        name : str
            One of the styles of this module.
        numbers : str
            Number format.

        Returns
        -------
        xlsxwriter.format.Format
            The same object for the same arguments.

        Raises
        ------
        KeyError
            If there is no such style.
        """
        key = (name, numbers)
        if key not in self._made:
            self._made[key] = self._file.add_format({**_BASE, **_STYLES[name], "num_format": numbers})
        return self._made[key]

    def highlight(self, properties: Mapping[str, Any]) -> Any:
        """Format of a condition, without the properties of a cell.

        Parameters
        ----------
        properties : mapping
            What the condition changes.

        Returns
        -------
        xlsxwriter.format.Format
            For a conditional format.
        """
        return self._file.add_format(dict(properties))
