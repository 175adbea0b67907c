"""The standard load profiles of the BDEW over a year, as docs/make_load_profile_table.py reads them."""

from __future__ import annotations

import importlib.util
import sys
from functools import cache
from pathlib import Path
from types import ModuleType

SCRIPT = Path(__file__).resolve().parents[2] / "docs" / "make_load_profile_table.py"


@cache
def script() -> ModuleType:
    """The script, imported from its file."""
    spec = importlib.util.spec_from_file_location(SCRIPT.stem, SCRIPT)
    assert spec is not None
    assert spec.loader is not None
    module = importlib.util.module_from_spec(spec)
    sys.modules[spec.name] = module  # dataclasses look their module up
    spec.loader.exec_module(module)
    return module


def codes(*, of_1999: bool = True, of_2025: bool = True) -> list[str]:
    """Codes of the profiles."""
    chosen = (script().PROFILES_OF_1999 if of_1999 else ()) + (script().PROFILES_OF_2025 if of_2025 else ())
    return [code for code, _, _ in chosen]
