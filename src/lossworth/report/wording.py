"""Sentences of the papers: recommendation, rules, method, cautions. Wording only; the figures come from the result."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from ..evaluation.announced import rule_sentence
from ..evaluation.result import LotEvaluation, LotRates
from ..findings import one_line
from ..records.commercial import RegulationLimit
from ..records.quantity import Entry
from ..records.rules import RULE_KINDS
from ..records.tender import CoolingValuation, Derivation, Lot, Tender
from .formats import amount, as_stated, percent

__all__ = [
    "CAUTIONS",
    "METHOD",
    "derivation_sources",
    "limits",
    "lot_recommendation",
    "rate_sources",
    "recommendation",
    "rules",
]

METHOD = (
    "Total owning cost = evaluated price + A × P0 + B × Pk + C × Paux, per unit; the lot is the quantity times the "
    "unit. P0 is the guaranteed no-load loss, Pk the guaranteed load loss at the rating and reference temperature on "
    "which it is guaranteed, Paux the auxiliary loss of fans and pumps.",
    "A, B and C are present values of one kilowatt of loss over the evaluation period. The form of the evaluation is "
    "that of REA Bulletin 65-2 (1978) and RUS Bulletin 1724E-301 (1997); A and B are used likewise in IEC TS 60076-20 "
    "and IEEE C57.120 (both from memory).",
    "Announced rates are inputs and alone value the losses. Derived rates are sums over the years: discount factor × "
    "(energy price × hours + demand charge) for A; the load loss rate B weights the energy with the loss factor and "
    "the demand charge with the squared peak responsibility, both times the squared peak load of the year.",
    "The loss factor, where it is not stated, is k × LF + (1 − k) × LF², LF being the load factor and k the "
    "coefficient that the tender states (form: Gonen, Electric Power Distribution System Engineering, Ex. 2.9, "
    "with k = 0.3).",
    "Costs are computed in exact decimals and ranked on money rounded as the tender states; equal amounts are ties.",
    "Limits are compared with the guaranteed values unrounded. Peak efficiency index = 1 − 2 √(P0 × Pk) / Sr "
    "(Commission Regulation (EU) No 548/2014, Annex I and II, without cooling power at no load).",
)

CAUTIONS = (
    "The capitalized losses serve the comparison only; what is paid is the contract price.",
    "Guaranteed values are the bidders' statements; they need type and routine tests to be relied upon.",
    "The result is no more certain than the announced rates and the guarantees behind it.",
    "Procurement law, the tender documents and local codes govern; a licensed engineer decides.",
)


def rules(tender: Tender) -> tuple[str, ...]:
    """The rules of the tender that the evaluation applied.

    Parameters
    ----------
    tender : Tender
        As announced.

    Returns
    -------
    tuple of str
        One sentence a rule.
    """
    stated = tender.rules
    currency = tender.identity.currency.value
    sentences = [
        f"Money is {stated.rounding}, applied to {stated.rounding_applies_to.value} ({stated.place}).",
        f"The evaluation currency is {currency}; only prices are converted, since the rates are in {currency} already.",
        "A missing loss is not zero: an offer without it is not evaluated. The auxiliary loss of a unit without fans "
        "and pumps is zero where it is left blank.",
        "No tolerance stands between a guaranteed value and a limit of the tender.",
        "Offers with the same total owning cost after rounding share a rank, unless an announced order parts them.",
    ]
    announced = (rule_sentence(tender, kind.key) for kind in RULE_KINDS)
    return (*sentences, *(sentence for sentence in announced if sentence))


def limits(stated: Lot) -> tuple[str, ...]:
    """Every limit of a lot that an offer must keep, in words; rules sheet, form and evaluation say the same.

    Parameters
    ----------
    stated : Lot
        One lot.

    Returns
    -------
    tuple of str
        One phrase a limit that the tender sets.
    """
    phrases = []
    if stated.maximum_no_load_loss_kw:
        phrases.append(
            f"no-load loss at most {as_stated(stated.maximum_no_load_loss_kw.stated)} "
            f"{stated.maximum_no_load_loss_kw.unit}"
        )
    if stated.maximum_load_loss_kw:
        phrases.append(
            f"load loss at most {as_stated(stated.maximum_load_loss_kw.stated)} {stated.maximum_load_loss_kw.unit}"
        )
    if stated.minimum_peak_efficiency_index_percent:
        phrases.append(
            f"peak efficiency index at least {as_stated(stated.minimum_peak_efficiency_index_percent.value)} %"
        )
    if stated.impedance_percent and stated.impedance_tolerance_percentage_points:
        phrases.append(
            f"impedance {as_stated(stated.impedance_percent.value)} % within "
            f"{as_stated(stated.impedance_tolerance_percentage_points.value)} percentage points"
        )
    if stated.latest_delivery_weeks:
        phrases.append(f"delivery within {as_stated(stated.latest_delivery_weeks.value)} weeks")
    return (*phrases, *_limits_of_kind(stated))


def _limits_of_kind(stated: Lot) -> Iterator[str]:
    """Limits of sound, liquid and regulation."""
    if stated.maximum_sound_level_db is not None:
        yield f"sound level at most {as_stated(stated.maximum_sound_level_db.value)} dB(A)"
    if stated.accepted_liquids:
        yield f"insulating liquid {' or '.join(map(one_line, stated.accepted_liquids))}"
    if stated.pcb_free_required:
        yield "liquid declared free of PCB"
    if stated.regulation is not None:
        yield f"the limits of {_regulation(stated.regulation)}, with no tolerance on the guarantee"


def _regulation(stated: RegulationLimit) -> str:
    parts = [f"{stated.regulation}, {one_line(stated.equipment.value)}"]
    parts += [f"tier {stated.tier}"] if stated.tier is not None else []
    parts += [f"placed on the market {stated.date.isoformat()}"] if stated.date is not None else []
    return ", ".join(parts)


def rate_sources(tender: Tender, lot: Lot) -> tuple[str, ...]:
    """Where the rates of a lot come from.

    Parameters
    ----------
    tender : Tender
        As announced.
    lot : Lot
        One lot, with announced rates or with the announced derivation.

    Returns
    -------
    tuple of str
        Sentences, with the places in the tender file.
    """
    if lot.rates is not None:
        sentences = (f"Announced in the tender per {lot.rates.per} ({lot.rates.place}).",)
        return sentences + _as_stated(lot.rates.source)
    if lot.derivation is not None:
        return derivation_sources(tender, lot.derivation, "The tender announces the derivation")
    return ()


_PRESENT_WORTH = (
    "A = G × Σ DF_t × (p_t × hours energized + D_t)",
    "B = G × Σ DF_t × β_t² × (p_t × hours × loss factor + D_t × R²)",
    "C = G × Σ DF_t × (p_t × hours of cooling + D_t × cooling share at peak)",
    "DF_t = (1 + r)^−(t − φ), p_t energy price (with carbon cost, where it counts), D_t demand charge, β_t peak load "
    "over the rating, R peak responsibility, G upstream gross-up, φ 0 at the end and 1 at the start of the year.",
    "Form: present worth of the cost of losses year by year, as in IEEE C57.120 and IEC TS 60076-20 (from memory).",
)
_FIXED_CHARGE_RATE = (
    "A = (D + hours energized × p) ÷ FCR",
    "B = (D × R² + hours × p × loss factor) × PL² ÷ FCR",
    "C = (D × cooling share at peak + hours of cooling × p) ÷ FCR",
    "D demand charge, p energy price, R peak responsibility, PL equivalent annual peak load over the rating, FCR fixed "
    "charge rate, which is not the capital recovery factor in general.",
    "Form: annual cost of losses over the fixed charge rate, as in IEEE C57.120 (from memory).",
)
_THROUGH_A_AND_B = (
    "Cost = evaluated price + A × (P0 + Pc0) + B × (Pk + Pcs − Pc0); no rate C acts.",
    "Pc0 cooling power at no load, Pcs at rated load. Form: two stages of cooling as in IEC TS 60076-20 (from memory).",
)
_DATES = (
    "Stated prices escalate from the price date to the service date before year 1; DF_t is also times (1 + r)^−(years "
    "from the price date) where present values are taken at the price date."
)
_CARBON = "The carbon cost is the same in every hour: it counts with the loss factor and the cooling hours by time."
_FORMULAS = {"present worth": _PRESENT_WORTH, "fixed charge rate": _FIXED_CHARGE_RATE}


def formulas(rates: LotRates, lot: Lot) -> tuple[str, ...]:
    """Formulas by which rates were derived and losses are valued, with their source.

    Parameters
    ----------
    rates : LotRates
        Announced or derived.
    lot : Lot
        For the way in which cooling is valued.

    Returns
    -------
    tuple of str
        A line each; none for announced rates with a rate C of their own.
    """
    lines = _FORMULAS.get(rates.method, ())
    if "price_delay_years" in rates.inputs and rates.inputs["price_delay_years"].value:
        lines = (*lines, _DATES)
    if "carbon_cost_per_kwh" in rates.inputs and "loss_factor_by_time" in rates.inputs:
        lines = (*lines, _CARBON)
    return (*lines, *_THROUGH_A_AND_B) if lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B else lines


def derivation_sources(tender: Tender, derivation: Derivation, opening: str) -> tuple[str, ...]:
    """What a derivation of rates rests on.

    Parameters
    ----------
    tender : Tender
        With the economics and loading conditions.
    derivation : Derivation
        Which of them are used, and how the rates are rounded.
    opening : str
        First words of the sentence, which say whose derivation it is.

    Returns
    -------
    tuple of str
        Sentences, with the places in the tender file.
    """
    economics = tender.economics[derivation.economics.value]
    loading = tender.loading[derivation.loading.value]
    rounding = "not rounded" if derivation.rounding is None else str(derivation.rounding)
    sentence = (
        f"{opening} ({derivation.place}): economics “{derivation.economics}” ({economics.place}), loading condition "
        f"“{derivation.loading}” ({loading.place}); the rates are {rounding}."
    )
    return (sentence, *_as_stated(economics.source), *_as_stated(loading.source))


def _as_stated(source: Entry | None) -> tuple[str, ...]:
    return () if source is None else (f"Source as stated there: {one_line(source.value)}",)


def lot_recommendation(lot: LotEvaluation, currency: str, tie_order: Sequence[str] = ()) -> str:
    """The result of one lot in one sentence.

    Parameters
    ----------
    lot : LotEvaluation
        One lot.
    currency : str
        Evaluation currency.
    tie_order : sequence of str
        Criteria for ties as announced.

    Returns
    -------
    str
        Who has the lowest total owning cost, and by how much.
    """
    winners = lot.winners
    if not winners:
        return "No offer can be ranked."
    total = winners[0].lot.total_owning_cost
    if total is None:
        raise ValueError("a ranked offer has a total")
    cost = f"{currency} {amount(total.value)}"
    if len(winners) > 1:
        names = " and ".join(one_line(offer.name) for offer in winners)
        return f"{names} tie at the lowest total owning cost, {cost} for the lot; {_left_tied(tie_order)}."
    winner = winners[0]
    sentence = f"{one_line(winner.name)} has the lowest total owning cost, {cost} for the lot"
    if winner.tie_decided_by is not None:
        return f"{sentence}; others have the same, and the announced order decides: {winner.tie_decided_by}."
    if winner.margin is None:
        return f"{sentence}; no other offer is ranked."
    return (
        f"{sentence}, {currency} {amount(winner.margin.amount.value)} ({percent(winner.margin.percent_of_winner)}) "
        f"less than {one_line(winner.margin.to)}."
    )


def _left_tied(tie_order: Sequence[str]) -> str:
    """What is left to do about a tie that stays: a drawing counts only where the tender announces one."""
    if "drawing of lots" in tie_order:
        return "no announced criterion parts them; draw lots and record a decision “break tie” for each"
    if tie_order:
        return "no announced criterion parts them, and the tender announces no drawing of lots"
    return "the tender announces no order for ties (tie_order)"


def recommendation(lots: tuple[LotEvaluation, ...]) -> str:
    """The result over all lots in one sentence.

    Parameters
    ----------
    lots : tuple of LotEvaluation
        All lots.

    Returns
    -------
    str
        The lowest total owning cost of each lot, with ties and lots without a ranking named.
    """
    parts = []
    for lot in lots:
        names = " and ".join(one_line(offer.name) for offer in lot.winners)
        if len(lot.winners) > 1:
            parts.append(f"lot {lot.lot.id}: {names} (tie)")
        else:
            parts.append(f"lot {lot.lot.id}: {names or 'none can be ranked'}")
    return "Lowest total owning cost by the announced method — " + "; ".join(parts) + "."
