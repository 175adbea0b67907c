"""What is known of one input: the values at which first place changes, and who leads on both sides."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Border", "BreakEven"]


@dataclass(frozen=True, slots=True)
class Border:
    """A value of an input at which first place changes.

    Parameters
    ----------
    value : float
        Where the unrounded costs of both sides are equal; of a whole-valued input the first whole value, seen from
        the present one, at which first place has changed.
    below, above : tuple of str
        Who leads just below and just above; several where their costs are equal over more than a point. Of a
        whole-valued input: at the value or the one before it, and at the value or the one after it.
    cost : float
        The equal cost of one unit; of a whole-valued input that of the leader at the value. [currency]
    rounded_tie : tuple of float
        Outside this interval costs rounded as the tender states rank as the unrounded ones; inside they may tie, or
        stand the other way round. Both ends are the value where rounding can do nothing.
    is_step : bool
        Whether costs do not meet at the value but step past one another, as where hours of cooling set in.
    """

    value: float
    below: tuple[str, ...]
    above: tuple[str, ...]
    cost: float
    rounded_tie: tuple[float, float]
    is_step: bool = False


@dataclass(frozen=True, slots=True)
class BreakEven:
    """One input: where the first place changes as it moves and everything else stays.

    Parameters
    ----------
    input : str
        Name, ``"no_load_rate"``, ``"energy_price_per_kwh"``, ``"exchange_rate FCU"``, ``"load_loss_kw"``.
    label : str
        The same in the trade's words.
    bidder : str
        Whose value it is; empty for an input that all bids share.
    unit : str
        Unit of all its values.
    now : float
        Present value.
    lowest, highest : float
        Admissible values; the latter may be infinite.
    limit : str
        What sets the greatest value, where a limit of the tender does: beyond it the bid is not responsive.
    leaders : tuple of str
        Who leads at the present value: one bid, or the members of a tie.
    at_now : Border or None
        Where a tie at the present value is itself a border.
    lower, upper : Border or None
        The nearest border below and above; None where no admissible value on that side changes first place.
    borders : tuple of Border
        All borders, from the lowest value to the highest.
    is_whole : bool
        Whether only whole values are admissible.
    moves_costs : bool
        Whether the input moves any cost against another at all.
    is_certain : bool
        Whether no border can have been missed.
    nearness : float
        Distance to the nearest border over the present value. An escalation or a growth is compared with the discount
        rate where that is greater, a tolerance with the losses, an amount of zero with an amount of its kind. Infinite
        without any border.
    """

    input: str
    label: str
    bidder: str
    unit: str
    now: float
    lowest: float
    highest: float
    limit: str
    leaders: tuple[str, ...]
    at_now: Border | None
    lower: Border | None
    upper: Border | None
    borders: tuple[Border, ...]
    is_whole: bool
    moves_costs: bool
    is_certain: bool
    nearness: float
