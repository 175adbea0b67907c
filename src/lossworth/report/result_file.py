"""The result as data: evaluation.json, for other tools and for the reader in ten years."""

from __future__ import annotations

import json
from collections.abc import Iterable
from dataclasses import asdict
from decimal import Decimal
from typing import Any

from .formats import plain
from .view import (
    CorrectionView,
    CostView,
    EvaluationView,
    Fact,
    LoadView,
    LotView,
    MarginView,
    OfferView,
    PriceStepView,
    YearTableView,
)

__all__ = ["FORMAT_VERSION", "result_text"]

FORMAT_VERSION = 1
#: Of numbers that never were money: the last bits of a float differ between processors.
_SIGNIFICANT_DIGITS = 12


def result_text(view: EvaluationView) -> str:
    """The evaluation as JSON text.

    Parameters
    ----------
    view : EvaluationView
        The view.

    Returns
    -------
    str
        UTF-8 text with a final newline; amounts are decimal strings, so that no reader loses a cent.

    Notes
    -----
    Under ``lots[].rates``: ``A``, ``B``, ``C``, ``unit``, ``basis``, ``method``, ``formulas``, ``year_table``
    {``columns[]``: ``name``, ``heading``, ``unit``, ``values``} and ``load_profile`` {``file``, ``remarks``,
    ``facts[]``, ``peak_load_by_year_pu``, ``cooling_stages[]``: ``above_load_pu``, ``share_percent``,
    ``hours_by_year``}; the last two are null where there is none. Their numbers have twelve significant digits. Under
    ``lots[].offers[]``, beside the costs: ``assumptions`` and ``information[]`` {``label``, ``value``, ``unit``};
    ``corrections[]`` {``label``, ``as_read``, ``corrected``, ``evaluated``, ``rule``, ``reason``, ``decision``},
    ``price_steps[]`` {``name``, ``label``, ``scope``, ``sign``, ``change``, ``price``, ``rule``}, ``contract_price``,
    all their figures {``value``, ``unit``, ``source``}; ``total_without_preference``, ``rank_without_preference``,
    ``tie_decided_by``, ``decisions``. At the top: ``rules_proof`` and ``decisions[]``. Price steps and the contract
    price have up to twelve significant digits where they are not yet rounded money.
    """
    content = {
        "format_version": FORMAT_VERSION,
        "tender": {
            "reference": view.reference,
            "title": view.title,
            "buyer": view.buyer,
            "currency": view.currency,
            "opening_date": view.opening_date or None,
            "remark": view.remark or None,
        },
        "recommendation": view.recommendation,
        "rules": list(view.rules),
        "rules_proof": _rules_proof(view),
        "decisions": [asdict(decision) for decision in view.decisions],
        "lots": [_lot(view, lot) for lot in view.lots],
        "exchange": _exchange(view),
        "findings": [
            {
                "kind": finding.kind,
                "effect": finding.effect,
                "place": finding.place or None,
                "bidder": finding.bidder or None,
                "lot": finding.lot or None,
                "statement": finding.statement,
                "remedy": finding.remedy,
                "waiver": finding.waiver or None,
            }
            for finding in view.findings
        ],
        "cautions": list(view.cautions),
        "inputs": [{"path": item.path, "sha256": item.sha256} for item in view.record.inputs],
        "generated_at": view.record.generated_at,
        "tool_version": view.record.tool_version,
    }
    return json.dumps(content, ensure_ascii=False, indent=2) + "\n"


def _value(view: EvaluationView, figure: str | None) -> str | None:
    return None if figure is None else plain(view.figures[figure].value)


def _lot(view: EvaluationView, lot: LotView) -> dict[str, Any]:
    rates = lot.rates
    return {
        "id": lot.id,
        "description": lot.description,
        "quantity": lot.quantity,
        "rates": {
            "A": _value(view, rates.no_load),
            "B": _value(view, rates.load),
            "C": _value(view, rates.auxiliary),
            "unit": rates.unit,
            "basis": rates.basis,
            "method": rates.method or None,
            "formulas": list(rates.formulas),
            "year_table": None if rates.year_table is None else _year_table(rates.year_table),
            "load_profile": None if rates.load_profile is None else _load_profile(rates.load_profile),
        },
        "recommendation": lot.recommendation,
        "offers": [_offer(view, offer) for offer in lot.offers],
    }


