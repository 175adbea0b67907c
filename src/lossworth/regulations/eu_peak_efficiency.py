"""Minimum peak efficiency index of large power transformers: Regulation (EU) No 548/2014, Annex I, I.7 to I.9."""

from __future__ import annotations

from datetime import date
from decimal import Decimal

from .eu_transformer import EuTransformer, Insulation, tier_for
from .exact import as_decimal, read_column, remarks_on
from .limits import Check, Limit, check_guarantee
from .table_file import table

__all__ = ["check_peak_efficiency_index", "minimum_peak_efficiency_index"]

_COLUMN = "peak_efficiency_index_pct"


def minimum_peak_efficiency_index(unit: EuTransformer, *, tier: int | None = None, on: date | None = None) -> Limit:
    """Minimum peak efficiency index of a large power transformer.

    Parameters
    ----------
    unit : EuTransformer
        Three-phase, above 3150 kVA or with Um above 36 kV; its top rating picks the row.
    tier : int, optional
        1 or 2; or
    on : date, optional
        day of placing on the market or putting into service, which tells the tier.

    Returns
    -------
    Limit
        With table, row, source, dates and cautions. [percent]

    Raises
    ------
    ValueError
        Unless exactly one of tier and date is given.
    LookupError
        If the unit is not a large one, its rating is above the table, or there is no such tier.

    Notes
    -----
    Liquid-immersed: I.7. Dry-type: I.8 up to Um = 36 kV, I.9 above. Linear in MVA between rows; the first row at and
    below its rating.

    References
    ----------
    .. [1] Commission Regulation (EU) No 548/2014 as amended by Regulation (EU) 2019/1783, Annex I, Tables I.7 to I.9.

    Examples
    --------
    >>> unit = EuTransformer(
    ...     insulation=Insulation.LIQUID_IMMERSED, rated_power_kva=Decimal(31500), phases=3,
    ...     higher_um_kv=Decimal(36), lower_um_kv=Decimal(12),
    ... )
    >>> minimum_peak_efficiency_index(unit, tier=2).value
    Decimal('99.712')
    """
    chosen = tier_for(tier=tier, on=on)
    if not unit.is_large:
        raise LookupError(
            f"{unit.rated_power_kva} kVA, Um {unit.higher_um_kv} kV: a medium power transformer (at most 3150 kVA and "
            "Um at most 36 kV) has no minimum peak efficiency index, but maximum losses"
        )
    name = _table_of(unit)
    indexes = table("eu-548-2014-tables-I7-I9-peak-efficiency")
    rows = [row for row in indexes.rows if row["table"] == name and row["tier"] == str(chosen.number)]
    covered = f"Table {name}, tier {chosen.number}"
    reading = read_column(rows, _COLUMN, rated_power_kva=unit.rated_power_kva, covered=covered)
    return Limit(
        quantity="peak efficiency index",
        bound="minimum",
        value=as_decimal(reading.value),
        unit="%",
        table=name,
        row=f"tier {chosen.number}, {reading.text}",
        source=indexes.source,
        in_force_from=chosen.effective_from,
        in_force_to=chosen.effective_to,
        note=indexes.note,
        cautions=remarks_on(name, _COLUMN, reading.rows),
    )


def check_peak_efficiency_index(
    unit: EuTransformer, index_percent: Decimal, *, tier: int | None = None, on: date | None = None
) -> Check:
    """Hold a peak efficiency index against the minimum one; unrounded, with zero tolerance.

    Parameters
    ----------
    unit : EuTransformer
        As for `minimum_peak_efficiency_index`.
    index_percent : Decimal
        Index that is guaranteed or follows from the guaranteed losses. [percent]
    tier, on
        As for `minimum_peak_efficiency_index`.

    Returns
    -------
    Check
        Limit, index, and whether it is kept.

    Raises
    ------
    ValueError
        If the index is negative, above 100 or not finite, or as for `minimum_peak_efficiency_index`.
    LookupError
        As for `minimum_peak_efficiency_index`.
    """
    return check_guarantee(minimum_peak_efficiency_index(unit, tier=tier, on=on), index_percent)


def _table_of(unit: EuTransformer) -> str:
    if unit.insulation == Insulation.LIQUID_IMMERSED:
        return "I.7"
    return "I.9" if unit.higher_um_kv > Decimal(36) else "I.8"
