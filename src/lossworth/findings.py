"""Places, findings and the table of finding kinds: how every stage says what is wrong, and where."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable
from dataclasses import dataclass
from enum import StrEnum

__all__ = ["KINDS", "Effect", "Finding", "FindingKind", "Place", "any_stops", "in_reading_order", "one_line"]

_LONGEST_QUOTATION = 60


@dataclass(frozen=True, slots=True)
class Place:
    """Where a value stood: a file with a sheet and cell, a line and column, or a line and key.

    Parameters
    ----------
    file : str
        Path relative to the tender's folder, with forward slashes.
    sheet, cell : str, optional
        Worksheet name and cell reference, ``"F7"``.
    line : int, optional
        Line of a text file, counted from 1.
    column : str, optional
        Header of the column of a table in a text file.
    key : str, optional
        Dotted key in a tender file, ``"lot.3.rates.load"``.
    """

    file: str
    sheet: str | None = None
    cell: str | None = None
    line: int | None = None
    column: str | None = None
    key: str | None = None

    def __str__(self) -> str:
        text = one_line(self.file)
        if self.sheet is not None:
            text += f"[{one_line(self.sheet)}]"
        if self.cell is not None:
            text += f"!{self.cell}"
        if self.line is not None:
            text += f":{self.line}"
        if self.column is not None:
            text += f"[{one_line(self.column)}]"
        return text


class Effect(StrEnum):
    """What a finding does to the evaluation."""

    STOPS = "stops the evaluation"
    NOT_EVALUATED = "offer not evaluated"
    NON_RESPONSIVE = "offer non-responsive"
    NOTE = "note"


@dataclass(frozen=True, slots=True)
class FindingKind:
    """One row of the table of kinds: what can be wrong, why, and what to do about it.

    Parameters
    ----------
    slug : str
        Short name, stable over releases; tests and JSON use it.
    title : str
        The kind in a few words.
    effect : Effect
        What it does to the evaluation.
    cause : str
        Why it happens, in a sentence.
    remedy : str
        What to do, in a sentence; used where a finding has no closer remedy.
    """

    slug: str
    title: str
    effect: Effect
    cause: str
    remedy: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing found wrong or worth knowing, with its place, its rule and its remedy.

    Parameters
    ----------
    kind : str
        Slug of a row of `KINDS`.
    field : str
        The quantity or part concerned, in the trade's words (``"load loss"``).
    rule : str
        What was expected, as a clause that follows the field (``"must be above 0 kW"``).
    place : Place, optional
        Where the value stood.
    got : str, optional
        What stood there, as read.
    bidder, lot : str, optional
        The offer concerned.
    fix : str, optional
        What to do; the kind's own remedy where empty.

    Raises
    ------
    KeyError
        If the kind is not in the table.
    """

    kind: str
    field: str
    rule: str
    place: Place | None = None
    got: str | None = None
    bidder: str | None = None
    lot: str | None = None
    fix: str = ""

    def __post_init__(self) -> None:
        KINDS[self.kind]

    @property
    def effect(self) -> Effect:
        """What the finding does to the evaluation."""
        return KINDS[self.kind].effect

    @property
    def remedy(self) -> str:
        """What to do about it."""
        return self.fix or KINDS[self.kind].remedy

    @property
    def reason(self) -> str:
        """Field, rule and the value as read."""
        text = f"{one_line(self.field)}: {one_line(self.rule)}"
        if self.got is None:
            return text
        return f'{text}, got "{quoted(self.got)}"' if self.got.strip() else f"{text}, got a blank"

    @property
    def statement(self) -> str:
        """The reason with the offer concerned, without place and remedy."""
        text = self.reason
        concerned = [one_line(self.bidder)] if self.bidder else []
        if self.lot:
            concerned.append(f"lot {one_line(self.lot)}")
        if concerned:
            text += f" ({', '.join(concerned)})"
        return text

    def __str__(self) -> str:
        where = f"{self.place}: " if self.place else ""
        return f"{where}{self.statement}\n  fix: {one_line(self.remedy)}"


def one_line(text: str) -> str:
    """Text on one line with control characters made visible, so that no file can forge our messages.

    Parameters
    ----------
    text : str
        Any text, trusted or not.

    Returns
    -------
    str
        The text with every unprintable character written as an escape and every kind of space as a space.
    """
    return "".join(c if c.isprintable() else _visible(c) for c in text)


def _visible(character: str) -> str:
    if unicodedata.category(character) == "Zs":  # non-breaking and thin spaces
        return " "
    return character.encode("unicode_escape").decode("ascii")


def quoted(text: str) -> str:
    """Value as read, on one line and shortened to what a message can carry.

    Parameters
    ----------
    text : str
        The value as it stood.

    Returns
    -------
    str
        At most 60 characters of it.
    """
    text = one_line(text)
    return text if len(text) <= _LONGEST_QUOTATION else text[: _LONGEST_QUOTATION - 1] + "…"


