"""A house with something of everything, its plan, and ways to spoil that plan one place at a time.

Its bottles called X are all unfit, each in its own way: the plan is made without them, and
a test may make it draw on one.
"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from houses import (
    answer,
    booking,
    bought_bottle,
    cm3,
    day,
    days,
    found,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    pack,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.strength import strengths_on
from stockroom.planning.decisions import Draw, Make, Outcome, Plan
from stockroom.planning.facts import Bar, Closeness, Facts, Ingredient
from stockroom.planning.plan import plan

SALT = solid(packs=(pack(g(500), 10.00),))
RARE = solid("rare salt", packs=(pack(g(25), 9.00, lead=5),))
IRON = solid("iron")
DYE = solution(0.01, "dye")
STOCK = solution(1.0, "stock", rules=(keeps(60),))
TENTH = solution(
    0.1,
    "tenth",
    rules=(keeps(40), Rule(RuleKind.FADES, law=Law(1, 0.002))),
    largest_batch=cm3(2000),
)
CHECKED = solution(0.05, "checked", rules=(Rule(RuleKind.RECHECK, days(28)),))
FOAM = solution(0.2, "foam", never_kept="it gives off gas")
ETHER = solution(None, "ether", rules=(Rule(RuleKind.TEST, days(90), Origin.OPENED, safety=True),))
LINES = [SALT, RARE, IRON, DYE, STOCK, TENTH, CHECKED, FOAM, ETHER]
METHODS = [
    made_from(STOCK, SALT, minutes=30, stands_hours=24.0),
    made_from(TENTH, Ingredient((STOCK.key, SALT.key))),
    made_from(FOAM, STOCK),
    made_from(CHECKED, RARE, finish_minutes=20, stands_hours=2.0),
]
EXACT: dict[str, Any] = {"closeness": Closeness.EXACT}
RECIPES = [
    recipe(wants(TENTH, cm3(500), freshest_days=20), wants(ETHER, cm3(50)), code="R01"),
    recipe(wants(CHECKED, cm3(200), **EXACT), wants(FOAM, cm3(100)), code="R02"),
    recipe(wants(RARE, g(20)), wants(DYE, cm3(10)), code="R03"),
    recipe(wants(TENTH, cm3(400)), code="R04", bars=(Bar("iron", "it spoils the colour"),)),
]
BOOKINGS = [
    booking("K1", "01-12", recipe="R01"),
    booking("K2", "01-15", recipe="R02"),
    booking("K3", "01-27", recipe="R03"),
    booking("K4", "02-02", recipe="R04"),
    booking("K5", "02-11", recipe="R02"),
]
FULL = cm3(1000)
BOTTLES = [
    bought_bottle("B1", SALT, g(500), opened=day("01-04")),
    bought_bottle("B3", RARE, g(12), opened=day("01-04")),
    made_bottle("S1", CHECKED, cm3(230), checks=(found("01-04", 0.0500),)),
    made_bottle("S2", TENTH, cm3(320)),
    made_bottle("S3", TENTH, cm3(230)),
    bought_bottle("E1", ETHER, cm3(100), "2026-12-01", opened=day("2026-12-01")),
]
UNSURE = replace(found("01-04", 0.0500), uncertainty=0.001)
# none of these will do, each in its own way; the plan is made without them
UNFIT = [
    bought_bottle("X-ore", IRON, FULL),
    made_bottle("X-aside", TENTH, FULL, set_aside="cloudy"),
    replace(made_bottle("X-undated", TENTH, FULL), record=Record(nominal=0.1)),
    made_bottle("X-past", TENTH, FULL, "2026-11-01"),
    made_bottle("X-weak", TENTH, FULL, checks=(found("01-04", 0.09),)),
    made_bottle("X-strong", TENTH, FULL, checks=(found("01-04", 0.12),)),
    made_bottle("X-other", TENTH, FULL, checks=(found("01-04", 0.101),)),
    made_bottle("X-standing", STOCK, FULL, "01-15"),
    made_bottle("X-old", TENTH, FULL, "2026-12-20"),
    made_bottle("X-foam", FOAM, FULL, "01-15"),
    made_bottle("X-vague", CHECKED, FULL, "2026-12-01", checks=(found("2026-12-01", 0.0500),)),
    made_bottle("X-unsure", CHECKED, FULL, checks=(UNSURE,)),
    replace(made_bottle("X-iron", TENTH, FULL, "01-20"), lineage=("X-ore",)),
    bought_bottle("X-ether", ETHER, FULL, "2026-06-01", opened=day("2026-06-01")),
]  # fmt: skip
GOOD = house(LINES, methods=METHODS, recipes=RECIPES, bookings=BOOKINGS, bottles=BOTTLES)
PLAN = plan(GOOD)
FACTS = replace(GOOD, bottles=(*BOTTLES, *UNFIT))


def need(which: str, /, **other: Any) -> Plan:
    """The good plan with one answer otherwise."""
    row = (replace(a, **other) if a.ref == which else a for a in PLAN.needs)
    return replace(PLAN, needs=tuple(row))


def make(which: str, /, **other: Any) -> Plan:
    """The good plan with the first make of a line otherwise."""
    number = first_of(which).id
    row = (replace(m, **other) if m.id == number else m for m in PLAN.makes)
    return replace(PLAN, makes=tuple(row))


def first_of(line: str) -> Make:
    return next(made for made in PLAN.makes if made.item == line)


def drawn(ref: str, *shares: tuple[str, float], told: float | None = None) -> Plan:
    """The good plan with a need drawn from other bottles, so many cm³ of each, as they are."""
    bottles = {bottle.number: bottle for bottle in FACTS.bottles}
    draws = []
    for number, volume in shares:
        bottle = bottles[number]
        line, on = FACTS.lines[bottle.line], answer(PLAN, ref).booking.on
        strength = strengths_on(bottle.record, line.rules, on).expected
        draws.append(
            Draw(cm3(volume), line.kind, bottle=number, line=line.key, strength=told or strength)
        )
    return need(ref, outcome=Outcome.HAVE, draws=tuple(draws), make="", order="")


def sources(which: str, /, **other: Any) -> Plan:
    """The good plan with the one source of a make otherwise."""
    (source,) = first_of(which).sources
    return make(which, sources=(replace(source, **other),))


def order(**other: Any) -> Plan:
    (one,) = PLAN.orders
    return replace(PLAN, orders=(replace(one, **other),))


def check(**other: Any) -> Plan:
    (one,) = PLAN.checks
    return replace(PLAN, checks=(replace(one, **other),))


def short(**other: Any) -> Plan:
    (one,) = PLAN.short
    return replace(PLAN, short=(replace(one, **other),))


def stock_for(number: str) -> Plan:
    """The good plan with its first foam made from a bottle of stock in place of the make."""
    draw = Draw(cm3(20), STOCK.kind, bottle=number, line=STOCK.key, strength=1.0)
    return make("foam", sources=(draw,))


def with_method(item: str, **other: Any) -> Facts:
    """The same house, where something is made in another way."""
    line = first_of(item).line
    return replace(FACTS, methods=FACTS.methods | {line: replace(FACTS.methods[line], **other)})


def with_bottle(number: str, **other: Any) -> Facts:
    """The same house, where something else is written of a bottle."""
    row = (
        replace(b, record=replace(b.record, **other)) if b.number == number else b
        for b in FACTS.bottles
    )
    return replace(FACTS, bottles=tuple(row))


def with_line(**other: Any) -> Facts:
    """The same house, where something else is written of the salt that is to be bought."""
    return replace(FACTS, lines=FACTS.lines | {RARE.key: replace(RARE, **other)})


def with_pack(**other: Any) -> Facts:
    """The same house, where that salt is sold otherwise."""
    return with_line(packs=tuple(replace(one, **other) for one in RARE.packs))


def at_noon(number: str, on: str) -> Facts:
    """The same house, where a booking is on another day, at noon."""
    row = (
        replace(one, on=day(on), minute=720) if one.number == number else one
        for one in FACTS.bookings
    )
    return replace(FACTS, bookings=tuple(row))
