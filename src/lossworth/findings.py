"""Places, findings and the table of finding kinds: how every stage says what is wrong, and where."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable
from dataclasses import dataclass
from enum import StrEnum

__all__ = ["KINDS", "Effect", "Finding", "FindingKind", "Place", "any_stops", "in_reading_order", "one_line", "quoted"]

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
    waiver : str, optional
        Who waived the finding, when and why; a waived finding keeps its text and becomes a note.

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
    waiver: str = ""

    def __post_init__(self) -> None:
        KINDS[self.kind]

    @property
    def effect(self) -> Effect:
        """What the finding does to the evaluation."""
        return Effect.NOTE if self.waiver else KINDS[self.kind].effect

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
        return f"{text}; {one_line(self.waiver)}" if self.waiver else text

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
        FindingKind(
            "rule-unset",
            "Rule not announced",
            _STOPS,
            "The tender or a bid needs a rule or an adder on which tenders differ, and the tender announces none.",
            "Enter the rule into the tender file as the tender documents state it; a rule that is chosen after the "
            "opening of bids is open to protest.",
        ),
        # Load profiles and price series
        FindingKind(
            "file-outside",
            "File outside of the tender's folder",
            _STOPS,
            "The tender file names a file by a path that leads out of the tender's folder.",
            "Copy the file into the tender's folder and name it from there, such as profiles/feeder.csv.",
        ),
        FindingKind(
            "profile-columns",
            "Columns of a load profile or price series not as expected",
            _STOPS,
            "A column is missing, given twice, or does not state a unit that fits.",
            "Give the file a header row such as: time, load [kVA].",
        ),
        FindingKind(
            "profile-value-missing",
            "Value missing in a load profile or price series",
            _STOPS,
            "A step has no value. A gap is never filled.",
            "Add the value from its source, or choose a complete year; a value filled in by hand is an assumption to "
            "state in `source`.",
        ),
        FindingKind(
            "profile-value",
            "Value in a load profile or price series not possible",
            _STOPS,
            "A step holds text, a negative value or one beyond any meaning, or all steps are zero.",
            "Correct the value from its source.",
        ),
        FindingKind(
            "profile-time",
            "Time of a step not as expected",
            _STOPS,
            "A time stamp or number cannot be read, changes its offset, or does not begin the day.",
            "Write times as 2025-01-31T13:00, each at the beginning of its step, in one offset or in none.",
        ),
        FindingKind(
            "profile-gap",
            "Steps missing",
            _STOPS,
            "Steps are left out between two others, by a failure of the meter or of the clock. A gap is never filled.",
            "Add the missing steps from their source, or choose a complete year.",
        ),
        FindingKind(
            "profile-step-twice",
            "Step given twice",
            _STOPS,
            "Two rows have the same time, so that a value could be taken from either.",
            "Remove one of them.",
        ),
        FindingKind(
            "profile-order",
            "Steps out of order",
            _STOPS,
            "A row is earlier than the one above it.",
            "Sort the rows by time.",
        ),
        FindingKind(
            "profile-step-length",
            "Steps of another length",
            _STOPS,
            "Steps are not all of one length, or it is not an hour, half an hour or a quarter of an hour.",
            "Give all steps one length: an hour, half an hour or a quarter of an hour.",
        ),
        FindingKind(
            "profile-length",
            "Not a whole year or day",
            _STOPS,
            "The steps do not make a whole year, or those of a typical day not a whole day.",
            "Give all steps of one year, or of each typical day.",
        ),
        FindingKind(
            "profile-daylight-saving",
            "Changes of the clock not as declared",
            _STOPS,
            "An hour is missing in spring and one stands twice in autumn although the tender file declares standard "
            "time, or it declares daylight saving and they are not both there.",
            "Declare local time with daylight saving if the clock was changed; else mend the file.",
        ),
        FindingKind(
            "profile-day-weights",
            "Days of a year do not fit the typical days",
            _STOPS,
            "A typical day has no number of days a year, or the numbers do not make a year.",
            "Give each day type of the file its days a year, 365 or 366 in all, under profile_day_weights.",
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
            "cells-merged",
            "Merged cells in a table of offers",
            _STOPS,
            "Cells of several offers or columns are one; the file holds the value in the first of them only.",
            "Ask the bidder to part the cells and to fill in each; a value is never spread over others.",
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
        FindingKind(
            "arithmetic-error-rejected",
            "Arithmetic error in the price schedule",
            _NON_RESPONSIVE,
            "Unit price times quantity is not the stated total, and the tender rejects such an offer.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "correction-refused",
            "Correction refused by the bidder",
            _NON_RESPONSIVE,
            "The bidder does not accept the correction of an arithmetic error.",
            "The offer is not ranked; the tender documents say what becomes of a bid security.",
        ),
        FindingKind(
            "item-missing-rejected",
            "Item not priced",
            _NON_RESPONSIVE,
            "The bidder leaves an item without a price, and the tender rejects such an offer.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "price-variable",
            "Price not firm",
            _NON_RESPONSIVE,
            "The bidder's price follows an index, and the tender accepts firm prices only.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "tolerance-not-accepted",
            "Tolerance on losses not accepted",
            _NON_RESPONSIVE,
            "The bidder claims a plus tolerance on its guaranteed losses that the tender does not allow.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "sound-level-above-maximum",
            "Sound level above the maximum",
            _NON_RESPONSIVE,
            "The guaranteed sound level exceeds the tender's maximum.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "liquid-not-accepted",
            "Insulating liquid not accepted",
            _NON_RESPONSIVE,
            "The bidder offers an insulating liquid that the tender does not accept.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "pcb-free-not-declared",
            "Not declared free of PCB",
            _NON_RESPONSIVE,
            "The tender requires a declaration that the liquid is free of PCB, and the bidder denies it.",
            "The offer is not ranked.",
        ),
        FindingKind(
            "regulation-limit-not-kept",
            "Limit of a regulation not kept",
            _NON_RESPONSIVE,
            "A guaranteed value is beyond a limit of the regulation that the tender names. No tolerance stands between "
            "a guarantee and the limit.",
            "The offer is not ranked; check the table in the text in force before the bidder is told.",
        ),
        FindingKind(
            "status-set-non-responsive",
            "Found non-responsive by decision",
            _NON_RESPONSIVE,
            "A recorded decision takes the offer out of the ranking.",
            "The offer is not ranked; the decision stands in the papers.",
        ),
        FindingKind(
            "status-set-not-evaluated",
            "Not evaluated by decision",
            _NOT_EVALUATED,
            "A recorded decision says that the offer is not evaluated.",
            "The offer is not ranked; the decision stands in the papers.",
        ),
        FindingKind(
            "delivery-term-without-adder",
            "No adder for the delivery term",
            _NOT_EVALUATED,
            "The price holds under a delivery term for which the tender announces no adder to its delivered point.",
            "Add the announced adder to [[delivery.level]] in the tender file; without it prices do not compare.",
        ),
        FindingKind(
            "item-priced-by-nobody",
            "No price can stand in for an item",
            _NOT_EVALUATED,
            "The bidder leaves an item without a price, and no offer of another bidder that counts states one.",
            "Ask whether the item is to be part of the evaluated price.",
        ),
        FindingKind(
            "alternative-not-evaluated",
            "Alternative not evaluated",
            _NOT_EVALUATED,
            "The tender's rule on alternatives leaves this one out.",
            "Nothing to do; the alternative is listed and not ranked.",
        ),
        # Notes
        FindingKind(
            "profile-remark",
            "Load profile or price series read with a remark",
            _NOTE,
            "Something in the file is accepted and worth knowing: a leap year, changes of the clock, reverse flow.",
            "Nothing to do if it is meant.",
        ),
        FindingKind(
            "profile-questioned",
            "Value of a load profile or price series questioned",
            _NOTE,
            "A value lies far above all others, as a fault of a meter or of a unit would.",
            "Compare the value with its source; the peak load and the loss factor hang on it.",
        ),
        FindingKind(
            "loss-converted",
            "Loss converted to the tender's basis",
            _NOTE,
            "The bidder states the load loss on another basis, and the tender allows the conversion.",
            "Have the bidder confirm the converted value; until then it is an assumption.",
        ),
        FindingKind(
            "offers-hidden",
            "Offers on a hidden sheet, row or column",
            _NOTE,
            "A bidder's workbook hides what it states; it counts all the same, and nobody saw it on opening the file.",
            "Open the file, show what is hidden, and ask the bidder whether it is part of the bid.",
        ),
        FindingKind(
            "workbook-links",
            "Workbook leads to other files",
            _NOTE,
            "The workbook takes values from other files or data; they count as they were when it was saved.",
            "Compare its figures with the printed bid; links are never followed.",
        ),
        FindingKind(
            "alternative-without-base",
            "Alternative without base offer",
            _NOTE,
            "A bidder offers an alternative for a lot without a base offer, or under another spelling of its name.",
            "Check the bid; whether the alternative counts is for the announced rule to say.",
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
        FindingKind(
            "tie-broken",
            "Tie broken by the announced order",
            _NOTE,
            "Offers with the same total owning cost were put in order by a criterion that the tender announces.",
            "Record the criterion in the award.",
        ),
        FindingKind(
            "arithmetic-error-corrected",
            "Arithmetic error corrected",
            _NOTE,
            "Unit price times quantity is not the stated total, and the announced rule says which figure governs.",
            "Tell the bidder, and record the answer in decisions.toml as `accept correction` or `refuse correction`.",
        ),
        FindingKind(
            "arithmetic-error-not-corrected",
            "Arithmetic error left as read",
            _NOTE,
            "Unit price times quantity is not the stated total, and the tender evaluates prices as read.",
            "Nothing to do for the evaluation; the unit price as read is used.",
        ),
        FindingKind(
            "item-price-stands-in",
            "Price of others stands in for a missing item",
            _NOTE,
            "The bidder leaves an item without a price, and the announced rule takes one from the other offers.",
            "Nothing to do; the amount serves the comparison only and is no part of the contract price.",
        ),
        FindingKind(
            "discount-unusual",
            "Discount apparently not meant as it stands",
            _NOTE,
            "A discount is above 30 percent, or above zero and below 1 percent.",
            "Ask the bidder to verify it; it is used as it stands.",
        ),
        FindingKind(
            "cooling-differs",
            "Cooling other than asked",
            _NOTE,
            "The tender asks for a unit with fans or pumps, and the bidder offers one that is naturally cooled.",
            "Ask the bidder to confirm the cooling and the auxiliary loss; a blank one is zero by rule.",
        ),
        FindingKind(
            "discount-not-counted",
            "Discount not counted",
            _NOTE,
            "The bidder states a discount that the announced rule leaves out of the comparison.",
            "Nothing to do for the evaluation.",
        ),
        FindingKind(
            "payment-terms-not-counted",
            "Differing payment terms not counted",
            _NOTE,
            "The bidder states payment terms of its own, and the announced rule leaves them out of the comparison.",
            "Nothing to do for the evaluation.",
        ),
        FindingKind(
            "commercial-term-not-stated",
            "Commercial term not stated",
            _NOTE,
            "Other bidders of the lot state the term, this one does not; its price is taken as the tender asks for it.",
            "Check the bid; whether the bidder may be asked is for the tender's rules to say.",
        ),
        FindingKind(
            "price-variable-at-base-date",
            "Variable price evaluated at the base date",
            _NOTE,
            "The bidder's price follows an index; the announced rule evaluates it as it stands at the base date.",
            "Keep formula, weights, base indices and ceiling with the bid: what is paid will differ.",
        ),
        FindingKind(
            "tolerance-added",
            "Claimed tolerance added to the losses",
            _NOTE,
            "The announced rule evaluates losses at the guarantee plus the tolerance that the bidder claims.",
            "Nothing to do; limits are compared with the guarantee itself.",
        ),
        FindingKind(
            "deviation-stated",
            "Deviation stated by the bidder",
            _NOTE,
            "The bidder names deviations from the tender in its own words.",
            "Decide whether each is material and what it costs; record a waiver or a changed status in decisions.toml.",
        ),
        FindingKind(
            "validity-before-award",
            "Bid ends before the planned award",
            _NOTE,
            "The bid cannot be accepted any more on the planned day of award.",
            "Ask all bidders for an extension in time, in writing.",
        ),
        FindingKind(
            "preference-without-group",
            "Nobody in the preferred group",
            _NOTE,
            "No ranked offer of the lot belongs to the group, so that the margin lies on the prices of all.",
            "Compare with the ranking without the margin, which the papers show.",
        ),
        FindingKind(
            "regulation-caution",
            "Caution on a table of a regulation",
            _NOTE,
            "A limit rests on a part of a table that needs a check in the text in force.",
            "Check the limit there before anybody is rejected by it.",
        ),
        FindingKind(
            "status-set-evaluated",
            "Taken in by decision",
            _NOTE,
            "A recorded decision sets aside what would leave the offer unranked.",
            "The decision stands in the papers; see whether it moves the ranking.",
        ),
        FindingKind(
            "waiver-moves-ranking",
            "Waiver moves the ranking",
            _NOTE,
            "An offer that is ranked by a waiver or by a decision stands before offers that need none.",
            "A waiver must not prejudice other bidders; have the decision examined.",
        ),
        FindingKind(
            "decision-not-applied",
            "Decision not applied",
            _NOTE,
            "A recorded decision fits no offer and no finding, or cannot have the effect that it asks for.",
            "Compare bidder, lot and field with the findings.",
        ),
        FindingKind(
            "rules-not-published",
            "No published rules to compare with",
            _NOTE,
            "No rules file was kept when the rules were published, so that nothing proves that these are the same.",
            "Before the next opening run `lossworth rules TENDER --publish` and print the fingerprint in the tender.",
        ),
        FindingKind(
            "rules-differ",
            "Rule differs from the published one",
            _NOTE,
            "The tender file states a rule otherwise than the rules file that was kept at publication.",
            "Evaluate by the published rule, or show the amendment that bidders were told of before opening.",
        ),
        # Apparent clerical errors: questions to the bidder
        FindingKind(
            "apparent-error-loss-unit",
            "Loss apparently in another unit",
            _NOTE,
            "A loss is three decades away from a plausible one, as watts under a heading of kilowatts are.",
            "Ask the bidder for the unit of each figure; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-total-as-load-loss",
            "Load loss apparently the total loss",
            _NOTE,
            "The load loss repeats the stated total loss, or exceeds its own parts by the no-load loss.",
            "Ask the bidder for the load loss without the no-load loss; nothing is changed before the answer.",
        ),
        FindingKind(
            "apparent-error-losses-swapped",
            "No-load and load loss apparently exchanged",
            _NOTE,
            "The no-load loss is above the load loss, and both would be ordinary the other way round.",
            "Ask the bidder which is which; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-reference-temperature",
            "Load loss apparently at another temperature",
            _NOTE,
            "The load loss is what its stated parts would be at another temperature, or the stated temperature is one "
            "to which no standard refers load losses.",
            "Ask the bidder for the temperature of each figure; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-decimal-mark",
            "Decimal mark apparently misplaced",
            _NOTE,
            "A figure lies a decade or two away from the others and from the plausible band, and fits once its decimal "
            "mark is moved.",
            "Ask the bidder to verify the figure; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-rating",
            "Load loss apparently at another rating",
            _NOTE,
            "Impedance and load loss fit once they are taken from another rating of the unit, mostly that without "
            "fans: impedance goes with the rating, load loss with its square.",
            "Ask the bidder for the rating of both; a converted figure binds nobody until the bidder confirms it.",
        ),
        FindingKind(
            "apparent-error-phases",
            "Loss apparently of one phase",
            _NOTE,
            "Three times the loss makes the stated total loss or the loss of the others.",
            "Ask the bidder whether the loss holds for one phase or the unit; nothing is changed before the answer.",
        ),
        FindingKind(
            "apparent-error-loss-sum",
            "Parts of a loss do not make its total",
            _NOTE,
            "No-load loss and load loss do not add up to the stated total loss, or resistive and stray part not to the "
            "load loss, beyond the rounding of each figure.",
            "Ask the bidder which figure holds; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-resistance",
            "Load loss above what the impedance allows",
            _NOTE,
            "The load loss in percent of the rating is the resistive part of the impedance and cannot exceed it.",
            "Ask the bidder for load loss, impedance and their rating; nothing is changed before the answer.",
        ),
        FindingKind(
            "apparent-error-efficiency",
            "Declared efficiency does not follow from the losses",
            _NOTE,
            "The declared efficiency follows from the stated losses under none of the usual definitions and loads.",
            "Ask the bidder for the definition; nothing is changed before the answer is on file.",
        ),
        FindingKind(
            "apparent-error-low-loss",
            "Loss apparently too low to be built",
            _NOTE,
            "A loss is below the plausible band, or far below those of the other bidders.",
            "Ask the bidder to confirm the guarantee and to name core or conductor and a type test; nobody is rejected "
            "by it.",
        ),
        FindingKind(
            "apparent-error-price",
            "Price far from what is usual",
            _NOTE,
            "The price is abnormally low or far above the other offers or the estimate, or out of line with the "
            "bidder's prices for other lots.",
            "Ask the bidder to verify it and to show how it is made up; no offer is rejected without its answer.",
        ),
        # Decisions by people
        FindingKind(
            "decision-syntax",
            "File of decisions is not valid TOML",
            _STOPS,
            "A quote, bracket or equals sign is missing or misplaced.",
            "Mend the line; text needs quotes, numbers and dates do not.",
        ),
        FindingKind(
            "decision-key-missing",
            "Key missing in a decision",
            _STOPS,
            "A decision does not say what, about which offer, why, by whom, when, or where it is on file.",
            "Add the key; a decision without reason, name, day and evidence cannot stand in the papers.",
        ),
        FindingKind(
            "decision-key-unknown",
            "Key of a decision not known",
            _STOPS,
            "A key is misspelled, or means nothing for this kind of decision; it would be ignored in silence.",
            "Correct the spelling or take the key out.",
        ),
        FindingKind(
            "decision-value",
            "Value in a decision not admissible",
            _STOPS,
            "A value has the wrong type or lies outside its bounds.",
            "Correct the value.",
        ),
        FindingKind(
            "decision-offer-unknown",
            "Decision on an offer that is not there",
            _STOPS,
            "A decision names a bidder or a lot that the tender and the bids do not have.",
            "Write bidder and lot as they stand in the bids, with the alternative where the offer is one.",
        ),
        FindingKind(
            "decision-superseded",
            "Decision superseded by a later one",
            _NOTE,
            "Two decisions confirm the same value; the one that stands later in the file holds.",
            "Nothing to do: the file keeps both.",
        ),
        FindingKind(
            "confirmation-not-allowed",
            "Confirmed value not used",
            _NOTE,
            "The tender's rule on clarifications does not let this value change, or the bid itself does not prove it.",
            "The offer is evaluated as read; the answer stays on file.",
        ),
        FindingKind(
            "value-confirmed",
            "Value confirmed by the bidder",
            _NOTE,
            "A value that was missing or could not be read is replaced by the one that the bidder confirmed.",
            "Nothing to do; both stand in the papers.",
        ),
    )
}
