"""The rules sheet as page, as data and in the terminal: what to publish before bids are opened."""

from __future__ import annotations

import json
import textwrap
from collections.abc import Iterable, Iterator

from .page_environment import environment
from .rules_view import LotRulesView, RulesView

__all__ = ["FORMAT_VERSION", "rules_html", "rules_json", "rules_text"]

FORMAT_VERSION = 1
_HOW = (
    "SHA-256 of the value of `content` as JSON in UTF-8 with sorted keys, without blanks between the parts, and with "
    "no character escaped that need not be."
)


def rules_html(view: RulesView) -> str:
    """Rules sheet as one HTML file that asks for nothing outside itself.

    Parameters
    ----------
    view : RulesView
        What is shown.

    Returns
    -------
    str
        The page; the same view gives the same text.
    """
    return environment().get_template("rules.html.j2").render(view=view, how=_HOW.replace("`", ""))


def rules_json(view: RulesView) -> str:
    """Rules sheet as JSON text: the file to keep at publication.

    Parameters
    ----------
    view : RulesView
        What is shown.

    Returns
    -------
    str
        UTF-8 text with a final newline. ``fingerprint`` covers ``content`` alone: wording, program and time may change.
    """
    sheet = {
        "format_version": FORMAT_VERSION,
        "tender": {
            "reference": view.reference,
            "title": view.title,
            "buyer": view.buyer,
            "currency": view.currency,
            "opening_date": view.opening_date or None,
            "remark": view.remark or None,
        },
        "fingerprint": view.fingerprint,
        "fingerprint_is": _HOW,
        "content": view.content,
        "sentences": [{"title": section.title, "sentences": list(section.sentences)} for section in view.sections],
        "profile": view.profile or None,
        "rules": [
            {
                "key": rule.key,
                "setting": rule.setting,
                "question": rule.question,
                "sentence": rule.sentence,
                "origin": rule.origin,
            }
            for rule in view.rules
        ],
        "not_announced": {
            "rules": [
                {"key": rule.key, "question": rule.question, "settings": list(rule.settings)}
                for rule in view.silent_rules
            ],
            "further": list(view.silent),
        },
        "incomplete": list(view.gaps),
        "lots": [_lot(lot) for lot in view.lots],
        "cautions": list(view.cautions),
        "generated_at": view.generated_at,
        "tool_version": view.tool_version,
    }
    return json.dumps(sheet, ensure_ascii=False, indent=2) + "\n"


def _lot(lot: LotRulesView) -> dict[str, object]:
    return {
        "id": lot.id,
        "description": lot.description,
        "sentences": list(lot.sentences),
        "formulas": list(lot.formulas),
        "inputs": [{"label": label, "value": value} for label, value in lot.inputs],
        "no_limit": list(lot.silent),
    }


def rules_text(view: RulesView, width: int) -> str:
    """Rules sheet as plain text.

    Parameters
    ----------
    view : RulesView
        What is shown.
    width : int
        Columns of the terminal.

    Returns
    -------
    str
        With a final newline.
    """
    return "\n".join(_lines(view, width)) + "\n"


def _lines(view: RulesView, width: int) -> Iterator[str]:
    yield f"Rules of the evaluation · {view.reference} · {view.title}"
    if view.remark:
        yield from textwrap.wrap(view.remark, width)
    for section in view.sections:
        yield from _list(section.title, section.sentences, width)
    if view.profile:
        yield from _list("Profile", [view.profile], width)
    yield from _list("Rules", (f"{rule.sentence} ({rule.key}: {rule.setting})" for rule in view.rules), width)
    for lot in view.lots:
        yield from _list(
            f"Lot {lot.id} · {lot.description}", (*lot.sentences, *lot.formulas, *_inputs(lot), *_no_limit(lot)), width
        )
    silent = [f"{rule.question} ({rule.key}: {' | '.join(rule.settings)})" for rule in view.silent_rules]
    yield from _list("NOT announced", [*silent, *view.silent], width)
    yield from _list("Announced, but not complete", view.gaps, width)
    yield ""
    yield f"Fingerprint (SHA-256): {view.fingerprint}"


def _inputs(lot: LotRulesView) -> Iterator[str]:
    yield from (f"{label}: {value}" for label, value in lot.inputs)


def _no_limit(lot: LotRulesView) -> Iterator[str]:
    if lot.silent:
        yield f"No limit of the tender for: {', '.join(lot.silent)}."


def _list(title: str, sentences: Iterable[str], width: int) -> Iterator[str]:
    stated = list(sentences)
    if not stated:
        return
    yield ""
    yield title
    for sentence in stated:
        yield from textwrap.wrap(sentence, width, initial_indent="  - ", subsequent_indent="    ")
