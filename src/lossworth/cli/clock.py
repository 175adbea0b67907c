"""The time that papers state: given from outside, so that the same inputs give the same bytes."""

from __future__ import annotations

import datetime
import os

import click

__all__ = ["stated_time"]


def stated_time(as_of: str | None) -> datetime.datetime:
    """Time for the papers: the option, else SOURCE_DATE_EPOCH, else the clock.

    Parameters
    ----------
    as_of : str or None
        ISO 8601 with time zone.

    Returns
    -------
    datetime.datetime
        In UTC, to the second.

    Raises
    ------
    click.UsageError
        If the option or the variable cannot be read.
    """
    epoch = os.environ.get("SOURCE_DATE_EPOCH")
    if as_of is not None:
        return _from_option(as_of)
    if epoch is None:
        return datetime.datetime.now(datetime.UTC).replace(microsecond=0)
    try:
        return datetime.datetime.fromtimestamp(int(epoch), datetime.UTC)
    except (ValueError, OverflowError, OSError):
        raise click.UsageError(f'SOURCE_DATE_EPOCH must be seconds since 1970, got "{epoch}".') from None


def _from_option(text: str) -> datetime.datetime:
    expected = f'--as-of takes a time with its zone, as 2026-09-15T10:00:00Z, got "{text}".'
    try:
        time = datetime.datetime.fromisoformat(text)
    except ValueError:
        raise click.UsageError(expected) from None
    if time.tzinfo is None:
        raise click.UsageError(expected)
    return time.astimezone(datetime.UTC).replace(microsecond=0)
