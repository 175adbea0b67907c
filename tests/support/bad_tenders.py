"""Kinds of bad tender files: how each is made, and what must be said of it. Invented figures throughout."""

from __future__ import annotations

from .bad_input_cases import random_bytes, tender_case, tender_with
from .tender_folders import TENDER

__all__ = ["TENDERS"]

TENDERS = (
    tender_case("tender missing", None, ("file-missing", "tender.toml", None)),
    tender_case("tender empty", b"", ("file-unreadable", "tender.toml", "0 bytes")),
    tender_case("binary file named toml", random_bytes(), ("file-unreadable", "tender.toml:1", "byte 0x8A at byte 2")),
    tender_case(
        "tender in another encoding",
        TENDER.replace("Invented", "Invünted", 1).encode("latin-1"),
        ("file-unreadable", "tender.toml:6", f"byte 0xFC at byte {TENDER.index('Invented') + 3}"),
    ),
    tender_case(
        "tender syntax",
        tender_with('title = "Two lots for tests"', 'title = "Two lots for tests'),
        ("tender-syntax", "tender.toml:5", 'title = "Two lots for tests'),
    ),
    tender_case(
        "tender key unknown",
        tender_with("load_factor = 0.5", "load_faktor = 0.5"),
        ("tender-key-missing", "tender.toml:30", None),
        ("tender-key-unknown", "tender.toml:31", "0.5"),
    ),
    tender_case(
        "tender key in the wrong table",
        tender_with("[exchange]", "timing = 'mid-year'\n[exchange]"),
        ("tender-key-unknown", "tender.toml:14", "mid-year"),
    ),
    tender_case(
        "tender key missing", tender_with("quantity = 10\n", ""), ("tender-key-missing", "tender.toml:36", None)
    ),
    tender_case(
        "tender number in quotes",
        tender_with("load = 660", 'load = "660"'),
        ("tender-value", "tender.toml:45", "660"),
    ),
    tender_case(
        "tender number of the wrong type",
        tender_with("load = 660", "load = true"),
        ("tender-value", "tender.toml:45", "true"),
    ),
    tender_case(
        "tender number infinite", tender_with("load = 660", "load = inf"), ("tender-value", "tender.toml:45", "inf")
    ),
    tender_case(
        "tender number out of bounds",
        tender_with("load = 660", "load = -660"),
        ("tender-value", "tender.toml:45", "-660"),
    ),
    tender_case(
        "economics unknown",
        tender_with('study]\neconomics = "board"', 'study]\neconomics = "bord"'),
        ("tender-value", "tender.toml:49", "bord"),
    ),
    tender_case(
        "rule with another setting",
        tender_with("[exchange]", 'taxes = "in"\n[exchange]'),
        ("tender-value", "tender.toml:14", "in"),
    ),
    tender_case(
        "profile unknown",
        tender_with("[exchange]", 'profile = "usual"\n[exchange]'),
        ("tender-value", "tender.toml:14", "usual"),
    ),
    tender_case(
        "payments that do not make the price",
        tender_with(
            "[exchange]",
            "[payment]\ninterest_rate_percent = 8\n[[payment.part]]\nshare_percent = 90\nweeks_after_order = 0\n"
            "[exchange]",
        ),
        ("tender-conflict", "tender.toml:17", "90 % in all"),
    ),
    tender_case(
        "adder for delivery from no week on",
        tender_with("quantity = 10\n", "quantity = 10\ndelivery_adder_per_week = 5\n"),
        ("tender-key-missing", "tender.toml:36", None),
    ),
    tender_case(
        "regulation without voltages",
        tender_with(
            "[lot.rates]",
            '[lot.regulation]\nregulation = "EU 548/2014"\nequipment = "liquid medium"\ntier = 2\n[lot.rates]',
        ),
        *(("tender-key-missing", "tender.toml:43", None),) * 2,
    ),
    tender_case(
        "rates and derivation both",
        tender_with("[lot.study]", "[lot.derivation]"),
        ("tender-conflict", "tender.toml:48", None),
    ),
    tender_case(
        "rates and derivation neither",
        tender_with('[lot.rates]\nno_load = 11000\nload = 660\nper = "kW"\n', ""),
        ("tender-key-missing", "tender.toml:36", None),
    ),
    tender_case(
        "lot twice",
        tender_with('id = "2"', 'id = "1"'),
        ("tender-conflict", "tender.toml:53", "1"),
        *(("lot-unknown", f"bids/offers.csv:{line}[Lot]", "2") for line in (3, 5)),
    ),
    tender_case(
        "tender from the future",
        tender_with("format_version = 1", "format_version = 2"),
        ("tender-value", "tender.toml:1", "2"),
    ),
)
