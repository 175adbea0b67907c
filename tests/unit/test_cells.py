"""Numbers in cells: the declared marks, nothing guessed."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.intake.cells import BLANK, Cell, Content, Marks, NoNumber, number_in, text_cell
from lossworth.intake.numbers import decimal_of_float, is_beyond_meaning

POINT = Marks(".")
COMMA = Marks(",")


def number(text: str, marks: Marks = POINT, unit: str = "kW") -> Decimal | None:
    """Number of a text, or None where there is none."""
    found = number_in(text_cell(text), [marks], unit)
    return found if isinstance(found, Decimal) else None


def refusal(cell: Cell, unit: str = "kW", marks: Marks = POINT) -> NoNumber:
    """Why a cell holds no number."""
    found = number_in(cell, [marks], unit)
    assert isinstance(found, NoNumber)
    return found


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("1.24", "1.24"),
        ("1240", "1240"),
        (".5", "0.5"),
        ("+3", "3"),
        ("-3", "-3"),
        ("\u22123.5", "-3.5"),
        (" 1.2 ", "1.2"),
        ("12 500.25", "12500.25"),
        ("12\u00a0500", "12500"),
        ("12\u2009500", "12500"),
        ("1\u202f234\u202f567", "1234567"),
        ("1.2e3", "1200"),
        ("1.2E-1", "0.12"),
        ("-0", "0"),
    ],
)
def test_number_in__decimal_point(text: str, expected: str) -> None:
    """Point as the decimal mark, spaces of any kind between groups of three digits."""
    assert Decimal(expected) == number(text)


@pytest.mark.parametrize(
    "text",
    [
        "1,24",
        "1,234.5",
        "1.2.3",
        "1 2",
        "12 50",
        "1 234\u00a0567",
        "1.",
        "e5",
        ".",
        "-",
        "--1",
        "n/a",
        "1.2 kW",
        "(1.2)",
        "nan",
        "NaN",
        "inf",
        "-Infinity",
        "0x10",
        "1_000",
        "\u0661\u0662",
        "1/2",
        "5 %",
        "TRUE",
        "#REF!",
    ],
)
def test_number_in__refused_text(text: str) -> None:
    """Whatever is not plainly a number is refused, not interpreted."""
    assert refusal(text_cell(text)).kind == "value-unreadable"


@pytest.mark.parametrize(
    ("text", "marks", "expected"),
    [
        ("1,24", COMMA, "1.24"),
        ("1.234,5", Marks(",", "."), "1234.5"),
        ("1,234.5", Marks(".", ","), "1234.5"),
        ("1,234", Marks(".", ","), "1234"),
        ("1'234.5", Marks(".", "'"), "1234.5"),
        ("1\u2019234.5", Marks(".", "'"), "1234.5"),
        ("1,23", Marks(".", ","), None),
        ("1.24", COMMA, None),
        ("1.234,5", COMMA, None),
        ("1,234", Marks(",", ","), "1.234"),
    ],
)
def test_number_in__declared_marks(text: str, marks: Marks, expected: str | None) -> None:
    """The marks are those of the declaration; a thousands mark stands before three digits only."""
    assert number(text, marks) == (None if expected is None else Decimal(expected))


def test_number_in__names_the_other_mark() -> None:
    """A number that would read by the other decimal mark gets a remedy that says so."""
    assert '","' in refusal(text_cell("1,24")).fix
    assert '"."' in refusal(text_cell("1.24"), marks=COMMA).fix
    assert not refusal(text_cell("n/a")).fix


def test_number_in__any_mark_without_declaration() -> None:
    """Where no declaration could be read, a number by either mark is not called unreadable."""
    assert number_in(text_cell("1,24"), [POINT, COMMA], "kW") == Decimal("1.24")


@pytest.mark.parametrize("text", ["1e308", "1e999", "1000000000000000", "1e-13", "0." + "1" * 60])
def test_number_in__beyond_meaning(text: str) -> None:
    """A number that no figure of a tender can be is out of bounds, before any arithmetic is done with it."""
    assert refusal(text_cell(text)).kind == "value-out-of-bounds"


def test_number_in__percent_sign() -> None:
    """A percent sign is read in a column of percent and nowhere else."""
    assert number("4.0 %", unit="%") == 4
    assert number("4%", unit="%") == 4
    assert number("4%", unit="pu") is None


def test_number_in__percent_format() -> None:
    """A cell that shows 4 % holds 4 in a column of percent, and nothing usable elsewhere."""
    cell = Cell(Content.PERCENTAGE, "4 %", Decimal(4))
    assert number_in(cell, [POINT], "%") == 4
    assert refusal(cell).rule == "must be a number without a percent format"


@pytest.mark.parametrize("content", [Content.DATE, Content.TRUTH, Content.ERROR, Content.FORMULA, Content.BLANK])
def test_number_in__other_content(content: Content) -> None:
    """Dates, booleans, errors and formulas without value are no numbers."""
    assert refusal(Cell(content, "x")).kind == "value-unreadable"


def test_text_cell__blank() -> None:
    """A cell of nothing but spaces, also non-breaking ones, is blank."""
    assert text_cell(" \u00a0\t") is BLANK


@pytest.mark.parametrize(
    ("value", "expected"), [(0.1 + 0.2, "0.3"), (1.35, "1.35"), (5000.0, "5000"), (1e-5, "0.00001")]
)
def test_decimal_of_float__shortest(value: float, expected: str) -> None:
    """A binary number is the decimal that a spreadsheet shows for it."""
    assert Decimal(expected) == decimal_of_float(value)


@pytest.mark.parametrize("text", ["inf", "-inf", "nan", "1e15", "-1e15", "1e999999999", "9e-13"])
def test_is_beyond_meaning__yes(text: str) -> None:
    """Infinite, huge and tiny numbers, also those whose arithmetic would overflow."""
    assert is_beyond_meaning(Decimal(text))


@pytest.mark.parametrize("text", ["0", "-0", "1e-12", "999999999999999", "-0.001"])
def test_is_beyond_meaning__no(text: str) -> None:
    """Ordinary numbers, and zero."""
    assert not is_beyond_meaning(Decimal(text))
