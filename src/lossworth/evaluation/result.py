"""What an evaluation gives: rates, costs, ranks and reasons, as frozen records of figures."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum

import numpy as np
from numpy.typing import NDArray

from ..findings import Finding
from ..records.bid import Offer
from ..records.profile import Profile
from ..records.tender import Lot, Tender
from ..trail import Figure
from .loss_basis import OfferOnBasis

__all__ = [
    "Basis",
    "CoolingByYear",
    "EvaluatedOffer",
    "Evaluation",
    "Information",
    "LoadFacts",
    "LotEvaluation",
    "LotRates",
    "Margin",
    "OwningCost",
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
class EvaluatedOffer:
    """One offer with its costs, its status and, where it is ranked, its rank and margin."""

    on_basis: OfferOnBasis
    status: Status
    per_unit: OwningCost
    lot: OwningCost
    findings: tuple[Finding, ...]
    information: tuple[Information, ...] = ()
    rank: int | None = None
    margin: Margin | None = None
    above_winner: Decimal | None = None

    @property
    def offer(self) -> Offer:
        """The offer as read."""
        return self.on_basis.offer

    @property
    def bidder(self) -> str:
        """Name of the bidder as read."""
        return self.offer.bidder.value


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
    """The whole evaluation of a tender."""

    tender: Tender
    lots: tuple[LotEvaluation, ...]
    exchange_rates: Mapping[str, Figure]
    findings: tuple[Finding, ...]
