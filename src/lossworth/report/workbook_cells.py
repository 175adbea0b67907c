"""Where figures stand in the workbook, and the formula that makes one cell of others."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field

from .view import ShownFigure

__all__ = ["ARITHMETIC", "YEAR_TABLE", "Addresses", "Cell", "behind", "column_name", "formula_of", "wording_of"]

ARITHMETIC = frozenset({"product", "quotient", "sum", "difference", "rounded"})
YEAR_TABLE = "year table"

_SIGNS = {"product": "*", "quotient": "/", "sum": "+", "difference": "-", "rounded": ""}
_WORDS = {"product": " × ", "quotient": " / ", "sum": " + ", "difference": " − ", "rounded": ""}
#: Digits kept behind those of the rounding before a binary product is cut: 637.99999999999989 stands for 638.
_GUARD_DIGITS = 6


def column_name(column: int) -> str:
    """Letters of a column.

    Parameters
    ----------
    column : int
        Counted from 0.

    Returns
    -------
    str
        ``"A"`` for 0, ``"AA"`` for 26.

    Examples
    --------
    >>> column_name(0), column_name(27)
    ('A', 'AB')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell: sheet, row and column counted from 0."""

    sheet: str
    row: int
    column: int

    def seen_from(self, sheet: str) -> str:
        """Reference as a formula on a sheet writes it.

        Parameters
        ----------
        sheet : str
            Sheet of the formula.

        Returns
        -------
        str
            ``"F7"`` on the same sheet, ``"Inputs!$F$7"`` from another one.
        """
        letters, number = column_name(self.column), self.row + 1
        if sheet == self.sheet:
            return f"{letters}{number}"
        name = f"'{self.sheet}'" if " " in self.sheet else self.sheet
        return f"{name}!${letters}${number}"


@dataclass(slots=True)
class Addresses:
    """The one cell of every figure, and the cells that repeat it for the eye within a row or a block."""

    _homes: dict[str, Cell] = field(default_factory=dict)
    _repeated: dict[tuple[str, str], Cell] = field(default_factory=dict)

    def __contains__(self, id: str) -> bool:
        return id in self._homes

    def settle(self, id: str, cell: Cell) -> None:
        """Give a figure its cell.

        Parameters
        ----------
        id : str
            Identity of the figure.
        cell : Cell
            Its cell.

        Raises
        ------
        ValueError
            If the figure has one already.
        """
        if id in self._homes:
            raise ValueError(f"figure {id} already stands in {self._homes[id]}")
        self._homes[id] = cell

    def repeat(self, id: str, scope: str, cell: Cell) -> None:
        """Note a cell that shows the figure again, for the formulas of one row or block.

        Parameters
        ----------
        id : str
            Identity of the figure.
        scope : str
            Name of the row or block.
        cell : Cell
            The cell that repeats the figure.
        """
        self._repeated[scope, id] = cell

    def find(self, id: str, *scopes: str) -> Cell:
        """Cell to which a formula refers: the one of the nearest scope, else the figure's own.

        Parameters
        ----------
        id : str
            Identity of the figure.
        *scopes : str
            From the nearest on.

        Returns
        -------
        Cell
            Where the value stands.

        Raises
        ------
        KeyError
            If the figure has no cell yet.
        """
        for scope in scopes:
            if (scope, id) in self._repeated:
                return self._repeated[scope, id]
        return self._homes[id]


def formula_of(figure: ShownFigure, refer: Callable[[str], str]) -> str:
    """Formula of a computed figure, in references to the cells of its operands.

    Parameters
    ----------
    figure : ShownFigure
        A figure whose operator is arithmetic.
    refer : callable
        From the identity of an operand to a reference.

    Returns
    -------
    str
        ``"=ROUND(I5*E9,2)"``.

    Raises
    ------
    KeyError
        If the operator is not arithmetic.

    Notes
    -----
    A spreadsheet computes in binary, the engine in decimals. ROUND mends the last bit by itself; not every program's
    ROUNDDOWN is known to, and would then cut a cent from 637.99999999999989, so that a product is brought to its
    decimal value first.
    """
    formula = _SIGNS[figure.operator].join(refer(operand) for operand in figure.operands)
    places = figure.rounding_places
    if places is None:
        return f"={formula}"
    if figure.rounding_mode == "down":
        return f"=ROUNDDOWN(ROUND({formula},{places + _GUARD_DIGITS}),{places})"
    return f"=ROUND({formula},{places})"


def wording_of(figure: ShownFigure, figures: Mapping[str, ShownFigure]) -> str:
    """How a figure comes about, in words that stay true when inputs change.

    Parameters
    ----------
    figure : ShownFigure
        Any figure.
    figures : mapping of str to ShownFigure
        To name its operands.

    Returns
    -------
    str
        ``"announced load loss rate B × 0.1 kW in 1 kW"``; the source of a leaf.
    """
    if figure.operator == YEAR_TABLE:
        return "sum of the present values of all years"
    if figure.operator not in ARITHMETIC:
        return figure.source
    text = _WORDS[figure.operator].join(figures[operand].label for operand in figure.operands)
    if figure.rounding_places is None:
        return text
    digits = figure.rounding_places
    smallest = f"{10**-digits}" if digits <= 0 else f"0.{'0' * (digits - 1)}1"
    return f"{text}, rounded to {smallest}, {figure.rounding_mode}"


def behind(id: str, figures: Mapping[str, ShownFigure]) -> Iterator[ShownFigure]:
    """All figures behind one and itself, operands before results, each once.

    Parameters
    ----------
    id : str
        Identity of the root.
    figures : mapping of str to ShownFigure
        All figures of the view.

    Yields
    ------
    ShownFigure
        Leaves first, the root last.
    """
    seen: set[str] = set()

    def descend(node: str) -> Iterator[ShownFigure]:
        if node in seen:
            return
        seen.add(node)
        for operand in figures[node].operands:
            yield from descend(operand)
        yield figures[node]

    yield from descend(id)
