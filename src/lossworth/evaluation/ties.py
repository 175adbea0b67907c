"""Offers with the same total, put in order by the criteria that the tender announces, and by lots that were drawn."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from ..records.decision import Decision
from ..records.rules import TieBreaker
from .result import EvaluatedOffer

__all__ = ["TieOrder", "Tied", "drawn_places"]

#: Behind every stated time.
_NEVER = Decimal("Infinity")


@dataclass(frozen=True, slots=True)
class TieOrder:
    """The announced order and the lots that were drawn.

    Parameters
    ----------
    criteria : tuple of str
        As announced, first one first; empty where the tender announces none.
    drawn : mapping of str to int
        Place drawn by the name of the offer.
    """

    criteria: tuple[TieBreaker, ...]
    drawn: Mapping[str, int]

    def apart(self, tied: Sequence[EvaluatedOffer], *, with_preference: bool = True) -> tuple[Tied, ...]:
        """Put offers of the same total in order.

        Parameters
        ----------
        tied : sequence of EvaluatedOffer
            In the order of names.
        with_preference : bool
            Whether evaluated prices are compared with the preference margin on them.

        Returns
        -------
        tuple of Tied
            In the order of the criteria; those that no criterion parts keep one place and the order of names.
        """
        groups = self._groups(list(tied), self.criteria, with_preference=with_preference)
        placed, place = [], 1
        for number, (members, before) in enumerate(groups):
            after = groups[number + 1][1] if number + 1 < len(groups) else None
            decided = before if number else after
            placed += [Tied(offer, place, decided) for offer in members]
            place += len(members)
        return tuple(placed)

    def _groups(
        self, offers: list[EvaluatedOffer], criteria: tuple[TieBreaker, ...], *, with_preference: bool
    ) -> list[tuple[list[EvaluatedOffer], TieBreaker | None]]:
        """Groups that stay tied, each with the criterion that parts it from the group before it."""
        if len(offers) < 2 or not criteria:
            return [(offers, None)]
        first, rest = criteria[0], criteria[1:]
        keys = [self._key(first, offer, with_preference=with_preference) for offer in offers]
        if first == "drawing of lots" and _NEVER in keys:
            keys = [_NEVER] * len(offers)  # all tied offers draw, or none
        groups: list[tuple[list[EvaluatedOffer], TieBreaker | None]] = []
        for value in sorted(set(keys)):
            same = [offer for offer, key in zip(offers, keys, strict=True) if key == value]
            inner = self._groups(same, rest, with_preference=with_preference)
            if groups:
                inner[0] = (inner[0][0], first)
            groups += inner
        return groups

    def _key(self, criterion: TieBreaker, offer: EvaluatedOffer, *, with_preference: bool) -> Decimal:
        if criterion == "drawing of lots":
            place = self.drawn.get(offer.name)
            return _NEVER if place is None else Decimal(place)
        if criterion == "lower evaluated price" and not with_preference and offer.price_without_preference is not None:
            return offer.price_without_preference.value
        return _KEYS[criterion](offer)


@dataclass(frozen=True, slots=True)
class Tied:
    """An offer among those of the same total: its place among them, and the criterion that parts it."""

    offer: EvaluatedOffer
    place: int
    decided_by: TieBreaker | None


def drawn_places(decisions: Iterable[Decision], lot: str) -> dict[str, int]:
    """Places drawn in one lot.

    Parameters
    ----------
    decisions : iterable of Decision
        In the order of their file; a later drawing replaces an earlier one.
    lot : str
        The lot.

    Returns
    -------
    dict of str to int
        By name of the offer.
    """
    return {
        decision.bidder.value: decision.order
        for decision in decisions
        if decision.kind == "break tie" and decision.lot.value == lot and decision.order is not None
    }


def _no_load_loss(offer: EvaluatedOffer) -> Decimal:
    loss = offer.on_basis.no_load_loss
    return _NEVER if loss is None else loss.value


def _evaluated_price(offer: EvaluatedOffer) -> Decimal:
    price = offer.lot.evaluated_price
    return _NEVER if price is None else price.value


def _delivery(offer: EvaluatedOffer) -> Decimal:
    weeks = offer.on_basis.offer.delivery_weeks
    return _NEVER if weeks is None else weeks.value


_KEYS: dict[TieBreaker, Callable[[EvaluatedOffer], Decimal]] = {
    "lower no-load loss": _no_load_loss,
    "lower evaluated price": _evaluated_price,
    "earlier delivery": _delivery,
}
