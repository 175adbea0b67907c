"""Does an offer fit the tender? Small checks of one signature in one tuple, and which figures an evaluation needs.

Bounds of single figures are kept where they are read; limits of the tender are for the evaluation to compare.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from types import MappingProxyType

from ..findings import Finding
from ..records.bid import Offer
from ..records.tender import CoolingValuation, Lot, Tender

__all__ = ["CHECKS", "Check", "is_needed"]

Check = Callable[[Offer, Lot, Tender], Iterator[Finding]]


def check_currency(offer: Offer, _lot: Lot, tender: Tender) -> Iterator[Finding]:
    """The currency of the price is the evaluation currency, or has an announced exchange rate."""
    if offer.currency is None:
        return
    home = tender.identity.currency.value
    known = (home, *(tender.exchange.rates if tender.exchange else ()))
    if offer.currency.value not in known:
        rule = f"must be a currency with an announced exchange rate ({', '.join(known)})"
        yield Finding(
            "currency-unknown",
            "currency",
            rule,
            offer.currency.place,
            offer.currency.value,
            offer.bidder.value,
            offer.lot.value,
        )


def check_quantity(offer: Offer, lot: Lot, _tender: Tender) -> Iterator[Finding]:
    """The quantity, where it is stated, is that of the lot."""
    stated = offer.quantity
    if stated is not None and stated.value != lot.quantity.value:
        rule = f"must be the {lot.quantity.text} units of the lot ({lot.quantity.place})"
        yield Finding(
            "quantity-differs", "quantity", rule, stated.place, stated.text, offer.bidder.value, offer.lot.value
        )


CHECKS: tuple[Check, ...] = (check_currency, check_quantity)


def is_needed(field: str, lot: Lot | None, tender: Tender | None) -> bool:
    """Whether the evaluation of a lot needs a figure.

    Parameters
    ----------
    field : str
        Field of an offer.
    lot : Lot or None
        The lot; None where it is not known, and then every figure but the total loss may be needed.
    tender : Tender or None
        The tender, for its loading conditions.

    Returns
    -------
    bool
        False for a figure that no cost, limit or check of the lot uses.
    """
    if field == "total_loss_kw":
        return False
    if lot is None:
        return True
    if field == "auxiliary_loss_kw":
        return _values_auxiliary_loss(lot, tender)
    return _NEEDED_WHERE[field](lot) if field in _NEEDED_WHERE else True


def _converts_temperature(lot: Lot) -> bool:
    return lot.loss_basis is not None and "temperature" in lot.loss_basis.convert


def _wants_temperature(lot: Lot) -> bool:
    return lot.loss_basis is not None and lot.loss_basis.reference_temperature_c is not None


def _through_a_and_b(lot: Lot) -> bool:
    return lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B


#: Figures that are needed only where the tender asks for what they say.
_NEEDED_WHERE: Mapping[str, Callable[[Lot], bool]] = MappingProxyType(
    {
        "impedance_percent": lambda lot: lot.impedance_percent is not None,
        "delivery_weeks": lambda lot: lot.latest_delivery_weeks is not None,
        "reference_temperature_c": _wants_temperature,
        "resistive_loss_kw": _converts_temperature,
        "stray_loss_kw": _converts_temperature,
        "cooling_power_no_load_kw": _through_a_and_b,
        "cooling_power_rated_kw": _through_a_and_b,
    }
)


def _values_auxiliary_loss(lot: Lot, tender: Tender | None) -> bool:
    if lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B:
        return False
    if lot.rates is not None:
        return lot.rates.auxiliary is not None
    if lot.derivation is None or tender is None:
        return False
    loading = tender.loading.get(lot.derivation.loading.value)
    return loading is not None and (loading.cooling_hours is not None or bool(loading.cooling_stages))
