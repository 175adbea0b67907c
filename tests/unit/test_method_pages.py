"""The pages of the method leave out nothing of the engine: no function, no argument, no section that they refer to."""

from __future__ import annotations

import importlib
import inspect
import pkgutil
import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from lossworth import capitalization
from lossworth.capitalization.inputs import YearModelInputs

DOCS = Path(__file__).resolve().parents[2] / "docs"
METHOD = (DOCS / "method.md").read_text(encoding="utf-8")
NOMENCLATURE = (DOCS / "nomenclature.md").read_text(encoding="utf-8")
#: Inner parts of the engine, and small checks that two modules share: no formula of their own.
INNER = {"arguments", "geometric", "inputs", "paths", "year_columns"}
SHARED = {"priced", "steps_of"}
#: Arguments that hold several quantities, or a plain number of the year.
HOLDERS = {"costs", "inputs", "rates", "shape", "year"}


def public_functions() -> dict[str, Callable[..., Any]]:
    """Every public function of the engine by module and name."""
    functions = {}
    for found in pkgutil.iter_modules(capitalization.__path__):
        if found.name not in INNER:
            module = importlib.import_module(f"{capitalization.__name__}.{found.name}")
            own = {name: getattr(module, name) for name in module.__all__ if name not in SHARED}
            functions |= {f"{found.name}.{name}": thing for name, thing in own.items() if inspect.isfunction(thing)}
    return functions


def rows() -> dict[str, list[str]]:
    """Rows of the table of functions: unit, section and source by function."""
    found = re.findall(r"^\| `(\w+\.\w+)` \| (.+) \| (.+?) \| (\d) \| (.+) \|$", METHOD, re.MULTILINE)
    return {name: [gives, unit, number, source] for name, gives, unit, number, source in found}


def test_method__has_a_row_for_every_function() -> None:
    """Every public function of the engine stands in the table, and nothing else does."""
    assert sorted(public_functions()) == sorted(rows())


@pytest.mark.parametrize("name", sorted(public_functions()))
def test_method__row_points_to_a_section_and_says_how_far_its_source_goes(name: str) -> None:
    """The section exists, and a source is read, from memory, ours, a definition, a named example, or that above."""
    _, _, number, source = rows()[name]
    assert re.search(rf"^## {number}\. ", METHOD, re.MULTILINE)
    known = r"read\b|from memory|\bours\b|definition|Example \d|the same|Regulation \(EU\) No 548/2014"
    assert re.search(known, source)


def test_nomenclature__has_every_argument_of_the_engine() -> None:
    """Whoever meets a name in code finds its symbol, unit and source."""
    names = set(YearModelInputs.__annotations__)
    for function in public_functions().values():
        names |= set(inspect.signature(function).parameters)
    assert sorted(name for name in names - HOLDERS if f"`{name}`" not in NOMENCLATURE) == []


def test_nomenclature__every_symbol_of_the_year_model_is_explained() -> None:
    """Symbols of the table of section 3 stand in the nomenclature, each with one meaning."""
    table = METHOD[METHOD.index("## 3. ") : METHOD.index("## 4. ")]
    first = re.findall(r"^\| \$(.+?)\$ \|", table, re.MULTILINE)
    symbols = {symbol for cell in first for symbol in re.split(r",\\? ", cell)}
    assert len(symbols) >= 20
    explained = set(re.findall(r"\$(.+?)\$", NOMENCLATURE))
    assert sorted(symbols - explained) == []
