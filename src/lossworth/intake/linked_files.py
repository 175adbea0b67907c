"""Files that the tender file names: found inside the tender's folder, read, and put in the place of their names."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from pathlib import Path, PurePosixPath
from types import MappingProxyType

from ..findings import Finding
from ..money import is_currency_code
from ..records.quantity import Entry, Quantity
from ..records.tender import Tender
from .calendar_year import Clock
from .cells import Marks
from .csv_table import LARGEST_CSV
from .file_bytes import bounded_bytes
from .price_file import read_price_series, read_prices_by_year
from .profile_file import ProfileRules, read_profile
from .tender_draft import Draft, DraftTable, Loc
from .tender_folder import InputFile
from .tender_keys import DAYLIGHT_SAVING
from .time_grid import DayWeights

__all__ = ["linked_files", "linked_names", "with_linked_files"]

_SERIES, _BY_YEAR, _PROFILE = "energy_price_series", "energy_price_by_year_per_kwh", "profile"
#: Fields whose value is the name of a file.
_FIELDS: Mapping[str, tuple[str, ...]] = MappingProxyType({"economics": (_SERIES, _BY_YEAR), "loading": (_PROFILE,)})


def linked_names(tender: Tender) -> tuple[str, ...]:
    """Names of the files that a tender rests on beside the bids: load profiles, price series, prices by year.

    Parameters
    ----------
    tender : Tender
        As read.

    Returns
    -------
    tuple of str
        Paths relative to the tender's folder, each once, in the order of the tender file.
    """
    names: list[str] = []
    for economics in tender.economics.values():
        names += [economics.energy_price_series.file] if economics.energy_price_series else []
        prices = economics.energy_price_by_year_per_kwh or ()
        names += [price.place.file for price in prices if price.place.file != economics.place.file]
    names += [loading.profile.file for loading in tender.loading.values() if loading.profile]
    return tuple(dict.fromkeys(names))


def linked_files(tender: Tender, tender_file: InputFile) -> tuple[InputFile, ...]:
    """Files that a tender rests on beside the bids, for the record of a run.

    Parameters
    ----------
    tender : Tender
        As read.
    tender_file : InputFile
        The file that it was read from.

    Returns
    -------
    tuple of InputFile
        Each once, in the order of the tender file.
    """
    return tuple(InputFile(tender_file.path.parent / name, name) for name in linked_names(tender))


def with_linked_files(draft: Draft, folder: Path) -> tuple[Draft, tuple[Finding, ...]]:
    """Draft in which the files that it names are read.

    Parameters
    ----------
    draft : Draft
        With names of files.
    folder : Path
        The tender's folder; no file outside of it is read.

    Returns
    -------
    draft : Draft
        With profiles and prices in place of the names; a file that could not be read counts as failed.
    findings : tuple of Finding
        Of all files.
    """
    work = _Work(draft, folder)
    economics = {name: work.with_files(table) for name, table in draft.economics.items()}
    loading = {name: work.with_files(table) for name, table in draft.loading.items()}
    read = replace(draft, economics=economics, loading=loading, failed=draft.failed | work.failed)
    return read, tuple(work.findings)


class _Work:
    """The files of one draft, with what they leave."""

    def __init__(self, draft: Draft, folder: Path) -> None:
        self.draft, self.folder = draft, folder
        self.findings: list[Finding] = []
        self.failed: set[Loc] = set()

    def with_files(self, table: DraftTable) -> DraftTable:
        """Table in which files stand in the place of their names."""
        values = dict(table.values)
        for field in _FIELDS[table.table]:
            name = values.get(field)
            if not isinstance(name, Entry):
                continue
            del values[field]
            content = self.content(table, field, name)
            if content is None:
                self.failed.add((*table.loc, field))
            else:
                values[field] = content
        return replace(table, values=values)

    def content(self, table: DraftTable, field: str, name: Entry) -> object | None:
        """What a file says; None where it cannot be used."""
        data = _bytes(table, field, name.value, self.folder)
        if isinstance(data, Finding):
            self.findings.append(data)
            return None
        content, findings = self.parsed(table, field, name, data)
        self.findings += findings
        return content

    def parsed(
        self, table: DraftTable, field: str, name: Entry, data: bytes
    ) -> tuple[object | None, tuple[Finding, ...]]:
        """Content of a file by the reader of its field."""
        file, marks = name.value, _marks(self.draft, name.value)
        if field == _PROFILE:
            return read_profile(data, file, _profile_rules(table, marks), name.place)
        currency = self.draft.identity.text("currency") if self.draft.identity else None
        if currency is None or not is_currency_code(currency):
            return None, ()  # the unit of the prices cannot be checked, and the tender is not complete anyway
        if field == _SERIES:
            return read_price_series(data, file, marks, _clock(table, "energy_price_clock"), currency, name.place)
        return read_prices_by_year(data, file, marks, currency)


def _bytes(table: DraftTable, field: str, name: str, folder: Path) -> bytes | Finding:
    """Content of a file inside the tender's folder."""
    if not _is_inside(name, folder):
        rule = "must be a path inside the tender's folder, with forward slashes"
        return table.finding("file-outside", field, rule, name)
    path = folder / name
    if not path.is_file():
        rule = "must name a file of the tender's folder"
        return table.finding("file-missing", field, rule, name, fix="Correct the path, or put the file there.")
    data = bounded_bytes(path, name, LARGEST_CSV)
    return replace(data, fix="Save the file anew as csv in UTF-8.") if isinstance(data, Finding) else data


def _is_inside(name: str, folder: Path) -> bool:
    """Whether a path stays inside a folder, also where a link leads."""
    path = PurePosixPath(name)
    if path.is_absolute() or ".." in path.parts or any(mark in name for mark in "\\:\0"):
        return False
    try:
        return (folder / name).resolve().is_relative_to(folder.resolve())
    except (OSError, RuntimeError, ValueError):  # links in a circle, names that no system takes
        return False


def _profile_rules(table: DraftTable, marks: Sequence[Marks]) -> ProfileRules:
    inner = table.inside.get("profile_day_weights", ())
    weights = DayWeights(None, table.place_of(_PROFILE))
    for each in inner:
        stated = {name: value for name, value in each.values.items() if isinstance(value, Quantity)}
        weights = DayWeights({name.strip().casefold(): value for name, value in stated.items()}, each.place)
    reverse_flow = table.text("profile_reverse_flow") is not None
    return ProfileRules(marks, _clock(table, "profile_clock"), weights, reverse_flow, "profile_reverse_flow")


def _clock(table: DraftTable, key: str) -> Clock:
    return Clock(key, daylight_saving=table.text(key) == DAYLIGHT_SAVING)


def _marks(draft: Draft, file: str) -> tuple[Marks, ...]:
    """Marks that the table of the bids declares; any, where it could not be read, so that no fault is invented."""
    locs = ("bid_files",)
    if any(loc[:1] == locs for loc in draft.failed):
        return (Marks("."), Marks(","))
    rules, own = draft.bid_files, draft.decimal_mark_of
    decimal = (rules.text("decimal_mark") if rules else None) or "."
    thousands = (rules.text("thousands_mark") if rules else None) or ""
    exceptions = dict(_by_name(own)) if own else {}
    return (Marks(exceptions.get(_folded(PurePosixPath(file).name), decimal), thousands),)


def _by_name(table: DraftTable) -> Iterator[tuple[str, str]]:
    for name in table.values:
        mark = table.text(name)
        if mark is not None:
            yield _folded(name), mark


def _folded(name: str) -> str:
    return unicodedata.normalize("NFC", name)
