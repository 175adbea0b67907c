"""Roundings and currency codes."""

from decimal import ROUND_HALF_EVEN, Decimal, getcontext, localcontext
from fractions import Fraction

import pytest

from lossworth.money import ARITHMETIC, Rounding, RoundingMode, is_currency_code


def half_away(quantum: str = "0.01") -> Rounding:
    """Rounding half away from zero, to a hundredth unless told otherwise."""
    return Rounding(Decimal(quantum), RoundingMode.HALF_AWAY_FROM_ZERO)


@pytest.mark.parametrize(
    ("value", "expected"),
    [("2.345", "2.35"), ("2.3449999", "2.34"), ("-2.345", "-2.35"), ("0.005", "0.01"), ("7154.134", "7154.13")],
)
def test_apply__half_goes_away_from_zero(value: str, expected: str) -> None:
    """Half a cent moves away from zero on both sides, as a spreadsheet's ROUND does."""
    assert expected == str(half_away().apply(Decimal(value)))


def test_apply__differs_from_half_to_even() -> None:
    """The rounding that Python's own round() uses would give another amount."""
    value = Decimal("2.345")
    assert str(value.quantize(Decimal("0.01"), rounding=ROUND_HALF_EVEN)) == "2.34"
    assert str(half_away().apply(value)) == "2.35"


@pytest.mark.parametrize(("value", "expected"), [("2.349", "2.34"), ("-2.349", "-2.34"), ("0.009", "0.00")])
def test_apply__down_cuts_towards_zero(value: str, expected: str) -> None:
    """Rounding down cuts what lies beyond the smallest amount."""
    assert expected == str(Rounding(Decimal("0.01"), RoundingMode.DOWN).apply(Decimal(value)))


@pytest.mark.parametrize("value", ["-0.001", "-0"])
def test_apply__never_gives_a_negative_zero(value: str) -> None:
    """A paper must not print an amount of minus zero."""
    assert str(half_away().apply(Decimal(value))) == "0.00"


@pytest.mark.parametrize(
    ("quantum", "value", "expected"),
    [("1", "1234.5", "1235"), ("10", "1235", "1.24E+3"), ("0.0001", "1", "1.0000"), ("0.010", "1.005", "1.01")],
)
def test_apply__other_smallest_amounts(quantum: str, value: str, expected: str) -> None:
    """Whole amounts, tens and finer parts work alike; zeros behind the quantum do not matter."""
    assert Decimal(expected) == half_away(quantum).apply(Decimal(value))
    assert expected == str(half_away(quantum).apply(Decimal(value)))


def test_apply__does_not_depend_on_the_callers_context() -> None:
    """A caller's coarse decimal context changes nothing."""
    with localcontext() as context:
        context.prec = 4
        assert getcontext().prec == 4
        assert str(half_away().apply(Decimal("3570036.005"))) == "3570036.01"


@pytest.mark.parametrize("quantum", ["0", "-0.01", "0.05", "2"])
def test_rounding__refuses_what_is_no_power_of_ten(quantum: str) -> None:
    """A smallest amount is a positive power of ten."""
    with pytest.raises(ValueError, match="power of ten"):
        half_away(quantum)


@pytest.mark.parametrize(("quantum", "expected"), [("0.01", 2), ("1", 0), ("100", -2), ("0.0010", 3)])
def test_places__counts_digits_behind_the_mark(quantum: str, expected: int) -> None:
    """A workbook's ROUND takes this number."""
    assert expected == half_away(quantum).places


def test_rounding__reads_as_a_sentence() -> None:
    """The papers print the rule as the tender states it."""
    assert str(half_away("0.010")) == "rounded to 0.01, half away from zero"
    assert str(Rounding(Decimal(100), RoundingMode.DOWN)) == "rounded to 100, down"


def test_arithmetic__keeps_a_long_product_exact() -> None:
    """Rate times loss times quantity times exchange rate is exact, digit by digit."""
    factors = ("11006.361234567", "0.058125", "600", "1.2500375")
    product = Decimal(1)
    exact = Fraction(1)
    for factor in factors:
        product = ARITHMETIC.multiply(product, Decimal(factor))
        exact *= Fraction(factor)
    assert exact == Fraction(product)


@pytest.mark.parametrize(
    ("text", "expected"),
    [("NCU", True), ("ncu", False), ("NC", False), ("NCUX", False), ("N1U", False), ("NCU\n", False)],
)
def test_is_currency_code__three_capital_letters(text: str, expected: bool) -> None:
    """Nothing but three letters A to Z is a currency code."""
    assert expected is is_currency_code(text)
