"""Limits of the regulation that a lot names, from its dated tables, against the guaranteed values of an offer."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from decimal import Decimal

from ..findings import Finding
from ..records.bid import Offer
from ..records.commercial import RegulationLimit
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..regulations.eu_losses import maximum_losses
from ..regulations.eu_peak_efficiency import minimum_peak_efficiency_index
from ..regulations.eu_transformer import EuTransformer, Insulation
from ..regulations.limits import Limit, check_guarantee
from ..regulations.us_efficiency import UsEquipment, UsTransformer, minimum_efficiency
from ..trail import Figure
from .loss_basis import OfferOnBasis
from .responsiveness import is_index_kept, peak_efficiency_index_percent

__all__ = ["check_regulation", "check_regulations_of_tender", "regulation_cautions", "regulation_limits"]

_PLACES = 8
_MEND = "Correct equipment, tier, date, phases or voltages under [lot.regulation], or state limits for the lot."
_INSULATION = {
    "liquid medium": Insulation.LIQUID_IMMERSED,
    "dry medium": Insulation.DRY_TYPE,
    "pole-mounted replacement": Insulation.LIQUID_IMMERSED,
    "large liquid": Insulation.LIQUID_IMMERSED,
    "large dry": Insulation.DRY_TYPE,
}


def regulation_limits(lot: Lot) -> tuple[Limit, ...]:
    """Limits that hold for a lot by the regulation it names.

    Parameters
    ----------
    lot : Lot
        With the regulation, equipment, tier or date, and voltages.

    Returns
    -------
    tuple of Limit
        Two maximum losses, or one minimum; empty where the lot names no regulation.

    Raises
    ------
    ValueError, LookupError
        If a key that the table needs is missing, or the table does not cover the lot.

    References
    ----------
    .. [1] Commission Regulation (EU) No 548/2014 as amended by Regulation (EU) 2019/1783, Annex I.
    .. [2] 10 CFR 431.196.
    """
    named = lot.regulation
    if named is None:
        return ()
    return _eu_limits(named, lot) if named.regulation == "EU 548/2014" else (_us_limit(named, lot),)


def _eu_limits(named: RegulationLimit, lot: Lot) -> tuple[Limit, ...]:
    equipment = named.equipment.value
    if equipment not in _INSULATION:
        raise LookupError(f"equipment must be one of {', '.join(_INSULATION)}, got {equipment!r}")
    if named.primary_voltage_kv is None or named.secondary_voltage_kv is None:
        raise ValueError("primary_voltage_kv and secondary_voltage_kv must be given: limits differ by them")
    voltages = (named.primary_voltage_kv.value, named.secondary_voltage_kv.value)
    unit = EuTransformer(
        insulation=_INSULATION[equipment],
        rated_power_kva=lot.rated_power_kva.value,
        phases=named.phases or 3,
        higher_um_kv=max(voltages),
        lower_um_kv=min(voltages),
        is_pole_mounted_replacement=equipment == "pole-mounted replacement",
        has_on_load_tap_changer=named.on_load_tap_changer,
    )
    # the tier as the tender states it; a date beside it is for the reader
    tier, on = named.tier, None if named.tier is not None else named.date
    if equipment.startswith("large"):
        return (minimum_peak_efficiency_index(unit, tier=tier, on=on),)
    both = maximum_losses(unit, tier=tier, on=on)
    return (both.no_load_loss, both.load_loss)


def _us_limit(named: RegulationLimit, lot: Lot) -> Limit:
    if named.date is None or named.phases is None:
        raise ValueError("date (of manufacture) and phases must be given: the table is picked by them")
    known = {str(equipment): equipment for equipment in UsEquipment}
    if named.equipment.value not in known:
        raise LookupError(f"equipment must be one of {', '.join(known)}, got {named.equipment.value!r}")
    unit = UsTransformer(
        equipment=known[named.equipment.value],
        rated_power_kva=lot.rated_power_kva.value,
        phases=named.phases,
        input_voltage_kv=_value(named.primary_voltage_kv),
        output_voltage_kv=_value(named.secondary_voltage_kv),
    )
    return minimum_efficiency(unit, manufactured=named.date)


def check_regulations_of_tender(tender: Tender) -> Iterator[Finding]:
    """Findings on regulations that do not fit the lots that name them.

    Parameters
    ----------
    tender : Tender
        As announced.

    Yields
    ------
    Finding
        Where a key is missing, the tables do not cover the lot, or its losses are wanted on another rating.
    """
    for lot in tender.lots:
        named = lot.regulation
        if named is None:
            continue
        try:
            regulation_limits(lot)
        except (LookupError, ValueError) as problem:
            rule = f"must fit the tables of {named.regulation}: {problem.args[0]}"
            yield Finding("tender-conflict", "lot.regulation", rule, named.place, lot=lot.id, fix=_MEND)
        wanted = None if lot.loss_basis is None else lot.loss_basis.load_loss_rating_kva
        if wanted is not None and wanted.value != lot.rated_power_kva.value:
            rule = f"holds at the rated power, and the losses are wanted at {wanted.value} kVA"
            yield Finding("tender-conflict", "lot.regulation", rule, wanted.place, wanted.text, lot=lot.id, fix=_MEND)


def regulation_cautions(lot: Lot, limits: Sequence[Limit]) -> Iterator[Finding]:
    """What to check in the regulation before its limits are relied upon.

    Parameters
    ----------
    lot : Lot
        The lot.
    limits : sequence of Limit
        Its limits.

    Yields
    ------
    Finding
        One note for each caution, whoever keeps the limit.
    """
    if lot.regulation is not None:
        told = {caution: f"{limit.quantity}, Table {limit.table}" for limit in limits for caution in limit.cautions}
        for caution, field in told.items():
            yield Finding("regulation-caution", field, caution, lot.regulation.place, lot=lot.id)


def check_regulation(judged: OfferOnBasis, lot: Lot, limits: Sequence[Limit]) -> Iterator[Finding]:
    """Findings on limits of the regulation that an offer does not keep or does not answer.

    Parameters
    ----------
    judged : OfferOnBasis
        Guaranteed values on the tender's basis.
    lot : Lot
        The lot.
    limits : sequence of Limit
        Its limits, as `regulation_limits` gives them.

    Yields
    ------
    Finding
        Guaranteed values are compared unrounded and with zero tolerance.
    """
    for limit in limits:
        match limit.quantity:
            case "no-load loss":
                yield from _loss(judged, lot, limit, judged.no_load_loss, "no_load_loss_kw")
            case "load loss":
                yield from _loss(judged, lot, limit, judged.load_loss, "load_loss_kw")
            case "peak efficiency index":
                yield from _index(judged, lot, limit)
            case _:
                yield from _efficiency(judged.offer, lot, limit)


def _loss(judged: OfferOnBasis, lot: Lot, limit: Limit, loss: Figure | None, column: str) -> Iterator[Finding]:
    if loss is not None and not check_guarantee(limit, loss.value).is_kept:
        yield _beyond(judged.offer, lot, limit, column, f"{_shown(loss.value)} {loss.unit}")


def _index(judged: OfferOnBasis, lot: Lot, limit: Limit) -> Iterator[Finding]:
    """Index of the losses, with the cooling power at no load where the bidder states one."""
    if judged.no_load_loss is None or judged.load_loss is None:
        return
    cooling = judged.offer.cooling_power_no_load_kw
    no_load = judged.no_load_loss.value + (Decimal(0) if cooling is None else cooling.value)
    load, power = judged.load_loss.value, lot.rated_power_kva.value
    if not is_index_kept(no_load, load, power, limit.value):
        index = peak_efficiency_index_percent(no_load, load, power)
        yield _beyond(judged.offer, lot, limit, "load_loss_kw", f"{index:.4f} % from the guaranteed losses")


def _efficiency(offer: Offer, lot: Lot, limit: Limit) -> Iterator[Finding]:
    stated = offer.terms.declared_efficiency_percent
    if stated is None:
        place = offer.columns.get("declared_efficiency_percent", offer.place)
        rule = f"must be declared; {_sentence(limit, lot)}"
        yield Finding("limit-not-answered", "declared efficiency", rule, place, None, *_who(offer))
    elif not check_guarantee(limit, stated.value).is_kept:
        yield _beyond(offer, lot, limit, "declared_efficiency_percent", f"{stated.text} %")


def _beyond(offer: Offer, lot: Lot, limit: Limit, column: str, got: str) -> Finding:
    stated: Quantity | None = (
        offer.terms.declared_efficiency_percent if column == "declared_efficiency_percent" else getattr(offer, column)
    )
    place = offer.columns.get(column, offer.place) if stated is None else stated.place
    cautions = "".join(f"; caution: {caution}" for caution in limit.cautions)
    rule = f"{_sentence(limit, lot)}{cautions}"
    return Finding("regulation-limit-not-kept", limit.quantity, rule, place, got, *_who(offer))


def _sentence(limit: Limit, lot: Lot) -> str:
    side = "must not exceed" if limit.bound == "maximum" else "must be at least"
    until = "" if limit.in_force_to is None else f" to {limit.in_force_to.isoformat()}"
    where = "" if lot.regulation is None else f" ({lot.regulation.place})"
    return (
        f"{side} {_shown(limit.value)} {limit.unit}{where}: {limit.source}; Table {limit.table}, {limit.row}, in force "
        f"from {limit.in_force_from.isoformat()}{until}"
    )


def _shown(value: Decimal) -> str:
    """A value with at most eight places; what is compared has all of them."""
    places = -int(value.as_tuple().exponent)
    return f"{value.normalize():f}" if places <= _PLACES else f"{value:.{_PLACES}f}…"


def _value(quantity: Quantity | None) -> Decimal | None:
    return None if quantity is None else quantity.value


def _who(offer: Offer) -> tuple[str, str]:
    return offer.bidder.value, offer.lot.value
