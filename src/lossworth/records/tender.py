"""The tender as the buyer announced it: lots, loading conditions, economics or announced rates, rules."""

from __future__ import annotations

import datetime
from enum import StrEnum
from typing import Annotated, Literal

from pydantic import AfterValidator, Field
from pydantic_core import PydanticCustomError

from ..findings import Place
from ..money import Rounding, is_currency_code
from .quantity import Above0, AtLeast0, AtLeast1, Entry, Quantity, Rate, Record, ShareOf1, WholeNumber

__all__ = [
    "AnnouncedRates",
    "BidFileRules",
    "Derivation",
    "Economics",
    "Exchange",
    "Identity",
    "LoadingCondition",
    "Lot",
    "PriceOfYear1",
    "RoundingPoint",
    "Rules",
    "Tender",
    "Timing",
]


class Timing(StrEnum):
    """When in the year the cost of its losses is counted."""

    END_OF_YEAR = "end of year"
    MID_YEAR = "mid-year"
    START_OF_YEAR = "start of year"

    @property
    def years_before_end(self) -> float:
        """Share of a year by which the payment precedes the year's end: the symbol phi of the method."""
        return {"end of year": 0.0, "mid-year": 0.5, "start of year": 1.0}[self.value]


class PriceOfYear1(StrEnum):
    """What the stated energy price means where it escalates."""

    PAID_IN_YEAR_1 = "paid in year 1"
    TODAY = "today's price, escalated before year 1"


class RoundingPoint(StrEnum):
    """Where in the arithmetic of an offer money is rounded."""

    PART_PER_UNIT = "each cost part per unit"
    PART_PER_LOT = "each cost part per lot"


def _currency(entry: Entry) -> Entry:
    if not is_currency_code(entry.value):
        raise PydanticCustomError("currency", "must be a currency code of three capital letters")
    return entry


CurrencyCode = Annotated[Entry, AfterValidator(_currency)]


class Identity(Record):
    """Who buys what: the head of every paper."""

    reference: Entry
    title: Entry
    buyer: Entry
    currency: CurrencyCode
    opening_date: datetime.date | None = None
    remark: Entry | None = None


class Rules(Record):
    """How money is rounded."""

    rounding: Rounding
    rounding_applies_to: RoundingPoint
    place: Place


class BidFileRules(Record):
    """How numbers stand in csv files and in cells typed as text: declared, never guessed."""

    decimal_mark: Literal[".", ","] = "."
    thousands_mark: Literal["", ".", ",", "'", " "] = ""
    decimal_mark_of: dict[str, Literal[".", ","]] = Field(default_factory=dict)


class Exchange(Record):
    """The exchange rates of the day that the tender fixes; only prices are converted by them."""

    source: Entry
    kind: Entry
    date: datetime.date
    evidence: Entry
    rates: dict[str, Above0]


class Economics(Record):
    """What a lost kilowatt-hour costs, and how the future is discounted."""

    energy_price_per_kwh: Above0 | None = None
    energy_price_escalation_percent: Rate | None = None
    energy_price_meaning: PriceOfYear1 = PriceOfYear1.PAID_IN_YEAR_1
    energy_price_by_year_per_kwh: tuple[AtLeast0, ...] | None = None
    demand_charge_per_kw_year: AtLeast0 | None = None
    demand_charge_escalation_percent: Rate | None = None
    discount_rate_percent: Rate
    evaluation_period_years: WholeNumber
    timing: Timing
    upstream_gross_up: AtLeast1 | None = None
    source: Entry | None = None
    place: Place


class LoadingCondition(Record):
    """How the units of a lot will be loaded."""

    load_factor: ShareOf1 | None = None
    loss_factor_coefficient: ShareOf1 | None = None
    loss_factor: ShareOf1 | None = None
    peak_load_pu: Above0
    peak_load_growth_percent: Rate | None = None
    peak_load_cap_pu: Above0 | None = None
    peak_responsibility_factor: ShareOf1 | None = None
    hours_energized: Annotated[Quantity, AfterValidator(lambda q: _hours(q))] | None = None
    cooling_hours: Annotated[Quantity, AfterValidator(lambda q: _hours(q))] | None = None
    cooling_share_at_peak: ShareOf1 | None = None
    source: Entry | None = None
    place: Place


def _hours(quantity: Quantity) -> Quantity:
    if not 0 <= quantity.value <= 8760:
        raise PydanticCustomError("bound", "{rule}", {"rule": "must lie between 0 and 8760 hours a year"})
    return quantity


class AnnouncedRates(Record):
    """Loss capitalization rates that the tender states: inputs, which alone value the losses."""

    no_load: AtLeast0
    load: AtLeast0
    auxiliary: AtLeast0 | None = None
    per: Literal["kW", "W", "0.1 kW"]
    source: Entry | None = None
    place: Place


class Derivation(Record):
    """Which economics and which loading condition give the rates of a lot, and how the rates are rounded."""

    economics: Entry
    loading: Entry
    round_rates_to: Quantity | None = None
    rounding: Rounding | None = None
    place: Place


class Lot(Record):
    """One lot: what is bought, how many, its limits, and how its losses are valued."""

    id: str
    description: Entry
    rated_power_kva: Above0
    quantity: WholeNumber
    cooling: Entry
    maximum_no_load_loss_kw: Above0 | None = None
    maximum_load_loss_kw: Above0 | None = None
    minimum_peak_efficiency_index_percent: Above0 | None = None
    impedance_percent: Above0 | None = None
    impedance_tolerance_percentage_points: AtLeast0 | None = None
    latest_delivery_weeks: Above0 | None = None
    rates: AnnouncedRates | None = None
    derivation: Derivation | None = None
    study: Derivation | None = None
    place: Place


class Tender(Record):
    """The whole tender as announced.

    Raises
    ------
    pydantic.ValidationError
        If a field is missing, unknown, of the wrong type or out of bounds.
    """

    format_version: Literal[1]
    identity: Identity
    rules: Rules
    bid_files: BidFileRules
    exchange: Exchange | None = None
    economics: dict[str, Economics] = Field(default_factory=dict)
    loading: dict[str, LoadingCondition] = Field(default_factory=dict)
    lots: tuple[Lot, ...] = Field(min_length=1)

    def lot(self, id: str) -> Lot | None:
        """Lot with this id, or None.

        Parameters
        ----------
        id : str
            As in the tender file.

        Returns
        -------
        Lot or None
            The lot, where the tender has it.
        """
        return next((lot for lot in self.lots if lot.id == id), None)
