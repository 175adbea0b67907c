"""Letters of questions: one a bidder, printable, and silent about everybody else."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lossworth.evaluation.clerical_errors import find_clerical_errors
from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Place
from lossworth.records.bid import Offer
from lossworth.records.tender import Lot
from lossworth.report.build_questions import build_letters
from lossworth.report.letters import letter_html, letter_text
from lossworth.report.letters_names import file_stems
from lossworth.report.letters_view import LetterView
from support import records
from support.confirmed import FIXED, PROVED, tender_with
from support.schedules import plain_lot, rivals, schedule

SLIP = {"load": "8.04", "total": "8.04"}


def letters(*offers: Offer, lot: Lot | None = None, setting: str | None = PROVED) -> tuple[LetterView, ...]:
    """Letters on what is suspected of these offers beside ordinary ones."""
    everybody = [*offers, *rivals()]
    tender = tender_with(setting, lot or plain_lot())
    return build_letters(tender, everybody, find_clerical_errors(tender, everybody))


def test_build_letters__only_to_bidders_that_are_asked() -> None:
    """Nothing is written to whom nothing is asked."""
    assert [letter.bidder for letter in letters(schedule(**SLIP))] == ["Alder"]
    assert letters(schedule()) == ()


def test_build_letters__what_stands_in_the_bid_and_where() -> None:
    """The question shows the bidder's own figures with their cells."""
    (letter,) = letters(schedule(**SLIP))
    (question,) = letter.questions
    assert [(s.label, s.text, s.place) for s in question.statements] == [
        ("load loss", "8.04 kW", "alder.xlsx, sheet Offers, cell B4"),
        ("total loss", "8.04 kW", "alder.xlsx, sheet Offers, cell D4"),
        ("no-load loss", "0.640 kW", "alder.xlsx, sheet Offers, cell A4"),
    ]


@pytest.mark.parametrize(
    "figures", [SLIP, {"price": "2100"}, {"price": "210000"}, {"no_load": "0.2"}, {"load": "0.74"}]
)
def test_letters__name_no_rank_price_or_rival(figures: dict[str, str]) -> None:
    """Neither text nor page has a word on ranking, an amount of money, or another bidder or its figures."""
    offers = [schedule(**figures), *rivals()]
    (letter,) = letters(schedule(**figures))
    money = [q.text for o in offers for q in (o.unit_price,) if q is not None]
    others = [q.text for o in rivals() for q in (o.no_load_loss_kw, o.load_loss_kw) if q is not None]
    names = [offer.bidder.value for offer in rivals()]
    words = ["rank", "price", "cheap", "lowest", "first", "winner", "award", "median", "others", "rival", "competitor"]
    for printed in (letter_text(letter), letter_html(letter)):
        body = printed.split("</style>")[-1].casefold()
        assert [told for told in (*money, *others, *names, *words) if told.casefold() in body] == []


def test_letters__two_lots_in_their_order() -> None:
    """The questions of one bidder stand in one letter, numbered in the order of the lots."""
    tender = tender_with(PROVED, plain_lot(id="A"), plain_lot(id="B"))
    offers = [schedule(lot="B", **SLIP), schedule(lot="A", **SLIP)]
    (letter,) = build_letters(tender, offers, find_clerical_errors(tender, offers))
    assert [(question.number, question.lot) for question in letter.questions] == [(1, "A"), (2, "B")]


def test_build_letters__no_place_in_a_file_of_several_bidders() -> None:
    """A table in which the buyer typed all offers is not shown to anybody."""
    shared = Place("bids/all.csv", line=2)
    own = schedule(**SLIP).model_copy(update={"place": shared})
    other = schedule("Birch").model_copy(update={"place": Place("bids/all.csv", line=3)})
    tender = tender_with(PROVED, plain_lot())
    quantities = {
        name: getattr(own, name).model_copy(update={"place": shared})
        for name in ("load_loss_kw", "total_loss_kw", "no_load_loss_kw")
    }
    offers = [own.model_copy(update=quantities), other]
    (letter,) = build_letters(tender, offers, find_clerical_errors(tender, offers))
    assert {statement.place for statement in letter.questions[0].statements} == {""}


