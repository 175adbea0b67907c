"""The page of requirements leaves none out, and every test that it names exists."""

from __future__ import annotations

import ast
import re
from functools import cache
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]
PAGE = (CHECKOUT / "docs" / "requirements.md").read_text(encoding="utf-8")
ROW = re.compile(r"^\| (\d\.\d+) ([MS]) \| (.+) \| (.+) \| (.+) \|$", re.MULTILINE)
NAMED = re.compile(r"`(\w+/test_\w+\.py)::(test_\w+)`")
#: Numbers of the requirements that must be met, by part of the page.
MUST = {"1": (1, 2, 3, 4, 5, 6, 7, 9, 10, 11), "2": (1, 2, 3, 4, 6, 7, *range(9, 17), 20), "3": tuple(range(1, 10))}


@cache
def names_in(file: str) -> frozenset[str]:
    """Names of the test functions of a file, without importing it."""
    path = CHECKOUT / "tests" / file
    if not path.is_file():
        return frozenset()
    tree = ast.parse(path.read_text(encoding="utf-8"))
    return frozenset(node.name for node in tree.body if isinstance(node, ast.FunctionDef))


def is_there(file: str, name: str) -> bool:
    """Whether a test exists."""
    return name in names_in(file)


def test_page__has_every_must() -> None:
    """Each must of the three parts has one row, and a row is a must or a should."""
    expected = [f"{part}.{number}" for part, numbers in MUST.items() for number in numbers]
    assert expected == [number for number, weight, *_ in ROW.findall(PAGE) if weight == "M"]


def test_page__every_row_is_understood() -> None:
    """No row escapes the checks by its form."""
    assert len(re.findall(r"^\| \d", PAGE, re.MULTILINE)) == len(ROW.findall(PAGE))


@pytest.mark.parametrize(("file", "name"), sorted(set(NAMED.findall(PAGE))))
def test_page__named_test_exists(file: str, name: str) -> None:
    """A test that the page names stands in the file that it names."""
    assert is_there(file, name)


def test_is_there__can_say_no() -> None:
    """The check itself can fail: a file and a name that are not there."""
    assert not is_there("unit/test_nothing.py", "test_page__has_every_must")
    assert not is_there("unit/test_requirements_page.py", "test_nothing")
    assert is_there("unit/test_requirements_page.py", "test_page__has_every_must")


@pytest.mark.parametrize(("number", "state", "holder"), [(row[0], row[3], row[4]) for row in ROW.findall(PAGE)])
def test_page__state_fits_what_holds_it(number: str, state: str, holder: str) -> None:
    """What is held wholly or partly names tests alone; what is later names none, and says what will hold it."""
    if state == "later":
        assert NAMED.search(holder) is None, number
        assert holder.strip(), number
    else:
        assert re.match(r"held\b|partly: ", state), number
        assert NAMED.sub("", holder).strip(" ,") == "", number
        assert NAMED.search(holder), number
