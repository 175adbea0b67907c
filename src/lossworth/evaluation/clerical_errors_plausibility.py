"""Apparent errors against physics and against ordinary designs: resistance above impedance, an efficiency that does not
follow, losses too good to be built.
"""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

from ..money import ARITHMETIC
from ..records.quantity import Quantity
from .clerical_errors_comparison import Seen
from .clerical_errors_suspicion import LABELS, Suspicion, half_digit, shown, stated, suspect, value_of

__all__ = ["check_declared_efficiency", "check_low_losses", "check_resistance"]

#: A loss is far below the pack under this share of the others' median. A no-load loss may lie lower where bands cover
#: the unit: amorphous cores have 50 to 60 percent less than grain-oriented steel (from memory). Common practice.
_FAR_BELOW = Decimal("0.6")
_FAR_BELOW_AMORPHOUS = Decimal("0.35")
_FEWEST_FOR_PACK = 3
#: Losses that a declared efficiency leaves may differ by this share from those stated: it may stand at another
#: temperature (10 CFR 431 at 55 deg C and half load). Common practice, no source.
_EFFICIENCY_SHARE = Decimal("0.10")
_LOADS = (Decimal(1), Decimal("0.75"), Decimal("0.5"), Decimal("0.35"))


def check_resistance(seen: Seen) -> Iterator[Suspicion]:
    """Load loss in percent of the rating at or above the impedance, of which it is the resistive part.

    Z^2 = R^2 + X^2 with R % = 100 Pk / S: R cannot exceed Z (circuit theory).
    """
    load, impedance = seen.offer.load_loss_kw, seen.offer.impedance_percent
    rating = _rating(seen)
    if load is None or impedance is None or load.value <= 0 or impedance.value <= 0:
        return
    resistance = ARITHMETIC.divide(100 * load.value, rating.value)
    if resistance < impedance.value:
        return
    rule = (
        f"in percent of {shown(rating.value)} kVA is {shown(resistance, 4)} %, which cannot exceed the impedance of "
        f"{stated(impedance)} ({impedance.place}), of which it is the resistive part"
    )
    question = (
        f"the load loss of {stated(load)} is {shown(resistance, 4)} % of {shown(rating.value)} kVA, and cannot exceed "
        f"the impedance of {stated(impedance)}; please confirm both figures, their units and the rating."
    )
    yield suspect(
        seen.offer,
        "apparent-error-resistance",
        ("load_loss_kw", "impedance_percent"),
        rule,
        question,
        evidence=("load_loss_rating_kva",),
    )


def check_declared_efficiency(seen: Seen) -> Iterator[Suspicion]:
    """A declared efficiency that follows from the stated losses under none of the usual definitions."""
    declared = seen.offer.terms.declared_efficiency_percent
    no_load, load = seen.offer.no_load_loss_kw, seen.offer.load_loss_kw
    rating = _rating(seen)
    if declared is None or no_load is None or load is None or no_load.value <= 0 or load.value <= 0:
        return
    computed = _efficiencies(no_load.value, load.value, rating.value)
    slack = half_digit(declared)
    if any(_is_efficiency(declared.value, each, slack) for each in computed.values()):
        return
    words = ", ".join(f"{shown(value, 6)} % {name}" for name, value in computed.items())
    rule = (
        f"does not follow from no-load loss {stated(no_load)} ({no_load.place}) and load loss {stated(load)} "
        f"({load.place}) at {shown(rating.value)} kVA: {words}"
    )
    question = (
        f"the declared efficiency of {stated(declared)} does not follow from the no-load loss of {stated(no_load)} and "
        f"the load loss of {stated(load)}; please confirm all three, and state the load, the power factor, the "
        f"temperature and the formula of the efficiency."
    )
    yield suspect(
        seen.offer,
        "apparent-error-efficiency",
        ("declared_efficiency_percent", "no_load_loss_kw", "load_loss_kw"),
        rule,
        question,
    )


def _rating(seen: Seen) -> Quantity:
    """Rating at which the bidder states the load loss, else the one that the tender wants."""
    own = seen.offer.load_loss_rating_kva
    return own if own is not None and own.value > 0 else seen.here.rating


def _efficiencies(no_load: Decimal, load: Decimal, rating: Decimal) -> dict[str, Decimal]:
    """Efficiencies by their definitions, at unity power factor. [percent]"""
    found = {}
    for part in _LOADS:
        loss = no_load + part * part * load
        output = ARITHMETIC.divide(100 * part * rating, part * rating + loss)
        found[f"at {shown(100 * part)} % load"] = output
    root = ARITHMETIC.sqrt(ARITHMETIC.multiply(no_load, load))
    found["as peak efficiency index"] = 100 - ARITHMETIC.divide(200 * root, rating)
    return found


def _is_efficiency(declared: Decimal, computed: Decimal, slack: Decimal) -> bool:
    """Compared by the losses that are left: two efficiencies of 99 and 98 percent are not alike."""
    allowed = slack + _EFFICIENCY_SHARE * (100 - computed)
    return abs(declared - computed) <= allowed


def check_low_losses(seen: Seen) -> Iterator[Suspicion]:
    """Losses below what can be built, or far below the pack."""
    for field in ("no_load_loss_kw", "load_loss_kw"):
        quantity = value_of(seen.offer, field)
        if quantity is not None and quantity.value > 0:
            yield from _low_loss(seen, field, quantity)


def _low_loss(seen: Seen, field: str, quantity: Quantity) -> Iterator[Suspicion]:
    band, peers = seen.here.band(field), seen.peers(field)
    signs = []
    if band is not None and quantity.value < band.soft_low_kw:
        signs.append(f"usual designs have {shown(band.soft_low_kw)} kW and more")
    share = _FAR_BELOW_AMORPHOUS if field == "no_load_loss_kw" and band is not None else _FAR_BELOW
    if peers is not None and peers.count >= _FEWEST_FOR_PACK and quantity.value < share * peers.median:
        percent = shown(100 * (1 - quantity.value / peers.median), 2)
        signs.append(f"it is {percent} % below {peers}, {shown(peers.median)} kW")
    if not signs:
        return
    name = LABELS[field]
    rule = f"looks too low to be built: {'; '.join(signs)}"
    material = "core material" if field == "no_load_loss_kw" else "conductor material and its current density"
    question = (
        f"please confirm the guaranteed {name} of {stated(quantity)} of one unit and the rating, voltage and "
        f"temperature to which it refers, and name the {material} and a type test report of a unit of this design."
    )
    yield suspect(seen.offer, "apparent-error-low-loss", (field,), rule, question)
