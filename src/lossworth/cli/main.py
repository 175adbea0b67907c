"""The entry point: options, commands and exit codes."""

from __future__ import annotations

import sys

import click

from . import check, evaluate, form, rates, rules, start
from .exit_codes import run

__all__ = ["lossworth", "main"]

_HELP = """Total owning cost of transformer bids, from bidders' files to a ranked recommendation.

\b
A tender is a folder:
  tender.toml   lots, rates A, B and C (or their derivation), limits, rules
  bids/         one workbook per bidder, or tables of offers (.xlsx, .csv)
  papers/       what `lossworth evaluate` writes

\b
First steps:
  lossworth start my-tender      a working example to edit, every key explained
  lossworth rates my-tender      A, B and C per lot, and the arithmetic behind them
  lossworth rules my-tender      the rules to publish before opening, with their fingerprint
  lossworth form my-tender       the workbook that bidders fill in
  lossworth check my-tender      read everything and report what is wrong, write nothing
  lossworth evaluate my-tender   rank the offers; write workbook, page and data

\b
Exit codes: 0 done, 1 findings stop the evaluation, 2 misuse, 3 failure."""


@click.group(help=_HELP, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(package_name="lossworth", prog_name="lossworth")
def lossworth() -> None:
    """Group of all commands; the help text stands in `_HELP`."""


for command in (start.start, rates.rates, rules.rules, form.form, check.check, evaluate.evaluate):
    lossworth.add_command(command)


def main() -> None:
    """Run the command line and leave with one of the documented exit codes."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")  # an old console may lack a minus sign; that is no reason to fail
    sys.exit(run(lossworth))
