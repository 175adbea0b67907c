"""From the tender to the rules sheet: everything announced, in sentences, and everything that is not."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal

from ..evaluation.price_adders import point_term
from ..evaluation.rules_content import fingerprint, rules_content
from ..findings import one_line
from ..money import ARITHMETIC
from ..records.commercial import PaymentTerms
from ..records.rule_profiles import profile_named, settled_rules
from ..records.rules import RULE_KINDS, AnnouncedRules, RuleKind, setting_sentence
from ..records.tender import RoundingPoint, Tender
from .build_rules_lot import lot_rules
from .formats import as_stated, number
from .rules_view import RulesSection, RulesView, RuleView, SilentRuleView
from .wording import CAUTIONS, METHOD

__all__ = ["build_rules", "payment_phrases"]

_DISCOUNTED, _MARGIN = "discount to a common date", "margin added to other prices"
_PARTS = {
    RoundingPoint.PART_PER_UNIT: "Each part of the cost of one unit",
    RoundingPoint.PART_PER_LOT: "Each part of the cost of a lot",
}


def build_rules(tender: Tender, tool_version: str, generated_at: str) -> RulesView:
    """Rules sheet of a tender.

    Parameters
    ----------
    tender : Tender
        As announced or as drafted.
    tool_version, generated_at : str
        Which program writes it, and when.

    Returns
    -------
    RulesView
        For page, JSON and terminal.

    Raises
    ------
    EvaluationStopped
        If loads and prices cannot be brought together, or the tender names a profile that does not exist.
    """
    content = rules_content(tender)
    identity, announced = tender.identity, tender.rules.announced
    settled = settled_rules(announced)
    return RulesView(
        reference=one_line(identity.reference.value),
        title=one_line(identity.title.value),
        buyer=one_line(identity.buyer.value),
        currency=identity.currency.value,
        opening_date="" if identity.opening_date is None else identity.opening_date.isoformat(),
        remark="" if identity.remark is None else one_line(identity.remark.value),
        profile=_profile(announced),
        sections=(
            RulesSection("How offers are compared", tuple(_comparison(tender))),
            RulesSection("Prices and terms", tuple(_prices(tender, settled))),
        ),
        rules=tuple(_rules(announced, settled)),
        silent_rules=tuple(
            SilentRuleView(kind.key, kind.question, tuple(kind.sentences))
            for kind in RULE_KINDS
            if getattr(settled, kind.key) is None
        ),
        silent=tuple(_silent(tender, settled)),
        gaps=tuple(_gaps(tender, settled)),
        lots=lot_rules(tender),
        content=content,
        fingerprint=fingerprint(content),
        cautions=CAUTIONS,
        tool_version=tool_version,
        generated_at=generated_at,
    )


def _profile(announced: AnnouncedRules) -> str:
    profile = None if announced.profile is None else profile_named(announced.profile.value)
    if profile is None:
        return ""
    return f"Profile “{profile.name}”. {profile.use_when} What the tender states on its own overrides it."


def _comparison(tender: Tender) -> Iterator[str]:
    rounding = tender.rules.rounding
    currency = tender.identity.currency.value
    part = _PARTS[tender.rules.rounding_applies_to]
    yield METHOD[0]
    yield "Offers of a lot are ranked by total owning cost; the lowest ranks first. Prices alone do not decide."
    yield f"{part} is rounded to {rounding.quantum.normalize():f} {currency}, {rounding.mode.value}, and then added."
    yield "A missing loss is not zero: an offer without a loss that has a rate is not evaluated."
    yield "Limits are compared with the guaranteed values as stated, unrounded."
    yield (
        "Only guaranteed maxima are evaluated. The capitalized losses serve the comparison; what is paid is the "
        "contract price."
    )


def _rules(announced: AnnouncedRules, settled: AnnouncedRules) -> Iterator[RuleView]:
    for kind in RULE_KINDS:
        setting = getattr(settled, kind.key)
        if setting is None:
            continue
        own = getattr(announced, kind.key) is not None
        origin = "stated in the tender" if own or settled.profile is None else f"set by profile “{settled.profile}”"
        steps = setting if isinstance(setting, tuple) else (setting,)
        yield RuleView(kind.key, "; then ".join(steps), kind.question, _sentence(kind, settled), origin, kind.source)


def _sentence(kind: RuleKind, settled: AnnouncedRules) -> str:
    """Sentences of a rule's settings, with the number that a rule may need."""
    setting = getattr(settled, kind.key)
    if isinstance(setting, tuple):
        parts = [setting_sentence(kind, each) for each in setting]
        return " If they still tie: ".join(parts)
    sentence = setting_sentence(kind, setting)
    days, percent = settled.exchange_rate_days_before, settled.loss_tolerance_percent
    if setting == "days before opening" and days is not None:
        return f"{sentence} The number of days is {days.value.normalize():f}."
    if kind.key == "loss_tolerance" and percent is not None:
        return f"{sentence} The tolerance is {as_stated(percent.value)} %."
    return sentence


