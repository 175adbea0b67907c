"""Guaranteed values on the basis that the tender wants: converted only where it allows, and then marked."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from ..findings import Finding
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import LossBasis, Lot
from ..trail import Figure, constant, difference, product, quotient, read, total
from ..units import LOSS_UNITS
from .identities import figure_id, offer_id

__all__ = ["OfferOnBasis", "loss_in_kw", "on_basis"]

#: Metal constants of the resistance: 235 copper, 225 aluminum (IEC 60076-1, from memory; IEEE uses 234.5 for copper).
_METAL_CONSTANT_C = {"copper": Decimal(235), "aluminum": Decimal(225)}


@dataclass(frozen=True, slots=True)
class OfferOnBasis:
    """Guaranteed values of one offer as the evaluation uses them.

    Parameters
    ----------
    offer : Offer
        As read.
    no_load_loss, load_loss : Figure or None
        Losses of one unit on the tender's basis; None where they are not stated. [kW]
    impedance : Figure or None
        Impedance on the tender's rating. [percent]
    assumptions : tuple of str
        Conversions that were made, each in a sentence.
    findings : tuple of Finding
        Questions where a conversion is not allowed, and notes on those that were made.
    """

    offer: Offer
    no_load_loss: Figure | None
    load_loss: Figure | None
    impedance: Figure | None
    assumptions: tuple[str, ...] = ()
    findings: tuple[Finding, ...] = ()


def loss_in_kw(offer: Offer, name: str, label: str, loss: Quantity | None) -> Figure | None:
    """Guaranteed loss of one unit in kW, with the conversion shown where the bidder states watts.

    Parameters
    ----------
    offer : Offer
        The offer, for the identity.
    name, label : str
        Identity and name of the loss.
    loss : Quantity or None
        As read.

    Returns
    -------
    Figure or None
        None where the loss is not stated. [kW]
    """
    if loss is None:
        return None
    identity = offer_id(offer, name)
    if loss.unit == "kW":
        return read(identity, label, loss.value, "kW", loss.place)
    stated = read(f"{identity}/as stated", f"{label} as read", loss.stated, loss.unit, loss.place)
    size = LOSS_UNITS[loss.unit]
    if size > 1:
        times = f"kW in 1 {loss.unit}"
        one = constant(times, times, size, f"kW/{loss.unit}", f"1 {loss.unit} = {size} kW")
        return product(identity, label, "kW", stated, one)
    pieces = Decimal(f"{1 / size:f}")
    per = f"{loss.unit} in 1 kW"
    return quotient(
        identity, label, "kW", stated, constant(per, per, pieces, f"{loss.unit}/kW", f"1 kW = {pieces} {loss.unit}")
    )


def on_basis(offer: Offer, lot: Lot) -> OfferOnBasis:
    """Bring the guaranteed values of an offer to the basis of its lot.

    Parameters
    ----------
    offer : Offer
        As read. A rating or temperature that the bidder does not state is taken to be the tender's.
    lot : Lot
        With the basis that it wants and the conversions that it allows.

    Returns
    -------
    OfferOnBasis
        Converted where the tender allows it; else as read, with a finding that asks the bidder.

    Notes
    -----
    Pk = total loss - P0; Pk(S2) = Pk(S1) (S2/S1)^2 and Z(S2) = Z(S1) S2/S1; with the ratio of resistances
    q = (T0 + T2)/(T0 + T1): Pk(T2) = I2R q + stray / q, or Pk q as an estimate where the split is not known.

    References
    ----------
    .. [1] IEC 60076-1, correction to the reference temperature (from memory); the rest follows from the loss model.
    """
    basis = lot.loss_basis or LossBasis(place=lot.place)
    work = _Work(offer, lot, basis)
    no_load = loss_in_kw(offer, "no_load_loss_kw", "no-load loss", offer.no_load_loss_kw)
    load = loss_in_kw(offer, "load_loss_kw", "load loss", offer.load_loss_kw)
    if load is None:
        load = work.from_total(no_load)
    load = work.at_temperature(load)
    load, impedance = work.at_rating(load, _impedance(offer))
    return OfferOnBasis(offer, no_load, load, impedance, tuple(work.assumptions), tuple(work.findings))


def _impedance(offer: Offer) -> Figure | None:
    stated = offer.impedance_percent
    if stated is None:
        return None
    return read(offer_id(offer, "impedance_percent"), "impedance", stated.value, "%", stated.place)


class _Work:
    """The conversions of one offer, with the assumptions and findings that they leave."""

    def __init__(self, offer: Offer, lot: Lot, basis: LossBasis) -> None:
        self.offer, self.lot, self.basis = offer, lot, basis
        self.assumptions: list[str] = []
        self.findings: list[Finding] = []

    def from_total(self, no_load: Figure | None) -> Figure | None:
        """Load loss as total loss less no-load loss."""
        stated = loss_in_kw(self.offer, "total_loss_kw", "total loss", self.offer.total_loss_kw)
        quantity = self.offer.total_loss_kw
        if stated is None or quantity is None or no_load is None:
            return None
        if "total loss" not in self.basis.convert:
            question = (
                "Ask the bidder: you state a total loss and no load loss; please state the guaranteed load loss at the "
                "reference temperature and rating of the tender."
            )
            self._question("load loss", "must be stated, and the tender does not derive it from the total loss",
                           quantity, question)  # fmt: skip
            return None
        load = difference(offer_id(self.offer, "load_loss_kw"), "load loss from total loss", "kW", stated, no_load)
        self._assume("load loss", "the load loss is the stated total loss less the no-load loss", quantity)
        return load

    def at_temperature(self, load: Figure | None) -> Figure | None:
        """Load loss at the tender's reference temperature."""
        wanted, stated = self.basis.reference_temperature_c, self.offer.reference_temperature_c
        if load is None or wanted is None or stated is None or wanted.value == stated.value:
            return load
        if "temperature" not in self.basis.convert or self.basis.conductor is None:
            question = (
                f"Ask the bidder: your load loss is stated at {stated.value} °C; please state the guaranteed load loss "
                f"at {wanted.value} °C."
            )
            self._question("load loss", f"must be guaranteed at {wanted.value} °C ({wanted.place})", stated, question)
            return load
        ratio = self._resistance_ratio(wanted, stated, self.basis.conductor)
        return self._corrected(load, ratio, stated, wanted)

    def _resistance_ratio(self, wanted: Quantity, stated: Quantity, conductor: str) -> Figure:
        offer = self.offer
        metal = constant(f"metal constant {conductor}", f"metal constant of {conductor}", _METAL_CONSTANT_C[conductor],
                         "°C", "IEC 60076-1, from memory")  # fmt: skip
        target = read(figure_id(f"lot {self.lot.id}", "reference temperature"), "reference temperature of the tender",
                      wanted.value, "°C", wanted.place)  # fmt: skip
        given = read(offer_id(offer, "reference_temperature_c"), "reference temperature as stated", stated.value, "°C",
                     stated.place)  # fmt: skip
        above = total(
            offer_id(offer, "resistance wanted"), "metal constant and wanted temperature", "°C", metal, target
        )
        below = total(offer_id(offer, "resistance stated"), "metal constant and stated temperature", "°C", metal, given)
        return quotient(offer_id(offer, "resistance ratio"), "ratio of resistances", "1", above, below)

    def _corrected(self, load: Figure, ratio: Figure, stated: Quantity, wanted: Quantity) -> Figure:
        offer, label = self.offer, f"load loss at {wanted.value} °C"
        resistive = loss_in_kw(offer, "resistive_loss_kw", "resistive part of the load loss", offer.resistive_loss_kw)
        stray = loss_in_kw(offer, "stray_loss_kw", "stray part of the load loss", offer.stray_loss_kw)
        change = f"converted from {stated.value} to {wanted.value} °C for {self.basis.conductor}"
        if resistive is None or stray is None:
            self._assume("load loss", f"{change}, all of it taken as resistive: an estimate", stated)
            return product(offer_id(offer, "load loss at temperature"), label, "kW", load, ratio)
        self._assume("load loss", f"{change}, resistive and stray part as the bidder splits them", stated)
        return total(
            offer_id(offer, "load loss at temperature"),
            label,
            "kW",
            product(offer_id(offer, "resistive part"), "resistive part, converted", "kW", resistive, ratio),
            quotient(offer_id(offer, "stray part"), "stray part, converted", "kW", stray, ratio),
        )

    def at_rating(self, load: Figure | None, impedance: Figure | None) -> tuple[Figure | None, Figure | None]:
        """Load loss and impedance on the tender's rating."""
        wanted = self.basis.load_loss_rating_kva or self.lot.rated_power_kva
        stated = self.offer.load_loss_rating_kva
        if stated is None or stated.value == wanted.value:
            return load, impedance
        if "rating" not in self.basis.convert:
            question = (
                f"Ask the bidder: your load loss and impedance are stated at {stated.value} kVA; please state them at "
                f"{wanted.value} kVA."
            )
            self._question("load loss", f"must be guaranteed at {wanted.value} kVA ({wanted.place})", stated, question)
            return load, impedance
        offer = self.offer
        target = read(figure_id(f"lot {self.lot.id}", "loss rating"), "rating of the guarantee", wanted.value, "kVA",
                      wanted.place)  # fmt: skip
        given = read(offer_id(offer, "load_loss_rating_kva"), "rating as stated", stated.value, "kVA", stated.place)
        ratio = quotient(offer_id(offer, "rating ratio"), "ratio of ratings", "1", target, given)
        self._assume(
            "load loss", f"load loss and impedance converted from {stated.value} to {wanted.value} kVA", stated
        )
        if load is not None:
            load = product(
                offer_id(offer, "load loss at rating"), f"load loss at {wanted.value} kVA", "kW", load, ratio, ratio
            )
        if impedance is not None:
            label = f"impedance at {wanted.value} kVA"
            impedance = product(offer_id(offer, "impedance at rating"), label, "%", impedance, ratio)
        return load, impedance

    def _assume(self, field: str, statement: str, quantity: Quantity) -> None:
        self.assumptions.append(f"{statement} ({quantity.place}); it binds nobody until the bidder confirms it")
        self._add("loss-converted", field, statement, quantity, "")

    def _question(self, field: str, rule: str, quantity: Quantity, question: str) -> None:
        self._add("loss-basis-differs", field, rule, quantity, question)

    def _add(self, kind: str, field: str, rule: str, quantity: Quantity, fix: str) -> None:
        got = f"{quantity.text} {quantity.unit}"
        who = (self.offer.bidder.value, self.offer.lot.value)
        self.findings.append(Finding(kind, field, rule, quantity.place, got, *who, fix=fix))
