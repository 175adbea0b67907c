"""Bands in which a guaranteed loss is plausible: they catch slips of unit, and judge nobody."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from .eu_transformer import Insulation
from .exact import as_decimal, fraction_of_kilowatt, measure, read_column
from .table_file import Row, table

__all__ = ["Band", "PlausibleLosses", "plausible_losses"]

Position = Literal["inside", "outside the soft band", "outside the hard band"]

_FILE = "plausible-loss-bands"


@dataclass(frozen=True, kw_only=True)
class Band:
    """Where one loss of a unit is expected.

    Parameters
    ----------
    soft_low_kw, soft_high_kw : Decimal
        Usual designs lie between. [kW]
    hard_low_kw, hard_high_kw : Decimal
        About one decade wider; a slip of unit lies outside. [kW]
    """

    soft_low_kw: Decimal
    soft_high_kw: Decimal
    hard_low_kw: Decimal
    hard_high_kw: Decimal

    def position_of(self, loss_kw: Decimal) -> Position:
        """Where a loss lies; a bound belongs to its band.

        Parameters
        ----------
        loss_kw : Decimal
            Loss. [kW]

        Returns
        -------
        {"inside", "outside the soft band", "outside the hard band"}
            Position.

        Raises
        ------
        ValueError
            If the loss is not finite.
        """
        if not loss_kw.is_finite():
            raise ValueError(f"a loss must be a finite number of kW, got {loss_kw}")
        if not self.hard_low_kw <= loss_kw <= self.hard_high_kw:
            return "outside the hard band"
        return "inside" if self.soft_low_kw <= loss_kw <= self.soft_high_kw else "outside the soft band"


@dataclass(frozen=True, kw_only=True)
class PlausibleLosses:
    """The two bands of a unit.

    Parameters
    ----------
    no_load_loss, load_loss : Band
        Bands.
    row : str
        Row or rows that they were read from.
    source, note : str
        What the header of the table says; the multipliers are engineering judgment without a source.
    """

    no_load_loss: Band
    load_loss: Band
    row: str
    source: str
    note: str


def plausible_losses(insulation: Insulation, *, rated_power_kva: Decimal, phases: int) -> PlausibleLosses:
    """Bands of a three-phase distribution transformer.

    Parameters
    ----------
    insulation : Insulation
        Liquid-immersed or dry-type.
    rated_power_kva : Decimal
        Rated power on which the load loss is based. [kVA]
    phases : int
        3.

    Returns
    -------
    PlausibleLosses
        Linear between rows.

    Raises
    ------
    ValueError
        If a number is out of its bounds.
    LookupError
        If the unit is single-phase, or its rating is below the first or above the last row: a band has no row that
        holds beyond its rating, unlike a limit.

    Examples
    --------
    693 kW instead of 693 W:

    >>> bands = plausible_losses(Insulation.LIQUID_IMMERSED, rated_power_kva=Decimal(1000), phases=3)
    >>> bands.no_load_loss.position_of(Decimal("0.693")), bands.no_load_loss.position_of(Decimal(693))
    ('inside', 'outside the hard band')
    """
    measure("rated_power_kva", rated_power_kva, unit="kVA")
    if phases != 3:
        raise LookupError(f"the bands of plausible losses cover three-phase units, got {phases!r} phases")
    kind = Insulation(insulation)
    bands = table(_FILE)
    rows = [row for row in bands.rows if row["equipment"].startswith(kind)]
    reading = read_column(rows, "no_load_soft_low_w", rated_power_kva=rated_power_kva, covered=f"{bands.title}, {kind}")
    if reading.is_below_first:
        first = reading.rows[0]["rated_power_kva"]
        raise LookupError(f"{bands.title}, {kind}: the table begins at {first} kVA, got {rated_power_kva} kVA")
    return PlausibleLosses(
        no_load_loss=_band(rows, "no_load", rated_power_kva),
        load_loss=_band(rows, "load", rated_power_kva),
        row=f"{kind}, " + " and ".join(f"{row['rated_power_kva']} kVA" for row in reading.rows),
        source=bands.source,
        note=bands.note,
    )


def _band(rows: list[Row], loss: str, rated_power_kva: Decimal) -> Band:
    def bound(name: str) -> Decimal:
        reading = read_column(rows, f"{loss}_{name}_w", rated_power_kva=rated_power_kva, covered=_FILE)
        return as_decimal(fraction_of_kilowatt(reading.value))

    return Band(
        soft_low_kw=bound("soft_low"),
        soft_high_kw=bound("soft_high"),
        hard_low_kw=bound("hard_low"),
        hard_high_kw=bound("hard_high"),
    )
