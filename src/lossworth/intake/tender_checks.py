"""Do the keys of the tender fit together? Small checks of one signature in one tuple."""

from __future__ import annotations

from collections.abc import Iterator

from ..findings import Finding
from .check_commercial import COMMERCIAL_CHECKS
from .check_economics import ECONOMICS_CHECKS
from .check_loading import LOADING_CHECKS
from .check_lot_terms import LOT_TERM_CHECKS
from .check_lots import LOT_CHECKS
from .check_pairs import PAIR_CHECKS
from .check_regulation import REGULATION_CHECKS
from .check_rules import RULE_CHECKS
from .tender_draft import Check, Draft

__all__ = ["CHECKS"]


def check_exchange_rates(draft: Draft) -> Iterator[Finding]:
    """The evaluation currency has no exchange rate to itself."""
    code = draft.identity.text("currency") if draft.identity else None
    if code is not None and draft.exchange_rates is not None and draft.exchange_rates.has(code):
        rule = "must not be given: it is the evaluation currency itself"
        yield draft.exchange_rates.finding("tender-conflict", code, rule, fix="Take the line out.")


def check_number_marks(draft: Draft) -> Iterator[Finding]:
    """Decimal mark and thousands mark differ."""
    table = draft.bid_files
    if table is None:
        return
    thousands = table.text("thousands_mark")
    if thousands and thousands == (table.text("decimal_mark") or "."):
        yield table.finding("tender-conflict", "thousands_mark", "must differ from decimal_mark")


CHECKS: tuple[Check, ...] = (
    *RULE_CHECKS,
    *COMMERCIAL_CHECKS,
    *LOT_CHECKS,
    *LOT_TERM_CHECKS,
    *REGULATION_CHECKS,
    *ECONOMICS_CHECKS,
    *LOADING_CHECKS,
    *PAIR_CHECKS,
    check_exchange_rates,
    check_number_marks,
)
