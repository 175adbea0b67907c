"""What the terminal can show."""

from __future__ import annotations

import os
import shutil
import sys

__all__ = ["color", "width"]

_PIPED_WIDTH = 140
_WIDEST = 160
_NARROWEST = 60


def width() -> int:
    """Columns to write for: the terminal's, or a fixed number where the output goes into a file."""
    if not sys.stdout.isatty() and "COLUMNS" not in os.environ:
        return _PIPED_WIDTH
    return max(_NARROWEST, min(_WIDEST, shutil.get_terminal_size().columns))


def color() -> bool:
    """Whether bold and dim text can be shown; NO_COLOR switches it off."""
    return sys.stdout.isatty() and not os.environ.get("NO_COLOR")
