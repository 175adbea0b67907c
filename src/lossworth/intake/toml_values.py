"""Values of a TOML text with decimal numbers, or the line on which it is no TOML."""

from __future__ import annotations

import re
import tomllib
from decimal import Decimal, InvalidOperation
from typing import Any

from ..findings import Finding, Place

__all__ = ["parse_toml"]

_WHERE = re.compile(r" \(at (?:line (?P<line>\d+), column (?P<column>\d+)|end of document)\)$")

#: A key of many parts, for which the parser takes memory by the square of their number: 100,000 would want 40 GB.
_DEEP_KEY = re.compile(r"""(?<![\w-])(?:(?:[\w-]+|"[^"\n]*"|'[^'\n]*')[ \t]*\.[ \t]*){32}""")


def parse_toml(source: str, shown_as: str) -> dict[str, Any] | Finding:
    """Values of a TOML text, fractions as exact decimals.

    Parameters
    ----------
    source : str
        The text.
    shown_as : str
        Name of the file in findings.

    Returns
    -------
    dict or Finding
        The document, or what keeps it from being one.
    """
    if deep := _DEEP_KEY.search(source):
        line = source.count("\n", 0, deep.start()) + 1
        return Finding("tender-syntax", "file", "must not have keys of that many parts", Place(shown_as, line=line))
    try:
        return tomllib.loads(source, parse_float=_decimal)
    except tomllib.TOMLDecodeError as error:
        return _syntax_finding(str(error), source, shown_as)
    except RecursionError:
        return Finding("tender-syntax", "file", "must not nest that many brackets", Place(shown_as))
    except (ValueError, OverflowError) as error:  # dates and whole numbers beyond what the language can hold
        return Finding("tender-syntax", "file", f"must be valid TOML ({error})", Place(shown_as))


def _decimal(text: str) -> Decimal:
    try:
        return Decimal(text)
    except InvalidOperation:  # an exponent of twenty digits
        return Decimal("Infinity")


def _syntax_finding(message: str, source: str, shown_as: str) -> Finding:
    lines = source.splitlines()
    found = _WHERE.search(message)
    line = int(found["line"]) if found and found["line"] else max(len(lines), 1)
    reason = _WHERE.sub("", message)
    got = lines[line - 1].strip() if line <= len(lines) else ""
    rule = f"must be valid TOML ({reason[:1].lower()}{reason[1:]})"
    return Finding("tender-syntax", "file", rule, Place(shown_as, line=line), got=got)
