"""Do steps follow each other without gap, repetition or disorder? Asked of times of day, of dates and of numbers."""

from __future__ import annotations

from collections import Counter
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from itertools import pairwise

from .file_findings import FileFindings

__all__ = ["Mark", "check_order", "usual_distance"]


@dataclass(frozen=True, slots=True)
class Mark:
    """When one step begins.

    Parameters
    ----------
    line : int
        Line of the file.
    text : str
        As it stands.
    at : int
        Minute on a line of time, or number of the step.
    """

    line: int
    text: str
    at: int


def usual_distance(marks: Sequence[Mark]) -> int | None:
    """Distance from step to step that is most frequent.

    Parameters
    ----------
    marks : sequence of Mark
        In the order of the file.

    Returns
    -------
    int or None
        Above 0, the shorter of two that are equally frequent; None where no step follows an earlier one.
    """
    counts = Counter(after.at - before.at for before, after in pairwise(marks) if after.at > before.at)
    return max(counts, key=lambda distance: (counts[distance], -distance), default=None)


def check_order(
    marks: Sequence[Mark], distance: int, name: str, findings: FileFindings, accepted: Collection[int] = ()
) -> None:
    """Note gaps, repetitions, disorder and steps of another length.

    Parameters
    ----------
    marks : sequence of Mark
        In the order of the file.
    distance : int
        From step to step.
    name : str
        Column that says when, ``"time"`` or ``"step"``.
    findings : FileFindings
        Takes what is wrong.
    accepted : collection of int
        Lines that need not follow the one before them: changes of the clock.
    """
    behind = [(a, b) for a, b in pairwise(marks) if b.at < a.at and b.line not in accepted]
    for before, after in behind:
        rule = f"must not be earlier than that of the row before it, {before.text}"
        findings.add("profile-order", name, rule, after.line, after.text)
    if behind and accepted:
        return  # sorting would mix the doubled hour; one thing at a time
    in_order = sorted(marks, key=lambda mark: mark.at) if behind else marks
    for before, after in pairwise(in_order):
        if after.line not in accepted and after.at - before.at != distance:
            _report(before, after, distance, name, findings)


def _report(before: Mark, after: Mark, distance: int, name: str, findings: FileFindings) -> None:
    apart = after.at - before.at
    steps, rest = divmod(apart, distance)
    if not apart:
        rule = f"must stand once; line {before.line} has it too"
        findings.add("profile-step-twice", name, rule, after.line, after.text)
    elif rest:
        rule = f"must follow {before.text} after {distance} minutes like the others"
        findings.add("profile-step-length", name, rule, after.line, after.text)
    else:
        missing = f"{steps - 1:,} steps are missing" if steps > 2 else "1 step is missing"
        rule = f"must follow {before.text} directly; {missing}"
        findings.add("profile-gap", name, rule, after.line, after.text)
