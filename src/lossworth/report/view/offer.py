"""One offer as the papers show it: particulars, corrections, price steps, costs, margin."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from .figure import Fact

__all__ = ["CorrectionView", "CostView", "MarginView", "OfferView", "Particular", "PriceStepView"]


@dataclass(frozen=True, slots=True)
class Particular:
    """One value of an offer as read: what the bidder stated and where it stands.

    Parameters
    ----------
    name : str
        What it is.
    text : str
        The characters as they stood; empty where nothing was stated.
    unit : str
        Unit as stated.
    place : str
        Where it stood.
    figure : str or None
        Id of the figure that enters the costs, where it does.
    value : Decimal or None
        The number as read, in the unit as stated; None for words and for what was not stated.
    """

    name: str
    text: str
    unit: str
    place: str
    figure: str | None
    value: Decimal | None = None


@dataclass(frozen=True, slots=True)
class CostView:
    """The five amounts of one offer, as ids of figures; None where an amount cannot be computed."""

    evaluated_price: str | None
    no_load_cost: str | None
    load_cost: str | None
    auxiliary_cost: str | None
    total_owning_cost: str | None


@dataclass(frozen=True, slots=True)
class MarginView:
    """Distance of a ranked offer to the nearest rival that is not cheaper, for the whole lot.

    Parameters
    ----------
    to : str
        The rival.
    amount : str
        Id of the figure of the difference of the total owning costs.
    percent_of_winner : Decimal
        The amount in percent of the winner's total owning cost, two places.
    no_load_loss_kw, load_loss_kw : Decimal or None
        The amount as kW of one unit's no-load or load loss, six significant digits; None where the rate is zero.
    """

    to: str
    amount: str
    percent_of_winner: Decimal
    no_load_loss_kw: Decimal | None
    load_loss_kw: Decimal | None


@dataclass(frozen=True, slots=True)
class CorrectionView:
    """A value as read and the value that takes its place; the value as evaluated stands in the costs.

    Parameters
    ----------
    label : str
        What was corrected, in words.
    as_read, corrected : str
        Ids of both figures.
    rule, reason : str
        The announced rule that corrects, and what is wrong with the value as read.
    decision : str
        The bidder's recorded answer or confirmation in a sentence; empty where there is none.
    evaluated : str or None
        Id of the figure as evaluated, the third layer: a loss on the tender's basis, an evaluated price.
    """

    label: str
    as_read: str
    corrected: str
    rule: str
    reason: str
    decision: str
    evaluated: str | None = None


@dataclass(frozen=True, slots=True)
class PriceStepView:
    """One step from the quoted to the evaluated price.

    Parameters
    ----------
    name : str
        Kind of the step, as in `evaluation.result.PriceStep`.
    label : str
        What it does, in words.
    scope : str
        ``"unit"`` or ``"lot"``.
    sign : str
        ``"+"``, ``"−"``, ``"×"``, ``"÷"``; empty for a price that stands by itself.
    change : str or None
        Id of the figure that is added, taken away, multiplied or divided by.
    price : str
        Id of the price after the step.
    rule : str
        Why, with the place of the announced rule or adder.
    """

    name: str
    label: str
    scope: str
    sign: str
    change: str | None
    price: str
    rule: str


@dataclass(frozen=True, slots=True)
class OfferView:
    """One offer as the papers show it.

    Parameters
    ----------
    bidder : str
        Name as read, with the alternative where the offer is one; untrusted text.
    status : str
        ``"ranked"``, ``"not evaluated"`` or ``"non-responsive"``.
    rank : int or None
        1 for the lowest total owning cost; equal ranks are ties.
    rank_text : str
        ``"1"``, ``"1 ="`` for a tie, ``"–"`` where not ranked.
    particulars : tuple of Particular
        Price and guaranteed values as read.
    unit_price, exchange_rate, no_load_loss, load_loss, auxiliary_loss : str or None
        Ids of the figures that enter the costs; losses in kW.
    currency : str
        Currency of the quoted price, empty where unknown.
    per_unit, lot : CostView
        Amounts of one unit and of the whole lot.
    margin : MarginView or None
        For ranked offers with a rival behind them.
    above_winner : Decimal or None
        Total owning cost of the lot less the winner's; zero for the winner; None where not ranked.
    reasons : tuple of str
        Why it is not ranked; empty where ranked.
    assumptions : tuple of str
        Conversions that were made on assumptions, each in a sentence; they bind nobody until the bidder confirms.
    information : tuple of Fact
        Efficiency and energy, beside the money.
    corrections : tuple of CorrectionView
        Values that were corrected by rule or confirmed by the bidder.
    price_steps : tuple of PriceStepView
        From the quoted to the evaluated price: first per unit, then further items of the lot, where it has any.
    contract_price : str or None
        Id of what would be paid for the lot, in the currency of the bid; no adder for comparison is in it.
    total_without_preference : str or None
        Id of the total owning cost of the lot without a preference margin; None where the tender applies none.
    rank_without_preference : int or None
        Rank by these totals.
    tie_decided_by : str
        Criterion of the announced order that broke a tie of this offer; empty where none did.
    decisions : tuple of str
        Recorded decisions that took effect on the offer, each in a sentence with who, when, why and where.
    tax_note : str
        Whether the bidder's prices, and so the contract price, include tax: ``"tax included"``, ``"without tax"``,
        ``"tax not stated"``.
    items_price : Decimal or None
        What further items add to the evaluated price of the lot, a preference on them included; None where none count.
    """

    bidder: str
    status: str
    rank: int | None
    rank_text: str
    particulars: tuple[Particular, ...]
    unit_price: str | None
    exchange_rate: str | None
    no_load_loss: str | None
    load_loss: str | None
    auxiliary_loss: str | None
    currency: str
    per_unit: CostView
    lot: CostView
    margin: MarginView | None
    above_winner: Decimal | None
    reasons: tuple[str, ...]
    assumptions: tuple[str, ...] = ()
    information: tuple[Fact, ...] = ()
    corrections: tuple[CorrectionView, ...] = ()
    price_steps: tuple[PriceStepView, ...] = ()
    contract_price: str | None = None
    total_without_preference: str | None = None
    rank_without_preference: int | None = None
    tie_decided_by: str = ""
    decisions: tuple[str, ...] = ()
    tax_note: str = ""
    items_price: Decimal | None = None

    @property
    def has_price_steps(self) -> bool:
        """Whether more than a currency lies between the quoted and the evaluated price."""
        return any(step.name not in ("quoted", "currency", "evaluated") for step in self.price_steps)

    @property
    def has_items(self) -> bool:
        """Whether further items are part of the lot's amounts, so that they are more than quantity times unit."""
        return any(step.scope == "lot" for step in self.price_steps)
