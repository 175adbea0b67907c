"""Laws of a tender that announces everything: monotonic, blind to order, level, and exact in fractions."""

from __future__ import annotations

from decimal import Decimal as D
from fractions import Fraction
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from lossworth.evaluation.evaluate import evaluate
from lossworth.trail import Operation, walk
from support import commercial as make
from support import records

SETTINGS: dict[str, Any] = {
    "unconditional_discounts": "deduct",
    "prompt_payment_discounts": "deduct",
    "taxes": "excluded",
    "payment_terms": "discount to a common date",
    "missing_item": "highest of the others",
    "missing_item_among": "all offers received",
    "loss_tolerance": "evaluate at guarantee plus tolerance",
    "preference": "margin added to other prices",
    "arithmetic_errors": "correct",
    "misplaced_decimal": "no exception",
    "unit_price_against_total": "total governs",
    "tie_order": ("lower no-load loss", "earlier delivery"),
}
LOT = records.lot(
    quantity=make.quantity("7"),
    items=(make.item(pieces="4"),),
    delivery_without_adder_weeks=make.quantity("20"),
    delivery_adder_percent_per_week=make.quantity("0.5"),
    site_costs=(make.site_cost(liquids=("mineral oil",)),),
)
TENDER = make.tender(
    LOT,
    settings=SETTINGS,
    taxes=make.taxes("10"),
    preference=make.preference("7.5"),
    payment_terms=make.payment_terms("8", make.payment("0.3", "0"), make.payment("0.7", "36")),
    delivered_point=make.entry("DDP site"),
    delivery_levels=(make.level("EXW", "4", "120"),),
    exchange=records.exchange(FCU="1.2345"),
)

prices = st.decimals("100", "99999", places=2)
losses = st.decimals("0.001", "99", places=3)
percents = st.decimals("0", "20", places=1)
bids = st.fixed_dictionaries(
    {
        "price": prices,
        "no_load": losses,
        "load": losses,
        "discount": percents,
        "prompt": percents,
        "tolerance": percents,
        "weeks": st.integers(1, 40),
        "early": st.integers(0, 10).map(lambda tenth: D(tenth) / 10),
        "item": st.none() | st.decimals("1", "999", places=2),
        "term": st.sampled_from(["EXW", "DDP"]),
        "liquid": st.sampled_from(["mineral oil", "ester"]),
        "home": st.booleans(),
        "taxed": st.booleans(),
        "foreign": st.booleans(),
    }
)
drawn = st.lists(bids, min_size=2, max_size=5)


def offer(name: str, bid: dict[str, Any]):
    """The offer of these figures."""
    code = "FCU" if bid["foreign"] else "NCU"
    return make.bid(
        name,
        str(bid["price"]),
        currency=make.entry(code),
        no_load_loss_kw=make.quantity(str(bid["no_load"]), "kW"),
        load_loss_kw=make.quantity(str(bid["load"]), "kW"),
        delivery_weeks=make.quantity(str(bid["weeks"])),
        unconditional_discount_percent=make.quantity(str(bid["discount"])),
        prompt_payment_discount_percent=make.quantity(str(bid["prompt"])),
        claimed_tolerance_percent=make.quantity(str(bid["tolerance"])),
        payments=(make.payment(str(bid["early"]), "0"), make.payment(str(1 - bid["early"]), "36")),
        item_prices={} if bid["item"] is None else {"spare bushing": make.quantity(str(bid["item"]), code)},
        delivery_term=make.entry(bid["term"]),
        insulating_liquid=make.entry(bid["liquid"]),
        origin=make.entry("home" if bid["home"] else "abroad"),
        tax_included=bid["taxed"],
    )


def evaluated(figures):
    """The first lot of an evaluation of these bids."""
    return evaluate(TENDER, [offer(chr(65 + number), bid) for number, bid in enumerate(figures)]).lots[0]


def cent(value: Fraction) -> Fraction:
    """Rounded half up to a cent."""
    return Fraction(int(value * 100 + Fraction(1, 2)), 100)


