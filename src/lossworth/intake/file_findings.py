"""Findings on one file of many rows: ten of a kind, and one that says how many more there are."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, field, replace

from ..findings import Finding, Place

__all__ = ["MOST_OF_A_KIND", "FileFindings"]

#: What is wrong in all 35,040 rows is said ten times, and then counted.
MOST_OF_A_KIND = 10


@dataclass
class FileFindings:
    """Findings on one text file, gathered while it is read.

    Parameters
    ----------
    file : str
        Its name in findings.
    """

    file: str
    _found: list[Finding] = field(default_factory=list)
    _counts: Counter[str] = field(default_factory=Counter)
    _next: dict[str, Finding] = field(default_factory=dict)

    def add(
        self,
        kind: str,
        field: str,
        rule: str,
        line: int | None = None,
        got: str | None = None,
        *,
        column: str | None = None,
        fix: str = "",
    ) -> None:
        """Note a finding, or only count it where there are many of its kind.

        Parameters
        ----------
        kind : str
            Slug of the kind.
        field : str
            Quantity or column.
        rule : str
            What was expected.
        line : int, optional
            Line of the file.
        got : str, optional
            What stood there.
        column : str, optional
            Header of the column.
        fix : str
            A closer remedy than that of the kind.
        """
        self._counts[kind] += 1
        if self._counts[kind] > MOST_OF_A_KIND + 1:
            return
        finding = Finding(kind, field, rule, Place(self.file, line=line, column=column), got, fix=fix)
        if self._counts[kind] <= MOST_OF_A_KIND:
            self._found.append(finding)
        else:
            self._next[kind] = finding

    def __contains__(self, kind: str) -> bool:
        return self._counts[kind] > 0

    @property
    def number(self) -> int:
        """How many there are, counted ones included."""
        return self._counts.total()

    def put(self, finding: Finding) -> None:
        """Note a finding that was made elsewhere."""
        self._counts[finding.kind] += 1
        self._found.append(finding)

    @property
    def found(self) -> tuple[Finding, ...]:
        """All that were noted; where there are more of a kind, the next of them with their number."""
        more = (
            replace(finding, rule=f"{finding.rule}; so in {self._counts[kind] - MOST_OF_A_KIND:,} rows from here on")
            for kind, finding in self._next.items()
        )
        return (*self._found, *more)
