"""The view: every amount is a figure of the trail, and every text of a bidder is harmless."""

from __future__ import annotations

import json

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.report.build_view import build_view
from lossworth.report.result_file import result_text
from lossworth.report.terminal import evaluation_text
from lossworth.report.view import InputFile, RecordView
from support import records as make

RECORD = RecordView("0.0.0", "2026-09-15T10:00:00Z", (InputFile("tender.toml", "0" * 64),))


@pytest.fixture
def view():
    """Two lots, one derived; a tie, a foreign currency, an offer beyond a limit and one without its load loss."""
    lots = (
        make.lot("1", maximum_no_load_loss_kw=make.quantity("0.2", "kW")),
        make.lot("2", rates=None, derivation=make.derivation()),
    )
    offers = [
        make.priced("Alder", "4000", "0.1", "1"),
        make.priced("Birch", "3200", "0.1", "1", currency=make.entry("FCU")),
        make.priced("Cedar", "1000", "0.3", "1"),
        make.offer("Damson", load_loss_kw=None),
        make.priced("\x1b[31mElm\u202e", "4000", "0.1", "1", "2"),
    ]
    tender = make.tender(*lots, exchange=make.exchange(FCU="1.25"))
    return build_view(evaluate(tender, offers), RECORD)


def test_build_view__order_and_rank_texts(view):
    """Ranked offers come first with ties marked, then non-responsive, then not evaluated ones."""
    assert [(o.bidder, o.rank_text, o.status) for o in view.lots[0].offers] == [
        ("Alder", "1 =", "ranked"),
        ("Birch", "1 =", "ranked"),
        ("Cedar", "–", "non-responsive"),
        ("Damson", "–", "not evaluated"),
    ]


def test_build_view__figures_are_closed(view):
    """Operands are figures of the view too, and stand before what is made of them."""
    seen: set[str] = set()
    for figure in view.figures.values():
        assert set(figure.operands) <= seen
        seen.add(figure.id)


def test_build_view__year_table_sums_to_the_rate(view):
    """The columns of the year table add up to the computed rates."""
    rates = view.lots[1].rates
    columns = {column.name: column for column in rates.year_table.columns}
    for name, rate in (("no_load", rates.no_load), ("load", rates.load)):
        computed = view.figures[view.figures[rate].operands[0]]
        assert sum(columns[name].values) == pytest.approx(float(computed.value), rel=1e-11)
    assert set(rates.year_table.inputs.values()) <= set(view.figures)


def test_build_view__control_characters_become_visible(view):
    """Escape codes and direction marks in a name are shown, not obeyed."""
    assert view.lots[1].offers[0].bidder == "\\x1b[31mElm\\u202e"


def test_build_view__recommendation_names_ties(view):
    """A tie is called a tie."""
    assert "lot 1: Alder and Birch (tie)" in view.recommendation
    assert "tie at the lowest" in view.lots[0].recommendation


def test_result_text__fields(view):
    """The data carry the documented fields, with amounts as decimal strings."""
    result = json.loads(result_text(view))
    lot = result["lots"][0]
    rates = {"A": "11000", "B": "660", "C": None, "unit": "NCU/kW", "basis": "announced"}
    assert rates == {name: lot["rates"][name] for name in rates}
    first, _, cedar, damson = lot["offers"]
    assert first["total_owning_cost"] == "57600.00"
    assert first["per_unit"]["no_load_cost"] == "1100.00"
    assert first["margin"]["to"] == "Birch"
    assert cedar["rank"] is None
    assert cedar["reasons"] == ['no-load loss: must not exceed 0.2 kW (tender.toml:1), got "0.3 kW" — tender.toml:1']
    assert damson["total_owning_cost"] is None
    kinds = {"apparent-error-price", "no-load-loss-above-maximum", "tie", "value-missing"}
    assert {f["kind"] for f in result["findings"]} == kinds
    assert result["inputs"] == [{"path": "tender.toml", "sha256": "0" * 64}]


def test_evaluation_text__table(view):
    """The terminal shows the ranked table and, apart, who is not ranked and why."""
    text = evaluation_text(view, 120)
    assert "1 =" in text
    assert "non-responsive: Cedar — no-load loss: must not exceed 0.2 kW" in text
    assert "\x1b" not in text