class Exact:
    """The same evaluation once more, in exact fractions and in other words."""

    def __init__(self, bid: dict[str, Any]) -> None:
        self.bid = bid

    def factor(self) -> Fraction:
        """What multiplies every price of the bid."""
        rate = Fraction("1.2345") if self.bid["foreign"] else Fraction(1)
        left = (1 - Fraction(self.bid["discount"]) / 100) * (1 - Fraction(self.bid["prompt"]) / 100)
        return left * rate / (Fraction(11, 10) if self.bid["taxed"] else 1)

    def piece(self) -> Fraction | None:
        """Price of a piece of the item."""
        return None if self.bid["item"] is None else Fraction(self.bid["item"]) * self.factor()

    def ratio(self) -> Fraction:
        """Worth of the payments over that of the tender's own."""
        later = 1 / (1 + Fraction(8, 100) * 36 / 52)
        early = Fraction(self.bid["early"])
        return (early + (1 - early) * later) / (Fraction(3, 10) + Fraction(7, 10) * later)

    def margin(self) -> Fraction:
        """Share of the preference margin."""
        return Fraction(0) if self.bid["home"] else Fraction("0.075")

    def unit(self) -> Fraction:
        """Evaluated price of a unit before rounding."""
        price = Fraction(self.bid["price"]) * self.factor()
        delivered = price * Fraction(104, 100) + 120 if self.bid["term"] == "EXW" else price
        late = max(0, self.bid["weeks"] - 20)
        site = 300 if self.bid["liquid"] == "mineral oil" else 0
        return (
            delivered
            + price * (self.ratio() - 1)
            + delivered * late * Fraction("0.005")
            + site
            + delivered * self.margin()
        )

    def items(self, stand_in: Fraction | None) -> Fraction:
        """Items of the lot before rounding."""
        piece = self.piece()
        if piece is not None:
            return 4 * piece * (self.ratio() + self.margin())
        return 4 * (stand_in or 0) * (1 + self.margin())

    def losses(self) -> Fraction:
        """Capitalized losses of a unit, each part rounded."""
        more = 1 + Fraction(self.bid["tolerance"]) / 100
        return cent(11000 * Fraction(self.bid["no_load"]) * more) + cent(660 * Fraction(self.bid["load"]) * more)


@given(drawn)
@settings(deadline=None)
def test_evaluate__every_step_equals_exact_fractions(figures):
    """Totals of the lot equal the same sums in exact fractions, with every step in play."""
    exact = [Exact(bid) for bid in figures]
    for found in evaluated(figures).offers:
        own = exact[ord(found.name) - 65]
        others = [piece for each in exact if each is not own and (piece := each.piece()) is not None]
        if own.piece() is None and not others:
            assert (found.status, found.lot.total_owning_cost) == ("not evaluated", None)
            continue
        expected = 7 * (cent(own.unit()) + own.losses()) + cent(own.items(max(others, default=None)))
        assert Fraction(found.lot.total_owning_cost.value) == expected


WORSE = {"price": 1, "no_load": 1, "load": 1, "tolerance": 1, "weeks": 1, "discount": -1, "prompt": -1}


@given(drawn, st.integers(0, 4), st.sampled_from(sorted(WORSE)), st.integers(1, 9))
@settings(deadline=None)
def test_evaluate__worse_figure_never_improves_a_rank(figures, who, which, more):
    """A dearer price, a larger loss or tolerance, a later delivery, a smaller discount never improves a rank."""
    who %= len(figures)
    name = chr(65 + who)
    for bid in figures:  # a stand-in would hang on the changed price
        bid["item"] = bid["item"] or D(1)
    worse = [dict(bid) for bid in figures]
    changed = figures[who][which] + WORSE[which] * more
    worse[who][which] = max(changed, type(changed)(0))
    ranks = [{offer.name: offer.rank for offer in evaluated(each).offers} for each in (figures, worse)]
    assert ranks[1][name] >= ranks[0][name]


@given(drawn, st.randoms(use_true_random=False))
@settings(deadline=None)
def test_evaluate__order_of_bids_does_not_matter(figures, random):
    """Shuffled bids give the same evaluation, with every step, finding and stand-in."""
    offers = [offer(chr(65 + number), bid) for number, bid in enumerate(figures)]
    shuffled = list(offers)
    random.shuffle(shuffled)
    assert evaluate(TENDER, shuffled) == evaluate(TENDER, offers)


@given(bids)
@settings(deadline=None)
def test_evaluate__same_bid_quoted_otherwise_costs_the_same(bid):
    """A bid with tax in its prices costs what it costs without, whatever else acts on it."""
    plain = {**bid, "taxed": False, "price": D(int(bid["price"]) * 10), "item": D(100)}
    taxed = {**plain, "taxed": True, "price": plain["price"] * D("1.1"), "item": D(110)}
    first, second = evaluated([plain, taxed]).offers
    assert first.lot.total_owning_cost.value == second.lot.total_owning_cost.value


@given(drawn)
@settings(deadline=None, max_examples=30)
def test_evaluate__trail_recomputes(figures):
    """Every operation behind every step, amount and contract price gives its value from its operands."""
    acts = {
        "product": lambda values: _times(values),
        "sum": sum,
        "difference": lambda values: values[0] - values[1],
        "quotient": lambda values: values[0] / values[1],
        "rounded": lambda values: values[0],
    }
    seen: dict[str, Any] = {}
    for found in evaluated(figures).offers:
        roots = [found.lot.total_owning_cost, found.contract_price, *(step.price for step in found.price_steps)]
        for figure in (each for root in roots if root is not None for each in walk(root)):
            assert seen.setdefault(figure.id, figure) == figure
            if isinstance(figure.source, Operation):
                exact = acts[figure.source.operator]([Fraction(each.value) for each in figure.source.operands])
                expected = cent(exact) if figure.rounding and exact >= 0 else exact
                assert abs(Fraction(figure.value) - expected) <= abs(expected) / 10**45


def _times(values: list[Fraction]) -> Fraction:
    result = Fraction(1)
    for value in values:
        result *= value
    return result
