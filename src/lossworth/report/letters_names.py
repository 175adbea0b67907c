"""File names for letters: safe on every system, whatever a bidder calls itself."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable

__all__ = ["file_stems"]

_LONGEST = 60
_FALLBACK = "bidder"
#: Names that Windows keeps for devices.
_DEVICES = frozenset({"con", "prn", "aux", "nul", *(f"{port}{n}" for port in ("com", "lpt") for n in range(1, 10))})


def file_stems(names: Iterable[str]) -> dict[str, str]:
    """File name without ending for each name.

    Parameters
    ----------
    names : iterable of str
        Names of bidders, trusted or not.

    Returns
    -------
    dict of str to str
        By name. Small letters a to z, digits and single hyphens, at most 60 of them; never a path, a device or empty.
        Where two names come to the same, the later one in the order of the names gets a number.

    Examples
    --------
    >>> file_stems(["../Alder & Söhne", "CON", "Ольха", "alder sohne"])
    {'../Alder & Söhne': 'alder-sohne', 'CON': 'bidder-con', 'alder sohne': 'alder-sohne-2', 'Ольха': 'bidder'}
    """
    stems: dict[str, str] = {}
    taken: set[str] = set()
    for name in sorted(set(names)):
        stem = _stem(name)
        unique, number = stem, 1
        while unique in taken:
            number += 1
            unique = f"{stem}-{number}"
        taken.add(unique)
        stems[name] = unique
    return stems


def _stem(name: str) -> str:
    plain = unicodedata.normalize("NFKD", name).encode("ascii", "ignore").decode("ascii").lower()
    stem = "-".join(re.findall(r"[a-z0-9]+", plain))[:_LONGEST].strip("-")
    if not stem:
        return _FALLBACK
    return f"{_FALLBACK}-{stem}" if stem in _DEVICES else stem
