"""What the papers show: figures chosen, ordered and worded, once for workbook, page and JSON."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

__all__ = [
    "CoolingStageView",
    "CorrectionView",
    "CostView",
    "DecisionView",
    "EvaluationView",
    "ExchangeView",
    "Fact",
    "FindingView",
    "InputFile",
    "LoadView",
    "LotRatesView",
    "LotView",
    "MarginView",
    "OfferView",
    "Particular",
    "PriceStepView",
    "RatesReport",
    "RatesView",
    "RecordView",
    "RuleDifferenceView",
    "RulesProofView",
    "SensitivityRow",
    "ShownFigure",
    "YearColumn",
    "YearTableView",
]


@dataclass(frozen=True, slots=True)
class ShownFigure:
    """One figure of the trail, ready to be shown, unfolded or written as a formula.

    Parameters
    ----------
    id : str
        Identity; operands refer to it.
    label : str
        What it is.
    value : Decimal
        Exact value, after rounding where there is one.
    unit : str
        Its unit; ``"1"`` for a pure number.
    operator : str
        ``"read"``, ``"rule"``, ``"constant"`` for leaves; ``"product"``, ``"quotient"``, ``"sum"``, ``"difference"``,
        ``"rounded"`` for arithmetic; ``"year table"`` for the sum of a column of a year table.
    operands : tuple of str
        Ids of the figures it was computed from, in writing order; for a year table its inputs.
    rounding_places : int or None
        Digits behind the decimal mark to which the result was rounded.
    rounding_mode : str or None
        ``"half away from zero"`` or ``"down"``.
    source : str
        Place, rule or definition in words; for arithmetic an empty text.
    text : str
        The value as printed, without unit.
    arithmetic : str
        One line that a clerk can follow with a calculator; for leaves the source in words.
    """

    id: str
    label: str
    value: Decimal
    unit: str
    operator: str
    operands: tuple[str, ...]
    rounding_places: int | None
    rounding_mode: str | None
    source: str
    text: str
    arithmetic: str


@dataclass(frozen=True, slots=True)
class CostView:
    """The five amounts of one offer, as ids of figures; None where an amount cannot be computed."""

    evaluated_price: str | None
    no_load_cost: str | None
    load_cost: str | None
    auxiliary_cost: str | None
    total_owning_cost: str | None


@dataclass(frozen=True, slots=True)
class MarginView:
    """Distance of a ranked offer to the nearest rival that is not cheaper, for the whole lot.

    Parameters
    ----------
    to : str
        The rival.
    amount : str
        Id of the figure of the difference of the total owning costs.
    percent_of_winner : Decimal
        The amount in percent of the winner's total owning cost, two places.
    no_load_loss_kw, load_loss_kw : Decimal or None
        The amount as kW of one unit's no-load or load loss, six significant digits; None where the rate is zero.
    """

    to: str
    amount: str
    percent_of_winner: Decimal
    no_load_loss_kw: Decimal | None
    load_loss_kw: Decimal | None


@dataclass(frozen=True, slots=True)
class Particular:
    """One value of an offer as read: what the bidder stated and where it stands.

    Parameters
    ----------
    name : str
        What it is.
    text : str
        The characters as they stood; empty where nothing was stated.
    unit : str
        Unit as stated.
    place : str
        Where it stood.
    figure : str or None
        Id of the figure that enters the costs, where it does.
    value : Decimal or None
        The number as read, in the unit as stated; None for words and for what was not stated.
    """

    name: str
    text: str
    unit: str
    place: str
    figure: str | None
    value: Decimal | None = None


@dataclass(frozen=True, slots=True)
class Fact:
    """Information beside the money: never part of an amount.

    Parameters
    ----------
    label : str
        What it is.
    text : str
        The value as printed.
    unit : str
        Unit, empty for a pure number.
    value : Decimal
        The value.
    """

    label: str
    text: str
    unit: str
    value: Decimal


@dataclass(frozen=True, slots=True)
class CorrectionView:
    """A value as read and the value that takes its place; the value as evaluated stands in the costs.

    Parameters
    ----------
    label : str
        What was corrected, in words.
    as_read, corrected : str
        Ids of both figures.
    rule, reason : str
        The announced rule that corrects, and what is wrong with the value as read.
    decision : str
        The bidder's recorded answer or confirmation in a sentence; empty where there is none.
    evaluated : str or None
        Id of the figure as evaluated, the third layer: a loss on the tender's basis, an evaluated price.
    """

    label: str
    as_read: str
    corrected: str
    rule: str
    reason: str
    decision: str
    evaluated: str | None = None


@dataclass(frozen=True, slots=True)
class PriceStepView:
    """One step from the quoted to the evaluated price.

    Parameters
    ----------
    name : str
        Kind of the step, as in `evaluation.result.PriceStep`.
    label : str
        What it does, in words.
    scope : str
        ``"unit"`` or ``"lot"``.
    sign : str
        ``"+"``, ``"−"``, ``"×"``, ``"÷"``; empty for a price that stands by itself.
    change : str or None
        Id of the figure that is added, taken away, multiplied or divided by.
    price : str
        Id of the price after the step.
    rule : str
        Why, with the place of the announced rule or adder.
    """

    name: str
    label: str
    scope: str
    sign: str
    change: str | None
    price: str
    rule: str


@dataclass(frozen=True, slots=True)
class OfferView:
    """One offer as the papers show it.

    Parameters
    ----------
    bidder : str
        Name as read, with the alternative where the offer is one; untrusted text.
    status : str
        ``"ranked"``, ``"not evaluated"`` or ``"non-responsive"``.
    rank : int or None
        1 for the lowest total owning cost; equal ranks are ties.
    rank_text : str
        ``"1"``, ``"1 ="`` for a tie, ``"–"`` where not ranked.
    particulars : tuple of Particular
        Price and guaranteed values as read.
    unit_price, exchange_rate, no_load_loss, load_loss, auxiliary_loss : str or None
        Ids of the figures that enter the costs; losses in kW.
    currency : str
        Currency of the quoted price, empty where unknown.
    per_unit, lot : CostView
        Amounts of one unit and of the whole lot.
    margin : MarginView or None
        For ranked offers with a rival behind them.
    above_winner : Decimal or None
        Total owning cost of the lot less the winner's; zero for the winner; None where not ranked.
    reasons : tuple of str
        Why it is not ranked; empty where ranked.
    assumptions : tuple of str
        Conversions that were made on assumptions, each in a sentence; they bind nobody until the bidder confirms.
    information : tuple of Fact
        Efficiency and energy, beside the money.
    corrections : tuple of CorrectionView
        Values that were corrected by rule or confirmed by the bidder.
    price_steps : tuple of PriceStepView
        From the quoted to the evaluated price: first per unit, then further items of the lot, where it has any.
    contract_price : str or None
        Id of what would be paid for the lot, in the currency of the bid; no adder for comparison is in it.
    total_without_preference : str or None
        Id of the total owning cost of the lot without a preference margin; None where the tender applies none.
    rank_without_preference : int or None
        Rank by these totals.
    tie_decided_by : str
        Criterion of the announced order that broke a tie of this offer; empty where none did.
    decisions : tuple of str
        Recorded decisions that took effect on the offer, each in a sentence with who, when, why and where.
    """

    bidder: str
    status: str
    rank: int | None
    rank_text: str
    particulars: tuple[Particular, ...]
    unit_price: str | None
    exchange_rate: str | None
    no_load_loss: str | None
    load_loss: str | None
    auxiliary_loss: str | None
    currency: str
    per_unit: CostView
    lot: CostView
    margin: MarginView | None
    above_winner: Decimal | None
    reasons: tuple[str, ...]
    assumptions: tuple[str, ...] = ()
    information: tuple[Fact, ...] = ()
    corrections: tuple[CorrectionView, ...] = ()
    price_steps: tuple[PriceStepView, ...] = ()
    contract_price: str | None = None
    total_without_preference: str | None = None
    rank_without_preference: int | None = None
    tie_decided_by: str = ""
    decisions: tuple[str, ...] = ()

    @property
    def has_price_steps(self) -> bool:
        """Whether more than a currency lies between the quoted and the evaluated price."""
        return any(step.name not in ("quoted", "currency", "evaluated") for step in self.price_steps)


@dataclass(frozen=True, slots=True)
class YearColumn:
    """One column of a year table: a name in code, a heading, a unit, and the values year by year."""

    name: str
    heading: str
    unit: str
    values: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class YearTableView:
    """The year-by-year table behind derived rates.

    Parameters
    ----------
    id : str
        Identity.
    columns : tuple of YearColumn
        ``year``, ``discount_factor``, ``energy_price_per_kwh``, ``carbon_cost_per_kwh`` (only where it counts),
        ``demand_charge_per_kw_year``, ``peak_load_pu``, ``cooling_hours`` and ``cooling_share_at_peak`` (only where
        they follow the load from year to year; then values, not formulas), ``no_load``, ``load``, ``auxiliary``; the
        last three are present values per kW, whose sums are the rates.
    inputs : mapping of str to str
        Name of an input of the derivation to the id of its figure: ``discount_rate_percent``,
        ``evaluation_period_years``, ``years_before_end`` (0, 0.5 or 1), ``energy_price_per_kwh`` (or
        ``energy_price_year_1`` … for a table by year), ``energy_price_escalation_percent``,
        ``escalate_before_year_1`` (0 or 1), ``demand_charge_per_kw_year``, ``demand_charge_escalation_percent``,
        ``load_factor`` and ``loss_factor_coefficient`` (absent where the loss factor is stated), ``loss_factor``,
        ``peak_load_pu``, ``peak_load_growth_percent``, ``peak_load_cap_pu`` (absent without cap),
        ``peak_responsibility_factor``, ``hours_energized``, ``hours_of_load``, ``cooling_hours``,
        ``cooling_share_at_peak``, ``upstream_gross_up``, ``price_delay_years`` and ``discount_delay_years`` (service
        after the date of the prices: prices escalate by (1+e)^delay before year 1, discount factors are times
        (1+r)^-delay), ``carbon_cost_per_kwh`` and ``carbon_cost_escalation_percent`` (absent where no carbon cost
        counts), ``peak_load_year_1`` … instead of ``peak_load_pu`` for a table by year.
    """

    id: str
    columns: tuple[YearColumn, ...]
    inputs: Mapping[str, str]


@dataclass(frozen=True, slots=True)
class CoolingStageView:
    """A stage of fans or pumps: from which load it runs, and how many hours in each year.

    Parameters
    ----------
    above_load_pu : float
        Load above which the stage runs. [per unit of the rating]
    share_percent : float
        Share of the auxiliary loss that it needs. [percent]
    hours_by_year : tuple of float
        Hours that it runs in each year of the evaluation period, counted by time. [hour/year]
    """

    above_load_pu: float
    share_percent: float
    hours_by_year: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class LoadView:
    """Load of a lot that comes from a profile.

    Parameters
    ----------
    file : str
        The profile.
    remarks : tuple of str
        What was recognized and accepted when it was read.
    facts : tuple of Fact
        Load factor, loss factor by time and, where the price moves, by price with the difference; implied coefficient.
    duration : tuple of (float, float)
        Points of the load duration curve, falling: hours a year at or above the load, and the load over the peak load
        of the year. At most a few hundred points, both ends included. [hour/year, 1]
    peak_load_by_year_pu : tuple of float
        Peak load of each year. [per unit of the rating]
    stages : tuple of CoolingStageView
        Cooling stages; empty where none follows the load.
    """

    file: str
    remarks: tuple[str, ...]
    facts: tuple[Fact, ...]
    duration: tuple[tuple[float, float], ...]
    peak_load_by_year_pu: tuple[float, ...]
    stages: tuple[CoolingStageView, ...]


@dataclass(frozen=True, slots=True)
class RatesView:
    """The rates that value the losses of a lot.

    Parameters
    ----------
    basis : str
        ``"announced"`` or ``"derived as announced"``.
    no_load, load, auxiliary : str or None
        Ids of the rates used, per kW; None for a lot without auxiliary rate.
    unit : str
        ``"NCU/kW"``.
    sources : tuple of str
        Where the rates come from, in sentences.
    year_table : YearTableView or None
        For rates derived as present worth.
    method : str
        ``"announced rates"``, ``"present worth"`` or ``"fixed charge rate"``.
    formulas : tuple of str
        The formulas of the method with their source, a line each.
    load_profile : LoadView or None
        Where the load comes from a profile.
    """

    basis: str
    no_load: str
    load: str
    auxiliary: str | None
    unit: str
    sources: tuple[str, ...]
    year_table: YearTableView | None
    method: str = ""
    formulas: tuple[str, ...] = ()
    load_profile: LoadView | None = None


@dataclass(frozen=True, slots=True)
class LotView:
    """One lot as the papers show it; offers stand ranked first, then non-responsive, then not evaluated."""

    id: str
    description: str
    quantity: int
    quantity_figure: str
    rated_power: str
    limits: tuple[str, ...]
    rates: RatesView
    offers: tuple[OfferView, ...]
    recommendation: str


@dataclass(frozen=True, slots=True)
class ExchangeView:
    """The exchange rates used: source, kind, date, evidence, and the figure of each currency."""

    source: str
    kind: str
    date: str
    evidence: str
    rates: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class FindingView:
    """One finding in the papers; `waiver` says who set it aside, when and why, and is empty where nobody did."""

    kind: str
    title: str
    effect: str
    place: str
    bidder: str
    lot: str
    statement: str
    remedy: str
    waiver: str = ""


@dataclass(frozen=True, slots=True)
class InputFile:
    """One input with its fingerprint."""

    path: str
    sha256: str


@dataclass(frozen=True, slots=True)
class RecordView:
    """What makes the run repeatable: tool version, time of the run, inputs."""

    tool_version: str
    generated_at: str
    inputs: tuple[InputFile, ...]


@dataclass(frozen=True, slots=True)
class DecisionView:
    """One decision by a person, as it stands in the file of decisions."""

    kind: str
    bidder: str
    lot: str
    field: str
    value: str
    reason: str
    who: str
    when: str
    evidence: str
    place: str


@dataclass(frozen=True, slots=True)
class RuleDifferenceView:
    """One rule that differs from what was published; empty texts where it is not stated."""

    key: str
    published: str
    used: str


@dataclass(frozen=True, slots=True)
class RulesProofView:
    """Whether the rules used are the rules published.

    Parameters
    ----------
    sentence : str
        The outcome in one sentence.
    holds : bool
        True only where a published file was kept and agrees.
    fingerprint : str
        SHA-256 of the rules used; empty where no file was kept.
    differences : tuple of RuleDifferenceView
        Key by key.
    """

    sentence: str
    holds: bool
    fingerprint: str
    differences: tuple[RuleDifferenceView, ...]


@dataclass(frozen=True, slots=True)
class EvaluationView:
    """Everything that the papers of one evaluation show.

    Parameters
    ----------
    reference, title, buyer, currency, opening_date, remark : str
        Identity of the tender; the last two may be empty.
    recommendation : str
        The result in one sentence over all lots.
    rules : tuple of str
        The rules that were applied, in sentences.
    method : tuple of str
        The method in sentences with its sources.
    cautions : tuple of str
        What the papers do not prove.
    lots : tuple of LotView
        In the order of the tender.
    exchange : ExchangeView or None
        Exchange rates, where the tender states any.
    findings : tuple of FindingView
        All findings, weightiest first.
    record : RecordView
        Versions and fingerprints.
    figures : mapping of str to ShownFigure
        Every figure behind every amount, by id, operands before results.
    rules_proof : RulesProofView or None
        Comparison with the rules as published; None where it was not made.
    decisions : tuple of DecisionView
        Decisions by people that the evaluation read.
    """

    reference: str
    title: str
    buyer: str
    currency: str
    opening_date: str
    remark: str
    recommendation: str
    rules: tuple[str, ...]
    method: tuple[str, ...]
    cautions: tuple[str, ...]
    lots: tuple[LotView, ...]
    exchange: ExchangeView | None
    findings: tuple[FindingView, ...]
    record: RecordView
    figures: Mapping[str, ShownFigure]
    rules_proof: RulesProofView | None = None
    decisions: tuple[DecisionView, ...] = ()


@dataclass(frozen=True, slots=True)
class SensitivityRow:
    """What a stated change of one input does to the rates, by their exact derivatives.

    Parameters
    ----------
    input : str
        What is changed.
    unit : str
        Its unit, empty for a pure number.
    value : str
        What it is now, as printed.
    change : str
        The change, with sign and unit: ``"+1 percentage point"``.
    a, b, c : float or None
        Derivative of each rate times the change; None where the rate does not exist or does not depend on the input.
        [currency/kW]
    """

    input: str
    unit: str
    value: str
    change: str
    a: float | None
    b: float | None
    c: float | None


@dataclass(frozen=True, slots=True)
class LotRatesView:
    """Rates of one lot for the planner: those that the tender uses, and a study beside announced ones.

    Parameters
    ----------
    id, description : str
        Of the lot.
    used : RatesView
        What the tender uses.
    study : RatesView or None
        A planner's derivation beside announced rates.
    comparison : tuple of str
        How far the announced rates lie from those of the study, in sentences.
    sensitivity : tuple of SensitivityRow
        Of the derived rates: those of the study where there is one, else the rates used.
    """

    id: str
    description: str
    used: RatesView
    study: RatesView | None
    comparison: tuple[str, ...] = ()
    sensitivity: tuple[SensitivityRow, ...] = ()


@dataclass(frozen=True, slots=True)
class RatesReport:
    """What `lossworth rates` shows: no offers, no ranking.

    Parameters
    ----------
    reference, title, currency : str
        Identity of the tender.
    lots : tuple of LotRatesView
        In the order of the tender.
    figures : mapping of str to ShownFigure
        Every figure behind the rates, operands before results.
    """

    reference: str
    title: str
    currency: str
    lots: tuple[LotRatesView, ...]
    figures: Mapping[str, ShownFigure]
