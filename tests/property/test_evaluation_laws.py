"""Laws of the evaluation over drawn offers: monotonic, blind to order and currency unit, exact in fractions."""

from __future__ import annotations

from decimal import Decimal as D
from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st

from lossworth.evaluation.evaluate import evaluate
from support import records as make

prices = st.decimals("100", "99999", places=2)
losses = st.decimals("0.001", "99", places=3)
three_figures = st.tuples(prices, losses, losses)
fields = st.lists(three_figures, min_size=2, max_size=6)


def offers(figures):
    """Offers named A, B, C … with the drawn figures."""
    return [make.priced(chr(65 + n), *(str(value) for value in row)) for n, row in enumerate(figures)]


def ranks(offers, tender=None):
    """Rank of each bidder in the first lot."""
    return {o.bidder: o.rank for o in evaluate(tender or make.tender(), offers).lots[0].offers}


@given(fields, st.integers(0, 5), st.integers(0, 2), st.decimals("0.001", "1000", places=3))
@settings(deadline=None)
def test_evaluate__worse_figure_never_improves_a_rank(figures, who, which, more):
    """A dearer price or a larger loss never improves the rank of its bidder."""
    who %= len(figures)
    worse = [list(row) for row in figures]
    worse[who][which] += more
    name = chr(65 + who)
    assert ranks(offers(worse))[name] >= ranks(offers(figures))[name]


@given(fields, st.randoms(use_true_random=False))
@settings(deadline=None)
def test_evaluate__order_of_bids_does_not_matter(figures, random):
    """Shuffled bids give the same evaluation, order included."""
    shuffled = offers(figures)
    random.shuffle(shuffled)
    assert evaluate(make.tender(), shuffled) == evaluate(make.tender(), offers(figures))


@given(fields)
@settings(deadline=None)
def test_evaluate__another_currency_unit_keeps_ranks(figures):
    """In a unit a hundred times smaller every cost is a hundred times larger, where no rounding acts."""
    whole = [(price * 100, no_load, load) for price, no_load, load in figures]
    small = make.tender(make.lot(rates=make.rates("1100000", "66000")))
    assert ranks(offers(whole), small) == ranks(offers(figures))


@given(fields)
@settings(deadline=None)
def test_evaluate__equals_exact_fractions(figures):
    """Totals equal the same sums in exact fractions, each part rounded half up to a cent."""

    def cents(value: Fraction) -> Fraction:
        return Fraction(int(value * 100 + Fraction(1, 2)), 100)

    result = evaluate(make.tender(), offers(figures)).lots[0]
    for offer in result.offers:
        price, no_load, load = (Fraction(value) for value in figures[ord(offer.bidder) - 65])
        unit = cents(price) + cents(11000 * no_load) + cents(660 * load)
        assert Fraction(offer.lot.total_owning_cost.value) == 10 * unit


@given(fields)
@settings(deadline=None)
def test_evaluate__ranks_follow_totals(figures):
    """The rank of an offer is one more than the number of cheaper offers."""
    result = evaluate(make.tender(), offers(figures)).lots[0].offers
    totals = [offer.lot.total_owning_cost.value for offer in result]
    assert [o.rank for o in result] == [1 + sum(t < own for t in totals) for own in totals]
    assert all(o.above_winner == total - min(totals) for o, total in zip(result, totals, strict=True))


def test_evaluate__three_lots_in_fractions():
    """A whole small tender with three lots, two currencies and one derived rate, against exact fractions."""
    lots = (
        make.lot("1"),
        make.lot("2", quantity=make.quantity("3"), rates=make.rates("2450", "1304", "756")),
        make.lot("3", rates=None, derivation=make.derivation()),
    )
    tender = make.tender(*lots, exchange=make.exchange(FCU="1.2345"))
    bids = [
        make.priced("A", "4010.55", "0.121", "1.234", "1", currency=make.entry("FCU")),
        make.priced("A", "424500", "59", "224", "2", auxiliary_loss_kw=make.quantity("2.0", "kW")),
        make.priced("A", "22300", "0.610", "7.250", "3"),
    ]
    totals = [lot.offers[0].lot.total_owning_cost.value for lot in evaluate(tender, bids).lots]

    def cent(value: Fraction) -> Fraction:
        return Fraction(int(value * 100 + Fraction(1, 2)), 100)

    rate, price, demand = Fraction("1.06"), Fraction("0.085"), 55
    loss_factor = Fraction("0.15") * Fraction("0.55") + Fraction("0.85") * Fraction("0.55") ** 2
    a = b = Fraction(0)
    for year in range(1, 31):
        peak = min(Fraction("0.65") * Fraction("1.01") ** (year - 1), Fraction(1))
        a += (8760 * price + demand) / rate**year
        b += peak**2 * (8760 * price * loss_factor + demand * Fraction("0.81")) / rate**year
    expected = [
        10 * (cent(Fraction("4010.55") * Fraction("1.2345")) + cent(Fraction(1331)) + cent(Fraction("814.44"))),
        3 * Fraction(862658),
        10 * (22300 + cent(cent(a) * Fraction("0.610")) + cent(cent(b) * Fraction("7.250"))),
    ]
    assert [Fraction(total) for total in totals] == expected
    assert totals[2] == D("446254.50")
