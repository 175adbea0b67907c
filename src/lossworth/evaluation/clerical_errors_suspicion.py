"""What is suspected of an offer: a finding that asks, and the figures that the bidder would mean if it is right."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from ..findings import Finding, Place
from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.quantity import Quantity

__all__ = [
    "ASK",
    "LABELS",
    "Statement",
    "Supposition",
    "Suspicion",
    "agree",
    "half_digit",
    "rating",
    "shown",
    "stated",
    "suppose",
    "suspect",
    "value_of",
]

#: How a drafted question begins among the remedies of findings; a letter leaves it out.
ASK = "Ask the bidder: "

#: Fields of an offer that a clerical error can sit in, in the words of papers and letters.
LABELS = {
    "unit_price": "unit price",
    "no_load_loss_kw": "no-load loss",
    "load_loss_kw": "load loss",
    "auxiliary_loss_kw": "auxiliary loss",
    "total_loss_kw": "total loss",
    "impedance_percent": "impedance",
    "resistive_loss_kw": "resistive loss",
    "stray_loss_kw": "stray loss",
    "reference_temperature_c": "reference temperature",
    "load_loss_rating_kva": "load loss rating",
    "declared_efficiency_percent": "declared efficiency",
}
_OFFER_FIELDS = frozenset(Offer.model_fields)
_MVA_FROM = Decimal(5000)
_UNITS = {"_kw": "kW", "_kva": "kVA", "_percent": "%", "_c": "°C"}


@dataclass(frozen=True, slots=True)
class Statement:
    """A value as the bidder's own schedule states it: what a letter may show.

    Parameters
    ----------
    field, label : str
        Field of the offer, and its name in words.
    text : str
        Number and unit as they stand there.
    place : Place
        Where.
    """

    field: str
    label: str
    text: str
    place: Place


@dataclass(frozen=True, slots=True)
class Supposition:
    """The figure that the bidder would mean if a suspicion is right. It changes nothing and binds nobody.

    Parameters
    ----------
    offer, lot : str
        Name of the offer, and its lot.
    field : str
        Field of the offer.
    as_read, value : Quantity
        The figure as it stands, and the supposed one.
    reason : str
        What would be wrong with the figure as read.
    proof : str
        The arithmetic behind the supposed figure, with its places.
    is_proved_by_bid : bool
        Whether the bidder's own schedule, with what the tender specifies, gives the figure; False where it only fits
        the other offers.
    """

    offer: str
    lot: str
    field: str
    as_read: Quantity
    value: Quantity
    reason: str
    proof: str
    is_proved_by_bid: bool


@dataclass(frozen=True, slots=True)
class Suspicion:
    """One apparent clerical error of one offer.

    Parameters
    ----------
    finding : Finding
        Why it looks wrong, for the buyer; its remedy is the drafted question.
    offer : str
        Name of the offer.
    fields : tuple of str
        Fields concerned.
    statements : tuple of Statement
        What the bidder's own schedule says about it, with places.
    suppositions : tuple of Supposition
        Figures if the suspicion is right; none where only the bidder can know.
    """

    finding: Finding
    offer: str
    fields: tuple[str, ...]
    statements: tuple[Statement, ...]
    suppositions: tuple[Supposition, ...] = ()


def value_of(offer: Offer, field: str) -> Quantity | None:
    """Stated quantity of an offer.

    Parameters
    ----------
    offer : Offer
        As read.
    field : str
        Field of the offer, or of its commercial terms.

    Returns
    -------
    Quantity or None
        None where the bidder states none.
    """
    home = offer if field in _OFFER_FIELDS else offer.terms
    quantity: Quantity | None = getattr(home, field)
    return quantity


def stated(quantity: Quantity) -> str:
    """Number and unit as the bidder wrote them.

    Parameters
    ----------
    quantity : Quantity
        As read.

    Returns
    -------
    str
        ``"8.04 kW"``.
    """
    return f"{quantity.text.strip()} {quantity.unit}"


def shown(value: Decimal, digits: int = 6) -> str:
    """Number in a sentence, with trailing zeros cut and no exponent.

    Parameters
    ----------
    value : Decimal
        Any number.
    digits : int
        Significant digits kept.

    Returns
    -------
    str
        ``"141.892"``.
    """
    if not value:
        return "0"
    last = Decimal(1).scaleb(value.adjusted() - digits + 1)
    return f"{value.quantize(last, context=ARITHMETIC).normalize(ARITHMETIC):f}"


def rating(kva: Decimal) -> str:
    """Rated power in the unit in which the trade says it.

    Parameters
    ----------
    kva : Decimal
        Rated power. [kVA]

    Returns
    -------
    str
        ``"1000 kVA"``, ``"31.5 MVA"``.
    """
    return f"{shown(kva / 1000)} MVA" if kva >= _MVA_FROM else f"{shown(kva)} kVA"


def agree(value: Decimal, quantity: Quantity, *further: Quantity) -> bool:
    """Whether a sum is the stated figure, up to the rounding of all figures.

    Parameters
    ----------
    value : Decimal
        Computed. [unit of the field]
    quantity : Quantity
        As stated.
    *further : Quantity
        The parts of the sum, each of which is rounded as well.

    Returns
    -------
    bool
        True within half a unit of the last stated digit of each figure.
    """
    return abs(value - quantity.value) <= sum(half_digit(each) for each in (quantity, *further))


def half_digit(quantity: Quantity) -> Decimal:
    """Half a unit of the last digit that was stated.

    Parameters
    ----------
    quantity : Quantity
        As stated; a workbook does not keep trailing zeros.

    Returns
    -------
    Decimal
        In the unit of the field.
    """
    if not quantity.stated or not quantity.value:
        return Decimal(0)
    digit = Decimal(1).scaleb(int(quantity.stated.as_tuple().exponent)) / 2
    return digit * quantity.value / quantity.stated


def suppose(
    offer: Offer, field: str, value: Decimal, reason: str, proof: str, *, is_proved_by_bid: bool
) -> Supposition:
    """Supposition on a figure that the bidder states.

    Parameters
    ----------
    offer : Offer
        As read.
    field : str
        Field of the offer.
    value : Decimal
        The supposed figure. [unit of the field]
    reason, proof : str
        What would be wrong, and the arithmetic with its places.
    is_proved_by_bid : bool
        Whether the bid itself gives the figure.

    Returns
    -------
    Supposition
        With the figure in the unit of its field, at the place of the figure as read.

    Raises
    ------
    ValueError
        If the bidder does not state the figure.
    """
    as_read = value_of(offer, field)
    if as_read is None:
        raise ValueError(f"{offer.name} states no {LABELS[field]}")
    unit = next((unit for ending, unit in _UNITS.items() if field.endswith(ending)), as_read.unit)
    text = f"{value.normalize(ARITHMETIC):f}"
    quantity = Quantity(value=value, stated=value, unit=unit, text=text, place=as_read.place)
    return Supposition(offer.name, offer.lot.value, field, as_read, quantity, reason, proof, is_proved_by_bid)


def suspect(
    offer: Offer,
    kind: str,
    fields: tuple[str, ...],
    rule: str,
    question: str,
    *,
    evidence: tuple[str, ...] = (),
    suppositions: tuple[Supposition, ...] = (),
) -> Suspicion:
    """Suspicion on figures that the bidder states.

    Parameters
    ----------
    offer : Offer
        As read.
    kind : str
        Kind of the finding.
    fields : tuple of str
        Fields concerned; the first one gives the finding its field, place and value as read.
    rule : str
        Why it looks wrong, as a clause that follows the field; may compare with others, and is not shown to bidders.
    question : str
        What to ask, in words to the bidder; names no rank, price or rival.
    evidence : tuple of str
        Further fields that a letter may show.
    suppositions : tuple of Supposition
        Figures if the suspicion is right.

    Returns
    -------
    Suspicion
        With what the bidder states in these fields.
    """
    quantities = {field: value_of(offer, field) for field in (*fields, *evidence)}
    first = quantities[fields[0]]
    finding = Finding(
        kind,
        LABELS[fields[0]],
        rule,
        offer.place if first is None else first.place,
        None if first is None else stated(first),
        offer.bidder.value,
        offer.lot.value,
        fix=ASK + question,
    )
    statements = tuple(
        Statement(field, LABELS[field], stated(quantity), quantity.place)
        for field, quantity in quantities.items()
        if quantity is not None
    )
    return Suspicion(finding, offer.name, fields, statements, suppositions)
