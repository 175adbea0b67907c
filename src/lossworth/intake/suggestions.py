"""Did you mean: the nearest of the known words."""

from __future__ import annotations

from collections.abc import Iterable
from difflib import get_close_matches

__all__ = ["did_you_mean", "nearest", "one_of"]

_LONGEST = 80  # the comparison takes time by the square of the length


def nearest(word: str, known: Iterable[str]) -> str | None:
    """The known word most like this one.

    Parameters
    ----------
    word : str
        As it stood in a file.
    known : iterable of str
        What would have been understood.

    Returns
    -------
    str or None
        None where nothing is near.
    """
    by_folded = {candidate.casefold(): candidate for candidate in known}
    found = get_close_matches(word[:_LONGEST].casefold(), list(by_folded), n=1, cutoff=0.7)
    return by_folded[found[0]] if found else None


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """Question that names the nearest known word.

    Parameters
    ----------
    word : str
        As it stood in a file.
    known : iterable of str
        What would have been understood.

    Returns
    -------
    str
        ``'Did you mean "load_factor"?'``, or nothing.
    """
    near = nearest(word, known)
    return f'Did you mean "{near}"?' if near else ""


def one_of(words: Iterable[str]) -> str:
    """Words of which one is allowed.

    Parameters
    ----------
    words : iterable of str
        In their order.

    Returns
    -------
    str
        ``'"kW" or "W"'``.
    """
    return " or ".join(f'"{word}"' for word in words)
