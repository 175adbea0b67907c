"""The file of decisions: who confirmed, accepted, waived or changed what, when, why, and where it is on file.

The file is append-only by convention: a decision that no longer holds is followed by another, never taken out.
"""

from __future__ import annotations

import datetime
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from decimal import Decimal
from pathlib import Path
from typing import Any

from ..findings import KINDS, Finding, Place
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.quantity import Entry, Quantity
from ..records.tender import Tender
from .file_bytes import MEGABYTE, bounded_bytes, utf8_text
from .suggestions import did_you_mean
from .tender_folder import InputFile
from .tender_keys import Key, Reads
from .tender_values import Refusal, Written, read_value
from .toml_places import Spot, TomlPath, find_spots
from .toml_values import parse_toml

__all__ = ["DECISIONS_FILE", "FIELD_UNITS", "LARGEST_DECISION_FILE", "find_decisions", "read_decisions"]

DECISIONS_FILE = "decisions.toml"
#: Greatest size of a file of decisions. [byte]
LARGEST_DECISION_FILE = MEGABYTE

#: Figures of an offer that a bidder can confirm, with the unit of the value; ``{currency}`` is the offer's.
FIELD_UNITS: Mapping[str, str] = {
    "unit_price": "{currency}",
    "no_load_loss_kw": "kW",
    "load_loss_kw": "kW",
    "auxiliary_loss_kw": "kW",
    "total_loss_kw": "kW",
    "impedance_percent": "%",
    "delivery_weeks": "weeks",
    "load_loss_rating_kva": "kVA",
    "reference_temperature_c": "°C",
    "resistive_loss_kw": "kW",
    "stray_loss_kw": "kW",
    "cooling_power_no_load_kw": "kW",
    "cooling_power_rated_kw": "kW",
    "quantity": "units",
    "total_price": "{currency}",
    "unconditional_discount_percent": "%",
    "prompt_payment_discount_percent": "%",
    "sound_level_db": "dB",
    "claimed_tolerance_percent": "%",
    "declared_efficiency_percent": "%",
}
#: Figures that may be zero; all others are above it.
_MAY_BE_ZERO = frozenset(
    {
        "auxiliary_loss_kw",
        "stray_loss_kw",
        "cooling_power_no_load_kw",
        "cooling_power_rated_kw",
        "unconditional_discount_percent",
        "prompt_payment_discount_percent",
        "claimed_tolerance_percent",
    }
)

#: Kinds of decision, and the keys that each needs besides those that all need.
_KINDS: Mapping[str, tuple[str, ...]] = {
    "confirm value": ("field", "value"),
    "accept correction": (),
    "refuse correction": (),
    "waive": ("field",),
    "change status": ("status",),
    "break tie": ("order",),
}
_MAY_NAME_FIELD = ("confirm value", "accept correction", "refuse correction", "waive")
_OWN = ("field", "value", "status", "order")
_NEEDED = ("kind", "bidder", "lot", "reason", "who", "when", "evidence")
_KEYS: Mapping[str, Key] = {
    key.name: key
    for key in (
        Key("kind", Reads.WORD, words=tuple(_KINDS)),
        Key("bidder", Reads.TEXT),
        Key("lot", Reads.TEXT),
        Key("field", Reads.TEXT),
        Key("value", Reads.NUMBER),
        Key("status", Reads.WORD, words=("evaluate", "non-responsive", "not evaluated")),
        Key("order", Reads.NUMBER),
        Key("reason", Reads.TEXT),
        Key("who", Reads.TEXT),
        Key("when", Reads.DATE),
        Key("evidence", Reads.TEXT),
    )
}


def find_decisions(folder: Path) -> InputFile | None:
    """File of decisions of a tender's folder.

    Parameters
    ----------
    folder : Path
        Where the tender file is.

    Returns
    -------
    InputFile or None
        None where there is none: nothing was decided yet.
    """
    path = folder / DECISIONS_FILE
    return InputFile(path, DECISIONS_FILE) if path.is_file() else None


