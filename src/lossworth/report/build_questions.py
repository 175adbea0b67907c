"""From suspicions to letters: what each bidder is asked, in words that give nothing away about any other offer."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from ..evaluation.clerical_errors_suspicion import ASK, Statement, Suspicion
from ..findings import Finding, Place, one_line
from ..records.bid import Offer
from ..records.tender import Lot, Tender
from .letters_names import file_stems
from .letters_view import LetterView, QuestionView, StatementView

__all__ = ["build_letters"]

_OPENING = (
    "On reading your bid we came upon the statements below and ask you to verify them. Nothing in your bid has been "
    "changed, and no conclusion has been drawn.",
    "Please answer each question in writing and name the page, sheet or cell of your bid that shows the answer.",
)
_CLOSING = {
    "may not change price or guarantee": (
        "By the rules of this tender a clarification explains what your bid says. It changes neither what you ask to "
        "be paid nor a guaranteed value."
    ),
    "may confirm what the bid itself proves": (
        "By the rules of this tender a clarification may confirm a value that your bid itself proves, and changes "
        "nothing else."
    ),
}
_CAUTION = (
    "Guaranteed values stay subject to type and routine tests. The tender documents, procurement law and local codes "
    "govern; a licensed engineer decides on technical matters."
)
#: Kinds beside those of apparent errors whose remedy is a question to the bidder.
_OTHER_QUESTIONS = ("loss-basis-differs", "cooling-differs")
#: A letter shows neither this amount nor the header of its column.
_MONEY = "unit_price"
_SHORTEST_WORD = 4


@dataclass(frozen=True, slots=True)
class _Asked:
    """One question on its way: the offer, the sentences, and what the offer states."""

    offer: Offer
    question: str
    statements: tuple[Statement, ...]


def build_letters(
    tender: Tender, offers: Iterable[Offer], suspicions: Iterable[Suspicion], findings: Iterable[Finding] = ()
) -> tuple[LetterView, ...]:
    """One letter for each bidder that is asked something.

    Parameters
    ----------
    tender : Tender
        As announced.
    offers : iterable of Offer
        All offers, also of bidders that are asked nothing: file names depend on all.
    suspicions : iterable of Suspicion
        Apparent errors.
    findings : iterable of Finding
        Of the evaluation; those on another loss basis carry a question as well.

    Returns
    -------
    tuple of LetterView
        In the order of the bidders' names. A letter shows figures of the bidder's own schedule alone: no rank, no
        amount of money, no other bidder, and no place in a file that other bidders' offers stand in.
    """
    everybody = tuple(offers)
    asked = [*_of_suspicions(everybody, suspicions), *_of_findings(everybody, findings)]
    stems = file_stems(offer.bidder.value for offer in everybody)
    order = {lot.id: number for number, lot in enumerate(tender.lots)}
    letters = []
    for bidder in sorted(stems):
        own = [each for each in asked if each.offer.bidder.value == bidder]
        own.sort(key=lambda each: order.get(each.offer.lot.value, len(order)))
        if own:
            letters.append(_letter(tender, bidder, stems[bidder], own, everybody))
    return tuple(letters)


def _of_suspicions(offers: Sequence[Offer], suspicions: Iterable[Suspicion]) -> Iterable[_Asked]:
    by_name = {(offer.name, offer.lot.value): offer for offer in offers}
    for each in suspicions:
        offer = by_name.get((each.offer, each.finding.lot or ""))
        if offer is not None:
            yield _Asked(offer, each.finding.remedy.removeprefix(ASK), each.statements)


def _of_findings(offers: Sequence[Offer], findings: Iterable[Finding]) -> Iterable[_Asked]:
    for finding in findings:
        if finding.kind not in _OTHER_QUESTIONS or not finding.fix.startswith(ASK):
            continue
        of_bidder = [o for o in offers if (o.bidder.value, o.lot.value) == (finding.bidder, finding.lot)]
        for offer in of_bidder[:1]:
            stated = Statement("", finding.field, finding.got or "", finding.place or offer.place)
            yield _Asked(offer, finding.fix.removeprefix(ASK), (stated,))


def _letter(tender: Tender, bidder: str, stem: str, asked: Sequence[_Asked], everybody: Sequence[Offer]) -> LetterView:
    identity, rule = tender.identity, tender.rules.announced.clarifications
    rivals = {offer.bidder.value for offer in everybody} - {bidder}
    shared = {offer.place.file for offer in everybody if offer.bidder.value in rivals}
    questions = tuple(
        QuestionView(
            number,
            one_line(each.offer.lot.value),
            _description(tender.lot(each.offer.lot.value), each.offer),
            tuple(_statement(s, each.offer, shared, rivals) for s in each.statements),
            one_line(each.question[:1].upper() + each.question[1:]),
        )
        for number, each in enumerate(asked, start=1)
    )
    return LetterView(
        bidder=one_line(bidder),
        file_stem=stem,
        reference=one_line(identity.reference.value),
        title=one_line(identity.title.value),
        buyer=one_line(identity.buyer.value),
        opening_date=identity.opening_date.isoformat() if identity.opening_date else "",
        remark=one_line(identity.remark.value) if identity.remark else "",
        opening=_OPENING,
        questions=questions,
        closing=(*((_CLOSING[rule],) if rule else ()), _CAUTION),
    )


def _description(lot: Lot | None, offer: Offer) -> str:
    text = lot.description.value if lot else ""
    return one_line(f"{text}, alternative {offer.alternative}" if offer.alternative else text)


def _statement(statement: Statement, offer: Offer, shared: set[str], rivals: set[str]) -> StatementView:
    """What the bidder stated and where; of an amount of money only where."""
    is_own = statement.place.file == offer.place.file and offer.place.file not in shared
    place = _own_place(statement, rivals) if is_own else ""
    if statement.field == _MONEY:
        return StatementView("amount for one unit", "as you state it", place)
    return StatementView(statement.label, one_line(statement.text), place)


def _own_place(statement: Statement, rivals: set[str]) -> str:
    """Place within the bidder's own file; nothing where a name in it would give a rival away."""
    words = _place_words(statement.place, with_column=statement.field != _MONEY)
    return "" if _names_one_of(rivals, words) else words


def _place_words(place: Place, *, with_column: bool) -> str:
    words = [one_line(place.file.rsplit("/", 1)[-1])]
    if place.sheet is not None:
        words.append(f"sheet {one_line(place.sheet)}")
    if place.cell is not None:
        words.append(f"cell {place.cell}")
    if place.line is not None:
        words.append(f"line {place.line}")
    if place.column is not None and with_column:
        words.append(f"column {one_line(place.column)}")
    return ", ".join(words)


def _names_one_of(names: Iterable[str], text: str) -> bool:
    folded = text.casefold()
    for name in names:
        first = name.casefold().split()[:1]
        if name.casefold() in folded or (first and len(first[0]) >= _SHORTEST_WORD and first[0] in folded):
            return True
    return False
