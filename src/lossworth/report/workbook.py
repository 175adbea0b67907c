"""The evaluation workbook: live formulas from the inputs to the rank, each with the value that the engine computed."""

from __future__ import annotations

import datetime
import io

import xlsxwriter

from .view import EvaluationView
from .workbook_bids import BIDS, write_bids
from .workbook_cells import Addresses
from .workbook_contract import (
    CONTRACT,
    CORRECTIONS,
    DECISIONS,
    has_corrections,
    write_contract,
    write_corrections,
    write_decisions,
)
from .workbook_evaluation import EVALUATION, write_evaluation
from .workbook_information import INFORMATION, has_information, write_information
from .workbook_inputs import INPUTS, write_inputs
from .workbook_look import FONT, Look
from .workbook_prices import PRICES, has_prices, plan_prices, write_prices
from .workbook_ranking import RANKING, write_ranking
from .workbook_rates import RATES, write_rates
from .workbook_record import (
    COMPARISON,
    FINDINGS,
    RECORD,
    write_comparison,
    write_findings,
    write_record,
)
from .workbook_sheet import Book, safe_text
from .workbook_summary import SUMMARY, write_summary
from .workbook_years import YEARS

__all__ = ["workbook_bytes"]


def workbook_bytes(view: EvaluationView) -> bytes:
    """Workbook of an evaluation, ready to be written to a file.

    Parameters
    ----------
    view : EvaluationView
        What the papers show.

    Returns
    -------
    bytes
        An xlsx file; the same view gives the same bytes.

    Raises
    ------
    ValueError
        If the time of the run is not an ISO time.

    Notes
    -----
    Each figure of the trail has one cell: leaves are values, arithmetic is a formula in references to the cells of its
    operands, and the sum of a year table adds up the table's column. The arithmetic is therefore the engine's own and
    is not written a second time, apart from the columns of the year table: `workbook_year_formulas`.
    """
    memory = io.BytesIO()
    file = xlsxwriter.Workbook(memory, _options())
    file.set_properties(_properties(view))
    book = Book(view, file, Look(file), Addresses())
    for name in _sheets(view):
        file.add_worksheet(name)
    write_inputs(book)
    write_bids(book)
    write_rates(book)
    prices = plan_prices(book) if has_prices(view) else None
    cells = write_evaluation(book)
    if prices is not None:
        write_prices(book, prices)
        write_contract(book, cells)
    if has_corrections(view):
        write_corrections(book)
    if view.decisions:
        write_decisions(book)
    rankings = write_ranking(book, cells)
    verdict = write_comparison(book, cells)
    if has_information(view):
        write_information(book)
    write_findings(book)
    write_record(book)
    write_summary(book, rankings, verdict)
    file.close()
    return memory.getvalue()


def _options() -> dict[str, object]:
    """Text never becomes a formula, a link or a number, whatever it looks like; made anew, as XlsxWriter changes it."""
    return {
        "in_memory": True,
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
        "default_format_properties": {"font_name": FONT, "font_size": 10},
    }


def _sheets(view: EvaluationView) -> tuple[str, ...]:
    derived = any(lot.rates.year_table is not None for lot in view.lots)
    years = (YEARS,) if derived else ()
    beside = (INFORMATION,) if has_information(view) else ()
    prices = (CONTRACT, PRICES) if has_prices(view) else ()
    people = (*((CORRECTIONS,) if has_corrections(view) else ()), *((DECISIONS,) if view.decisions else ()))
    start = (SUMMARY, RANKING, *prices[:1], EVALUATION, *prices[1:])
    return (*start, RATES, *years, INPUTS, BIDS, *people, *beside, FINDINGS, COMPARISON, RECORD)


def _properties(view: EvaluationView) -> dict[str, object]:
    made = datetime.datetime.fromisoformat(view.record.generated_at)
    if made.tzinfo is not None:
        made = made.astimezone(datetime.UTC).replace(tzinfo=None)
    return {
        "title": safe_text(f"{view.reference}: evaluation of bids"),
        "subject": safe_text(view.title),
        "author": f"lossworth {view.record.tool_version}",
        "created": made,
    }
