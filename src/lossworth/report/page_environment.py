"""Templates of the pages: found in the package, escaping, and strict."""

from __future__ import annotations

import unicodedata
from functools import cache
from importlib.resources import files

from jinja2 import Environment, FunctionLoader, StrictUndefined
from markupsafe import Markup

from .figures import shortened
from .formats import percent, plain, significant

__all__ = ["environment", "visible"]

#: Marks that turn the direction of the text around them: a name could hide what follows it.
_TURNING = frozenset("\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")


@cache
def environment() -> Environment:
    """Templates of the package, escaping on, and no silence about what is not there.

    Returns
    -------
    jinja2.Environment
        The same object for every page.
    """
    made = Environment(
        loader=FunctionLoader(_template),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        finalize=visible,
    )
    made.filters |= {
        "css_text": _css_text,
        "percent": percent,
        "plain": plain,
        "shortened": shortened,
        "significant": significant,
    }
    return made


def _template(name: str) -> str | None:
    file = files("lossworth.templates") / "report" / name
    return file.read_text(encoding="utf-8") if file.is_file() else None


def visible(value: object) -> object:
    """Text with control characters and turning marks written out, so that no name can hide or forge what follows.

    Parameters
    ----------
    value : object
        What a template prints.

    Returns
    -------
    object
        The text without them; anything but text as it is.
    """
    if not isinstance(value, str):
        return value
    text = "".join(c if _is_harmless(c) else f"\\u{ord(c):04x}" for c in value)
    return Markup(text) if isinstance(value, Markup) else text  # noqa: S704 - it was markup before, nothing is added


def _is_harmless(character: str) -> bool:
    if character in "\n\t":
        return True
    return character not in _TURNING and unicodedata.category(character) not in ("Cc", "Cs")


def _css_text(text: str) -> Markup:
    """Any text as a quoted string of a style sheet, with everything but letters and digits as an escape."""
    escaped = "".join(c if c.isascii() and c.isalnum() else f"\\{ord(c):06x} " for c in str(visible(text)))
    return Markup(f'"{escaped}"')  # noqa: S704 - no character of markup can be left
