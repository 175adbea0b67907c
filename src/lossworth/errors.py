"""The exceptions that the command line turns into exit codes."""

from __future__ import annotations

from collections.abc import Iterable

from .findings import Finding, in_reading_order

__all__ = ["EvaluationStopped", "LossworthError", "OutputExists"]


class LossworthError(Exception):
    """Something that a user can mend; never a programming fault."""


class EvaluationStopped(LossworthError):
    """Findings forbid an evaluation; carries all of them.

    Parameters
    ----------
    findings : iterable of Finding
        Every finding of the run, not only those that stop it.
    """

    def __init__(self, findings: Iterable[Finding]) -> None:
        self.findings = in_reading_order(findings)
        super().__init__("\n".join(str(finding) for finding in self.findings))


class OutputExists(LossworthError):
    """A paper would replace an existing file, and nobody said that it may.

    Parameters
    ----------
    paths : iterable of str
        The files that stand in the way.
    """

    def __init__(self, paths: Iterable[str]) -> None:
        self.paths = tuple(paths)
        super().__init__("would overwrite " + ", ".join(self.paths))
