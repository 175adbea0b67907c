"""Ranks and margins: decided on rounded decimal money; ties stay ties unless the announced order parts them."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Callable, Sequence
from dataclasses import replace
from decimal import Decimal
from itertools import groupby

from ..money import ARITHMETIC
from ..trail import Figure, difference
from .identities import offer_id
from .result import EvaluatedOffer, LotRates, Margin, Status
from .ties import TieOrder

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


def rank_offers(
    offers: Sequence[EvaluatedOffer], rates: LotRates, quantity: Figure, order: TieOrder | None = None
) -> tuple[EvaluatedOffer, ...]:
    """Offers in the order in which papers list them, with ranks and margins.

    Parameters
    ----------
    offers : sequence of EvaluatedOffer
        All offers of one lot, in any order.
    rates : LotRates
        To express a margin in kW.
    quantity : Figure
        Units of the lot.
    order : TieOrder, optional
        The announced order of ties; without one they stay ties.

    Returns
    -------
    tuple of EvaluatedOffer
        Ranked by total owning cost of the lot, then non-responsive, then not evaluated; equals by name.
    """
    order = order or TieOrder((), {})
    in_play = [offer for offer in offers if offer.status is Status.RANKED]
    others = sorted(
        (offer for offer in offers if offer.status is not Status.RANKED),
        key=lambda o: (o.status is Status.NOT_EVALUATED, o.name),
    )
    placed = _placed(in_play, order, lambda offer: _total(offer).value)
    beside = _placed(in_play, order, lambda offer: _without_preference(offer).value, with_preference=False)
    without = {offer.name: rank for offer, rank, _ in beside}
    ranked = [offer for offer, _, _ in placed]
    totals = [_total(offer).value for offer in ranked]
    finished = [
        replace(
            offer,
            rank=rank,
            tie_decided_by=decided,
            rank_without_preference=None if offer.total_without_preference is None else without[offer.name],
            above_winner=totals[position] - totals[0],
            margin=_margin(offer, _rival(position, ranked, totals), ranked[0], rates, quantity),
        )
        for position, (offer, rank, decided) in enumerate(placed)
    ]
    return (*finished, *others)


def _placed(
    offers: Sequence[EvaluatedOffer],
    order: TieOrder,
    amount: Callable[[EvaluatedOffer], Decimal],
    *,
    with_preference: bool = True,
) -> list[tuple[EvaluatedOffer, int, str | None]]:
    """Offers by amount, each with its rank and the criterion that parts it from others of the same amount."""
    placed: list[tuple[EvaluatedOffer, int, str | None]] = []
    for _, same in groupby(sorted(offers, key=lambda offer: (amount(offer), offer.name)), key=amount):
        before = len(placed)
        apart = order.apart(list(same), with_preference=with_preference)
        placed += [(tied.offer, before + tied.place, tied.decided_by) for tied in apart]
    return placed


def _without_preference(offer: EvaluatedOffer) -> Figure:
    return offer.total_without_preference or _total(offer)


def _total(offer: EvaluatedOffer) -> Figure:
    figure = offer.lot.total_owning_cost
    if figure is None:
        raise ValueError(f"{offer.name} is ranked without a total")
    return figure


def _rival(position: int, ranked: Sequence[EvaluatedOffer], totals: Sequence[Decimal]) -> EvaluatedOffer | None:
    """The nearest other offer that is not cheaper; for the members of a tie one another."""
    first = bisect_left(totals, totals[position])
    rival = position + 1 if position == first else first
    return ranked[rival] if rival < len(ranked) else None


def _margin(
    offer: EvaluatedOffer, rival: EvaluatedOffer | None, winner: EvaluatedOffer, rates: LotRates, quantity: Figure
) -> Margin | None:
    if rival is None:
        return None
    amount = difference(
        offer_id(offer.offer, "margin"),
        f"margin to {rival.name}",
        _total(offer).unit,
        _total(rival),
        _total(offer),
    )
    per_unit = ARITHMETIC.divide(amount.value, quantity.value)

    def in_kw(rate: Figure) -> Decimal | None:
        return ARITHMETIC.divide(per_unit, rate.value) if rate.value else None

    lowest = _total(winner).value
    percent = ARITHMETIC.divide(100 * amount.value, lowest) if lowest else Decimal(0)
    return Margin(rival.name, amount, percent, in_kw(rates.no_load), in_kw(rates.load))
