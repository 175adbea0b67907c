"""Commercial terms of one offer against the announced rules: what leaves it out, and what is only worth knowing."""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterable, Iterator
from dataclasses import dataclass
from decimal import Decimal

from ..findings import Finding
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Tender
from .announced import rule_clause, rule_place
from .clerical_errors_suspicion import ASK
from .loss_tolerance import claims_tolerance
from .payment_terms import payments_differ
from .shares import percent_text

__all__ = ["CHECKS", "check_terms", "terms_stated"]


#: Discounts outside of these bounds are asked about. Common practice, no source. [percent]
_USUAL_DISCOUNTS = (Decimal(1), Decimal(30))
_WHOLE = Decimal(100)
_ASK_DISCOUNT = (
    f"{ASK}please verify the {{field}} that you state: that it is a percentage with its decimal mark in place."
)
_ASKED = {"tax_included": "tax", "delivery_term": "delivery term", "origin": "origin"}


@dataclass(frozen=True, slots=True)
class Terms:
    """An offer, its tender, and the terms that any offer of its lot states."""

    offer: Offer
    tender: Tender
    stated_by_some: Collection[str]

    def finding(self, kind: str, field: str, rule: str, column: str, got: str | None) -> Finding:
        """Finding at the cell of a column, or at the row where the table has no such column."""
        place = self.offer.columns.get(column, self.offer.place)
        return Finding(kind, field, rule, place, got, self.offer.bidder.value, self.offer.lot.value)


Check = Callable[[Terms], Iterable[Finding]]


def terms_stated(offers: Iterable[Offer]) -> frozenset[str]:
    """Terms that at least one of some offers states.

    Parameters
    ----------
    offers : iterable of Offer
        All offers of a lot.

    Returns
    -------
    frozenset of str
        Of ``"tax_included"``, ``"delivery_term"`` and ``"origin"``.
    """
    return frozenset(name for offer in offers for name in _ASKED if getattr(offer.terms, name) is not None)


def check_terms(offer: Offer, tender: Tender, stated_by_some: Collection[str]) -> tuple[Finding, ...]:
    """All findings on the commercial terms of an offer.

    Parameters
    ----------
    offer : Offer
        The offer.
    tender : Tender
        With its rules; those that the offer needs must be set.
    stated_by_some : collection of str
        As `terms_stated` gives it: what others of the lot state is worth a note where this offer does not.

    Returns
    -------
    tuple of Finding
        In the order of `CHECKS`.
    """
    terms = Terms(offer, tender, stated_by_some)
    return tuple(finding for check in CHECKS for finding in check(terms))


def check_price_basis(terms: Terms) -> Iterator[Finding]:
    """A variable price, by the rule on price variation."""
    rule = terms.tender.rules.announced.price_variation
    if terms.offer.terms.price_basis != "variable" or rule is None:
        return
    kind = "price-variable" if rule == "reject variable prices" else "price-variable-at-base-date"
    said = "must be firm" if kind == "price-variable" else "follows an index"
    sentence = rule_clause(terms.tender, "price_variation")
    yield terms.finding(kind, "price basis", f"{said}: {sentence}", "price_basis", "variable")


def check_tolerance(terms: Terms) -> Iterator[Finding]:
    """A claimed tolerance on losses, by the rule on tolerances."""
    rules, claimed = terms.tender.rules.announced, terms.offer.terms.claimed_tolerance_percent
    if claimed is None or not claims_tolerance(terms.offer) or rules.loss_tolerance is None:
        return
    sentence = rule_clause(terms.tender, "loss_tolerance")
    allowed = rules.loss_tolerance_percent
    got = percent_text(claimed)
    if rules.loss_tolerance == "none, the guarantee is a ceiling":
        rule = f"must not be claimed: {sentence}"
        yield Finding("tolerance-not-accepted", "tolerance on losses", rule, claimed.place, got, *_who(terms.offer))
    elif allowed is not None and claimed.value > allowed.value:
        rule = f"must not exceed {allowed.value} % ({rule_place(terms.tender, 'loss_tolerance_percent')})"
        yield Finding("tolerance-not-accepted", "tolerance on losses", rule, claimed.place, got, *_who(terms.offer))
    elif rules.loss_tolerance == "evaluate at guarantee plus tolerance":
        rule = f"is added to the guaranteed losses: {sentence}"
        yield Finding("tolerance-added", "tolerance on losses", rule, claimed.place, got, *_who(terms.offer))


