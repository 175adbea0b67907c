"""Laws of reading: how a bid is written down does not change what it states, and no bytes make a traceback."""

from __future__ import annotations

import atexit
import random
import shutil
import tempfile
import zipfile
from decimal import Decimal
from io import BytesIO
from pathlib import Path

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from lossworth.findings import Finding
from lossworth.intake.bid_files import read_bids
from lossworth.intake.cells import Marks, number_in, text_cell
from lossworth.intake.tender_file import read_tender
from lossworth.intake.tender_folder import InputFile
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from support.tender_folders import TENDER, csv_text, workbook_bytes

COLUMNS = ("Lot", "Bidder", "Unit price [NCU]", "No-load loss [kW]", "Load loss [kW]", "Auxiliary loss [kW]")
FIELDS = ("unit_price", "no_load_loss_kw", "load_loss_kw", "auxiliary_loss_kw")
FEW = settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow])
MANY = settings(max_examples=200, deadline=None, suppress_health_check=[HealthCheck.too_slow])

FOLDER = Path(tempfile.mkdtemp(prefix="lossworth-intake-"))
atexit.register(shutil.rmtree, FOLDER, ignore_errors=True)

#: At most 12 significant digits, which a spreadsheet keeps.
amounts = st.decimals("0.001", "900000", places=3)
blank_or_amount = st.one_of(st.none(), amounts)
bids = st.lists(
    st.tuples(
        st.sampled_from(["1", "2"]),
        st.text("ABCDE", min_size=1, max_size=4),
        amounts,
        amounts,
        amounts,
        blank_or_amount,
    ),
    min_size=1,
    max_size=6,
    unique_by=lambda row: (row[0], row[1]),
)
Row = tuple[str, str, Decimal, Decimal, Decimal, Decimal | None]


def tender(extra: str = "") -> Tender:
    """The tender of the tests, with more tables."""
    file = FOLDER / "tender.toml"
    file.write_text(TENDER.replace("[[lot]]", f"{extra}\n[[lot]]", 1))
    found, findings = read_tender(InputFile(file, file.name))
    assert found is not None, findings
    return found