def test_build_letters__no_place_that_names_a_rival() -> None:
    """A file name with another bidder's name in it is left out."""
    own = schedule(**SLIP)
    place = Place("bids/alder and cedar.xlsx", sheet="Offers", cell="B4")
    quantity = own.load_loss_kw
    assert quantity is not None
    own = own.model_copy(update={"place": place, "load_loss_kw": quantity.model_copy(update={"place": place})})
    (letter,) = letters(own)
    assert "cedar" not in letter_text(letter).casefold()


def test_build_letters__a_loss_on_another_basis_is_asked_about_too() -> None:
    """Questions that the evaluation drafts on another rating or temperature stand in the same letter."""
    lot = plain_lot(loss_basis=records.loss_basis(convert=()))
    offers = [schedule(temperature="85"), *rivals()]
    tender = tender_with(PROVED, lot)
    findings = evaluate(tender, offers).findings
    (letter,) = build_letters(tender, offers, (), findings)
    assert letter.questions[0].text.startswith("Your load loss is stated at 85 °C")


@pytest.mark.parametrize(
    ("setting", "words"),
    [(PROVED, "may confirm a value that your bid itself proves"), (FIXED, "changes neither"), (None, "")],
)
def test_letters__say_what_an_answer_may_do(setting: str | None, words: str) -> None:
    """The announced rule on clarifications stands in the letter; an unset one does not."""
    (letter,) = letters(schedule(**SLIP), setting=setting)
    assert words in letter_html(letter)
    assert len(letter.closing) == (2 if setting else 1)
    assert "type and routine tests" in letter.closing[-1]


def test_letter_text__at_most_78_columns() -> None:
    """Plain text fits a typewriter page and ends with one newline."""
    (letter,) = letters(schedule(**SLIP))
    text = letter_text(letter)
    assert max(len(line) for line in text.splitlines()) <= 78
    assert text.endswith("\n")
    assert not text.endswith("\n\n")


def test_letter_html__markup_in_names_stays_text() -> None:
    """What a bidder calls itself cannot become markup, nor break a line of the text."""
    evil = '<script>alert(1)</script>\n"&\u202e'
    (letter,) = letters(schedule(evil, **SLIP))
    page = letter_html(letter)
    assert "<script" not in page
    assert "&lt;script&gt;" in page
    assert "\u202e" not in page + letter_text(letter)
    assert letter_text(letter).count("To: ") == 1


def test_letter_html__asks_for_nothing_outside() -> None:
    """One file, no script, no address."""
    (letter,) = letters(schedule(**SLIP))
    page = letter_html(letter)
    assert "default-src 'none'" in page
    assert [word for word in ("http:", "https:", "src=", "@import", "url(") if word in page] == []


def test_letters__same_view_same_text() -> None:
    """Byte for byte."""
    first, second = letters(schedule(**SLIP)), letters(schedule(**SLIP))
    assert [letter_html(letter) for letter in first] == [letter_html(letter) for letter in second]


@pytest.mark.parametrize(
    ("name", "stem"),
    [
        ("Alder & Söhne", "alder-sohne"),
        ("../../etc/passwd", "etc-passwd"),
        ("C:\\Windows\\x.html", "c-windows-x-html"),
        ("a/b", "a-b"),
        ("CON", "bidder-con"),
        ("Ольха", "bidder"),
        ("", "bidder"),
        (".", "bidder"),
        ("x" * 300, "x" * 60),
        ("a\x00b\nc", "a-b-c"),
    ],
)
def test_file_stems__safe_everywhere(name: str, stem: str) -> None:
    """No path, no device, nothing empty, nothing endless."""
    assert file_stems([name]) == {name: stem}


@given(st.lists(st.text(max_size=80)))
def test_file_stems__unique_and_plain(names: list[str]) -> None:
    """Whatever the names, the files differ and have plain names, in any order of the bidders."""
    stems = file_stems(names)
    assert len(set(stems.values())) == len(set(names))
    assert all(stem and set(stem) <= set("abcdefghijklmnopqrstuvwxyz0123456789-") for stem in stems.values())
    assert file_stems(reversed(names)) == stems
