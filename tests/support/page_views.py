"""A small evaluation view for tests of the page: two lots, hostile names, ties, a derived lot. INVENTED DATA."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import ROUND_HALF_UP, Context, Decimal

from lossworth.evaluation.identities import figure_id
from lossworth.findings import Place
from lossworth.money import Rounding, RoundingMode
from lossworth.report.figure_text import shown_figures
from lossworth.report.view import (
    CostView,
    EvaluationView,
    ExchangeView,
    FindingView,
    InputFile,
    LotView,
    MarginView,
    OfferView,
    Particular,
    RatesView,
    RecordView,
    YearColumn,
    YearTableView,
)
from lossworth.trail import Derivation, Figure, constant, difference, product, quotient, read, rounded, total

CENT = Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO)
SIX_DIGITS = Context(prec=6, rounding=ROUND_HALF_UP)

LONGEST_NAME = "Consolidated Winding, Core Cutting and Tank Fabrication Cooperative of the Upper Marrowdale Valley"
SCRIPT_NAME = "<script>alert(1)</script>"
FORMULA_NAME = "=1+1 \"quoted\" & 'single'"
TURNED_NAME = "Hazel\u202eWorks\x07"

#: bidder; price; currency; P0 in W; Pk in kW
TOWN_OFFERS = (
    (SCRIPT_NAME, "11520", "NCU", "330", "3.100"),
    ("Damsonby Power Apparatus", "11432", "NCU", "350", "3.000"),
    (LONGEST_NAME, "9080", "FCU", "355", "3.120"),
    (FORMULA_NAME, "13600", "NCU", "175", "2.950"),
    ("Gorsemere Windings", "10900", "NCU", "387", "3.250"),
    ("Aldermist Coil Works", "11350", "NCU", "360", "3.150"),
    (TURNED_NAME, "10980", "NCU", "385", "3.240"),
)
#: bidder; price; currency; P0 in kW; Pk in kW; Paux in kW
STATION_OFFERS = (
    ("Birchlune Electric", "655000", "NCU", "15.2", "134", "2.0"),
    ("Firthwane Electric", "548000", "FCU", "13.2", "132", "1.6"),
    (LONGEST_NAME, "702000", "NCU", "12.6", "128", "1.5"),
)


@dataclass(frozen=True)
class _Offer:
    """The figures of one offer before it is worded."""

    bidder: str
    unit_price: Figure
    exchange: Figure | None
    losses: tuple[Figure | None, ...]
    per_unit: tuple[Figure | None, ...]
    lot: tuple[Figure | None, ...]


def _offer(
    lot: str, row: tuple[str, ...], unit: str, rates: tuple[Figure, ...], quantity: Figure, fx: Figure
) -> _Offer:
    bidder, price, currency, *losses = row
    key = figure_id(f"lot {lot}", bidder)
    cell = iter("DEFG")
    unit_price = read(f"{key}/unit_price", "quoted unit price", Decimal(price), currency, _cell(bidder, lot, "C"))
    exchange = fx if currency != "NCU" else None
    factors = (unit_price,) if exchange is None else (unit_price, exchange)
    price_unit = product(f"{key}/per unit/price", "evaluated price per unit", "NCU", *factors, rounding=CENT)
    in_kw = [
        _loss(f"{key}/{name}", name, text, unit if name == "no-load loss" else "kW", _cell(bidder, lot, next(cell)))
        for name, text in zip(("no-load loss", "load loss", "auxiliary loss"), losses, strict=False)
    ]
    costs = [
        None
        if loss is None
        else product(f"{key}/per unit/{loss.label}", f"capitalized {loss.label}", "NCU", r, loss, rounding=CENT)
        for r, loss in zip(rates, in_kw, strict=False)
    ]
    parts = (price_unit, *costs)
    whole = [p if p is None else product(f"{p.id}/lot", f"{p.label}, lot", "NCU", quantity, p) for p in parts]
    unit_total = lot_total = None
    if None not in parts:
        unit_total = total(f"{key}/per unit/toc", "total owning cost per unit", "NCU", *filter(None, parts))
        lot_total = product(f"{key}/lot/toc", "total owning cost of the lot", "NCU", quantity, unit_total)
    missing = (None,) * (3 - len(costs))
    return _Offer(
        bidder,
        unit_price,
        exchange,
        (*in_kw, *missing),
        (*parts, *missing, unit_total),
        (*whole, *missing, lot_total),
    )


def _loss(key: str, label: str, text: str, unit: str, place: Place) -> Figure | None:
    if not text:
        return None
    if unit == "kW":
        return read(key, label, Decimal(text), "kW", place)
    stated = read(f"{key}/as read", f"{label} as read", Decimal(text), "W", place)
    return quotient(
        key, label, "kW", stated, constant("W in 1 kW", "W in 1 kW", Decimal(1000), "W/kW", "1 kW is 1000 W")
    )


def _cell(bidder: str, lot: str, column: str) -> Place:
    return Place(f"bids/{bidder[:9].lower()}.xlsx", sheet=f"Lot {lot}", cell=f"{column}7")


def _view_of(offer: _Offer, status: str, rank: int | None, ties: int, first: Decimal, rates: RatesView) -> OfferView:
    lot_total = offer.lot[-1]
    particulars = [Particular("unit price", f"{offer.unit_price.value}", offer.unit_price.unit, "bids/a.xlsx!C7", None)]
    particulars += [Particular("load loss Pk", "", "", "bids/a.xlsx!E7", None)] if offer.losses[1] is None else []
    return OfferView(
        bidder=offer.bidder,
        status=status,
        rank=rank,
        rank_text="–" if rank is None else f"{rank} =" if ties > 1 else str(rank),
        particulars=tuple(particulars),
        unit_price=offer.unit_price.id,
        exchange_rate=offer.exchange.id if offer.exchange else None,
        no_load_loss=_id(offer.losses[0]),
        load_loss=_id(offer.losses[1]),
        auxiliary_loss=_id(offer.losses[2]),
        currency=offer.unit_price.unit,
        per_unit=CostView(*(_id(figure) for figure in offer.per_unit)),
        lot=CostView(*(_id(figure) for figure in offer.lot)),
        margin=None,
        above_winner=lot_total.value - first if rank and lot_total else None,
        reasons={
            "ranked": (),
            "non-responsive": ("load loss: must be at most 3.250 kW, got 3.350 kW — bids/a.xlsx[Lot 2]!E7",),
            "not evaluated": ("load loss: must be stated — bids/a.xlsx[Lot 2]!E7",),
        }[status],
    )


def _id(figure: Figure | None) -> str | None:
    return None if figure is None else figure.id


def _with_margins(views: list[OfferView], offers: list[_Offer], lot: str) -> tuple[list[OfferView], list[Figure]]:
    """Give every offer but the last its distance to the one behind it."""
    margins, shown = [], []
    for place, (view, offer) in enumerate(zip(views, offers, strict=True)):
        if place + 1 == len(views):
            shown.append(view)
            continue
        rival = offers[place + 1]
        assert rival.lot[-1] is not None
        assert offer.lot[-1] is not None
        gap = difference(figure_id(f"lot {lot}", offer.bidder, "margin"), "margin", "NCU", rival.lot[-1], offer.lot[-1])
        margins.append(gap)
        kw = SIX_DIGITS.divide(gap.value, Decimal(11000 * 250))
        margin = MarginView(rival.bidder, gap.id, Decimal("0.12"), kw, SIX_DIGITS.multiply(kw, Decimal(8)))
        shown.append(OfferView(**{name: getattr(view, name) for name in OfferView.__slots__} | {"margin": margin}))
    return shown, margins


def _lot_view(
    lot: str,
    description: str,
    quantity: Figure,
    offers: list[_Offer],
    left_out: list[tuple[_Offer, str]],
    rates: RatesView,
) -> tuple[LotView, list[Figure]]:
    offers = sorted(offers, key=lambda o: o.lot[-1].value if o.lot[-1] else Decimal(0))
    totals = [offer.lot[-1].value for offer in offers if offer.lot[-1]]
    views = [
        _view_of(offer, "ranked", totals.index(cost) + 1, totals.count(cost), totals[0], rates)
        for offer, cost in zip(offers, totals, strict=True)
    ]
    ranked, margins = _with_margins(views, offers, lot)
    others = [_view_of(offer, status, None, 0, Decimal(0), rates) for offer, status in left_out]
    view = LotView(
        id=lot,
        description=description,
        quantity=int(quantity.value),
        quantity_figure=quantity.id,
        rated_power="400 kVA",
        limits=("no-load loss at most 0.387 kW", "load loss at most 3.250 kW", "delivery within 40 weeks"),
        rates=rates,
        offers=(*ranked, *others),
        recommendation=f"{offers[0].bidder} and {offers[1].bidder} tie at the lowest total owning cost.",
    )
    figures = [f for o in (*offers, *(o for o, _ in left_out)) for f in (*o.losses, *o.per_unit, *o.lot) if f]
    return view, [quantity, *figures, *margins]


def _announced(lot: str) -> tuple[Figure, ...]:
    place = Place("tender.toml", line=41)
    return (
        read(f"lot {lot}/rates/no_load", "announced no-load loss rate A", Decimal(11000), "NCU/kW", place),
        read(f"lot {lot}/rates/load", "announced load loss rate B", Decimal(1320), "NCU/kW", place),
    )


def _derived(lot: str) -> tuple[tuple[Figure, ...], YearTableView]:
    place = Place("tender.toml", line=60)
    discount = read(f"lot {lot}/rates/discount_rate_percent", "discount rate", Decimal(6), "%/year", place)
    years = read(f"lot {lot}/rates/years", "evaluation period", Decimal(35), "year", place)
    factors = tuple(1.06**-t for t in range(1, 36))
    yearly = {"no_load": 799.6, "load": 138.5, "auxiliary": 106.0}
    columns = [
        YearColumn("year", "year", "1", tuple(float(t) for t in range(1, 36))),
        YearColumn("discount_factor", "discount factor", "1", factors),
        YearColumn("energy_price_per_kwh", "energy price", "NCU/kWh", (0.085,) * 35),
        YearColumn("demand_charge_per_kw_year", "demand charge", "NCU/(kW year)", (55.0,) * 35),
        YearColumn("peak_load_pu", "peak load, per unit", "1", tuple(min(0.6 * 1.01**t, 0.8) for t in range(35))),
    ]
    rates = []
    for (name, cost), symbol in zip(yearly.items(), "ABC", strict=True):
        values = tuple(cost * f for f in factors)
        columns.append(YearColumn(name, f"{name}, present value".replace("_", "-"), "NCU/kW", values))
        source = Derivation(f"lot {lot}/year table", name, (discount, years))
        key = f"lot {lot}/rates/{name}"
        computed = Figure(
            f"{key}/computed", f"rate {symbol}, computed", Decimal(f"{sum(values):.12g}"), "NCU/kW", source
        )
        rates.append(rounded(key, f"rate {symbol}", computed, CENT))
    inputs = {"discount_rate_percent": discount.id, "evaluation_period_years": years.id}
    return tuple(rates), YearTableView(f"lot {lot}/year table", tuple(columns), inputs)


def _town(fx: Figure) -> tuple[LotView, list[Figure]]:
    quantity = read("lot 2/quantity", "quantity", Decimal(250), "units", Place("tender.toml", line=38))
    rates = _announced("2")
    view = RatesView(
        "announced", rates[0].id, rates[1].id, None, "NCU/kW", ("Announced per kW (tender.toml:41).",), None
    )
    offers = [_offer("2", row, "W", rates, quantity, fx) for row in TOWN_OFFERS]
    beyond = _offer("2", ("Elderquill <b>Magnetics</b>", "9900", "NCU", "360", "3.350"), "W", rates, quantity, fx)
    silent = _offer("2", ("Cedarfell Transformers", "10400", "NCU", "345", ""), "W", rates, quantity, fx)
    left_out = [(beyond, "non-responsive"), (silent, "not evaluated")]
    lot, figures = _lot_view("2", "400 kVA ground-mounted, 11/0.4 kV", quantity, offers, left_out, view)
    return lot, [*rates, *figures]


def _station(fx: Figure) -> tuple[LotView, list[Figure]]:
    quantity = read("lot 4/quantity", "quantity", Decimal(2), "units", Place("tender.toml", line=58))
    rates, table = _derived("4")
    sources = (
        "The tender announces the derivation (tender.toml:60).",
        "Source as stated there: board minute 12 of 2026.",
    )
    view = RatesView("derived as announced", rates[0].id, rates[1].id, rates[2].id, "NCU/kW", sources, table)
    offers = [_offer("4", row, "kW", rates, quantity, fx) for row in STATION_OFFERS]
    lot, figures = _lot_view("4", "20/31.5 MVA ONAN/ONAF, 33/11 kV", quantity, offers, [], view)
    return lot, [*rates, *figures]


def page_view(
    remark: str = "INVENTED DATA <for tests>, made up", lots: Iterable[str] = ("town", "station")
) -> EvaluationView:
    """View of two lots, ready for the page."""
    fx = read("exchange/FCU", "exchange rate FCU", Decimal("1.2500"), "NCU/FCU", Place("tender.toml", line=12))
    made = {"town": _town, "station": _station}
    shown = [made[name](fx) for name in lots]
    return EvaluationView(
        reference='T-07 "A" </style>',
        title="Distribution and station transformers, frame <2026>",
        buyer="Marrowdale Power Board",
        currency="NCU",
        opening_date="2026-09-15",
        remark=remark,
        recommendation="Lowest total owning cost by the announced method — lot 2: a tie; lot 4: Birchlune Electric.",
        rules=("Money is rounded to 0.01, half away from zero.", "A missing loss is not zero."),
        method=("Total owning cost = evaluated price + A × P0 + B × Pk + C × Paux [RUS Bulletin 1724E-301].",),
        cautions=("Guaranteed values need type and routine tests.", "A licensed engineer decides."),
        lots=tuple(lot for lot, _ in shown),
        exchange=ExchangeView(
            "Central bank of nowhere", "mid", "2026-09-15", "papers/rates.pdf", (("FCU", "exchange/FCU"),)
        ),
        findings=(
            FindingView(
                "value-missing",
                "Value missing",
                "offer not evaluated",
                "bids/cedarfell.xlsx[Lot 2]!E7",
                "Cedarfell Transformers",
                "2",
                'load loss: must be stated, got "" (Cedarfell Transformers, lot 2)',
                "Whether the bidder may be asked is for the tender's rules to say.",
            ),
        ),
        record=RecordView(
            "0.1.0", "2026-09-15T10:00:00Z", (InputFile("tender.toml", "ab" * 32), InputFile("bids/a.xlsx", "cd" * 32))
        ),
        figures=shown_figures([fx, *(figure for _, figures in shown for figure in figures)], "NCU"),
    )
