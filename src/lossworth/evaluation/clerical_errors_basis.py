"""Apparent errors of the basis: total for load loss, another rating, another temperature, parts that make no total."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

from ..money import ARITHMETIC
from ..records.bid import is_naturally_cooled
from ..records.quantity import Quantity
from ..regulations.reference_temperatures import reference_temperatures
from .clerical_errors_comparison import Seen, rated_stages
from .clerical_errors_suspicion import (
    Supposition,
    Suspicion,
    agree,
    half_digit,
    rating,
    shown,
    stated,
    suppose,
    suspect,
)

__all__ = ["check_loss_sums", "check_rating", "check_reference_temperature", "check_total_as_load_loss"]

#: Impedance counts as specified within the tender's tolerance, and at least within this share of it: IEC 60076-1
#: Table 1, two windings, principal tapping, 10 percent and more, or less than 10 percent (from memory).
_IMPEDANCE_SHARE_HIGH, _IMPEDANCE_SHARE_LOW = Decimal("0.075"), Decimal("0.10")
#: A load loss is suspected by its size alone below this share of the others' median. Common practice, no source.
_FAR_BELOW = Decimal("0.75")
#: ... and if it comes this near to the median at the other rating. Common practice, no source.
_NEAR = Decimal("0.10")
_FEWEST_FOR_SIZE = 3
#: Ratings of the preferred series R10, one decade (ISO 3 and IEC 60076-1, preferred values; from memory).
_PREFERRED = tuple(Decimal(text) for text in ("1", "1.25", "1.6", "2", "2.5", "3.15", "4", "5", "6.3", "8"))
#: Metal constants, as in `loss_basis`. [deg C]
_METALS = {"copper": Decimal(235), "aluminum": Decimal(225)}
#: At ambient temperature a loss is measured before it is corrected. [deg C]
_AS_MEASURED = Decimal(20)
_DEFAULT_TEMPERATURE = Decimal(75)


def check_total_as_load_loss(seen: Seen) -> Iterator[Suspicion]:
    """A load loss that repeats the total loss, or is larger than its own parts by the no-load loss."""
    offer = seen.offer
    no_load, load, total = offer.no_load_loss_kw, offer.load_loss_kw, offer.total_loss_kw
    if no_load is None or load is None or no_load.value <= 0 or load.value <= no_load.value:
        return
    if total is not None and total.value == load.value:
        value, whole, whole_name = total.value - no_load.value, total, "total loss"
        sign = f"the total loss {stated(total)} ({total.place}) is the same figure"
    else:
        resistive, stray = offer.resistive_loss_kw, offer.stray_loss_kw
        if resistive is None or stray is None or not agree(resistive.value + stray.value + no_load.value, load):
            return
        value, whole, whole_name = load.value - no_load.value, load, "load loss as read"
        sign = f"its parts {stated(resistive)} ({resistive.place}) and {stated(stray)} ({stray.place}) lack just that"
    proof = (
        f"{whole_name} {stated(whole)} ({whole.place}) less no-load loss {stated(no_load)} ({no_load.place}) is "
        f"{shown(value)} kW"
    )
    rule = f"looks like the total loss, the no-load loss of {stated(no_load)} ({no_load.place}) included: {sign}"
    beside = f" and a total loss of {stated(total)}" if total is not None else ""
    question = (
        f"your schedule states a load loss of {stated(load)} beside a no-load loss of {stated(no_load)}{beside}; the "
        f"total loss is the sum of the other two. Please confirm what each figure means, and the guaranteed load loss."
    )
    found = suppose(offer, "load_loss_kw", value, "total loss written as load loss", proof, is_proved_by_bid=True)
    yield suspect(
        offer,
        "apparent-error-total-as-load-loss",
        ("load_loss_kw", "total_loss_kw"),
        rule,
        question,
        evidence=("no_load_loss_kw", "resistive_loss_kw", "stray_loss_kw"),
        suppositions=(found,),
    )


@dataclass(frozen=True, slots=True)
class _Wanted:
    """Impedance that is expected: the tender's, or the median of the others."""

    percent: Decimal
    tolerance: Decimal
    words: str