def check_discounts(terms: Terms) -> Iterator[Finding]:
    """Discounts that cannot be, that are worth a question, and that the rules leave out of the comparison."""
    stated, rules = terms.offer.terms, terms.tender.rules.announced
    discounts: tuple[tuple[str, str, Quantity | None], ...] = (
        ("unconditional discount", "unconditional_discounts", stated.unconditional_discount_percent),
        ("prompt payment discount", "prompt_payment_discounts", stated.prompt_payment_discount_percent),
    )
    for field, key, discount in discounts:
        if discount is None or discount.value <= 0:
            continue
        got, who = percent_text(discount), _who(terms.offer)
        if discount.value >= _WHOLE:
            yield Finding("value-out-of-bounds", field, "must be below 100 %", discount.place, got, *who)
        elif discount.value > _USUAL_DISCOUNTS[1] or discount.value < _USUAL_DISCOUNTS[0]:
            low, high = _USUAL_DISCOUNTS
            rule = f"is seldom below {low} or above {high} percent; a share of one may stand for a percentage"
            yield Finding("discount-unusual", field, rule, discount.place, got, *who, _ASK_DISCOUNT.format(field=field))
        if getattr(rules, key) == "ignore":
            rule = f"is not counted: {rule_clause(terms.tender, key)}"
            yield Finding("discount-not-counted", field, rule, discount.place, got, *who)


def check_payment_terms(terms: Terms) -> Iterator[Finding]:
    """Payment terms of its own, where the rule leaves them out of the comparison."""
    if terms.tender.rules.announced.payment_terms == "ignore" and payments_differ(terms.offer, terms.tender):
        rule = f"are not counted: {rule_clause(terms.tender, 'payment_terms')}"
        yield terms.finding("payment-terms-not-counted", "payments", rule, "payments", None)


def check_silence(terms: Terms) -> Iterator[Finding]:
    """Terms that other offers of the lot state and this one does not, where an announced rule uses them."""
    rules = terms.tender.rules.announced
    is_used = {
        "tax_included": rules.taxes is not None,
        "delivery_term": True,
        "origin": rules.preference == "margin added to other prices",
    }
    for name, label in _ASKED.items():
        if is_used[name] and getattr(terms.offer.terms, name) is None and name in terms.stated_by_some:
            outside = "; it counts as outside of the group" if name == "origin" else "; it is taken as asked"
            yield terms.finding("commercial-term-not-stated", label, f"is stated by others{outside}", name, "")


def check_validity(terms: Terms) -> Iterator[Finding]:
    """End of the bid's validity against the planned award."""
    ends, award = terms.offer.terms.valid_until, terms.tender.planned_award
    if ends is not None and award is not None and ends < award:
        rule = f"must reach the planned award of {award.isoformat()}"
        yield terms.finding("validity-before-award", "validity", rule, "valid_until", ends.isoformat())


def check_deviations(terms: Terms) -> Iterator[Finding]:
    """Deviations from the tender that the bidder states."""
    stated = terms.offer.terms.deviations
    if stated is not None and stated.value.strip():
        rule = "are stated by the bidder; whether each is material is for the buyer to decide"
        yield Finding("deviation-stated", "deviations", rule, stated.place, stated.value, *_who(terms.offer))


def _who(offer: Offer) -> tuple[str, str]:
    return offer.bidder.value, offer.lot.value


CHECKS: tuple[Check, ...] = (
    check_price_basis,
    check_tolerance,
    check_discounts,
    check_payment_terms,
    check_silence,
    check_validity,
    check_deviations,
)
