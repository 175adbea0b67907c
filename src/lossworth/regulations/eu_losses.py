"""Maximum losses of medium power transformers: Regulation (EU) No 548/2014, Annex I, Tables I.1, I.2 and I.6."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal
from fractions import Fraction

from .eu_increases import INCREASES, Increase, increases
from .eu_transformer import Edition, EuTransformer, Insulation, Tier, tier_for
from .exact import Reading, as_decimal, fraction_of_kilowatt, read_column, remarks_on
from .limits import Check, Limit, check_guarantee
from .table_file import RegulationTable, table

__all__ = ["MaximumLosses", "check_maximum_losses", "maximum_losses"]

_FILES = {
    "I.1": "eu-548-2014-table-I1-liquid-medium",
    "I.2": "eu-548-2014-table-I2-dry-medium",
    "I.6": "eu-548-2014-table-I6-pole-mounted-replacement",
}
_QUANTITIES = {"no-load loss": "no_load_loss_w", "load loss": "load_loss_w"}
_SUPERSEDED = (
    "Voltage factors of the superseded text of 2014, chosen explicitly: for old tenders only. Loss tables and the "
    "allowance for tappings are those of the amended text."
)


@dataclass(frozen=True)
class MaximumLosses:
    """The two limits of a medium power transformer.

    Parameters
    ----------
    no_load_loss, load_loss : Limit
        Maximum values, the load loss at reference temperature. [kW]
    """

    no_load_loss: Limit
    load_loss: Limit


def maximum_losses(
    unit: EuTransformer,
    *,
    tier: int | None = None,
    on: date | None = None,
    edition: Edition = Edition.AMENDED_2019,
) -> MaximumLosses:
    """Maximum no-load and load loss of a medium power transformer.

    Parameters
    ----------
    unit : EuTransformer
        Three-phase, at most 3150 kVA, Um at most 36 kV.
    tier : int, optional
        1 or 2; or
    on : date, optional
        day of placing on the market or putting into service, which tells the tier.
    edition : Edition
        Text of the voltage factors; the superseded one only where it is asked for.

    Returns
    -------
    MaximumLosses
        Two limits with table, row, source, dates and cautions. [kW]

    Raises
    ------
    ValueError
        Unless exactly one of tier and date is given.
    LookupError
        If the unit is a large one, its voltages or rating are not covered, or there is no such tier.

    Notes
    -----
    Linear between rows; the first row at and below its rating. Increases are percentages of the level in the loss
    table and are added; where two of them meet, a caution gives the product, since the tables do not say which.

    References
    ----------
    .. [1] Commission Regulation (EU) No 548/2014 as amended by Regulation (EU) 2019/1783, Annex I, Tables I.1, I.2,
       I.3a, I.3b and I.6, and point 1.3.

    Examples
    --------
    >>> unit = EuTransformer(
    ...     insulation=Insulation.LIQUID_IMMERSED, rated_power_kva=Decimal(1000), phases=3,
    ...     higher_um_kv=Decimal(12), lower_um_kv=Decimal("1.1"),
    ... )
    >>> maximum_losses(unit, tier=2).no_load_loss.value
    Decimal('0.693')
    """
    chosen = tier_for(tier=tier, on=on)
    if unit.is_large:
        raise LookupError(
            f"{unit.rated_power_kva} kVA, Um {unit.higher_um_kv} kV: a large power transformer (above 3150 kVA or "
            "Um above 36 kV) has no maximum losses, but a minimum peak efficiency index"
        )
    name = _loss_table(unit)
    raised = increases(unit, name, tier=chosen.number, edition=Edition(edition))
    no_load, load = (_limit(unit, name, quantity, chosen, raised) for quantity in _QUANTITIES)
    if edition == Edition.SUPERSEDED_2014:
        no_load, load = (replace(limit, cautions=(_SUPERSEDED, *limit.cautions)) for limit in (no_load, load))
    return MaximumLosses(no_load, load)


def check_maximum_losses(
    unit: EuTransformer,
    *,
    no_load_loss_kw: Decimal,
    load_loss_kw: Decimal,
    tier: int | None = None,
    on: date | None = None,
    edition: Edition = Edition.AMENDED_2019,
) -> tuple[Check, Check]:
    """Hold guaranteed losses against the maximum ones; unrounded, with zero tolerance.

    Parameters
    ----------
    unit : EuTransformer
        As for `maximum_losses`.
    no_load_loss_kw, load_loss_kw : Decimal
        Guaranteed losses, the load loss at the rated power and at reference temperature. [kW]
    tier, on, edition
        As for `maximum_losses`.

    Returns
    -------
    tuple of Check
        No-load loss, load loss.

    Raises
    ------
    ValueError
        If a loss is negative or not finite, or as for `maximum_losses`.
    LookupError
        As for `maximum_losses`.
    """
    limits = maximum_losses(unit, tier=tier, on=on, edition=edition)
    return check_guarantee(limits.no_load_loss, no_load_loss_kw), check_guarantee(limits.load_loss, load_loss_kw)


def _loss_table(unit: EuTransformer) -> str:
    if unit.is_pole_mounted_replacement:
        return "I.6"
    return "I.2" if unit.insulation == Insulation.DRY_TYPE else "I.1"


def _limit(unit: EuTransformer, name: str, quantity: str, tier: Tier, raised: Sequence[Increase]) -> Limit:
    losses, column = table(_FILES[name]), _QUANTITIES[quantity]
    rows = [row for row in losses.rows if row["tier"] == str(tier.number)]
    covered = f"Table {name}, tier {tier.number}"
    reading = read_column(rows, column, rated_power_kva=unit.rated_power_kva, covered=covered)
    level = fraction_of_kilowatt(reading.value)
    percents = [_percent(increase, quantity) for increase in raised]
    return Limit(
        quantity=quantity,
        bound="maximum",
        value=as_decimal(level * (1 + sum(percents, start=Fraction(0)) / 100)),
        unit="kW",
        table=name,
        row=_row_text(tier, reading, percents, raised),
        source=_source(losses, raised),
        in_force_from=tier.effective_from,
        in_force_to=tier.effective_to,
        note=losses.note,
        cautions=(
            *(caution for increase in raised for caution in increase.cautions),
            *_combination(name, level, [percent for percent in percents if percent]),
            *remarks_on(name, column, reading.rows),
            *_range_of_pole_mounted(name, reading),
        ),
    )


def _percent(increase: Increase, quantity: str) -> Fraction:
    return Fraction(increase.no_load_loss_percent if quantity == "no-load loss" else increase.load_loss_percent)


def _row_text(tier: Tier, reading: Reading, percents: Sequence[Fraction], raised: Sequence[Increase]) -> str:
    pairs = zip(percents, raised, strict=True)
    added = "".join(f", + {as_decimal(percent)} % ({each.table}: {each.case})" for percent, each in pairs)
    return f"tier {tier.number}, {reading.text}{added}"


def _source(losses: RegulationTable, raised: Sequence[Increase]) -> str:
    return f"{losses.source}; {table(INCREASES).source}" if raised else losses.source


def _combination(name: str, level: Fraction, percents: Sequence[Fraction]) -> tuple[str, ...]:
    if len(percents) < 2:
        return ()
    product = level
    for percent in percents:
        product *= 1 + percent / 100
    shown = ", ".join(f"{as_decimal(percent)} %" for percent in percents)
    return (
        f"The increases of {shown} are added, each a percentage of the level in Table {name}; the tables do not say "
        f"how they combine. Multiplied, the limit would be {as_decimal(product)} kW.",
    )


def _range_of_pole_mounted(name: str, reading: Reading) -> tuple[str, ...]:
    if name == "I.6" and reading.is_below_first:
        return ("Table I.6 is for 25 to 400 kVA: below 25 kVA its first row is an assumption.",)
    return ()
