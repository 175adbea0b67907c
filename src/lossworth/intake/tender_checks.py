"""Do the keys of the tender fit together? Small checks of one signature in one tuple.

They look at the draft, not at the record, so that one value out of bounds does not hide a contradiction elsewhere.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator

from ..findings import Finding
from ..records.bid import is_naturally_cooled
from .suggestions import did_you_mean
from .tender_draft import Draft, DraftTable

__all__ = ["CHECKS", "Check"]

#: Longer evaluation periods are typing errors. Common practice, no source.
MOST_YEARS = 100

Check = Callable[[Draft], Iterator[Finding]]


def check_lot_ids(draft: Draft) -> Iterator[Finding]:
    """No two lots have the same id."""
    seen: dict[str, DraftTable] = {}
    for lot in draft.lots:
        first = seen.setdefault((lot.own.text("id") or str(lot.own.loc)).casefold(), lot.own)
        if first is not lot.own:
            rule = f"must be given to one lot only; the lot at line {first.place.line} has it too"
            yield lot.own.finding("tender-conflict", "id", rule, fix="Give each lot an id of its own.")


def check_rates_or_derivation(draft: Draft) -> Iterator[Finding]:
    """Each lot has either announced rates or the announced derivation."""
    for lot in draft.lots:
        if lot.rates is not None and lot.derivation is not None:
            rule = "must not stand beside [lot.rates]: announced rates alone value the losses"
            fix = "Keep one of them; a planner's derivation beside announced rates is [lot.study]."
            yield Finding("tender-conflict", lot.derivation.key, rule, lot.derivation.place, fix=fix)
        if any((*lot.own.loc, name) in draft.failed for name in ("rates", "derivation")):
            continue
        if lot.rates is None and lot.derivation is None:
            rule = "must be given, with the loss capitalization rates; or [lot.derivation], from which they follow"
            yield lot.own.finding("tender-key-missing", "rates", rule)


def check_names(draft: Draft) -> Iterator[Finding]:
    """Economics and loading that a lot names stand in the file."""
    for lot in draft.lots:
        for derivation in lot.derivations:
            for field, tables in (("economics", draft.economics), ("loading", draft.loading)):
                name = derivation.text(field)
                if name is not None and name not in tables:
                    rule = f"must name a table [{field}.NAME] of this file"
                    known = ", ".join(tables) or "none"
                    fix = did_you_mean(name, tables) or f"The file has: {known}."
                    yield derivation.finding("tender-value", field, rule, fix=fix)


def check_unused_names(draft: Draft) -> Iterator[Finding]:
    """Economics and loading that stand in the file are used by a lot."""
    for field, tables in (("economics", draft.economics), ("loading", draft.loading)):
        used = {derivation.text(field) for lot in draft.lots for derivation in lot.derivations}
        for name, table in tables.items():
            if name not in used:
                yield Finding("tender-key-not-used", table.key, "is named by no lot", table.place)


def check_energy_price(draft: Draft) -> Iterator[Finding]:
    """The energy price is given exactly one way, and a table of it for as many years as there are."""
    single, by_year = "energy_price_per_kwh", "energy_price_by_year_per_kwh"
    for table in draft.economics.values():
        if not table.has(single) and not table.has(by_year):
            yield table.finding("tender-key-missing", single, f"must be given, or {by_year}")
        if not table.has(by_year):
            continue
        for name in (single, "energy_price_escalation_percent", "energy_price_meaning"):
            if table.has(name):
                yield table.finding("tender-conflict", name, f"must not stand beside {by_year}")
        years, prices = table.number("evaluation_period_years"), table.values.get(by_year)
        if years is not None and isinstance(prices, tuple) and len(prices) != years:
            rule = f"must have one price for each of the {years} years"
            yield table.finding("tender-conflict", by_year, rule, f"{len(prices)} prices", "Add or remove prices.")


def check_evaluation_period(draft: Draft) -> Iterator[Finding]:
    """The evaluation period is one that a transformer can live."""
    for table in draft.economics.values():
        years = table.number("evaluation_period_years")
        if years is not None and years > MOST_YEARS:
            yield table.finding("tender-value", "evaluation_period_years", f"must be at most {MOST_YEARS} years")


def check_demand_escalation(draft: Draft) -> Iterator[Finding]:
    """A demand charge that escalates is given."""
    for table in draft.economics.values():
        if table.has("demand_charge_escalation_percent") and not table.has("demand_charge_per_kw_year"):
            rule = "must be given where demand_charge_escalation_percent is"
            yield table.finding("tender-key-missing", "demand_charge_per_kw_year", rule)


def check_loss_factor(draft: Draft) -> Iterator[Finding]:
    """The loss factor is given, or follows from the load factor and its coefficient; never both."""
    for table in draft.loading.values():
        load, coefficient, loss = (
            table.has(name) for name in ("load_factor", "loss_factor_coefficient", "loss_factor")
        )
        if loss and (load or coefficient):
            other = "load_factor" if load else "loss_factor_coefficient"
            rule = f"must not stand beside {other}: it is either stated or computed"
            yield table.finding("tender-conflict", "loss_factor", rule)
        elif not loss and not load:
            rule = "must be given with loss_factor_coefficient; or loss_factor alone"
            yield table.finding("tender-key-missing", "load_factor", rule)
        elif load and not coefficient:
            rule = "must be given where load_factor is; it is a choice of the tender, never assumed"
            yield table.finding("tender-key-missing", "loss_factor_coefficient", rule)


def check_loss_factor_bounds(draft: Draft) -> Iterator[Finding]:
    """The loss factor lies between the load factor and its square, whatever the load curve."""
    for table in draft.loading.values():
        load, loss = table.number("load_factor"), table.number("loss_factor")
        if load is not None and loss is not None and not load * load <= loss <= load:
            rule = f"must lie between the square of the load factor and the load factor, {load * load} and {load}"
            yield table.finding("tender-value", "loss_factor", rule)


def check_peak_load(draft: Draft) -> Iterator[Finding]:
    """Each loading condition has a peak load."""
    for table in draft.loading.values():
        if not table.has("peak_load_pu"):
            yield table.finding("tender-key-missing", "peak_load_pu", "must be given")


def check_peak_load_cap(draft: Draft) -> Iterator[Finding]:
    """The cap of the growing peak load is not below the peak load of the first year."""
    for table in draft.loading.values():
        cap, peak = table.number("peak_load_cap_pu"), table.number("peak_load_pu")
        if cap is not None and peak is not None and cap < peak:
            yield table.finding("tender-conflict", "peak_load_cap_pu", f"must not be below peak_load_pu, {peak}")


def check_demand_needs(draft: Draft) -> Iterator[Finding]:
    """Where there is a demand charge, the loading says what of the losses falls on the system's peak."""
    for derivation, economics, loading in _pairs(draft):
        charge = economics.number("demand_charge_per_kw_year")
        if charge is None or charge <= 0:
            continue
        reason = f"must be given, since economics.{derivation.text('economics')} has a demand charge"
        if not loading.has("peak_responsibility_factor"):
            yield loading.finding("tender-key-missing", "peak_responsibility_factor", reason)
        if loading.has("cooling_hours") and not loading.has("cooling_share_at_peak"):
            yield loading.finding("tender-key-missing", "cooling_share_at_peak", reason)


