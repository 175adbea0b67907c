"""The command line run inside the test's own process: exit code, output, errors."""

from __future__ import annotations

import contextlib
import io
from typing import NamedTuple

from lossworth.cli.exit_codes import run
from lossworth.cli.main import lossworth

__all__ = ["Outcome", "call"]


class Outcome(NamedTuple):
    """What a command left."""

    code: int
    out: str
    err: str


def call(*arguments: object) -> Outcome:
    """Run `lossworth` with these arguments.

    Parameters
    ----------
    *arguments : object
        Command and arguments; paths become text.

    Returns
    -------
    Outcome
        Exit code and both streams.
    """
    out, err = io.StringIO(), io.StringIO()
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        code = run(lossworth, [str(argument) for argument in arguments])
    return Outcome(code, out.getvalue(), err.getvalue())