def read_decisions(
    file: InputFile, tender: Tender | None, offers: Sequence[Offer] | None
) -> tuple[tuple[Decision, ...], tuple[Finding, ...]]:
    """Decisions of a file, with everything that is wrong with it.

    Parameters
    ----------
    file : InputFile
        The file of decisions.
    tender : Tender or None
        For its lots; None where it could not be read, and then lots are not checked.
    offers : sequence of Offer or None
        For the bidders and the currencies of their prices; None where they could not be read.

    Returns
    -------
    decisions : tuple of Decision
        Those without a fault, in the order of the file.
    findings : tuple of Finding
        All of the file, in the order of its lines.
    """
    source = _text_of(file)
    if isinstance(source, Finding):
        return (), (source,)
    document = parse_toml(source, file.shown_as)
    if isinstance(document, Finding):
        return (), (replace(document, kind="decision-syntax"),)
    reader = _Reader(document, find_spots(source), file.shown_as, tender, offers)
    decisions = tuple(reader.decisions())
    findings = sorted(dict.fromkeys(reader.findings), key=lambda f: (f.place.line or 0) if f.place else 0)
    return decisions, tuple(findings)


def _text_of(file: InputFile) -> str | Finding:
    data = bounded_bytes(file.path, file.shown_as, LARGEST_DECISION_FILE)
    source = data if isinstance(data, Finding) else utf8_text(data, file.shown_as)
    if isinstance(source, Finding):
        return replace(
            source, fix="Mend the file of decisions; it is text in UTF-8 with a table [[decision]] for each."
        )
    return source


