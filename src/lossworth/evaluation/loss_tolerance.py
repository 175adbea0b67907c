"""Tolerance that a bidder claims on its guaranteed losses, where the tender evaluates at guarantee plus tolerance."""

from __future__ import annotations

from ..records.bid import Offer
from ..records.tender import Tender
from ..trail import Figure, product
from .identities import offer_id
from .shares import one_and, share

__all__ = ["claims_tolerance", "tolerance_factor", "with_tolerance"]


def claims_tolerance(offer: Offer) -> bool:
    """Whether a bidder claims a plus tolerance on its losses.

    Parameters
    ----------
    offer : Offer
        The offer.

    Returns
    -------
    bool
        True for a tolerance above zero.
    """
    claimed = offer.terms.claimed_tolerance_percent
    return claimed is not None and claimed.value > 0


def tolerance_factor(offer: Offer, tender: Tender) -> Figure | None:
    """Factor that adds the claimed tolerance to a loss.

    Parameters
    ----------
    offer : Offer
        With the tolerance that it claims.
    tender : Tender
        With its rule.

    Returns
    -------
    Figure or None
        1 + tolerance; None where the tender evaluates at the guarantee, or no tolerance is claimed. [1]

    Notes
    -----
    All guaranteed losses of the offer carry the tolerance. Limits are compared with the guarantee itself: a tolerance
    acts between guarantee and test.
    """
    claimed = offer.terms.claimed_tolerance_percent
    if claimed is None or claimed.value <= 0:
        return None
    if tender.rules.announced.loss_tolerance != "evaluate at guarantee plus tolerance":
        return None
    part = share(offer_id(offer, "claimed tolerance"), "claimed tolerance", claimed)
    return one_and(offer_id(offer, "tolerance factor"), "one and the claimed tolerance", part)


def with_tolerance(loss: Figure | None, factor: Figure | None) -> Figure | None:
    """Loss as it is evaluated.

    Parameters
    ----------
    loss : Figure or None
        Guaranteed loss. [kW]
    factor : Figure or None
        As `tolerance_factor` gives it.

    Returns
    -------
    Figure or None
        The loss times the factor; the loss itself where there is no factor. [kW]
    """
    if loss is None or factor is None:
        return loss
    return product(f"{loss.id}/with tolerance", f"{loss.label} with claimed tolerance", loss.unit, loss, factor)
