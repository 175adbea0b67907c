"""Power flows of transformers by power-grid-model: an independent solver that takes P0 and Pk as they are guaranteed.

Each unit stands alone between a stiff source and a load of its own, so that several are solved in one network and do
not see one another. The solver models a unit as a pi: half of the magnetizing branch on either side of the impedance
(its documentation, from memory; a test holds its results to that).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray
from power_grid_model import LoadGenType, PowerGridModel, WindingType, initialize_array

Array = NDArray[np.float64]

#: Short-circuit power of the source [VA]: so high that its own voltage drop stays below 1e-6, so low that no digits go.
_SOURCE_VA = 1e15
_SOURCE, _FIRST_UNIT, _FIRST_LOAD = 1_000, 2_000, 3_000
_W, _VOLT = 1000.0, 1000.0


@dataclass(frozen=True)
class Unit:
    """A transformer for a power flow.

    Parameters
    ----------
    rated_power_kva : float
        Rating at which load loss and impedance are stated. [kVA]
    no_load_loss_kw, load_loss_kw : float
        P0 and Pk. [kW]
    impedance : float
        Short-circuit impedance as a fraction of the base impedance. [1]
    no_load_current : float
        As a fraction of the rated current; at least the share of its loss. [1]
    """

    rated_power_kva: float
    no_load_loss_kw: float
    load_loss_kw: float
    impedance: float
    no_load_current: float


@dataclass(frozen=True)
class Flow:
    """Results of a batch of flows; arrays steps x units.

    Parameters
    ----------
    loss_kw : ndarray
        Active power in at both ends. [kW]
    current_pu : ndarray
        Current of the load over rated current. [1]
    voltage_pu, source_voltage_pu : ndarray
        Voltage at the load, and at the source, over rated voltage. [1]
    power_pu : ndarray of complex
        Power into the load over rated power. [1]
    """

    loss_kw: Array
    current_pu: Array
    voltage_pu: Array
    source_voltage_pu: Array
    power_pu: NDArray[np.complex128]


def network(
    units: Sequence[Unit], *, rated_voltages_kv: tuple[float, float] = (11.0, 0.4), source_pu: float = 1.0
) -> PowerGridModel:
    """Units of one voltage side by side on a stiff source, each with a load of constant current."""
    count = len(units)
    numbers = np.arange(count)
    high, low = (voltage * _VOLT for voltage in rated_voltages_kv)
    node = _filled("node", count + 1, id=np.arange(count + 1), u_rated=[high] + [low] * count)
    source = _filled("source", 1, id=_SOURCE, node=0, status=1, u_ref=source_pu, sk=_SOURCE_VA)
    transformer = _filled(
        "transformer",
        count,
        id=_FIRST_UNIT + numbers,
        from_node=0,
        to_node=1 + numbers,
        from_status=1,
        to_status=1,
        u1=high,
        u2=low,
        sn=[unit.rated_power_kva * _W for unit in units],
        uk=[unit.impedance for unit in units],
        pk=[unit.load_loss_kw * _W for unit in units],
        i0=[unit.no_load_current for unit in units],
        p0=[unit.no_load_loss_kw * _W for unit in units],
        winding_from=WindingType.delta,
        winding_to=WindingType.wye_n,
        clock=11,
        **dict.fromkeys(("tap_side", "tap_pos", "tap_min", "tap_max", "tap_nom", "tap_size"), 0),
    )
    load = _filled(
        "sym_load",
        count,
        id=_FIRST_LOAD + numbers,
        node=1 + numbers,
        status=1,
        type=LoadGenType.const_current,
        p_specified=0,
        q_specified=0,
    )
    return PowerGridModel({"node": node, "source": source, "transformer": transformer, "sym_load": load})


def losses_kw(model: PowerGridModel, units: Sequence[Unit], load_pu: ArrayLike, *, power_factor: float) -> Array:
    """Loss of every unit at every load, one flow a step. [kW]

    Parameters
    ----------
    model : PowerGridModel
        `network` of the same units.
    units : sequence of Unit
        The units.
    load_pu : array_like
        Current over rated current; one axis of steps, the same for all units. [1]
    power_factor : float
        Of the load, lagging. [1]
    """
    wanted = {"transformer": ["p_from", "p_to"]}
    result = _solved(model, units, load_pu, power_factor, output_component_types=wanted, error_tolerance=1e-8)
    return np.asarray((result["transformer"]["p_from"] + result["transformer"]["p_to"]) / _W)


def flow(model: PowerGridModel, units: Sequence[Unit], load_pu: ArrayLike, *, power_factor: float) -> Flow:
    """The same with currents and voltages, to more digits; arguments as for `losses_kw`."""
    result = _solved(model, units, load_pu, power_factor, error_tolerance=1e-12)
    branch, node = result["transformer"], result["node"]
    rated = np.array([unit.rated_power_kva for unit in units]) * _W
    power = -(branch["p_to"] + 1j * branch["q_to"]) / rated
    voltage = node["u_pu"][:, 1:]
    return Flow(
        loss_kw=np.asarray((branch["p_from"] + branch["p_to"]) / _W),
        current_pu=np.abs(power) / voltage,
        voltage_pu=voltage,
        source_voltage_pu=np.broadcast_to(node["u_pu"][:, :1], voltage.shape),
        power_pu=power,
    )


def _filled(component: str, size: int, **values: Any) -> NDArray[Any]:
    """Input array of the solver with every field set that it needs."""
    array = initialize_array("input", component, size)
    for name, value in values.items():
        array[name] = value
    return array


def _solved(
    model: PowerGridModel, units: Sequence[Unit], load_pu: ArrayLike, power_factor: float, **options: Any
) -> dict[str, Any]:
    """One flow a step. A load of constant current takes its specified power at rated voltage."""
    load = np.asarray(load_pu, dtype=np.float64)[:, np.newaxis]
    rated = np.array([unit.rated_power_kva for unit in units]) * _W
    update = initialize_array("update", "sym_load", (load.shape[0], len(units)))
    update["id"] = _FIRST_LOAD + np.arange(len(units))
    update["p_specified"] = load * rated * power_factor
    update["q_specified"] = load * rated * np.sqrt(1 - power_factor**2)
    # threading=0: all processors
    result: dict[str, Any] = model.calculate_power_flow(update_data={"sym_load": update}, threading=0, **options)
    return result