@dataclass
class _Reader:
    document: Mapping[str, Any]
    spots: Mapping[TomlPath, Spot]
    file: str
    tender: Tender | None
    offers: Sequence[Offer] | None
    findings: list[Finding] = field(default_factory=list)

    def decisions(self) -> Iterator[Decision]:
        for name in self.document:
            if name != "decision":
                self.report("decision-key-unknown", name, "is not known", (name,), fix=did_you_mean(name, ["decision"]))
        tables = self.document.get("decision", [])
        if not isinstance(tables, list) or not all(isinstance(table, dict) for table in tables):
            self.report("decision-value", "decision", "must be a table in double brackets, [[decision]]", ("decision",))
            return
        for number, table in enumerate(tables):
            before = len(self.findings)
            values = self.values(number, table)
            self.check_offer(number, values)
            quantity = self.confirmed(number, values)
            self.check_waiver(number, values)
            order = self.whole_order(number, values)
            if len(self.findings) == before:
                yield self.record(number, values, quantity, order)

    # Places and findings

    def place(self, path: TomlPath, shown: str) -> Place:
        spot = next((self.spots[path[:n]] for n in range(len(path), 0, -1) if path[:n] in self.spots), None)
        return Place(self.file, line=spot.line if spot else None, key=shown)

    def report(self, kind: str, key: str, rule: str, path: TomlPath, got: str | None = None, fix: str = "") -> None:
        self.findings.append(Finding(kind, key, rule, self.place(path, key), got, fix=fix))

    def at(self, number: int, name: str = "") -> tuple[str, TomlPath]:
        """Key as findings name it, and its path."""
        shown = f"decision[{number + 1}]"
        path: TomlPath = ("decision", number)
        return (f"{shown}.{name}", (*path, name)) if name else (shown, path)

    # Keys of one decision

    def values(self, number: int, table: Mapping[str, Any]) -> dict[str, Any]:
        """Values that can be read; what is missing or unknown is reported."""
        kind = table.get("kind")
        needed = _KINDS.get(kind, ()) if isinstance(kind, str) else ()
        values = {}
        for name, value in table.items():
            shown, path = self.at(number, name)
            if name not in _KEYS:
                self.report("decision-key-unknown", shown, "is not known", path, fix=did_you_mean(name, _KEYS))
            elif isinstance(kind, str) and kind in _KINDS and not _belongs(name, kind):
                rule = f'means nothing for a decision of kind "{kind}"'
                self.report("decision-key-unknown", shown, rule, path, fix="Take the key out.")
            else:
                read = self.one(_KEYS[name], shown, path, value)
                if read is not None:
                    values[name] = read
        for name in (*_NEEDED, *needed):
            if name not in table:
                shown, path = self.at(number, name)
                self.report("decision-key-missing", shown, "must be given", path[:-1])
        return values

    def one(self, key: Key, shown: str, path: TomlPath, value: object) -> object | None:
        spot = self.spots.get(path)
        text = value if isinstance(value, str) else spot.text if spot and spot.text else type(value).__name__
        result = read_value(key, Written(value, text, self.place(path, shown)), "1")
        if isinstance(result, Refusal):
            self.report("decision-value", shown, result.rule, path, text, result.fix)
            return None
        return result

    # What the keys mean together

    def check_offer(self, number: int, values: Mapping[str, Any]) -> None:
        """Lot and bidder are there."""
        bidder, lot = values.get("bidder"), values.get("lot")
        if self.tender is not None and lot is not None and self.tender.lot(lot.value) is None:
            self.unknown(number, "lot", lot, [each.id for each in self.tender.lots], "must be a lot of the tender")
            return
        if self.offers is None or bidder is None:
            return
        names = sorted({offer.name for offer in self.offers})
        if bidder.value not in names:
            self.unknown(number, "bidder", bidder, names, "must be the name of an offer, as the bids state it")
        elif lot is not None and self.offer(values) is None:
            lots = [offer.lot.value for offer in self.offers if offer.name == bidder.value]
            self.unknown(number, "lot", lot, lots, f"must be a lot for which {bidder.value} offers")

    def unknown(self, number: int, name: str, entry: Entry, known: Iterable[str], rule: str) -> None:
        shown, path = self.at(number, name)
        self.report("decision-offer-unknown", shown, rule, path, entry.value, did_you_mean(entry.value, list(known)))

    def offer(self, values: Mapping[str, Any]) -> Offer | None:
        bidder, lot = values.get("bidder"), values.get("lot")
        if self.offers is None or bidder is None or lot is None:
            return None
        wanted = (bidder.value, lot.value)
        return next((offer for offer in self.offers if (offer.name, offer.lot.value) == wanted), None)

    def confirmed(self, number: int, values: Mapping[str, Any]) -> Quantity | None:
        """The confirmed value in the unit of its field."""
        name, value = values.get("field"), values.get("value")
        if values.get("kind") != "confirm value" or name is None:
            return None
        if name.value not in FIELD_UNITS:
            shown, path = self.at(number, "field")
            rule = f"must be a figure of an offer: {', '.join(FIELD_UNITS)}"
            self.report("decision-value", shown, rule, path, name.value, did_you_mean(name.value, FIELD_UNITS))
            return None
        if value is None:
            return None
        quantity: Quantity = value.model_copy(update={"unit": self.unit(name.value, values)})
        wrong = _out_of_bounds(name.value, quantity.value)
        if wrong:
            shown, path = self.at(number, "value")
            self.report("decision-value", shown, wrong, path, quantity.text)
            return None
        return quantity

    def unit(self, name: str, values: Mapping[str, Any]) -> str:
        offer = self.offer(values)
        home = self.tender.identity.currency.value if self.tender else "currency"
        currency = offer.currency.value if offer and offer.currency else home
        return FIELD_UNITS[name].format(currency=currency)

    def check_waiver(self, number: int, values: Mapping[str, Any]) -> None:
        """A waiver names a kind of finding."""
        name = values.get("field")
        if values.get("kind") == "waive" and name is not None and name.value not in KINDS:
            shown, path = self.at(number, "field")
            rule = "must be the short name of the finding that is waived, such as delivery-too-late"
            self.report("decision-value", shown, rule, path, name.value, did_you_mean(name.value, KINDS))

    def whole_order(self, number: int, values: Mapping[str, Any]) -> int | None:
        order = values.get("order")
        if order is None:
            return None
        if order.value < 1 or order.value != int(order.value):
            shown, path = self.at(number, "order")
            self.report("decision-value", shown, "must be a whole number of 1 or more", path, order.text)
            return None
        return int(order.value)

    def record(self, number: int, values: Mapping[str, Any], quantity: Quantity | None, order: int | None) -> Decision:
        when: datetime.date = values["when"]
        shown, path = self.at(number)
        texts = {name: values[name] for name in ("kind", "bidder", "lot", "reason", "who", "evidence")}
        return Decision(
            **texts,
            field=values.get("field"),
            value=quantity,
            status=values.get("status"),
            order=order,
            when=when,
            place=self.place(path, shown),
        )


def _belongs(name: str, kind: str) -> bool:
    if name not in _OWN:
        return True
    return kind in _MAY_NAME_FIELD if name == "field" else name in _KINDS[kind]


def _out_of_bounds(name: str, value: Decimal) -> str:
    if value < 0 or (value == 0 and name not in _MAY_BE_ZERO):
        return "must not be negative" if name in _MAY_BE_ZERO else "must be above 0"
    if name.endswith("_percent") and value > 100:
        return "must be at most 100 percent"
    if name == "quantity" and value != int(value):
        return "must be a whole number"
    return ""
