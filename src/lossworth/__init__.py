"""Total owning cost of transformer bids: the public names, imported when they are first used."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from .records.bid import Offer
    from .records.tender import Tender

__all__ = ["Offer", "Tender"]

# Imported on first use: `lossworth --help` passes through this file and must not load numpy or pydantic.
_HOME = {"Offer": "records.bid", "Tender": "records.tender"}


def __getattr__(name: str) -> object:
    if name in _HOME:
        return getattr(import_module(f".{_HOME[name]}", __name__), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")


def __dir__() -> list[str]:
    return sorted(__all__)
