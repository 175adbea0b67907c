"""Sheet of the ranking: sorted live, with margins, the offers that are not ranked, and a picture of the costs."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Context, Decimal

from .view import EvaluationView, LotView, OfferView
from .workbook_cells import column_name
from .workbook_chart import insert_chart
from .workbook_evaluation import AMOUNTS, LotCells, bidder_width, money_width
from .workbook_information import assuming
from .workbook_look import decimals_of
from .workbook_sheet import NOTHING, Book, Column, Sheet

__all__ = ["RANKING", "LotRanking", "write_ranking"]

RANKING = "Ranking"

_RANK, _BIDDER, _PRICE, _TOTAL = 0, 1, 2, 6
_PER_UNIT, _ABOVE, _MARGIN, _PERCENT, _NO_LOAD_KW, _LOAD_KW, _ROW, _LABEL = range(7, 15)
_LONGEST_LABEL = 26
_DIVIDE = Context(prec=28)
_NOTE = (
    "Sorted by formulas: change an input, recalculate, and offers change places. Amounts are for the whole lot, in "
    "{currency}. The margin is the distance to the next offer, zero in a tie."
)


@dataclass(frozen=True, slots=True)
class LotRanking:
    """Rows of the ranked offers of a lot on this sheet, counted from 0, and how many there are."""

    row: int
    count: int

    def cell(self, column: int) -> str:
        """Reference to a column of the first place, from another sheet.

        Parameters
        ----------
        column : int
            Counted from 0.

        Returns
        -------
        str
            ``"Ranking!$B$9"``.
        """
        return f"{RANKING}!${column_name(column)}${self.row + 1}"

    @property
    def ranks(self) -> str:
        """Range of the ranks, from another sheet."""
        return f"{RANKING}!$A${self.row + 1}:$A${self.row + self.count}"


def write_ranking(book: Book, cells: Mapping[str, LotCells]) -> dict[str, LotRanking]:
    """Write the sheet.

    Parameters
    ----------
    book : Book
        The workbook.
    cells : mapping of str to LotCells
        Where the ranked offers of each lot stand on the sheet of the evaluation.

    Returns
    -------
    dict of str to LotRanking
        Where the ranked offers of each lot stand here.
    """
    sheet = Sheet(book, RANKING, "Ranking", _columns(book.view), _NOTE.format(currency=book.view.currency))
    rankings = {}
    for lot in book.view.lots:
        sheet.new_page()
        sheet.paragraph(f"Lot {lot.id} · {lot.description} · {lot.quantity:,} units", "band")
        rankings[lot.id] = _ranked(book, sheet, lot, cells[lot.id])
        _not_ranked(sheet, lot)
        if assuming(lot):
            sheet.paragraph(assuming(lot), "assumption")
        if rankings[lot.id].count:
            insert_chart(sheet, lot, rankings[lot.id].row, rankings[lot.id].count, _LABEL, _PRICE)
    sheet.finish()
    return rankings


def _columns(view: EvaluationView) -> tuple[Column, ...]:
    money = money_width(view)
    return (
        Column("Rank", 8, numeric=True),
        Column("Bidder", bidder_width(view)),
        Column("Evaluated\nprice", money, numeric=True),
        Column("No-load loss\nA × P0", money, numeric=True),
        Column("Load loss\nB × Pk", money, numeric=True),
        Column("Auxiliary loss\nC × Paux", money, numeric=True),
        Column("Total\nowning cost", money, numeric=True),
        Column("Total\nper unit", money, numeric=True),
        Column("Above the\nfirst", money, numeric=True),
        Column("Margin to\nthe next", money, numeric=True),
        Column("in % of\nthe first", 10, numeric=True),
        Column("as P0\n[kW]", 10, numeric=True),
        Column("as Pk\n[kW]", 10, numeric=True),
        Column("helper: row", 9, helper=True),
        Column("helper: label of the picture", 30, helper=True),
    )


def _ranked(book: Book, sheet: Sheet, lot: LotView, cells: LotCells) -> LotRanking:
    offers = [offer for offer in lot.offers if offer.status == "ranked"]
    ranking = LotRanking(sheet.row, len(offers))
    if not offers:
        sheet.paragraph("No offer is ranked.")
    longest = max((offer.bidder for offer in offers), key=len, default="")
    for position, offer in enumerate(offers):
        _sorted_amounts(book, sheet, cells, position, offer, longest)
        _margins(book, sheet, lot, ranking, position, cells.decimals)
        _label(sheet, ranking, offer)
        sheet.row += 1
    if offers:
        _highlight(sheet, ranking)
    return ranking


def _sorted_amounts(book: Book, sheet: Sheet, cells: LotCells, position: int, offer: OfferView, longest: str) -> None:
    row = sheet.row
    found = f"${column_name(_ROW)}{row + 1}"
    sheet.formula(row, _ROW, f"=MATCH({position + 1},{cells.order},0)", float(position + 1), "helper")
    sheet.formula(row, _RANK, f"=INDEX({cells.rank},{found})", float(offer.rank or 0), "total")
    sheet.formula(row, _BIDDER, f"=INDEX({cells.of_lot(0)},{found})", offer.bidder, "strong text")
    sheet.reserve(row, _BIDDER, longest, "strong text")
    per_unit = offer.per_unit.total_owning_cost
    sources = zip(AMOUNTS, cells.amount_columns(), strict=True)
    lines = [(cells.of_lot(column), getattr(offer.lot, name)) for name, column in sources]
    lines.append((cells.per_unit(cells.amount_columns()[-1]), per_unit))
    for column, (source, identity) in enumerate(lines, start=_PRICE):
        value = Decimal(0) if identity is None else book.figure(identity).value
        decimals = max(cells.decimals, decimals_of(value) if column == _PER_UNIT else 0)
        style = "total" if column == _TOTAL else "number"
        sheet.formula(row, column, f"=INDEX({source},{found})", value, style, decimals)


def _margins(book: Book, sheet: Sheet, lot: LotView, ranking: LotRanking, position: int, decimals: int) -> None:
    offer = [offer for offer in lot.offers if offer.status == "ranked"][position]
    row, margin = sheet.row, offer.margin
    total, first = f"{column_name(_TOTAL)}{row + 1}", f"{column_name(_TOTAL)}${ranking.row + 1}"
    own = f"{column_name(_MARGIN)}{row + 1}"
    above = offer.above_winner if offer.above_winner is not None else Decimal(0)
    sheet.formula(row, _ABOVE, f"=ROUND({total}-{first},{decimals})", above, "number", decimals)
    amount = None if margin is None else book.figure(margin.amount).value
    below = f"{column_name(_TOTAL)}{row + 2}"
    to_next = f"ROUND({below}-{total},{decimals})" if position + 1 < ranking.count else f'"{NOTHING}"'
    to_nearest = f"=IF({_same_total(lot, ranking, row, decimals)}>1,0,{to_next})"
    sheet.formula(row, _MARGIN, to_nearest, NOTHING if amount is None else amount, "total", decimals)
    percent = f'=IF(ISNUMBER({own}),IF({first}=0,0,ROUND(100*{own}/{first},2)),"{NOTHING}")'
    sheet.formula(row, _PERCENT, percent, NOTHING if margin is None else margin.percent_of_winner, "number", 2)
    for column, rate in ((_NO_LOAD_KW, lot.rates.no_load), (_LOAD_KW, lot.rates.load)):
        _margin_in_kw(book, sheet, lot, column, rate, own, amount)


def _ties(ranking: LotRanking, row: int) -> str:
    letters = column_name(_RANK)
    ranks = f"${letters}${ranking.row + 1}:${letters}${ranking.row + ranking.count}"
    return f"COUNTIF({ranks},${letters}{row + 1})"


def _same_total(lot: LotView, ranking: LotRanking, row: int, decimals: int) -> str:
    """Number of offers with the total of a row: those of its rank, unless the announced order parted some."""
    if not any(offer.tie_decided_by for offer in lot.offers):
        return _ties(ranking, row)
    letters = column_name(_TOTAL)
    totals = f"ROUND({letters}${ranking.row + 1}:{letters}${ranking.row + ranking.count},{decimals})"
    return f"SUMPRODUCT(--({totals}=ROUND({letters}{row + 1},{decimals})))"


def _margin_in_kw(
    book: Book, sheet: Sheet, lot: LotView, column: int, rate: str, own: str, amount: Decimal | None
) -> None:
    """The loss of one unit that costs as much as the margin."""
    rate_cell = book.addresses.find(rate).seen_from(RANKING)
    quantity = book.addresses.find(lot.quantity_figure).seen_from(RANKING)
    formula = f'=IF(ISNUMBER({own}),IF({rate_cell}=0,"{NOTHING}",{own}/({rate_cell}*{quantity})),"{NOTHING}")'
    one_kw = book.figure(rate).value * book.figure(lot.quantity_figure).value
    value = NOTHING if amount is None or not one_kw else _DIVIDE.divide(amount, one_kw)
    sheet.formula(sheet.row, column, formula, value, "number", 4)


def _label(sheet: Sheet, ranking: LotRanking, offer: OfferView) -> None:
    """Rank and bidder, shortened to what a picture has room for."""
    row = sheet.row
    bidder, rank = f"{column_name(_BIDDER)}{row + 1}", f"{column_name(_RANK)}{row + 1}"
    formula = (
        f'={rank}&IF({_ties(ranking, row)}>1," =","")&"  "'
        f'&IF(LEN({bidder})>{_LONGEST_LABEL},LEFT({bidder},{_LONGEST_LABEL - 1})&"…",{bidder})'
    )
    name = offer.bidder
    short = name if len(name) <= _LONGEST_LABEL else name[: _LONGEST_LABEL - 1] + "…"
    sheet.formula(row, _LABEL, formula, f"{offer.rank_text}  {short}", "helper")


def _highlight(sheet: Sheet, ranking: LotRanking) -> None:
    """Ground of the first place, and the sign of a tie behind a rank; both follow the recalculated ranks."""
    last = ranking.row + ranking.count - 1
    look = sheet.book.look
    tie = {"type": "formula", "criteria": f"={_ties(ranking, ranking.row)}>1"}
    sheet.page.conditional_format(
        ranking.row, _RANK, last, _RANK, {**tie, "format": look.highlight({"num_format": '0" ="'})}
    )
    first = {"type": "formula", "criteria": f"=${column_name(_RANK)}{ranking.row + 1}=1"}
    ground = look.highlight({"bg_color": "#F6EBD3"})
    sheet.page.conditional_format(ranking.row, 0, last, sheet.last, {**first, "format": ground})


def _not_ranked(sheet: Sheet, lot: LotView) -> None:
    others = [offer for offer in lot.offers if offer.status != "ranked"]
    if not others:
        return
    sheet.paragraph("Not ranked", "part")
    for offer in others:
        sheet.text(sheet.row, 0, "–", "quiet number")
        sheet.text(sheet.row, _BIDDER, offer.bidder, "strong text")
        sheet.spread(sheet.row, offer.status, "text", _PRICE, _PRICE + 1)
        sheet.spread(sheet.row, "\n".join(offer.reasons), "text", _PRICE + 2, sheet.last)
        sheet.row += 1
