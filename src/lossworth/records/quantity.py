"""A stated number or text that remembers how and where it stood, and the bounds that a number must keep."""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from typing import Annotated

from pydantic import AfterValidator, BaseModel, ConfigDict
from pydantic_core import PydanticCustomError

from ..findings import Place

__all__ = [
    "Above0",
    "AtLeast0",
    "AtLeast1",
    "Entry",
    "Quantity",
    "Rate",
    "Record",
    "ShareOf1",
    "WholeNumber",
]


class Record(BaseModel):
    """Base of all records: frozen, strict, and without room for a key that nobody knows."""

    model_config = ConfigDict(frozen=True, strict=True, extra="forbid", allow_inf_nan=False)


class Entry(Record):
    """A text with its place.

    Parameters
    ----------
    value : str
        The text, without blanks around it.
    place : Place
        Where it stood.
    """

    value: str
    place: Place

    def __str__(self) -> str:
        return self.value


class Quantity(Record):
    """A number with its place, in the internal unit and as it was stated.

    Parameters
    ----------
    value : Decimal
        In the unit that the field's name says.
    stated : Decimal
        The number as it stood.
    unit : str
        The unit in which it was stated.
    text : str
        The characters as they stood.
    place : Place
        Where it stood.
    """

    value: Decimal
    stated: Decimal
    unit: str
    text: str
    place: Place


def _bounded(rule: str, holds: Callable[[Decimal], bool]) -> AfterValidator:
    def check(quantity: Quantity) -> Quantity:
        if not holds(quantity.value):
            raise PydanticCustomError("bound", "{rule}", {"rule": rule})
        return quantity

    return AfterValidator(check)


Above0 = Annotated[Quantity, _bounded("must be above 0", lambda v: v > 0)]
AtLeast0 = Annotated[Quantity, _bounded("must not be negative", lambda v: v >= 0)]
AtLeast1 = Annotated[Quantity, _bounded("must be 1 or more", lambda v: v >= 1)]
ShareOf1 = Annotated[Quantity, _bounded("must lie between 0 and 1", lambda v: 0 <= v <= 1)]
WholeNumber = Annotated[Quantity, _bounded("must be a whole number of 1 or more", lambda v: v >= 1 and v == int(v))]
Rate = Annotated[Quantity, _bounded("must lie above -100 and at most at 100 percent", lambda v: -100 < v <= 100)]
