"""The tender as far as it can be read: tables whose values are wrapped one by one, whatever is wrong beside them."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from decimal import Decimal

from ..findings import Finding, Place
from ..records.quantity import Entry, Quantity
from .tender_values import Written

__all__ = ["Check", "Draft", "DraftLot", "DraftTable", "Loc"]

#: Keys and indices from the top of the record: ``("lots", 2, "rates")``.
Loc = tuple[str | int, ...]


@dataclass(frozen=True)
class DraftTable:
    """One table of the tender file.

    Parameters
    ----------
    table : str
        Its kind, as in `tender_keys.TABLES`.
    key : str
        Its own key, as findings name it: ``"lot.3.rates"``.
    loc : Loc
        Where it stands in the record.
    place : Place
        Its line.
    values : dict
        What could be read, by field of the record.
    given : dict of str to tuple of str and Place
        Key and place of every field that the file gives, readable or not.
    inside : dict of str to tuple of DraftTable
        Tables that stand in it, by their names in the file.
    """

    table: str
    key: str
    loc: Loc
    place: Place
    values: dict[str, object] = field(default_factory=dict)
    given: dict[str, tuple[str, Place]] = field(default_factory=dict)
    inside: dict[str, tuple[DraftTable, ...]] = field(default_factory=dict)

    def one(self, name: str) -> DraftTable | None:
        """The table of this name that stands in it; None where there is none that can be read."""
        return next(iter(self.inside.get(name, ())), None)

    def tables(self) -> Iterator[DraftTable]:
        """The table and all that stand in it."""
        yield self
        for tables in self.inside.values():
            for table in tables:
                yield from table.tables()

    def number(self, name: str) -> Decimal | None:
        """Value of a number; None where there is none that can be read."""
        value = self.values.get(name)
        return value.value if isinstance(value, Quantity) else None

    def text(self, name: str) -> str | None:
        """Value of a text; None where there is none that can be read."""
        value = self.values.get(name)
        if isinstance(value, Entry):
            return value.value
        return value if isinstance(value, str) else None

    def texts(self, name: str) -> tuple[str, ...]:
        """Values of a list of texts; empty where there is none that can be read."""
        values = self.values.get(name)
        return tuple(value for value in values if isinstance(value, str)) if isinstance(values, tuple) else ()

    def has(self, name: str) -> bool:
        """Whether the file gives the field, readable or not."""
        return name in self.given

    def place_of(self, name: str) -> Place:
        """Line of the field; of the table where the field is not given."""
        return self.given[name][1] if name in self.given else self.place

    def finding(self, kind: str, name: str, rule: str, got: str | None = None, fix: str = "") -> Finding:
        """Finding on one of the fields.

        Parameters
        ----------
        kind : str
            Slug of the kind.
        name : str
            Field, or key where the file does not give it.
        rule : str
            What was expected.
        got : str, optional
            What stood there; the value as read where it is left out and the field is readable.
        fix : str
            A closer remedy than that of the kind.

        Returns
        -------
        Finding
            With key and line.
        """
        key = self.given[name][0] if name in self.given else name
        value = self.values.get(name)
        if got is None:
            got = value.text if isinstance(value, Quantity) else self.text(name)
        return Finding(kind, f"{self.key}.{key}", rule, self.place_of(name), got, fix=fix)


@dataclass(frozen=True)
class DraftLot:
    """One lot with the tables that value its losses."""

    own: DraftTable

    @property
    def rates(self) -> DraftTable | None:
        """Announced rates."""
        return self.own.one("rates")

    @property
    def derivation(self) -> DraftTable | None:
        """The announced derivation."""
        return self.own.one("derivation")

    @property
    def study(self) -> DraftTable | None:
        """A planner's derivation beside announced rates."""
        return self.own.one("study")

    @property
    def loss_basis(self) -> DraftTable | None:
        """Basis on which losses are to be guaranteed."""
        return self.own.one("loss_basis")

    @property
    def regulation(self) -> DraftTable | None:
        """Regulation whose limits hold."""
        return self.own.one("regulation")

    @property
    def items(self) -> tuple[DraftTable, ...]:
        """Further items that are priced apart."""
        return self.own.inside.get("item", ())

    @property
    def site_costs(self) -> tuple[DraftTable, ...]:
        """Costs at the site that offers cause."""
        return self.own.inside.get("site_cost", ())

    @property
    def derivations(self) -> tuple[DraftTable, ...]:
        """The announced derivation and the planner's study, as far as there are any."""
        return tuple(table for table in (self.derivation, self.study) if table is not None)


@dataclass(frozen=True)
class Draft:
    """All tables of a tender file.

    Parameters
    ----------
    file : str
        Name of the file in findings.
    identity, rules, bid_files, exchange : DraftTable or None
        None where the file has no such table.
    exchange_rates, decimal_mark_of : DraftTable or None
        Tables with names for keys.
    commercial : mapping of str to DraftTable
        Tables that level prices, by name: delivery, taxes, payment, preference, award; those that the file has.
    economics, loading : mapping of str to DraftTable
        By name.
    lots : tuple of DraftLot
        In the order of the file.
    format_version : Written or None
        The one key outside of all tables.
    failed : frozenset of Loc
        Fields that stand in the file and could not be read, and tables that are missing: reported already.
    """

    file: str
    identity: DraftTable | None
    rules: DraftTable | None
    bid_files: DraftTable | None
    decimal_mark_of: DraftTable | None
    exchange: DraftTable | None
    exchange_rates: DraftTable | None
    commercial: Mapping[str, DraftTable]
    economics: Mapping[str, DraftTable]
    loading: Mapping[str, DraftTable]
    lots: tuple[DraftLot, ...]
    format_version: Written | None
    failed: frozenset[Loc]

    def tables(self) -> Iterator[DraftTable]:
        """All tables."""
        single = (self.identity, self.rules, self.bid_files, self.decimal_mark_of, self.exchange, self.exchange_rates)
        yield from (table for table in single if table is not None)
        lots = (lot.own for lot in self.lots)
        for table in (*self.commercial.values(), *self.economics.values(), *self.loading.values(), *lots):
            yield from table.tables()


#: Looks at the draft, not at the record, so that one value out of bounds does not hide a contradiction elsewhere.
Check = Callable[[Draft], Iterator[Finding]]