def check_rating(seen: Seen) -> Iterator[Suspicion]:
    """Load loss and impedance that fit another rating of the unit, mostly that without fans."""
    load, impedance = seen.offer.load_loss_kw, seen.offer.impedance_percent
    own_rating = seen.offer.load_loss_rating_kva
    wanted = _wanted_impedance(seen)
    if load is None or (own_rating is not None and own_rating.value != seen.here.rating.value):
        return  # a bidder that states another rating is converted or asked by the loss basis
    if impedance is not None and wanted is not None:
        if abs(impedance.value - wanted.percent) > wanted.tolerance:
            yield from _by_impedance(seen, load, impedance, wanted)
    else:
        yield from _by_size(seen, load)


def _wanted_impedance(seen: Seen) -> _Wanted | None:
    specified = seen.here.lot.impedance_percent
    if specified is not None:
        tolerance = seen.here.lot.impedance_tolerance_percentage_points
        share = _IMPEDANCE_SHARE_HIGH if specified.value >= 10 else _IMPEDANCE_SHARE_LOW
        least = specified.value * share
        allowed = least if tolerance is None else max(tolerance.value, least)
        return _Wanted(specified.value, allowed, f"the specified {stated(specified)} ({specified.place})")
    peers = seen.peers("impedance_percent")
    if peers is None:
        return None
    return _Wanted(peers.median, peers.median * _IMPEDANCE_SHARE_LOW, f"{peers}, {shown(peers.median)} %")


def _by_impedance(seen: Seen, load: Quantity, impedance: Quantity, wanted: _Wanted) -> Iterator[Suspicion]:
    rating = seen.here.rating.value
    for candidate in _candidates(seen, impedance.value * rating / wanted.percent):
        ratio = ARITHMETIC.divide(rating, candidate)
        percent = ARITHMETIC.multiply(impedance.value, ratio)
        if abs(percent - wanted.percent) > wanted.tolerance:
            continue
        value = ARITHMETIC.multiply(load.value, ARITHMETIC.multiply(ratio, ratio))
        if not _is_likelier(seen, load.value, value, is_stage=candidate in rated_stages(seen.here.lot)):
            continue
        yield _rating_suspicion(seen, candidate, value, percent, wanted)
        return


def _is_likelier(seen: Seen, as_read: Decimal, value: Decimal, *, is_stage: bool) -> bool:
    """Whether a load loss at the other rating is an ordinary one, and more so than the one as read."""
    fits, peers = seen.fits("load_loss_kw", value), seen.peers("load_loss_kw")
    if peers is not None:
        before, after = (max(each / peers.median, peers.median / each) for each in (as_read, value))
        return fits is True and after < before
    if is_stage:
        return fits is not False
    return fits is True and not seen.fits("load_loss_kw", as_read)


def _candidates(seen: Seen, implied: Decimal) -> Iterator[Decimal]:
    """Ratings that may have been meant: the tender's own stages, then the preferred one nearest to the implied."""
    rating = seen.here.rating.value
    stages = rated_stages(seen.here.lot)
    yield from (stage for stage in stages if stage != rating)
    if implied > 0 and not stages:
        decade = Decimal(1).scaleb(implied.adjusted())
        series = [each * decade for each in (*_PREFERRED, Decimal(10))]
        nearest = min(series, key=lambda each: abs(each - implied))
        if nearest != rating:
            yield nearest


def _by_size(seen: Seen, load: Quantity) -> Iterator[Suspicion]:
    """Where no impedance tells: a two-stage unit whose load loss comes to the others at a lower stage."""
    peers = seen.peers("load_loss_kw")
    cooling = (seen.offer.cooling or seen.here.lot.cooling).value
    if peers is None or peers.count < _FEWEST_FOR_SIZE or is_naturally_cooled(cooling):
        return
    if load.value > _FAR_BELOW * peers.median:
        return
    for candidate in _candidates(seen, Decimal(0)):
        ratio = ARITHMETIC.divide(seen.here.rating.value, candidate)
        value = ARITHMETIC.multiply(load.value, ARITHMETIC.multiply(ratio, ratio))
        if abs(value - peers.median) <= _NEAR * peers.median:
            yield _rating_suspicion(seen, candidate, value, None, None)
            return


