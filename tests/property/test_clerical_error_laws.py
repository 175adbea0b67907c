"""Laws of apparent errors: ordinary lots raise no question, every slip does, and nothing depends on order or names."""

from __future__ import annotations

from decimal import Decimal
from statistics import median
from typing import Any

from hypothesis import given
from hypothesis import strategies as st

from lossworth.evaluation.clerical_errors import find_clerical_errors
from lossworth.evaluation.clerical_errors_comparison import Pack
from lossworth.records.bid import Offer
from support import records
from support.schedules import SHORT, plain_lot, power_lot, schedule

NAMES = ("Alder", "Birch", "Cedar", "Elder", "Fir", "Gorse", "Hazel")


def decimals(low: str, high: str, places: int) -> st.SearchStrategy[str]:
    """Numbers as a bidder writes them."""
    return st.decimals(low, high, places=places, allow_nan=False, allow_infinity=False).map(str)


@st.composite
def ordinary_lots(draw: st.DrawFn, least: int = 1) -> list[Offer]:
    """Offers of 1000 kVA as a market gives them: cores of steel or amorphous metal, prices not far apart."""
    offers = []
    for name in NAMES[: draw(st.integers(least, len(NAMES)))]:
        # amorphous cores stay the lesser part of a lot
        core = ("0.30", "0.36") if name in NAMES[1::3] and draw(st.booleans()) else ("0.56", "0.69")
        offers.append(
            schedule(
                name,
                price=draw(decimals("19500", "24000", 0)),
                no_load=draw(decimals(*core, places=3)),
                load=draw(decimals("6.60", "7.60", 2)),
                impedance=draw(decimals("5.7", "6.3", 1)),
            )
        )
    return offers


@given(ordinary_lots())
def test_find_clerical_errors__ordinary_lots_raise_no_question(offers: list[Offer]) -> None:
    """Designs and prices as a market gives them are left alone, be they many or few."""
    assert find_clerical_errors(records.tender(plain_lot()), offers) == ()


#: Slips by a factor that no ordinary design reaches.
_SLIPS: tuple[tuple[str, str], ...] = (
    ("no_load", "1000"),
    ("load", "1000"),
    ("load", "0.001"),
    ("load", "10"),
    ("load", "0.1"),
    ("no_load", "10"),
    ("price", "10"),
    ("price", "0.1"),
)


@given(ordinary_lots(least=4), st.sampled_from(_SLIPS))
def test_find_clerical_errors__a_slip_is_asked_and_brought_back(offers: list[Offer], slip: tuple[str, str]) -> None:
    """One slip in an ordinary lot raises one question to that bidder, with the figure that it meant."""
    short, factor = slip
    field, _ = SHORT[short]
    first, *others = offers
    meant = getattr(first, field)
    wrong = meant.model_copy(update={"value": meant.value * Decimal(factor), "stated": meant.stated * Decimal(factor)})
    found = find_clerical_errors(records.tender(plain_lot()), [first.model_copy(update={field: wrong}), *others])
    (suspicion,) = found
    assert suspicion.offer == first.name
    (supposition,) = suspicion.suppositions
    assert (supposition.field, supposition.value.value) == (field, meant.value)


@given(ordinary_lots(least=3), st.randoms(use_true_random=False))
def test_find_clerical_errors__order_of_offers_does_not_matter(offers: list[Offer], random: Any) -> None:
    """The same questions, whoever was read first."""
    slip = schedule("Zelkova", load="8.04", total="8.04", price="2100")
    shuffled = [*offers, slip]
    random.shuffle(shuffled)
    tender = records.tender(plain_lot())
    assert set(find_clerical_errors(tender, shuffled)) == set(find_clerical_errors(tender, [slip, *offers]))


@given(st.dictionaries(st.sampled_from(NAMES), st.integers(1, 1000).map(Decimal), min_size=1), st.sampled_from(NAMES))
def test_pack__is_the_median_of_the_others(values: dict[str, Decimal], bidder: str) -> None:
    """The median without one bidder, where most of the others lie within a factor of two of it."""
    others = [value for name, value in values.items() if name != bidder]
    middle = median(others) if others else Decimal(0)
    near = sum(middle / 2 <= value <= middle * 2 for value in others)
    peers = Pack(values).peers(bidder)
    if len(others) < 2 or 2 * near <= len(others):
        assert peers is None
    else:
        assert peers is not None
        assert (peers.median, peers.count) == (middle, len(others))


_ANY = st.one_of(
    st.none(),
    st.decimals("1e-12", "1e14", allow_nan=False, allow_infinity=False).map(str),
    st.sampled_from(["0", "0.64", "7.4", "8.04", "640", "6", "1000"]),
)
_PERCENT = st.one_of(st.none(), st.sampled_from(["0", "1e-12", "50", "99.2", "100"]))


@given(
    st.lists(st.fixed_dictionaries(dict.fromkeys(SHORT, _ANY) | {"efficiency": _PERCENT}), min_size=1, max_size=4),
    st.sampled_from([plain_lot(), power_lot()]),
)
def test_find_clerical_errors__any_figures_end_in_questions(figures: list[dict[str, Any]], lot: Any) -> None:
    """Whatever numbers stand in a schedule, questions come out, never a failure; findings print on two lines."""
    offers = [schedule(name, **each) for name, each in zip(NAMES, figures, strict=False)]
    for found in find_clerical_errors(records.tender(lot), offers):
        assert len(str(found.finding).splitlines()) == 2
