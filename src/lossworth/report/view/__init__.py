"""What the papers show: figures chosen, ordered and worded, once for workbook, page and JSON."""

from __future__ import annotations

from .evaluation import EvaluationView, LotView
from .figure import Fact, ShownFigure
from .offer import CorrectionView, CostView, MarginView, OfferView, Particular, PriceStepView
from .rates import (
    CoolingStageView,
    LoadView,
    LotRatesView,
    RatesReport,
    RatesView,
    SensitivityRow,
    YearColumn,
    YearTableView,
)
from .record import DecisionView, ExchangeView, FindingView, InputFile, RecordView, RuleDifferenceView, RulesProofView

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
