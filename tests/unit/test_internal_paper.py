"""The internal paper: both rankings, marked on every side as no part of the evaluation."""

from __future__ import annotations

import json

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.suppositions import open_suspicions, suppose_right
from lossworth.records.bid import Offer
from lossworth.report.build_internal_paper import MARK, build_internal_paper
from lossworth.report.internal_paper import internal_paper_html, internal_paper_json
from lossworth.report.internal_paper_view import InternalPaperView
from lossworth.report.view import RecordView
from support import records
from support.confirmed import PROVED, tender_with
from support.schedules import plain_lot, rivals, schedule

MAXIMUM = {"maximum_load_loss_kw": records.quantity("7.6", "kW")}
SLIP = {"price": "20000", "load": "8.04", "total": "8.04"}


def paper(*offers: Offer) -> InternalPaperView:
    """The paper on these offers beside ordinary ones."""
    everybody = [*offers, *rivals()]
    evaluation = evaluate(tender_with(PROVED, plain_lot(**MAXIMUM)), everybody)
    suspicions = open_suspicions(evaluation, everybody)
    rankings = suppose_right(evaluation, everybody, suspicions)
    record = RecordView("0.1.0", "2026-09-26T08:00:00Z", ())
    return build_internal_paper(evaluation.tender, suspicions, rankings, record)


def test_build_internal_paper__what_would_change() -> None:
    """The sentence names amount, rank before and after, and who would be first in place of whom."""
    (case,) = paper(schedule(**SLIP)).cases
    assert case.sentence == (
        "Alder would come to NCU 31,924.00 per unit, rank 1 (non-responsive as evaluated). First would be Alder in "
        "place of Elder."
    )


def test_build_internal_paper__who_stays_first() -> None:
    """Where the first place does not move, the paper says so."""
    (case,) = paper(schedule(price="29000", load="8.04", total="8.04")).cases
    assert case.sentence.endswith("Elder would stay first.")


def test_build_internal_paper__suspicion_without_a_figure() -> None:
    """What only the bidder can say is listed, without a ranking."""
    view = paper(schedule(no_load="0.2"))
    assert ([each.kind for each in view.suspicions], view.cases) == (["apparent-error-low-loss"], ())
    assert "only the bidder can say" in internal_paper_html(view)


def test_internal_paper__marked_in_every_form() -> None:
    """The page says it at its head, its foot and on every printed sheet, the data as their first key."""
    view = paper(schedule(**SLIP))
    page, data = internal_paper_html(view), internal_paper_json(view)
    assert page.count(MARK) == 4  # title, print margin, head, foot
    assert next(iter(json.loads(data).items())) == ("mark", MARK)


def test_internal_paper_json__both_rankings() -> None:
    """Ranks and amounts per unit of every offer, as evaluated and if right."""
    data = json.loads(internal_paper_json(paper(schedule(**SLIP))))
    (ranking,) = data["rankings"]
    assert ranking["suspicions"] == [each["number"] for each in data["suspicions"]] == [1]
    sides = {offer["offer"]: (offer["as_evaluated"], offer["if_right"]) for offer in ranking["offers"]}
    assert len(sides) == 5
    assert sides["Alder"] == (
        {"status": "non-responsive", "rank": None, "total_owning_cost_per_unit": "32346.40"},
        {"status": "ranked", "rank": 1, "total_owning_cost_per_unit": "31924.00"},
    )
    assert (sides["Elder"][0]["rank"], sides["Elder"][1]["rank"]) == (1, 2)


def test_internal_paper_html__shows_what_the_data_have() -> None:
    """Every amount and the supposed figure stand on the page; the drafted question as well."""
    view = paper(schedule(**SLIP))
    page = internal_paper_html(view)
    for shown in ("32,346.40", "31,924.00", "7.4 kW", view.suspicions[0].question, "alder.xlsx[Offers]!B4"):
        assert shown in page


def test_internal_paper_html__markup_in_names_stays_text() -> None:
    """What a bidder calls itself cannot become markup."""
    page = internal_paper_html(paper(schedule("<b>Evil</b>", **SLIP)))
    assert "<b>Evil" not in page
    assert "&lt;b&gt;Evil" in page


def test_internal_paper__same_result_same_bytes() -> None:
    """Byte for byte."""
    first, second = paper(schedule(**SLIP)), paper(schedule(**SLIP))
    assert (internal_paper_html(first), internal_paper_json(first)) == (
        internal_paper_html(second),
        internal_paper_json(second),
    )
