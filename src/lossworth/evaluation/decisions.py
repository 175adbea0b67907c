"""Values that bidders confirmed: put into offers beside what was read, as far as the tender's rule lets them."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import get_args, get_origin

from ..findings import Finding
from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.quantity import Quantity
from ..records.tender import Tender
from ..trail import read
from .announced import rule_clause, rule_kind, rule_place, rule_sentence
from .clerical_errors import find_clerical_errors
from .clerical_errors_suspicion import LABELS, Suspicion, stated, value_of
from .identities import figure_id
from .result import Correction

__all__ = ["Confirmation", "Confirmed", "apply_confirmations", "settled_by"]

_RULE = "clarifications"
#: What a stated loss means, not how large it is: a clarification may say it under either setting.
_EXPLAINING = frozenset({"load_loss_rating_kva", "reference_temperature_c"})
#: Findings that a confirmed value answers.
_ANSWERED = frozenset({"value-missing", "value-unreadable", "value-out-of-bounds", "value-not-read"})
_OTHER_LABELS = {
    "cooling_power_no_load_kw": "cooling power at no load",
    "cooling_power_rated_kw": "cooling power at rated load",
    "delivery_weeks": "delivery",
}


@dataclass(frozen=True, slots=True)
class Confirmation:
    """A value as read and as the bidder confirmed it; the one does not overwrite the other.

    Parameters
    ----------
    offer, lot : str
        Name of the offer, and its lot.
    field : str
        Field of the offer or of its commercial terms.
    as_read : Quantity or None
        None where nothing was stated, or nothing that can be read.
    confirmed : Quantity
        With the place in the file of decisions.
    decision : Decision
        Who confirmed, when, why, and where it is on file.
    rule : str
        The announced rule under which the value may be used, in a sentence; empty where it changes nothing.
    """

    offer: str
    lot: str
    field: str
    as_read: Quantity | None
    confirmed: Quantity
    decision: Decision
    rule: str

    @property
    def changes_the_value(self) -> bool:
        """Whether the confirmed value is another one than the value as read."""
        return self.as_read is None or self.as_read.value != self.confirmed.value

    def as_correction(self) -> Correction | None:
        """The first two layers of the value, for the papers.

        Returns
        -------
        Correction or None
            None where the value is the same, or none was read.
        """
        if self.as_read is None or not self.changes_the_value:
            return None
        label = label_of(self.field)
        identity = (f"lot {self.lot}", self.offer, self.field)
        as_read, confirmed = self.as_read, self.confirmed
        return Correction(
            self.field,
            read(figure_id(*identity, "as read"), f"{label} as read", as_read.stated, as_read.unit, as_read.place),
            read(figure_id(*identity, "confirmed"), f"{label} as confirmed", confirmed.stated, confirmed.unit,
                 confirmed.place),
            self.rule,
            self.decision.reason.value,
            self.decision,
        )  # fmt: skip


@dataclass(frozen=True, slots=True)
class Confirmed:
    """Offers with the values that their bidders confirmed.

    Parameters
    ----------
    offers : tuple of Offer
        In the order given; those without a confirmed value are the same objects.
    confirmations : tuple of Confirmation
        What was confirmed, also where it changes nothing.
    findings : tuple of Finding
        An unset rule, confirmations that the rule does not allow, superseded ones.
    """

    offers: tuple[Offer, ...]
    confirmations: tuple[Confirmation, ...] = ()
    findings: tuple[Finding, ...] = ()

    @property
    def settled(self) -> frozenset[tuple[str, str, str]]:
        """Offer, lot and field of every confirmed value: what `find_clerical_errors` does not ask about again."""
        return frozenset((each.offer, each.lot, each.field) for each in self.confirmations)


def label_of(field: str) -> str:
    """Field of an offer in words.

    Parameters
    ----------
    field : str
        Name in the records.

    Returns
    -------
    str
        ``"load loss"``.
    """
    return LABELS.get(field) or _OTHER_LABELS.get(field) or field.replace("_", " ")


def apply_confirmations(tender: Tender, offers: Iterable[Offer], decisions: Sequence[Decision]) -> Confirmed:
    """Put confirmed values into offers.

    Parameters
    ----------
    tender : Tender
        With the rule on clarifications.
    offers : iterable of Offer
        As read.
    decisions : sequence of Decision
        In the order of their file; other kinds than ``"confirm value"`` are left to others.

    Returns
    -------
    Confirmed
        New offers beside the confirmations that made them, and findings.

    Notes
    -----
    A value that is confirmed as it was read needs no rule. "may not change price or guarantee" lets only the basis of
    a loss be confirmed, its rating or temperature. "may confirm what the bid itself proves" lets a value be confirmed
    that the bidder's own schedule gives (`find_clerical_errors`, or no-load loss, load loss and total by their sum), up
    to the rounding of the confirmed figure. Without the rule the evaluation stops.
    """
    offers = tuple(offers)
    by_name = {(offer.name, offer.lot.value): offer for offer in offers}
    latest: dict[tuple[str, str, str], Decision] = {}
    findings: list[Finding] = []
    for decision in decisions:
        if decision.kind != "confirm value" or decision.field is None or decision.value is None:
            continue
        key = (decision.bidder.value, decision.lot.value, decision.field.value)
        if key[:2] not in by_name or not _is_quantity(by_name[key[:2]], key[2]):
            findings.append(_not_applied(decision))
            continue
        if key in latest:
            findings.append(_superseded(latest[key], decision))
        latest[key] = decision
    judge = _Judge(tender, offers)
    confirmations = []
    for (name, lot, field), decision in latest.items():
        refusal = judge.refusal(by_name[name, lot], field, decision)
        if refusal is not None:
            findings.append(refusal)
        elif decision.value is not None:
            as_read = value_of(by_name[name, lot], field)
            rule = judge.sentence if as_read is None or as_read.value != decision.value.value else ""
            confirmations.append(Confirmation(name, lot, field, as_read, decision.value, decision, rule))
    changed = _changed(by_name, confirmations)
    return Confirmed(
        tuple(changed[offer.name, offer.lot.value] for offer in offers), tuple(confirmations), tuple(findings)
    )


def settled_by(
    findings: Iterable[Finding], confirmations: Sequence[Confirmation], offers: Iterable[Offer]
) -> tuple[Finding, ...]:
    """Findings of intake, those that a confirmed value answers as notes.

    Parameters
    ----------
    findings : iterable of Finding
        Of intake.
    confirmations : sequence of Confirmation
        As applied.
    offers : iterable of Offer
        As read or as confirmed.

    Returns
    -------
    tuple of Finding
        In the order given.
    """
    places = {(offer.name, offer.lot.value): offer for offer in offers}
    answers: dict[tuple[object, ...], Confirmation] = {}
    for each in confirmations:
        offer = places[each.offer, each.lot]
        place = offer.columns.get(each.field, offer.place)
        answers[offer.bidder.value, each.lot, label_of(each.field), place] = each
    return tuple(_answered(finding, answers) for finding in findings)


def _answered(finding: Finding, answers: Mapping[tuple[object, ...], Confirmation]) -> Finding:
    answer = answers.get((finding.bidder, finding.lot, finding.field, finding.place))
    if answer is None or finding.kind not in _ANSWERED:
        return finding
    rule = f"{finding.rule}; confirmed as {stated(answer.confirmed)} ({answer.decision.place})"
    return Finding("value-confirmed", finding.field, rule, finding.place, finding.got, finding.bidder, finding.lot)


def _changed(
    by_name: Mapping[tuple[str, str], Offer], confirmations: Iterable[Confirmation]
) -> dict[tuple[str, str], Offer]:
    offers = dict(by_name)
    for each in confirmations:
        offers[each.offer, each.lot] = with_value(offers[each.offer, each.lot], each.field, each.confirmed)
    return offers


def with_value(offer: Offer, field: str, quantity: Quantity) -> Offer:
    """Offer in which one quantity is another; the offer given stays as it is.

    Parameters
    ----------
    offer : Offer
        Any offer.
    field : str
        Field of the offer or of its commercial terms.
    quantity : Quantity
        What takes its place.

    Returns
    -------
    Offer
        A new record.
    """
    if field in type(offer).model_fields:
        return offer.model_copy(update={field: quantity})
    return offer.model_copy(update={"terms": offer.terms.model_copy(update={field: quantity})})


def _is_quantity(offer: Offer, field: str) -> bool:
    models = (type(offer).model_fields, type(offer.terms).model_fields)
    return any(_holds_quantity(fields[field].annotation) for fields in models if field in fields)


def _holds_quantity(annotation: object) -> bool:
    """Whether a field is one quantity, or none; a table of them is not."""
    if annotation is Quantity:
        return True
    return get_origin(annotation) is not dict and any(_holds_quantity(part) for part in get_args(annotation))


def _not_applied(decision: Decision) -> Finding:
    field = decision.field.value if decision.field else ""
    rule = "names no offer, or no figure of an offer, that is there"
    return Finding(
        "decision-not-applied", label_of(field), rule, decision.place, None, decision.bidder.value, decision.lot.value
    )


def _superseded(earlier: Decision, later: Decision) -> Finding:
    field = later.field.value if later.field else ""
    got = stated(earlier.value) if earlier.value else None
    rule = f"is confirmed once more, at {later.place}, and that decision holds"
    return Finding(
        "decision-superseded", label_of(field), rule, earlier.place, got, later.bidder.value, later.lot.value
    )


class _Judge:
    """Says what the rule on clarifications does not let a confirmation change."""

    def __init__(self, tender: Tender, offers: Sequence[Offer]) -> None:
        self.tender, self.offers = tender, offers
        self.setting = tender.rules.announced.clarifications
        self.sentence, self.clause = rule_sentence(tender, _RULE), rule_clause(tender, _RULE)
        self._suspicions: tuple[Suspicion, ...] | None = None

    def refusal(self, offer: Offer, field: str, decision: Decision) -> Finding | None:
        """Why a confirmed value cannot be used; None where it can."""
        value, as_read = decision.value, value_of(offer, field)
        if value is None or (as_read is not None and as_read.value == value.value):
            return None
        if self.setting is None:
            return self._unset(field, decision)
        if field in _EXPLAINING:
            return None
        if self.setting == "may not change price or guarantee":
            return self._forbidden(field, decision, f"may not be changed by a clarification: {self.clause}")
        if any(_is_rounded(proved, value, as_read) for proved in self._proved(offer, field)):
            return None
        return self._forbidden(field, decision, f"is not what the bid itself proves: {self.clause}")

    def _proved(self, offer: Offer, field: str) -> Iterator[Decimal]:
        """Values that the bidder's own schedule gives."""
        if self._suspicions is None:
            self._suspicions = find_clerical_errors(self.tender, self.offers)
        for suspicion in self._suspicions:
            for each in suspicion.suppositions:
                if (each.offer, each.lot, each.field) == (offer.name, offer.lot.value, field) and each.is_proved_by_bid:
                    yield each.value.value
        no_load, load, total = offer.no_load_loss_kw, offer.load_loss_kw, offer.total_loss_kw
        if field == "load_loss_kw" and load is None and no_load and total:
            yield total.value - no_load.value
        if field == "no_load_loss_kw" and no_load is None and load and total:
            yield total.value - load.value
        if field == "total_loss_kw" and total is None and load and no_load:
            yield no_load.value + load.value

    def _unset(self, field: str, decision: Decision) -> Finding:
        kind = rule_kind(_RULE)
        settings = " or ".join(f'"{setting}"' for setting in (kind.sentences if kind else ()))
        rule = f"must be announced as {settings}, since a confirmed {label_of(field)} hangs on it ({decision.place})"
        return Finding("rule-unset", f"rules.{_RULE}", rule, rule_place(self.tender, _RULE))

    def _forbidden(self, field: str, decision: Decision, rule: str) -> Finding:
        got = stated(decision.value) if decision.value else None
        who = (decision.bidder.value, decision.lot.value)
        return Finding("confirmation-not-allowed", label_of(field), rule, decision.place, got, *who)


def _is_rounded(proved: Decimal, confirmed: Quantity, as_read: Quantity | None) -> bool:
    """Whether a confirmed figure is the proved one, or is it rounded to no fewer digits than the figure as read."""
    if proved == confirmed.value:
        return True
    if as_read is not None and _digits(confirmed.stated) < _digits(as_read.stated):
        return False
    exponent = int(confirmed.value.as_tuple().exponent)
    return abs(ARITHMETIC.subtract(proved, confirmed.value)) <= Decimal(1).scaleb(exponent) / 2


def _digits(number: Decimal) -> int:
    return len(number.as_tuple().digits)
