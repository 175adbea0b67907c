"""Write docs/findings.md from the table of finding kinds. Run it after a change of the table: ``make findings``."""

from __future__ import annotations

from pathlib import Path

from lossworth.findings import KINDS, Effect

PAGE = Path(__file__).parent / "findings.md"

_HEAD = """# Findings

Everything that can be found wrong, or worth knowing, from the table `KINDS` in `src/lossworth/findings.py`. This page
is written by `docs/make_findings.py`; a test compares the two.

A finding prints as place, field, rule, value as read and offer; the line below says what to do. JSON carries the kind
by its short name, which stays the same over releases.
"""

_MEANING = {
    Effect.STOPS: "No paper is written. Exit code 1.",
    Effect.NOT_EVALUATED: "The offer is listed apart, unranked, with its reason; the others are ranked.",
    Effect.NON_RESPONSIVE: "The offer is beyond a limit: its cost is shown as read, and it is not ranked.",
    Effect.NOTE: "Nothing changes; the papers say it.",
}


def page() -> str:
    """The whole page."""
    parts = [_HEAD]
    for effect, meaning in _MEANING.items():
        parts.append(
            f"\n## {effect.value.capitalize()}\n\n{meaning}\n\n| kind | title | cause | remedy |\n|---|---|---|---|\n"
        )
        kinds = (kind for kind in KINDS.values() if kind.effect is effect)
        parts += [f"| `{kind.slug}` | {kind.title} | {kind.cause} | {kind.remedy} |\n" for kind in kinds]
    return "".join(parts)


if __name__ == "__main__":
    PAGE.write_text(page(), encoding="utf-8")
