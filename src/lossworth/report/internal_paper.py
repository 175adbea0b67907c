"""The internal paper on suppositions, as a page and as data; both say that it is no part of the evaluation."""

from __future__ import annotations

import json
from decimal import Decimal
from typing import Any

from .formats import amount, plain
from .internal_paper_view import CaseView, ComparedOfferView, InternalPaperView, SuspicionView
from .page_environment import environment

__all__ = ["INTERNAL_FOLDER", "INTERNAL_PAPER", "internal_paper_html", "internal_paper_json"]

#: Folder of the paper inside that of the papers, and its name without ending.
INTERNAL_FOLDER, INTERNAL_PAPER = "internal", "suppositions"
FORMAT_VERSION = 1
_TOTAL = {False: "total_owning_cost_per_unit", True: "total_owning_cost_of_lot"}


def internal_paper_html(paper: InternalPaperView) -> str:
    """The paper as one page that asks for nothing outside itself.

    Parameters
    ----------
    paper : InternalPaperView
        What it shows; texts from bidders' files are escaped here.

    Returns
    -------
    str
        The page; the same view gives the same text.
    """
    return environment().get_template("internal_paper.html.j2").render(paper=paper, money=_money)


def internal_paper_json(paper: InternalPaperView) -> str:
    """The paper as JSON text.

    Parameters
    ----------
    paper : InternalPaperView
        What it shows.

    Returns
    -------
    str
        UTF-8 text with a final newline; amounts are decimal strings. ``mark`` stands first.
    """
    content = {
        "mark": paper.mark,
        "format_version": FORMAT_VERSION,
        "tender": {
            "reference": paper.reference,
            "title": paper.title,
            "buyer": paper.buyer,
            "currency": paper.currency,
            "remark": paper.remark or None,
        },
        "notes": list(paper.notes),
        "suspicions": [_suspicion(number, each) for number, each in enumerate(paper.suspicions, start=1)],
        "rankings": [_case(each) for each in paper.cases],
        "generated_at": paper.generated_at,
        "tool_version": paper.tool_version,
    }
    return json.dumps(content, ensure_ascii=False, indent=2) + "\n"


def _suspicion(number: int, suspicion: SuspicionView) -> dict[str, Any]:
    return {
        "number": number,
        "offer": suspicion.offer,
        "lot": suspicion.lot,
        "kind": suspicion.kind,
        "statement": suspicion.statement,
        "place": suspicion.place or None,
        "question": suspicion.question,
        "suppositions": [
            {
                "field": each.field,
                "as_read": each.as_read,
                "place": each.place,
                "supposed": each.supposed,
                "unit": each.unit,
                "reason": each.reason,
                "proof": each.proof,
                "proved_by_bid": each.is_proved_by_bid,
            }
            for each in suspicion.suppositions
        ],
    }


def _case(case: CaseView) -> dict[str, Any]:
    return {
        "lot": case.lot,
        "suspicions": list(case.suspicions),
        "sentence": case.sentence,
        "offers": [_offer(each, _TOTAL[case.is_of_lot]) for each in case.offers],
    }


def _offer(offer: ComparedOfferView, total: str) -> dict[str, Any]:
    return {
        "offer": offer.offer,
        "supposed": offer.is_suspected,
        "as_evaluated": _side(offer.status_before, offer.rank_before, {total: offer.total_before}),
        "if_right": _side(offer.status_after, offer.rank_after, {total: offer.total_after}),
    }


def _side(status: str, rank: int | None, totals: dict[str, Decimal | None]) -> dict[str, Any]:
    shown = {name: None if total is None else plain(total) for name, total in totals.items()}
    return {"status": status, "rank": rank, **shown}


def _money(value: Decimal | None) -> str:
    return "" if value is None else amount(value, max(0, -int(value.as_tuple().exponent)))
