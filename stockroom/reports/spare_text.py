"""What classes drew beside what was planned, told: how much, how far apart, what would do."""

from __future__ import annotations

import math
from collections.abc import Sequence
from datetime import date
from typing import Any

from stockroom.measure.amounts import PER_UNIT, Amount
from stockroom.measure.formats import format_amount, format_number
from stockroom.planning.spare import FEWEST, LineSpare, RecipeSpare, Sitting
from stockroom.reports.sheet import PRACTICE, columns, foot, page, wrap
from stockroom.reports.words import TIED, day, listed, named

_NUMBERS = ("no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine")
_MOST = 50
"""No booking takes more spare than this: what asks for more is an amount to mend."""


def spare_text(
    found: Sequence[RecipeSpare], width: int, *, as_at: date, practice: bool = False
) -> str:
    """One part per recipe: the spare that would do, each line's draws, and how to change it."""
    top = f"Drawn for classes over as at {day(as_at)}, beside what was planned for them"
    parts = ["\n".join([PRACTICE] * practice + [wrap(top, width)])]
    parts += [_recipe(one, width) for one in found]
    return page([*parts, foot(width)])


def spare_json(
    found: Sequence[RecipeSpare], *, as_at: date, practice: bool = False
) -> dict[str, Any]:
    """The same as data: per cents of spare, amounts in g, cm³ or items, parts of the plain sum."""
    return {
        "as_at": as_at.isoformat(),
        "practice": practice,
        "recipes": [_recipe_json(one) for one in found],
    }


def in_words(line: LineSpare) -> str:
    """A line's draws in one sentence: "planned 528, used 455-470 cm³ in four classes: ..."."""
    return f"{_drew(line)}: {_verdict(line)}"


def _recipe(found: RecipeSpare, width: int) -> str:
    rows = [(named(x.item, x.strength), f"{in_words(x)} ({_now(x)} now)") for x in found.lines]
    silent = f"nothing drawn for a class of: {listed(found.silent)}" if found.silent else ""
    told = [advice(found), silent, *_how(found)]
    return "\n".join(
        [
            wrap(f"{found.code} {found.title}, {_classes(found.classes)}", width),
            *columns(rows, width),
            *(wrap(line, width, indent=2) for line in told if line),
        ]
    )


def _classes(many: int) -> str:
    number = _NUMBERS[many] if many < len(_NUMBERS) else str(many)
    return f"{number} class" if many == 1 else f"{number} classes"


def _drew(line: LineSpare) -> str:
    low, high, unit, per = _range(line, [one.used for one in line.sittings])
    planned_low, planned_high, _, _ = _range(line, [one.planned for one in line.sittings])
    planned, used = _from_to(planned_low, planned_high), _from_to(low, high)
    return f"planned {planned}, used {used}{unit}{per} in {_classes(len(line.sittings))}"


def _range(line: LineSpare, amounts: list[int]) -> tuple[float, float, str, str]:
    """The least and the most, in a unit in which classes of different sizes compare."""
    plains = {one.plain for one in line.sittings}
    unit = f"{TIED}{_unit(line)}"
    if len(plains) == 1:
        row = [amount / PER_UNIT[line.kind] for amount in amounts]
        return min(row), max(row), unit, ""
    if line.per_group:
        pairs = zip(amounts, line.sittings, strict=True)
        row = [amount / PER_UNIT[line.kind] / one.groups for amount, one in pairs]
        return min(row), max(row), unit, " a group"
    row = [100 * amount / one.plain for amount, one in zip(amounts, line.sittings, strict=True)]
    return min(row), max(row), f"{TIED}%", " of the sum before spare"


def _unit(line: LineSpare) -> str:
    # as an amount is written, without its number
    return format_amount(Amount(line.kind, 2 * PER_UNIT[line.kind])).split(" ", 1)[1]


def _from_to(low: float, high: float) -> str:
    one, other = format_number(low, 4), format_number(high, 4)
    return one if one == other else f"{one}-{other}"


def _now(line: LineSpare) -> str:
    spares = {round(100 * (one.planned / one.plain - 1)) for one in line.sittings}
    return f"{_from_to(min(spares), max(spares))}{TIED}%"


