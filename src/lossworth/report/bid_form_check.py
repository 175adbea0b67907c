"""The self-check of the bid form: formulas that say what is missing, what does not add up, and what is complete."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from .bid_form_cover import CoverCells
from .bid_form_schedule import OfferRow
from .bid_form_sheet import FormBook, FormSheet

__all__ = ["CHECK", "CheckPlaces", "check_places", "write_check"]

CHECK = "Self-check"
_OK, _NOTHING, _MISSING, _DIFFERS, _BEYOND = "ok", "–", "missing", "differs", "beyond"
_COMPLETE, _NOT_OFFERED = "complete", "not offered"
_DONE = "The form is complete and adds up."
_NOT_DONE = "The form is not complete yet; see below."
_HEADINGS = (
    "Lot",
    "Offer",
    "Prices",
    "Unit price × units = total price",
    "Losses stated",
    "No-load + load = total loss",
    "Other needed values",
    "Within the limits of the tender",
    "Result",
)
_NOTE = (
    "Follows what is filled in. A lot is complete when every needed value is there and sums add up. A lot that is not "
    "offered is no fault. A value beyond a limit of the tender makes the offer non-responsive."
)
_LOSSES = ("no_load_loss_kw", "load_loss_kw", "total_loss_kw")
_PRICES = ("unit_price", "total_price")
_MAY_BE_ZERO = ("auxiliary_loss_kw", "cooling_power_no_load_kw", "cooling_power_rated_kw")
_CENT = "0.005"
_SMALL = "0.000001"


@dataclass(frozen=True, slots=True)
class CheckPlaces:
    """Where the results will stand, before the sheet is written."""

    first_row: int
    lots: tuple[str, ...]


def check_places(book: FormBook) -> CheckPlaces:
    """Cells of the results of the lots.

    Parameters
    ----------
    book : FormBook
        The workbook.

    Returns
    -------
    CheckPlaces
        For the formulas of the price schedule.
    """
    # title, identity, remark, note; the verdict, three lines on the bid, a gap, the headings
    first = 3 + bool(book.view.remark) + 6
    lots = tuple(f"'{CHECK}'!$I${first + number + 1}" for number in range(len(book.view.lots)))
    return CheckPlaces(first, lots)


def write_check(book: FormBook, places: CheckPlaces, cover: CoverCells, rows: Sequence[OfferRow]) -> None:
    """Write the self-check.

    Parameters
    ----------
    book : FormBook
        The workbook.
    places : CheckPlaces
        Where the results must stand.
    cover : CoverCells
        Answers on the whole bid.
    rows : sequence of OfferRow
        Rows of the price schedule, then those of the alternatives.

    Raises
    ------
    ValueError
        If the results would stand elsewhere than the price schedule was told.
    """
    sheet = FormSheet(book, CHECK, CHECK, (8, 34, 12, 16, 12, 16, 14, 16, 22), _NOTE)
    verdict = sheet.row
    sheet.row += 1
    first_of_bid = sheet.row
    for text, formula, blank in _bid_lines(cover):
        sheet.page.merge_range(sheet.row, 0, sheet.row, 7, "", book.look.style("text"))
        sheet.page.write_string(sheet.row, 0, text, book.look.style("text"))
        sheet.formula(sheet.row, 8, formula, blank, "strong text")
        sheet.row += 1
    sheet.row += 1
    heads = sheet.row
    for column, heading in enumerate(_HEADINGS):
        sheet.text(heads, column, heading, "head")
    sheet.row += 1
    first = sheet.row
    if first != places.first_row:
        raise ValueError(f"results stand in row {first}, and not in {places.first_row}")
    for row in rows:
        _write_row(sheet, row)
        sheet.row += 1
    last = sheet.row - 1
    _write_verdict(sheet, verdict, first_of_bid, (first, last))
    book.mark(sheet.page, (first, 2, last, 7), _OK, (_NOTHING,))
    book.mark(sheet.page, (first, 8, last, 8), _COMPLETE, (_NOT_OFFERED,))
    book.mark(sheet.page, (first_of_bid, 8, first_of_bid + 2, 8), _OK, (_NOTHING,))
    sheet.page.freeze_panes(heads + 1, 0)
    sheet.page.repeat_rows(heads)
    sheet.finish()


def _write_verdict(sheet: FormSheet, row: int, first_of_bid: int, lots: tuple[int, int]) -> None:
    results = f"$I${lots[0] + 1}:$I${lots[1] + 1}"
    bid = f"$I${first_of_bid + 1}:$I${first_of_bid + 3}"
    count = lots[1] - lots[0] + 1
    fine = f'COUNTIF({results},"{_COMPLETE}")+COUNTIF({results},"{_NOT_OFFERED}")={count}'
    bid_fine = f'COUNTIF({bid},"{_OK}")+COUNTIF({bid},"{_NOTHING}")=3'
    formula = f'=IF(AND(COUNTIF({results},"{_COMPLETE}")>0,{fine},{bid_fine}),"{_DONE}","{_NOT_DONE}")'
    sheet.page.merge_range(row, 0, row, 8, "", sheet.book.look.style("lead"))
    sheet.formula(row, 0, formula, _NOT_DONE, "lead")
    sheet.height(row, 26)
    sheet.book.mark(sheet.page, (row, 0, row, 8), _DONE, ())


def _bid_lines(cover: CoverCells) -> Iterator[tuple[str, str, str]]:
    """Text, formula, and what it says while nothing is filled in."""

    def counted(cells: Sequence[str]) -> str:
        return "+".join(f'({cell}<>"")' for cell in cells)

    needed, declared = counted(cover.needed), "+".join(f'({cell}="yes")' for cell in cover.declarations)
    yield (
        "Sheet Bid: every needed answer is given",
        f'=IF({needed}={len(cover.needed)},"{_OK}","{_MISSING}")',
        _MISSING,
    )
    yield (
        "Sheet Bid: every declaration is answered with yes",
        f'=IF({declared}={len(cover.declarations)},"{_OK}","{_MISSING}")',
        _MISSING,
    )
    shares = ",".join(cover.shares)
    formula = f'=IF(COUNT({shares})=0,"{_NOTHING}",IF(ABS(SUM({shares})-100)<{_SMALL},"{_OK}","{_DIFFERS}"))'
    text = "Sheet Bid: payments of an own schedule make 100 %"
    yield text, formula if shares else f'="{_NOTHING}"', _NOTHING


def _write_row(sheet: FormSheet, row: OfferRow) -> None:
    here = sheet.row + 1
    if row.lot is not None:
        sheet.text(sheet.row, 0, row.lot.id, "strong text")
        sheet.text(sheet.row, 1, row.lot.description)
    else:
        sheet.formula(sheet.row, 0, f'={row.id}&""', "", "strong text")
        sheet.formula(sheet.row, 1, f'={row.name}&""', "")
    offered = f"COUNTA({row.inputs})>0"
    checks = (_prices(row), _product(row), _losses(row), _sum(row), _others(row), _limits(row))
    for column, check in enumerate(checks, start=2):
        sheet.formula(sheet.row, column, f'=IF({offered},{check},"{_NOTHING}")', _NOTHING)
    area = f"C{here}:H{here}"
    result = (
        f'=IF({offered},IF(COUNTIF({area},"{_MISSING}")>0,"not complete",IF(COUNTIF({area},"{_DIFFERS}")>0,'
        f'"does not add up",IF(COUNTIF({area},"{_BEYOND}")>0,"beyond a limit","{_COMPLETE}"))),"{_NOT_OFFERED}")'
    )
    sheet.formula(sheet.row, 8, result, _NOT_OFFERED, "strong text")


def _prices(row: OfferRow) -> str:
    items = [
        field for field, cell in (row.lot.cells.items() if row.lot else ()) if field.startswith("item:") and cell.needed
    ]
    return _all_numbers([row.cells[field] for field in _PRICES], [row.cells[field] for field in items])


def _losses(row: OfferRow) -> str:
    zero = [field for field in _MAY_BE_ZERO if row.lot and (cell := row.lot.cells.get(field)) and cell.needed]
    return _all_numbers([row.cells[field] for field in _LOSSES], [row.cells[field] for field in zero])


def _all_numbers(above_zero: Sequence[str], not_negative: Sequence[str]) -> str:
    """``"ok"`` where all cells are numbers in their bounds; COUNTIF passes over texts, which AND would not."""
    counts = [f'COUNTIF({cell},">0")' for cell in above_zero] + [f'COUNTIF({cell},">=0")' for cell in not_negative]
    return f'IF({"+".join(counts)}={len(counts)},"{_OK}","{_MISSING}")'


def _product(row: OfferRow) -> str:
    price, total = (row.cells[field] for field in _PRICES)
    return _compared((price, total), f"ABS({price}*{row.quantity}-{total})<{_CENT}")


def _sum(row: OfferRow) -> str:
    no_load, load, total = (row.cells[field] for field in _LOSSES)
    return _compared((no_load, load, total), f"ABS({no_load}+{load}-{total})<{_SMALL}")


def _compared(cells: Sequence[str], condition: str) -> str:
    return f'IF(COUNT({",".join(cells)})={len(cells)},IF({condition},"{_OK}","{_DIFFERS}"),"{_NOTHING}")'


def _others(row: OfferRow) -> str:
    """Every other needed value: numbers above zero, texts that are not blank; an alternative has lot and name."""
    if row.lot is None:
        return f'IF(({row.id}<>"")+({row.name}<>"")=2,"{_OK}","{_MISSING}")'
    done = (*_PRICES, *_LOSSES, *_MAY_BE_ZERO)
    needed = {
        field: cell
        for field, cell in row.lot.cells.items()
        if cell.needed and field not in done and not field.startswith("item:")
    }
    if not needed:
        return f'"{_OK}"'
    counts = [
        f'COUNTIF({row.cells[field]},">0")' if cell.answer.kind == "number" else f'({row.cells[field]}<>"")'
        for field, cell in needed.items()
    ]
    return f'IF({"+".join(counts)}={len(counts)},"{_OK}","{_MISSING}")'


def _limits(row: OfferRow) -> str:
    """Number of values beyond a limit of the tender; a cell without a number is beyond none.

    The limit stands outside the quotes of a criterion: inside, its decimal mark would be that of the reader's country.
    """
    if row.lot is None:
        return f'"{_NOTHING}"'
    beyond = []
    for field, cell in row.lot.cells.items():
        answer, place = cell.answer, row.cells[field]
        if answer.is_limit and answer.at_most is not None:
            beyond.append(f'COUNTIF({place},">"&{answer.at_most:f})')
        if answer.is_limit and answer.at_least is not None:
            beyond.append(f'COUNTIF({place},"<"&{answer.at_least:f})')
        if field == "pcb_free":
            beyond.append(f'({place}="no")')
    beyond += _efficiency(row)
    return f'IF({"+".join(beyond)}>0,"{_BEYOND}","{_OK}")' if beyond else f'"{_NOTHING}"'


def _efficiency(row: OfferRow) -> Iterator[str]:
    """Peak efficiency index 1 - 2 sqrt(P0 Pk) / Sr: Commission Regulation (EU) No 548/2014, Annexes I and II."""
    if row.lot is None or row.lot.least_efficiency_percent is None:
        return
    no_load, load = row.cells["no_load_loss_kw"], row.cells["load_loss_kw"]
    index = f"100*(1-2*SQRT(ABS({no_load}*{load}))/{row.lot.power_in_loss_unit:f})"
    least = f"{row.lot.least_efficiency_percent:f}"
    yield f"IF(COUNT({no_load},{load})=2,--(ROUND({index},9)<{least}),0)"
