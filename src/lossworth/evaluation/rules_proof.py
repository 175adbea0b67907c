"""Are the rules that are used the rules that were published? Proved by fingerprint, else told key by key."""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from ..findings import Finding, Place
from ..records.rules import PUBLISHED_RULES
from ..records.tender import Tender
from .rules_content import canonical_text, fingerprint, rules_content

__all__ = ["RuleDifference", "RulesProof", "compare_rules", "rules_findings"]

#: Beside the tender file, out of reach of the papers: a file that is kept and never written anew.
_NOT_STATED = "not stated"


@dataclass(frozen=True, slots=True)
class RuleDifference:
    """One rule that is used otherwise than published.

    Parameters
    ----------
    key : str
        Where it stands in the content, ``"lots.1.rates.no_load_per_kw"``.
    published, used : str or None
        As text; None where it was not, or is not, stated.
    """

    key: str
    published: str | None
    used: str | None

    def __str__(self) -> str:
        return f"{self.key}: published {self.published or _NOT_STATED}, used {self.used or _NOT_STATED}"


@dataclass(frozen=True, slots=True)
class RulesProof:
    """Result of the comparison.

    Parameters
    ----------
    used : str
        Fingerprint of the rules of this run.
    published : str
        Fingerprint of the content that was kept, computed anew; empty where the file holds none.
    differences : tuple of RuleDifference
        In the order of their keys.
    fault : str
        What is wrong with the kept file itself; empty where nothing is.
    """

    used: str
    published: str
    differences: tuple[RuleDifference, ...]
    fault: str = ""

    @property
    def is_proven(self) -> bool:
        """Whether the rules used are the rules published."""
        return not self.fault and self.used == self.published

    @property
    def sentence(self) -> str:
        """The result in a sentence, for the papers."""
        if self.is_proven:
            return f"The rules used are the rules published: both have the fingerprint {self.used}."
        if not self.published:
            return f"It cannot be shown that the rules used are the rules published: the kept file {self.fault}."
        count = len(self.differences)
        differ = f"The rules used differ from the rules published in {count} {'place' if count == 1 else 'places'}"
        if not self.differences:
            return f"The rules used agree with the kept file, but the file {self.fault}."
        return f"{differ}; the file that was kept {self.fault}." if self.fault else f"{differ}."


def compare_rules(tender: Tender, kept: str) -> RulesProof:
    """Compare the rules of a tender with the file that was kept when they were published.

    Parameters
    ----------
    tender : Tender
        As the evaluation uses it.
    kept : str
        Text of the file.

    Returns
    -------
    RulesProof
        Equal fingerprints, or the differences key by key.

    Raises
    ------
    EvaluationStopped
        If the tender names a profile of rules that does not exist.
    """
    content = rules_content(tender)
    used = fingerprint(content)
    try:
        stated, published = _kept_content(kept)
    except (ValueError, TypeError, RecursionError) as error:
        return RulesProof(used, "", (), _fault_of(error))
    computed = fingerprint(published)
    fault = "" if stated == computed else "does not have the fingerprint that it states: it was changed by hand"
    return RulesProof(used, computed, tuple(_differences(published, content)), fault)


def rules_findings(proof: RulesProof | None, file: str = PUBLISHED_RULES) -> tuple[Finding, ...]:
    """Findings on the comparison.

    Parameters
    ----------
    proof : RulesProof or None
        None where no file was kept.
    file : str
        Name of the kept file in findings.

    Returns
    -------
    tuple of Finding
        None where the proof holds.
    """
    if proof is None:
        rule = f"must be kept as {file} beside the tender file when they are published"
        return (Finding("rules-not-published", "rules", rule, Place(file)),)
    if not proof.published:
        return (
            Finding(
                "file-unreadable",
                "published rules",
                f"must be the file as it was kept; it {proof.fault}",
                Place(file),
                fix="Put the file back as it was published.",
            ),
        )
    changed = [Finding("rules-differ", "fingerprint", f"must fit; the file {proof.fault}", Place(file))]
    return (*(changed if proof.fault else ()), *(_finding(each, file) for each in proof.differences))


def _finding(difference: RuleDifference, file: str) -> Finding:
    published = difference.published
    rule = "must not be stated: it was not published" if published is None else f'must be as published, "{published}"'
    got = _NOT_STATED if difference.used is None else difference.used
    return Finding("rules-differ", difference.key, rule, Place(file, key=difference.key), got)


def _kept_content(kept: str) -> tuple[object, Mapping[str, Any]]:
    """Stated fingerprint and content of a kept file."""
    file = json.loads(kept, object_pairs_hook=_each_key_once, parse_float=_no_float, parse_constant=_no_float)
    content = file.get("content") if isinstance(file, dict) else None
    if not isinstance(content, dict):
        raise TypeError("has no content of rules")
    canonical_text(content)
    return file.get("fingerprint"), content


def _each_key_once(pairs: Sequence[tuple[str, Any]]) -> dict[str, Any]:
    keys = [key for key, _ in pairs]
    if len(set(keys)) < len(keys):
        raise TypeError("gives a key twice")
    return dict(pairs)


def _no_float(text: str) -> Any:
    raise TypeError(f"has a number that no rule has, {text[:20]}")


def _fault_of(error: Exception) -> str:
    if isinstance(error, RecursionError):
        return "nests too deep"
    return str(error) if isinstance(error, TypeError) else "is not valid JSON"


def _differences(published: Mapping[str, Any], used: Mapping[str, Any]) -> Iterator[RuleDifference]:
    before, now = dict(_leaves(published)), dict(_leaves(used))
    for key in sorted(before.keys() | now.keys()):
        if before.get(key) != now.get(key):
            yield RuleDifference(key, before.get(key), now.get(key))


def _leaves(content: Any, key: str = "") -> Iterator[tuple[str, str]]:
    """Every statement with its key; a list is one statement, as its parts have no names."""
    if isinstance(content, Mapping) and content:
        for name, value in content.items():
            yield from _leaves(value, f"{key}.{name}" if key else str(name))
    else:
        yield key, content if isinstance(content, str) else json.dumps(content, ensure_ascii=False, sort_keys=True)
