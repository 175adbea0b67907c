"""Apparent clerical errors that a transformer engineer would see: each a question to the bidder, never a change."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Callable, Collection, Iterable, Iterator

from ..records.bid import Offer
from ..records.tender import Tender
from .clerical_errors_basis import (
    check_loss_sums,
    check_rating,
    check_reference_temperature,
    check_total_as_load_loss,
)
from .clerical_errors_comparison import LotSeen, Seen
from .clerical_errors_factors import check_decimal_mark, check_phases, check_swapped_losses, check_unit_of_losses
from .clerical_errors_plausibility import check_declared_efficiency, check_low_losses, check_resistance
from .clerical_errors_price import check_price
from .clerical_errors_suspicion import Suspicion

__all__ = ["CHECKS", "Check", "find_clerical_errors"]

Check = Callable[[Seen], Iterator[Suspicion]]

#: In this order: what an earlier check explains by a figure, a later one does not ask about again.
CHECKS: tuple[Check, ...] = (
    check_unit_of_losses,
    check_total_as_load_loss,
    check_swapped_losses,
    check_reference_temperature,
    check_decimal_mark,
    check_rating,
    check_phases,
    check_loss_sums,
    check_resistance,
    check_declared_efficiency,
    check_low_losses,
    check_price,
)


def find_clerical_errors(
    tender: Tender, offers: Iterable[Offer], confirmed: Collection[tuple[str, str, str]] = ()
) -> tuple[Suspicion, ...]:
    """Apparent clerical errors of all offers.

    Parameters
    ----------
    tender : Tender
        As announced.
    offers : iterable of Offer
        As read, or with values that the bidders confirmed.
    confirmed : collection of (str, str, str)
        Name of the offer, lot and field of what a bidder has confirmed: it is not asked again.

    Returns
    -------
    tuple of Suspicion
        By lot in the order of the tender, then in the order of the offers and of `CHECKS`. Their findings are notes:
        none changes a figure, a status or a rank.

    Notes
    -----
    A figure is compared with the bidder's own schedule, with bands of plausible losses, with the lot's limits, and
    with the median of the other bidders' base offers. The median is used where at least two others state the figure
    and most of them lie within a factor of two of it; checks that go by size alone want three.
    """
    by_lot: dict[str, list[Offer]] = defaultdict(list)
    base: dict[str, list[Offer]] = defaultdict(list)
    for offer in offers:
        by_lot[offer.lot.value].append(offer)
        if offer.alternative is None:
            base[offer.bidder.value].append(offer)
    lots = {lot.id: LotSeen(tender, lot, by_lot[lot.id]) for lot in tender.lots}
    found: list[Suspicion] = []
    for lot in tender.lots:
        for offer in by_lot[lot.id]:
            own = base[offer.bidder.value]
            elsewhere = tuple((o, lots[o.lot.value]) for o in own if o.lot.value != lot.id and o.lot.value in lots)
            found += _of_one_offer(Seen(offer, lots[lot.id], elsewhere), confirmed)
    return tuple(found)


def _of_one_offer(seen: Seen, confirmed: Collection[tuple[str, str, str]]) -> Iterator[Suspicion]:
    offer = seen.offer
    settled = {field for name, lot, field in confirmed if (name, lot) == (offer.name, offer.lot.value)}
    for check in CHECKS:
        for suspicion in check(seen):
            if settled.isdisjoint(suspicion.fields):
                yield suspicion
                settled |= {supposition.field for supposition in suspicion.suppositions}
