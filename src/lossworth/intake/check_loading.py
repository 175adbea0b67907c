"""Do the keys of one loading condition fit together?"""

from __future__ import annotations

from collections.abc import Iterator

from ..findings import Finding
from ..records.profile import Profile
from .tender_draft import Check, Draft, DraftTable

__all__ = ["LOADING_CHECKS"]

#: Units in which a profile has its own peak load, over the rating of the lot or per unit of it.
_OWN_PEAK = ("kVA", "pu")
_FACTORS = ("load_factor", "loss_factor_coefficient", "loss_factor")


def check_loss_factor(draft: Draft) -> Iterator[Finding]:
    """The loss factor is given, or follows from load factor and coefficient, or from a profile; one of the three."""
    for table in draft.loading.values():
        if table.has("profile"):
            for name in _FACTORS:
                if table.has(name):
                    rule = "must not stand beside profile, from which it is computed"
                    yield table.finding("tender-conflict", name, rule)
        else:
            yield from _stated_loss_factor(table)


def _stated_loss_factor(table: DraftTable) -> Iterator[Finding]:
    load, coefficient, loss = (table.has(name) for name in _FACTORS)
    if loss and (load or coefficient):
        other = "load_factor" if load else "loss_factor_coefficient"
        rule = f"must not stand beside {other}: it is either stated or computed"
        yield table.finding("tender-conflict", "loss_factor", rule)
    elif not loss and not load:
        rule = "must be given with loss_factor_coefficient; or loss_factor alone, or a profile"
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


def check_profile_keys(draft: Draft) -> Iterator[Finding]:
    """What says how a profile is to be read stands beside one that needs it."""
    for table in draft.loading.values():
        weights = table.one("profile_day_weights")
        if not table.has("profile"):
            for name in ("profile_clock", "profile_reverse_flow"):
                if table.has(name):
                    yield table.finding("tender-key-missing", "profile", f"must be given where {name} is")
            if weights is not None:
                yield table.finding("tender-key-missing", "profile", "must be given where profile_day_weights is")
        profile = table.values.get("profile")
        if isinstance(profile, Profile) and weights is not None and profile.grid.kind == "year":
            rule = "must stand only where the profile has typical days; this one has a year"
            yield Finding("tender-conflict", weights.key, rule, weights.place, fix="Take it out.")


def check_peak_load(draft: Draft) -> Iterator[Finding]:
    """Each loading condition has one peak load: for year 1, for each year, or that of its profile."""
    first, by_year = "peak_load_pu", "peak_load_by_year_pu"
    for table in draft.loading.values():
        if table.has(by_year):
            for name in (first, "peak_load_growth_percent"):
                if table.has(name):
                    yield table.finding("tender-conflict", name, f"must not stand beside {by_year}")
        elif not table.has(first) and not _has_own_peak(table, draft):
            rule = f"must be given, or {by_year}; a profile in kVA or pu has its own"
            profile = table.values.get("profile")
            got = f"a profile in {profile.unit}" if isinstance(profile, Profile) else None
            yield table.finding("tender-key-missing", first, rule, got)


def _has_own_peak(table: DraftTable, draft: Draft) -> bool:
    profile = table.values.get("profile")
    if isinstance(profile, Profile):
        return profile.unit in _OWN_PEAK
    return (*table.loc, "profile") in draft.failed  # not known, and reported already


def check_peak_load_cap(draft: Draft) -> Iterator[Finding]:
    """The cap of the growing peak load is not below the peak load of the first year."""
    for table in draft.loading.values():
        cap, peak = table.number("peak_load_cap_pu"), table.number("peak_load_pu")
        if cap is not None and peak is not None and cap < peak:
            yield table.finding("tender-conflict", "peak_load_cap_pu", f"must not be below peak_load_pu, {peak}")


def check_cooling_share(draft: Draft) -> Iterator[Finding]:
    """The share of the cooling that runs at peak has hours beside it."""
    for table in draft.loading.values():
        if (
            table.has("cooling_share_at_peak")
            and not table.has("cooling_hours")
            and not table.inside.get("cooling_stage")
        ):
            yield table.finding("tender-key-missing", "cooling_hours", "must be given where cooling_share_at_peak is")


def check_cooling_stages(draft: Draft) -> Iterator[Finding]:
    """Cooling stages follow a profile, make the whole auxiliary loss, and stand in place of stated hours."""
    for table in draft.loading.values():
        stages = table.inside.get("cooling_stage", ())
        if not stages:
            continue
        for name in ("cooling_hours", "cooling_share_at_peak"):
            if table.has(name):
                yield table.finding("tender-conflict", name, "must not stand beside cooling stages, which give it")
        if not table.has("profile"):
            rule = "must be given where there are cooling stages: their hours follow the load"
            fix = "Add a profile, or state cooling_hours in place of the stages."
            yield table.finding("tender-key-missing", "profile", rule, fix=fix)
        shares = [stage.number("share_of_auxiliary_loss") for stage in stages]
        if None not in shares and (whole := sum(share for share in shares if share is not None)) != 1:
            rule = "must make 1 over all stages"
            yield stages[-1].finding("tender-value", "share_of_auxiliary_loss", rule, f"{whole} in all")


LOADING_CHECKS: tuple[Check, ...] = (
    check_loss_factor,
    check_loss_factor_bounds,
    check_profile_keys,
    check_peak_load,
    check_peak_load_cap,
    check_cooling_share,
    check_cooling_stages,
)
