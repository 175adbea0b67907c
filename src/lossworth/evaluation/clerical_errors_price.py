"""A price far from the others, from the buyer's estimate, or from the bidder's own prices for other lots."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

from ..money import ARITHMETIC
from ..records.quantity import Quantity
from ..trail import read
from .clerical_errors_comparison import FEWEST_PRICES, Peers, Seen
from .clerical_errors_suspicion import Supposition, Suspicion, half_digit, shown, stated, suppose, suspect
from .corrections import correct_schedule
from .identities import figure_id
from .schedule_error import PriceCheck, price_levels

__all__ = ["check_price"]

#: Below this share of the median or of the estimate a price is abnormally low (20 percent below; from memory).
_ABNORMALLY_LOW = Decimal("0.8")
#: Above this multiple it is far from the others. Common practice, no source.
_FAR_ABOVE = Decimal(2)
#: A bidder's ratio to the others in this lot against that in its other lots. Common practice, no source.
_OWN_LOTS = (Decimal("0.75"), Decimal("1.33"))
_FEWEST_OWN_LOTS = 2
#: A price brought back by a slip of the decimal mark or the quantity comes this near to the median.
_NEAR = (Decimal("0.7"), Decimal("1.4"))
_SHIFTS = (Decimal(10), Decimal("0.1"), Decimal(100), Decimal("0.01"), Decimal(1000), Decimal("0.001"))


def check_price(seen: Seen) -> Iterator[Suspicion]:
    """A unit price that is abnormally low, far above the others, or out of line with the bidder's own lots.

    Prices are compared as quoted, and as the announced rule corrects their arithmetic, in the evaluation currency and
    before any adjustment.
    """
    price, stated_price = seen.here.price(seen.offer), seen.offer.unit_price
    if price is None or stated_price is None:
        return
    signs = [*_against_others(seen, price), *_against_estimate(seen, price), *_against_own_lots(seen, price)]
    corrected = _corrected(seen, price, stated_price)
    if corrected is not None:
        again = (*_against_others(seen, corrected), *_against_estimate(seen, corrected))
        signs += [f"as corrected by the announced rule, {sign}" for sign in again]
    if not signs:
        return
    rule = f"lies far from what is usual: {'; '.join(signs)}"
    question = (
        "please verify the amount that you state for one unit: that it is for one unit and not for the lot, in the "
        "currency stated, with its decimal mark where you mean it, and for the whole scope that the tender describes. "
        "If you confirm it, please show how it is made up and how the scope can be performed for it."
    )
    found = _slip(seen, price, stated_price)
    yield suspect(
        seen.offer,
        "apparent-error-price",
        ("unit_price",),
        rule,
        question,
        suppositions=() if found is None else (found,),
    )


def _corrected(seen: Seen, price: Decimal, quoted: Quantity) -> Decimal | None:
    """The price after the correction of arithmetic; None where the rules leave it as it is."""
    offer, lot = seen.offer, seen.here.lot
    units = read(figure_id(f"lot {lot.id}", "quantity"), "quantity", lot.quantity.value, "units", lot.quantity.place)
    check = PriceCheck(price_levels(offer, seen.here))
    figure = correct_schedule(offer, seen.here.tender, lot, units, (), check).unit_price
    if figure is None or figure.value == quoted.value:
        return None
    return ARITHMETIC.divide(ARITHMETIC.multiply(price, figure.value), quoted.value)


def _percent(price: Decimal, other: Decimal) -> str:
    change = shown(abs(100 * (1 - price / other)), 3)
    return f"{change} % {'below' if price < other else 'above'}"


def _peers(seen: Seen) -> Peers | None:
    peers = seen.peers("unit_price")
    return peers if peers is not None and peers.count >= FEWEST_PRICES else None


def _against_others(seen: Seen, price: Decimal) -> Iterator[str]:
    peers = _peers(seen)
    if peers is not None and not _ABNORMALLY_LOW * peers.median <= price <= _FAR_ABOVE * peers.median:
        yield f"{_percent(price, peers.median)} {peers}"


def _against_estimate(seen: Seen, price: Decimal) -> Iterator[str]:
    estimate = seen.here.lot.estimated_unit_price
    if estimate is not None and not _ABNORMALLY_LOW * estimate.value <= price <= _FAR_ABOVE * estimate.value:
        yield f"{_percent(price, estimate.value)} the buyer's estimate ({estimate.place})"


def _against_own_lots(seen: Seen, price: Decimal) -> Iterator[str]:
    """The bidder's price level in this lot beside its price level in the others."""
    peers = _peers(seen)
    if peers is None:
        return
    levels = [level for offer, lot in seen.elsewhere if (level := lot.price_level(offer)) is not None]
    if len(levels) < _FEWEST_OWN_LOTS:
        return
    levels.sort()
    usual = (levels[(len(levels) - 1) // 2] + levels[len(levels) // 2]) / 2
    here = ARITHMETIC.divide(price, peers.median)
    low, high = _OWN_LOTS
    if not low * usual <= here <= high * usual:
        yield (
            f"at {shown(100 * here, 3)} % of the median of the others, where the bidder's {len(levels)} other lots are "
            f"at {shown(100 * usual, 3)} %"
        )


def _slip(seen: Seen, price: Decimal, quoted: Quantity) -> Supposition | None:
    """The price with its decimal mark moved, or divided by the quantity, where that brings it to the others."""
    peers = _peers(seen)
    if peers is None:
        return None
    low, high = _NEAR
    units = seen.here.lot.quantity.value
    cases = [(shift, "decimal mark misplaced") for shift in _SHIFTS]
    if units > 1:
        cases.append((ARITHMETIC.divide(Decimal(1), units), "price of the lot written as unit price"))
    for factor, reason in sorted(cases, key=lambda case: not _total_proves(seen, quoted, case[0])):
        if not low * peers.median <= price * factor <= high * peers.median:
            continue
        proved = _total_proves(seen, quoted, factor)
        value = ARITHMETIC.multiply(quoted.value, factor)
        proof = f"{stated(quoted)} ({quoted.place}) read as {shown(value, 12)} lies near {peers}"
        total = seen.offer.terms.total_price
        if proved and total is not None:
            proof += f"; times {shown(units)} units it makes the stated total {stated(total)} ({total.place})"
        return suppose(seen.offer, "unit_price", value, reason, proof, is_proved_by_bid=proved)
    return None


def _total_proves(seen: Seen, quoted: Quantity, factor: Decimal) -> bool:
    total, units = seen.offer.terms.total_price, seen.here.lot.quantity.value
    if total is None:
        return False
    slack = half_digit(total) + units * half_digit(quoted) * factor
    return abs(quoted.value * factor * units - total.value) <= slack
