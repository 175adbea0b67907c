"""A page taken apart: tags, attributes, text, and the tags that are not closed in order."""

from __future__ import annotations

from collections.abc import Mapping
from html.parser import HTMLParser

__all__ = ["HtmlReader", "shown_values"]

_VOID = {"meta", "link", "br", "col", "rect", "line", "circle", "path"}


class HtmlReader(HTMLParser):
    """Collects tags, attributes and text, and notices tags that are not closed in order."""

    def __init__(self, html: str) -> None:
        super().__init__(convert_charrefs=True)
        self.tags: list[tuple[str, dict[str, str]]] = []
        self.text: list[str] = []
        self._open: list[str] = []
        self.misplaced: list[str] = []
        self.feed(html)
        self.close()
        self.misplaced += self._open

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        """Note a tag that is opened."""
        self.tags.append((tag, {name: value or "" for name, value in attrs}))
        if tag not in _VOID:
            self._open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        """Note a tag that closes itself."""
        self.tags.append((tag, {name: value or "" for name, value in attrs}))

    def handle_endtag(self, tag: str) -> None:
        """Compare a closed tag with the one opened last."""
        if not self._open or self._open.pop() != tag:
            self.misplaced.append(tag)

    def handle_data(self, data: str) -> None:
        """Keep the text."""
        self.text.append(data)

    def all_of(self, tag: str) -> list[dict[str, str]]:
        """Attributes of every tag of one kind."""
        return [attributes for name, attributes in self.tags if name == tag]


def shown_values(reader: HtmlReader) -> Mapping[str, str]:
    """Figure id to plain value, as the page carries them; the same figure never with two values."""
    pairs = {(a["data-figure"], a["data-value"]) for _, a in reader.tags if "data-figure" in a}
    assert len(pairs) == len(dict(pairs))
    return dict(pairs)
