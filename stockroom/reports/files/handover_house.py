"""The house as a successor has to know it: places, rules with their reasons, recipes, buying."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.keeping.rule_words import rule_in_words
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Line, Recipe
from stockroom.reports.files.handover_parts import Beside, Change, Part, Point
from stockroom.reports.files.handover_week import destroyed
from stockroom.reports.words import counted, day_heading, listed, money, raised

NOT_WRITTEN = "not written down"
_NOT_RULES = ("name", "practice", "practice_day")


def places(known: Facts) -> Part:
    """Where things stand, how warm, and what stands there."""
    stood: dict[str, list[str]] = {}
    for bottle in known.bottles:
        stood.setdefault(bottle.place, []).append(bottle.number)
    points = []
    for place in known.places:
        warm = "temperature not written"
        if place.temperature_c is not None:
            warm = f"{place.temperature_c:g} °C"
        meant = f"for {place.meant_for}; " if place.meant_for else ""
        numbers = stood.get(place.name, [])
        told = f"{counted(len(numbers), 'bottle')}: {listed(numbers)}" if numbers else "empty"
        points.append(Point(f"{place.name} {place.title}".strip(), (f"{meant}{warm}", told)))
    nowhere = stood.get("", [])
    if nowhere:
        points.append(Point("No place written", (listed(nowhere),)))
    intro = "Where bottles stand, and how warm it is there."
    return Part("Rooms and places", intro if points else "No place is written down.", tuple(points))


def rules(known: Facts, beside: Beside) -> Part:
    """The house's own choices, and every change with who, when and why."""
    settings = [
        f"{raised(name.replace('_', ' '))}: {value}"
        for name, value in beside.settings
        if name not in _NOT_RULES
    ]
    points = [Point("Settled for the whole house", ("; ".join(settings),))] if settings else []
    closed = [f"{first} to {last}: {why or NOT_WRITTEN}" for first, last, why in beside.closures]
    if closed:
        points.append(Point("Closed", tuple(closed)))
    own = [
        f"{raised(line.key)}: {rule_in_words(rule, line.unit)} ({rule.source or NOT_WRITTEN})"
        for line in known.lines.values()
        for rule in line.rules
        if rule.house
    ]
    if own:
        points.append(Point("Rules of the house in use", tuple(own)))
    points += [_change(each) for each in beside.changes]
    intro = "Every change of a rule or a table, oldest first: who, when and why."
    if not beside.changes:
        intro = "No rule or table was ever changed: all rules are those the house began with."
    return Part("House rules and their reasons", intro, tuple(points))


def _change(each: Change) -> Point:
    was, now = each.before or "not there", each.after or "withdrawn"
    told = (f"was {was}; now {now}", f"why: {each.why or NOT_WRITTEN}")
    return Point(raised(f"{each.on} {each.by}, {each.table}: {each.row}, {each.column}"), told)


def never(known: Facts, plan: Plan) -> Part:
    """What must never stand overnight, and what each class leaves to be destroyed or collected."""
    points = [
        Point(raised(line.key), (line.never_kept,))
        for line in known.lines.values()
        if line.never_kept
    ]
    points += [
        Point(day_heading(watch.on), (destroyed(watch),))
        for watch in plan.watch
        if not watch.ticked_by
    ]
    for one in _newest(known):
        told = [f"never kept: {one.never_kept}"] if one.never_kept else []
        told += [f"waste: {one.waste}"] if one.waste else []
        if told:
            points.append(Point(f"{one.code} {one.title}", tuple(told)))
    intro = (
        "What is never kept is mixed just before use and destroyed in its time: no test and no "
        "cold store extends it. What a class leaves is collected or treated as said here."
    )
    return Part("Never kept, and what must be destroyed", intro, tuple(points))


def recipes(known: Facts) -> Part:
    """Every recipe in its newest version: notes, handling, bars, swaps, the assessment."""
    points = tuple(
        Point(f"{one.code} {one.title}, version {one.version}", tuple(_recipe(one)))
        for one in _newest(known)
    )
    intro = (
        "What the cards do not say. The assessment is a pointer: the paper itself is yours to find."
    )
    return Part("Recipes", intro if points else "No recipe is written down.", points)


def _newest(known: Facts) -> Iterable[Recipe]:
    newest: dict[str, Recipe] = {}
    for (code, version), one in sorted(known.recipes.items()):
        if code not in newest or version > newest[code].version:
            newest[code] = one
    return newest.values()


def _recipe(one: Recipe) -> list[str]:
    told = [f"handling: {one.handling}"] if one.handling else []
    told += [f"never with {bar.substance}: {bar.reason}" for bar in one.bars]
    told += [
        f"in place of {swap.line}: {swap.instead}"
        + (f", × {swap.factor:g}" if swap.factor is not None else "")
        + (f" ({swap.note})" if swap.note else "")
        for swap in one.swaps
    ]
    told += [f"{each.line}: {each.note}" for each in one.requirements if each.note]
    told.append(f"assessment: {one.assessment or NOT_WRITTEN}")
    return [raised(text) for text in told]


def suppliers(known: Facts) -> Part:
    """What is bought: packs, prices, lead times, of whom, and whose leave is needed."""
    points = [
        Point(raised(line.key), tuple(_sold(line, known.house.default_lead)))
        for line in known.lines.values()
        if line.packs or line.ask_first
    ]
    lead = known.house.default_lead
    intro = f"Where no lead time is written, {counted(lead, 'open day')} are assumed."
    intro = intro if points else "No pack of anything is written down."
    return Part("Suppliers, packs and lead times", intro, tuple(points))


def _sold(line: Line, usual: int) -> list[str]:
    told = []
    for pack in line.packs:
        lead = counted(pack.lead, "open day") if pack.lead is not None else f"{usual} assumed"
        seller = pack.supplier or "supplier not entered"
        told.append(f"{pack.text}, {money(pack.pence)}, {lead}, {seller}")
    if line.ask_first:
        told.append(f"ask {line.ask_first} first: {counted(line.ask_days, 'open day')}")
    return told