def check_cooling_hours(draft: Draft) -> Iterator[Finding]:
    """A derivation for units with fans or pumps says how long they run."""
    for lot in draft.lots:
        cooling = lot.own.text("cooling")
        if lot.derivation is None or cooling is None or is_naturally_cooled(cooling):
            continue
        loading = draft.loading.get(lot.derivation.text("loading") or "")
        if loading is not None and not loading.has("cooling_hours"):
            rule = f"must be given, since {lot.own.key} is cooled {cooling} and its rates are derived"
            fix = "Add the hours a year in which fans or pumps run; 0 where their loss is not valued."
            yield loading.finding("tender-key-missing", "cooling_hours", rule, fix=fix)


def check_cooling_share(draft: Draft) -> Iterator[Finding]:
    """The share of the cooling that runs at peak has hours beside it."""
    for table in draft.loading.values():
        if table.has("cooling_share_at_peak") and not table.has("cooling_hours"):
            yield table.finding("tender-key-missing", "cooling_hours", "must be given where cooling_share_at_peak is")


def check_impedance(draft: Draft) -> Iterator[Finding]:
    """Impedance and its tolerance come together."""
    pair = ("impedance_percent", "impedance_tolerance_percentage_points")
    for lot in draft.lots:
        for given, other in (pair, pair[::-1]):
            if lot.own.has(given) and not lot.own.has(other):
                yield lot.own.finding("tender-key-missing", other, f"must be given where {given} is")


def check_efficiency(draft: Draft) -> Iterator[Finding]:
    """A least efficiency leaves room for losses."""
    field = "minimum_peak_efficiency_index_percent"
    for lot in draft.lots:
        value = lot.own.number(field)
        if value is not None and value >= 100:
            yield lot.own.finding("tender-value", field, "must be below 100 percent")


def check_exchange_rates(draft: Draft) -> Iterator[Finding]:
    """The evaluation currency has no exchange rate to itself."""
    code = draft.identity.text("currency") if draft.identity else None
    if code is not None and draft.exchange_rates is not None and draft.exchange_rates.has(code):
        rule = "must not be given: it is the evaluation currency itself"
        yield draft.exchange_rates.finding("tender-conflict", code, rule, fix="Take the line out.")


def check_number_marks(draft: Draft) -> Iterator[Finding]:
    """Decimal mark and thousands mark differ."""
    table = draft.bid_files
    if table is None:
        return
    thousands = table.text("thousands_mark")
    if thousands and thousands == (table.text("decimal_mark") or "."):
        yield table.finding("tender-conflict", "thousands_mark", "must differ from decimal_mark")


def _pairs(draft: Draft) -> Iterator[tuple[DraftTable, DraftTable, DraftTable]]:
    """Each combination of economics and loading that a lot names, once, with one derivation that names it."""
    seen: set[tuple[str, str]] = set()
    for derivation in (table for lot in draft.lots for table in lot.derivations):
        names = (derivation.text("economics") or "", derivation.text("loading") or "")
        economics, loading = draft.economics.get(names[0]), draft.loading.get(names[1])
        if names not in seen and economics is not None and loading is not None:
            seen.add(names)
            yield derivation, economics, loading


CHECKS: tuple[Check, ...] = (
    check_lot_ids,
    check_rates_or_derivation,
    check_names,
    check_unused_names,
    check_energy_price,
    check_evaluation_period,
    check_demand_escalation,
    check_loss_factor,
    check_loss_factor_bounds,
    check_peak_load,
    check_peak_load_cap,
    check_demand_needs,
    check_cooling_hours,
    check_cooling_share,
    check_impedance,
    check_efficiency,
    check_exchange_rates,
    check_number_marks,
)