def read(name: str, data: bytes, of: Tender | None) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers and findings of one bid file."""
    file = FOLDER / name
    file.write_bytes(data)
    return read_bids([InputFile(file, f"bids/{name}")], of)


def stated(read_result: tuple[tuple[Offer, ...], tuple[Finding, ...]]) -> list[tuple[object, ...]]:
    """What each offer states, without places and characters; there must be no findings."""
    offers, findings = read_result
    assert not findings, [str(finding) for finding in findings]
    figures = [[getattr(offer, name) for name in FIELDS] for offer in offers]
    return [
        (offer.lot.value, offer.bidder.value, *(figure and figure.value for figure in row))
        for offer, row in zip(offers, figures, strict=True)
    ]


def table(rows: list[Row], separator: str = ",") -> str:
    """Rows as csv with decimal points."""
    return csv_text(COLUMNS, [["" if value is None else value for value in row] for row in rows], separator=separator)


@FEW
@given(bids)
def test_read_bids__csv_and_workbook_agree(rows: list[Row]) -> None:
    """The same bids as csv and as workbook state the same."""
    numbers = [[float(value) if isinstance(value, Decimal) else value for value in row] for row in rows]
    book = workbook_bytes({"Offers": [COLUMNS, *numbers]})
    assert stated(read("a.csv", table(rows).encode(), tender())) == stated(read("a.xlsx", book, tender()))


@FEW
@given(bids)
def test_read_bids__w_and_kw_agree(rows: list[Row]) -> None:
    """Losses in W and in kW state the same."""
    in_watts = [(*row[:3], *(None if value is None else value * 1000 for value in row[3:])) for row in rows]
    watts = table(in_watts).replace("[kW]", "[W]")  # type: ignore[arg-type]
    assert stated(read("a.csv", table(rows).encode(), tender())) == stated(read("a.csv", watts.encode(), tender()))


@FEW
@given(bids)
def test_read_bids__decimal_comma_and_point_agree(rows: list[Row]) -> None:
    """Declared decimal commas state the same as points."""
    commas = table(rows, separator=";").replace(".", ",")
    declared = tender('[bids]\ndecimal_mark = ","')
    assert stated(read("a.csv", table(rows).encode(), tender())) == stated(read("a.csv", commas.encode(), declared))


@FEW
@given(bids, st.randoms(use_true_random=False))
def test_read_bids__order_does_not_matter(rows: list[Row], random: random.Random) -> None:
    """Rows and columns in another order state the same."""
    order = random.sample(range(len(COLUMNS)), len(COLUMNS))
    shuffled = random.sample([["" if row[n] is None else row[n] for n in order] for row in rows], len(rows))
    other = csv_text([COLUMNS[n] for n in order], shuffled)
    there, back = (sorted(stated(read("a.csv", text.encode(), tender())), key=str) for text in (table(rows), other))
    assert there == back


@MANY
@given(st.decimals("-99999999", "99999999", places=4), st.sampled_from(["", " ", "\u00a0", "\u202f", "'"]))
def test_number_in__grouping_does_not_matter(number: Decimal, mark: str) -> None:
    """A number reads the same with and without marks between its thousands, by point and by comma."""
    grouped = f"{number:,}".replace(",", mark)
    assert number_in(text_cell(grouped), [Marks(".", "'")], "kW") == number
    assert number_in(text_cell(grouped.replace(".", ",")), [Marks(",", "'")], "kW") == number


def only_findings(name: str, data: bytes) -> None:
    """Bytes of a bid file make findings that can be printed, with and without a tender."""
    for of in (None, TENDER_OF_TESTS):
        offers, findings = read(name, data, of)
        assert offers or findings
        assert all(str(finding) for finding in findings)


TENDER_OF_TESTS = tender()
BOOK = workbook_bytes()
with zipfile.ZipFile(BytesIO(BOOK)) as archive:
    PARTS = archive.namelist()


@MANY
@given(st.binary(max_size=400))
def test_read_tender__any_bytes(data: bytes) -> None:
    """Any bytes for a tender file make findings, never a traceback."""
    file = FOLDER / "any.toml"
    file.write_bytes(data)
    found, findings = read_tender(InputFile(file, file.name))
    assert found is None
    assert all(str(finding) for finding in findings)
    assert findings


toml_values = st.recursive(
    st.one_of(
        st.sampled_from(
            ["1", "-1", "0.5", "inf", "nan", "1e999", "true", "2026-09-15", '""', '"NCU"', "'kW'", "9" * 30]
        ),
        st.integers().map(str),
    ),
    lambda inner: (
        st.lists(inner, max_size=3).map(lambda values: f"[{', '.join(values)}]")
        | inner.map(lambda value: f"{{ id = {value} }}")
    ),
    max_leaves=4,
)


@MANY
@given(st.randoms(use_true_random=False), st.lists(toml_values, min_size=1, max_size=6))
def test_read_tender__any_values(random: random.Random, values: list[str]) -> None:
    """Any values in place of those of a tender make findings, or a tender, never a traceback."""
    lines = TENDER.splitlines()
    for value in values:
        number = random.choice([n for n, line in enumerate(lines) if " = " in line])
        lines[number] = f"{lines[number].split(' = ')[0]} = {value}"
    file = FOLDER / "values.toml"
    file.write_text("\n".join(lines), encoding="utf-8")
    found, findings = read_tender(InputFile(file, file.name))
    assert found or findings
    assert all(str(finding) and finding.place for finding in findings)


@MANY
@given(st.one_of(st.binary(max_size=400), st.text(max_size=200).map(lambda text: text.encode("utf-8", "ignore"))))
def test_read_bids__any_bytes_as_csv(data: bytes) -> None:
    """Any bytes for a csv file, also behind a good header, make findings."""
    only_findings("any.csv", data)
    only_findings("any.csv", csv_text(rows=[]).encode() + data)


@MANY
@given(st.binary(max_size=400))
def test_read_bids__any_bytes_as_workbook(data: bytes) -> None:
    """Any bytes for a workbook make findings."""
    only_findings("any.xlsx", data)
    only_findings("any.xlsx", b"PK\x03\x04" + data)


@MANY
@given(st.sampled_from(PARTS), st.randoms(use_true_random=False), st.integers(1, 8))
def test_read_bids__damaged_workbook(part: str, random: random.Random, changes: int) -> None:
    """A workbook with some bytes of one part changed makes offers or findings."""
    stream = BytesIO()
    with zipfile.ZipFile(BytesIO(BOOK)) as old, zipfile.ZipFile(stream, "w") as new:
        for name in PARTS:
            content = bytearray(old.read(name))
            for _ in range(changes if name == part else 0):
                content[random.randrange(len(content))] = random.choice(b'<>/="0129AZaz r\x00\xff')
            new.writestr(name, bytes(content))
    only_findings("any.xlsx", stream.getvalue())
