"""Small houses thrown together by a seed: the same seed, the same house, on every machine.

A house has one or two salts, an acid, a chain of solutions made from each other, from the
salt or with acid in them, up to four bottles of each in every state a bottle can be in,
and one to eight bookings within six weeks, some on closed days and some in the evening.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import date, timedelta
from random import Random
from typing import TypeVar

from houses import MONDAY, booking, cm3, day, days, g, house, pack, recipe, solid, solution, wants

from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Law, Origin, Purpose, Rule, RuleKind
from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import (
    Balance,
    Bar,
    Booking,
    Bottle,
    Closeness,
    Drawn,
    Facts,
    Firmness,
    Form,
    House,
    Ingredient,
    Line,
    Method,
    Per,
    Placed,
    Recipe,
    Requirement,
    Vessel,
)

T = TypeVar("T")
LAST = 42
STRENGTHS = {"stock": 1.0, "half": 0.5, "fifth": 0.2, "tenth": 0.1}
PACK = pack(g(100), 5, lead=8)
# the second is dearer and comes sooner, so that price and time pull apart
PACKS = ((), (PACK,), (PACK, replace(pack(g(25), 3, lead=3), text="25 g")))
CLOSED = (((day("01-15"), day("01-15")),), ((day("01-25"), day("01-29")),), ())
VESSELS = (
    Vessel("V1", cm3(1000), ((day("01-11"), day("01-15")),)),
    Vessel("V2", cm3(500), ((day("01-14"), day("02-03")),)),
    Vessel("V3", cm3(250)),
)


def random_house(seed: int) -> Facts:
    """The house of a seed."""
    luck = Random(seed)
    salt = solid(packs=luck.choice(PACKS), level=luck.choice([None, g(20)]))
    acid = _acid(luck)
    solutions = [_solution(luck, name) for name in STRENGTHS]
    methods = [m for m in _methods(luck, salt, acid, solutions) if luck.randrange(6)]
    recipes = [_recipe(luck, f"R{n}", [*solutions, salt]) for n in range(3)]
    bookings = [_booking(luck, n) for n in range(luck.randint(1, 8))]
    bottles = [
        bottle
        for line, most in ((salt, 2), (acid, 2), *((one, 4) for one in solutions))
        for bottle in _bottles(luck, line, most)
    ]
    vessels = luck.choice([(), (), VESSELS])
    return house(
        [salt, acid, *solutions], methods=methods, recipes=recipes, bookings=bookings,
        bottles=[_with_parent(luck, bottle, bottles) for bottle in bottles],
        house=_settled(luck, vessels), calendar=Calendar(luck.choice(CLOSED)),
        balances=luck.choice([(), (Balance("B1", 10_000),), (Balance("B1", 100_000),)]),
        drawn=tuple(_drawn(luck, bookings, recipes)), **_period(luck),
        placed=tuple(_placed(luck, [salt, acid])), usual=_usual(luck, solutions),
        vessels=vessels,
    )  # fmt: skip


def mixed(facts: Facts, seed: int) -> Facts:
    """The same house with the rows of every table in another order."""
    luck = Random(seed)
    return replace(
        facts,
        lines=dict(shuffled(luck, list(facts.lines.items()))),
        methods=dict(shuffled(luck, list(facts.methods.items()))),
        recipes=dict(shuffled(luck, list(facts.recipes.items()))),
        bookings=tuple(shuffled(luck, facts.bookings)),
        bottles=tuple(shuffled(luck, facts.bottles)),
        balances=tuple(shuffled(luck, facts.balances)),
        glassware=tuple(shuffled(luck, facts.glassware)),
        vessels=tuple(shuffled(luck, facts.vessels)),
        placed=tuple(shuffled(luck, facts.placed)),
        departments=tuple(shuffled(luck, facts.departments)),
        places=tuple(shuffled(luck, facts.places)),
    )


def shuffled(luck: Random, row: Sequence[T]) -> list[T]:
    """The same things in another order."""
    return luck.sample(row, len(row))


def _period(luck: Random) -> dict[str, date]:
    if luck.randrange(3):
        return {}
    start = MONDAY + timedelta(luck.randint(0, 20))
    return {"start": start, "end": start + timedelta(luck.randint(3, 20)), "horizon": day("03-26")}


def _settled(luck: Random, vessels: tuple[Vessel, ...]) -> House:
    return House(
        batch_step=luck.choice([cm3(1), cm3(50)]),
        finish_day_before=luck.random() < 0.8,
        largest_vessel=cm3(1000) if vessels else luck.choice([None, cm3(500), cm3(2000)]),
        margin_days=luck.choice([0, 2]),
    )


def _rules(luck: Random) -> tuple[Rule, ...]:
    kinds = (
        lambda: Rule(RuleKind.LIFE, days(luck.randint(1, 60)), luck.choice(list(Origin))),
        lambda: Rule(RuleKind.LIFE, days(luck.randint(3, 60)), safety=True),
        lambda: Rule(RuleKind.LIFE, days(luck.randint(3, 30)), purpose=Purpose.EXACT),
        lambda: Rule(RuleKind.RECHECK, days(luck.randint(5, 40))),
        lambda: Rule(RuleKind.LOOK, days(luck.randint(20, 60))),
        lambda: Rule(RuleKind.TEST, days(luck.randint(20, 60)), Origin.OPENED, safety=True),
        lambda: Rule(RuleKind.SAME_DAY),
        lambda: _fades(luck),
        lambda: _fades(luck),
    )
    return tuple(luck.choice(kinds)() for _ in range(luck.choice([0, 1, 1, 2])))


def _fades(luck: Random) -> Rule:
    law = Law(luck.choice([0, 1, 1, 2]), luck.uniform(0.0, 0.004))
    return Rule(RuleKind.FADES, origin=luck.choice([Origin.MADE, Origin.OPENED]), law=law)


def _acid(luck: Random) -> Line:
    return Line(
        "acid", "acid", "acid", Form.LIQUID, solution(1.0).kind, strength=10.0, unit="mol/dm3",
        strength_text="10 mol/dm3", packs=(pack(cm3(500), 7, lead=luck.choice([2, 15])),),
    )  # fmt: skip


def _solution(luck: Random, name: str) -> Line:
    return solution(
        STRENGTHS[name], name, rules=_rules(luck), substance=luck.choice(["salt", name]),
        never_kept="never kept: goes off" if luck.randrange(15) == 0 else "",
        largest_batch=luck.choice([None, None, cm3(1000)]),
        level=luck.choice([None, None, cm3(100)]),
    )  # fmt: skip


def _methods(luck: Random, salt: Line, acid: Line, lines: list[Line]) -> list[Method]:
    row = []
    for place, line in enumerate(lines):
        above = [one.key for one in lines[:place]]
        choices = luck.sample(above, min(len(above), luck.choice([0, 1, 2])))
        held_only = frozenset(key for key in choices if luck.randrange(2))
        parts = [Ingredient((*choices, salt.key), only_if_held=held_only)]
        if luck.randrange(4) == 0:
            parts.append(Ingredient((acid.key,), luck.choice([cm3(10), cm3(100)]), role="acid"))
        row.append(_method(luck, line, tuple(parts)))
    return row


def _method(luck: Random, line: Line, parts: tuple[Ingredient, ...]) -> Method:
    finish = luck.choice([0, 0, 0, 30])
    return Method(
        line.key, parts,
        minutes=luck.choice([0, 10, 45, 200]),
        finish_minutes=finish, titrated=bool(finish) and bool(luck.randrange(2)),
        stands_hours=luck.choice([0.0, 0.0, 0.5, 24.0, 48.0]),
        smallest_batch=luck.choice([0, 0, cm3(250)]),
    )  # fmt: skip


def _recipe(luck: Random, code: str, lines: list[Line]) -> Recipe:
    asked = luck.sample(lines, luck.randint(1, 3)) + luck.choices(lines, k=luck.choice([0, 0, 1]))
    bars = [Bar("acid", "spoils it")] if luck.randrange(5) == 0 else []
    bars += [Bar("stock", "another part")] if luck.randrange(6) == 0 else []
    return recipe(*(_wants(luck, line) for line in asked), code=code, bars=tuple(bars))


def _wants(luck: Random, line: Line) -> Requirement:
    amount = luck.randint(1, 30) * (g(1) if line.form is Form.SOLID else cm3(20))
    one = wants(
        line, amount, per=luck.choice([Per.CLASS, Per.GROUP]), spare=luck.random() < 0.8,
        closeness=luck.choice(list(Closeness)), fresh=luck.randrange(6) == 0,
        freshest_days=luck.choice([None, None, 2, 10]),
        tolerance=luck.choice([None, None, None, 0.01, 0.1]),
    )  # fmt: skip
    if one.closeness is Closeness.EXACT:
        one = replace(
            one, may_differ=luck.choice([None, 0.05]), found_within_days=luck.choice([None, 7])
        )
    return one


def _booking(luck: Random, number: int) -> Booking:
    on = MONDAY + timedelta(luck.randint(0, LAST))
    return booking(
        f"K{number}", on.isoformat(), luck.choice([485, 540, 660, 840, 1110]),
        recipe=f"R{luck.randrange(3)}", groups=luck.randint(1, 3),
        spare=luck.choice([0, 100, 125]), department=luck.choice(["CH", "BI"]),
        firmness=luck.choice([*[Firmness.FIRM] * 4, Firmness.PENCILLED, Firmness.DROPPED]),
    )  # fmt: skip


def _bottles(luck: Random, line: Line, most: int) -> list[Bottle]:
    return [_bottle(luck, line, number) for number in range(luck.randint(0, most))]


def _bottle(luck: Random, line: Line, number: int) -> Bottle:
    bought = line.form is not Form.SOLUTION or bool(luck.randrange(2))
    came = MONDAY - timedelta(luck.randint(0, 30))
    strength = line.strength
    factor = luck.choice([None, None, 0.9, 0.97, 1.0, 1.0, 1.03, 1.06])
    checks = []
    if factor and strength:
        found = MONDAY - timedelta(luck.randint(0, 20))
        spread = luck.choice([None, 0.001, 0.01])
        known = spread and strength * spread
        checks.append(Check(found, CheckKind.FOUND, True, strength * factor, known))
    state = luck.randrange(14)
    record = Record(
        received=came if bought and state != 1 else None,
        made=None if bought else came,
        opened=luck.choice([None, came]) if bought else None,
        nominal=strength, checks=tuple(checks),
        set_aside="cloudy" if state == 2 else "", not_found=state == 3,
    )  # fmt: skip
    left = luck.randint(0, 60) * (g(1) if line.form is Form.SOLID else cm3(20))
    letter = "".join(word[0] for word in line.key.split()[:1]).upper()
    return Bottle(
        f"{letter}{STRENGTHS.get(line.item, 0):g}-{number}".replace(".", ""), line.key, left, left,
        record, made_here=not bought,
        meant_for=("K1",) if luck.randrange(10) == 0 else (),
    )  # fmt: skip


def _with_parent(luck: Random, bottle: Bottle, all_of_them: list[Bottle]) -> Bottle:
    if not bottle.made_here or luck.randrange(3):
        return bottle
    others = [other.number for other in all_of_them if other.line != bottle.line]
    return replace(bottle, lineage=(luck.choice(others),)) if others else bottle


def _placed(luck: Random, lines: list[Line]) -> list[Placed]:
    """Orders on their way: some late, some that came in part, some given up."""
    row = []
    for number in range(luck.choice([0, 0, 1, 2])):
        line = luck.choice(lines)
        size = g(25) if line.form is Form.SOLID else cm3(500)
        expected = MONDAY + timedelta(luck.randint(-10, 30))
        row.append(
            Placed(
                f"P{number}", line.key, size, "pack", luck.randint(1, 3), 900,
                MONDAY - timedelta(20), expected, came=luck.choice([0, 0, size]),
                cancelled=MONDAY if luck.randrange(6) == 0 else None,
            )
        )  # fmt: skip
    return row


def _usual(luck: Random, lines: list[Line]) -> dict[str, tuple[date, ...]]:
    """The days some makes had in a plan kept before."""
    return {
        line.key: tuple(MONDAY + timedelta(luck.randint(0, LAST)) for _ in range(luck.randrange(3)))
        for line in luck.sample(lines, 2)
    }


def _drawn(luck: Random, bookings: list[Booking], recipes: list[Recipe]) -> list[Drawn]:
    lines = {one.code: [asked.line for asked in one.requirements] for one in recipes}
    return [
        Drawn(
            "X1", luck.choice(lines[one.recipe]), MONDAY, cm3(20 * luck.randint(1, 20)), one.number
        )
        for one in bookings
        if luck.randrange(8) == 0
    ]
