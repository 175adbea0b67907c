"""On which line of a TOML text each key and each element stands, and the characters of its value.

The parser of the standard library gives values without places; this one gives places without values.
"""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from tree_sitter import Node

__all__ = ["Spot", "TomlPath", "find_spots"]

#: Keys and indices from the top of the document: ``("lot", 2, "rates", "load")``.
TomlPath = tuple[str | int, ...]

_KEYS = ("bare_key", "quoted_key")
_CONTAINERS = ("inline_table", "array")
_DEEPEST = 16  # no key of ours lies deeper; a path of a thousand keys would cost memory by its square


@dataclass(frozen=True, slots=True)
class Spot:
    """Where a key, table or element stands.

    Parameters
    ----------
    line : int
        Counted from 1.
    text : str, optional
        The value as it was written; None for tables and arrays.
    """

    line: int
    text: str | None = None


def find_spots(source: str) -> dict[TomlPath, Spot]:
    r"""Line of every key, table and array element of a TOML text.

    Parameters
    ----------
    source : str
        The text. What the grammar does not know is passed over.

    Returns
    -------
    dict of TomlPath to Spot
        An element of an array, also of an array of tables, has its index counted from 0.

    Examples
    --------
    >>> find_spots('[[lot]]\nid = "1"\n[lot.rates]\nload = 660')[("lot", 0, "rates", "load")]
    Spot(line=4, text='660')
    """
    import tree_sitter
    import tree_sitter_toml

    parser = tree_sitter.Parser(tree_sitter.Language(tree_sitter_toml.language()))
    walk = _Walk()
    # the grammar wants a line end behind the last pair
    for node in parser.parse(source.encode("utf-8") + b"\n").root_node.named_children:
        walk.statement(node)
    return walk.spots


@dataclass
class _Walk:
    spots: dict[TomlPath, Spot] = field(default_factory=dict)
    elements: dict[TomlPath, int] = field(default_factory=dict)

    def statement(self, node: Node) -> None:
        if node.type == "pair":
            self.pair((), node)
        elif node.type in ("table", "table_array_element"):
            path = self.header(node)
            for child in node.named_children:
                if child.type == "pair":
                    self.pair(path, child)

    def header(self, node: Node) -> TomlPath:
        *outer, last = _key_names(node.named_children[0])
        path: TomlPath = ()
        for name in outer:
            path = self.enter(path, name, node)
        if node.type == "table":
            return self.enter(path, last, node)
        path = (*path, last)
        self.spots.setdefault(path, _spot(node))
        number = self.elements.get(path, 0)
        self.elements[path] = number + 1
        self.spots[(*path, number)] = _spot(node)
        return (*path, number)

    def enter(self, path: TomlPath, name: str, node: Node) -> TomlPath:
        """One key deeper; in an array of tables that is its last element so far."""
        if len(path) >= _DEEPEST:
            return path
        path = (*path, name)
        self.spots.setdefault(path, _spot(node))
        return (*path, self.elements[path] - 1) if path in self.elements else path

    def pair(self, table: TomlPath, node: Node) -> None:
        pending = [(table, node)]  # a stack rather than recursion: the nesting is the file's, not ours
        while pending:
            table, node = pending.pop()
            if node.type != "pair":
                pending += self.value(table, node)
                continue
            path = table
            for name in _key_names(node.named_children[0]):
                path = self.enter(path, name, node)
            pending += self.value(path, _without_comments(node)[-1])

    def value(self, path: TomlPath, node: Node) -> Iterator[tuple[TomlPath, Node]]:
        if node.type not in _CONTAINERS:
            self.spots[path] = Spot(self.spots.get(path, _spot(node)).line, _text(node))
        elif node.type == "inline_table":
            yield from ((path, child) for child in _without_comments(node))
        else:
            if len(path) >= _DEEPEST:
                return
            for number, child in enumerate(_without_comments(node)):
                self.spots[(*path, number)] = _spot(child)
                yield (*path, number), child


def _spot(node: Node) -> Spot:
    return Spot(node.start_point.row + 1)


def _text(node: Node) -> str:
    return (node.text or b"").decode("utf-8")


def _without_comments(node: Node) -> list[Node]:
    return [child for child in node.named_children if child.type != "comment"]


def _key_names(node: Node) -> list[str]:
    names: list[str] = []
    pending = [node]
    while pending:
        node = pending.pop()
        if node.type in _KEYS:
            names.append(_key_name(_text(node)))
        else:
            pending += reversed(node.named_children)
    return names


def _key_name(text: str) -> str:
    if text[:1] not in ("'", '"'):
        return text
    try:
        return next(iter(tomllib.loads(f"{text} = 0")))
    except (tomllib.TOMLDecodeError, StopIteration):
        return text
