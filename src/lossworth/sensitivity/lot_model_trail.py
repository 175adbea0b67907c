"""Costs as functions of any figure behind them: the trail of a total, run again without rounding.

Every amount of an evaluation knows its arithmetic (`trail`). Run backward, the same tree gives the exact derivative of
a cost to every figure that went into it: an exchange rate, an adder, a guaranteed loss. Run forward with another value
in one place, it gives the cost as the evaluation would have it, before rounding.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import reduce
from typing import Any

from ..money import ARITHMETIC
from ..trail import Figure, Operation, Operator

__all__ = ["Trail", "trail_of"]

_ONE, _ZERO = Decimal(1), Decimal(0)


@dataclass(frozen=True, slots=True)
class Trail:
    """One amount with everything behind it, operands before results.

    Parameters
    ----------
    figures : tuple of Figure
        Each once, the amount last.
    behind : tuple of tuple of int
        Positions of the operands of each figure; empty for a figure that is taken as it is.
    """

    figures: tuple[Figure, ...]
    behind: tuple[tuple[int, ...], ...]

    def value(self, changed: Mapping[str, Any] | None = None) -> Any:
        """The amount, unrounded.

        Parameters
        ----------
        changed : mapping of str to number or array, optional
            Other values of figures by their identity. As long as they are decimals the arithmetic is decimal and
            exact; else it is that of the given numbers.

        Returns
        -------
        Decimal, float or ndarray
            The amount.
        """
        return self._values(changed)[-1]

    def by_figure(self) -> dict[str, Decimal]:
        """Every figure behind the amount, unrounded.

        Returns
        -------
        dict of str to Decimal
            By the identity of the figure.
        """
        return {figure.id: value for figure, value in zip(self.figures, self._values(None), strict=True)}

    def slopes(self, changed: Mapping[str, Decimal] | None = None) -> dict[str, Decimal]:
        """Derivative of the amount to every figure behind it.

        Parameters
        ----------
        changed : mapping of str to Decimal, optional
            Other values of figures by their identity.

        Returns
        -------
        dict of str to Decimal
            By the identity of the figure.
        """
        values = self._values(changed)
        slope = [_ZERO] * len(values)
        slope[-1] = _ONE
        for at in reversed(range(len(values))):
            if slope[at]:
                for operand, part in self._parts(at, values):
                    slope[operand] = ARITHMETIC.add(slope[operand], ARITHMETIC.multiply(slope[at], part))
        return {figure.id: slope[at] for at, figure in enumerate(self.figures)}

    def _values(self, changed: Mapping[str, Any] | None) -> list[Any]:
        values: list[Any] = []
        exact = all(isinstance(value, Decimal) for value in (changed or {}).values())
        for figure, operands in zip(self.figures, self.behind, strict=True):
            if changed and figure.id in changed:
                values.append(changed[figure.id])
            elif not operands:
                values.append(figure.value if exact else float(figure.value))
            else:
                parts = [values[operand] for operand in operands]
                values.append((_EXACT if exact else _PLAIN)[_operator(figure)](parts))
        return values

    def _parts(self, at: int, values: list[Decimal]) -> Iterator[tuple[int, Decimal]]:
        """Derivative of one result to each of its operands."""
        operands = self.behind[at]
        if not operands:
            return
        match _operator(self.figures[at]):
            case Operator.SUM | Operator.ROUNDED:
                yield from ((operand, _ONE) for operand in operands)
            case Operator.DIFFERENCE:
                yield operands[0], _ONE
                yield operands[1], -_ONE
            case Operator.PRODUCT:
                for place, operand in enumerate(operands):
                    others = [values[other] for where, other in enumerate(operands) if where != place]
                    yield operand, reduce(ARITHMETIC.multiply, others, _ONE)
            case Operator.QUOTIENT:
                over, under = operands
                yield over, ARITHMETIC.divide(_ONE, values[under])
                yield under, -ARITHMETIC.divide(values[at], values[under])


def _operator(figure: Figure) -> Operator:
    if not isinstance(figure.source, Operation):
        raise TypeError(f"{figure.id} has operands and no operation")
    return figure.source.operator


def trail_of(amount: Figure, *, taken: Collection[str], unrounded: tuple[str, ...]) -> Trail:
    """Arithmetic behind an amount, ready to be run again.

    Parameters
    ----------
    amount : Figure
        The root.
    taken : collection of str
        Identities of figures that are taken as they are, whatever stands behind them.
    unrounded : tuple of str
        Beginnings of the identities of figures whose rounding is dropped; any other rounded figure is taken as it is.

    Returns
    -------
    Trail
        Operands before results.
    """
    figures: list[Figure] = []
    behind: list[tuple[int, ...]] = []
    position: dict[str, int] = {}
    waiting = [(amount, False)]
    while waiting:
        figure, operands_done = waiting.pop()
        if figure.id in position:
            continue
        operands = _operands(figure, taken, unrounded)
        if operands and not operands_done:
            waiting.append((figure, True))
            waiting.extend((operand, False) for operand in operands)
            continue
        position[figure.id] = len(figures)
        figures.append(figure)
        behind.append(tuple(position[operand.id] for operand in operands))
    return Trail(tuple(figures), tuple(behind))


def _operands(figure: Figure, taken: Collection[str], unrounded: tuple[str, ...]) -> tuple[Figure, ...]:
    source = figure.source
    if figure.id in taken or not isinstance(source, Operation):
        return ()
    is_kept = figure.rounding is not None and not figure.id.startswith(unrounded)
    return () if is_kept else source.operands


_EXACT: dict[Operator, Any] = {
    Operator.PRODUCT: lambda values: reduce(ARITHMETIC.multiply, values),
    Operator.QUOTIENT: lambda values: ARITHMETIC.divide(*values),
    Operator.SUM: lambda values: reduce(ARITHMETIC.add, values),
    Operator.DIFFERENCE: lambda values: ARITHMETIC.subtract(*values),
    Operator.ROUNDED: lambda values: values[0],
}
_PLAIN: dict[Operator, Any] = {
    Operator.PRODUCT: lambda values: reduce(lambda a, b: a * b, values),
    Operator.QUOTIENT: lambda values: values[0] / values[1],
    Operator.SUM: lambda values: reduce(lambda a, b: a + b, values),
    Operator.DIFFERENCE: lambda values: values[0] - values[1],
    Operator.ROUNDED: lambda values: values[0],
}
