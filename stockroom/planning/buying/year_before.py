"""This term's use beside that of the same term a year before, in all and by the group.

What the entries say was drawn counts first, then what the bookings of that term work
out to, then what somebody wrote down of it. Where none of them says, nothing is said.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import say
from stockroom.planning.buying.usage import BOUGHT, usage
from stockroom.planning.decisions import Use
from stockroom.planning.explode import explode
from stockroom.planning.facts import Facts, Firmness

ENTRIES, BOOKINGS, TABLE = "entries", "bookings", "table"
"""By what a former use is known, the best first."""

MOST_TOLD = 5

_Key = tuple[str, str, str]


@dataclass(frozen=True, slots=True)
class _Former:
    """What a term used: micro-units, for so many groups if known, and how that is known."""

    amount: int
    groups: int | None
    basis: str


def with_year_before(facts: Facts, uses: Iterable[Use]) -> list[Use]:
    """The same uses, each with what the year before used where that is known."""
    known = _known(facts)
    return [_beside(use, known.get((use.form, use.line, use.strength))) for use in uses]


def differences(uses: Iterable[Use]) -> list[str]:
    """The five biggest differences from the year before, in words, the biggest first.

    The biggest is the one that grew or shrank most for its size; ties by name. Only what
    comes in bottles is told: what is made of it would say the same again.
    """
    row = [use for use in uses if use.before and use.form == BOUGHT and use.amount != use.before]
    row.sort(key=lambda use: (-_ratio(use.amount, use.before or 1), use.line))
    return [_in_words(use) for use in row[:MOST_TOLD]]


def _known(facts: Facts) -> dict[_Key, _Former]:
    if facts.year_before is None:
        return {}
    first, last = facts.year_before
    held = [b for b in facts.former_bookings if b.firmness is not Firmness.DROPPED]
    booked = {(use.form, use.line, use.strength): use for use in usage(facts, explode(facts, held))}
    known = {key: _Former(use.amount, use.groups, BOOKINGS) for key, use in booked.items()}
    for former in facts.former:
        line = facts.lines.get(former.line)
        key = (BOUGHT, former.line, line.strength_text if line else "")
        if key not in known:
            known[key] = _Former(former.amount, former.groups, TABLE)
    drawn: dict[str, int] = {}
    for draw in facts.drawn:
        if first <= draw.on <= last:
            drawn[draw.line] = drawn.get(draw.line, 0) + draw.amount
    for line_key, amount in drawn.items():
        key = (BOUGHT, line_key, facts.lines[line_key].strength_text)
        # a line made here is drawn from too, and its solution is not what was bought
        if line_key not in facts.methods:
            groups = known[key].groups if key in known else None
            known[key] = _Former(amount, groups, ENTRIES)
    return known


def _beside(use: Use, former: _Former | None) -> Use:
    if former is None:
        return use
    return replace(use, before=former.amount, groups_before=former.groups, basis=former.basis)


def _ratio(now: int, before: int) -> float:
    """How many times the smaller goes into the larger, of what is above nothing."""
    low, high = sorted((max(1, now), max(1, before)))
    return high / low


def _in_words(use: Use) -> str:
    before = use.before or 0
    words = (
        f"{use.line}: {_said(use.amount, use.kind)}, {_said(before, use.kind)} the year before, "
        f"{_change(use.amount, before)}"
    )
    if not use.groups or not use.groups_before:
        return words
    now, then = use.amount / use.groups, before / use.groups_before
    return (
        f"{words}; by the group {_said(now, use.kind)} ({use.groups}) and "
        f"{_said(then, use.kind)} ({use.groups_before}), {_change(now, then)}"
    )


def _said(micro: float, kind: Kind) -> str:
    # three figures: nobody compares years by the milligram
    return say(_three_figures(micro), kind)


def _three_figures(micro: float) -> int:
    whole = round(micro)
    over = max(0, len(str(abs(whole))) - 3)
    return round(whole, -over)


def _change(now: float, before: float) -> str:
    percent = round(100 * (now - before) / before)
    if percent == 0:
        return "about the same"
    return f"{abs(percent)} % {'more' if percent > 0 else 'less'}"
