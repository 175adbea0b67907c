"""Arithmetic of the price schedule: unit price times quantity against the total, and what the announced rules say."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from ..findings import Finding
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.tender import Lot, Tender
from ..trail import Figure, constant, difference, product, quotient, read, total
from .announced import rule_clause, rule_sentence
from .identities import offer_id
from .items import pieces, quoted_item
from .price_line import quoted_price
from .result import Correction
from .schedule_error import PriceCheck, ScheduleError, schedule_error
from .shares import one, share

__all__ = ["Corrected", "correct_schedule"]

_Governs = Literal["unit price", "total", "shifted unit price"]


@dataclass(frozen=True, slots=True)
class Corrected:
    """Unit price as the evaluation uses it, and what was corrected.

    Parameters
    ----------
    unit_price : Figure or None
        As quoted or as corrected; None where it is not stated. [currency of the offer]
    units_total : Figure or None
        Price of all units where the stated total governs; else None: quantity times unit price.
    corrections : tuple of Correction
        At most one.
    findings : tuple of Finding
        What is said of an error.
    decisions : tuple of Decision
        The bidder's answer, where it is recorded.
    """

    unit_price: Figure | None
    units_total: Figure | None = None
    corrections: tuple[Correction, ...] = ()
    findings: tuple[Finding, ...] = ()
    decisions: tuple[Decision, ...] = ()


def correct_schedule(
    offer: Offer,
    tender: Tender,
    lot: Lot,
    quantity: Figure,
    decisions: Sequence[Decision],
    check: PriceCheck | None = None,
) -> Corrected:
    """Correct the price schedule of an offer by the announced rules.

    Parameters
    ----------
    offer : Offer
        As read, or with confirmed values.
    tender : Tender
        With its rules; those that the error needs must be set.
    lot : Lot
        The lot.
    quantity : Figure
        Units of the lot.
    decisions : sequence of Decision
        Decisions on this offer, in the order of the file; the last answer to the correction holds.
    check : PriceCheck, optional
        What is known of the size of the unit price.

    Returns
    -------
    Corrected
        Where the rule is ``"correct"`` the governing figure; else the unit price as quoted, with a finding.

    References
    ----------
    .. [1] World Bank standard bidding documents for goods, instructions to bidders, correction of arithmetical errors
       (from memory); bid-error clauses of several authorities: the unit price shall prevail.
    """
    quoted = quoted_price(offer)
    error = schedule_error(offer, lot, check)
    rule = tender.rules.announced.arithmetic_errors
    if quoted is None or error is None or rule is None:
        return Corrected(quoted)
    if rule == "reject":
        told = f"must add up; {error.description}"
        return Corrected(quoted, findings=(_finding("arithmetic-error-rejected", offer, error, told),))
    if rule == "take as read":
        told = f"does not add up and is not corrected, the unit price as read is evaluated; {error.description}"
        return Corrected(quoted, findings=(_finding("arithmetic-error-not-corrected", offer, error, told),))
    return _corrected(offer, tender, lot, quantity, (quoted, error), decisions)


def _corrected(
    offer: Offer,
    tender: Tender,
    lot: Lot,
    quantity: Figure,
    wrong: tuple[Figure, ScheduleError],
    decisions: Sequence[Decision],
) -> Corrected:
    quoted, error = wrong
    governs, sentence = _governing(tender, error)
    answer = _answer(decisions)
    findings = tuple(_told(offer, error, sentence, answer))
    used = () if answer is None else (answer,)
    if governs == "unit price":
        stated, whole = _stated_total(offer, error), _total_of(offer, lot, quantity, quoted)
        correction = Correction("total_price", stated, whole, sentence, error.description, answer)
        return Corrected(quoted, None, (correction,), findings, used)
    units = None if governs == "shifted unit price" else _units_of(offer, error, _items_total(offer, lot))
    unit = (
        _shifted(offer, quoted, error.shifted_places)
        if units is None
        else quotient(offer_id(offer, "corrected unit price"), "corrected unit price", quoted.unit, units, quantity)
    )
    correction = Correction("unit_price", quoted, unit, sentence, error.description, answer)
    return Corrected(unit, units, (correction,), findings, used)


def _governing(tender: Tender, error: ScheduleError) -> tuple[_Governs, str]:
    """Which figure governs, and the announced rule in a sentence."""
    announced = tender.rules.announced
    ordinary = rule_sentence(tender, "unit_price_against_total")
    if error.misplaced is not None and announced.misplaced_decimal == "total governs":
        if error.misplaced == "unit price":
            return "shifted unit price", rule_sentence(tender, "misplaced_decimal")
        if announced.unit_price_against_total == "total governs":
            rule = rule_clause(tender, "misplaced_decimal")
            return "unit price", f"{rule}; here it is the mark of the total, and the unit price governs."
        return "unit price", ordinary
    return "total" if announced.unit_price_against_total == "total governs" else "unit price", ordinary


def _shifted(offer: Offer, quoted: Figure, places: int) -> Figure:
    power = constant(f"ten to the power {places}", f"ten to the power {places}", Decimal(1).scaleb(places), "1",
                     "the decimal mark moved")  # fmt: skip
    return product(offer_id(offer, "corrected unit price"), "corrected unit price", quoted.unit, quoted, power)


def _total_of(offer: Offer, lot: Lot, quantity: Figure, quoted: Figure) -> Figure:
    """Total of the schedule by its unit price."""
    whole = product(offer_id(offer, "units"), "quantity times unit price", quoted.unit, quantity, quoted)
    name, items = offer_id(offer, "corrected total price"), _items_total(offer, lot)
    if items is None:
        return Figure(name, "corrected total price", whole.value, whole.unit, whole.source)
    return total(name, "corrected total price", whole.unit, whole, items)


def _units_of(offer: Offer, error: ScheduleError, items: Figure | None) -> Figure:
    """Price of all units in a governing total, before the discount.

    Without a reading that explains it a total holds the priced items and no discount; one that would leave nothing for
    the units has no items in it.
    """
    units, reading = _stated_total(offer, error), error.reading
    discount = offer.terms.unconditional_discount_percent
    if reading is not None and reading.is_net and discount is not None:
        part = share(offer_id(offer, "unconditional discount"), "unconditional discount", discount)
        left = difference(offer_id(offer, "left by the discount"), "one less the discount", "1", one(), part)
        units = quotient(
            offer_id(offer, "total before discount"), "stated total before discount", units.unit, units, left
        )
    if items is None or not (units.value > items.value if reading is None else reading.has_items):
        return units
    return difference(offer_id(offer, "total of the units"), "stated total less items", units.unit, units, items)


def _told(offer: Offer, error: ScheduleError, sentence: str, answer: Decision | None) -> Iterator[Finding]:
    told = f"does not add up and is corrected: {sentence.removesuffix('.')}; {error.description}"
    yield _finding("arithmetic-error-corrected", offer, error, told)
    if answer is not None and answer.kind == "refuse correction":
        rule = f"the bidder refuses the correction, by decision of {answer.when.isoformat()} ({answer.place})"
        yield _finding("correction-refused", offer, error, rule)


def _answer(decisions: Sequence[Decision]) -> Decision | None:
    """The last answer of the bidder to the correction."""
    answers = [decision for decision in decisions if decision.kind in ("accept correction", "refuse correction")]
    return answers[-1] if answers else None


def _finding(kind: str, offer: Offer, error: ScheduleError, rule: str) -> Finding:
    place = error.stated_total.place
    return Finding(kind, "price schedule", rule, place, error.stated_total.text, offer.bidder.value, offer.lot.value)


def _stated_total(offer: Offer, error: ScheduleError) -> Figure:
    currency = "" if offer.currency is None else offer.currency.value
    stated = error.stated_total
    return read(offer_id(offer, "total_price"), "total price as stated", stated.value, currency, stated.place)


def _items_total(offer: Offer, lot: Lot) -> Figure | None:
    parts = []
    for item in lot.items:
        price = quoted_item(offer, item)
        if price is not None:
            name = item.name.value
            parts.append(product(offer_id(offer, "item", name, "quoted for the lot"), f"{name}, quoted for the lot",
                                 price.unit, pieces(lot, item), price))  # fmt: skip
    return total(offer_id(offer, "items quoted"), "items quoted for the lot", parts[0].unit, *parts) if parts else None
