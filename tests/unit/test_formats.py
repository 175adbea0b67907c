"""Numbers as the papers print them."""

from decimal import Decimal

import pytest

from lossworth.report.formats import MINUS, THIN_SPACE, amount, number, percent, plain, significant


@pytest.mark.parametrize(
    ("value", "expected"),
    [("1103740", "1,103,740.00"), ("0", "0.00"), ("999.995", "1,000.00"), ("-74.8", f"{MINUS}74.80")],
)
def test_amount__groups_and_places(value: str, expected: str) -> None:
    """Thousands are grouped, cents always stand, and minus is a minus sign."""
    assert expected == amount(Decimal(value))


def test_amount__other_places() -> None:
    """Whole amounts and finer parts."""
    assert amount(Decimal("1234.5"), 0) == "1,235"
    assert amount(Decimal("1.23456"), 4) == "1.2346"


def test_amount__no_minus_before_zero() -> None:
    """What rounds to zero is printed as zero."""
    assert amount(Decimal("-0.001")) == "0.00"


@pytest.mark.parametrize(
    ("value", "expected"),
    [("0.058", "0.058"), ("31500", "31,500"), ("3.15E+4", "31,500"), ("1.2500", "1.25"), ("0", "0"), ("0.0", "0")],
)
def test_number__exactly_the_digits_that_it_has(value: str, expected: str) -> None:
    """No zeros are added, and none that matters is lost."""
    assert expected == number(Decimal(value))


def test_number__keeps_fifty_digits() -> None:
    """The longest figure of the trail loses no digit."""
    text = "1." + "123456789" * 5 + "1234"
    assert text == number(Decimal(text))


@pytest.mark.parametrize(
    ("value", "digits", "expected"),
    [("0.00680", 2, "0.0068"), ("9.996", 3, "10"), ("123456", 2, "120,000"), ("0", 6, "0"), ("74.8", 6, "74.8")],
)
def test_significant__cuts_to_the_digits_asked_for(value: str, digits: int, expected: str) -> None:
    """Significant digits are counted from the first that is not zero."""
    assert expected == significant(Decimal(value), digits)


def test_percent__thin_space_before_the_sign() -> None:
    """The sign does not part from its number at the end of a line."""
    assert percent(Decimal("1.2")) == f"1.20{THIN_SPACE}%"


@pytest.mark.parametrize(
    ("value", "expected"),
    [
        ("3570036.00", "3570036.00"),
        ("1E+3", "1000"),
        ("0.333333333333333333333", "0.333333333333"),
        ("11006.3597212345678901", "11006.3597212"),
        ("-0.0000001", "-0.0000001"),
    ],
)
def test_plain__for_json(value: str, expected: str) -> None:
    """No grouping and no exponent; money keeps its cents, computed figures twelve significant digits."""
    assert expected == plain(Decimal(value))
