"""Alternatives as offers of their own, by the announced rule."""

from __future__ import annotations

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Finding, Place
from support import commercial as make
from support import records

ESTER = "Alder, alternative ester"
LATE = records.lot(latest_delivery_weeks=make.quantity("30"))


def evaluated(rule, *offers, lot=None, findings=(), **settings):
    """Status and rank by name."""
    tender = make.tender(*(() if lot is None else (lot,)), settings={"alternatives": rule, **settings})
    result = evaluate(tender, offers, findings).lots[0]
    return {offer.name: (offer.status.value, offer.rank) for offer in result.offers}


def weeks(value):
    """A delivery time."""
    return make.quantity(value)


def test_left_out__only_if_the_base_offer_is_responsive():
    """A late base offer takes its alternative along, however good that is."""
    base = make.bid(delivery_weeks=weeks("31"))
    other = make.bid(price="100", alternative="ester", delivery_weeks=weeks("10"))
    rule = "only if the base offer is responsive"
    assert evaluated(rule, base, other, lot=LATE)[ESTER] == ("not evaluated", None)
    assert evaluated("as offers of their own", base, other, lot=LATE)[ESTER] == ("ranked", 1)


def test_left_out__alternative_without_a_base_offer():
    """An alternative alone has no base offer that could be responsive."""
    rule = "only if the base offer is responsive"
    assert evaluated(rule, make.bid(alternative="ester"))[ESTER] == ("not evaluated", None)


def test_left_out__only_of_the_lowest_ranked_base_bidder():
    """The first base bidder's alternative counts, also where it is dearer; that of others does not."""
    offers = (
        make.bid("Alder", "4000"),
        make.bid("Alder", "4300", alternative="ester"),
        make.bid("Birch", "4100"),
        make.bid("Birch", "3000", alternative="ester"),
    )
    assert evaluated("only of the lowest ranked base bidder", *offers) == {
        "Alder": ("ranked", 1),
        "Birch": ("ranked", 2),
        ESTER: ("ranked", 3),
        "Birch, alternative ester": ("not evaluated", None),
    }


def test_left_out__the_finding_names_rule_and_place():
    """An alternative that is left out says by which announced rule."""
    tender = make.tender(settings={"alternatives": "not accepted"})
    found = make.only(tender, make.bid(), make.bid(alternative="ester"), bidder=ESTER)
    assert make.kinds(found) == ["alternative-not-evaluated"]
    assert found.findings[-1].rule == "is not accepted; Alternatives are not accepted (tender.toml:20)"


def test_left_out__tie_of_base_offers():
    """Of tied base bidders both may come with their alternatives, unless the announced order parts them."""
    offers = (
        records.priced("Alder", "4000", "0.12", "1.2"),
        records.priced("Birch", "4110", "0.11", "1.2"),
        make.bid("Alder", "3000", alternative="ester"),
    )
    rule = "only of the lowest ranked base bidder"
    assert evaluated(rule, *offers)[ESTER] == ("ranked", 1)
    assert evaluated(rule, *offers, tie_order=("lower no-load loss",))[ESTER] == ("not evaluated", None)


def test_left_out__alternatives_have_margins_by_name():
    """A margin names the offer, not only its bidder."""
    result = evaluate(
        make.tender(settings={"alternatives": "as offers of their own"}),
        [make.bid(), make.bid(price="4100", alternative="ester")],
    )
    assert result.lots[0].offers[0].margin.to == ESTER


@pytest.mark.parametrize(("line", "who"), [(2, "Alder"), (3, ESTER)])
def test_findings_by_offer__the_row_decides(line, who):
    """A finding of intake is about the row that it stands in, base offer or alternative."""
    base = make.bid(place=Place("bids/a.csv", line=2))
    other = make.bid(alternative="ester", place=Place("bids/a.csv", line=3))
    found = Finding("value-unreadable", "impedance", "must be a number", Place("bids/a.csv", line=line, column="Z"),
                    "n/a", "Alder", "1")  # fmt: skip
    statuses = evaluated("as offers of their own", base, other, findings=[found])
    assert [name for name, (status, _) in statuses.items() if status == "not evaluated"] == [who]


def test_findings_by_offer__a_finding_on_no_row_is_about_all():
    """A finding on the file concerns every offer of the bidder in the lot."""
    found = Finding("value-unreadable", "currency", "must be a code", Place("bids/b.csv", line=1), "?", "Alder", "1")
    offers = (make.bid(place=Place("bids/b.csv", line=2)),
              make.bid(alternative="ester", place=Place("bids/b.csv", line=3)))  # fmt: skip
    statuses = evaluated("as offers of their own", *offers, findings=[found])
    assert {status for status, _ in statuses.values()} == {"not evaluated"}
