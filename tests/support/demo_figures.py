"""The expected result of sample_bids, worked out from its invented figures, and the comparison with a result."""

from __future__ import annotations

from decimal import Decimal
from typing import Any

#: Units of each lot.
QUANTITIES = {"1": 600, "2": 250, "3": 80, "4": 2}

#: Rates per kW: A, B, C.
RATES = {
    "1": ("11000", "660", None),
    "2": ("11000", "1320", None),
    "3": ("11006.36", "2153.32", None),
    "4": ("11600", "2010", "1540"),
}

#: Per unit, in NCU; a dash where there is no amount. The last column: rank, or why there is none.
_TABLE = """
lot bidder      price      no-load    load       auxiliary total       outcome
1   Elderquill  4840.00    638.00     759.00     0         6237.00     1
1   Firthwane   4125.00    1375.00    811.80     0         6311.80     2
1   Birchlune   4060.00    1430.00    825.00     0         6315.00     3
1   Cedarfell   4320.00    1232.00    785.40     0         6337.40     4
1   Damsonby    4250.00    1320.00    792.00     0         6362.00     5
1   Aldermist   4180.00    1408.00    818.40     0         6406.40     6
1   Gorsemere   3900.00    1386.00    891.00     0         6177.00     non-responsive
2   Cedarfell   11520.00   3630.00    4092.00    0         19242.00    1
2   Damsonby    11432.00   3850.00    3960.00    0         19242.00    1
2   Firthwane   11350.00   3905.00    4118.40    0         19373.40    3
2   Elderquill  13600.00   1925.00    3894.00    0         19419.00    4
2   Gorsemere   10900.00   4257.00    4290.00    0         19447.00    5
2   Aldermist   11350.00   3960.00    4158.00    0         19468.00    6
2   Birchlune   10980.00   4235.00    4276.80    0         19491.80    7
3   Damsonby    22300.00   6713.88    15611.57   0         44625.45    1
3   Firthwane   21500.00   7154.13    16042.23   0         44696.36    2
3   Aldermist   21900.00   7264.20    15719.24   0         44883.44    3
3   Gorsemere   20950.00   7594.39    16343.70   0         44888.09    4
3   Elderquill  26600.00   3632.10    14857.91   0         45090.01    5
3   Cedarfell   21150.00   7044.07    17312.69   0         45506.76    non-responsive
3   Birchlune   20400.00   7594.39    -          0         -           not_evaluated
4   Birchlune   655000.00  176320.00  269340.00  3080.00   1103740.00  1
4   Firthwane   685000.00  153120.00  265320.00  2464.00   1105904.00  2
4   Cedarfell   702000.00  146160.00  257280.00  2310.00   1107750.00  3
4   Aldermist   668000.00  167040.00  283410.00  2772.00   1121222.00  4
4   Damsonby    661000.00  167040.00  114972.00  3388.00   946400.00   non-responsive
4   Gorsemere   628000.00  183280.00  279390.00  2464.00   1093134.00  non-responsive
"""

AMOUNTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost", "total_owning_cost")


def expected_offers() -> list[dict[str, Any]]:
    """One entry an offer: lot, bidder, status, rank, and amounts per unit as decimals."""
    offers: list[dict[str, Any]] = []
    for line in _TABLE.strip().splitlines()[1:]:
        lot, bidder, *amounts, outcome = line.split()
        offers.append(
            {
                "lot": lot,
                "bidder": bidder,
                "status": "ranked" if outcome.isdigit() else outcome.replace("_", " "),
                "rank": int(outcome) if outcome.isdigit() else None,
                "per_unit": {
                    name: None if amount == "-" else Decimal(amount)
                    for name, amount in zip(AMOUNTS, amounts, strict=True)
                },
            }
        )
    return offers


def _decimal(text: str | None) -> Decimal | None:
    return None if text is None else Decimal(text)


def _offer_differences(expected: dict[str, Any], actual: dict[str, Any]) -> list[str]:
    name = f"lot {expected['lot']}, {expected['bidder']}"
    found = [
        f"{name}: {key} is {actual[key]!r}, expected {expected[key]!r}"
        for key in ("status", "rank")
        if actual[key] != expected[key]
    ]
    for amount, value in expected["per_unit"].items():
        lot_value = None if value is None else value * QUANTITIES[expected["lot"]]
        for basis, got, due in (("unit", actual["per_unit"], value), ("lot", actual, lot_value)):
            if _decimal(got[amount]) != due:
                found.append(f"{name}: {amount} per {basis} is {got[amount]}, expected {due}")
    return found


def differences(evaluation: dict[str, Any]) -> list[str]:
    """Every figure of an evaluation of sample_bids that is not the expected one, in words; empty if all agree.

    Parameters
    ----------
    evaluation : dict
        Content of ``evaluation.json``.
    """
    actual = {(lot["id"], offer["bidder"].split()[0]): offer for lot in evaluation["lots"] for offer in lot["offers"]}
    expected = {(offer["lot"], offer["bidder"]): offer for offer in expected_offers()}
    found = [
        f"offer {key} is {'missing' if key in expected else 'not expected'}" for key in actual.keys() ^ expected.keys()
    ]
    for key in expected.keys() & actual.keys():
        found += _offer_differences(expected[key], actual[key])
    for lot in evaluation["lots"]:
        rates = tuple(_decimal(lot["rates"][name]) for name in "ABC")
        if rates != tuple(_decimal(rate) for rate in RATES[lot["id"]]):
            found.append(f"lot {lot['id']}: rates are {rates}, expected {RATES[lot['id']]}")
    return sorted(found)