def _prices(tender: Tender, settled: AnnouncedRules) -> Iterator[str]:
    currency = tender.identity.currency.value
    yield f"The evaluation currency is {currency}. The rates of losses are in {currency}; only prices are converted."
    if tender.exchange is not None:
        known = ", ".join(sorted(tender.exchange.rates)) or "none"
        yield (
            f"Exchange rates are the {one_line(tender.exchange.kind.value)} rates of "
            f"{tender.exchange.date.isoformat()}, {one_line(tender.exchange.source.value)}. "
            f"Currencies beside {currency}: {known}. The rates themselves come with that day."
        )
    yield from _delivery(tender)
    if tender.taxes is not None:
        yield f"Prices are brought to one basis by the tax rate of {as_stated(tender.taxes.rate_percent.value)} %."
    yield from _payments(tender, settled)
    if tender.preference is not None and settled.preference == _MARGIN:
        yield (
            f"Preference: {as_stated(tender.preference.margin_percent.value)} % is added, for comparison only, to the "
            f"prices of offers outside the group “{one_line(tender.preference.group.value)}”; never to losses."
        )
    if tender.planned_award is not None:
        yield f"Bids must be valid up to the planned award, {tender.planned_award.isoformat()}."


def _delivery(tender: Tender) -> Iterator[str]:
    if tender.delivered_point is not None:
        yield f"Prices are compared as delivered: {one_line(tender.delivered_point.value)}."
    for level in tender.delivery_levels:
        adders = []
        if level.percent_of_price is not None:
            adders.append(f"{as_stated(level.percent_of_price.value)} % of the price after discounts")
        if level.amount_per_unit is not None:
            adders.append(f"{as_stated(level.amount_per_unit.value)} {tender.identity.currency} per unit")
        yield f"To a price {level.term} is added: {' and '.join(adders) or 'nothing'}."


def payment_phrases(terms: PaymentTerms) -> str:
    """The tender's own payments in words.

    Parameters
    ----------
    terms : PaymentTerms
        As announced.

    Returns
    -------
    str
        ``"30 % with the order, 70 % 36 weeks after the order"``.
    """
    phrases = []
    for payment in terms.payments:
        weeks = payment.weeks_after_order.value
        when = f"{as_stated(weeks)} weeks after the order" if weeks else "with the order"
        phrases.append(f"{number(ARITHMETIC.multiply(payment.share.value, Decimal(100)))} % {when}")
    return ", ".join(phrases)


def _payments(tender: Tender, settled: AnnouncedRules) -> Iterator[str]:
    terms = tender.payment_terms
    if terms is None:
        return
    pays = f"The tender pays {payment_phrases(terms)}. " if terms.payments else ""
    rate = f"The interest rate for other terms is {as_stated(terms.interest_rate_percent.value)} % a year."
    if stated := f"{pays}{rate if settled.payment_terms == _DISCOUNTED else ''}".strip():
        yield stated


def _silent(tender: Tender, settled: AnnouncedRules) -> Iterator[str]:
    """What no rule of the list covers, and the tender does not announce either."""
    if tender.exchange is None:
        yield f"No exchange rate: a price in another currency than {tender.identity.currency} cannot be evaluated."
    if not tender.delivery_levels and tender.delivered_point is None:
        yield "No adders for other price terms: all prices are taken as delivered alike."
    elif not tender.delivery_levels:
        yield "No adders for other price terms: an offer under another delivery term is not evaluated."
    if tender.payment_terms is None:
        yield "No payment schedule and no interest rate."
    if tender.preference is None:
        yield "No preference."
    elif settled.preference == "none":
        yield f"No preference: the margin at {tender.preference.place} is not used, since the rule applies none."
    if tender.planned_award is None:
        yield "No planned day of award: the validity of bids is not compared with it."


def _gaps(tender: Tender, settled: AnnouncedRules) -> Iterator[str]:
    """A rule that is announced and cannot be applied as it stands."""
    terms = tender.payment_terms
    if settled.payment_terms == _DISCOUNTED and terms is None:
        yield "Payments are to be discounted, but the tender states no interest rate and no schedule ([payment])."
    elif settled.payment_terms == _DISCOUNTED and terms is not None and not terms.payments:
        yield "Payments are to be discounted, but the tender states no schedule of its own ([[payment.part]])."
    if settled.preference == _MARGIN and tender.preference is None:
        yield "A preference margin is to be added, but the tender states none ([preference])."
    if settled.preference is None and tender.preference is not None:
        yield "The tender states a preference margin, but no rule says whether it is added (rules.preference)."
    if settled.exchange_rate_day == "days before opening" and settled.exchange_rate_days_before is None:
        yield "The exchange rate is that of some days before opening, but the tender does not say how many."
    if settled.taxes is not None and tender.taxes is None:
        yield f"Taxes are to be {settled.taxes}, but the tender states no rate ([taxes])."
    yield from _gaps_of_delivery(tender)


def _gaps_of_delivery(tender: Tender) -> Iterator[str]:
    if tender.delivered_point is not None and not tender.delivery_levels and point_term(tender) is None:
        yield (
            f"Prices are compared at {one_line(tender.delivered_point.value)}, which names no delivery term, and no "
            "term has an adder ([[delivery.level]]): no offer that states its term could be evaluated."
        )
    for lot in tender.lots:
        adder = lot.delivery_adder_percent_per_week or lot.delivery_adder_per_week
        if adder is not None and lot.delivery_without_adder_weeks is None:
            yield (
                f"Lot {lot.id} adds to the price for each week of delivery, but does not say after which week "
                "(delivery_without_adder_weeks)."
            )
