"""From a result to the view: the only step at which figures are chosen, ordered and worded."""

from __future__ import annotations

from collections.abc import Iterable
from decimal import ROUND_HALF_UP, Context, Decimal

from ..evaluation.owning_cost import auxiliary_loss
from ..evaluation.pricing import quoted_price
from ..evaluation.result import (
    EvaluatedOffer,
    Evaluation,
    Information,
    LoadFacts,
    LotEvaluation,
    LotRates,
    Margin,
    OwningCost,
    Status,
    YearTable,
)
from ..evaluation.rules_proof import RulesProof
from ..findings import KINDS, Effect, Finding, one_line
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..trail import Figure
from .build_price_view import correction_views, decision_sentence, items_price, price_roots, price_step_views
from .build_record_view import decision_views, rules_proof_view
from .build_told_findings import told_findings
from .figure_text import shown_figures
from .formats import as_stated
from .view import (
    CoolingStageView,
    CostView,
    EvaluationView,
    ExchangeView,
    Fact,
    FindingView,
    LoadView,
    LotView,
    MarginView,
    OfferView,
    Particular,
    RatesView,
    RecordView,
    YearColumn,
    YearTableView,
)
from .wording import CAUTIONS, METHOD, formulas, limits, lot_recommendation, rate_sources, recommendation, rules

__all__ = ["build_view", "rates_view"]

_PARTICULARS = (
    ("unit_price", "unit price"),
    ("no_load_loss_kw", "no-load loss P0"),
    ("load_loss_kw", "load loss Pk"),
    ("auxiliary_loss_kw", "auxiliary loss Paux"),
    ("total_loss_kw", "total loss"),
    ("impedance_percent", "impedance"),
    ("delivery_weeks", "delivery"),
    ("quantity", "quantity"),
)
_COLUMNS = (
    ("year", "year", "1"),
    ("discount_factor", "discount factor", "1"),
    ("energy_price_per_kwh", "energy price", "{currency}/kWh"),
    ("carbon_cost_per_kwh", "carbon cost", "{currency}/kWh"),
    ("demand_charge_per_kw_year", "demand charge", "{currency}/(kW year)"),
    ("peak_load_pu", "peak load, per unit", "1"),
    ("cooling_hours", "cooling hours, by price", "h/year"),
    ("cooling_share_at_peak", "cooling share at peak", "1"),
    ("no_load", "no-load, present value", "{currency}/kW"),
    ("load", "load, present value", "{currency}/kW"),
    ("auxiliary", "auxiliary, present value", "{currency}/kW"),
)
_TAX = {True: "tax included", False: "without tax", None: "tax not stated"}
_SIX_DIGITS = Context(prec=6, rounding=ROUND_HALF_UP)


def build_view(evaluation: Evaluation, record: RecordView, proof: RulesProof | None = None) -> EvaluationView:
    """View of an evaluation, from which every paper is made.

    Parameters
    ----------
    evaluation : Evaluation
        The result.
    record : RecordView
        Versions and fingerprints, which come from outside.
    proof : RulesProof or None
        Comparison with the rules as published; None where no file was kept.

    Returns
    -------
    EvaluationView
        Figures chosen, ordered and worded.
    """
    tender = evaluation.tender
    identity = tender.identity
    currency = identity.currency.value
    return EvaluationView(
        reference=one_line(identity.reference.value),
        title=one_line(identity.title.value),
        buyer=one_line(identity.buyer.value),
        currency=currency,
        opening_date="" if identity.opening_date is None else identity.opening_date.isoformat(),
        remark="" if identity.remark is None else one_line(identity.remark.value),
        recommendation=recommendation(evaluation.lots),
        rules=rules(tender),
        method=METHOD,
        cautions=CAUTIONS,
        lots=tuple(_lot(tender, lot, evaluation) for lot in evaluation.lots),
        exchange=_exchange(tender, evaluation),
        findings=tuple(_finding(finding) for finding in told_findings(evaluation)),
        record=record,
        figures=shown_figures(_roots(evaluation), currency),
        rules_proof=rules_proof_view(proof),
        decisions=decision_views(evaluation),
    )


def _roots(evaluation: Evaluation) -> Iterable[Figure]:
    yield from evaluation.exchange_rates.values()
    for lot in evaluation.lots:
        yield lot.quantity
        yield from (rate for rate in (lot.rates.no_load, lot.rates.load, lot.rates.auxiliary) if rate is not None)
        for offer in lot.offers:
            yield from (figure for figure in _entering(offer, lot).values() if figure is not None)
            for cost in (offer.per_unit, offer.lot):
                yield from (figure for figure in _amounts(cost) if figure is not None)
            if offer.margin is not None:
                yield offer.margin.amount
            yield from price_roots(offer)


