"""Hypothesis strategies of bids that trade price against losses, so that several lead somewhere. All invented."""

from __future__ import annotations

from decimal import Decimal as D
from itertools import pairwise
from typing import Any

from hypothesis import strategies as st

from lossworth.sensitivity.break_even_result import BreakEven
from support import records as make

Row = tuple[D, D, D]

no_loads = st.decimals("0.020", "0.400", places=3)
loads = st.decimals("0.500", "4.000", places=3)


@st.composite
def traded(draw: st.DrawFn) -> Row:
    """One bid whose price falls with its losses, more or less."""
    no_load, load = draw(no_loads), draw(loads)
    price = 9000 - 9000 * no_load - 900 * load + 900 * (no_load - D("0.2")) ** 2 + draw(st.decimals(-60, 60, places=2))
    return round(price, 2), no_load, load


rows = st.lists(traded(), min_size=1, max_size=8)
several = st.lists(traded(), min_size=2, max_size=8)

percents = st.decimals("-3", "5", places=2)


@st.composite
def economics(draw: st.DrawFn) -> Any:
    """Economics with prices, charges and escalations."""
    return make.economics(
        energy_price_per_kwh=make.quantity(str(draw(st.decimals("0.03", "0.20", places=3)))),
        energy_price_escalation_percent=make.quantity(str(draw(percents))),
        demand_charge_per_kw_year=make.quantity(str(draw(st.integers(0, 120)))),
        demand_charge_escalation_percent=make.quantity(str(draw(percents))),
        discount_rate_percent=make.quantity(str(draw(st.decimals("1", "12", places=1)))),
        evaluation_period_years=make.quantity(str(draw(st.integers(5, 40)))),
    )


@st.composite
def loading(draw: st.DrawFn) -> Any:
    """A loading condition with growth up to a cap."""
    return make.loading(
        load_factor=make.quantity(str(draw(st.decimals("0.2", "0.8", places=2)))),
        peak_load_pu=make.quantity(str(draw(st.decimals("0.3", "0.9", places=2)))),
        peak_load_growth_percent=make.quantity(str(draw(st.decimals("0", "3", places=1)))),
        peak_responsibility_factor=make.quantity(str(draw(st.decimals("0.5", "1", places=2)))),
    )


def segments(found: BreakEven, highest: float) -> list[tuple[float, float, tuple[str, ...]]]:
    """Parts of the range between borders, each with the leader that the borders name on it."""
    if not found.borders:
        return [(found.lowest, highest, found.leaders)]
    values = [found.lowest, *(border.value for border in found.borders), highest]
    names = [found.borders[0].below, *(border.above for border in found.borders)]
    return [(low, high, who) for (low, high), who in zip(pairwise(values), names, strict=True)]
