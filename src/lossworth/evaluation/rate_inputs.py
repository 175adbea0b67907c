"""Inputs of a derivation as figures: stated ones with their place, the others with the rule that gives them."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from ..records.quantity import Quantity
from ..records.tender import Economics, LoadingCondition, Lot, PresentValueDate, PriceOfYear1
from ..trail import Figure, Rule, constant, difference, product, quotient, read, total
from .identities import figure_id
from .load_and_price import LoadAndPrice

__all__ = ["SIGNIFICANT_DIGITS", "Naming", "economics_inputs", "loading_inputs", "to_decimal"]

SIGNIFICANT_DIGITS = 12  # the last bits of a float differ between processors; twelve digits do not
_DAYS_OF_YEAR = Decimal("365.25")
_HOURS = Decimal(8760)

_LABELS = {
    "discount_rate_percent": "discount rate",
    "evaluation_period_years": "evaluation period",
    "years_before_end": "payment before the end of the year",
    "escalate_before_year_1": "escalation before year 1 (1 yes, 0 no)",
    "energy_price_per_kwh": "energy price",
    "energy_price_escalation_percent": "escalation of the energy price",
    "carbon_cost_per_kwh": "carbon cost",
    "carbon_cost_escalation_percent": "escalation of the carbon cost",
    "demand_charge_per_kw_year": "demand charge",
    "demand_charge_per_kw_month": "demand charge per month",
    "demand_charge_escalation_percent": "escalation of the demand charge",
    "fixed_charge_rate_percent": "fixed charge rate",
    "price_delay_years": "years from the price date to the service date",
    "discount_delay_years": "years from the service date back to the date of present values",
    "peak_load_pu": "peak load of year 1, per unit of the rating",
    "peak_load_growth_percent": "growth of the peak load",
    "peak_load_cap_pu": "cap of the peak load, per unit of the rating",
    "upstream_gross_up": "upstream gross-up",
    "hours_of_load": "hours of a year",
    "cooling_hours": "hours of cooling",
    "cooling_share_at_peak": "share of the cooling on at system peak",
}


def to_decimal(value: float) -> Decimal:
    """Number of the engine as a decimal with twelve significant digits.

    Parameters
    ----------
    value : float
        Finite.

    Returns
    -------
    Decimal
        The same on every machine.
    """
    return Decimal(f"{value:.{SIGNIFICANT_DIGITS}g}")


@dataclass(frozen=True, slots=True)
class Naming:
    """Identities and labels of the figures of one derivation.

    Parameters
    ----------
    lot : str
        Id of the lot.
    branch : str
        ``"rates"``, or ``"study"`` for a planner's derivation beside announced rates.
    currency : str
        Evaluation currency.
    """

    lot: str
    branch: str
    currency: str

    def id(self, *parts: str) -> str:
        """Identity of a figure."""
        return figure_id(f"lot {self.lot}", self.branch, *parts)

    def label(self, name: str) -> str:
        """Name of a quantity in the trade's words."""
        return _LABELS.get(name, name.replace("_", " "))

    def stated(self, name: str, quantity: Quantity, unit: str) -> Figure:
        """Figure that stands in the tender file."""
        return read(self.id(name), self.label(name), quantity.value, unit, quantity.place)

    def by_rule(self, name: str, value: Decimal, unit: str, statement: str) -> Figure:
        """Figure that follows from a rule or from a file."""
        return Figure(self.id(name), self.label(name), value, unit, Rule(statement))

    def or_default(self, name: str, quantity: Quantity | None, unit: str, default: Decimal, silence: str) -> Figure:
        """Stated figure, or what the tender's silence means."""
        if quantity is not None:
            return self.stated(name, quantity, unit)
        return self.by_rule(name, default, unit, f"not stated: {silence}")


