"""The text of a header cell: its name without what says nothing new, and what stands in its brackets."""

from __future__ import annotations

import re

from .cells import collapsed

__all__ = ["folded", "in_brackets", "name_of", "plain"]

#: Square or round brackets, and in them at most one round pair more: `[dB(A)]`.
_INSIDE = r"[^\[\]()]*(?:\([^\[\]()]*\)[^\[\]()]*)?"
_BRACKETS = re.compile(rf"\[(?P<square>{_INSIDE})\]|\((?P<round>{_INSIDE})\)")


def name_of(text: str) -> str:
    """Name of a header without its brackets.

    Parameters
    ----------
    text : str
        As it stands, ``"Guaranteed no-load loss [kW]"``.

    Returns
    -------
    str
        ``"no load loss"``.
    """
    return plain(_BRACKETS.sub(" ", text))


def plain(text: str) -> str:
    """Small letters, hyphens and commas as spaces, without the prefix that says nothing new.

    Parameters
    ----------
    text : str
        Name of a column.

    Returns
    -------
    str
        The form in which names are compared.
    """
    return collapsed(re.sub(r"[-\u2010\u2011,:*]", " ", text.casefold())).removeprefix("guaranteed ")


def in_brackets(text: str) -> list[str]:
    """What stands in square or round brackets.

    Parameters
    ----------
    text : str
        As it stands.

    Returns
    -------
    list of str
        In their order, without spaces around, empty ones included.
    """
    found = _BRACKETS.finditer(collapsed(text))
    return [(match["square"] if match["round"] is None else match["round"]).strip() for match in found]


def folded(name: str) -> str:
    """Name that a buyer chooses, without regard to capitals and to the number of blanks.

    Parameters
    ----------
    name : str
        Of an item, a liquid, a group.

    Returns
    -------
    str
        The form in which such names are compared.
    """
    return " ".join(name.casefold().split())
