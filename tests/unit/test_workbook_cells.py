"""References, formulas and the height of text in the workbook."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.report.view import ShownFigure
from lossworth.report.workbook_cells import Addresses, Cell, behind, column_name, formula_of, wording_of
from lossworth.report.workbook_look import decimals_of, number_format
from lossworth.report.workbook_sheet import safe_text
from lossworth.report.workbook_text import lines_of, width_of


def figure(operator: str, operands: tuple[str, ...] = (), **changes: object) -> ShownFigure:
    """A figure; its operands are named a, b, c."""
    fields = {
        "id": "x",
        "label": "load cost",
        "value": Decimal(1),
        "unit": "NCU",
        "operator": operator,
        "operands": operands,
        "rounding_places": None,
        "rounding_mode": None,
        "source": "",
        "text": "1",
        "arithmetic": "",
    }
    return ShownFigure(**(fields | changes))  # type: ignore[arg-type]


@pytest.mark.parametrize(("column", "letters"), [(0, "A"), (25, "Z"), (26, "AA"), (701, "ZZ"), (702, "AAA")])
def test_column_name__letters(column: int, letters: str) -> None:
    """Letters as spreadsheets count them."""
    assert column_name(column) == letters


@pytest.mark.parametrize(
    ("sheet", "seen_from", "reference"),
    [("Bids", "Bids", "D4"), ("Bids", "Rates", "Bids!$D$4"), ("Rates by year", "Bids", "'Rates by year'!$D$4")],
)
def test_cell__seen_from(sheet: str, seen_from: str, reference: str) -> None:
    """Relative on the same sheet, absolute and with the sheet's name from another one."""
    assert Cell(sheet, 3, 3).seen_from(seen_from) == reference


@pytest.mark.parametrize(
    ("operator", "operands", "rounding", "formula"),
    [
        ("product", ("a", "b", "b"), (None, None), "=a*b*b"),
        ("product", ("a",), (None, None), "=a"),
        ("quotient", ("a", "b"), (None, None), "=a/b"),
        ("sum", ("a", "b", "c"), (None, None), "=a+b+c"),
        ("difference", ("a", "b"), (None, None), "=a-b"),
        ("product", ("a", "b"), (2, "half away from zero"), "=ROUND(a*b,2)"),
        ("rounded", ("a",), (-2, "half away from zero"), "=ROUND(a,-2)"),
        ("product", ("a", "b"), (2, "down"), "=ROUNDDOWN(ROUND(a*b,8),2)"),
    ],
)
def test_formula_of__operators(
    operator: str, operands: tuple[str, ...], rounding: tuple[int | None, str | None], formula: str
) -> None:
    """Each operation of the trail has one form."""
    computed = figure(operator, operands, rounding_places=rounding[0], rounding_mode=rounding[1])
    assert formula_of(computed, lambda name: name) == formula


def test_formula_of__unknown_operator() -> None:
    """An operation that this module does not know is never written as something else."""
    with pytest.raises(KeyError):
        formula_of(figure("power", ("a", "b")), lambda name: name)


@pytest.mark.parametrize(("places", "words"), [(2, "0.01"), (0, "1"), (-2, "100")])
def test_wording_of__rounding(places: int, words: str) -> None:
    """The smallest amount stands in the words, not the number of places."""
    rounded = figure("rounded", ("a",), rounding_places=places, rounding_mode="down")
    assert wording_of(rounded, {"a": figure("read", label="rate A")}) == f"rate A, rounded to {words}, down"


def test_behind__operands_first_and_once() -> None:
    """A figure that two operands share comes once, before both."""
    figures = {
        "x": figure("sum", ("b", "c"), id="x"),
        "a": figure("read", id="a"),
        "b": figure("product", ("a",), id="b"),
        "c": figure("product", ("a", "b"), id="c"),
    }
    assert [found.id for found in behind("x", figures)] == ["a", "b", "c", "x"]


def test_addresses__one_home() -> None:
    """A figure has one cell; a second one is a fault."""
    addresses = Addresses()
    addresses.settle("a", Cell("Bids", 1, 1))
    with pytest.raises(ValueError, match="already stands"):
        addresses.settle("a", Cell("Bids", 2, 1))


def test_addresses__nearest_scope() -> None:
    """A cell that repeats a figure serves the formulas of its row or block only."""
    addresses, home, repeated = Addresses(), Cell("Inputs", 1, 1), Cell("Evaluation", 5, 3)
    addresses.settle("a", home)
    addresses.repeat("a", "row 5", repeated)
    assert addresses.find("a", "row 5", "lot 1") == repeated
    assert addresses.find("a", "row 6", "lot 1") == home


@pytest.mark.parametrize(("values", "decimals"), [(("12",), 0), (("0.13", "0.058"), 3), (("1E+3",), 0), (("1E-9",), 6)])
def test_decimals_of__bounds(values: tuple[str, ...], decimals: int) -> None:
    """As many as the longest needs, at most six, never less than none."""
    assert decimals_of(*map(Decimal, values)) == decimals
    assert number_format(decimals).count("0") == decimals + 1


def test_safe_text__control_characters_and_length() -> None:
    """Nothing that a cell cannot hold, line breaks as one character."""
    assert safe_text("a\x07b\r\nc\ud800") == "a\ufffdb\nc\ufffd"
    assert len(safe_text("x" * 40_000)) < 32_767


@pytest.mark.parametrize(
    ("text", "width", "lines"),
    [("", 10, 1), ("short", 10, 1), ("a\nb\nc", 10, 3), ("word " * 20, 20, 5), ("m" * 40, 20, 4), ("漢" * 20, 20, 2)],
)
def test_lines_of__wraps(text: str, width: float, lines: int) -> None:
    """Words go to the next line, words longer than a line are cut, breaks count."""
    assert lines_of(text, width) == lines


def test_width_of__digits_are_the_unit() -> None:
    """Ten digits are ten wide, and a little more to be safe; bold is wider."""
    assert 10 < width_of("0123456789") < 10.6
    assert width_of("Total", bold=True) > width_of("Total")
