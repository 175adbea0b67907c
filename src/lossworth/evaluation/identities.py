"""Identities of figures: readable, unique, and free of anything that a bidder could smuggle in."""

from __future__ import annotations

from collections.abc import Iterable
from urllib.parse import quote

from ..records.bid import Offer

__all__ = ["figure_id", "is_one_of", "offer_id"]


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


def offer_id(offer: Offer, *parts: str) -> str:
    """Identity of a figure of one offer; an alternative has figures of its own.

    Parameters
    ----------
    offer : Offer
        The offer.
    *parts : str
        The names behind it.

    Returns
    -------
    str
        ``"lot 1/Alder/load_cost"``.
    """
    return figure_id(f"lot {offer.lot}", offer.name, *parts)


def is_one_of(stated: str, names: Iterable[str]) -> bool:
    """Whether a name is one of some, without regard to case and to the number of blanks.

    Parameters
    ----------
    stated : str
        As the bidder writes it.
    names : iterable of str
        As the tender writes them.

    Returns
    -------
    bool
        True where one of them is meant.

    Examples
    --------
    >>> is_one_of("Mineral  oil", ["mineral oil"])
    True
    """
    return _plain(stated) in {_plain(name) for name in names}


def _plain(name: str) -> str:
    return " ".join(name.casefold().split())
