"""`lossworth rates`: A, B and C per lot, and the arithmetic behind them."""

from __future__ import annotations

from pathlib import Path

import click

from .inputs import place_argument

__all__ = ["rates"]


@click.command()
@place_argument
@click.option("--years", is_flag=True, help="Also print the year-by-year tables.")
def rates(tender: Path, years: bool) -> None:
    """Show the loss capitalization rates A, B and C of each lot and where they come from.

    TENDER is a tender folder or a tender file. Bids are not read.
    """
    from ..errors import EvaluationStopped
    from ..findings import any_stops
    from .inputs import read_tender_only
    from .screen import color, width

    reading = read_tender_only(tender)
    if reading.tender is None or any_stops(reading.findings):
        raise EvaluationStopped(reading.findings)
    from ..evaluation.load_and_price import check_load_and_price

    if findings := check_load_and_price(reading.tender):
        raise EvaluationStopped((*reading.findings, *findings))
    from ..report.build_rates_report import build_rates_report
    from ..report.terminal import rates_text

    click.echo(rates_text(build_rates_report(reading.tender), width(), years=years, color=color()), nl=False)
