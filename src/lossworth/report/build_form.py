"""From the tender to the bid form: what is asked of the whole bid and of each lot."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal
from typing import get_args

from ..evaluation.rules_content import fingerprint, rules_content
from ..findings import one_line
from ..records.bid_columns import heading_text, payment_label
from ..records.commercial import Incoterm
from ..records.rule_profiles import settled_rules
from ..records.rules import RULE_KINDS, AnnouncedRules, setting_sentence
from ..records.tender import Tender
from .bid_form_view import Answer, BidFormView, FormField, FormGroup, Particulars
from .build_form_lot import form_columns, form_lots
from .build_rules import payment_phrases
from .formats import number

__all__ = ["build_form"]

_MOST_ALTERNATIVES = 12
_SHARE = Answer("number", above_zero=False, at_most=Decimal(100), prompt="Percent of the price; all payments make 100.")

#: Requirements on a schedule of guaranteed particulars: names in the trade's words, from memory.
_PARTICULARS = (
    Particulars(
        "Maker and tests",
        (
            ("Maker of the unit and works", ""),
            ("Standards that the unit complies with", ""),
            ("Type test report: laboratory, number, day", ""),
            ("Method and circuit of the loss measurement", ""),
        ),
    ),
    Particulars(
        "Ratings",
        (
            ("Rated power of each cooling stage", "kVA"),
            ("Phases and frequency", "Hz"),
            ("Rated voltages, high and low side", "kV"),
            ("Vector group", ""),
            ("Taps: type, range, steps", ""),
        ),
    ),
    Particulars(
        "Losses, currents and impedance beside the guaranteed ones",
        (
            ("No-load loss at 90 % of rated voltage", "kW"),
            ("No-load loss at 110 % of rated voltage", "kW"),
            ("No-load current at 90 %, 100 %, 110 % of rated voltage", "%"),
            ("Impedance at the highest and the lowest tap", "%"),
            ("Resistance R and reactance X at the principal tap", "%"),
            ("Winding resistance, high and low side, with temperature", "Ω"),
            ("Efficiency at full load, power factor 1 and 0.8", "%"),
            ("Voltage regulation at full load, power factor 1 and 0.8", "%"),
        ),
    ),
    Particulars(
        "Temperatures and insulation",
        (
            ("Top-oil temperature rise", "K"),
            ("Mean winding temperature rise", "K"),
            ("Hot-spot temperature rise", "K"),
            ("Lightning impulse level, high and low side", "kV"),
            ("Power-frequency level, high and low side", "kV"),
        ),
    ),
    Particulars(
        "Design and dimensions",
        (
            ("Flux density at rated voltage", "T"),
            ("Current density, high and low side", "A/mm²"),
            ("Core steel grade", ""),
            ("Conductor material, high and low side", ""),
            ("Volume of the insulating liquid", "L"),
            ("Total mass and transport mass", "kg"),
            ("Length, width, height", "mm"),
        ),
    ),
)


def build_form(tender: Tender) -> BidFormView:
    """Bid form of a tender.

    Parameters
    ----------
    tender : Tender
        As announced or as drafted.

    Returns
    -------
    BidFormView
        For the workbook.

    Raises
    ------
    EvaluationStopped
        If loads and prices cannot be brought together, or the tender names a profile that does not exist.
    """
    identity = tender.identity
    settled_content = rules_content(tender)
    rules = settled_rules(tender.rules.announced)
    accepts = rules.alternatives not in (None, "not accepted")
    return BidFormView(
        reference=one_line(identity.reference.value),
        title=one_line(identity.title.value),
        buyer=one_line(identity.buyer.value),
        opening_date="" if identity.opening_date is None else identity.opening_date.isoformat(),
        remark="" if identity.remark is None else one_line(identity.remark.value),
        fingerprint=fingerprint(settled_content),
        currency=identity.currency.value,
        groups=(_bidder(), _terms(tender, rules), *_payment(tender), _declarations(rules), _signature()),
        columns=form_columns(tender, rules),
        lots=form_lots(tender, rules),
        alternative_rows=min(_MOST_ALTERNATIVES, 2 * len(tender.lots)) if accepts else 0,
        alternatives_rule=_sentence(rules, "alternatives"),
        particulars=_PARTICULARS,
    )


def _sentence(rules: AnnouncedRules, key: str) -> str:
    kind = next(kind for kind in RULE_KINDS if kind.key == key)
    setting = getattr(rules, key)
    return "" if setting is None else setting_sentence(kind, setting)


def _bidder() -> FormGroup:
    return FormGroup(
        "Bidder",
        (
            FormField(heading_text("bidder"), Answer(prompt="Name as it shall stand in the contract.")),
            FormField("Address", Answer()),
            FormField("Contact person", Answer()),
            FormField("Electronic mail", Answer()),
            FormField("Telephone", Answer(), needed=False),
            FormField("Own reference of the bid", Answer(), needed=False),
        ),
    )


def _terms(tender: Tender, rules: AnnouncedRules) -> FormGroup:
    return FormGroup("Prices of the whole bid", tuple(_terms_fields(tender, rules)), _terms_note(tender, rules))


def _terms_note(tender: Tender, rules: AnnouncedRules) -> str:
    parts = [_sentence(rules, "price_variation"), _sentence(rules, "taxes")]
    if tender.delivered_point is not None:
        parts.insert(0, f"Prices are compared as delivered: {one_line(tender.delivered_point.value)}.")
    return " ".join(part for part in parts if part)


def _terms_fields(tender: Tender, rules: AnnouncedRules) -> Iterator[FormField]:
    currencies = _currencies(tender)
    currency = Answer("choice", choices=currencies, prompt="One currency for all prices of the bid.")
    yield FormField(heading_text("currency"), currency, fixed=currencies[0] if len(currencies) == 1 else "")
    terms = Answer("choice", choices=_price_terms(tender), prompt="Incoterms 2020 rule of all prices of the bid.")
    yield FormField(heading_text("delivery_term"), terms)
    firm_only = rules.price_variation == "reject variable prices"
    basis = Answer("choice", choices=("firm",) if firm_only else ("firm", "variable"))
    yield FormField(heading_text("price_basis"), basis)
    yield FormField(heading_text("tax_included"), Answer("choice", choices=("yes", "no")))
    earliest = tender.planned_award or tender.identity.opening_date
    prompt = "Last day on which the bid can be accepted, as 2026-12-31."
    if tender.planned_award is not None:
        prompt += f" The award is planned for {tender.planned_award.isoformat()}."
    yield FormField(heading_text("valid_until"), Answer("date", earliest=earliest, prompt=prompt))
    percent = Answer("number", above_zero=False, at_most=Decimal(100))
    if rules.prompt_payment_discounts != "ignore":
        yield FormField(heading_text("prompt_payment_discount_percent"), percent, needed=False)
    if rules.loss_tolerance == "evaluate at guarantee plus tolerance":
        yield FormField(heading_text("claimed_tolerance_percent"), percent, needed=False)


def _currencies(tender: Tender) -> tuple[str, ...]:
    others = () if tender.exchange is None else tuple(tender.exchange.rates)
    return tuple(dict.fromkeys((tender.identity.currency.value, *others)))


def _price_terms(tender: Tender) -> tuple[str, ...]:
    """Rules for which the tender announces adders, and that of its delivered point; all where it announces none."""
    every: tuple[str, ...] = get_args(Incoterm)
    point = "" if tender.delivered_point is None else tender.delivered_point.value
    named = {level.term for level in tender.delivery_levels} | {word for word in point.split() if word in every}
    return tuple(term for term in every if term in named) if tender.delivery_levels else every


def _payment(tender: Tender) -> Iterator[FormGroup]:
    terms = tender.payment_terms
    if terms is None:
        return
    weeks = [number(payment.weeks_after_order.value) for payment in terms.payments]
    labels = dict.fromkeys((payment_label("0"), *map(payment_label, weeks), payment_label(None)))
    note = f"The tender pays {payment_phrases(terms)}. Leave blank to accept that; else all payments make 100 %."
    yield FormGroup("Payment", tuple(FormField(label, _SHARE, needed=False, is_share=True) for label in labels), note)


def _declarations(rules: AnnouncedRules) -> FormGroup:
    whose = {"each unit": " for each unit", "average of lot": " for the average of the units of a lot"}
    holds = whose.get(rules.loss_guarantee or "", "")
    yes_no = Answer("choice", choices=("yes", "no"))
    statements = (
        "The rules of the evaluation with the fingerprint above are accepted.",
        f"The stated losses are guaranteed maxima{holds}.",
        "The guaranteed values will be proved by routine tests, and by type tests where the tender asks for them.",
        "Every deviation from the tender is stated in the price schedule; there is no other.",
    )
    return FormGroup("Declarations", tuple(FormField(statement, yes_no) for statement in statements))


def _signature() -> FormGroup:
    return FormGroup(
        "Signature",
        (
            FormField("Name and function", Answer()),
            FormField("Place", Answer(), needed=False),
            FormField("Day", Answer("date", prompt="As 2026-09-01.")),
            FormField("Signature, on paper", Answer(), needed=False),
        ),
    )
