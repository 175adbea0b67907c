"""Do the keys of one table of economics fit together?"""

from __future__ import annotations

import datetime
from collections.abc import Iterator

from ..findings import Finding
from .tender_draft import Check, Draft, DraftTable

__all__ = ["ECONOMICS_CHECKS", "MOST_YEARS", "has_price"]

#: Longer evaluation periods are typing errors. Common practice, no source.
MOST_YEARS = 100
#: Ways to state the energy price, of which there is one: field and key.
_PRICES = {
    "energy_price_per_kwh": "energy_price_per_kwh",
    "energy_price_by_year_per_kwh": "energy_price_by_year_per_kwh (or energy_price_by_year)",
    "energy_price_series": "energy_price_series",
    "block": "tables [[economics.NAME.block]]",
}
_REAL_AND_NOMINAL = (
    "Bring one to the terms of the other: r_nominal = (1 + r_real) * (1 + inflation) - 1, and a real price becomes a "
    "nominal one by an escalation of (1 + real escalation) * (1 + inflation) - 1."
)


def check_terms(draft: Draft) -> Iterator[Finding]:
    """A real rate discounts real prices, a nominal rate nominal ones."""
    names = ("price_terms", "discount_rate_terms")
    for table in draft.economics.values():
        for name in names:
            if not table.has(name):
                rule = 'must be given, as "real" (without inflation) or "nominal" (with it)'
                yield table.finding("tender-key-missing", name, rule, fix="Add the key; both must be the same.")
        prices, rate = (table.text(name) for name in names)
        if prices and rate and prices != rate:
            rule = f"must be those of the prices, {prices}"
            yield table.finding("tender-conflict", "discount_rate_terms", rule, fix=_REAL_AND_NOMINAL)


def has_price(table: DraftTable, field: str) -> bool:
    """Whether the energy price is stated in one of the ways.

    Parameters
    ----------
    table : DraftTable
        Economics.
    field : str
        Field of the record, or ``"block"``.

    Returns
    -------
    bool
        True where the file gives it, readable or not.
    """
    return bool(table.inside.get("block")) if field == "block" else table.has(field)


def check_energy_price(draft: Draft) -> Iterator[Finding]:
    """The energy price is given exactly one way."""
    for table in draft.economics.values():
        given = [field for field in _PRICES if has_price(table, field)]
        if not given and (*table.loc, "energy_price_blocks") not in draft.failed:
            others = ", ".join(key for field, key in _PRICES.items() if field != "energy_price_per_kwh")
            rule = f"must be given, or one of: {others}"
            yield table.finding("tender-key-missing", "energy_price_per_kwh", rule)
        if "energy_price_by_year_per_kwh" in given:
            yield from _beside_prices_by_year(table)
        elif len(given) > 1:
            yield _beside(table, given[1], _PRICES[given[0]])
        if table.has("energy_price_clock") and "energy_price_series" not in given:
            rule = "must stand beside an energy_price_series only"
            yield table.finding("tender-conflict", "energy_price_clock", rule, fix="Take the line out.")


def _beside(table: DraftTable, name: str, other: str) -> Finding:
    blocks = table.inside.get(name)
    if blocks:
        return Finding("tender-conflict", blocks[0].key, f"must not stand beside {other}", blocks[0].place)
    return table.finding("tender-conflict", name, f"must not stand beside {other}")


def _beside_prices_by_year(table: DraftTable) -> Iterator[Finding]:
    by_year = "energy_price_by_year_per_kwh"
    key = table.given[by_year][0]
    for name in (*_PRICES, "energy_price_escalation_percent", "energy_price_meaning"):
        if name != by_year and (has_price(table, name) if name in _PRICES else table.has(name)):
            yield _beside(table, name, key)
    years, prices = table.number("evaluation_period_years"), table.values.get(by_year)
    if years is not None and isinstance(prices, tuple) and len(prices) != years:
        rule = f"must have one price for each of the {years} years"
        yield table.finding("tender-conflict", by_year, rule, f"{len(prices)} prices", "Add or remove prices.")


