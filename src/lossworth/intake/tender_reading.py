"""From the TOML document to the draft: every key looked up, every value wrapped, every fault noted with its line."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from typing import Any

from ..findings import Finding, Place
from ..money import is_currency_code
from ..units import RATE_BASES
from .suggestions import did_you_mean, nearest
from .tender_draft import Draft, DraftLot, DraftTable, Loc
from .tender_keys import INSIDE, TABLES, Inside, Key, Reads
from .tender_values import LISTS, Refusal, Written, read_value
from .toml_places import Spot, TomlPath

__all__ = ["read_draft"]

#: Tables whose keys are names, and which stand apart in the draft.
_BY_NAME: Mapping[str, tuple[str, ...]] = {"bids": ("decimal_mark_of",), "exchange": ("rates",)}
#: Tables that level prices, with their place in the record; what the record holds beside the tender's other fields
#: keeps the name of its table.
_COMMERCIAL: Mapping[str, Loc] = {
    "delivery": ("delivery",),
    "taxes": ("taxes",),
    "payment": ("payment_terms",),
    "preference": ("preference",),
    "award": ("award",),
}
_TOP = ("format_version", "tender", "rules", "bids", "exchange", *_COMMERCIAL, "economics", "loading", "lot")
_DECIMAL_MARK = Key("decimal_mark_of", Reads.WORD, words=(".", ","))


def read_draft(
    document: Mapping[str, Any], spots: Mapping[TomlPath, Spot], file: str
) -> tuple[Draft, tuple[Finding, ...]]:
    """Draft of a tender, with what is wrong with single keys.

    Parameters
    ----------
    document : mapping
        As the TOML parser gives it, fractions as decimals.
    spots : mapping of TomlPath to Spot
        Lines and characters.
    file : str
        Name of the file in findings.

    Returns
    -------
    draft : Draft
        What could be read.
    findings : tuple of Finding
        Unknown keys, wrong types, missing tables.
    """
    reader = _Reader(document, spots, file)
    draft = reader.draft()
    return draft, tuple(reader.findings)


@dataclass
class _Reader:
    document: Mapping[str, Any]
    spots: Mapping[TomlPath, Spot]
    file: str
    findings: list[Finding] = field(default_factory=list)
    failed: set[Loc] = field(default_factory=set)

    def draft(self) -> Draft:
        self.unknown_keys(self.document, (), _TOP, "")
        bids, exchange = self.single("bids", ("bid_files",)), self.single("exchange", ("exchange",))
        return Draft(
            self.file,
            self.single("tender", ("identity",), needed=True),
            self.single("rules", ("rules",), needed=True),
            bids,
            bids and self.by_name(("bids", "decimal_mark_of"), (*bids.loc, "decimal_mark_of"), lambda _: _DECIMAL_MARK),
            exchange,
            exchange and self.by_name(("exchange", "rates"), (*exchange.loc, "rates"), self.exchange_rate),
            {name: table for name, loc in _COMMERCIAL.items() if (table := self.single(name, loc)) is not None},
            self.named("economics"),
            self.named("loading"),
            self.lots(),
            self.format_version(),
            frozenset(self.failed),
        )

    # Places and findings

    def place(self, path: TomlPath, shown: str) -> Place:
        """Line of a key, or of the nearest table around it, with the key as findings name it."""
        spot = next((self.spots[path[:n]] for n in range(len(path), 0, -1) if path[:n] in self.spots), None)
        return Place(self.file, line=spot.line if spot else None, key=shown)

    def text(self, path: TomlPath, value: object) -> str:
        """Characters of a value; of a text without its quotes."""
        spot = self.spots.get(path)
        if isinstance(value, str) or spot is None or spot.text is None:
            return _scalar_text(value)
        return spot.text

    def report(self, kind: str, key: str, rule: str, path: TomlPath, got: str | None = None, fix: str = "") -> None:
        self.findings.append(Finding(kind, key, rule, self.place(path, key), got, fix=fix))

    # Tables

    def at(self, path: TomlPath) -> Any:
        """Value at a path; None where there is none."""
        value: Any = self.document
        for part in path:
            if isinstance(part, str) and part not in value:
                return None
            value = value[part]
        return value

    def table(self, path: TomlPath, rule: str, shown: str = "") -> Mapping[str, Any] | None:
        """Table at a path; None where there is none, with a finding where something else stands there."""
        value = self.at(path)
        if value is None or isinstance(value, dict):
            return value
        self.report("tender-value", shown or ".".join(map(str, path)), rule, path, self.text(path, value))
        return None

    def single(self, name: str, loc: Loc, *, needed: bool = False) -> DraftTable | None:
        table = self.table((name,), f"must be a table, [{name}]")
        if table is not None:
            return self.keys_of(name, table, (name,), loc, name)
        if needed:
            self.failed.add(loc)
        if needed and name not in self.document:
            names = ", ".join(key.name for key in TABLES[name])
            self.report("tender-key-missing", name, f"must be given, as a table [{name}] with {names}", ())
        return None

    def named(self, kind: str) -> dict[str, DraftTable]:
        tables = self.table((kind,), f"must be a table with a name, [{kind}.NAME]") or {}
        found = {}
        for name in tables:
            table = self.table((kind, name), f"must stand in a table with a name, [{kind}.NAME]")
            if table is not None:
                found[name] = self.keys_of(kind, table, (kind, name), (kind, name), f"{kind}.{name}")
        return found

    def lots(self) -> tuple[DraftLot, ...]:
        lots = self.document.get("lot")
        if lots is None or lots == []:
            self.failed.add(("lots",))
            self.report("tender-key-missing", "lot", "must be given at least once, as a table [[lot]]", ())
            return ()
        if not isinstance(lots, list) or not all(isinstance(lot, dict) for lot in lots):
            self.failed.add(("lots",))
            self.report("tender-value", "lot", "must be a table in double brackets, [[lot]]", ("lot",))
            return ()
        return tuple(self.lot(number, lot) for number, lot in enumerate(lots))

    def lot(self, number: int, lot: Mapping[str, Any]) -> DraftLot:
        own_name = lot.get("id")
        shown = f"lot.{own_name}" if isinstance(own_name, str) and own_name else f"lot[{number + 1}]"
        return DraftLot(self.keys_of("lot", lot, ("lot", number), ("lots", number), shown))

    def read_inside(self, draft: DraftTable, inside: Inside, path: TomlPath) -> None:
        """Read the tables of one name that stand in another table."""
        shown, value = f"{draft.key}.{inside.name}", self.at(path)
        field_loc = (*draft.loc, inside.field or inside.name)
        if inside.any_name is not None:
            key = inside.any_name
            names = self.by_name(path, field_loc, lambda _: key, shown)
            draft.inside[inside.name] = () if names is None else (names,)
        elif not inside.many:
            table = self.table(path, f"must be a table, [{shown}]", shown)
            if table is None:
                self.failed.add(field_loc)
            else:
                draft.inside[inside.name] = (self.keys_of(inside.table, table, path, field_loc, shown),)
        elif isinstance(value, list) and value and all(isinstance(each, dict) for each in value):
            draft.inside[inside.name] = tuple(
                self.keys_of(inside.table, each, (*path, n), (*field_loc, n), f"{shown}[{n + 1}]")
                for n, each in enumerate(value)
            )
        else:
            self.failed.add(field_loc)
            self.report("tender-value", shown, f"must be a table in double brackets, [[{shown}]]", path)

    def by_name(
        self, path: TomlPath, loc: Loc, key_of: Callable[[str], Key | None], shown: str = ""
    ) -> DraftTable | None:
        """Table whose keys are names that the buyer chooses, all of one kind of value."""
        name = shown or ".".join(map(str, path))
        table = self.table(path, f"must be a table, [{name}]", name)
        if table is None:
            if self.at(path) is not None:
                self.failed.add(loc)
            return None
        draft = DraftTable(name, name, loc, self.place(path, name))
        for own, value in table.items():
            key = key_of(own)
            if key is None:
                rule = "must be a currency code of three capital letters"
                self.report("tender-value", f"{name}.{own}", rule, (*path, own), own)
            else:
                self.read_into(draft, key, own, own, (*path, own), value)
        return draft

    def exchange_rate(self, code: str) -> Key | None:
        return Key(code, unit=f"{self.currency}/{code}") if is_currency_code(code) else None

    # Keys

    def format_version(self) -> Written | None:
        name = "format_version"
        if name not in self.document:
            return None
        value = self.document[name]
        return Written(value, self.text((name,), value), self.place((name,), name))

    @property
    def currency(self) -> str:
        """Evaluation currency for the units of numbers, where the file gives one that can be read."""
        tender = self.document.get("tender")
        code = tender.get("currency") if isinstance(tender, dict) else None
        return code if isinstance(code, str) and is_currency_code(code) else "currency"

    def keys_of(self, kind: str, table: Mapping[str, Any], path: TomlPath, loc: Loc, shown: str) -> DraftTable:
        draft = DraftTable(kind, shown, loc, self.place(path, shown))
        keys = {key.name: key for key in TABLES[kind]}
        inside = {each.name: each for each in INSIDE.get(kind, ())}
        self.unknown_keys(table, path, (*keys, *inside, *_BY_NAME.get(kind, ())), shown)
        for name, key in keys.items():
            if name not in table:
                continue
            if key.fills in draft.given:
                rule = f"must not stand beside {draft.given[key.fills][0]}, which says the same"
                self.report("tender-conflict", f"{shown}.{name}", rule, (*path, name))
                continue
            unit = key.unit.format(currency=self.currency, per=_rate_base(table))
            self.read_into(draft, key, name, key.fills, (*path, name), table[name], unit)
        for name, each in inside.items():
            if name in table:
                self.read_inside(draft, each, (*path, name))
        return draft

    def read_into(
        self, draft: DraftTable, key: Key, name: str, fills: str, path: TomlPath, value: object, unit: str = ""
    ) -> None:
        shown = f"{draft.key}.{name}"
        draft.given[fills] = (name, self.place(path, shown))
        read = self.elements if key.reads in LISTS else self.one
        result = read(key, shown, path, value, unit or key.unit)
        if result is None:
            self.failed.add((*draft.loc, fills))
        else:
            draft.values[fills] = result

    def one(self, key: Key, shown: str, path: TomlPath, value: object, unit: str) -> object | None:
        written = Written(value, self.text(path, value), self.place(path, shown))
        result = read_value(key, written, unit)
        if isinstance(result, Refusal):
            self.report("tender-value", shown, result.rule, path, written.text, result.fix)
            return None
        return result

    def elements(self, key: Key, shown: str, path: TomlPath, value: object, unit: str) -> tuple[object, ...] | None:
        if not isinstance(value, list) or not value:
            self.report("tender-value", shown, LISTS[key.reads], path, self.text(path, value))
            return None
        read = [self.one(key, f"{shown}[{n + 1}]", (*path, n), element, unit) for n, element in enumerate(value)]
        return None if any(element is None for element in read) else tuple(read)

    def unknown_keys(self, table: Mapping[str, Any], path: TomlPath, known: tuple[str, ...], shown: str) -> None:
        for name in table:
            if name not in known:
                key = f"{shown}.{name}" if shown else name
                got = None if isinstance(table[name], (dict, list)) else self.text((*path, name), table[name])
                self.report("tender-key-unknown", key, "is not known", (*path, name), got, _remedy(name, known))


def _rate_base(table: Mapping[str, Any]) -> str:
    per = table.get("per")
    return per if isinstance(per, str) and per in RATE_BASES else "kW"


def _remedy(name: str, known: tuple[str, ...]) -> str:
    if nearest(name, known):
        return did_you_mean(name, known)
    homes = list(_homes(name))
    if homes:
        return f"Move it to the table where it belongs: {' or '.join(homes)}."
    return f"Take it out, or correct it to one of: {', '.join(known)}."


def _homes(name: str) -> Iterator[str]:
    for table, keys in TABLES.items():
        if any(key.name == name for key in keys):
            yield _shown_table(table)


def _shown_table(table: str) -> str:
    """Head of a table as the buyer writes it."""
    outer, _, inner = table.partition(".")
    if outer in ("economics", "loading"):
        outer = f"{outer}.NAME"
    shown = f"{outer}.{inner}".rstrip(".")
    many = any(inside.table == table and inside.many for tables in INSIDE.values() for inside in tables)
    return f"[[{shown}]]" if many or table == "lot" else f"[{shown}]"


def _scalar_text(value: object) -> str:
    """Text of a value in a finding; never that of a table, which may nest without end."""
    if isinstance(value, (dict, list)):
        return "a table" if isinstance(value, dict) else "a list"
    return str(value)