def economics_inputs(naming: Naming, economics: Economics, joined: LoadAndPrice | None) -> dict[str, Figure]:
    """Inputs that say what losses cost and how the future is discounted.

    Parameters
    ----------
    naming : Naming
        Of the derivation.
    economics : Economics
        As stated.
    joined : LoadAndPrice or None
        Load and price within the year, where the load comes from a profile.

    Returns
    -------
    dict of str to Figure
        By the names of the year table's inputs.
    """
    timing, meaning = economics.timing, economics.energy_price_meaning
    before_end = Decimal(str(timing.years_before_end))
    escalates_first = Decimal(int(meaning is PriceOfYear1.TODAY))
    inputs = {
        "discount_rate_percent": naming.stated("discount_rate_percent", economics.discount_rate_percent, "%/year"),
        "evaluation_period_years": naming.stated("evaluation_period_years", economics.evaluation_period_years, "year"),
        "years_before_end": naming.by_rule(
            "years_before_end", before_end, "year", f"timing: {timing.value} ({economics.place})"
        ),
        "escalate_before_year_1": naming.by_rule(
            "escalate_before_year_1", escalates_first, "1", f"stated energy price: {meaning.value} ({economics.place})"
        ),
    }
    inputs |= _energy_price(naming, economics, joined)
    inputs["energy_price_escalation_percent"] = naming.or_default(
        "energy_price_escalation_percent",
        economics.energy_price_escalation_percent,
        "%/year",
        Decimal(0),
        "the energy price does not escalate",
    )
    inputs |= _carbon_cost(naming, economics)
    inputs["demand_charge_per_kw_year"] = _demand_charge(naming, economics)
    inputs["demand_charge_escalation_percent"] = naming.or_default(
        "demand_charge_escalation_percent",
        economics.demand_charge_escalation_percent,
        "%/year",
        Decimal(0),
        "the demand charge does not escalate",
    )
    inputs |= _dates(naming, economics)
    inputs["upstream_gross_up"] = naming.or_default(
        "upstream_gross_up", economics.upstream_gross_up, "1", Decimal(1), "no losses upstream of the unit"
    )
    if economics.fixed_charge_rate_percent is not None:
        inputs["fixed_charge_rate_percent"] = naming.stated(
            "fixed_charge_rate_percent", economics.fixed_charge_rate_percent, "%/year"
        )
    return inputs


def _energy_price(naming: Naming, economics: Economics, joined: LoadAndPrice | None) -> dict[str, Figure]:
    unit = f"{naming.currency}/kWh"
    if economics.energy_price_per_kwh is not None:
        return {"energy_price_per_kwh": naming.stated("energy_price_per_kwh", economics.energy_price_per_kwh, unit)}
    if economics.energy_price_by_year_per_kwh is not None:
        years = enumerate(economics.energy_price_by_year_per_kwh, start=1)
        return {
            f"energy_price_year_{year}": naming.stated(f"energy_price_year_{year}", price, unit)
            for year, price in years
        }
    if joined is None or joined.price_per_kwh is None:
        raise ValueError("the economics state no energy price that can be used")
    if economics.energy_price_blocks:
        return {"energy_price_per_kwh": _mean_of_blocks(naming, economics, joined, unit)}
    mean = to_decimal(float((joined.price_per_kwh * joined.hours).sum() / joined.hours.sum()))
    file = "" if economics.energy_price_series is None else economics.energy_price_series.file
    statement = f"mean of {file} over the hours of the year ({economics.place})"
    return {"energy_price_per_kwh": naming.by_rule("energy_price_per_kwh", mean, unit, statement)}