def _rating_suspicion(
    seen: Seen, candidate: Decimal, value: Decimal, percent: Decimal | None, wanted: _Wanted | None
) -> Suspicion:
    offer, wanted_rating = seen.offer, seen.here.rating.value
    this, that = rating(wanted_rating), rating(candidate)
    load, impedance = offer.load_loss_kw, offer.impedance_percent
    reason = f"load loss stated at {that} in place of {this}"
    ratio = f"{shown(wanted_rating)}/{shown(candidate)}"
    suppositions: list[Supposition] = []
    fields: tuple[str, ...] = ("load_loss_kw",)
    words, proof = "", ""
    if impedance is not None and percent is not None and wanted is not None:
        words = (
            f"impedance {stated(impedance)} ({impedance.place}) × {ratio} is {shown(percent)} %, against {wanted.words}"
        )
        proof = f"; {words}"
        fields = ("load_loss_kw", "impedance_percent")
    if load is not None:
        sums = f"load loss {stated(load)} ({load.place}) × ({ratio})² is {shown(value)} kW"
        suppositions.append(suppose(offer, "load_loss_kw", value, reason, sums + proof, is_proved_by_bid=bool(words)))
    if percent is not None:
        suppositions.append(suppose(offer, "impedance_percent", percent, reason, words, is_proved_by_bid=True))
    ordinary = seen.ordinary("load_loss_kw")
    signs = "; ".join(part for part in (words, ordinary and f"of load losses {ordinary}") if part)
    rule = f"looks as if it were stated at {that} and not at {this}: {signs}"
    named = "load loss and impedance" if words else "load loss"
    what = " and ".join(stated(each) for each in (load, impedance if words else None) if each is not None)
    question = (
        f"please confirm at which rated power and cooling stage the {named} of your schedule ({what}) are stated, and "
        f"confirm the guaranteed values at {this}, as the tender asks for them."
    )
    return suspect(
        offer,
        "apparent-error-rating",
        fields,
        rule,
        question,
        evidence=("load_loss_rating_kva",),
        suppositions=tuple(suppositions),
    )


def check_reference_temperature(seen: Seen) -> Iterator[Suspicion]:
    """A load loss that is not at the temperature of its own parts, or a temperature that no standard knows.

    Between two customary temperatures a load loss differs by some percent only: its size alone shows nothing.
    """
    yield from _other_temperature_than_parts(seen)
    yield from _unusual_temperature(seen)


def _temperatures(seen: Seen) -> tuple[Decimal, ...]:
    """Temperatures to which standards refer the load losses of such units, and the ambient one."""
    is_dry = seen.here.is_dry
    customary = {each.load_loss_c for each in reference_temperatures() if ("dry-type" in each.equipment) is is_dry}
    return tuple(sorted({_AS_MEASURED, *customary}))


def _wanted_temperature(seen: Seen) -> Decimal:
    basis, own = seen.here.lot.loss_basis, seen.offer.reference_temperature_c
    if basis is not None and basis.reference_temperature_c is not None:
        return basis.reference_temperature_c.value
    return _DEFAULT_TEMPERATURE if own is None else own.value


def _other_temperature_than_parts(seen: Seen) -> Iterator[Suspicion]:
    offer = seen.offer
    load, resistive, stray = offer.load_loss_kw, offer.resistive_loss_kw, offer.stray_loss_kw
    if load is None or resistive is None or stray is None:
        return
    value = resistive.value + stray.value
    if agree(value, load, resistive, stray):
        return
    wanted = _wanted_temperature(seen)
    basis = seen.here.lot.loss_basis
    metals = [basis.conductor] if basis and basis.conductor else list(_METALS)
    cases = [(metal, degrees) for metal in metals for degrees in _temperatures(seen) if degrees != wanted]
    found = next((case for case in cases if _at(case, wanted, resistive, stray, load)), None)
    if found is None:
        return
    metal, degrees = found
    proof = (
        f"resistive part {stated(resistive)} ({resistive.place}) and stray part {stated(stray)} ({stray.place}) make "
        f"{shown(value)} kW; the same parts at {degrees} °C ({metal}) make {stated(load)} ({load.place})"
    )
    rule = f"looks as if it were stated at {degrees} °C and not at {wanted} °C: {proof}"
    question = (
        f"your schedule states a load loss of {stated(load)} and its parts as {stated(resistive)} and {stated(stray)}; "
        f"please confirm the reference temperature of each figure and the guaranteed load loss at {wanted} °C."
    )
    reason = f"load loss stated at {degrees} °C in place of {wanted} °C"
    supposition = suppose(offer, "load_loss_kw", value, reason, proof, is_proved_by_bid=True)
    yield suspect(
        offer,
        "apparent-error-reference-temperature",
        ("load_loss_kw",),
        rule,
        question,
        evidence=("resistive_loss_kw", "stray_loss_kw", "reference_temperature_c"),
        suppositions=(supposition,),
    )


