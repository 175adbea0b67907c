"""What a letter of questions to one bidder shows: texts, ready to be printed. It knows of no other bidder."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["LetterView", "QuestionView", "StatementView"]


@dataclass(frozen=True, slots=True)
class StatementView:
    """A value of the bidder's own schedule.

    Parameters
    ----------
    label : str
        ``"load loss"``.
    text : str
        As the bidder wrote it, with its unit.
    place : str
        Where in the bidder's own file; empty where the file is not the bidder's own.
    """

    label: str
    text: str
    place: str


@dataclass(frozen=True, slots=True)
class QuestionView:
    """One question.

    Parameters
    ----------
    number : int
        Counted from 1 within the letter.
    lot, description : str
        The lot, and what it is; with the alternative where the offer is one.
    statements : tuple of StatementView
        What the question is about.
    text : str
        The question, in sentences.
    """

    number: int
    lot: str
    description: str
    statements: tuple[StatementView, ...]
    text: str


@dataclass(frozen=True, slots=True)
class LetterView:
    """One letter.

    Parameters
    ----------
    bidder : str
        To whom.
    file_stem : str
        Name of its files without ending; safe on every system, unique among the bidders of the tender.
    reference, title, buyer, opening_date, remark : str
        The tender.
    opening : tuple of str
        Paragraphs before the questions.
    questions : tuple of QuestionView
        In the order of the lots.
    closing : tuple of str
        Paragraphs behind them.
    """

    bidder: str
    file_stem: str
    reference: str
    title: str
    buyer: str
    opening_date: str
    remark: str
    opening: tuple[str, ...]
    questions: tuple[QuestionView, ...]
    closing: tuple[str, ...]
