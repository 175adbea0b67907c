"""Ranks and margins: decided on rounded decimal money, ties kept as ties."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from ..money import ARITHMETIC
from ..trail import Figure, difference
from .identities import figure_id
from .result import EvaluatedOffer, LotRates, Margin, Status

__all__ = ["competition_ranks", "rank_offers"]


def competition_ranks(amounts: Sequence[Decimal]) -> tuple[int, ...]:
    """Rank of each amount, 1 for the lowest; equal amounts share a rank, and the next rank is skipped.

    Parameters
    ----------
    amounts : sequence of Decimal
        Rounded money. [currency]

    Returns
    -------
    tuple of int
        In the order of the amounts.

    Examples
    --------
    >>> competition_ranks([Decimal(5), Decimal(3), Decimal(3)])
    (3, 1, 1)
    """
    ordered = sorted(amounts)
    first = {amount: position for position, amount in reversed(list(enumerate(ordered, start=1)))}
    return tuple(first[amount] for amount in amounts)


def rank_offers(offers: Sequence[EvaluatedOffer], rates: LotRates, quantity: Figure) -> tuple[EvaluatedOffer, ...]:
    """Offers in the order in which papers list them, with ranks and margins.

    Parameters
    ----------
    offers : sequence of EvaluatedOffer
        All offers of one lot, in any order.
    rates : LotRates
        To express a margin in kW.
    quantity : Figure
        Units of the lot.

    Returns
    -------
    tuple of EvaluatedOffer
        Ranked by total owning cost of the lot, then non-responsive, then not evaluated; equals by name.
    """
    ranked = sorted(
        (offer for offer in offers if offer.status is Status.RANKED), key=lambda o: (_total(o).value, o.bidder)
    )
    others = sorted(
        (offer for offer in offers if offer.status is not Status.RANKED),
        key=lambda o: (o.status is Status.NOT_EVALUATED, o.bidder),
    )
    ranks = competition_ranks([_total(offer).value for offer in ranked])
    placed = [
        replace(
            offer,
            rank=rank,
            above_winner=_total(offer).value - _total(ranked[0]).value,
            margin=_margin(offer, _rival(position, ranked), ranked[0], rates, quantity),
        )
        for position, (offer, rank) in enumerate(zip(ranked, ranks, strict=True))
    ]
    return (*placed, *others)


def _total(offer: EvaluatedOffer) -> Figure:
    figure = offer.lot.total_owning_cost
    if figure is None:
        raise ValueError(f"{offer.bidder} is ranked without a total")
    return figure


def _rival(position: int, ranked: Sequence[EvaluatedOffer]) -> EvaluatedOffer | None:
    """The nearest other offer that is not cheaper; for the members of a tie one another."""
    own = _total(ranked[position]).value
    rivals = [offer for place, offer in enumerate(ranked) if place != position and _total(offer).value >= own]
    return min(rivals, key=lambda offer: _total(offer).value, default=None)


def _margin(
    offer: EvaluatedOffer, rival: EvaluatedOffer | None, winner: EvaluatedOffer, rates: LotRates, quantity: Figure
) -> Margin | None:
    if rival is None:
        return None
    lot = offer.offer.lot.value
    amount = difference(
        figure_id(f"lot {lot}", offer.bidder, "margin"),
        f"margin to {rival.bidder}",
        _total(offer).unit,
        _total(rival),
        _total(offer),
    )
    per_unit = ARITHMETIC.divide(amount.value, quantity.value)

    def in_kw(rate: Figure) -> Decimal | None:
        return ARITHMETIC.divide(per_unit, rate.value) if rate.value else None

    lowest = _total(winner).value
    percent = ARITHMETIC.divide(100 * amount.value, lowest) if lowest else Decimal(0)
    return Margin(rival.bidder, amount, percent, in_kw(rates.no_load), in_kw(rates.load))