def _amounts(cost: OwningCost) -> tuple[Figure | None, ...]:
    return (cost.evaluated_price, cost.no_load_cost, cost.load_cost, cost.auxiliary_cost, cost.total_owning_cost)


def _entering(offer: EvaluatedOffer, lot: LotEvaluation) -> dict[str, Figure | None]:
    """The figures of an offer that enter its costs."""
    used = offer.on_basis.offer
    return {
        "unit_price": quoted_price(used),
        "no_load_loss": offer.on_basis.no_load_loss,
        "load_loss": offer.on_basis.load_loss,
        "auxiliary_loss": None if lot.rates.auxiliary is None else auxiliary_loss(used, lot.lot),
    }


def _lot(tender: Tender, lot: LotEvaluation, evaluation: Evaluation) -> LotView:
    currency = tender.identity.currency.value
    power = lot.lot.rated_power_kva
    return LotView(
        id=lot.lot.id,
        description=one_line(lot.lot.description.value),
        quantity=int(lot.quantity.value),
        quantity_figure=lot.quantity.id,
        rated_power=f"{as_stated(power.stated)} {power.unit}",
        limits=limits(lot.lot),
        rates=_rates(tender, lot),
        offers=tuple(_offer(offer, lot, evaluation) for offer in lot.offers),
        recommendation=lot_recommendation(lot, currency, tender.rules.announced.tie_order or ()),
    )


def _rates(tender: Tender, lot: LotEvaluation) -> RatesView:
    return rates_view(lot.rates, lot.lot, rate_sources(tender, lot.lot), tender.identity.currency.value)


def rates_view(rates: LotRates, lot: Lot, sources: tuple[str, ...], currency: str) -> RatesView:
    """Rates of a lot, as ids of their figures, with their year table.

    Parameters
    ----------
    rates : LotRates
        Announced or derived.
    lot : Lot
        Whose losses they value.
    sources : tuple of str
        Where they come from, in sentences.
    currency : str
        Evaluation currency.

    Returns
    -------
    RatesView
        Ready for the papers.
    """
    return RatesView(
        basis=rates.basis.value,
        no_load=rates.no_load.id,
        load=rates.load.id,
        auxiliary=None if rates.auxiliary is None else rates.auxiliary.id,
        unit=rates.no_load.unit,
        sources=sources,
        year_table=None if rates.table is None else _year_table(rates.table, currency),
        method=rates.method,
        formulas=formulas(rates, lot),
        load_profile=None if rates.load_facts is None else _load_profile(rates.load_facts),
    )


def _load_profile(facts: LoadFacts) -> LoadView:
    labels = {
        "load_factor": "load factor",
        "loss_factor_by_time": "loss factor, by time",
        "loss_factor": "loss factor, by price" if "loss_factor_by_time" in facts.figures else "loss factor",
    }
    shown = [Fact(labels[name], _places(figure.value, 4), "", figure.value) for name, figure in facts.figures.items()]
    by_time = facts.figures.get("loss_factor_by_time")
    if by_time is not None:
        more = (100 * (facts.figures["loss_factor"].value / by_time.value - 1)).quantize(Decimal("0.01"))
        shown.append(Fact("difference that the price makes", as_stated(more), "%", more))
    shown += _implied_coefficient(facts)
    return LoadView(
        file=one_line(facts.profile.file),
        remarks=tuple(one_line(remark) for remark in facts.profile.remarks),
        facts=tuple(shown),
        duration=facts.duration,
        peak_load_by_year_pu=facts.peak_load_by_year_pu,
        stages=tuple(
            CoolingStageView(stage.above_load_pu, 100 * stage.share, stage.hours_by_year) for stage in facts.stages
        ),
    )


def _places(value: Decimal, places: int) -> str:
    return as_stated(value.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP))


def _implied_coefficient(facts: LoadFacts) -> list[Fact]:
    """Coefficient k of the profile, beside the fixed ones that a load factor alone would need."""
    load, loss = facts.figures["load_factor"].value, facts.figures.get("loss_factor_by_time")
    by_time = facts.figures["loss_factor"].value if loss is None else loss.value
    if load in (0, 1):
        return []
    k = ((by_time - load**2) / (load - load**2)).quantize(Decimal("0.001"))
    return [Fact("implied coefficient k of the loss factor", as_stated(k), "", k)]


def _year_table(table: YearTable, currency: str) -> YearTableView:
    columns = tuple(
        YearColumn(name, heading, unit.format(currency=currency), table.columns[name])
        for name, heading, unit in _COLUMNS
        if name in table.columns
    )
    return YearTableView(table.id, columns, {name: figure.id for name, figure in table.inputs.items()})


