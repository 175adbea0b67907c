"""Prices, corrections and decisions as data and in the terminal: three layers, every step, contract price apart."""

from __future__ import annotations

import json
from typing import Any

import pytest

from lossworth.report.result_file import result_text
from lossworth.report.terminal import evaluation_text
from support.priced_views import HOSTILE_NAME, priced_view
from support.sample_views import workbook_view


@pytest.fixture(scope="module")
def result() -> dict[str, Any]:
    found: dict[str, Any] = json.loads(result_text(priced_view()))
    return found


def named(result: dict[str, Any], bidder: str) -> dict[str, Any]:
    """Offer of a bidder."""
    return next(offer for lot in result["lots"] for offer in lot["offers"] if offer["bidder"] == bidder)


def test_result_text__three_layers(result: dict[str, Any]) -> None:
    """As read with its place, as corrected, as evaluated."""
    (correction,) = named(result, "Cedarfell")["corrections"]
    assert correction["as_read"] == {"value": "1.2", "unit": "W", "source": "tender.toml:1"}
    assert correction["corrected"] == {"value": "1.2", "unit": "kW", "source": "decisions.toml:33"}
    assert correction["evaluated"]["unit"] == "kW"
    assert correction["decision"].startswith("confirm value load_loss_kw")


def test_result_text__steps_lead_from_quoted_to_evaluated(result: dict[str, Any]) -> None:
    """The chain begins with the quoted price and ends in the amounts of the costs."""
    offer = named(result, HOSTILE_NAME)
    steps = {scope: [s for s in offer["price_steps"] if s["scope"] == scope] for scope in ("unit", "lot")}
    assert steps["unit"][0]["price"]["value"] == "2975.05"
    assert steps["unit"][3]["change"] == {"value": "1.2537", "unit": "NCU/FCU", "source": "tender.toml:1"}
    assert steps["unit"][-1]["price"]["value"] == offer["per_unit"]["evaluated_price"]
    assert steps["lot"][-1]["price"]["value"] == offer["evaluated_price"]


def test_result_text__contract_price_and_preference(result: dict[str, Any]) -> None:
    """The contract price in the currency of the bid; the ranking without a margin."""
    offer = named(result, HOSTILE_NAME)
    assert offer["contract_price"] == {"value": "29172.27", "unit": "FCU", "source": None}
    assert (offer["rank"], offer["rank_without_preference"]) == (3, 1)
    assert offer["total_without_preference"] == "62937.91"
    assert named(result, "Firthwane")["tie_decided_by"] == "earlier delivery"


def test_result_text__people_and_proof(result: dict[str, Any]) -> None:
    """Decisions, waived findings and the comparison of the rules at the top."""
    assert [decision["kind"] for decision in result["decisions"]] == [
        "accept correction", "waive", "change status", "confirm value"
    ]  # fmt: skip
    assert result["rules_proof"]["differences"][0]["key"] == "taxes <a>"
    (waived,) = [finding for finding in result["findings"] if finding["waiver"]]
    assert (waived["kind"], waived["effect"]) == ("delivery-too-late", "note")


def test_evaluation_text__tells_what_moved_the_ranking() -> None:
    """Corrections, decisions, contract prices, ranks without preference; silent where there is nothing."""
    text = " ".join(evaluation_text(priced_view(), 120).split())
    assert "corrected: Birchlune — 4,000.00 NCU as read, now 4,090.00 NCU" in text
    assert "tie: Firthwane — rank 1, decided by earlier delivery" in text
    assert f"{HOSTILE_NAME} 29,172.27 FCU" in text
    assert f"{HOSTILE_NAME} rank 1" in text
    plain = evaluation_text(workbook_view(), 120)
    assert not any(word in plain for word in ("contract price", "corrected:", "decision:", "without preference"))
