"""The facts on the safe side: every strength at its lower one-sided 95 % limit, where there is one.

The planner then plans as always: it asks what a bottle is expected to hold and is told
less. What is too strong is still judged by what is usually expected.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import replace
from datetime import date

from stockroom.keeping.caution import Basis, LowerLimits
from stockroom.keeping.record import Record
from stockroom.keeping.safe_side import SafeSide, Witness, safe_side
from stockroom.planning.facts import Bottle, Facts, Form, Line
from stockroom.planning.numbers import natural


def with_caution(
    facts: Facts, every: Iterable[Bottle], topped_up: Mapping[str, date] | None = None
) -> Facts:
    """The same facts with a caution on each bottle and line that has something to go by.

    `every` is every bottle there ever was, gone ones too: their checks teach. `topped_up`
    is the last day each was, by number.
    """
    taught, held = witnesses(every, topped_up or {}), _by_line(facts.bottles)
    sides = {
        key: _side(line, held.get(key, {}), taught.get(key, []), facts.as_at)
        for key, line in facts.lines.items()
    }
    bottles = tuple(_doubted(bottle, sides[bottle.line]) for bottle in facts.bottles)
    lines = {key: replace(line, caution=sides[key].fresh) for key, line in facts.lines.items()}
    counted = [bottle for bottle in bottles if bottle.left and has_strength(lines[bottle.line])]
    return replace(facts, bottles=bottles, lines=lines, lower_limits=_counts(counted))


def witnesses(bottles: Iterable[Bottle], topped_up: Mapping[str, date]) -> dict[str, list[Witness]]:
    """Whose checks teach, by line: all but what is set aside, since that fades in its own way."""
    found: dict[str, list[Witness]] = {}
    # of two that fall out on one day the first is named, and the rows must not choose it
    for bottle in sorted(bottles, key=lambda bottle: natural(bottle.number)):
        if not bottle.record.set_aside:
            # what was found before it was poured off taught by the bottle it came from
            own = replace(bottle.record, checks=bottle.record.checks[bottle.inherited :])
            witness = Witness(bottle.number, own, topped_up.get(bottle.number))
            found.setdefault(bottle.line, []).append(witness)
    return found


def has_strength(line: Line) -> bool:
    """True for a line whose strength can be found: a solution or a liquid that has one."""
    return line.strength is not None and line.form is not Form.SOLID


def _by_line(bottles: Iterable[Bottle]) -> dict[str, dict[str, Record]]:
    found: dict[str, dict[str, Record]] = {}
    for bottle in bottles:
        found.setdefault(bottle.line, {})[bottle.number] = bottle.record
    return found


def _side(line: Line, held: dict[str, Record], taught: list[Witness], as_at: date) -> SafeSide:
    return safe_side(line.rules, held, taught, as_at) if has_strength(line) else SafeSide({})


def _doubted(bottle: Bottle, side: SafeSide) -> Bottle:
    caution = side.bottles.get(bottle.number)
    return replace(bottle, record=replace(bottle.record, caution=caution)) if caution else bottle


def _counts(bottles: Iterable[Bottle]) -> LowerLimits:
    bases = Counter(b.record.caution.basis if b.record.caution else None for b in bottles)
    return LowerLimits(bases[Basis.OWN], bases[Basis.LINE], bases[Basis.DOUBT], bases[None])
