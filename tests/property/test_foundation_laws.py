"""Laws of rounding and of the trail, tried on many figures."""

from decimal import Decimal
from fractions import Fraction
from math import floor

from hypothesis import given
from hypothesis import strategies as st

from lossworth.findings import Finding, Place, one_line
from lossworth.money import Rounding, RoundingMode
from lossworth.report.formats import MINUS, amount, number, plain
from lossworth.trail import Figure, product, read, total, walk

amounts = st.decimals(min_value=-(10**9), max_value=10**9, places=5, allow_nan=False)
figures = st.decimals(min_value=0, max_value=10**6, places=6, allow_nan=False)
quanta = st.sampled_from([Decimal("0.0001"), Decimal("0.01"), Decimal(1), Decimal(100)])
modes = st.sampled_from(RoundingMode)


def spreadsheet_round(value: Decimal, quantum: Decimal) -> Fraction:
    """ROUND as spreadsheets define it: the nearest multiple, half away from zero, in exact fractions."""
    multiple = abs(Fraction(value)) / Fraction(quantum)
    nearest = floor(multiple + Fraction(1, 2)) * Fraction(quantum)
    return nearest if value >= 0 else -nearest


@given(amounts, quanta)
def test_apply__equals_the_definition_of_a_spreadsheets_round(value: Decimal, quantum: Decimal) -> None:
    """Half away from zero is what a reader's spreadsheet will find."""
    rounded = Rounding(quantum, RoundingMode.HALF_AWAY_FROM_ZERO).apply(value)
    assert spreadsheet_round(value, quantum) == Fraction(rounded)


@given(amounts, quanta, modes)
def test_apply__twice_is_once(value: Decimal, quantum: Decimal, mode: RoundingMode) -> None:
    """A rounded amount is not changed by the same rounding."""
    rounding = Rounding(quantum, mode)
    once = rounding.apply(value)
    assert str(once) == str(rounding.apply(once))


@given(amounts, quanta, modes)
def test_apply__is_odd_and_near(value: Decimal, quantum: Decimal, mode: RoundingMode) -> None:
    """Both signs are treated alike, and nothing moves by as much as the smallest amount."""
    rounding = Rounding(quantum, mode)
    assert rounding.apply(-value) == -rounding.apply(value)
    assert abs(rounding.apply(value) - value) < quantum


@given(amounts, amounts, quanta, modes)
def test_apply__keeps_the_order(first: Decimal, second: Decimal, quantum: Decimal, mode: RoundingMode) -> None:
    """Rounding may make a tie of two amounts; it never turns them round."""
    rounding = Rounding(quantum, mode)
    low, high = sorted((first, second))
    assert rounding.apply(low) <= rounding.apply(high)


def leaves(values: list[Decimal]) -> list[Figure]:
    """One figure a value."""
    return [read(f"leaf {n}", "leaf", value, "NCU", Place("bids.csv", line=n)) for n, value in enumerate(values)]


@given(st.lists(figures, min_size=1, max_size=4))
def test_product__is_exact(values: list[Decimal]) -> None:
    """Four stated figures of twelve digits are multiplied without a digit lost."""
    exact = Fraction(1)
    for value in values:
        exact *= Fraction(value)
    assert exact == Fraction(product("p", "p", "NCU", *leaves(values)).value)


@given(st.lists(figures, min_size=1, max_size=12))
def test_total__does_not_depend_on_the_order(values: list[Decimal]) -> None:
    """The order of the bids, or of the parts, moves no sum."""
    parts = leaves(values)
    turned = list(reversed(parts))
    assert total("s", "s", "NCU", *parts).value == total("s", "s", "NCU", *turned).value


@given(st.lists(figures, min_size=2, max_size=8), st.integers(min_value=1, max_value=5))
def test_walk__no_figure_before_its_operands(values: list[Decimal], layers: int) -> None:
    """In whatever tree: operands first, each figure once, the root last."""
    known = leaves(values)
    for layer in range(layers):
        known.append(total(f"layer {layer}", "sum", "NCU", *known[-2:], known[0]))
    seen: list[str] = []
    for figure in walk(known[-1]):
        operands = getattr(figure.source, "operands", ())
        assert {operand.id for operand in operands} <= set(seen)
        seen.append(figure.id)
    assert len(seen) == len(set(seen))
    assert seen[-1] == known[-1].id


@given(amounts)
def test_amount__reads_back(value: Decimal) -> None:
    """What a paper prints is the amount, to the cent."""
    printed = Decimal(amount(value).replace(",", "").replace(MINUS, "-"))
    assert spreadsheet_round(value, Decimal("0.01")) == Fraction(printed)


@given(amounts)
def test_number__reads_back_exactly(value: Decimal) -> None:
    """What is printed without rounding is the number itself."""
    assert value == Decimal(number(value).replace(",", "").replace(MINUS, "-"))


@given(st.decimals(min_value=-(10**12), max_value=10**12, places=2, allow_nan=False))
def test_plain__money_reads_back_exactly(value: Decimal) -> None:
    """JSON carries every amount of money exactly, cents included."""
    assert str(value) == plain(value)


@given(st.text(), st.text())
def test_finding__always_two_printable_lines(got: str, bidder: str) -> None:
    """Whatever stands in a bidder's file, a finding keeps its form."""
    lines = str(Finding("value-unreadable", "load loss", "must be a number", got=got, bidder=bidder)).split("\n")
    assert len(lines) == 2
    assert all(one_line(line) == line for line in lines)
