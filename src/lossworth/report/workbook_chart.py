"""Picture of the costs of one lot: a bar for each ranked offer, its parts told apart by lightness and pattern."""

from __future__ import annotations

from decimal import Decimal
from typing import Any

from .view import LotView
from .workbook_cells import Cell
from .workbook_look import CHART_FILLS, FONT, INK, MUTED, RULE
from .workbook_sheet import Sheet

__all__ = ["insert_chart"]

_PARTS = ("Evaluated price", "No-load loss, A × P0", "Load loss, B × Pk", "Auxiliary loss, C × Paux")
_PIXELS_A_DIGIT = 7
_ROW_PIXELS = 20
_MOST_BARS = 12
#: With more offers than these the table fills the page, and the picture begins the next one.
_MOST_ABOVE = 8
_FROM_THOUSANDS = Decimal(1_000_000)


def insert_chart(sheet: Sheet, lot: LotView, first: int, count: int, label: int, price: int) -> None:
    """Insert the picture below what was written, and leave its rows free.

    Parameters
    ----------
    sheet : Sheet
        The sheet of the ranking.
    lot : LotView
        The lot.
    first, count : int
        First row of the ranked offers, counted from 0, and their number.
    label, price : int
        Columns of the labels and of the first part of the cost.
    """
    bars = min(count, _MOST_BARS)
    if len(lot.offers) > _MOST_ABOVE:
        sheet.row += 1
        sheet.new_page()
    chart = sheet.book.file.add_chart({"type": "bar", "subtype": "stacked"})
    parts = _PARTS if lot.rates.auxiliary is not None else _PARTS[:3]
    for index, (name, fill) in enumerate(zip(parts, CHART_FILLS, strict=False)):
        chart.add_series(_series(sheet.name, name, fill, (first, first + bars - 1), label, price + index))
    _axes(sheet, chart, lot, "" if bars == count else f", first {bars} offers")
    width = sum(int(column.width * _PIXELS_A_DIGIT + 5) for column in sheet.columns[: sheet.last + 1])
    height = 130 + 44 * bars
    chart.set_size({"width": width - 4, "height": height})
    row = sheet.row + 1
    description = f"Stacked costs of the ranked offers of lot {lot.id}; the figures stand in the table above."
    sheet.page.insert_chart(row, 0, chart, {"x_offset": 2, "object_position": 2, "description": description})
    sheet.row = row + -(-height // _ROW_PIXELS) + 1


def _series(
    sheet: str, name: str, fill: tuple[str, str, str | None], rows: tuple[int, int], label: int, column: int
) -> dict[str, Any]:
    def span(of: int) -> str:
        first, last = (Cell(sheet, row, of).seen_from("") for row in rows)
        return f"={first}:{last.partition('!')[2]}"

    color, ground, pattern = fill
    look: dict[str, Any] = {"fill": {"color": color}}
    if pattern is not None:
        look = {"pattern": {"pattern": pattern, "fg_color": color, "bg_color": ground}}
    return {
        "name": name,
        "categories": span(label),
        "values": span(column),
        "border": {"color": INK, "width": 0.75},
        "gap": 45,
        **look,
    }


def _axes(sheet: Sheet, chart: Any, lot: LotView, which: str) -> None:
    view = sheet.book.view
    totals = (offer.lot.total_owning_cost for offer in lot.offers)
    largest = max((view.figures[identity].value for identity in totals if identity is not None), default=Decimal(0))
    thousands = largest >= _FROM_THOUSANDS
    unit = f"thousand {view.currency}" if thousands else view.currency
    small = {"name": FONT, "size": 11, "color": INK, "bold": False}
    chart.set_title(
        {
            "name": f"Total owning cost of lot {lot.id}, {unit}{which}",
            "name_font": {"name": FONT, "size": 13, "color": INK, "bold": True},
            "overlay": False,
        }
    )
    chart.set_y_axis({"reverse": True, "num_font": small, "line": {"color": INK}, "major_tick_mark": "none"})
    chart.set_x_axis(
        {
            "num_format": "#,##0," if thousands else "#,##0",
            "num_font": {**small, "color": MUTED},
            "min": 0,
            "line": {"none": True},
            "major_gridlines": {"visible": True, "line": {"color": RULE, "width": 0.5}},
        }
    )
    chart.set_legend({"position": "bottom", "font": small})
    chart.set_chartarea({"border": {"color": RULE}, "fill": {"color": "#FFFFFF"}})
    chart.set_plotarea({"fill": {"none": True}})
