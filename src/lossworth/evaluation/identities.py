"""Identities of figures: readable, unique, and free of anything that a bidder could smuggle in."""

from __future__ import annotations

from urllib.parse import quote

__all__ = ["figure_id"]


def figure_id(*parts: str) -> str:
    """Identity of a figure from the names along its way.

    Parameters
    ----------
    *parts : str
        Lot, bidder, quantity; trusted or not.

    Returns
    -------
    str
        The parts joined by slashes, each with its special characters as percent codes.

    Examples
    --------
    >>> figure_id("lot 1", "A/B <i>", "load_cost")
    'lot 1/A%2FB %3Ci%3E/load_cost'
    """
    return "/".join(quote(part, safe=" ") for part in parts)
