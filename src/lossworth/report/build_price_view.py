"""The way from the quoted to the evaluated price, corrections and decisions, as the papers show them."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

from ..evaluation.result import Correction, EvaluatedOffer, PriceStep
from ..findings import one_line
from ..money import ARITHMETIC
from ..records.decision import Decision
from ..trail import Figure, Operation, Operator
from .view import CorrectionView, PriceStepView

__all__ = ["correction_views", "decision_sentence", "items_price", "price_roots", "price_step_views"]


def price_roots(offer: EvaluatedOffer) -> Iterator[Figure]:
    """Figures that corrections, price steps and contract price refer to.

    Parameters
    ----------
    offer : EvaluatedOffer
        One offer.

    Yields
    ------
    Figure
        Roots for the figures of the view.
    """
    for step in offer.price_steps:
        yield step.price
        if step.change is not None:
            yield step.change
    for correction in offer.corrections:
        yield correction.as_read
        yield correction.corrected
    yield from (figure for figure in (offer.contract_price, offer.total_without_preference) if figure is not None)


def items_price(offer: EvaluatedOffer) -> Decimal | None:
    """What the further items add to the evaluated price of the lot.

    Parameters
    ----------
    offer : EvaluatedOffer
        One offer.

    Returns
    -------
    Decimal or None
        Whatever stands beside the price of all units; None where nothing does. [evaluation currency]
    """
    price = offer.lot.evaluated_price
    if price is None or not any(step.scope == "lot" for step in offer.price_steps):
        return None
    if not isinstance(price.source, Operation) or price.source.operator is not Operator.SUM:
        return None
    total = Decimal(0)
    for item in price.source.operands[1:]:
        total = ARITHMETIC.add(total, item.value)
    return total


def price_step_views(offer: EvaluatedOffer) -> tuple[PriceStepView, ...]:
    """Steps of the price.

    Parameters
    ----------
    offer : EvaluatedOffer
        One offer.

    Returns
    -------
    tuple of PriceStepView
        In the order of the chain.
    """
    return tuple(_step(step) for step in offer.price_steps)


def _step(step: PriceStep) -> PriceStepView:
    change = None if step.change is None else step.change.id
    label, rule = one_line(step.label), one_line(step.rule)
    return PriceStepView(step.name, label, step.scope, step.sign, change, step.price.id, rule)


def correction_views(offer: EvaluatedOffer) -> tuple[CorrectionView, ...]:
    """Corrected and confirmed values.

    Parameters
    ----------
    offer : EvaluatedOffer
        One offer.

    Returns
    -------
    tuple of CorrectionView
        Confirmed values first.
    """
    return tuple(_correction(correction, offer) for correction in offer.corrections)


def _evaluated(correction: Correction, offer: EvaluatedOffer) -> Figure | None:
    """The third layer: what the corrected value became in the evaluation."""
    layers = {
        "unit_price": offer.per_unit.evaluated_price,
        "total_price": offer.lot.evaluated_price,
        "no_load_loss_kw": offer.on_basis.no_load_loss,
        "load_loss_kw": offer.on_basis.load_loss,
    }
    return layers.get(correction.field, correction.corrected)


def _correction(correction: Correction, offer: EvaluatedOffer) -> CorrectionView:
    evaluated = _evaluated(correction, offer)
    return CorrectionView(
        label=one_line(correction.corrected.label),
        as_read=correction.as_read.id,
        corrected=correction.corrected.id,
        rule=one_line(correction.rule),
        reason=one_line(correction.reason),
        decision="" if correction.decision is None else decision_sentence(correction.decision),
        evaluated=None if evaluated is None else evaluated.id,
    )


def decision_sentence(decision: Decision) -> str:
    """A recorded decision in a sentence.

    Parameters
    ----------
    decision : Decision
        As recorded.

    Returns
    -------
    str
        What was decided, by whom, when, why, with what evidence, and where it stands.
    """
    about = decision.field.value if decision.field is not None else decision.status or ""
    what = f"{decision.kind} {about}".strip()
    return one_line(
        f"{what}: {decision.reason}; by {decision.who} on {decision.when.isoformat()}, evidence: {decision.evidence} "
        f"({decision.place})"
    )