def _mean_of_blocks(naming: Naming, economics: Economics, joined: LoadAndPrice, unit: str) -> Figure:
    """Mean price as the sum over the blocks of hours times price, divided by all hours."""
    blocks = economics.energy_price_blocks
    places = {float(block.price_per_kwh.value): position for position, block in enumerate(blocks)}
    prices = joined.price_per_kwh
    if prices is None:
        raise ValueError("blocks without prices of the steps")
    parts, hours_of_blocks = [], []
    for position, block in enumerate(blocks):
        price_value = float(block.price_per_kwh.value)
        if places[price_value] != position:
            continue  # a later block of the same price holds the hours of both
        hours_value = to_decimal(float(joined.hours[prices == price_value].sum()))
        name = f"block {block.name}"
        hours = naming.by_rule(
            f"hours of block {block.name}", hours_value, "h/year", f"hours of the profile's year ({block.place})"
        )
        price = naming.stated(f"price of block {block.name}", block.price_per_kwh, unit)
        hours_of_blocks.append(hours)
        parts.append(product(naming.id(name), f"price times hours, {block.name}", f"{unit} h", hours, price))
    everything = total(naming.id("block hours"), "hours of all blocks", "h/year", *hours_of_blocks)
    summed = total(naming.id("block sum"), "price times hours of all blocks", f"{unit} h", *parts)
    return quotient(naming.id("energy_price_per_kwh"), "mean energy price", unit, summed, everything)


def _carbon_cost(naming: Naming, economics: Economics) -> dict[str, Figure]:
    """Carbon cost, only where the tender announces that it counts."""
    if economics.carbon_cost_per_kwh is None or not economics.carbon_cost_counts:
        return {}
    return {
        "carbon_cost_per_kwh": naming.stated(
            "carbon_cost_per_kwh", economics.carbon_cost_per_kwh, f"{naming.currency}/kWh"
        ),
        "carbon_cost_escalation_percent": naming.or_default(
            "carbon_cost_escalation_percent",
            economics.carbon_cost_escalation_percent,
            "%/year",
            Decimal(0),
            "the carbon cost does not escalate",
        ),
    }


def _demand_charge(naming: Naming, economics: Economics) -> Figure:
    unit = f"{naming.currency}/(kW year)"
    if economics.demand_charge_per_kw_month is None:
        return naming.or_default(
            "demand_charge_per_kw_year",
            economics.demand_charge_per_kw_year,
            unit,
            Decimal(0),
            "no demand charge",
        )
    monthly = naming.stated(
        "demand_charge_per_kw_month", economics.demand_charge_per_kw_month, f"{naming.currency}/(kW month)"
    )
    months = constant("months of a year", "months of a year", Decimal(12), "month/year", "1 year = 12 months")
    return product(naming.id("demand_charge_per_kw_year"), "demand charge", unit, monthly, months)


def _dates(naming: Naming, economics: Economics) -> dict[str, Figure]:
    delay, statement = Decimal(0), "not stated: prices are those of the first year of service"
    if economics.price_date is not None and economics.service_date is not None:
        days = (economics.service_date - economics.price_date).days
        delay = to_decimal(float(days / _DAYS_OF_YEAR))
        statement = (
            f"{economics.price_date} to {economics.service_date}: {days} days of {_DAYS_OF_YEAR} a year "
            f"({economics.place})"
        )
    to_price_date = economics.present_value_at is PresentValueDate.PRICE
    what = f"present values at the {economics.present_value_at.value} ({economics.place})"
    return {
        "price_delay_years": naming.by_rule("price_delay_years", delay, "year", statement),
        "discount_delay_years": naming.by_rule(
            "discount_delay_years", delay if to_price_date else Decimal(0), "year", what
        ),
    }