def check_blocks(draft: Draft) -> Iterator[Finding]:
    """A block has both ends of its hours, and at most one block takes the rest."""
    for table in draft.economics.values():
        blocks = table.inside.get("block", ())
        for block in blocks:
            for given, other, key in (("starts", "ends", "to"), ("ends", "starts", "from")):
                if block.has(given) and not block.has(other):
                    yield block.finding("tender-key-missing", key, f"must be given where {block.given[given][0]} is")
            starts, ends = block.values.get("starts"), block.values.get("ends")
            if isinstance(starts, datetime.time) and starts == ends:
                rule = "must differ from its other end; a block of all day has neither from nor to"
                yield block.finding("tender-value", "ends", rule, str(ends))
        rest = [block for block in blocks if not any(map(block.has, ("day_types", "months", "starts", "ends")))]
        for block in rest[1:]:
            rule = f"must have a condition; {rest[0].key} takes the hours that no other block has"
            fix = "Give the block days, months, or from and to."
            yield Finding("tender-conflict", block.key, rule, block.place, fix=fix)


def check_evaluation_period(draft: Draft) -> Iterator[Finding]:
    """The evaluation period is one that a transformer can live."""
    for table in draft.economics.values():
        years = table.number("evaluation_period_years")
        if years is not None and years > MOST_YEARS:
            yield table.finding("tender-value", "evaluation_period_years", f"must be at most {MOST_YEARS} years")


def check_demand_charge(draft: Draft) -> Iterator[Finding]:
    """The demand charge is given by year or by month, and where it escalates."""
    by_year, by_month = "demand_charge_per_kw_year", "demand_charge_per_kw_month"
    for table in draft.economics.values():
        if table.has(by_year) and table.has(by_month):
            yield table.finding("tender-conflict", by_month, f"must not stand beside {by_year}")
        if table.has("demand_charge_escalation_percent") and not (table.has(by_year) or table.has(by_month)):
            rule = "must be given where demand_charge_escalation_percent is"
            yield table.finding("tender-key-missing", by_year, rule)


def check_carbon_cost(draft: Draft) -> Iterator[Finding]:
    """A carbon cost says whether it counts."""
    cost, counts = "carbon_cost_per_kwh", "carbon_cost_counts"
    for table in draft.economics.values():
        if table.has(cost) and not table.has(counts):
            rule = f"must be given where {cost} is: true if the tender announces that it counts, else false"
            yield table.finding("tender-key-missing", counts, rule)
        for name in (counts, "carbon_cost_escalation_percent"):
            if table.has(name) and not table.has(cost):
                yield table.finding("tender-key-missing", cost, f"must be given where {name} is")


def check_dates(draft: Draft) -> Iterator[Finding]:
    """The date of the prices and that of the service come together, in their order."""
    pair = ("price_date", "service_date")
    for table in draft.economics.values():
        for given, other in (pair, pair[::-1]):
            if table.has(given) and not table.has(other):
                yield table.finding("tender-key-missing", other, f"must be given where {given} is")
        if table.has("present_value_at") and not any(map(table.has, pair)):
            yield table.finding("tender-key-missing", "price_date", "must be given where present_value_at is")
        prices, service = (table.values.get(name) for name in pair)
        if not isinstance(prices, datetime.date) or not isinstance(service, datetime.date):
            continue
        if service < prices:
            yield table.finding(
                "tender-conflict", "service_date", f"must not be before price_date, {prices}", str(service)
            )
        elif (service - prices).days > MOST_YEARS * 365:
            rule = f"must be at most {MOST_YEARS} years after price_date, {prices}"
            yield table.finding("tender-value", "service_date", rule, str(service))


ECONOMICS_CHECKS: tuple[Check, ...] = (
    check_terms,
    check_energy_price,
    check_blocks,
    check_evaluation_period,
    check_demand_charge,
    check_carbon_cost,
    check_dates,
)
