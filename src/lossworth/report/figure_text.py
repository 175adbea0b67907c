"""Figures of the trail in words and numbers: what the page unfolds and the workbook turns into formulas."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from decimal import Decimal

from ..findings import Place, one_line
from ..trail import Constant, Derivation, Figure, Operation, Operator, Rule, walk
from .formats import amount, as_stated, number
from .view import ShownFigure

__all__ = ["shown_figures", "value_text"]

_SIGNS = {Operator.PRODUCT: " × ", Operator.SUM: " + ", Operator.DIFFERENCE: " − ", Operator.QUOTIENT: " ÷ "}
_LONG = 12


def shown_figures(roots: Iterable[Figure], currency: str) -> dict[str, ShownFigure]:
    """All figures behind some, by id, operands before results.

    Parameters
    ----------
    roots : iterable of Figure
        Amounts that the papers print.
    currency : str
        Evaluation currency; its amounts print with at least two places.

    Returns
    -------
    dict of str to ShownFigure
        Ready to be printed.
    """
    shown: dict[str, ShownFigure] = {}
    for root in roots:
        for figure in walk(root):
            if figure.id not in shown:
                shown[figure.id] = _shown(figure, currency)
    return shown


def value_text(figure: Figure, currency: str) -> str:
    """Value of a figure as printed, without its unit.

    Parameters
    ----------
    figure : Figure
        Any figure.
    currency : str
        Evaluation currency.

    Returns
    -------
    str
        Money with at least two places, other numbers with the digits that they have, long ones shortened.
    """
    value = figure.value
    if figure.unit == currency or figure.unit.startswith(f"{currency}/k") or _is_foreign_money(figure):
        places = max(2, -int(value.normalize().as_tuple().exponent))
        return amount(value, min(places, 6))
    if len(value.as_tuple().digits) > _LONG:
        value = +value.quantize(Decimal(1).scaleb(max(value.adjusted() - _LONG + 1, -_LONG)))
    return as_stated(value) if isinstance(figure.source, Place) else number(value)


def _is_foreign_money(figure: Figure) -> bool:
    """Whether the unit is another currency: three capitals, as their codes are."""
    return len(figure.unit) == 3 and figure.unit.isalpha() and figure.unit.isupper() and figure.unit != "MVA"


def _with_unit(figure: Figure, currency: str) -> str:
    text = value_text(figure, currency)
    return text if figure.unit == "1" else f"{text} {figure.unit}"


def _shown(figure: Figure, currency: str) -> ShownFigure:
    operator, operands, source = _origin(figure)
    return ShownFigure(
        id=figure.id,
        label=one_line(figure.label),
        value=figure.value,
        unit=figure.unit,
        operator=operator,
        operands=tuple(operand.id for operand in operands),
        rounding_places=None if figure.rounding is None else figure.rounding.places,
        rounding_mode=None if figure.rounding is None else figure.rounding.mode.value,
        source=source,
        text=value_text(figure, currency),
        arithmetic=_arithmetic(figure, source, lambda operand: _with_unit(operand, currency)),
    )


def _origin(figure: Figure) -> tuple[str, tuple[Figure, ...], str]:
    match figure.source:
        case Place() as place:
            return "read", (), str(place)
        case Rule(statement=statement):
            return "rule", (), statement
        case Constant(statement=statement):
            return "constant", (), statement
        case Operation(operator=operator, operands=operands):
            return operator.value, operands, ""
        case Derivation(inputs=inputs):
            return "year table", inputs, ""


def _arithmetic(figure: Figure, source: str, show: Callable[[Figure], str]) -> str:
    match figure.source:
        case Operation(operator=Operator.ROUNDED, operands=(operand,)):
            return f"{show(operand)}, {figure.rounding} = {show(figure)}"
        case Operation(operator=operator, operands=operands):
            sum_text = _SIGNS[operator].join(show(operand) for operand in operands)
            rounding = "" if figure.rounding is None else f", {figure.rounding}"
            return f"{sum_text} = {show(figure)}{rounding}"
        case Derivation(column=column):
            return f"sum of the column {column.replace('_', '-')} of the year table = {show(figure)}"
        case _:
            return f"{show(figure)}, {source}"