def _verdict(line: LineSpare) -> str:
    if line.would_do is None:
        return f"too few to tell, {FEWEST} classes are needed" + _over(line)
    if not line.carries:
        return "a stand-by, which carries no spare" + _over(line)
    if line.would_do > _MOST:
        return f"over {_MOST}{TIED}% would be needed: mend the amount in the recipe" + _over(line)
    less = math.floor(100 * (1 - (line.limit or 1.0)))
    below = f", and {less}{TIED}% less than the sum before spare" if less > 0 else ""
    same = "; all drew just the plan, so what they used is not known" if line.as_planned else ""
    return f"{line.would_do}{TIED}% would do{below}{same}" + _over(line)


def _over(line: LineSpare) -> str:
    if not line.overdrawn:
        return ""
    row = [f"{one.booking} {_amount(line, one.used)}" for one in line.overdrawn]
    return f"; more than planned was drawn for {listed(row)}"


def _amount(line: LineSpare, micro: int) -> str:
    return format_amount(Amount(line.kind, micro)).replace(" ", TIED)


def advice(found: RecipeSpare) -> str:
    """What spare would do for the whole recipe, or why none can be told, in one sentence."""
    if found.would_do is None or found.decides is None:
        return f"No spare can be told yet: {FEWEST} classes of a line are needed."
    now = _from_to(min(found.now), max(found.now))
    unsure = [line.item for line in found.lines if line.would_do is None]
    but = f"; not known for {listed(unsure)}" if unsure else ""
    decides = named(found.decides.item, found.decides.strength)
    if found.would_do > _MOST:
        return f"{decides} was drawn for more than any spare covers: see to its amount first{but}."
    if all(found.would_do == spare for spare in found.now):
        return f"{now}{TIED}% spare, as now, is what it needs ({decides} decides){but}."
    return (
        f"{found.would_do}{TIED}% spare would do for the whole recipe, {now}{TIED}% now "
        f"({decides} decides; enough for the next class 19 times in 20){but}."
    )


def _how(found: RecipeSpare) -> list[str]:
    """How to change it: spare is given with each booking, and nothing here changes one."""
    if found.would_do is None or found.would_do > _MOST:
        return []
    if all(found.would_do == spare for spare in found.now) and not found.ahead:
        return []
    command = (
        f"stockroom book {found.code} --on DATE --at TIME --groups NUMBER --dept CODE "
        f"--spare {found.would_do}"
    )
    told = [f"To use it, give it with the next booking: {command.replace(' ', TIED)}"]
    booked = [f"{number} ({spare:g}{TIED}%)" for number, spare in found.ahead]
    return told + ([f"Booked already, and left as they are: {listed(booked)}"] if booked else [])


def _recipe_json(found: RecipeSpare) -> dict[str, Any]:
    return {
        "recipe": found.code,
        "title": found.title,
        "classes": found.classes,
        "spare_now": list(found.now),
        "would_do": found.would_do,
        "decides": found.decides.line if found.decides else None,
        "ahead": [{"booking": number, "spare": spare} for number, spare in found.ahead],
        "nothing_drawn_of": list(found.silent),
        "lines": [_line_json(line) for line in found.lines],
    }


def _line_json(line: LineSpare) -> dict[str, Any]:
    return {
        "item": line.item,
        "line": line.line,
        "unit": str(_unit(line)).replace("cm³", "cm3"),
        "classes": [_sitting_json(line, one) for one in line.sittings],
        "mean_part": line.mean,
        "spread": line.spread,
        "limit_part": line.limit,
        "carries_spare": line.carries,
        "would_do": line.would_do,
        "text": in_words(line).replace(TIED, " "),
    }


def _sitting_json(line: LineSpare, one: Sitting) -> dict[str, Any]:
    per = PER_UNIT[line.kind]
    return {
        "booking": one.booking,
        "on": one.on.isoformat(),
        "groups": one.groups,
        "planned": one.planned / per,
        "before_spare": one.plain / per,
        "used": one.used / per,
    }
