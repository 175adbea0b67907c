"""What an evaluation gives: rates, costs, ranks and reasons, as frozen records of figures."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from ..findings import Finding
from ..records.bid import Offer
from ..records.tender import Lot, Tender
from ..trail import Figure

__all__ = [
    "Basis",
    "EvaluatedOffer",
    "Evaluation",
    "LotEvaluation",
    "LotRates",
    "Margin",
    "OwningCost",
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
        Where the rates are derived.
    """

    basis: Basis
    no_load: Figure
    load: Figure
    auxiliary: Figure | None
    table: YearTable | None


@dataclass(frozen=True, slots=True)
class OwningCost:
    """The five amounts of an offer, for one unit or for a lot; None where an amount cannot be computed."""

    evaluated_price: Figure | None
    no_load_cost: Figure | None
    load_cost: Figure | None
    auxiliary_cost: Figure | None
    total_owning_cost: Figure | None


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

    offer: Offer
    status: Status
    per_unit: OwningCost
    lot: OwningCost
    findings: tuple[Finding, ...]
    rank: int | None = None
    margin: Margin | None = None
    above_winner: Decimal | None = None

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
