"""Do the rules of a line cover every strength once: no band twice, no strength left out.

A life that changes with strength is written as one rule a band. A strength in two
bands would get the shorter life without anybody having meant it; one in none
would never age at all.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from itertools import pairwise

from stockroom.keeping.rules import Rule
from stockroom.measure.formats import format_strength


def band_faults(rules: Iterable[Rule], unit: str) -> list[str]:
    """What is wrong with the strength bands of one line's rules, in words; none when right.

    `unit` is the line's, for the words. Rules of one kind, purpose and place are
    looked at together; a kind without any band is passed over.
    """
    told = []
    for bands in _alike(rules).values():
        if any(rule.above is not None or rule.upto is not None for rule in bands):
            told += _faults(bands, unit)
    return told


def overlapping(rule: Rule, rules: Iterable[Rule]) -> list[Rule]:
    """Those of a line's other rules that say the same kind of thing of the same bottles.

    The earlier of two dates counts, so a longer life beside a shorter one never does.
    """
    alike = ("kind", "origin", "purpose")
    return [
        other
        for other in rules
        if other != rule
        and all(getattr(other, name) == getattr(rule, name) for name in alike)
        and max(_above(rule), _above(other)) < min(_upto(rule), _upto(other))
        and max(_warmer(rule), _warmer(other)) < min(_colder(rule), _colder(other))
    ]


def _alike(rules: Iterable[Rule]) -> dict[tuple[object, ...], list[Rule]]:
    found: dict[tuple[object, ...], list[Rule]] = {}
    for rule in rules:
        # the origin counts too: "from made" and "from opened" may both hold at once
        key = (rule.kind, rule.origin, rule.purpose, rule.colder_than, rule.warmer_than)
        found.setdefault(key, []).append(rule)
    return found


def _faults(bands: list[Rule], unit: str) -> list[str]:
    told = []
    ordered = sorted(bands, key=lambda rule: (_above(rule), _upto(rule)))
    for lower, upper in pairwise(ordered):
        end, start = _upto(lower), _above(upper)
        if start < end:
            told.append(f"{lower.kind}: two rules for {_said(start, end, unit)}.")
        elif start > end:
            told.append(f"{lower.kind}: no life given {_said(end, start, unit)}.")
    return told


def _above(rule: Rule) -> float:
    return 0.0 if rule.above is None else rule.above


def _upto(rule: Rule) -> float:
    return math.inf if rule.upto is None else rule.upto


def _warmer(rule: Rule) -> float:
    return -math.inf if rule.warmer_than is None else rule.warmer_than


def _colder(rule: Rule) -> float:
    return math.inf if rule.colder_than is None else rule.colder_than


def _said(low: float, high: float, unit: str) -> str:
    if math.isinf(high):
        return f"above {format_strength(low, unit)}"
    return f"between {low:g} and {format_strength(high, unit)}"
