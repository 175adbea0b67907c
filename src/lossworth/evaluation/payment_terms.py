"""Payment terms that differ from the tender's, as interest on the price: later payment is worth less to the bidder."""

from __future__ import annotations

from collections.abc import Iterable
from decimal import Decimal

from ..findings import Finding
from ..records.bid import Offer
from ..records.commercial import Payment, PaymentTerms
from ..records.tender import Tender
from ..trail import Figure, constant, product, quotient, read, total
from .identities import figure_id, offer_id
from .shares import one_and, share

__all__ = ["check_payments", "payment_ratio", "payments_differ"]


def payments_differ(offer: Offer, tender: Tender) -> bool:
    """Whether an offer states payments other than the tender's own.

    Parameters
    ----------
    offer : Offer
        Which states a schedule, or follows the tender's.
    tender : Tender
        With its own schedule, or without.

    Returns
    -------
    bool
        True also where the offer states payments and the tender none.
    """
    if not offer.terms.payments:
        return False
    own = tender.payment_terms
    return own is None or _by_week(offer.terms.payments) != _by_week(own.payments)


def check_payments(offer: Offer) -> Iterable[Finding]:
    """The shares of a stated payment schedule make the whole price.

    Parameters
    ----------
    offer : Offer
        The offer.

    Yields
    ------
    Finding
        Where they do not.
    """
    payments = offer.terms.payments
    together = sum((payment.share.value for payment in payments), Decimal(0))
    if payments and together != 1:
        got = f"{(100 * together).normalize():f} %"
        place, who = payments[0].share.place, (offer.bidder.value, offer.lot.value)
        yield Finding("value-out-of-bounds", "payments", "must add up to 100 % of the price", place, got, *who)


def payment_ratio(offer: Offer, tender: Tender) -> Figure | None:
    """Worth of the offered payments over that of the tender's own payments, both on the day of the order.

    Parameters
    ----------
    offer : Offer
        The offer.
    tender : Tender
        With its rule, its interest rate and its own schedule.

    Returns
    -------
    Figure or None
        None where the rule does not count payment terms, or the offer has those of the tender. [1]

    Notes
    -----
    A payment after w weeks is worth share / (1 + i w / 52) on the day of the order, i being the announced yearly rate:
    simple interest, as is usual within the time of one contract, so that a reader can follow it. Payments are brought
    to the same date for the offer and for the tender, and a bid on the tender's own terms keeps its price.

    References
    ----------
    .. [1] Deviation in payment schedule, goods bidding document, Section III (from memory); the formula is ours.
    """
    terms = tender.payment_terms
    counts = tender.rules.announced.payment_terms == "discount to a common date"
    if not counts or terms is None or not payments_differ(offer, tender):
        return None
    theirs = _worth(offer.terms.payments, terms, offer_id(offer, "payments"), "of the bidder")
    own = _worth(terms.payments, terms, figure_id("payment terms"), "of the tender")
    name = "worth of the bidder's payments over that of the tender's"
    return quotient(offer_id(offer, "payments", "ratio"), name, "1", theirs, own)


def _worth(payments: Iterable[Payment], terms: PaymentTerms, identity: str, whose: str) -> Figure:
    """Present worth of payments of one unit of money in all."""
    rate = share(figure_id("payment terms", "rate"), "interest rate", terms.interest_rate_percent, "%/year")
    weeks_of_year = constant("weeks in a year", "weeks in a year", Decimal(52), "weeks/year", "counted as 52")
    parts = []
    for number, payment in enumerate(payments, start=1):
        name, label = f"{identity}/{number}", f"payment {number} {whose}"
        part = read(f"{name}/share", f"{label}, share", payment.share.value, "1", payment.share.place)
        due = payment.weeks_after_order
        weeks = read(f"{name}/weeks", f"{label}, due", due.value, "weeks", due.place)
        years = quotient(f"{name}/years", f"{label}, due in years", "year", weeks, weeks_of_year)
        interest = product(f"{name}/interest", f"{label}, interest", "1", rate, years)
        growth = one_and(f"{name}/growth", f"{label}, one and interest", interest)
        parts.append(quotient(f"{name}/worth", f"{label}, worth on the day of the order", "1", part, growth))
    return total(f"{identity}/worth", f"payments {whose}, worth on the day of the order", "1", *parts)


def _by_week(payments: Iterable[Payment]) -> dict[Decimal, Decimal]:
    due: dict[Decimal, Decimal] = {}
    for payment in payments:
        week = payment.weeks_after_order.value
        due[week] = due.get(week, Decimal(0)) + payment.share.value
    return {week: part for week, part in due.items() if part}