def _at(case: tuple[str, Decimal], wanted: Decimal, resistive: Quantity, stray: Quantity, load: Quantity) -> bool:
    """Whether the parts, stated at the wanted temperature, make the load loss at another one."""
    metal, degrees = case
    ratio = ARITHMETIC.divide(_METALS[metal] + degrees, _METALS[metal] + wanted)
    return agree(resistive.value * ratio + ARITHMETIC.divide(stray.value, ratio), load, resistive, stray)


def _unusual_temperature(seen: Seen) -> Iterator[Suspicion]:
    """A stated temperature of no standard, where the tender wants none; where it does, the basis is asked about."""
    own, basis = seen.offer.reference_temperature_c, seen.here.lot.loss_basis
    if own is None or (basis is not None and basis.reference_temperature_c is not None):
        return
    if own.value in _temperatures(seen) and own.value != _AS_MEASURED:
        return
    customary = ", ".join(f"{degrees}" for degrees in _temperatures(seen) if degrees != _AS_MEASURED)
    rule = f"is none to which a standard refers load losses ({customary} °C)"
    question = (
        f"your load loss is stated at {stated(own)}; please confirm the temperature to which the guaranteed load loss "
        f"refers, and the standard that sets it."
    )
    yield suspect(
        seen.offer,
        "apparent-error-reference-temperature",
        ("reference_temperature_c",),
        rule,
        question,
        evidence=("load_loss_kw",),
    )


def check_loss_sums(seen: Seen) -> Iterator[Suspicion]:
    """Stated parts that do not make the stated total, beyond the rounding of each figure."""
    offer = seen.offer
    no_load, load, total = offer.no_load_loss_kw, offer.load_loss_kw, offer.total_loss_kw
    if no_load is not None and load is not None and total is not None:
        auxiliary = offer.auxiliary_loss_kw
        with_fans = no_load.value + load.value + (auxiliary.value if auxiliary else 0)
        parts = (no_load, load)
        if not agree(no_load.value + load.value, total, *parts) and not agree(
            with_fans, total, *parts, *((auxiliary,) if auxiliary else ())
        ):
            yield _sum_suspicion(seen, "total_loss_kw", total, ("no_load_loss_kw", "load_loss_kw"), parts)
    resistive, stray = offer.resistive_loss_kw, offer.stray_loss_kw
    if load is not None and resistive is not None and stray is not None:
        parts = (resistive, stray)
        if not agree(resistive.value + stray.value, load, *parts):
            yield _sum_suspicion(seen, "load_loss_kw", load, ("resistive_loss_kw", "stray_loss_kw"), parts)


def _sum_suspicion(
    seen: Seen, field: str, whole: Quantity, names: tuple[str, ...], parts: tuple[Quantity, ...]
) -> Suspicion:
    added = " + ".join(f"{stated(part)} ({part.place})" for part in parts)
    value = sum((part.value for part in parts), Decimal(0))
    slack = sum((half_digit(each) for each in (*parts, whole)), Decimal(0))
    rule = f"is not the sum of its parts: {added} makes {shown(value)} kW, beyond rounding by {shown(slack)} kW"
    label = "total loss" if field == "total_loss_kw" else "load loss"
    question = (
        f"your schedule states a {label} of {stated(whole)}, and parts of it of "
        f"{' and '.join(stated(part) for part in parts)}, which make {shown(value)} kW; please confirm each figure."
    )
    return suspect(seen.offer, "apparent-error-loss-sum", (field, *names), rule, question)
