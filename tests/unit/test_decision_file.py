"""The file of decisions: every fault at once, with its line, and nothing taken for granted."""

from __future__ import annotations

import datetime
from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.evaluation.decisions import _holds_quantity
from lossworth.findings import KINDS, Effect, Finding
from lossworth.intake.decision_file import DECISIONS_FILE, FIELD_UNITS, find_decisions, read_decisions
from lossworth.intake.tender_folder import InputFile
from lossworth.records.bid import Offer
from lossworth.records.commercial import OfferTerms
from lossworth.records.decision import Decision
from support import records

HEAD = """\
[[decision]]
kind = "confirm value"
bidder = "Alder"
lot = "1"
field = "load_loss_kw"
value = 7.400
reason = "the bidder's letter of 24 September"
who = "evaluation committee"
when = 2026-09-25
evidence = "file 7, page 3"
"""


def with_line(start: str, line: str) -> str:
    """The decision with one line changed; an empty line takes it out."""
    return "".join(
        (line + "\n" if line else "") if each.startswith(start) else each for each in HEAD.splitlines(keepends=True)
    )


def read(tmp_path: Path, text: str | bytes, *offers: Offer) -> tuple[tuple[Decision, ...], tuple[Finding, ...]]:
    """Decisions of a file with this content."""
    path = tmp_path / DECISIONS_FILE
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    known = offers or (records.offer("Alder"), records.offer("Birch", alternative=records.entry("copper")))
    return read_decisions(InputFile(path, DECISIONS_FILE), records.tender(), known)


def test_read_decisions__a_complete_decision(tmp_path: Path) -> None:
    """Every key arrives, the value in the unit of its field, with line and characters as they stood."""
    (decision,), findings = read(tmp_path, "# first answers\n" + HEAD)
    assert findings == ()
    assert decision.value is not None
    assert (decision.value.value, decision.value.unit, decision.value.text) == (Decimal("7.400"), "kW", "7.400")
    assert (str(decision.place), str(decision.value.place)) == ("decisions.toml:2", "decisions.toml:7")
    assert (decision.when, decision.who.value) == (datetime.date(2026, 9, 25), "evaluation committee")


def test_read_decisions__all_kinds(tmp_path: Path) -> None:
    """Each kind with its own keys."""
    rest = HEAD[HEAD.index("reason") :]
    head = '[[decision]]\nbidder = "Alder"\nlot = "1"\n'
    kinds = ['"accept correction"', '"refuse correction"\nfield = "unit_price"', '"waive"\nfield = "delivery-too-late"',
             '"change status"\nstatus = "evaluate"', '"break tie"\norder = 2']  # fmt: skip
    decisions, findings = read(tmp_path, "\n".join(f"{head}kind = {kind}\n{rest}" for kind in kinds))
    assert findings == ()
    assert [decision.kind for decision in decisions] == [kind.split('"')[1] for kind in kinds]
    assert decisions[-1].order == 2


def test_read_decisions__price_in_the_currency_of_the_offer(tmp_path: Path) -> None:
    """A confirmed price has the offer's currency, not that of the evaluation."""
    text = with_line("field", 'field = "unit_price"').replace("7.400", "4000")
    (decision,), _ = read(tmp_path, text, records.offer("Alder", currency=records.entry("FCU")))
    assert decision.value is not None
    assert decision.value.unit == "FCU"


def test_read_decisions__an_alternative_is_an_offer_of_its_own(tmp_path: Path) -> None:
    """The name of an offer has its alternative."""
    decisions, findings = read(tmp_path, with_line("bidder", 'bidder = "Birch, alternative copper"'))
    assert (len(decisions), findings) == (1, ())


#: One line changed in a complete decision: the kind of the finding, and its line.
FAULTS = [
    ("value", "value = ", "decision-syntax", "decisions.toml:6"),
    ("value", "", "decision-key-missing", "decisions.toml:1"),
    ("field", "", "decision-key-missing", "decisions.toml:1"),
    ("reason", "", "decision-key-missing", "decisions.toml:1"),
    ("who", "", "decision-key-missing", "decisions.toml:1"),
    ("evidence", "", "decision-key-missing", "decisions.toml:1"),
    ("reason", 'reason = ""', "decision-value", "decisions.toml:7"),
    ("who", 'who = "committee"\nwoh = "clerk"', "decision-key-unknown", "decisions.toml:9"),
    ("evidence", 'evidence = "x"\nstatus = "evaluate"', "decision-key-unknown", "decisions.toml:11"),
    ("kind", 'kind = "confirm"', "decision-value", "decisions.toml:2"),
    ("field", 'field = "load_loss"', "decision-value", "decisions.toml:5"),
    ("value", 'value = "7.4"', "decision-value", "decisions.toml:6"),
    ("value", "value = 0", "decision-value", "decisions.toml:6"),
    ("value", "value = -7.4", "decision-value", "decisions.toml:6"),
    ("value", "value = nan", "decision-value", "decisions.toml:6"),
    ("value", "value = 1e400", "decision-value", "decisions.toml:6"),
    ("value", "value = true", "decision-value", "decisions.toml:6"),
    ("value", "value = [7.4]", "decision-value", "decisions.toml:6"),
    ("when", 'when = "2026-09-25"', "decision-value", "decisions.toml:9"),
    ("when", "when = 2026-09-25T10:00:00", "decision-value", "decisions.toml:9"),
    ("lot", "lot = 1", "decision-value", "decisions.toml:4"),
    ("lot", 'lot = "9"', "decision-offer-unknown", "decisions.toml:4"),
    ("bidder", 'bidder = "Adler"', "decision-offer-unknown", "decisions.toml:3"),
    ("[[", "[decision]", "decision-value", "decisions.toml:1"),
    ("[[", "[[decisions]]", "decision-key-unknown", "decisions.toml:1"),
]


