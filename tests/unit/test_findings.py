"""Places, findings and their table of kinds."""

import re

import pytest

from lossworth.findings import KINDS, Effect, Finding, Place, any_stops, in_reading_order, one_line, quoted


def finding(**changes: object) -> Finding:
    """A complete finding of one offer, with the given fields changed."""
    fields: dict[str, object] = {
        "kind": "value-out-of-bounds",
        "field": "load loss",
        "rule": "must be above 0 kW",
        "place": Place("bids/alder.xlsx", sheet="Lot 3", cell="F7"),
        "got": "-1.2",
        "bidder": "Alder",
        "lot": "3",
        "fix": "ask the bidder",
    }
    return Finding(**{**fields, **changes})  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("place", "expected"),
    [
        (Place("bids/alder.xlsx", sheet="Lot 3", cell="F7"), "bids/alder.xlsx[Lot 3]!F7"),
        (Place("bids.csv", line=12, column="Load loss [kW]"), "bids.csv:12[Load loss [kW]]"),
        (Place("tender.toml", line=34, key="lot.3.rates.load"), "tender.toml:34"),
        (Place("bids/empty.csv"), "bids/empty.csv"),
        (Place("a.xlsx", sheet="Lot\n3", cell="A1"), "a.xlsx[Lot\\n3]!A1"),
    ],
)
def test_place__prints_as_a_reader_would_look_it_up(place: Place, expected: str) -> None:
    """File, then sheet and cell, or line and column; always on one line."""
    assert expected == str(place)


def test_finding__two_lines_with_place_rule_value_and_remedy() -> None:
    """Place, field, rule, value as read, offer; below it the remedy."""
    assert str(finding()) == (
        'bids/alder.xlsx[Lot 3]!F7: load loss: must be above 0 kW, got "-1.2" (Alder, lot 3)\n  fix: ask the bidder'
    )


def test_finding__without_place_and_value() -> None:
    """What is not there leaves no stray punctuation."""
    bare = finding(place=None, got=None, bidder=None, lot=None)
    assert str(bare) == "load loss: must be above 0 kW\n  fix: ask the bidder"


@pytest.mark.parametrize(("bidder", "lot", "expected"), [("Alder", None, "(Alder)"), (None, "3", "(lot 3)")])
def test_statement__names_what_is_known(bidder: str | None, lot: str | None, expected: str) -> None:
    """Bidder or lot alone stand alone in the brackets."""
    assert finding(bidder=bidder, lot=lot).statement.endswith(expected)


def test_statement__an_empty_value_is_called_a_blank() -> None:
    """An empty cell is named, not left out and not quoted as two marks."""
    assert "got a blank" in finding(got="").statement


def test_finding__remedy_of_its_kind_where_it_has_none() -> None:
    """A finding without its own remedy takes the one of the table."""
    assert KINDS["value-out-of-bounds"].remedy == finding(fix="").remedy


def test_finding__unknown_kind() -> None:
    """A finding that the table does not know cannot be made."""
    with pytest.raises(KeyError):
        finding(kind="no-such-kind")


@pytest.mark.parametrize("evil", ["a\nb", "a\rb", "a\x1b[31mb", "a\u202eb", "a\x00b", "a\u2028b"])
def test_one_line__no_file_can_forge_our_messages(evil: str) -> None:
    """Line breaks, terminal codes and direction marks become visible escapes."""
    shown = one_line(evil)
    assert shown.isprintable()
    assert shown != evil
    assert len(str(finding(got=evil, bidder=evil)).splitlines()) == 2


def test_quoted__long_values_are_cut() -> None:
    """A message carries 60 characters of a value at most."""
    assert quoted("x" * 60) == "x" * 60
    assert quoted("x" * 61) == "x" * 59 + "…"


def test_any_stops__only_what_stops() -> None:
    """Faults of one offer and notes do not stop the evaluation."""
    harmless = [finding(), finding(kind="tie"), finding(kind="load-loss-above-maximum")]
    assert not any_stops(harmless)
    assert any_stops([*harmless, finding(kind="column-missing")])


def test_in_reading_order__weightiest_first_then_file_then_as_read() -> None:
    """Stops, not evaluated, non-responsive, notes; within a file the order of reading."""
    note = finding(kind="tie", place=None)
    second = finding(place=Place("b.csv", line=9))
    third = finding(place=Place("b.csv", line=2))
    first = finding(place=Place("a.csv", line=5))
    stop = finding(kind="lot-unknown", place=Place("z.csv", line=1))
    beyond = finding(kind="impedance-outside", place=Place("a.csv", line=1))
    assert in_reading_order([note, beyond, second, third, first, stop]) == (stop, first, second, third, beyond, note)


def test_in_reading_order__same_finding_once() -> None:
    """A finding that two stages report stands once."""
    assert in_reading_order([finding(), finding()]) == (finding(),)


@pytest.mark.parametrize("slug", KINDS)
def test_kinds__each_is_complete(slug: str) -> None:
    """Slug as in the table, words in lower case with hyphens; title, cause and remedy are filled in."""
    kind = KINDS[slug]
    assert slug == kind.slug
    assert re.fullmatch(r"[a-z]+(-[a-z]+)*", slug)
    assert isinstance(kind.effect, Effect)
    assert kind.cause.endswith(".")
    assert kind.remedy.endswith(".")
    assert not kind.title.endswith(".")
