"""A stock line by name: what asks for it, what covers it, why there is a make, an order, a
check of it, or none.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.keeping.verdict import USABLE, Condition, verdict
from stockroom.measure.amounts import Kind
from stockroom.measure.reading import tidy
from stockroom.planning.amounts import say, say_left
from stockroom.planning.decisions import Answer, Make, Order, Outcome, Plan
from stockroom.planning.facts import Bottle, Facts, Form, Line
from stockroom.planning.whys.of_things import checks_of, coming_of, make_head, noted, order_rows


def by_name(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """A line by its whole key, or every line of an item or substance of that name."""
    name = _plain(wanted)
    exact = [line for line in facts.lines.values() if _plain(line.key) == name]
    called = [x for x in facts.lines.values() if name in (_plain(x.item), _plain(x.substance))]
    # "sodium chloride" is the key of a solid and the name of its solutions: all are told
    return _rows(facts, plan, called if len(called) > 1 else exact or called)


def by_part(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """Every line whose key holds these words."""
    name = _plain(wanted)
    found = [line for line in facts.lines.values() if name and name in _plain(line.key)]
    return _rows(facts, plan, found)


def _plain(text: str) -> str:
    return " ".join(tidy(text).casefold().replace(",", " ").split())


def _rows(facts: Facts, plan: Plan, lines: list[Line]) -> list[str]:
    if len(lines) == 1:
        return list(_one(facts, plan, lines[0]))
    # the busiest first, since the last are counted and not told
    row = sorted(lines, key=lambda line: (-_askers(plan, line), line.key))
    return [_briefly(facts, plan, line) for line in row]


def _askers(plan: Plan, line: Line) -> int:
    return len(_needs(plan, line)) + len(_takers(plan, line)) + bool(_orders(plan, line))


def _one(facts: Facts, plan: Plan, line: Line) -> Iterable[str]:
    yield _wanted(plan, line)
    ordered = _orders(plan, line)
    yield from order_rows(ordered[0])[:2] if ordered else ()
    yield from coming_of(plan, line.key)
    yield _held(facts, plan, line)
    yield _made(facts, plan, line)
    if not ordered:
        yield _no_order(facts, plan, line)
    yield _checked(facts, plan, line)
    yield from noted(plan, line.key)


def _wanted(plan: Plan, line: Line) -> str:
    needs, takers = _needs(plan, line), _takers(plan, line)
    asked = [f"{a.ref} {say(a.amount, a.kind)} {a.booking.on} ({a.outcome})" for a in needs]
    asked += [f"{make.id} {say(amount, kind)} {make.on}" for make, amount, kind in takers]
    if not asked:
        return f"{line.key}: nothing from {max(plan.start, plan.as_at)} to {plan.end} asks for it"
    return f"{line.key}: {', '.join(asked)}"


def _held(facts: Facts, plan: Plan, line: Line) -> str:
    row = [bottle for bottle in facts.bottles if bottle.line == line.key]
    if not row:
        return "on the shelf: no bottle of it"
    return f"on the shelf: {', '.join(_bottle(facts, plan, line, bottle) for bottle in row)}"


def _bottle(facts: Facts, plan: Plan, line: Line, bottle: Bottle) -> str:
    judged = verdict(bottle.record, line.rules, plan.as_at)
    promised = _promised(plan, bottle.number)
    words = f"{bottle.number} {say_left(bottle, line)}"
    if judged.condition not in USABLE:
        return f"{words} ({judged.condition})"
    until = f"until {judged.good_until}" if judged.good_until else ""
    if judged.condition is not Condition.SOUND:
        until = f"{judged.condition} since {judged.good_until}" if until else f"{judged.condition}"
    spoken = f"{say(promised, line.kind)} promised" if promised else ""
    told = ", ".join(filter(None, (until, spoken)))
    return f"{words} ({told})" if told else words


def _promised(plan: Plan, number: str) -> int:
    draws = [draw for answer in plan.needs for draw in answer.draws]
    draws += [source for make in plan.makes for source in make.sources]
    return sum(draw.amount for draw in draws if draw.bottle == number)


def _made(facts: Facts, plan: Plan, line: Line) -> str:
    making = [make for make in plan.makes if make.line == line.key]
    if len(making) == 1:
        return make_head(making[0])
    if making:
        return f"makes: {', '.join(f'{m.id} {say(m.volume, Kind.VOLUME)} {m.on}' for m in making)}"
    return f"no make: {_why_no_make(facts, plan, line)}"


def _why_no_make(facts: Facts, plan: Plan, line: Line) -> str:
    if line.key not in facts.methods:
        return "no method for it is written"
    lacking = _lacking(plan, line)
    if lacking:
        return lacking
    if not _needs(plan, line) and not _takers(plan, line):
        return "nothing asks for it"
    return f"{', '.join(_drawn_on(plan, line))} covers it" if _drawn_on(plan, line) else "covered"


def _no_order(facts: Facts, plan: Plan, line: Line) -> str:
    return f"no order: {_why_no_order(facts, plan, line)}"


def _why_no_order(facts: Facts, plan: Plan, line: Line) -> str:
    if line.form is Form.SUNDRY:
        return "it comes from a shop, not from a supplier"
    below = next((level for level in plan.levels if level.line == line.key), None)
    if below is not None:
        left, level = say(below.left, line.kind), say(below.level, line.kind)
        then = "it is made here" if line.key in facts.methods else "nothing draws on it"
        return f"{then}, though it falls to {left} on {below.on}, under its level of {level}"
    if line.key in facts.methods:
        return "it is made here"
    lacking = _lacking(plan, line)
    if lacking:
        return lacking
    return _enough(facts, plan, line)


def _enough(facts: Facts, plan: Plan, line: Line) -> str:
    good = [
        bottle
        for bottle in facts.bottles
        if bottle.line == line.key
        and verdict(bottle.record, line.rules, plan.as_at).condition in USABLE
    ]
    left = sum(bottle.left - _promised(plan, bottle.number) for bottle in good)
    level = f"its level is {say(line.level, line.kind)}" if line.level else "no level is set"
    if not _drawn_on(plan, line):
        return f"nothing draws on it, {say(max(0, left), line.kind)} stand there, {level}"
    return f"{say(max(0, left), line.kind)} are left when all is served, {level}"


def _lacking(plan: Plan, line: Line) -> str:
    """Why a need of it is short or refused; "" where none is."""
    bad = (Outcome.SHORT, Outcome.REFUSED)
    refs = {a.ref for a in _needs(plan, line) if a.outcome in bad}
    return next((f"{s.ref} is short: {s.reason}" for s in plan.short if s.ref in refs), "")


def _checked(facts: Facts, plan: Plan, line: Line) -> str:
    subjects = [bottle.number for bottle in facts.bottles if bottle.line == line.key]
    subjects += [make.id for make in plan.makes if make.line == line.key]
    rows = [row for subject in subjects for row in checks_of(plan, subject)]
    if rows:
        return "; ".join(rows)
    exact = [a.ref for a in _needs(plan, line) if a.closeness == "exact"]
    if exact:
        return f"no check: what {', '.join(exact)} leans on was found in time"
    return "no check: no exact need leans on it, and no recheck falls due before it is used"


def _briefly(facts: Facts, plan: Plan, line: Line) -> str:
    needs = _needs(plan, line)
    asked = [f"{a.ref} {say(a.amount, a.kind)} {a.outcome}" for a in needs]
    asked += [f"{make.id} {say(amount, kind)}" for make, amount, kind in _takers(plan, line)]
    held = [b.number for b in facts.bottles if b.line == line.key]
    coming = [m.id for m in plan.makes if m.line == line.key]
    coming += [f"{o.id} by {o.order_by}" for o in _orders(plan, line)]
    parts = [f"held in {', '.join(held)}" if held else "none held", *coming]
    return f"{line.key} ({'; '.join(parts)}): {', '.join(asked) or 'nothing asks for it'}"


def _needs(plan: Plan, line: Line) -> list[Answer]:
    return [answer for answer in plan.needs if answer.line == line.key]


def _takers(plan: Plan, line: Line) -> list[tuple[Make, int, Kind]]:
    return [
        (make, source.amount, source.kind)
        for make in plan.makes
        for source in make.sources
        if source.line == line.key
    ]


def _orders(plan: Plan, line: Line) -> list[Order]:
    return [order for order in plan.orders if order.line == line.key]


def _drawn_on(plan: Plan, line: Line) -> list[str]:
    draws = [draw for answer in plan.needs for draw in answer.draws if draw.line == line.key]
    draws += [draw for make in plan.makes for draw in make.sources if draw.line == line.key]
    names = [draw.bottle or draw.make for draw in draws]
    return [name for name in dict.fromkeys(names) if name]
