"""A letter of questions to one bidder, as plain text and as a page to print."""

from __future__ import annotations

import textwrap
from collections.abc import Iterator

from .letters_view import LetterView, QuestionView
from .page_environment import environment

__all__ = ["QUESTIONS_FOLDER", "letter_html", "letter_text"]

#: Folder of the letters inside that of the papers.
QUESTIONS_FOLDER = "questions"
_WIDTH = 78
_BLANK = "_" * 50


def letter_html(letter: LetterView) -> str:
    """Letter as one page that asks for nothing outside itself.

    Parameters
    ----------
    letter : LetterView
        What it shows.

    Returns
    -------
    str
        The page; the same view gives the same text.
    """
    return environment().get_template("letter.html.j2").render(letter=letter)


def letter_text(letter: LetterView) -> str:
    """Letter as plain text of at most 78 columns, unless a word is longer.

    Parameters
    ----------
    letter : LetterView
        What it shows.

    Returns
    -------
    str
        With a final newline.
    """
    return "\n".join(_lines(letter)) + "\n"


def _lines(letter: LetterView) -> Iterator[str]:
    yield letter.buyer
    yield f"Tender {letter.reference}: {letter.title}"
    if letter.opening_date:
        yield f"Bids opened {letter.opening_date}"
    if letter.remark:
        yield ""
        yield from _wrapped(letter.remark)
    yield ""
    yield f"To: {letter.bidder}"
    yield f"Date: {_BLANK[:20]}"
    yield ""
    yield "REQUEST FOR CLARIFICATION"
    for paragraph in letter.opening:
        yield ""
        yield from _wrapped(paragraph)
    for question in letter.questions:
        yield ""
        yield from _question(question)
    for paragraph in letter.closing:
        yield ""
        yield from _wrapped(paragraph)
    yield ""
    yield f"For {letter.buyer}: {_BLANK[:30]}"


def _question(question: QuestionView) -> Iterator[str]:
    yield from _wrapped(f"Question {question.number}, lot {question.lot} ({question.description})")
    yield ""
    for statement in question.statements:
        place = f" ({statement.place})" if statement.place else ""
        yield from _wrapped(f"- {statement.label}: {statement.text}{place}", "  ", "    ")
    yield ""
    yield from _wrapped(question.text)
    yield ""
    yield f"Answer: {_BLANK}"
    yield f"Shown in the bid at: {_BLANK[:37]}"


def _wrapped(text: str, first: str = "", further: str = "") -> list[str]:
    return textwrap.wrap(
        text, _WIDTH, initial_indent=first, subsequent_indent=further, break_long_words=False, break_on_hyphens=False
    )
