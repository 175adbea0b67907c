"""Payment terms that differ from the tender's: simple interest, and no step for a bid on the tender's own terms."""

from __future__ import annotations

from decimal import Decimal as D
from fractions import Fraction

import pytest

from lossworth.evaluation.payment_terms import payment_ratio
from support import commercial as make

COUNTS = {"payment_terms": "discount to a common date"}


def tender(*own, interest="8", settings=COUNTS):
    """A tender with payments of its own."""
    return make.tender(settings=settings, payment_terms=make.payment_terms(interest, *own))


def test_payment_ratio__tender_terms_need_none():
    """The tender's own schedule, in any order and in parts, changes nothing; nor does silence."""
    own = (make.payment("0.3", "0"), make.payment("0.7", "36"))
    same = make.bid(payments=(make.payment("0.35", "36"), make.payment("0.3", "0"), make.payment("0.35", "36")))
    assert payment_ratio(same, tender(*own)) is None
    assert payment_ratio(make.bid(), tender(*own)) is None


def test_payment_ratio__all_at_order_against_all_after_a_year():
    """Money that is paid a year earlier costs a year's interest."""
    found = payment_ratio(make.bid(payments=(make.payment("1", "0"),)), tender(make.payment("1", "52")))
    assert found.value == D("1.08")


def test_payment_ratio__exact_fractions():
    """Worth of each payment is share / (1 + i w / 52)."""
    own = (make.payment("0.1", "0"), make.payment("0.9", "40"))
    theirs = (make.payment("0.3", "0"), make.payment("0.5", "30"), make.payment("0.2", "60"))
    found = payment_ratio(make.bid(payments=theirs), tender(*own))

    def worth(parts):
        return sum(Fraction(share) / (1 + Fraction(8, 100) * Fraction(weeks) / 52) for share, weeks in parts)

    exact = worth([("0.3", "0"), ("0.5", "30"), ("0.2", "60")]) / worth([("0.1", "0"), ("0.9", "40")])
    assert abs(Fraction(found.value) - exact) < Fraction(1, 10**45)


def test_payment_ratio__later_payment_is_a_credit():
    """A bidder who waits longer than the tender asks comes out cheaper."""
    found = make.only(tender(), make.bid(payments=(make.payment("1", "104"),)))
    assert found.per_unit.evaluated_price.value < 4000
    assert found.contract_price.value == D("40000.00")


def test_payment_ratio__no_interest():
    """At an interest of zero all schedules are worth the same."""
    assert payment_ratio(make.bid(payments=(make.payment("1", "9"),)), tender(interest="0")).value == 1


def test_payment_ratio__not_counted():
    """Where the rule ignores payment terms the papers say that they differ."""
    offer = make.bid(payments=(make.payment("1", "0"),))
    found = make.only(tender(settings={"payment_terms": "ignore"}), offer)
    assert (found.per_unit.evaluated_price.value, make.kinds(found)) == (D("4000.00"), ["payment-terms-not-counted"])


@pytest.mark.parametrize("share", ["0.9", "0.3"])
def test_check_payments__shares_that_do_not_make_the_price(share):
    """A schedule that does not add up to the whole price cannot be valued."""
    offer = make.bid(payments=(make.payment(share, "0"), make.payment("0.2", "9")))
    found = make.only(tender(), offer)
    assert (found.status, make.kinds(found)) == ("not evaluated", ["value-out-of-bounds"])
    assert found.lot.total_owning_cost is None
