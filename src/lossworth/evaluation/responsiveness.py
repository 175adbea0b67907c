"""Is an offer complete, and does it keep the limits of its lot? Small checks of one signature in one tuple."""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from fractions import Fraction

from ..findings import Finding, Place
from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Lot
from ..trail import Figure
from .identities import is_one_of
from .loss_basis import OfferOnBasis

__all__ = ["CHECKS", "check_offer", "is_index_kept", "peak_efficiency_index_percent"]

Check = Callable[[OfferOnBasis, Lot], Finding | None]


def check_offer(offer: OfferOnBasis, lot: Lot) -> tuple[Finding, ...]:
    """All findings on the limits of one offer.

    Parameters
    ----------
    offer : OfferOnBasis
        One offer, its guaranteed values on the tender's basis.
    lot : Lot
        The lot with its limits.

    Returns
    -------
    tuple of Finding
        One for each limit that is exceeded or not answered. Guaranteed values are compared unrounded, and no
        tolerance stands between a guarantee and a limit.
    """
    return tuple(finding for check in CHECKS if (finding := check(offer, lot)) is not None)


def peak_efficiency_index_percent(no_load_loss_kw: Decimal, load_loss_kw: Decimal, rated_power_kva: Decimal) -> Decimal:
    """Peak efficiency index of a unit without cooling power at no load.

    Parameters
    ----------
    no_load_loss_kw, load_loss_kw : Decimal
        Guaranteed losses, the load loss at the rated power given. [kW]
    rated_power_kva : Decimal
        Rating on which the load loss is based. [kVA]

    Returns
    -------
    Decimal
        PEI = 1 - 2 sqrt(P0 Pk) / Sr. [percent]

    References
    ----------
    .. [1] Commission Regulation (EU) No 548/2014, Annex I and II (without the term of the cooling power).

    Examples
    --------
    >>> round(peak_efficiency_index_percent(Decimal("15.8"), Decimal(139), Decimal(31500)), 4)
    Decimal('99.7025')
    """
    root = ARITHMETIC.sqrt(ARITHMETIC.multiply(no_load_loss_kw, load_loss_kw))
    return 100 - ARITHMETIC.divide(200 * root, rated_power_kva)


def _finding(kind: str, field: str, rule: str, offer: Offer, place: Place, got: str | None) -> Finding:
    return Finding(kind, field, rule, place, got, offer.bidder.value, offer.lot.value)


def _shown(quantity: Quantity | None, value: Figure) -> str:
    """As the bidder wrote it, and as it is compared where that reads otherwise."""
    compared = f"{value.value.normalize():f} {value.unit}"
    if quantity is None:
        return compared
    stated = f"{quantity.text} {quantity.unit}"
    return stated if quantity.value == value.value and quantity.unit == value.unit else f"{stated} = {compared}"


def _place(offer: Offer, quantity: Quantity | None, column: str) -> Place:
    return offer.columns.get(column, offer.place) if quantity is None else quantity.place


def _check_maximum(
    offer: OfferOnBasis, limit: Quantity | None, loss: Figure | None, column: str, names: tuple[str, str]
) -> Finding | None:
    if limit is None or loss is None or loss.value <= limit.value:
        return None
    kind, field = names
    stated: Quantity | None = getattr(offer.offer, column)
    rule = f"must not exceed {limit.value} kW ({limit.place})"
    return _finding(kind, field, rule, offer.offer, _place(offer.offer, stated, column), _shown(stated, loss))


