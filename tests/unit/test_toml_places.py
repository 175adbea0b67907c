"""Lines of TOML keys: tables, arrays of tables, dotted keys, inline tables and elements."""

from __future__ import annotations

import tomllib
from collections.abc import Iterator

import pytest

from lossworth.intake.toml_places import Spot, TomlPath, find_spots

DOCUMENT = """\
version = 1
[first.table]
"quoted key" = "text"   # comment
a.dotted.key = -1_000.5e3
[[list]]
name = "one"
[list.inside]
x = [ # comment
  1,
  { y = true, 'z z' = 2026-09-15 },
]
[[list.nested]]
n = 1
[[list.nested]]
n = 2
[[list]]
name = '''
two'''
[list.inside]
x = {}
"""


@pytest.mark.parametrize(
    ("path", "line", "text"),
    [
        (("version",), 1, "1"),
        (("first", "table"), 2, None),
        (("first", "table", "quoted key"), 3, '"text"'),
        (("first", "table", "a", "dotted", "key"), 4, "-1_000.5e3"),
        (("list", 0), 5, None),
        (("list", 0, "name"), 6, '"one"'),
        (("list", 0, "inside"), 7, None),
        (("list", 0, "inside", "x"), 8, None),
        (("list", 0, "inside", "x", 0), 9, "1"),
        (("list", 0, "inside", "x", 1, "y"), 10, "true"),
        (("list", 0, "inside", "x", 1, "z z"), 10, "2026-09-15"),
        (("list", 0, "nested", 0, "n"), 13, "1"),
        (("list", 0, "nested", 1, "n"), 15, "2"),
        (("list", 1), 16, None),
        (("list", 1, "name"), 17, "'''\ntwo'''"),
        (("list", 1, "inside"), 19, None),
        (("list", 1, "inside", "x"), 20, None),
    ],
)
def test_find_spots__every_construct(path: TomlPath, line: int, text: str | None) -> None:
    """Each way of writing a key has its line and its characters."""
    assert find_spots(DOCUMENT)[path] == Spot(line, text)


def paths(value: object, path: TomlPath = ()) -> Iterator[TomlPath]:
    """Paths of all values of a document."""
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from paths(inner, (*path, key))
    elif isinstance(value, list):
        for number, inner in enumerate(value):
            yield from paths(inner, (*path, number))
    else:
        yield path


@pytest.mark.parametrize("ending", ["\n", "\r\n"])
def test_find_spots__has_every_value(ending: str) -> None:
    """The standard parser knows no value that has no line here, whatever ends the lines."""
    document = DOCUMENT.replace("\n", ending)
    spots = find_spots(document)
    for path in paths(tomllib.loads(document)):
        assert spots[path].text is not None


def test_find_spots__last_line_without_end() -> None:
    """A value on a last line that does not end is found."""
    assert find_spots("[a]\nb = 1")[("a", "b")] == Spot(2, "1")


@pytest.mark.parametrize("text", ["a = ", "= 1", "[[[", "a = [1,", "[a\nb = 1", "\x00", "a" + ".a" * 5000 + " = 1"])
def test_find_spots__no_toml(text: str) -> None:
    """What is no TOML, or nests without end, is passed over."""
    assert isinstance(find_spots(text), dict)