def _offer(offer: EvaluatedOffer, lot: LotEvaluation, evaluation: Evaluation) -> OfferView:
    entering = {name: None if figure is None else figure.id for name, figure in _entering(offer, lot).items()}
    currency = "" if offer.offer.currency is None else offer.offer.currency.value
    exchange = evaluation.exchange_rates.get(currency)
    tied = sum(other.rank == offer.rank for other in lot.ranked) > 1
    return OfferView(
        bidder=one_line(offer.name),
        status=offer.status.value,
        rank=offer.rank,
        rank_text="–" if offer.rank is None else f"{offer.rank} =" if tied else str(offer.rank),
        particulars=_particulars(offer.offer, entering),
        unit_price=entering["unit_price"],
        exchange_rate=None if exchange is None else exchange.id,
        no_load_loss=entering["no_load_loss"],
        load_loss=entering["load_loss"],
        auxiliary_loss=entering["auxiliary_loss"],
        currency=currency,
        per_unit=_cost(offer.per_unit),
        lot=_cost(offer.lot),
        margin=None if offer.margin is None else _margin(offer.margin),
        above_winner=offer.above_winner,
        reasons=() if offer.status is Status.RANKED else tuple(_reasons(offer.findings)),
        assumptions=tuple(one_line(text) for text in offer.on_basis.assumptions),
        information=tuple(_fact(fact) for fact in offer.information),
        corrections=correction_views(offer),
        price_steps=price_step_views(offer),
        contract_price=None if offer.contract_price is None else offer.contract_price.id,
        total_without_preference=None if offer.total_without_preference is None else offer.total_without_preference.id,
        rank_without_preference=offer.rank_without_preference,
        tie_decided_by=offer.tie_decided_by or "",
        decisions=tuple(decision_sentence(decision) for decision in offer.decisions),
        items_price=items_price(offer),
        tax_note=_TAX[offer.offer.terms.tax_included],
    )


def _fact(fact: Information) -> Fact:
    return Fact(fact.label, as_stated(fact.value), fact.unit, fact.value)


def _reasons(findings: Iterable[Finding]) -> Iterable[str]:
    for finding in findings:
        if finding.effect in (Effect.NOT_EVALUATED, Effect.NON_RESPONSIVE):
            yield f"{finding.reason} — {finding.place}" if finding.place else finding.reason


def _particulars(offer: Offer, entering: dict[str, str | None]) -> tuple[Particular, ...]:
    shown = []
    figures = {
        "unit_price": entering["unit_price"],
        "no_load_loss_kw": entering["no_load_loss"],
        "load_loss_kw": entering["load_loss"],
        "auxiliary_loss_kw": entering["auxiliary_loss"],
    }
    for name, label in _PARTICULARS:
        stated = getattr(offer, name)
        if isinstance(stated, Quantity):
            place, figure = str(stated.place), figures.get(name)
            shown.append(Particular(label, one_line(stated.text), stated.unit, place, figure, stated.stated))
        elif name in offer.columns:
            shown.append(Particular(label, "", "", str(offer.columns[name]), None))
    for label, entry in (("cooling", offer.cooling), ("remark", offer.remark)):
        if entry is not None:
            shown.append(Particular(label, one_line(entry.value), "", str(entry.place), None))
    return tuple(shown)


def _cost(cost: OwningCost) -> CostView:
    return CostView(*(None if figure is None else figure.id for figure in _amounts(cost)))


def _margin(margin: Margin) -> MarginView:
    def six(value: Decimal | None) -> Decimal | None:
        return None if value is None else _SIX_DIGITS.plus(value)

    percent = margin.percent_of_winner.quantize(Decimal("0.01"), rounding=ROUND_HALF_UP)
    return MarginView(
        one_line(margin.to), margin.amount.id, percent, six(margin.no_load_loss_kw), six(margin.load_loss_kw)
    )


def _exchange(tender: Tender, evaluation: Evaluation) -> ExchangeView | None:
    stated = tender.exchange
    if stated is None:
        return None
    return ExchangeView(
        source=one_line(stated.source.value),
        kind=one_line(stated.kind.value),
        date=stated.date.isoformat(),
        evidence=one_line(stated.evidence.value),
        rates=tuple((code, figure.id) for code, figure in evaluation.exchange_rates.items()),
    )


def _finding(finding: Finding) -> FindingView:
    return FindingView(
        kind=finding.kind,
        title=KINDS[finding.kind].title,
        effect=finding.effect.value,
        place=str(finding.place) if finding.place else "",
        bidder=one_line(finding.bidder or ""),
        lot=one_line(finding.lot or ""),
        statement=finding.statement,
        remedy=finding.remedy,
        waiver=one_line(finding.waiver),
    )
