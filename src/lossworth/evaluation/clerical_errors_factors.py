"""Apparent errors by a factor or an exchange: watts for kilowatts, a shifted decimal mark, one phase of three, columns
swapped.

The thresholds are common practice without a source; a figure beyond one is asked about, never changed.
"""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

from ..records.quantity import Quantity
from .clerical_errors_comparison import Seen
from .clerical_errors_suspicion import (
    LABELS,
    Supposition,
    Suspicion,
    agree,
    shown,
    stated,
    suppose,
    suspect,
    value_of,
)

__all__ = ["check_decimal_mark", "check_phases", "check_swapped_losses", "check_unit_of_losses"]

_LOSSES = ("no_load_loss_kw", "load_loss_kw", "auxiliary_loss_kw", "total_loss_kw")
#: Three decades, less what designs of one rating differ by.
_UNIT_SLIP = Decimal(100)
#: One decade, less what designs of one rating differ by.
_DECIMAL_SLIP = Decimal(5)
_SHIFTS = (Decimal(10), Decimal("0.1"), Decimal(100), Decimal("0.01"))
#: Ratio to the median of the others between which a figure looks like that of one phase of three.
_ONE_PHASE = (Decimal("0.28"), Decimal("0.40"))
_FEWEST_FOR_ONE_PHASE = 3


def check_unit_of_losses(seen: Seen) -> Iterator[Suspicion]:
    """Losses that are three decades away from plausible ones: W under kW, or kW under W."""
    found = tuple(supposition for field in _LOSSES if (supposition := _other_unit(seen, field)))
    if not found:
        return
    fields = tuple(supposition.field for supposition in found)
    first = found[0]
    rule = f"looks as if it were in another unit, by a factor of 1000: {seen.ordinary(first.field)}"
    names = " and ".join(LABELS[field] for field in fields)
    question = f"please confirm for the {names} that you state whether each figure is in watts or in kilowatts."
    yield suspect(seen.offer, "apparent-error-loss-unit", fields, rule, question, evidence=_LOSSES, suppositions=found)


def _other_unit(seen: Seen, field: str) -> Supposition | None:
    quantity = value_of(seen.offer, field)
    if quantity is None or quantity.value <= 0:
        return None
    band, off = seen.here.band(field), seen.off_by(field, quantity.value)
    if off is None:
        return None
    far = off >= _UNIT_SLIP or off <= 1 / _UNIT_SLIP
    beyond = band is not None and band.position_of(quantity.value) == "outside the hard band"
    value = quantity.value / 1000 if off > 1 else quantity.value * 1000
    if not (far or beyond) or not seen.fits(field, value):
        return None
    reason = "watts written as kilowatts" if off > 1 else "kilowatts written as watts"
    proof = f"{stated(quantity)} ({quantity.place}) read as {shown(value)} kW; {seen.ordinary(field)}"
    return suppose(seen.offer, field, value, reason, proof, is_proved_by_bid=_total_proves(seen, {field: value}))


def check_decimal_mark(seen: Seen) -> Iterator[Suspicion]:
    """A loss or impedance that a shift of the decimal mark would bring to the others."""
    for field in (*_LOSSES, "impedance_percent"):
        quantity = value_of(seen.offer, field)
        if quantity is None or quantity.value <= 0 or not _is_a_decade_off(seen, field, quantity):
            continue
        value = next((v for shift in _SHIFTS if seen.fits(field, v := quantity.value * shift)), None)
        if value is None:
            continue
        proved = _total_proves(seen, {field: value})
        unit = "%" if field == "impedance_percent" else "kW"
        reason = "decimal mark misplaced"
        proof = f"{stated(quantity)} ({quantity.place}) read as {shown(value)} {unit}; {seen.ordinary(field)}"
        if proved:
            proof += f"; {_sum_words(seen)}"
        rule = f"looks as if its decimal mark were misplaced: {seen.ordinary(field)}"
        question = (
            f"please verify the decimal mark and the unit of the {LABELS[field]}, stated as {stated(quantity)}, and "
            f"confirm the guaranteed figure."
        )
        found = suppose(seen.offer, field, value, reason, proof, is_proved_by_bid=proved)
        yield suspect(
            seen.offer, "apparent-error-decimal-mark", (field,), rule, question, evidence=_LOSSES, suppositions=(found,)
        )


def _is_a_decade_off(seen: Seen, field: str, quantity: Quantity) -> bool:
    off = seen.off_by(field, quantity.value)
    return off is not None and (off >= _DECIMAL_SLIP or off <= 1 / _DECIMAL_SLIP)


