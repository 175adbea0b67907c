"""Do the keys of the lots fit together, and with the tables that they name?"""

from __future__ import annotations

from collections.abc import Iterator

from ..findings import Finding
from ..records.tender import CoolingValuation
from .suggestions import did_you_mean
from .tender_draft import Check, Draft, DraftLot, DraftTable

__all__ = ["LOT_CHECKS"]


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


def check_cooling_valuation(draft: Draft) -> Iterator[Finding]:
    """Cooling is valued by a rate of its own or through A and B, never by both."""
    for lot in draft.lots:
        if lot.own.values.get("cooling_valuation") is not CoolingValuation.THROUGH_A_AND_B:
            continue
        reason = f"must not stand beside cooling_valuation of {lot.own.key}: cooling is then valued through A and B"
        if lot.rates is not None and lot.rates.has("auxiliary"):
            yield lot.rates.finding("tender-conflict", "auxiliary", reason, fix="Take one of the two out.")
        yield from _beside_a_and_b(draft, lot, reason)


def _beside_a_and_b(draft: Draft, lot: DraftLot, reason: str) -> Iterator[Finding]:
    loading = draft.loading.get(lot.derivation.text("loading") or "") if lot.derivation else None
    if loading is None:
        return
    fix = "Take it out, or give the lot a loading condition without it."
    if loading.has("cooling_hours"):
        yield loading.finding("tender-conflict", "cooling_hours", reason, fix=fix)
    if stages := loading.inside.get("cooling_stage"):
        yield Finding("tender-conflict", stages[0].key, reason, stages[0].place, fix=fix)


def check_loss_basis(draft: Draft) -> Iterator[Finding]:
    """A conversion that the tender allows has what it needs."""
    for lot in draft.lots:
        basis = lot.loss_basis
        conversions = basis.values.get("convert") if basis else None
        if basis is None or not isinstance(conversions, tuple) or "temperature" not in conversions:
            continue
        for name in ("reference_temperature_c", "conductor"):
            if not basis.has(name):
                rule = 'must be given where "temperature" is converted'
                yield basis.finding("tender-key-missing", name, rule)


LOT_CHECKS: tuple[Check, ...] = (
    check_lot_ids,
    check_rates_or_derivation,
    check_names,
    check_unused_names,
    check_impedance,
    check_efficiency,
    check_cooling_valuation,
    check_loss_basis,
)