def check_no_load_loss(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Guaranteed no-load loss at most the lot's maximum."""
    names = ("no-load-loss-above-maximum", "no-load loss")
    return _check_maximum(offer, lot.maximum_no_load_loss_kw, offer.no_load_loss, "no_load_loss_kw", names)


def check_load_loss(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Guaranteed load loss at most the lot's maximum."""
    names = ("load-loss-above-maximum", "load loss")
    return _check_maximum(offer, lot.maximum_load_loss_kw, offer.load_loss, "load_loss_kw", names)


def is_index_kept(
    no_load_loss_kw: Decimal, load_loss_kw: Decimal, rated_power_kva: Decimal, limit_percent: Decimal
) -> bool:
    """Whether the peak efficiency index that follows from two losses is at least a limit; without any rounding.

    Parameters
    ----------
    no_load_loss_kw, load_loss_kw : Decimal
        Guaranteed losses, the no-load loss with the cooling power needed at no load. [kW]
    rated_power_kva : Decimal
        Rating on which the load loss is based. [kVA]
    limit_percent : Decimal
        Least index. [percent]

    Returns
    -------
    bool
        Compared as squares, which are exact: P0 Pk <= ((1 - PEI) Sr / 2)^2.
    """
    half = Fraction(100 - Fraction(limit_percent)) * Fraction(rated_power_kva) / 200
    return Fraction(no_load_loss_kw) * Fraction(load_loss_kw) <= half * half


def check_peak_efficiency_index(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Peak efficiency index that follows from the guaranteed losses at least the lot's minimum."""
    limit, no_load, load = lot.minimum_peak_efficiency_index_percent, offer.no_load_loss, offer.load_loss
    if limit is None or no_load is None or load is None:
        return None
    if is_index_kept(no_load.value, load.value, lot.rated_power_kva.value, limit.value):
        return None
    index = peak_efficiency_index_percent(no_load.value, load.value, lot.rated_power_kva.value)
    rule = f"must be at least {limit.value} % ({limit.place})"
    read = offer.offer
    losses = f"{_shown(read.no_load_loss_kw, no_load)} and {_shown(read.load_loss_kw, load)}"
    place = _place(read, read.load_loss_kw, "load_loss_kw")
    return _finding(
        "efficiency-below-minimum", "peak efficiency index", rule, read, place, f"{index:.4f} % from {losses}"
    )


def check_impedance(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Guaranteed impedance inside the lot's range."""
    specified, tolerance = lot.impedance_percent, lot.impedance_tolerance_percentage_points
    if specified is None or tolerance is None:
        return None
    rule = f"must be {specified.value} % within {tolerance.value} percentage points ({specified.place})"
    stated, compared = offer.offer.impedance_percent, offer.impedance
    place = _place(offer.offer, stated, "impedance_percent")
    if compared is None:
        return _finding("limit-not-answered", "impedance", rule, offer.offer, place, None)
    if abs(compared.value - specified.value) <= tolerance.value:
        return None
    return _finding("impedance-outside", "impedance", rule, offer.offer, place, _shown(stated, compared))


def check_delivery(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Delivery at the latest when the lot says."""
    latest = lot.latest_delivery_weeks
    if latest is None:
        return None
    rule = f"must not exceed {latest.value} weeks ({latest.place})"
    stated = offer.offer.delivery_weeks
    place = _place(offer.offer, stated, "delivery_weeks")
    if stated is None:
        return _finding("limit-not-answered", "delivery", rule, offer.offer, place, None)
    if stated.value <= latest.value:
        return None
    return _finding("delivery-too-late", "delivery", rule, offer.offer, place, f"{stated.text} {stated.unit}")


def check_sound_level(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Guaranteed sound level at most the lot's maximum."""
    limit, stated = lot.maximum_sound_level_db, offer.offer.terms.sound_level_db
    if limit is None:
        return None
    rule = f"must not exceed {limit.value} dB ({limit.place})"
    place = _place(offer.offer, stated, "sound_level_db")
    if stated is None:
        return _finding("limit-not-answered", "sound level", rule, offer.offer, place, None)
    if stated.value <= limit.value:
        return None
    return _finding(
        "sound-level-above-maximum", "sound level", rule, offer.offer, place, f"{stated.text} {stated.unit}"
    )


def check_insulating_liquid(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Insulating liquid one of those that the lot accepts."""
    if not lot.accepted_liquids:
        return None
    stated = offer.offer.terms.insulating_liquid
    rule = f"must be one of {', '.join(lot.accepted_liquids)} ({lot.place})"
    if stated is None:
        place = offer.offer.columns.get("insulating_liquid", offer.offer.place)
        return _finding("limit-not-answered", "insulating liquid", rule, offer.offer, place, None)
    if is_one_of(stated.value, lot.accepted_liquids):
        return None
    return _finding("liquid-not-accepted", "insulating liquid", rule, offer.offer, stated.place, stated.value)


def check_pcb_free(offer: OfferOnBasis, lot: Lot) -> Finding | None:
    """Declaration that the liquid is free of PCB, where the lot requires it."""
    declared = offer.offer.terms.pcb_free
    if not lot.pcb_free_required or declared is True:
        return None
    rule = f"must be declared ({lot.place})"
    place = offer.offer.columns.get("pcb_free", offer.offer.place)
    if declared is None:
        return _finding("limit-not-answered", "freedom from PCB", rule, offer.offer, place, None)
    return _finding("pcb-free-not-declared", "freedom from PCB", rule, offer.offer, place, "no")


CHECKS: tuple[Check, ...] = (
    check_no_load_loss,
    check_load_loss,
    check_peak_efficiency_index,
    check_impedance,
    check_delivery,
    check_sound_level,
    check_insulating_liquid,
    check_pcb_free,
)
