"""Questions of an auditor and of a protest: what rounding does to a ranking, and whether a rejected bid acts on it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np

from ..evaluation.identities import figure_id
from ..evaluation.result import LotEvaluation, Status
from ..trail import Figure
from .break_even_lines import leaders
from .lot_model import LotModel
from .lot_model_trail import trail_of

__all__ = ["RankDependence", "RoundingEffect", "rank_dependence", "rounding_effect"]


@dataclass(frozen=True, slots=True)
class RoundingEffect:
    """Costs as evaluated beside costs before any rounding.

    Parameters
    ----------
    bidders : tuple of str
        In rank order as evaluated.
    evaluated, unrounded : tuple of float
        Total owning cost of one unit, one a bid. [currency]
    shift_of_lot : tuple of float
        What rounding adds to the cost of the lot, one a bid. [currency]
    changes_order : bool
        Whether two bids stand in the other order, or a tie is made or parted.
    changes_first_place : bool
        Whether other bids lead before rounding.
    leaders_unrounded : tuple of str
        Who leads before rounding.
    greatest_effect : float
        Most that rounding by this rule can move one cost of a unit against another. [currency]
    could_change_first_place : bool
        Whether the lead is less than that.
    """

    bidders: tuple[str, ...]
    evaluated: tuple[float, ...]
    unrounded: tuple[float, ...]
    shift_of_lot: tuple[float, ...]
    changes_order: bool
    changes_first_place: bool
    leaders_unrounded: tuple[str, ...]
    greatest_effect: float
    could_change_first_place: bool


def rounding_effect(model: LotModel) -> RoundingEffect:
    """What rounding does to a ranking.

    Parameters
    ----------
    model : LotModel
        Of the evaluation, not of a study.

    Returns
    -------
    RoundingEffect
        The tender's tie order is left out of it: equal amounts are a tie on both sides.

    Raises
    ------
    ValueError
        If the model is a study: nothing of it is rounded.
    """
    if model.basis == "study":
        raise ValueError(f"lot {model.lot_id}: a study is not rounded")
    evaluated, unrounded = model.rounding.total, model.cost
    parts = 1 + int(np.count_nonzero(model.losses.any(axis=0)))
    greatest = model.rounding.step * parts
    first = leaders(evaluated), leaders(unrounded)
    rest = np.sort(unrounded)
    return RoundingEffect(
        bidders=model.bidders,
        evaluated=tuple(evaluated.tolist()),
        unrounded=tuple(unrounded.tolist()),
        shift_of_lot=tuple((model.rounding.of_parts.sum(axis=1) * model.quantity).tolist()),
        changes_order=_order(evaluated) != _order(unrounded),
        changes_first_place=first[0] != first[1],
        leaders_unrounded=tuple(model.bidders[bid] for bid in first[1]),
        greatest_effect=greatest,
        could_change_first_place=bool(rest.size > 1 and rest[1] - rest[0] <= greatest),
    )


def _order(cost: np.ndarray[tuple[int, ...], np.dtype[np.float64]]) -> list[tuple[int, ...]]:
    """Groups of bids with equal costs, the cheapest first."""
    groups, left = [], np.arange(cost.size)
    while left.size:
        lowest = left[list(leaders(cost[left]))]
        groups.append(tuple(int(bid) for bid in lowest))
        left = np.setdiff1d(left, lowest)
    return groups


@dataclass(frozen=True, slots=True)
class RankDependence:
    """Whether an offer that is not ranked acts on the ranks of others.

    Parameters
    ----------
    offer : str
        The offer that is not ranked.
    status : Status
        What became of it.
    in_costs_of : tuple of str
        Ranked offers in whose cost one of its figures stands, as the price of an item that stands in for a missing one.
    figures : tuple of str
        These figures, by their labels.
    changed_ranks : mapping of str to tuple of int, or None
        Ranked offers whose rank is another without it: rank now, rank then. None where that was not looked at.
    """

    offer: str
    status: Status
    in_costs_of: tuple[str, ...]
    figures: tuple[str, ...]
    changed_ranks: Mapping[str, tuple[int, int]] | None

    @property
    def acts_on_costs(self) -> bool:
        """Whether the cost of any ranked offer would be another without it."""
        return bool(self.in_costs_of)


def rank_dependence(
    lot: LotEvaluation, ranks_without: Callable[[str], Mapping[str, int]] | None = None
) -> tuple[RankDependence, ...]:
    """Whether any cost or rank depends on an offer that is not ranked.

    Parameters
    ----------
    lot : LotEvaluation
        As evaluated.
    ranks_without : callable, optional
        Ranks by name of the lot evaluated without one offer; asked only for offers that stand in the cost of another.

    Returns
    -------
    tuple of RankDependence
        One for each offer that is not ranked, in the order of the papers.

    Notes
    -----
    A cost knows every figure that it was made of. An offer of which no figure stands behind any ranked cost acts on no
    rank; one that does may or may not change ranks, which only another evaluation tells.
    """
    behind = {offer.name: _behind(offer.lot.total_owning_cost) for offer in lot.ranked}
    ranks = {offer.name: offer.rank or 0 for offer in lot.ranked}
    found = []
    for offer in lot.offers:
        if offer.status is Status.RANKED:
            continue
        head = figure_id(f"lot {lot.lot.id}", offer.name) + "/"
        labels = {name: [label for known, label in of.items() if known.startswith(head)] for name, of in behind.items()}
        touched = tuple(name for name, its in labels.items() if its)
        changed: dict[str, tuple[int, int]] | None = {} if not touched else None
        if touched and ranks_without is not None:
            then = ranks_without(offer.name)
            changed = {name: (rank, then[name]) for name, rank in ranks.items() if then.get(name, rank) != rank}
        its_figures = dict.fromkeys(label for name in touched for label in labels[name])
        found.append(RankDependence(offer.name, offer.status, touched, tuple(its_figures), changed))
    return tuple(found)


def _behind(total: Figure | None) -> dict[str, str]:
    """Labels of all figures behind a cost, by identity."""
    if total is None:
        return {}
    return {figure.id: figure.label for figure in trail_of(total, taken=(), unrounded=("",)).figures}
