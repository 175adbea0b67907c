"""Lot models from invented bids, and the first place as the evaluation itself gives it."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from lossworth.evaluation.evaluate import evaluate
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from lossworth.sensitivity.lot_model import LotModel, lot_model

from . import records

Figures = Sequence[object]


def bids(*rows: Figures) -> list[Offer]:
    """Offers A, B, C … by price, no-load loss, load loss and, where given, auxiliary loss."""
    return [_bid(chr(65 + number), row) for number, row in enumerate(rows)]


def _bid(name: str, row: Figures) -> Offer:
    price, no_load, load, *auxiliary = (str(value) for value in row)
    changes: dict[str, Any] = {"auxiliary_loss_kw": records.quantity(auxiliary[0], "kW")} if auxiliary else {}
    return records.priced(name, price, no_load, load, **changes)


def model(*rows: Figures, tender: Tender | None = None, study: bool = False) -> LotModel:
    """Model of the first lot of a tender with these bids."""
    return model_of(tender or records.tender(), bids(*rows), study=study)


def model_of(tender: Tender, offers: Sequence[Offer], *, study: bool = False) -> LotModel:
    """Model of the first lot of a tender with these offers."""
    evaluation = evaluate(tender, offers)
    return lot_model(evaluation, evaluation.lots[0], study=study)


def announced(no_load: object, load: object, auxiliary: object | None = None, **changes: Any) -> Tender:
    """A tender with announced rates."""
    rates = records.rates(str(no_load), str(load), None if auxiliary is None else str(auxiliary))
    return records.tender(records.lot(rates=rates, **changes))


def derived(economics: Any = None, loading: Any = None, rounding: Any = None, **changes: Any) -> Tender:
    """A tender whose rates follow from an announced derivation, unrounded unless told."""
    lot = records.lot(rates=None, derivation=records.derivation(rounding).model_copy(update=changes))
    return records.tender(
        lot,
        economics={"board": economics or records.economics()},
        loading={"town": loading or records.loading()},
    )


def first_place(tender: Tender, offers: Sequence[Offer]) -> set[str]:
    """Who ranks first, by the evaluation with all its rounding."""
    return {offer.name for offer in evaluate(tender, offers).lots[0].winners}