def loading_inputs(
    naming: Naming, loading: LoadingCondition, lot: Lot, loss_factor: dict[str, Figure] | None
) -> dict[str, Figure]:
    """Inputs that say how the units are loaded.

    Parameters
    ----------
    naming : Naming
        Of the derivation.
    loading : LoadingCondition
        As stated.
    lot : Lot
        For the rated power, where the peak load comes from a profile.
    loss_factor : dict of str to Figure or None
        Load and loss factor from a profile; None where they are stated.

    Returns
    -------
    dict of str to Figure
        By the names of the year table's inputs.
    """
    inputs = dict(loss_factor) if loss_factor is not None else _stated_loss_factor(naming, loading)
    inputs |= _peak_load(naming, loading, lot)
    for name, unit, default, silence in (
        ("peak_load_growth_percent", "%/year", Decimal(0), "the peak load does not grow"),
        ("peak_responsibility_factor", "1", Decimal(1), "without effect where there is no demand charge"),
        ("hours_energized", "h/year", _HOURS, "energized all year"),
        ("cooling_hours", "h/year", Decimal(0), _silence_on_cooling(loading)),
        ("cooling_share_at_peak", "1", Decimal(0), "without effect where there is no demand charge"),
    ):
        inputs[name] = naming.or_default(name, getattr(loading, name), unit, default, silence)
    if loading.peak_load_cap_pu is not None:
        inputs["peak_load_cap_pu"] = naming.stated("peak_load_cap_pu", loading.peak_load_cap_pu, "1")
    inputs["hours_of_load"] = constant(
        naming.id("hours_of_load"), naming.label("hours_of_load"), _HOURS, "h/year", "hours of a year"
    )
    return inputs


def _silence_on_cooling(loading: LoadingCondition) -> str:
    return "the cooling stages follow the load" if loading.cooling_stages else "no auxiliary loss is valued by hours"


def _peak_load(naming: Naming, loading: LoadingCondition, lot: Lot) -> dict[str, Figure]:
    if loading.peak_load_by_year_pu is not None:
        years = enumerate(loading.peak_load_by_year_pu, start=1)
        return {f"peak_load_year_{year}": naming.stated(f"peak_load_year_{year}", peak, "1") for year, peak in years}
    if loading.peak_load_pu is not None:
        return {"peak_load_pu": naming.stated("peak_load_pu", loading.peak_load_pu, "1")}
    profile = loading.profile
    if profile is None:
        raise ValueError("the loading condition states no peak load")
    statement = f"greatest value of {profile.file} ({profile.place})"
    peak = to_decimal(max(profile.loads))
    if profile.unit == "pu":
        return {"peak_load_pu": naming.by_rule("peak_load_pu", peak, "1", statement)}
    basis = lot.loss_basis.load_loss_rating_kva if lot.loss_basis else None
    power = basis or lot.rated_power_kva
    greatest = naming.by_rule("profile peak", peak, "kVA", statement)
    rated = read(naming.id("rating"), "rating of the guaranteed load loss", power.value, "kVA", power.place)
    return {"peak_load_pu": quotient(naming.id("peak_load_pu"), naming.label("peak_load_pu"), "1", greatest, rated)}


def _stated_loss_factor(naming: Naming, loading: LoadingCondition) -> dict[str, Figure]:
    """Loss factor as stated, or k LF + (1 - k) LF^2 as figures that show their arithmetic."""
    if loading.loss_factor is not None:
        return {"loss_factor": naming.stated("loss_factor", loading.loss_factor, "1")}
    if loading.load_factor is None or loading.loss_factor_coefficient is None:
        raise ValueError("a loading condition needs a loss factor, or a load factor with its coefficient")
    load_factor = naming.stated("load_factor", loading.load_factor, "1")
    coefficient = naming.stated("loss_factor_coefficient", loading.loss_factor_coefficient, "1")
    one = constant("one", "one", Decimal(1), "1", "the number 1")
    linear = product(
        naming.id("loss_factor", "linear"), "linear part of the loss factor", "1", coefficient, load_factor
    )
    rest = difference(naming.id("loss_factor", "rest"), "1 less the coefficient", "1", one, coefficient)
    square = product(
        naming.id("loss_factor", "square"), "quadratic part of the loss factor", "1", rest, load_factor, load_factor
    )
    return {
        "load_factor": load_factor,
        "loss_factor_coefficient": coefficient,
        "loss_factor": total(naming.id("loss_factor"), "loss factor", "1", linear, square),
    }
