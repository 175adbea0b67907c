"""Exit codes, and what each kind of error prints: never a traceback."""

from __future__ import annotations

import os
from collections.abc import Sequence

import click

__all__ = ["DONE", "FAILURE", "FINDINGS", "MISUSE", "run"]

DONE, FINDINGS, MISUSE, FAILURE = 0, 1, 2, 3


def run(command: click.Command, arguments: Sequence[str] | None = None) -> int:
    """Run a command and turn whatever happens into an exit code.

    Parameters
    ----------
    command : click.Command
        The group of all commands.
    arguments : sequence of str, optional
        Those of the process where left out.

    Returns
    -------
    int
        0 done, 1 findings stop the evaluation, 2 misuse, 3 failure.
    """
    try:
        code = command.main(arguments, standalone_mode=False)
    except click.ClickException as error:
        error.show()
        return MISUSE
    except (click.Abort, KeyboardInterrupt):
        click.echo("Stopped; nothing was left half-written.", err=True)
        return FAILURE
    except Exception as error:  # noqa: BLE001 - the last stop before the user
        return _failed(error)
    return code if isinstance(code, int) else DONE


def _failed(error: Exception) -> int:
    from ..errors import EvaluationStopped, OutputExists
    from .findings_text import echo_findings

    if isinstance(error, EvaluationStopped):
        echo_findings(error.findings)
        click.echo("Findings stop the evaluation; nothing was written.", err=True)
        return FINDINGS
    if isinstance(error, OutputExists):
        click.echo("These papers exist already: " + ", ".join(error.paths), err=True)
        click.echo("  fix: add --overwrite to replace them, or --papers FOLDER to write elsewhere", err=True)
        return MISUSE
    if isinstance(error, OSError):
        where = f" ({error.filename})" if error.filename else ""
        click.echo(f"The system refused: {error.strerror or error}{where}", err=True)
        return FAILURE
    if os.environ.get("LOSSWORTH_TRACEBACK"):
        raise error
    click.echo(f"lossworth failed: {type(error).__name__}: {error}", err=True)
    click.echo("  fix: this is a fault of the tool; set LOSSWORTH_TRACEBACK=1, run again and report it", err=True)
    return FAILURE
