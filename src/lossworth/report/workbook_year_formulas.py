"""Formulas of one year of the sheet with the rates by year: the year-by-year model written for a spreadsheet."""

from __future__ import annotations

from collections.abc import Callable, Mapping

__all__ = ["BY_TIME", "Inputs", "year_formulas"]

#: Cooling hours by time, which a carbon cost needs beside a price that moves within the year: a column of this sheet.
BY_TIME = "cooling_hours_by_time"

#: Reference to the cell of a named input on the inputs sheet; None where the table does not have it.
Inputs = Callable[[str], str | None]


def year_formulas(cells: Mapping[str, str], year: int, inputs: Inputs) -> dict[str, str]:
    """Formulas of one year of the table.

    Parameters
    ----------
    cells : mapping of str to str
        From the name of a column to the reference of its cell in the row of the year; the columns that the table of
        the lot has.
    year : int
        The year, counted from 1.
    inputs : callable
        From the name of an input to a reference to its cell, or None.

    Returns
    -------
    dict of str to str
        By name of the column: all that are formulas, so neither the year nor what follows from a load profile.

    Raises
    ------
    KeyError
        If the table lacks an input that a formula needs.

    Notes
    -----
    With year t, discount rate r, payment before the end of the year phi, delays d_p of prices and d_r of discounting:
    DF = (1 + r)^(phi - t - d_r); stated energy price p, carbon cost k and demand charge D escalate by
    (1 + e)^(t - 1 + d_p), each by its own rate; peak load grown and capped;
    A_t = G DF ((p + k) H + D), B_t = G DF beta^2 ((p LsF + k LsF_k) H_s + D R^2), C_t = G DF (p h + k h_k + D kappa).
    Where load and price come from data, LsF and h count by price, LsF_k and h_k by time.
    """
    need = _needing(inputs)
    t, discount, demand = cells["year"], cells["discount_factor"], cells["demand_charge_per_kw_year"]
    price, carbon, peak = cells["energy_price_per_kwh"], cells.get("carbon_cost_per_kwh"), cells["peak_load_pu"]
    share = f"{need('upstream_gross_up')}*{discount}"
    responsibility = need("peak_responsibility_factor")
    formulas = {
        "discount_factor": _discount_factor(t, inputs),
        "energy_price_per_kwh": f"={inputs(f'energy_price_year_{year}') or _energy_price(t, inputs)}",
        "demand_charge_per_kw_year": f"={_escalated('demand_charge_per_kw_year', 'demand_charge', t, inputs)}",
        "peak_load_pu": _peak_load(t, year, inputs),
        "no_load": f"={share}*({_sum(price, carbon)}*{need('hours_energized')}+{demand})",
        "load": f"={share}*{peak}^2*({_load_energy(price, carbon, inputs)}+{demand}*{responsibility}^2)",
    }
    if carbon is not None:
        formulas["carbon_cost_per_kwh"] = f"={_escalated('carbon_cost_per_kwh', 'carbon_cost', t, inputs)}"
    if "auxiliary" in cells:
        at_peak = cells.get("cooling_share_at_peak") or need("cooling_share_at_peak")
        formulas["auxiliary"] = f"={share}*({_cooling_energy(cells, inputs)}+{demand}*{at_peak})"
    return formulas


def _needing(inputs: Inputs) -> Callable[[str], str]:
    def need(name: str) -> str:
        reference = inputs(name)
        if reference is None:
            raise KeyError(name)
        return reference

    return need


def _sum(*terms: str | None) -> str:
    given = [term for term in terms if term is not None]
    return given[0] if len(given) == 1 else f"({'+'.join(given)})"


def _discount_factor(t: str, inputs: Inputs) -> str:
    need, delay = _needing(inputs), inputs("discount_delay_years")
    earlier = "" if delay is None else f"-{delay}"
    rate = f"1+{need('discount_rate_percent')}/100"
    exponent = f"{need('years_before_end')}-{t}{earlier}"
    return f"=IF({t}<={need('evaluation_period_years')},({rate})^({exponent}),0)"


def _escalated(name: str, kind: str, t: str, inputs: Inputs, more: str = "") -> str:
    need, delay = _needing(inputs), inputs("price_delay_years")
    later = "" if delay is None else f"+{delay}"
    return f"{need(name)}*(1+{need(f'{kind}_escalation_percent')}/100)^({t}-1{more}{later})"


def _energy_price(t: str, inputs: Inputs) -> str:
    more = f"+{_needing(inputs)('escalate_before_year_1')}"
    return _escalated("energy_price_per_kwh", "energy_price", t, inputs, more)


def _peak_load(t: str, year: int, inputs: Inputs) -> str:
    need, cap = _needing(inputs), inputs("peak_load_cap_pu")
    load = inputs(f"peak_load_year_{year}")
    if load is None:
        load = f"{need('peak_load_pu')}*(1+{need('peak_load_growth_percent')}/100)^({t}-1)"
    return f"={load}" if cap is None else f"=MIN({load},{cap})"


def _load_energy(price: str, carbon: str | None, inputs: Inputs) -> str:
    need, by_time = _needing(inputs), inputs("loss_factor_by_time")
    hours, factor = need("hours_of_load"), need("loss_factor")
    if carbon is None or by_time is None:
        return f"{_sum(price, carbon)}*{hours}*{factor}"
    return f"({price}*{factor}+{carbon}*{by_time})*{hours}"


def _cooling_energy(cells: Mapping[str, str], inputs: Inputs) -> str:
    price, carbon = cells["energy_price_per_kwh"], cells.get("carbon_cost_per_kwh")
    hours = cells.get("cooling_hours") or _needing(inputs)("cooling_hours")
    by_time = cells.get(BY_TIME)
    if carbon is None or by_time is None:
        return f"{_sum(price, carbon)}*{hours}"
    return f"{price}*{hours}+{carbon}*{by_time}"