def any_stops(findings: Iterable[Finding]) -> bool:
    """Whether one of the findings stops the evaluation.

    Parameters
    ----------
    findings : iterable of Finding
        Findings of any stages.

    Returns
    -------
    bool
        True if at least one has the effect `Effect.STOPS`.
    """
    return any(finding.effect is Effect.STOPS for finding in findings)


def in_reading_order(findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """Findings sorted by weight, then file, keeping the order of reading within a file.

    Parameters
    ----------
    findings : iterable of Finding
        Findings of any stages.

    Returns
    -------
    tuple of Finding
        Those that stop the evaluation first, notes last; duplicates removed.
    """
    weight = {effect: number for number, effect in enumerate(Effect)}
    unique = dict.fromkeys(findings)
    return tuple(sorted(unique, key=lambda f: (weight[f.effect], f.place.file if f.place else "")))


_STOPS, _NOT_EVALUATED, _NON_RESPONSIVE, _NOTE = Effect

KINDS: dict[str, FindingKind] = {
    kind.slug: kind
    for kind in (
        # Files
        FindingKind(
            "file-missing",
            "File not found",
            _STOPS,
            "A file or folder that the evaluation needs is not there.",
            "Check the path, or start a tender folder with `lossworth start`.",
        ),
        FindingKind(
            "file-unreadable",
            "File cannot be read",
            _STOPS,
            "The file is damaged, empty, protected or not of the type that its name says.",
            "Ask the bidder for the file again, or save it anew as .xlsx or as csv in UTF-8.",
        ),
        FindingKind(
            "file-too-large",
            "File exceeds the stated bounds",
            _STOPS,
            "The file, or what it unpacks to, is larger than any bid needs to be.",
            "Save the bid anew with only the rows and columns that it needs.",
        ),
        FindingKind(
            "file-not-read",
            "File not read",
            _NOTE,
            "The folder of bids holds a file of a type that carries no bid records.",
            "Nothing to do if the file is only an attachment.",
        ),
        # Tender file
        FindingKind(
            "tender-syntax",
            "Tender file is not valid TOML",
            _STOPS,
            "A quote, bracket or equals sign is missing or misplaced.",
            "Mend the line; text needs quotes, numbers do not.",
        ),
        FindingKind(
            "tender-key-missing",
            "Key missing in the tender file",
            _STOPS,
            "The evaluation needs a value that the tender does not give.",
            "Add the key; `lossworth start` writes an example in which each key is explained.",
        ),
        FindingKind(
            "tender-key-unknown",
            "Key not known in the tender file",
            _STOPS,
            "A key is misspelled or stands in the wrong table; it would be ignored in silence.",
            "Correct the spelling or take the key out.",
        ),
        FindingKind(
            "tender-value",
            "Value in the tender file not admissible",
            _STOPS,
            "A value has the wrong type or lies outside its bounds.",
            "Correct the value.",
        ),
        FindingKind(
            "tender-conflict",
            "Keys of the tender file contradict each other",
            _STOPS,
            "Two keys say the same thing twice, or one asks for another that is not there.",
            "Keep one of them.",
        ),
        FindingKind(
            "tender-key-not-used",
            "Part of the tender file not used",
            _NOTE,
            "A table or a name of the tender file has no effect on this run.",
            "Nothing to do, unless it was meant for a lot or a file that has another name.",
        ),
        # Tables of bids
        FindingKind(
            "header-missing",
            "No table of offers found",
            _STOPS,
            "No row of the file has the headers of a table of offers.",
            "Give the table a header row with at least: lot, unit price, no-load loss [kW], load loss [kW].",
        ),
        FindingKind(
            "column-missing",
            "Column missing",
            _STOPS,
            "The table of offers lacks a column that every lot needs.",
            "Add the column, with its unit in brackets.",
        ),
        FindingKind(
            "column-twice",
            "Column given twice",
            _STOPS,
            "Two columns have the same meaning, so that a value could be taken from either.",
            "Remove or rename one of them.",
        ),
        FindingKind(
            "column-unit",
            "Unit of a column missing or not known",
            _STOPS,
            "A column of figures does not state its unit, or states one that does not fit.",
            "Write the unit in brackets into the header, for instance no-load loss [kW].",
        ),
        FindingKind(
            "column-not-read",
            "Column not read",
            _NOTE,
            "The table has a column that this evaluation does not use.",
            "Nothing to do, unless the column holds a value under an unusual name.",
        ),
        FindingKind(
            "row-length",
            "Row longer or shorter than the header",
            _STOPS,
            "A row of a csv file has another number of cells than the header, so that values may stand under "
            "wrong headers.",
            "Put cells that hold the separating mark into quotes, or separate the columns by semicolons.",
        ),
        FindingKind(
            "row-not-read",
            "Row not read",
            _NOTE,
            "A row below the headers states neither a price nor a loss.",
            "Nothing to do if the row is a remark.",
        ),
        FindingKind(
            "no-offers",
            "No offer found",
            _STOPS,
            "There is no bid file, or a table has headers but no rows.",
            "Put the bidders' files into the folder `bids`, or name them on the command line.",
        ),
        FindingKind(
            "bidder-missing",
            "Bidder not named",
            _STOPS,
            "A row or workbook does not say whose offer it is.",
            "Fill in the bidder's name.",
        ),
        FindingKind(
            "lot-unknown",
            "Lot not in the tender",
            _STOPS,
            "A row offers a lot that the tender does not have.",
            "Correct the lot, or add it to the tender file.",
        ),
        FindingKind(
            "offer-twice",
            "Offer given twice",
            _STOPS,
            "The same bidder offers the same lot in two places.",
            "Remove one of the two; the tool does not choose between them.",
        ),
        # One offer
        FindingKind(
            "value-missing",
            "Value missing",
            _NOT_EVALUATED,
            "The bidder did not state a value that the evaluation needs. A missing loss is not zero.",
            "The offer stays unranked; whether the bidder may be asked is for the tender's rules to say.",
        ),
        FindingKind(
            "value-unreadable",
            "Value cannot be read",
            _NOT_EVALUATED,
            "A cell holds text, an error or a date where a number is expected.",
            "Ask the bidder what was meant; correct the file only by what the bidder confirms.",
        ),
        FindingKind(
            "value-out-of-bounds",
            "Value not possible",
            _NOT_EVALUATED,
            "A figure is negative, zero or beyond any meaning.",
            "Ask the bidder what was meant; correct the file only by what the bidder confirms.",
        ),
        FindingKind(
            "currency-unknown",
            "No exchange rate for the currency",
            _NOT_EVALUATED,
            "The price is in a currency for which the tender gives no exchange rate.",
            "Add the announced rate to [exchange.rates] in the tender file, with source, kind and date.",
        ),
        FindingKind(
            "quantity-differs",
            "Quantity differs from the tender",
            _NOT_EVALUATED,
            "The bidder offers another number of units than the lot has.",
            "Ask the bidder whether the whole quantity is offered.",
        ),
        FindingKind(
            "no-load-loss-above-maximum",
            "No-load loss above the maximum",
            _NON_RESPONSIVE,
            "The guaranteed no-load loss exceeds the tender's maximum.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "load-loss-above-maximum",
            "Load loss above the maximum",
            _NON_RESPONSIVE,
            "The guaranteed load loss exceeds the tender's maximum.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "efficiency-below-minimum",
            "Peak efficiency index below the minimum",
            _NON_RESPONSIVE,
            "The peak efficiency index that follows from the guaranteed losses is below the tender's minimum.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "impedance-outside",
            "Impedance outside the specified range",
            _NON_RESPONSIVE,
            "The guaranteed short-circuit impedance lies outside the tender's range.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "delivery-too-late",
            "Delivery later than the latest",
            _NON_RESPONSIVE,
            "The offered delivery is later than the tender allows.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "limit-not-answered",
            "Value needed for a limit not stated",
            _NOT_EVALUATED,
            "The tender sets a limit, and the bidder does not state the value that it limits.",
            "The offer stays unranked; whether the bidder may be asked is for the tender's rules to say.",
        ),
        FindingKind(
            "loss-basis-differs",
            "Loss guaranteed on another basis",
            _NOT_EVALUATED,
            "The bidder states the load loss at another rating or temperature, or as a total, and the tender does not "
            "allow a conversion.",
            "Ask the bidder for the guarantee on the tender's basis.",
        ),
        # Notes
        FindingKind(
            "loss-converted",
            "Loss converted to the tender's basis",
            _NOTE,
            "The bidder states the load loss on another basis, and the tender allows the conversion.",
            "Have the bidder confirm the converted value; until then it is an assumption.",
        ),
        FindingKind(
            "value-not-read",
            "Value not read",
            _NOTE,
            "A cell does not hold a readable number, in a column that the evaluation of this lot does not need.",
            "Nothing to do for the evaluation.",
        ),
        FindingKind(
            "auxiliary-loss-zero-by-rule",
            "Auxiliary loss zero by rule",
            _NOTE,
            "The unit is cooled without fans or pumps, so that a blank auxiliary loss is zero.",
            "Nothing to do.",
        ),
        FindingKind(
            "auxiliary-loss-not-valued",
            "Auxiliary loss not valued",
            _NOTE,
            "The bidder states an auxiliary loss, and the tender announces no rate for it.",
            "Nothing to do; the tender's own rates alone value the losses.",
        ),
        FindingKind(
            "lot-without-ranking",
            "No offer of the lot can be ranked",
            _NOTE,
            "No offer was received for the lot, or none is both complete and responsive.",
            "See the reasons beside each offer.",
        ),
        FindingKind(
            "tie",
            "Tie to the smallest amount",
            _NOTE,
            "Two or more offers have the same total owning cost after rounding.",
            "Decide by the order that the tender announced, and record how.",
        ),
    )
}
