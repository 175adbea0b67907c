"""Information beside the money: efficiency and energy of an offer. No part of any amount, and no part of the rank."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

import numpy as np

from ..capitalization import losses
from ..records.tender import Lot, Tender
from ..trail import Figure
from .loss_basis import OfferOnBasis
from .owning_cost import auxiliary_loss
from .profile_facts import peak_loads
from .result import Information, LotRates

__all__ = ["information"]

_LARGE = 1000
_LOADS = (Decimal("0.25"), Decimal("0.5"), Decimal(1))


def information(tender: Tender, lot: Lot, rates: LotRates, judged: OfferOnBasis) -> tuple[Information, ...]:
    """Efficiency of one unit and, where the tender announces a loading, its energy.

    Parameters
    ----------
    tender : Tender
        For the carbon intensity.
    lot : Lot
        For the rated power.
    rates : LotRates
        With the inputs of an announced derivation, or without.
    judged : OfferOnBasis
        Losses on the tender's basis.

    Returns
    -------
    tuple of Information
        Empty where a loss is not stated. Efficiencies are at unity power factor.

    References
    ----------
    .. [1] Power bases: IEC 60076-20 input (from memory); 10 CFR 431 Subpart K Appendix A output.
    .. [2] Peak efficiency index: Commission Regulation (EU) No 548/2014, without cooling power at no load.
    """
    if judged.no_load_loss is None or judged.load_loss is None:
        return ()
    no_load, load = float(judged.no_load_loss.value), float(judged.load_loss.value)
    power = float(lot.rated_power_kva.value)
    facts = (*_efficiencies(no_load, load, power), *_peak_efficiency(no_load, load, power))
    return (*facts, *_energy(tender, lot, rates, judged, auxiliary_loss(judged.offer, lot)))


def _efficiencies(no_load: float, load: float, power: float) -> Iterator[Information]:
    for at in _LOADS:
        if losses.part_load_loss(no_load, load, float(at)) >= float(at) * power:
            continue  # a slip of the unit, which the limits and checks name; it has no efficiency
        percent = f"{int(at * 100)} % load"
        of_input = losses.efficiency_of_input(no_load, load, rated_power_kva=power, load_pu=float(at))
        of_output = losses.efficiency_of_output(no_load, load, rated_power_kva=power, load_pu=float(at))
        yield Information(f"efficiency at {percent}, of the input (IEC)", _percent(of_input), "%")
        yield Information(f"efficiency at {percent}, of the output (IEEE)", _percent(of_output), "%")


def _peak_efficiency(no_load: float, load: float, power: float) -> Iterator[Information]:
    if no_load <= 0 or load <= 0 or 4 * no_load * load >= power**2:
        return
    greatest = losses.load_of_greatest_efficiency(no_load, load)
    index = losses.peak_efficiency_index(no_load, load, rated_power_kva=power)
    yield Information("load of greatest efficiency", _four(float(greatest) * 100), "%")
    yield Information("peak efficiency index", _percent(index), "%")


def _energy(
    tender: Tender, lot: Lot, rates: LotRates, judged: OfferOnBasis, auxiliary: Figure | None
) -> tuple[Information, ...]:
    """Energy lost by one unit in year 1 and over the evaluation period, by time and not by price."""
    inputs = rates.inputs
    if not inputs or judged.no_load_loss is None or judged.load_loss is None or lot.derivation is None:
        return ()
    peaks = peak_loads(inputs)
    factor = float(inputs.get("loss_factor_by_time", inputs["loss_factor"]).value)
    hours = float(inputs["hours_of_load"].value)
    no_load = float(judged.no_load_loss.value) * float(inputs["hours_energized"].value)
    load = float(judged.load_loss.value) * hours * factor * peaks**2
    cooling = _cooling_hours(rates, peaks.size) * (0.0 if auxiliary is None else float(auxiliary.value))
    yearly = no_load + load + cooling
    facts = [
        Information("energy lost in year 1", _four(float(yearly[0])), "kWh"),
        Information(f"energy lost in {peaks.size} years", _four(float(yearly.sum())), "kWh"),
    ]
    intensity = tender.economics[lot.derivation.economics.value].carbon_intensity_kg_per_kwh
    if intensity is not None:
        carbon = float(yearly.sum()) * float(intensity.value)
        facts.append(Information(f"carbon dioxide of {peaks.size} years", _four(carbon / 1000), "t"))
    return tuple(facts)


def _cooling_hours(rates: LotRates, years: int) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
    if rates.load_facts is not None and rates.load_facts.stages:
        stages = rates.load_facts.stages
        return np.asarray(sum(stage.share * np.asarray(stage.hours_by_year) for stage in stages), dtype=np.float64)
    return np.full(years, float(rates.inputs["cooling_hours"].value))


def _percent(value: np.ndarray[tuple[int, ...], np.dtype[np.float64]]) -> Decimal:
    return Decimal(f"{float(value) * 100:.4f}")


def _four(value: float) -> Decimal:
    """Whole units where the value is large, four significant digits where it is small."""
    return Decimal(f"{value:.0f}") if abs(value) >= _LARGE else Decimal(f"{value:.4g}")
