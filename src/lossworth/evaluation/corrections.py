"""Arithmetic of the price schedule: unit price times quantity against the total, and what the announced rules say."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal

from ..findings import Finding
from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..trail import Figure, difference, product, quotient, read, total
from .announced import rule_sentence
from .identities import offer_id
from .items import pieces, quoted_item, stated_item_price
from .price_line import quoted_price
from .result import Correction

__all__ = ["Corrected", "ScheduleError", "correct_schedule", "schedule_error"]

_MOST_PLACES = 6
_HALF = Decimal("0.5")


@dataclass(frozen=True, slots=True)
class ScheduleError:
    """A price schedule whose figures do not add up.

    Parameters
    ----------
    stated_total : Quantity
        Total as stated. [currency of the offer]
    computed_total : Decimal
        Unit price times quantity, with the items that the bidder prices. [currency of the offer]
    shifted_places : int
        Places by which the decimal mark of the unit price is misplaced; 0 where a shift does not explain the total.
    """

    stated_total: Quantity
    computed_total: Decimal
    shifted_places: int

    @property
    def description(self) -> str:
        """What does not add up, in words."""
        text = f"unit price times quantity is {_plain(self.computed_total)}, the stated total {self.stated_total.text}"
        if not self.shifted_places:
            return text
        side = "left" if self.shifted_places > 0 else "right"
        return f"{text}; the decimal mark of the unit price stands {abs(self.shifted_places)} places too far {side}"


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


def schedule_error(offer: Offer, lot: Lot, quantum: Decimal) -> ScheduleError | None:
    """Compare unit price times quantity with the stated total.

    Parameters
    ----------
    offer : Offer
        With unit price, total, and prices of items.
    lot : Lot
        With the quantity and the items.
    quantum : Decimal
        Smallest amount to which the tender rounds money.

    Returns
    -------
    ScheduleError or None
        None where nothing can be compared, or the figures agree: to half a unit of the last digit of the total, with
        or without the items that the bidder prices, before or after its unconditional discount.

    Notes
    -----
    The decimal mark is misplaced where a unit price times a power of ten gives the total within the same bound.
    """
    unit, stated = offer.unit_price, offer.terms.total_price
    if unit is None or stated is None or (offer.quantity and offer.quantity.value != lot.quantity.value):
        return None
    bound = max(_half_of_last_digit(stated), quantum * _HALF)
    units, items = ARITHMETIC.multiply(unit.value, lot.quantity.value), _items(offer, lot)
    if any(abs(sum_ - stated.value) <= bound for sum_ in _readings(units, items, offer)):
        return None
    shifts = (
        places
        for places in _nearest_first()
        if any(abs(sum_ - stated.value) <= bound for sum_ in _readings(units.scaleb(places), items, offer))
    )
    return ScheduleError(stated, units + items, next(shifts, 0))


def correct_schedule(
    offer: Offer, tender: Tender, lot: Lot, quantity: Figure, decisions: Sequence[Decision]
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
    error = schedule_error(offer, lot, tender.rules.rounding.quantum)
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
    announced = tender.rules.announced
    by_shift = bool(error.shifted_places) and announced.misplaced_decimal == "total governs"
    key = "misplaced_decimal" if by_shift else "unit_price_against_total"
    sentence = rule_sentence(tender, key)
    answer = _answer(decisions)
    findings = tuple(_told(offer, error, sentence, answer))
    used = () if answer is None else (answer,)
    stated = _stated_total(offer, error)
    items = _items_total(offer, lot)
    if by_shift or announced.unit_price_against_total == "total governs":
        units = _units_of(offer, stated, items)
        unit = quotient(offer_id(offer, "corrected unit price"), "corrected unit price", quoted.unit, units, quantity)
        correction = Correction("unit_price", quoted, unit, sentence, error.description, answer)
        return Corrected(unit, units, (correction,), findings, used)
    whole = product(offer_id(offer, "units"), "quantity times unit price", quoted.unit, quantity, quoted)
    name = offer_id(offer, "corrected total price")
    corrected = (
        Figure(name, "corrected total price", whole.value, whole.unit, whole.source)
        if items is None
        else total(name, "corrected total price", whole.unit, whole, items)
    )
    correction = Correction("total_price", stated, corrected, sentence, error.description, answer)
    return Corrected(quoted, None, (correction,), findings, used)


def _units_of(offer: Offer, stated: Figure, items: Figure | None) -> Figure:
    """Price of all units in a stated total; a total that would leave nothing for them has no items in it."""
    if items is None or stated.value <= items.value:
        return stated
    return difference(offer_id(offer, "total of the units"), "stated total less items", stated.unit, stated, items)


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


def _items(offer: Offer, lot: Lot) -> Decimal:
    """Sum of the items that the bidder prices, those included that do not count."""
    prices = ((item, stated_item_price(offer, item)) for item in lot.items)
    return sum((item.quantity.value * price.value for item, price in prices if price is not None), Decimal(0))


def _items_total(offer: Offer, lot: Lot) -> Figure | None:
    parts = []
    for item in lot.items:
        price = quoted_item(offer, item)
        if price is not None:
            name = item.name.value
            parts.append(product(offer_id(offer, "item", name, "quoted for the lot"), f"{name}, quoted for the lot",
                                 price.unit, pieces(lot, item), price))  # fmt: skip
    return total(offer_id(offer, "items quoted"), "items quoted for the lot", parts[0].unit, *parts) if parts else None


def _readings(units: Decimal, items: Decimal, offer: Offer) -> Iterator[Decimal]:
    """Sums that a bidder may have meant by its total."""
    discount = offer.terms.unconditional_discount_percent
    left = Decimal(1) if discount is None else 1 - ARITHMETIC.divide(discount.value, Decimal(100))
    for whole in (units, units + items):
        yield whole
        yield whole * left


def _half_of_last_digit(stated: Quantity) -> Decimal:
    """Half a unit of the last digit behind the decimal mark; half a unit for a whole number."""
    exponent = min(int(stated.stated.as_tuple().exponent), 0)
    return _HALF.scaleb(exponent)


def _nearest_first() -> Iterator[int]:
    for places in range(1, _MOST_PLACES + 1):
        yield places
        yield -places


def _plain(value: Decimal) -> str:
    return f"{value.normalize():f}"
