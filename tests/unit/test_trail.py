"""Figures that know their arithmetic."""

from decimal import Decimal, DivisionByZero, localcontext

import pytest

from lossworth.findings import Place
from lossworth.money import Rounding, RoundingMode
from lossworth.trail import (
    Constant,
    Derivation,
    Figure,
    Operation,
    Operator,
    constant,
    difference,
    product,
    quotient,
    read,
    rounded,
    total,
    walk,
)

CENTS = Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO)


def leaf(id: str, value: str, unit: str = "NCU") -> Figure:
    """Figure that stood in a file."""
    return read(id, id, Decimal(value), unit, Place("bids.csv", line=2, column=id))


def test_read__keeps_its_place() -> None:
    """A leaf names its cell."""
    assert leaf("price", "4840").source == Place("bids.csv", line=2, column="price")


def test_constant__keeps_its_definition() -> None:
    """A definition is a leaf with a sentence."""
    figure = constant("w", "watts in a kilowatt", Decimal(1000), "W/kW", "1 kW is 1000 W")
    assert figure.source == Constant("1 kW is 1000 W")


def test_product__rounds_once_and_remembers_how() -> None:
    """Lot 3 of the demo: 11,006.36 per kW times 0.690 kW is 7,594.3884, to the cent 7,594.39."""
    rate, loss = leaf("A", "11006.36", "NCU/kW"), leaf("P0", "0.690", "kW")
    cost = product("cost", "capitalized no-load loss", "NCU", rate, loss, rounding=CENTS)
    assert str(cost.value) == "7594.39"
    assert cost.rounding == CENTS
    assert cost.source == Operation(Operator.PRODUCT, (rate, loss))


def test_total__adds_rounded_parts() -> None:
    """Parts are rounded, then added: the sum of the printed amounts is the printed sum."""
    parts = [
        product(f"part {n}", "part", "NCU", leaf(f"a{n}", "1.005"), leaf(f"b{n}", "1"), rounding=CENTS) for n in "12"
    ]
    assert str(total("sum", "sum", "NCU", *parts).value) == "2.02"


def test_total__of_one_part() -> None:
    """A sum may have a single part."""
    assert total("sum", "sum", "NCU", leaf("a", "5")).value == 5


def test_difference__order_counts() -> None:
    """The second is taken from the first."""
    assert difference("d", "d", "NCU", leaf("a", "6237.00"), leaf("b", "6311.80")).value == Decimal("-74.80")


def test_quotient__fifty_digits() -> None:
    """A quotient that does not end has 50 digits."""
    third = quotient("q", "q", "1", leaf("a", "1"), leaf("b", "3"))
    assert str(third.value) == "0." + "3" * 50


def test_quotient__by_zero() -> None:
    """Division by zero raises instead of giving a figure."""
    with pytest.raises(DivisionByZero):
        quotient("q", "q", "1", leaf("a", "1"), leaf("b", "0"))


def test_rounded__keeps_the_unrounded_figure_behind_it() -> None:
    """The unrounded rate stays visible behind the rounded one, in the same unit."""
    rate = leaf("A", "11006.35972", "NCU/kW")
    figure = rounded("A rounded", "rate", rate, CENTS)
    assert (str(figure.value), figure.unit) == ("11006.36", "NCU/kW")
    assert figure.source == Operation(Operator.ROUNDED, (rate,))


def test_arithmetic__does_not_depend_on_the_callers_context() -> None:
    """A caller's coarse decimal context changes no figure."""
    with localcontext() as context:
        context.prec = 3
        assert total("s", "s", "NCU", leaf("a", "1103740.00"), leaf("b", "0.01")).value == Decimal("1103740.01")


def test_walk__operands_before_results_each_once() -> None:
    """Whoever writes figures in this order never refers to one that is not written yet."""
    price, rate, loss = leaf("price", "4840"), leaf("A", "11000"), leaf("P0", "0.058")
    cost = product("cost", "cost", "NCU", rate, loss)
    unit = total("unit", "unit", "NCU", price, cost)
    lot = total("lot", "lot", "NCU", unit, cost)
    assert [figure.id for figure in walk(lot)] == ["price", "A", "P0", "cost", "unit", "lot"]


def test_walk__passes_through_a_year_table() -> None:
    """The inputs of a year table stand before the rate that is summed from it."""
    inputs = (leaf("energy price", "0.085"), leaf("discount rate", "6"))
    rate = Figure("A", "A", Decimal("11006.36"), "NCU/kW", Derivation("table", "no_load", inputs))
    assert [figure.id for figure in walk(rate)] == ["energy price", "discount rate", "A"]
