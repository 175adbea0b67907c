"""The tender as the buyer announced it: lots, loading conditions, economics or announced rates, rules."""

from __future__ import annotations

import datetime
from enum import StrEnum
from typing import Annotated, Literal

from pydantic import AfterValidator, Field
from pydantic_core import PydanticCustomError

from ..findings import Place
from ..money import Rounding, is_currency_code
from .commercial import DeliveryLevel, Item, PaymentTerms, Preference, RegulationLimit, SiteCost, Taxes
from .profile import PriceBlock, PriceSeries, Profile
from .quantity import Above0, AtLeast0, AtLeast1, Entry, Quantity, Rate, Record, ShareOf1, WholeNumber
from .rules import AnnouncedRules

__all__ = [
    "AnnouncedRates",
    "BidFileRules",
    "CoolingStage",
    "CoolingValuation",
    "Derivation",
    "Economics",
    "Exchange",
    "Identity",
    "LoadingCondition",
    "LossBasis",
    "Lot",
    "Method",
    "PresentValueDate",
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


class Method(StrEnum):
    """How rates are derived."""

    PRESENT_WORTH = "present worth"
    FIXED_CHARGE_RATE = "fixed charge rate"


class PresentValueDate(StrEnum):
    """To which date costs are discounted where the service begins after the date of the prices."""

    SERVICE = "service date"
    PRICE = "price date"


class CoolingValuation(StrEnum):
    """How cooling power is valued: by a rate of its own, or through A and B in two stages after IEC TS 60076-20."""

    RATE_C = "auxiliary rate C"
    THROUGH_A_AND_B = "through A and B"


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
    """How money is rounded, and the settings on which regimes disagree."""

    rounding: Rounding
    rounding_applies_to: RoundingPoint
    announced: AnnouncedRules = Field(default_factory=AnnouncedRules)
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
    energy_price_series: PriceSeries | None = None
    energy_price_blocks: tuple[PriceBlock, ...] = ()
    carbon_cost_per_kwh: AtLeast0 | None = None
    carbon_cost_escalation_percent: Rate | None = None
    carbon_cost_counts: bool | None = None
    carbon_intensity_kg_per_kwh: AtLeast0 | None = None
    demand_charge_per_kw_year: AtLeast0 | None = None
    demand_charge_per_kw_month: AtLeast0 | None = None
    demand_charge_escalation_percent: Rate | None = None
    discount_rate_percent: Rate
    discount_rate_terms: Literal["real", "nominal"] | None = None
    price_terms: Literal["real", "nominal"] | None = None
    fixed_charge_rate_percent: Above0 | None = None
    price_date: datetime.date | None = None
    service_date: datetime.date | None = None
    present_value_at: PresentValueDate = PresentValueDate.SERVICE
    evaluation_period_years: WholeNumber
    timing: Timing
    upstream_gross_up: AtLeast1 | None = None
    source: Entry | None = None
    place: Place


class CoolingStage(Record):
    """Fans or pumps that run above a loading.

    Parameters
    ----------
    above_load_pu : Quantity
        Load above which the stage runs. [per unit of the rating of the guaranteed load loss]
    share_of_auxiliary_loss : Quantity
        Share of the guaranteed auxiliary loss that the stage needs; the shares of all stages make 1.
    """

    above_load_pu: Above0
    share_of_auxiliary_loss: ShareOf1
    place: Place


class LoadingCondition(Record):
    """How the units of a lot will be loaded."""

    profile: Profile | None = None
    load_factor: ShareOf1 | None = None
    loss_factor_coefficient: ShareOf1 | None = None
    loss_factor: ShareOf1 | None = None
    peak_load_pu: Above0 | None = None
    peak_load_by_year_pu: tuple[AtLeast0, ...] | None = None
    peak_load_growth_percent: Rate | None = None
    peak_load_cap_pu: Above0 | None = None
    peak_responsibility_factor: ShareOf1 | None = None
    hours_energized: Annotated[Quantity, AfterValidator(lambda q: _hours(q))] | None = None
    cooling_hours: Annotated[Quantity, AfterValidator(lambda q: _hours(q))] | None = None
    cooling_share_at_peak: ShareOf1 | None = None
    cooling_stages: tuple[CoolingStage, ...] = ()
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
    method: Method = Method.PRESENT_WORTH
    round_rates_to: Quantity | None = None
    rounding: Rounding | None = None
    place: Place


class LossBasis(Record):
    """Basis on which the tender wants load losses guaranteed, and which conversions to it the tender allows.

    Parameters
    ----------
    reference_temperature_c : Quantity or None
        Reference temperature of the load loss. [deg C]
    load_loss_rating_kva : Quantity or None
        Rating at which the load loss is guaranteed; the lot's rated power where absent. [kVA]
    conductor : str or None
        Metal of the windings, for the correction to another temperature.
    convert : tuple of str
        Conversions that the tender allows; all others are questions to the bidder.
    """

    reference_temperature_c: Above0 | None = None
    load_loss_rating_kva: Above0 | None = None
    conductor: Literal["copper", "aluminum"] | None = None
    convert: tuple[Literal["rating", "temperature", "total loss"], ...] = ()
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
    delivery_without_adder_weeks: AtLeast0 | None = None
    delivery_adder_percent_per_week: AtLeast0 | None = None
    delivery_adder_per_week: AtLeast0 | None = None
    maximum_sound_level_db: Above0 | None = None
    accepted_liquids: tuple[str, ...] = ()
    pcb_free_required: bool = False
    regulation: RegulationLimit | None = None
    items: tuple[Item, ...] = ()
    site_costs: tuple[SiteCost, ...] = ()
    estimated_unit_price: Above0 | None = None
    rates: AnnouncedRates | None = None
    derivation: Derivation | None = None
    study: Derivation | None = None
    cooling_valuation: CoolingValuation = CoolingValuation.RATE_C
    loss_basis: LossBasis | None = None
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
    delivered_point: Entry | None = None
    delivery_levels: tuple[DeliveryLevel, ...] = ()
    taxes: Taxes | None = None
    payment_terms: PaymentTerms | None = None
    preference: Preference | None = None
    planned_award: datetime.date | None = None
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
