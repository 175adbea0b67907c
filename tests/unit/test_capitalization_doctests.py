"""The examples in the docstrings of the engine are run, and every public function has one."""

from __future__ import annotations

import doctest
import importlib
import inspect
import pkgutil
from types import ModuleType

import pytest

from lossworth import capitalization

MODULES = [
    importlib.import_module(f"{capitalization.__name__}.{module.name}")
    for module in pkgutil.iter_modules(capitalization.__path__)
]
#: Inner parts of the engine: no formula of their own to show.
INNER = {"arguments", "geometric", "inputs", "paths", "year_columns"}
#: Small checks shared by two modules, with the examples of the functions that use them.
SHARED = {"priced", "steps_of"}


@pytest.mark.parametrize("module", MODULES, ids=lambda module: module.__name__.rpartition(".")[2])
def test_docstrings__examples_give_what_they_print(module: ModuleType) -> None:
    """A reader who types an example gets what stands there."""
    outcome = doctest.testmod(module)
    assert outcome.failed == 0


@pytest.mark.parametrize("module", MODULES, ids=lambda module: module.__name__.rpartition(".")[2])
def test_docstrings__every_formula_has_example_and_reference(module: ModuleType) -> None:
    """Each public function of the engine shows an example, its errors and where its formula comes from."""
    if module.__name__.rpartition(".")[2] in INNER:
        return
    for name in module.__all__:
        thing = getattr(module, name)
        if not inspect.isfunction(thing) or name in SHARED or name == "one_more_year":
            continue
        wanted = ["Parameters", "Returns", "Raises", "Examples", ">>>"]
        wanted += [] if name in ("peak_load", "load_shape") else ["References", ".. [1]"]
        missing = [part for part in wanted if part not in (thing.__doc__ or "")]
        assert (name, []) == (name, missing)