def _year_table(table: YearTableView) -> dict[str, Any]:
    return {
        "columns": [
            {"name": column.name, "heading": column.heading, "unit": column.unit, "values": _numbers(column.values)}
            for column in table.columns
        ]
    }


def _load_profile(load: LoadView) -> dict[str, Any]:
    return {
        "file": load.file,
        "remarks": list(load.remarks),
        "facts": _facts(load.facts),
        "peak_load_by_year_pu": _numbers(load.peak_load_by_year_pu),
        "cooling_stages": [
            {
                "above_load_pu": _number(stage.above_load_pu),
                "share_percent": _number(stage.share_percent),
                "hours_by_year": _numbers(stage.hours_by_year),
            }
            for stage in load.stages
        ],
    }


def _facts(facts: Iterable[Fact]) -> list[dict[str, str]]:
    return [{"label": fact.label, "value": plain(fact.value), "unit": fact.unit} for fact in facts]


def _numbers(values: Iterable[float]) -> list[int | float]:
    return [_number(value) for value in values]


def _number(value: float) -> int | float:
    return int(value) if value.is_integer() else float(f"{value:.{_SIGNIFICANT_DIGITS}g}")


def _offer(view: EvaluationView, offer: OfferView) -> dict[str, Any]:
    return {
        "bidder": offer.bidder,
        "status": offer.status,
        "rank": offer.rank,
        **_costs(view, offer.lot),
        "per_unit": _costs(view, offer.per_unit),
        "margin": _margin(view, offer.margin),
        "as_read": [
            {"name": item.name, "text": item.text, "unit": item.unit, "place": item.place} for item in offer.particulars
        ],
        "reasons": list(offer.reasons),
        "assumptions": list(offer.assumptions),
        "information": _facts(offer.information),
        "corrections": [_correction(view, correction) for correction in offer.corrections],
        "price_steps": [_step(view, step) for step in offer.price_steps],
        "contract_price": _figure(view, offer.contract_price),
        "total_without_preference": _value(view, offer.total_without_preference),
        "rank_without_preference": offer.rank_without_preference,
        "tie_decided_by": offer.tie_decided_by or None,
        "decisions": list(offer.decisions),
    }


def _figure(view: EvaluationView, id: str | None) -> dict[str, str | None] | None:
    if id is None:
        return None
    figure = view.figures[id]
    return {"value": plain(figure.value), "unit": figure.unit, "source": figure.source or None}


def _correction(view: EvaluationView, correction: CorrectionView) -> dict[str, Any]:
    """The three layers of a figure, none overwritten."""
    return {
        "label": correction.label,
        "as_read": _figure(view, correction.as_read),
        "corrected": _figure(view, correction.corrected),
        "evaluated": _figure(view, correction.evaluated),
        "rule": correction.rule,
        "reason": correction.reason,
        "decision": correction.decision or None,
    }


def _step(view: EvaluationView, step: PriceStepView) -> dict[str, Any]:
    return {
        "name": step.name,
        "label": step.label,
        "scope": step.scope,
        "sign": step.sign or None,
        "change": _figure(view, step.change),
        "price": _figure(view, step.price),
        "rule": step.rule,
    }


def _costs(view: EvaluationView, cost: CostView) -> dict[str, str | None]:
    return {
        "evaluated_price": _value(view, cost.evaluated_price),
        "no_load_cost": _value(view, cost.no_load_cost),
        "load_cost": _value(view, cost.load_cost),
        "auxiliary_cost": _value(view, cost.auxiliary_cost),
        "total_owning_cost": _value(view, cost.total_owning_cost),
    }


def _margin(view: EvaluationView, margin: MarginView | None) -> dict[str, Any] | None:
    if margin is None:
        return None

    def text(value: Decimal | None) -> str | None:
        return None if value is None else plain(value)

    return {
        "to": margin.to,
        "amount": _value(view, margin.amount),
        "percent_of_winner": plain(margin.percent_of_winner),
        "no_load_loss_kw": text(margin.no_load_loss_kw),
        "load_loss_kw": text(margin.load_loss_kw),
    }


def _rules_proof(view: EvaluationView) -> dict[str, Any] | None:
    return None if view.rules_proof is None else asdict(view.rules_proof)


def _exchange(view: EvaluationView) -> dict[str, Any] | None:
    if view.exchange is None:
        return None
    return {
        "source": view.exchange.source,
        "kind": view.exchange.kind,
        "date": view.exchange.date,
        "evidence": view.exchange.evidence,
        "rates": {code: _value(view, figure) for code, figure in view.exchange.rates},
    }