@pytest.mark.parametrize(("start", "line", "kind", "place"), FAULTS)
def test_read_decisions__one_fault(tmp_path: Path, start: str, line: str, kind: str, place: str) -> None:
    """One fault gives one finding at its line, and no decision."""
    decisions, findings = read(tmp_path, with_line(start, line))
    told = [(finding.kind, str(finding.place)) for finding in findings]
    assert (kind, place) in told
    assert [each for each in told if each[0] != kind] == []
    assert decisions == ()


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        (b"", "file-unreadable"),
        (b"\xff\xfe", "file-unreadable"),
        (b"a = '\xff'", "file-unreadable"),
        (b"#" * (1024 * 1024 + 1), "file-too-large"),
        (b"x = " + b"[" * 5000, "decision-syntax"),
    ],
    ids=["empty", "utf-16", "latin-1", "too large", "brackets"],
)
def test_read_decisions__hostile_files(tmp_path: Path, text: bytes, kind: str) -> None:
    """What is no text in UTF-8 or no TOML is told, not raised."""
    _, findings = read(tmp_path, text)
    assert [finding.kind for finding in findings] == [kind]


def test_read_decisions__all_faults_at_once_in_the_order_of_lines(tmp_path: Path) -> None:
    """A file with two wrong decisions and a good one: the good one is read, every fault is told."""
    wrong = with_line("lot", 'lot = "9"')
    text = wrong + HEAD + with_line("who", "")
    decisions, findings = read(tmp_path, text)
    assert len(decisions) == 1
    lines = [finding.place.line for finding in findings if finding.place]
    assert lines == sorted(lines)  # type: ignore[type-var]
    assert [finding.kind for finding in findings] == ["decision-offer-unknown", "decision-key-missing"]


def test_read_decisions__did_you_mean(tmp_path: Path) -> None:
    """A misspelled bidder, field or key is met with the nearest known one."""
    for start, line, near in (
        ("bidder", 'bidder = "Adler"', "Alder"),
        ("field", 'field = "load_loss"', "load_loss_kw"),
    ):
        _, (finding,) = read(tmp_path, with_line(start, line))
        assert finding.remedy == f'Did you mean "{near}"?'


def test_read_decisions__a_waiver_names_a_kind_of_finding(tmp_path: Path) -> None:
    """What is waived must exist."""
    text = (
        with_line("field", 'field = "delivery-late"')
        .replace('"confirm value"', '"waive"')
        .replace("value = 7.400\n", "")
    )
    _, findings = read(tmp_path, text)
    assert [finding.kind for finding in findings] == ["decision-value"]


def test_read_decisions__without_tender_and_offers(tmp_path: Path) -> None:
    """Where these could not be read, the rest of the file is still checked."""
    path = tmp_path / DECISIONS_FILE
    path.write_text(with_line("bidder", 'bidder = "Anybody"'), encoding="utf-8")
    decisions, findings = read_decisions(InputFile(path, DECISIONS_FILE), None, None)
    assert (len(decisions), findings) == (1, ())


def test_find_decisions__only_where_there_is_a_file(tmp_path: Path) -> None:
    """Nothing decided is no fault."""
    assert find_decisions(tmp_path) is None
    (tmp_path / DECISIONS_FILE).write_text(HEAD, encoding="utf-8")
    assert find_decisions(tmp_path) == InputFile(tmp_path / DECISIONS_FILE, DECISIONS_FILE)


def test_field_units__every_figure_of_an_offer() -> None:
    """No figure of an offer or of its terms is forgotten, and no other is named."""
    fields = {**Offer.model_fields, **OfferTerms.model_fields}
    assert set(FIELD_UNITS) == {name for name, field in fields.items() if _holds_quantity(field.annotation)}


def test_kinds__each_fault_of_the_file_is_triggered() -> None:
    """Every kind that stops an evaluation because of a decision stands in the cases above."""
    stopping = {slug for slug, kind in KINDS.items() if slug.startswith("decision-") and kind.effect is Effect.STOPS}
    assert {kind for _, _, kind, _ in FAULTS} == stopping


def test_docs__name_every_field() -> None:
    """The page on the file of decisions lists what can be confirmed."""
    page = (Path(__file__).parents[2] / "docs" / "decision_file.md").read_text(encoding="utf-8")
    assert [field for field in FIELD_UNITS if f"`{field}`" not in page] == []