def check_phases(seen: Seen) -> Iterator[Suspicion]:
    """Losses of one phase where those of three are asked for.

    The no-load loss alone is not suspected by its size: a core of another material has less loss by itself.
    """
    no_load, load = value_of(seen.offer, "no_load_loss_kw"), value_of(seen.offer, "load_loss_kw")
    if no_load is None or load is None:
        return
    tripled = _phases_of_total(seen, no_load.value, load.value)
    proved = bool(tripled)
    if not tripled and _is_one_phase(seen, "load_loss_kw", load):
        both = _is_one_phase(seen, "no_load_loss_kw", no_load)
        tripled = ("load_loss_kw", "no_load_loss_kw") if both else ("load_loss_kw",)
    if not tripled:
        return
    found = []
    for field in tripled:
        quantity = no_load if field == "no_load_loss_kw" else load
        shown_sum = f"3 × {stated(quantity)} ({quantity.place}) = {shown(3 * quantity.value)} kW"
        why = f"; {_sum_words(seen)}" if proved else f"; {seen.ordinary(field)}"
        reason = "loss of one phase in place of three"
        found.append(suppose(seen.offer, field, 3 * quantity.value, reason, shown_sum + why, is_proved_by_bid=proved))
    sign = "three times as much makes the stated total loss" if proved else seen.ordinary(tripled[0])
    rule = f"looks like the loss of one phase of three: {sign}"
    names = " and ".join(LABELS[field] for field in tripled)
    question = f"please confirm whether the {names} that you state hold for one phase or for the three-phase unit."
    yield suspect(
        seen.offer, "apparent-error-phases", tripled, rule, question, evidence=_LOSSES, suppositions=tuple(found)
    )


def _is_one_phase(seen: Seen, field: str, quantity: Quantity) -> bool:
    peers = seen.peers(field)
    if peers is None or peers.count < _FEWEST_FOR_ONE_PHASE:
        return False
    low, high = _ONE_PHASE
    return low * peers.median <= quantity.value <= high * peers.median and seen.fits(field, 3 * quantity.value) is True


def _phases_of_total(seen: Seen, no_load: Decimal, load: Decimal) -> tuple[str, ...]:
    """Which of the two losses, three times, makes the stated total loss."""
    total = seen.offer.total_loss_kw
    if total is None or agree(no_load + load, total):
        return ()
    cases = (
        (("load_loss_kw", "no_load_loss_kw"), 3 * (no_load + load)),
        (("load_loss_kw",), no_load + 3 * load),
        (("no_load_loss_kw",), 3 * no_load + load),
    )
    return next((fields for fields, value in cases if agree(value, total)), ())


def check_swapped_losses(seen: Seen) -> Iterator[Suspicion]:
    """A no-load loss above the load loss, which fit once they are exchanged."""
    no_load, load = value_of(seen.offer, "no_load_loss_kw"), value_of(seen.offer, "load_loss_kw")
    if no_load is None or load is None or no_load.value <= load.value:
        return
    if seen.fits("no_load_loss_kw", load.value) is False or seen.fits("load_loss_kw", no_load.value) is False:
        return
    reason = "no-load loss and load loss exchanged"
    proof = (
        f"no-load loss {stated(no_load)} ({no_load.place}) above load loss {stated(load)} ({load.place}), which "
        f"is not seen in power and distribution transformers"
    )
    known = [seen.ordinary(field) for field in ("no_load_loss_kw", "load_loss_kw")]
    beside = f"; of no-load losses {known[0]}; of load losses {known[1]}" if all(known) else ""
    found = tuple(
        suppose(seen.offer, field, quantity.value, reason, proof + beside, is_proved_by_bid=True)
        for field, quantity in (("no_load_loss_kw", load), ("load_loss_kw", no_load))
    )
    rule = f"is above the load loss of {stated(load)} ({load.place}); exchanged the two would be ordinary{beside}"
    question = (
        f"your schedule states a no-load loss of {stated(no_load)} and a load loss of {stated(load)}; please confirm "
        f"which is which."
    )
    yield suspect(
        seen.offer,
        "apparent-error-losses-swapped",
        ("no_load_loss_kw", "load_loss_kw"),
        rule,
        question,
        evidence=("total_loss_kw",),
        suppositions=found,
    )


def _total_proves(seen: Seen, corrected: dict[str, Decimal]) -> bool:
    """Whether the stated total loss is the sum with the corrected figure, and is not with the one as read."""
    offer = seen.offer
    parts = (offer.no_load_loss_kw, offer.load_loss_kw)
    if offer.total_loss_kw is None or None in parts or not set(corrected) & {"no_load_loss_kw", "load_loss_kw"}:
        return False
    stated_parts = {"no_load_loss_kw": parts[0], "load_loss_kw": parts[1]}
    values = {name: quantity.value for name, quantity in stated_parts.items() if quantity is not None}
    if agree(sum(values.values(), Decimal(0)), offer.total_loss_kw):
        return False
    return agree(sum((values | corrected).values(), Decimal(0)), offer.total_loss_kw)


def _sum_words(seen: Seen) -> str:
    total = seen.offer.total_loss_kw
    return (
        "" if total is None else f"with the other loss it makes the stated total loss {stated(total)} ({total.place})"
    )
