"""Figures that know their arithmetic: the spine from a bidder's cell to the last sum of the report."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum
from functools import reduce

from .findings import Place
from .money import ARITHMETIC, Rounding

__all__ = [
    "Constant",
    "Derivation",
    "Figure",
    "Operation",
    "Operator",
    "Rule",
    "Source",
    "constant",
    "difference",
    "product",
    "quotient",
    "read",
    "rounded",
    "total",
    "walk",
]


class Operator(StrEnum):
    """The arithmetic that makes one figure of others."""

    PRODUCT = "product"
    QUOTIENT = "quotient"
    SUM = "sum"
    DIFFERENCE = "difference"
    ROUNDED = "rounded"


@dataclass(frozen=True, slots=True)
class Operation:
    """A figure that was computed from others.

    Parameters
    ----------
    operator : Operator
        What was done with the operands.
    operands : tuple of Figure
        In the order in which a reader would write them.
    """

    operator: Operator
    operands: tuple[Figure, ...]


@dataclass(frozen=True, slots=True)
class Derivation:
    """A rate that is the sum of one column of a year table.

    Parameters
    ----------
    table : str
        Identity of the year table.
    column : str
        Name of the summed column.
    inputs : tuple of Figure
        What the table was made from.
    """

    table: str
    column: str
    inputs: tuple[Figure, ...]


@dataclass(frozen=True, slots=True)
class Rule:
    """A figure that follows from a rule and not from a cell, such as an auxiliary loss that is zero by rule.

    Parameters
    ----------
    statement : str
        The rule in one sentence.
    """

    statement: str


@dataclass(frozen=True, slots=True)
class Constant:
    """A figure that is true by definition, such as 1000 W in 1 kW.

    Parameters
    ----------
    statement : str
        The definition in a few words.
    """

    statement: str


Source = Place | Rule | Constant | Operation | Derivation


@dataclass(frozen=True, slots=True)
class Figure:
    """A value with its unit, its rounding and where it comes from.

    Parameters
    ----------
    id : str
        Identity within one evaluation, ``"lot 1/Alder/per unit/no_load_cost"``.
    label : str
        What it is, in the trade's words.
    value : Decimal
        The value, after rounding where there is one.
    unit : str
        Unit, ``"NCU"``, ``"NCU/kW"``, ``"kW"``; ``"1"`` for a pure number.
    source : Source
        A place, a rule, a definition, an operation on other figures, or a year table.
    rounding : Rounding, optional
        The rounding that was applied to the result of the operation.
    """

    id: str
    label: str
    value: Decimal
    unit: str
    source: Source
    rounding: Rounding | None = None


def read(id: str, label: str, value: Decimal, unit: str, place: Place) -> Figure:
    """Figure that stood in a file.

    Parameters
    ----------
    id, label : str
        Identity and name.
    value : Decimal
        As read, in the unit given.
    unit : str
        Unit as stated in the file.
    place : Place
        Where it stood.

    Returns
    -------
    Figure
        A leaf of the trail.
    """
    return Figure(id, label, value, unit, place)


def constant(id: str, label: str, value: Decimal, unit: str, statement: str) -> Figure:
    """Figure that is true by definition.

    Parameters
    ----------
    id, label : str
        Identity and name.
    value : Decimal
        The value.
    unit : str
        Its unit.
    statement : str
        The definition.

    Returns
    -------
    Figure
        A leaf of the trail.
    """
    return Figure(id, label, value, unit, Constant(statement))


def _computed(
    id: str,
    label: str,
    unit: str,
    operator: Operator,
    operands: tuple[Figure, ...],
    rounding: Rounding | None,
) -> Figure:
    value = _CALCULATE[operator](tuple(figure.value for figure in operands))
    if rounding is not None:
        value = rounding.apply(value)
    return Figure(id, label, value, unit, Operation(operator, operands), rounding)


def product(id: str, label: str, unit: str, *factors: Figure, rounding: Rounding | None = None) -> Figure:
    """Product of figures, rounded if a rounding is given.

    Parameters
    ----------
    id, label, unit : str
        Identity, name and unit of the result.
    *factors : Figure
        What is multiplied.
    rounding : Rounding, optional
        Applied once, to the exact product.

    Returns
    -------
    Figure
        The product, knowing its factors.
    """
    return _computed(id, label, unit, Operator.PRODUCT, factors, rounding)


def quotient(id: str, label: str, unit: str, dividend: Figure, divisor: Figure) -> Figure:
    """Quotient of two figures, to 50 digits.

    Parameters
    ----------
    id, label, unit : str
        Identity, name and unit of the result.
    dividend, divisor : Figure
        What is divided, and by what.

    Returns
    -------
    Figure
        The quotient, knowing both.
    """
    return _computed(id, label, unit, Operator.QUOTIENT, (dividend, divisor), None)


def total(id: str, label: str, unit: str, *parts: Figure, rounding: Rounding | None = None) -> Figure:
    """Sum of figures.

    Parameters
    ----------
    id, label, unit : str
        Identity, name and unit of the result.
    *parts : Figure
        What is added, all in this unit.
    rounding : Rounding, optional
        Applied once, to the exact sum.

    Returns
    -------
    Figure
        The sum, knowing its parts.
    """
    return _computed(id, label, unit, Operator.SUM, parts, rounding)


def difference(id: str, label: str, unit: str, first: Figure, second: Figure) -> Figure:
    """First figure less the second.

    Parameters
    ----------
    id, label, unit : str
        Identity, name and unit of the result.
    first, second : Figure
        What is left from, and what is taken away.

    Returns
    -------
    Figure
        The difference, knowing both.
    """
    return _computed(id, label, unit, Operator.DIFFERENCE, (first, second), None)


def rounded(id: str, label: str, figure: Figure, rounding: Rounding) -> Figure:
    """Figure rounded as a rule says, keeping the unrounded one behind it.

    Parameters
    ----------
    id, label : str
        Identity and name of the result.
    figure : Figure
        The unrounded figure.
    rounding : Rounding
        The rule.

    Returns
    -------
    Figure
        The rounded figure, in the same unit.
    """
    return _computed(id, label, figure.unit, Operator.ROUNDED, (figure,), rounding)


def walk(figure: Figure) -> Iterator[Figure]:
    """All figures behind one, operands before results, each once.

    Parameters
    ----------
    figure : Figure
        The root.

    Yields
    ------
    Figure
        Leaves first, the root last.
    """
    seen: set[str] = set()

    def descend(node: Figure) -> Iterator[Figure]:
        if node.id in seen:
            return
        seen.add(node.id)
        match node.source:
            case Operation(operands=behind) | Derivation(inputs=behind):
                for operand in behind:
                    yield from descend(operand)
            case _:
                pass
        yield node

    yield from descend(figure)


_CALCULATE: dict[Operator, Callable[[tuple[Decimal, ...]], Decimal]] = {
    Operator.PRODUCT: lambda values: reduce(ARITHMETIC.multiply, values),
    Operator.QUOTIENT: lambda values: ARITHMETIC.divide(*values),
    Operator.SUM: lambda values: reduce(ARITHMETIC.add, values),
    Operator.DIFFERENCE: lambda values: ARITHMETIC.subtract(*values),
    Operator.ROUNDED: lambda values: values[0],
}
