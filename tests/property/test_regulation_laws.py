"""Laws of the regulation tables, tried on many ratings."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from decimal import Decimal
from fractions import Fraction
from typing import Any

from hypothesis import given
from hypothesis import strategies as st

from lossworth.regulations.eu_losses import maximum_losses
from lossworth.regulations.eu_peak_efficiency import minimum_peak_efficiency_index
from lossworth.regulations.eu_transformer import DualVoltage, EuTransformer, Insulation
from lossworth.regulations.exact import read_column
from lossworth.regulations.limits import Limit
from lossworth.regulations.plausible_losses import plausible_losses
from lossworth.regulations.us_efficiency import UsEquipment, UsTransformer, minimum_efficiency
from support.regulation_rows import eu_unit, us_unit

ratings = st.decimals(min_value="0.001", max_value=3150, places=3)
any_decimal = st.decimals(allow_nan=True, allow_infinity=True)
#: The arithmetic of the test itself has 28 digits.
digits = st.integers(min_value=0, max_value=20)
tables = st.dictionaries(
    st.decimals(min_value=1, max_value=10**6, places=2), st.decimals(min_value=1, max_value=10**6, places=3), min_size=2
)


def both(unit: EuTransformer, tier: int = 2) -> tuple[Limit, Limit]:
    """Both limits of a unit."""
    limits = maximum_losses(unit, tier=tier)
    return limits.no_load_loss, limits.load_loss


@given(tables, st.data())
def test_read_column__is_the_line_between_its_rows(values: dict[Decimal, Decimal], data: st.DataObject) -> None:
    """Between any two neighbors the value lies on their line, exactly; the order of the rows does not matter."""
    order = data.draw(st.permutations(sorted(values)))
    rows = [{"rated_power_kva": str(power), "loss_w": str(values[power])} for power in order]
    known = sorted(values)
    at = data.draw(st.decimals(min_value=known[0], max_value=known[-1], places=4))
    value = read_column(rows, "loss_w", rated_power_kva=at, covered="invented").value
    x0 = max(power for power in known if power <= at)
    x1 = min(power for power in known if power >= at)
    # the line through both rows, multiplied out: no division that could hide a rounding
    left = (value - Fraction(values[x0])) * (Fraction(x1) - Fraction(x0))
    assert left == (Fraction(values[x1]) - Fraction(values[x0])) * (Fraction(at) - Fraction(x0))
    assert min(values[x0], values[x1]) <= value <= max(values[x0], values[x1])


@given(ratings, st.sampled_from([1, 2]), digits)
def test_is_kept_by__decides_at_any_digit(power: Decimal, tier: int, places: int) -> None:
    """The greatest guarantee of so many digits that keeps the limit is kept, the next one is not."""
    for limit in both(eu_unit(rated_power_kva=power), tier):
        step = Decimal(1).scaleb(-places - 3)
        greatest = Decimal(int(Fraction(limit.value) / Fraction(step))) * step
        assert limit.is_kept_by(greatest)
        assert not limit.is_kept_by(greatest + step)


@given(ratings, st.sampled_from(Insulation))
def test_maximum_losses__tier_2_is_never_laxer(power: Decimal, insulation: Insulation) -> None:
    """A limit of tier 2 is at most that of tier 1."""
    unit = eu_unit(rated_power_kva=power, insulation=insulation)
    for first, second in zip(both(unit, 1), both(unit, 2), strict=True):
        assert second.value <= first.value


@given(ratings, st.sampled_from(Insulation), st.sampled_from(DualVoltage), st.booleans())
def test_maximum_losses__increases_never_lower(
    power: Decimal, insulation: Insulation, dual: DualVoltage, tappings: bool
) -> None:
    """Another voltage, two voltages or tappings raise a limit or leave it, and the sum is at most the product."""
    plain = eu_unit(rated_power_kva=power, insulation=insulation)
    special = replace(plain, higher_um_kv=Decimal(36), dual_voltage=dual, has_on_load_tap_changer=tappings)
    for limit, raised in zip(both(plain), both(special), strict=True):
        assert limit.value <= raised.value
        for caution in raised.cautions:
            if "Multiplied" in caution:
                assert raised.value < Decimal(caution.split()[-2])


@given(any_decimal, any_decimal, any_decimal, st.sampled_from(Insulation), st.sampled_from([0, 1, 3]), st.booleans())
def test_eu__answers_or_says_what_is_not_covered(
    power: Decimal, higher: Decimal, lower: Decimal, insulation: Insulation, phases: int, pole: bool
) -> None:
    """Whatever is asked, there is a limit, a LookupError or a ValueError."""
    changes: dict[str, Any] = {"insulation": insulation, "phases": phases, "is_pole_mounted_replacement": pole}
    try:
        unit = eu_unit(rated_power_kva=power, higher_um_kv=higher, lower_um_kv=lower, **changes)
        limit = minimum_peak_efficiency_index(unit, tier=2) if unit.is_large else both(unit)[0]
    except (LookupError, ValueError):
        return
    assert limit.value.is_finite()
    assert limit.source


@given(any_decimal, any_decimal, st.sampled_from(UsEquipment), st.sampled_from([0, 1, 3]), st.dates())
def test_us__answers_or_says_what_is_not_covered(
    power: Decimal, level: Decimal, equipment: UsEquipment, phases: int, day: date
) -> None:
    """Whatever is asked, there is a limit that holds on the day, a LookupError or a ValueError."""
    try:
        unit: UsTransformer = us_unit(
            rated_power_kva=power, bil_kv=level, equipment=equipment, phases=phases, input_voltage_kv=None
        )
        limit = minimum_efficiency(unit, manufactured=day)
    except (LookupError, ValueError):
        return
    assert limit.in_force_from <= day <= (limit.in_force_to or date.max)


@given(st.decimals(min_value=50, max_value=3150, places=2), st.sampled_from(Insulation))
def test_plausible_losses__bands_hold_the_limits(power: Decimal, insulation: Insulation) -> None:
    """A loss at the limit of either tier is plausible, and the same number in the wrong unit is not."""
    bands = plausible_losses(insulation, rated_power_kva=power, phases=3)
    for tier in (1, 2):
        limits = both(eu_unit(rated_power_kva=power, insulation=insulation), tier)
        for band, limit in zip((bands.no_load_loss, bands.load_loss), limits, strict=True):
            positions = [band.position_of(limit.value * factor) for factor in (1, 1000, Decimal("0.001"))]
            assert positions == ["inside", "outside the hard band", "outside the hard band"]
