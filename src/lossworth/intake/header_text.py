"""The text of a header cell: its name without what says nothing new, and what stands in its brackets."""

from __future__ import annotations

import re

from .cells import collapsed

__all__ = ["in_brackets", "name_of", "plain"]

_BRACKETS = re.compile(r"[\[(]([^\[\]()]*)[\])]")


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
    return [group.strip() for group in _BRACKETS.findall(collapsed(text))]
