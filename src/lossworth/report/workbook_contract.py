"""Sheets beside the ranking: contract prices with the ranking without preference, corrections, decisions."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from decimal import Decimal

from .view import EvaluationView, LotView, OfferView
from .workbook_cells import column_name
from .workbook_evaluation import LotCells, bidder_width, money_width
from .workbook_look import decimals_of
from .workbook_sheet import NOTHING, Book, Column, Sheet, capital

__all__ = [
    "CONTRACT",
    "CORRECTIONS",
    "DECISIONS",
    "has_corrections",
    "write_contract",
    "write_corrections",
    "write_decisions",
]

CONTRACT = "Contract prices"
CORRECTIONS = "Corrections"
DECISIONS = "Decisions"

_TOTAL_WITHOUT, _RANK_WITHOUT, _TIE = 7, 8, 9
_CONTRACT_NOTE = (
    "The contract price is what would be paid for the lot: corrected, less unconditional discounts, with the items "
    "that count as the bidder prices them. Adders, a preference margin and prices of others are in the evaluated price "
    "only, which serves the comparison."
)
_LAYERS_NOTE = (
    "Three layers of each figure, none overwritten: as read, as corrected by rule or confirmed by the bidder, as "
    "evaluated."
)


def has_corrections(view: EvaluationView) -> bool:
    """Whether a figure was corrected or confirmed.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    bool
        False for a view without the sheet.
    """
    return any(offer.corrections for lot in view.lots for offer in lot.offers)


def write_contract(book: Book, cells: dict[str, LotCells]) -> None:
    """Write the sheet of the contract prices, with both rankings.

    Parameters
    ----------
    book : Book
        The workbook; every figure has its cell.
    cells : dict of str to LotCells
        Where the ranked offers of each lot stand on the sheet of the evaluation.
    """
    view, money = book.view, money_width(book.view)
    columns = (
        Column("Bidder", bidder_width(view) + 6),
        Column("Contract price\nof the lot", money + 2, numeric=True),
        Column("Currency", 10),
        Column("Tax", 14),
        Column(f"Evaluated price\nof the lot\n[{view.currency}]", money + 2, numeric=True),
        Column(f"Total\nowning cost\n[{view.currency}]", money + 2, numeric=True),
        Column("Rank,\nor status", 16, numeric=True),
        Column(f"Total without\npreference\n[{view.currency}]", money + 2, numeric=True),
        Column("Rank without\npreference", 14, numeric=True),
        Column("helper: place in a tie", 9, helper=True),
    )
    sheet = Sheet(book, CONTRACT, "Contract prices", columns, _CONTRACT_NOTE)
    for lot in view.lots:
        sheet.paragraph(f"Lot {lot.id} · {lot.description}", "band")
        _contract_rows(book, sheet, lot, cells[lot.id])
    sheet.finish()


def _contract_rows(book: Book, sheet: Sheet, lot: LotView, cells: LotCells) -> None:
    first = sheet.row
    ranked = [offer for offer in lot.offers if offer.status == "ranked"]
    places = places_in_ties(book, ranked)
    for position, offer in enumerate(lot.offers):
        row = sheet.row
        sheet.text(row, 0, offer.bidder, "strong text" if offer.status == "ranked" else "quiet text")
        sheet.figure(row, 1, offer.contract_price, "total")
        unit = "" if offer.contract_price is None else book.figure(offer.contract_price).unit
        sheet.text(row, 2, unit, "quiet text")
        sheet.text(row, 3, offer.tax_note if unit else "", "quiet text")
        sheet.figure(row, 4, offer.lot.evaluated_price)
        sheet.figure(row, 5, offer.lot.total_owning_cost)
        if offer.status == "ranked":
            rank = f"{cells.rank.partition(':')[0].rpartition('$')[0]}${cells.lot_row + position + 1}"
            sheet.formula(row, 6, f"={rank}", float(offer.rank or 0), "total")
        else:
            sheet.text(row, 6, offer.status, "quiet number")
        sheet.figure(row, _TOTAL_WITHOUT, offer.total_without_preference)
        _rank_without(sheet, offer, (first, len(ranked)), cells.decimals, places.get(offer.bidder))
        sheet.row += 1


def places_in_ties(book: Book, ranked: Sequence[OfferView]) -> dict[str, int]:
    """Place of each offer among those of the same total without preference, as the announced order parts them.

    Parameters
    ----------
    book : Book
        The workbook.
    ranked : sequence of OfferView
        The ranked offers of a lot.

    Returns
    -------
    dict of str to int
        By name of the offer, 0 for the first; empty without a preference.
    """
    totals: dict[Decimal, int] = {}
    shown = [(o, o.total_without_preference, o.rank_without_preference) for o in ranked]
    known = [(o, book.figure(total).value, rank) for o, total, rank in shown if total is not None and rank is not None]
    for _, total, rank in known:
        totals[total] = min(rank, totals.get(total, rank))
    return {offer.bidder: rank - totals[total] for offer, total, rank in known}


def _rank_without(sheet: Sheet, offer: OfferView, block: tuple[int, int], decimals: int, place: int | None) -> None:
    """Rank by the totals without preference, live; ties are parted as they were evaluated."""
    row = sheet.row
    if offer.rank_without_preference is None or place is None:
        sheet.text(row, _RANK_WITHOUT, NOTHING, "quiet number")
        return
    first, count = block

    def span(column: int) -> str:
        letters = column_name(column)
        return f"{letters}${first + 1}:{letters}${first + count}"

    totals = f"ROUND({span(_TOTAL_WITHOUT)},{decimals})"
    own = f"ROUND({column_name(_TOTAL_WITHOUT)}{row + 1},{decimals})"
    key = f"{column_name(_TIE)}{row + 1}"
    formula = f"=1+SUMPRODUCT(--({totals}<{own}))+SUMPRODUCT(({totals}={own})*({span(_TIE)}<{key}))"
    sheet.formula(row, _RANK_WITHOUT, formula, float(offer.rank_without_preference), "total")
    sheet.number(row, _TIE, Decimal(place), "helper")


def write_corrections(book: Book) -> None:
    """Write the sheet of the corrected and confirmed figures.

    Parameters
    ----------
    book : Book
        The workbook; every figure has its cell.
    """
    columns = (
        Column("Lot", 6),
        Column("Bidder", 24),
        Column("Figure", 21),
        Column("As read", 16, numeric=True),
        Column("Unit", 7),
        Column("As corrected", 16, numeric=True),
        Column("Unit", 7),
        Column("As evaluated", 16, numeric=True),
        Column("Unit", 7),
        Column("Rule and reason", 40),
        Column("Decision", 34),
    )
    sheet = Sheet(book, CORRECTIONS, "Corrected and confirmed figures", columns, _LAYERS_NOTE)
    for lot in book.view.lots:
        for offer in lot.offers:
            for correction in offer.corrections:
                row = sheet.row
                sheet.text(row, 0, lot.id)
                sheet.text(row, 1, offer.bidder, "strong text")
                sheet.text(row, 2, capital(correction.label))
                layers = (correction.as_read, correction.corrected, correction.evaluated)
                for column, identity in zip((3, 5, 7), layers, strict=True):
                    decimals = None if identity is None else decimals_of(book.figure(identity).value)
                    sheet.figure(row, column, identity, "total" if column == 7 else "number", decimals)
                    sheet.text(row, column + 1, "" if identity is None else book.figure(identity).unit, "quiet text")
                sheet.text(row, 9, "\n".join(part for part in (correction.rule, correction.reason) if part))
                sheet.text(row, 10, correction.decision or NOTHING, "quiet text")
                sheet.row += 1
    sheet.finish()


def write_decisions(book: Book) -> None:
    """Write the sheet of the decisions by people.

    Parameters
    ----------
    book : Book
        The workbook.
    """
    columns = (
        Column("Decision", 18),
        Column("Lot", 6),
        Column("Bidder", 24),
        Column("What", 19),
        Column("Value", 16),
        Column("Reason", 34),
        Column("By", 20),
        Column("On", 12),
        Column("Evidence", 20),
        Column("Where", 18),
        Column("Used?", 34),
    )
    note = "As recorded in the file of decisions, in its order; each stands beside the figures that it moves."
    sheet = Sheet(book, DECISIONS, "Decisions by people", columns, note)
    for texts in _decisions(book.view):
        for column, text in enumerate(texts):
            sheet.text(sheet.row, column, text, "strong text" if column == 0 else "text")
        sheet.row += 1
    sheet.finish()


def _decisions(view: EvaluationView) -> Iterator[tuple[str, ...]]:
    for d in view.decisions:
        yield (
            capital(d.kind),
            d.lot,
            d.bidder,
            d.field,
            d.value,
            d.reason,
            d.who,
            d.when,
            d.evidence,
            d.place,
            d.outcome,
        )
