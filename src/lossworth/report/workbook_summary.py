"""First sheet: what the evaluation recommends, lot by lot, and what it does not prove."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from decimal import Decimal

from .view import LotView, OfferView
from .workbook_contract import CONTRACT
from .workbook_information import assuming
from .workbook_prices import has_prices
from .workbook_ranking import LotRanking
from .workbook_record import AGREE
from .workbook_sheet import NOTHING, Book, Column, Sheet

__all__ = ["SUMMARY", "write_summary"]

SUMMARY = "Summary"


def write_summary(book: Book, rankings: Mapping[str, LotRanking], verdict: str) -> None:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook.
    rankings : mapping of str to LotRanking
        Where the ranked offers of each lot stand.
    verdict : str
        Reference to the cell that says whether workbook and program agree.
    """
    view = book.view
    currency = view.currency
    columns = (
        Column("", 8),
        Column("", 46),
        Column("", 42),
        Column("", 11, numeric=True),
        Column("", 20, numeric=True),
        Column("", 20, numeric=True),
        Column("", 18, numeric=True),
        Column("", 11, numeric=True),
    )
    sheet = Sheet(book, SUMMARY, "Evaluation of bids: summary", columns)
    sheet.row += 1
    sheet.paragraph(view.recommendation, "lead")
    sheet.row += 1
    headings = (
        "Lot",
        "What is bought",
        "Lowest total owning cost",
        "Offers on\nrank 1",
        f"Total owning cost\nof the lot [{currency}]",
        f"Evaluated price\nof the lot [{currency}]",
        f"Margin to the\nnext [{currency}]",
        "in %",
    )
    sheet.headings(headings)
    for lot in view.lots:
        _lot(book, sheet, lot, rankings[lot.id])
    sheet.row += 1
    for lot in view.lots:
        sheet.paragraph(f"Lot {lot.id}: {lot.recommendation}")
        for sentence in _prices(book, lot):
            sheet.paragraph(sentence, "quiet paragraph")
        if assuming(lot):
            sheet.paragraph(assuming(lot), "assumption")
    sheet.row += 1
    sheet.paragraph("Cautions", "part")
    for caution in view.cautions:
        sheet.paragraph(f"– {caution}")
    sheet.row += 1
    sheet.paragraph("This workbook", "part")
    time = view.record.generated_at
    sheet.paragraph(f"Sentences on this sheet are as evaluated on {time}; figures in the table follow changed inputs.")
    sheet.text(sheet.row, 0, "State:", "paragraph")
    sheet.formula(sheet.row, 1, f"={verdict}", AGREE if _any_ranked(book) else "no offer is ranked", "verdict")
    sheet.row += 1
    sheet.finish()


def _prices(book: Book, lot: LotView) -> Iterator[str]:
    """What the contract would pay the first in rank, and the rank that it has without preference."""
    for offer in lot.offers if has_prices(book.view) else ():
        if offer.rank != 1:
            continue
        if offer.contract_price is not None:
            price = book.figure(offer.contract_price)
            yield f"Contract price of {offer.bidder}: {price.text} {price.unit} (sheet {CONTRACT})."
        if offer.rank_without_preference not in (None, 1):
            yield f"Without preference {offer.bidder} has rank {offer.rank_without_preference}."


def _any_ranked(book: Book) -> bool:
    return any(offer.status == "ranked" for lot in book.view.lots for offer in lot.offers)


def _lot(book: Book, sheet: Sheet, lot: LotView, ranking: LotRanking) -> None:
    row = sheet.row
    sheet.text(row, 0, lot.id, "strong text")
    sheet.text(row, 1, f"{lot.description}, {lot.quantity:,} units")
    ranked = [offer for offer in lot.offers if offer.status == "ranked"]
    if ranked:
        _first_place(book, sheet, ranking, ranked)
    else:
        sheet.text(row, 2, "no offer is ranked")
        for column in range(3, sheet.last + 1):
            sheet.text(row, column, NOTHING, "quiet number")
    sheet.row += 1


def _first_place(book: Book, sheet: Sheet, ranking: LotRanking, ranked: list[OfferView]) -> None:
    row, first = sheet.row, ranked[0]
    winners = sum(offer.rank == 1 for offer in ranked)
    names = f"{ranking.cell(1)}"
    several = f'{names}&" and "&COUNTIF({ranking.ranks},1)-1&" more (tie)"'
    text = first.bidder if winners == 1 else f"{first.bidder} and {winners - 1} more (tie)"
    sheet.formula(row, 2, f"=IF(COUNTIF({ranking.ranks},1)>1,{several},{names})", text, "strong text")
    longest = max((offer.bidder for offer in ranked), key=len)
    sheet.reserve(row, 2, f"{longest} and {len(ranked)} more (tie)", "strong text")
    sheet.formula(row, 3, f"=COUNTIF({ranking.ranks},1)", float(winners))
    margin = first.margin
    values: tuple[tuple[int, Decimal | str, str], ...] = (
        (6, _amount(book, first.lot.total_owning_cost), "total"),
        (2, _amount(book, first.lot.evaluated_price), "number"),
        (9, NOTHING if margin is None else book.figure(margin.amount).value, "number"),
        (10, NOTHING if margin is None else margin.percent_of_winner, "number"),
    )
    for column, (source, value, style) in enumerate(values, start=4):
        sheet.formula(row, column, f"={ranking.cell(source)}", value, style)


def _amount(book: Book, id: str | None) -> Decimal:
    return Decimal(0) if id is None else book.figure(id).value
