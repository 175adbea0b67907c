"""The page of a tender with price steps, corrections, decisions and a preference: all of it told, nothing supposed."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from lossworth.report.formats import plain
from lossworth.report.page import page_html
from lossworth.report.page_prices import price_tables
from lossworth.report.view import EvaluationView, OfferView
from support.html_reader import HtmlReader, shown_values
from support.page_views import page_view
from support.priced_views import HOSTILE_NAME, priced_view


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return priced_view()


@pytest.fixture(scope="module")
def html(view: EvaluationView) -> str:
    return page_html(view)


def table(html: str, name: str, nth: int = 0) -> str:
    """The nth table of a class, its text in one line."""
    found = re.findall(rf'<table class="{name}">.*?</table>', html, re.DOTALL)[nth]
    return " ".join(" ".join(HtmlReader(found).text).split())


def named(view: EvaluationView, bidder: str) -> OfferView:
    """Offer of a bidder."""
    return next(offer for lot in view.lots for offer in lot.offers if offer.bidder == bidder)


def test_page_html__every_figure_of_a_priced_evaluation_has_a_line(view: EvaluationView, html: str) -> None:
    """Steps, adders, contract prices and totals without preference are unfolded like everything else."""
    assert HtmlReader(html).misplaced == []
    assert set(re.findall(r'<td class="n" data-figure="(.*?)"', html)) >= {
        figure.replace("&", "&amp;") for figure in view.figures
    }
    assert shown_values(HtmlReader(html)).items() <= {key: plain(f.value) for key, f in view.figures.items()}.items()


def test_page_html__three_layers_of_a_corrected_figure(html: str) -> None:
    """As read, as corrected, as evaluated, in this order, with rule, reason and decision."""
    text = table(html, "corrections")
    assert "Birchlune corrected unit price 4,000.00 NCU 4,090.00 NCU 4,090.00 NCU Where unit price times" in text
    assert "unit price times quantity is 41050, the stated total 41950 decision accept correction" in text
    assert re.search(r"load loss as confirmed 1\.2 W 1\.2 kW 1\.2 kW", text)


def test_page_html__every_step_in_the_compact_table(view: EvaluationView, html: str) -> None:
    """A column for each kind of step, its change with its sign; two changes of a kind below each other."""
    text = table(html, "prices")
    assert "− 89.25 − 57.72 × 1.2537 ÷ 1.077 + 131.68 + 120.00 + 62.25" in text.replace("– ", "")
    names = {step.name for offer in view.lots[0].offers for step in offer.price_steps}
    columns = price_tables(view.figures, ((offer, {}) for offer in view.lots[0].offers))
    assert {name for each in columns for name, _ in each.columns} == names
    assert html.count('<table class="prices">') == 2


def test_page_html__steps_unfold_with_their_rules(view: EvaluationView, html: str) -> None:
    """Each offer with more than a currency unfolds its steps, each with its rule."""
    assert html.count('class="lines way"') == sum(o.has_price_steps for lot in view.lots for o in lot.offers)
    text = table(html, "lines way", 2)
    for step in named(view, HOSTILE_NAME).price_steps:
        assert " ".join(step.rule.split()) in text
        assert step.label in text


def test_page_html__contract_price_apart_from_evaluated_price(view: EvaluationView, html: str) -> None:
    """Both stand side by side under their names, the contract price in the currency of the bid."""
    offer = named(view, HOSTILE_NAME)
    assert offer.contract_price is not None
    assert offer.lot.evaluated_price is not None
    contract, evaluated = view.figures[offer.contract_price], view.figures[offer.lot.evaluated_price]
    assert f"{HOSTILE_NAME} {contract.text} FCU tax included {evaluated.text} NCU" in table(html, "contract")
    assert "The contract pays the contract price" in html
    assert "The contract pays the price that the bidder quotes" not in html
    assert "contract price of the lot" in table(html, "summary")


def test_page_html__ranks_with_and_without_preference(view: EvaluationView, html: str) -> None:
    """The hostile offer is third, and first without the margin that lies on it."""
    offer = named(view, HOSTILE_NAME)
    assert (offer.rank, offer.rank_without_preference) == (3, 1)
    assert re.search(r"3 <script>alert\(1\)</script>.*62,937\.91 1 4 Damsonby", table(html, "ranking"))


def test_page_html__tie_and_what_decided_it(html: str) -> None:
    """The criterion stands with the offer."""
    assert "1 Firthwane tie, decided by: earlier delivery" in table(html, "ranking", 1)


def test_page_html__decisions_with_who_and_when(html: str) -> None:
    """Waiver, status by hand, confirmation: reason, name, day, evidence, place."""
    section = html[html.index('id="decisions"') : html.index('id="findings"')]
    text = " ".join("".join(HtmlReader(f"<p>{section}").text).split())
    assert "Waive delivery-too-late lot 1 Damsonby letter of the bidder By the committee on 2026-09-25" in text
    assert "Change status: non-responsive lot 2 Hazel" in text
    assert "evidence: file 7 Used. decisions.toml:33" in text


def test_page_html__waived_findings_and_questions_apart(html: str) -> None:
    """A waived finding asks for nothing; a question says that it was put, and not what would become of the rank."""
    section = html[html.index('id="findings"') : html.index('id="cautions"')]
    asked, waived = section.index("Questions put to bidders"), section.index("Waived by decision")
    assert asked < section.index("looks as if it were in another unit") < waived
    assert waived < section.index("waived by the committee on 2026-09-25")
    assert "The offer is not ranked." not in section[waived:]
    question = section[asked:waived]
    assert not re.search(r"\b(rank|would|if the|suspicion)\b", question.split("<ul", 1)[1])


def test_page_html__proof_of_the_rules(view: EvaluationView, html: str) -> None:
    """What differs stands key by key; where nothing differs there is no table."""
    assert "taxes <a> included excluded" in table(html, "differences")
    assert view.rules_proof is not None
    proven = replace(view.rules_proof, holds=True, sentence="The rules used are the rules published.", differences=())
    good = page_html(replace(view, rules_proof=proven))
    assert "Published as used." in good
    assert 'class="differences"' not in good


def test_page_html__plain_prices_bring_nothing_new() -> None:
    """A tender without commercial terms has none of these parts."""
    html = page_html(page_view())
    for part in ("prices", "contract", "corrections", "lines way", "differences"):
        assert f'<table class="{part}">' not in html
    assert 'id="decisions"' not in html
    assert "Without preference" not in html
