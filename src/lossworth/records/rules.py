"""Rules on which procurement regimes disagree: each a setting that the tender announces, none with a hidden default."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from pydantic import Field

from ..findings import Place
from .quantity import AtLeast0, Entry, Record, WholeNumber

__all__ = ["PUBLISHED_RULES", "RULE_KINDS", "AnnouncedRules", "RuleKind", "TieBreaker", "setting_sentence"]

#: Name of the file in which the rules are kept as published, beside the tender file.
PUBLISHED_RULES = "published_rules.json"

TieBreaker = Literal["lower no-load loss", "lower evaluated price", "earlier delivery", "drawing of lots"]


class AnnouncedRules(Record):
    """Settings as announced; None where the tender is silent. `RULE_KINDS` says what each means."""

    profile: Entry | None = None
    arithmetic_errors: Literal["correct", "reject", "take as read"] | None = None
    unit_price_against_total: Literal["unit price governs", "total governs"] | None = None
    misplaced_decimal: Literal["total governs", "no exception"] | None = None
    missing_item: Literal["highest of the others", "average of the others", "reject"] | None = None
    missing_item_among: Literal["all offers received", "responsive offers"] | None = None
    unconditional_discounts: Literal["deduct", "ignore"] | None = None
    prompt_payment_discounts: Literal["deduct", "ignore"] | None = None
    exchange_rate_day: Literal["day of opening", "days before opening", "day of award"] | None = None
    exchange_rate_days_before: WholeNumber | None = None
    taxes: Literal["excluded", "included"] | None = None
    payment_terms: Literal["discount to a common date", "ignore"] | None = None
    loss_guarantee: Literal["each unit", "average of lot"] | None = None
    loss_tolerance: (
        Literal[
            "none, the guarantee is a ceiling",
            "allowed at test, money due above the guarantee",
            "evaluate at guarantee plus tolerance",
        ]
        | None
    ) = None
    loss_tolerance_percent: AtLeast0 | None = None
    price_variation: Literal["evaluate at the base date", "reject variable prices"] | None = None
    preference: Literal["none", "margin added to other prices"] | None = None
    alternatives: (
        Literal[
            "not accepted",
            "only if the base offer is responsive",
            "only of the lowest ranked base bidder",
            "as offers of their own",
        ]
        | None
    ) = None
    tie_order: tuple[TieBreaker, ...] | None = None
    clarifications: Literal["may not change price or guarantee", "may confirm what the bid itself proves"] | None = None
    places: dict[str, Place] = Field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class RuleKind:
    """One rule: its key, the question that it answers, and the sentence that each setting prints in the tender.

    Parameters
    ----------
    key : str
        Field of `AnnouncedRules` and key of the table [rules] in the tender file.
    question : str
        What it decides.
    sentences : dict of str to str
        Setting to the sentence for the tender document.
    source : str
        Where regimes are seen to differ.
    """

    key: str
    question: str
    sentences: dict[str, str]
    source: str


def setting_sentence(kind: RuleKind, setting: str) -> str:
    """Sentence for the tender document.

    Parameters
    ----------
    kind : RuleKind
        The rule.
    setting : str
        One of its settings.

    Returns
    -------
    str
        The sentence.

    Raises
    ------
    KeyError
        If the rule has no such setting.
    """
    return kind.sentences[setting]


RULE_KINDS: tuple[RuleKind, ...] = (
    RuleKind(
        "arithmetic_errors",
        "What becomes of a price schedule whose figures do not add up?",
        {
            "correct": "Arithmetic errors are corrected by the rules below, and the bidder is told.",
            "reject": "The price as read out is final; an offer with an arithmetic error is rejected.",
            "take as read": "The unit price as read is evaluated; arithmetic errors are not corrected.",
        },
        "World Bank standard bidding documents for goods (from memory) correct; a clause in Kenyan tenders makes the "
        "sum as read final",
    ),
    RuleKind(
        "unit_price_against_total",
        "Which figure governs where unit price times quantity is not the total?",
        {
            "unit price governs": "Where unit price times quantity differs from the total, the unit price governs.",
            "total governs": "Where unit price times quantity differs from the total, the total governs.",
        },
        "bid-error clauses of several authorities: the unit price shall prevail",
    ),
    RuleKind(
        "misplaced_decimal",
        "What if the decimal mark of the unit price is obviously misplaced?",
        {
            "total governs": "Where the decimal mark of the unit price is obviously misplaced, the total governs.",
            "no exception": "A misplaced decimal mark is treated as any other arithmetic error.",
        },
        "World Bank standard bidding document for goods, instructions to bidders, clause on correction (from memory)",
    ),
    RuleKind(
        "missing_item",
        "What price stands in for an item that a bidder does not price?",
        {
            "highest of the others": "For comparison only, the highest price of the other offers stands in.",
            "average of the others": "For comparison only, the average price of the other offers stands in.",
            "reject": "An offer that leaves an item unpriced is rejected.",
        },
        "goods bidding document, Section III evaluation criteria: highest price quoted by the other bidders",
    ),
    RuleKind(
        "missing_item_among",
        "Whose prices stand in for a missing one?",
        {
            "all offers received": "All offers received are counted, so that rejecting one does not move the others.",
            "responsive offers": "Only responsive offers are counted.",
        },
        "our own reasoning, no source",
    ),
    RuleKind(
        "unconditional_discounts",
        "Are unconditional discounts deducted before comparison?",
        {
            "deduct": "Unconditional discounts are deducted before comparison.",
            "ignore": "Discounts are not considered in the evaluation.",
        },
        "World Bank Standard Bid Evaluation Form, Table 6",
    ),
    RuleKind(
        "prompt_payment_discounts",
        "Are discounts for prompt payment deducted before comparison?",
        {
            "deduct": "Discounts for prompt payment are deducted before comparison.",
            "ignore": "Discounts for prompt payment are not considered in the evaluation.",
        },
        "US Comptroller General decisions B-165914 and B-176346",
    ),
    RuleKind(
        "exchange_rate_day",
        "The exchange rate of which day converts prices?",
        {
            "day of opening": "Prices are converted at the rate of the day of bid opening.",
            "days before opening": "Prices are converted at the rate of a stated number of days before bid opening.",
            "day of award": "Prices are converted at the rate of the day of award.",
        },
        "FAR 52.225-17: rate in effect on the date of bid opening",
    ),
    RuleKind(
        "taxes",
        "Are taxes part of the evaluated price?",
        {
            "excluded": "Prices are compared without taxes; a tax that a price includes is taken out.",
            "included": "Prices are compared with taxes; a tax that a price leaves out is added.",
        },
        "FAR 14.201-8 (d); the code of one US city includes taxes",
    ),
    RuleKind(
        "payment_terms",
        "Do payment terms that differ from those of the tender move the evaluated price?",
        {
            "discount to a common date": "Payments are discounted to a common date at the announced interest rate.",
            "ignore": "Payment terms are not considered in the evaluation.",
        },
        "deviation in payment schedule, goods bidding document, Section III (from memory)",
    ),
    RuleKind(
        "loss_guarantee",
        "Does a guarantee hold for each unit or for the average of the lot?",
        {
            "each unit": "Guaranteed losses hold for each unit.",
            "average of lot": "Guaranteed losses hold for the average of the units of a lot.",
        },
        "bid form of a US city (1988): guaranteed average no load losses",
    ),
    RuleKind(
        "loss_tolerance",
        "What becomes of a tolerance on guaranteed losses?",
        {
            "none, the guarantee is a ceiling": "The guarantee is a ceiling; no plus tolerance is allowed.",
            "allowed at test, money due above the guarantee": (
                "The tolerance of the standard holds at acceptance; money is due for each kilowatt above the guarantee."
            ),
            "evaluate at guarantee plus tolerance": (
                "Offers are evaluated at the guarantee plus the tolerance that the bidder claims."
            ),
        },
        "IEC 60076-1:1993+A1:1999 Table 1",
    ),
    RuleKind(
        "price_variation",
        "How are prices treated that follow an index?",
        {
            "evaluate at the base date": "Variable prices are evaluated at the base date.",
            "reject variable prices": "Only firm prices are accepted.",
        },
        "tender of an Indian distribution utility (2022): basis of prices variable",
    ),
    RuleKind(
        "preference",
        "Is a preference margin applied?",
        {
            "none": "No preference is applied.",
            "margin added to other prices": "The announced margin is added to the prices of offers outside the group.",
        },
        "FAR 25.105 (b)",
    ),
    RuleKind(
        "alternatives",
        "Are alternatives evaluated?",
        {
            "not accepted": "Alternatives are not accepted.",
            "only if the base offer is responsive": "An alternative is evaluated if the base offer is responsive.",
            "only of the lowest ranked base bidder": (
                "Only the alternative of the bidder whose base offer ranks first is evaluated."
            ),
            "as offers of their own": "Alternatives are evaluated as offers of their own.",
        },
        "agenda of a US city (2017) with two columns a bidder",
    ),
    RuleKind(
        "tie_order",
        "How is a tie broken?",
        {
            "lower no-load loss": "Of tied offers the one with the lower no-load loss comes first.",
            "lower evaluated price": "Of tied offers the one with the lower evaluated price comes first.",
            "earlier delivery": "Of tied offers the one with the earlier delivery comes first.",
            "drawing of lots": "A tie is broken by drawing lots before witnesses.",
        },
        "FAR 14.408-6 (b)",
    ),
    RuleKind(
        "clarifications",
        "What may a clarification touch?",
        {
            "may not change price or guarantee": "A clarification changes neither price nor guaranteed value.",
            "may confirm what the bid itself proves": (
                "A clarification may confirm a value that the bid itself proves, and changes nothing else."
            ),
        },
        "FAR 14.407-2; clause of a tender: no change in the price or substance shall be sought",
    ),
)
