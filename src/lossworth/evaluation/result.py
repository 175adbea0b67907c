"""What an evaluation gives: rates, costs, ranks and reasons, as frozen records of figures."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from ..findings import Finding
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.profile import Profile
from ..records.tender import Lot, Tender
from ..trail import Figure
from .loss_basis import OfferOnBasis

__all__ = [
    "Basis",
    "CoolingByYear",
    "Correction",
    "EvaluatedOffer",
    "Evaluation",
    "Information",
    "LoadFacts",
    "LotEvaluation",
    "LotRates",
    "Margin",
    "OwningCost",
    "PriceStep",
    "StageHours",
    "Status",
    "YearTable",
]


class Basis(StrEnum):
    """Where the rates of a lot come from."""

    ANNOUNCED = "announced"
    DERIVED = "derived as announced"


class Status(StrEnum):
    """What became of an offer."""

    RANKED = "ranked"
    NON_RESPONSIVE = "non-responsive"
    NOT_EVALUATED = "not evaluated"


@dataclass(frozen=True, slots=True)
class YearTable:
    """Year-by-year table behind derived rates.

    Parameters
    ----------
    id : str
        Identity, to which the figures of the rates refer.
    columns : mapping of str to tuple of float
        Values by year; names as in `capitalization.rates.YearTable`.
    inputs : mapping of str to Figure
        What the table was made from, by name.
    """

    id: str
    columns: Mapping[str, tuple[float, ...]]
    inputs: Mapping[str, Figure]


@dataclass(frozen=True, slots=True, eq=False)
class CoolingByYear:
    """Cooling that follows the load: hours by price and by time, and share on at system peak, in each year."""

    hours_by_price: NDArray[np.float64]
    hours_by_time: NDArray[np.float64]
    share_at_peak: NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class StageHours:
    """A cooling stage that follows the load: its threshold, its share of the loss, its hours in each year by time."""

    above_load_pu: float
    share: float
    hours_by_year: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class LoadFacts:
    """What a load profile gives.

    Parameters
    ----------
    profile : Profile
        As read.
    figures : mapping of str to Figure
        ``load_factor``, ``loss_factor_by_time``, ``loss_factor`` (the one that is used, by price where it moves).
    duration : tuple of (float, float)
        Points of the duration curve: hours a year at or above the load, load over peak load. [hour/year, 1]
    peak_load_by_year_pu : tuple of float
        Peak load of each year. [per unit of the rating]
    stages : tuple of StageHours
        Cooling stages that follow the load.
    """

    profile: Profile
    figures: Mapping[str, Figure]
    duration: tuple[tuple[float, float], ...]
    peak_load_by_year_pu: tuple[float, ...]
    stages: tuple[StageHours, ...]


@dataclass(frozen=True, slots=True)
class LotRates:
    """Loss capitalization rates of a lot, per kW.

    Parameters
    ----------
    basis : Basis
        Announced, or derived as announced.
    no_load, load : Figure
        A and B. [currency/kW]
    auxiliary : Figure or None
        C; None where the tender values no auxiliary loss. [currency/kW]
    table : YearTable or None
        Where the rates are derived as present worth.
    method : str
        ``"announced rates"``, ``"present worth"`` or ``"fixed charge rate"``.
    inputs : mapping of str to Figure
        What derived rates were made from, by name; empty for announced ones.
    load_facts : LoadFacts or None
        Where the load comes from a profile.
    cooling : CoolingByYear or None
        Where cooling follows the load; left out of comparisons.
    """

    basis: Basis
    no_load: Figure
    load: Figure
    auxiliary: Figure | None
    table: YearTable | None = None
    method: str = "announced rates"
    inputs: Mapping[str, Figure] = field(default_factory=dict)
    load_facts: LoadFacts | None = None
    cooling: CoolingByYear | None = field(default=None, compare=False)


@dataclass(frozen=True, slots=True)
class OwningCost:
    """The five amounts of an offer, for one unit or for a lot; None where an amount cannot be computed."""

    evaluated_price: Figure | None
    no_load_cost: Figure | None
    load_cost: Figure | None
    auxiliary_cost: Figure | None
    total_owning_cost: Figure | None


@dataclass(frozen=True, slots=True)
class Information:
    """One fact beside the money: what it is, its value, its unit (empty for a pure number)."""

    label: str
    value: Decimal
    unit: str


@dataclass(frozen=True, slots=True)
class Margin:
    """Distance of an offer to the nearest rival that is not cheaper.

    Parameters
    ----------
    to : str
        The rival.
    amount : Figure
        Difference of the total owning costs of the lot. [currency]
    percent_of_winner : Decimal
        The amount in percent of the lowest total owning cost.
    no_load_loss_kw, load_loss_kw : Decimal or None
        The loss of one unit that costs as much; None at a rate of zero. [kW]
    """

    to: str
    amount: Figure
    percent_of_winner: Decimal
    no_load_loss_kw: Decimal | None
    load_loss_kw: Decimal | None


@dataclass(frozen=True, slots=True)
class Correction:
    """A value as read and the value that takes its place: the first two of three layers, neither overwritten.

    The third layer, the value as evaluated, is what `EvaluatedOffer.on_basis` and the amounts are made of.

    Parameters
    ----------
    field : str
        Name of the value in the records: ``"unit_price"``, ``"total_price"``, ``"load_loss_kw"``.
    as_read, corrected : Figure
        Both values, each with where it comes from.
    rule : str
        The announced rule that corrects, in a sentence.
    reason : str
        What is wrong with the value as read.
    decision : Decision or None
        The bidder's recorded answer or confirmation, where there is one.
    """

    field: str
    as_read: Figure
    corrected: Figure
    rule: str
    reason: str
    decision: Decision | None = None


@dataclass(frozen=True, slots=True)
class PriceStep:
    """One step from the quoted to the evaluated price.

    Parameters
    ----------
    name : str
        ``"quoted"``, ``"corrected"``, ``"unconditional discount"``, ``"prompt payment discount"``, ``"currency"``,
        ``"tax"``, ``"delivered point"``, ``"payment terms"``, ``"delivery time"``, ``"site cost"``, ``"preference"``,
        ``"evaluated"`` in this order per unit; then, per lot, ``"item"``, ``"missing item"``, ``"payment terms"``,
        ``"preference"`` and ``"evaluated"`` again, where the lot has further items that count.
    label : str
        What the step does, in the trade's words.
    scope : str
        Whether the amounts hold for one unit or for the lot.
    sign : str
        How the change acts on the price before it; empty for a price that stands by itself.
    change : Figure or None
        What is added, taken away, multiplied or divided by.
    price : Figure
        The price after the step, exact; rounded only in the last step.
    rule : str
        Why, with the place of the announced rule or adder.
    """

    name: str
    label: str
    scope: Literal["unit", "lot"]
    sign: Literal["", "+", "−", "×", "÷"]
    change: Figure | None
    price: Figure
    rule: str


@dataclass(frozen=True, slots=True)
class EvaluatedOffer:
    """One offer with its costs, its status and, where it is ranked, its rank and margin.

    Parameters
    ----------
    on_basis : OfferOnBasis
        Guaranteed values as evaluated; its offer has confirmed values in place of those read.
    status : Status
        What became of it.
    per_unit, lot : OwningCost
        Amounts. Further items of the lot are part of the lot's evaluated price alone. [currency]
    findings : tuple of Finding
        All findings on the offer, waived ones as notes.
    information : tuple of Information
        Facts beside the money.
    rank : int or None
        1 for the lowest total owning cost; equal amounts share a rank unless the announced tie order parts them.
    margin : Margin or None
        To the nearest rival that is not cheaper.
    above_winner : Decimal or None
        Total owning cost of the lot less the lowest one.
    as_read : Offer or None
        The offer as read, where a confirmed value replaces one of its values.
    corrections : tuple of Correction
        Values that were corrected or confirmed.
    price_steps : tuple of PriceStep
        From the quoted to the evaluated price; empty where the price is not stated.
    contract_price : Figure or None
        What would be paid for the lot: corrected and less unconditional discounts, with the items that count and that
        the bidder prices; no adder, no margin, no price of others. Rounded once. [currency of the offer]
    total_without_preference : Figure or None
        Total owning cost of the lot without a preference margin; None where the tender applies none.
    price_without_preference : Figure or None
        Evaluated price of the lot without a preference margin; None where none lies on the offer.
    rank_without_preference : int or None
        Rank by these totals, the announced tie order applied to their ties.
    tie_decided_by : str or None
        Criterion of the tie order that parts the offer from the one before it (the first: from the one behind it) at
        the same total; None where no tie was broken.
    decisions : tuple of Decision
        Recorded decisions that took effect on the offer.
    """

    on_basis: OfferOnBasis
    status: Status
    per_unit: OwningCost
    lot: OwningCost
    findings: tuple[Finding, ...]
    information: tuple[Information, ...] = ()
    rank: int | None = None
    margin: Margin | None = None
    above_winner: Decimal | None = None
    as_read: Offer | None = None
    corrections: tuple[Correction, ...] = ()
    price_steps: tuple[PriceStep, ...] = ()
    contract_price: Figure | None = None
    total_without_preference: Figure | None = None
    price_without_preference: Figure | None = None
    rank_without_preference: int | None = None
    tie_decided_by: str | None = None
    decisions: tuple[Decision, ...] = ()

    @property
    def offer(self) -> Offer:
        """The offer as read."""
        return self.as_read or self.on_basis.offer

    @property
    def bidder(self) -> str:
        """Name of the bidder as read."""
        return self.offer.bidder.value

    @property
    def name(self) -> str:
        """Name of the offer: the bidder, and the alternative where it is one."""
        return self.offer.name


@dataclass(frozen=True, slots=True)
class LotEvaluation:
    """One lot: its rates and its offers, ranked first, then non-responsive, then not evaluated."""

    lot: Lot
    quantity: Figure
    rates: LotRates
    offers: tuple[EvaluatedOffer, ...]

    @property
    def ranked(self) -> tuple[EvaluatedOffer, ...]:
        """The ranked offers, cheapest first."""
        return tuple(offer for offer in self.offers if offer.status is Status.RANKED)

    @property
    def winners(self) -> tuple[EvaluatedOffer, ...]:
        """The offers on rank 1: none, one, or the members of a tie."""
        return tuple(offer for offer in self.offers if offer.rank == 1)


@dataclass(frozen=True, slots=True)
class Evaluation:
    """The whole evaluation of a tender, its profile of rules settled, with all decisions that were recorded."""

    tender: Tender
    lots: tuple[LotEvaluation, ...]
    exchange_rates: Mapping[str, Figure]
    findings: tuple[Finding, ...]
    decisions: tuple[Decision, ...] = ()
