"""Bench sum: what to weigh for a volume of solution, whether it can be, and how good it is.

`bench_task.py` works the amount out, `bench_tools.py` knows what there is to weigh and
measure with, `bench_good.py` says how good the result is, and `bench_steps.py` puts
into words the steps that do what the balance or the pipette cannot do at once.
"""

from __future__ import annotations

from datetime import date
from pathlib import Path

from stockroom.chemistry.steps import STRONGEST, Design, Step, design
from stockroom.safety.cautions import HOUSE_LINE
from stockroom.service.bench import Sum, caution_of, cm3, grams
from stockroom.service.bench_good import how_good, vessel_for
from stockroom.service.bench_names import house_lines
from stockroom.service.bench_steps import (
    measurable_words,
    offers,
    usp_words,
    weighable,
    weighable_words,
)
from stockroom.service.bench_task import Asked, Task, task_of
from stockroom.service.bench_tools import Tools, tools_on


def weigh(asked: Asked, *, store: Path | None = None, as_at: date | None = None) -> Sum:
    """The g to weigh of a form for a volume of a strength; of a neat liquid the cm³ as well.

    An amount too small for the closeness brings the ways to make it all the same, with
    the balances and glass of the house that are in on the day.
    Raises: BadInput, UnknownName, MissingFigure; NotAllowed for what is kept as a
    solution or would not dissolve.
    """
    task = task_of(asked, house_lines(store))
    tools = tools_on(store, as_at, step=asked.step, minimum=asked.minimum)
    # looked up first: a flask that is none is refused whether it is needed or not
    vessel, in_what = vessel_for(task.cubic, asked.flask, tools)
    if _at_once(task, tools):
        steps = (Step(task.mass, task.cubic, tools.finest, vessel),) if task.mass else ()
        good = how_good(task, steps) if tools.finest and not task.liquid else ()
        told = (*good, *in_what, *_weighing(task, tools))
    else:
        told = _in_steps(task, tools)
    caution = caution_of(task.stuff)
    details = (*caution, *task.used, *told, *((HOUSE_LINE,) if caution else ()))
    value, unit = (task.mass, "g") if task.mass is not None else (task.poured or 0.0, "cm3")
    return Sum(_answer(task), value, unit, details, tools.practice)


def _answer(task: Task) -> str:
    by_mass = grams(task.mass) if task.mass is not None else ""
    by_volume = cm3(task.poured) if task.poured is not None else ""
    amount = ", or ".join(each for each in (by_mass, by_volume) if each)
    label = f" {task.stuff.strength_text}" if task.liquid and task.stuff.strength_text else ""
    return f"{amount} of {task.stuff.name}{label}, made up to {cm3(task.cubic)}"


def _at_once(task: Task, tools: Tools) -> bool:
    """Can it be weighed as it is? With nothing known to weigh or measure by, yes."""
    if task.liquid:
        return not tools.bench.glassware
    return tools.finest is None or weighable(task.mass or 0.0, tools.finest, task.asked.closeness)


def _in_steps(task: Task, tools: Tools) -> tuple[str, ...]:
    """The ways there are, the best first, and how good that is."""
    amount = task.poured if task.poured is not None else task.mass or 0.0
    closeness = task.asked.closeness
    ways = design(
        amount,
        task.cubic,
        closeness=closeness,
        bench=tools.bench,
        liquid=task.liquid,
        strongest=task.strongest or STRONGEST,
    )
    if task.liquid and ways and _as_asked(ways[0], task):
        return (measurable_words(ways[0]), *how_good(task, ways[0].steps))
    why = _weighing(task, tools) or (_too_little(task),)
    good = how_good(task, ways[0].steps) if ways else ()
    return (*why, *(offers(ways) or (_NO_WAY,)), *good, *_left_out(tools))


_NO_WAY = "no way found in four steps with what is there: make more, or ask for less closeness"


def _as_asked(found: Design, task: Task) -> bool:
    # to the nearest mark: what is asked for, in a vessel of that very volume
    return len(found.steps) == 1 and abs(found.steps[0].volume / task.cubic - 1) < 1e-6


def _too_little(task: Task) -> str:
    closeness = f"±{task.asked.closeness_percent:g} %"
    return f"{cm3(task.poured or 0.0)} cannot be measured to {closeness} into {cm3(task.cubic)}"


def _weighing(task: Task, tools: Tools) -> tuple[str, ...]:
    """What the balance of the day makes of the mass, or why there is none."""
    minimum = task.asked.minimum
    if task.liquid or task.mass is None:
        return ()
    if tools.finest is None:
        alone = minimum.least(0.0) if minimum.repeatability else 0.0
        least = f"; by USP <41> the least to weigh is {grams(alone)}" if alone else ""
        return (f"{tools.note}{least}", *tools.away)
    enough = weighable(task.mass, tools.finest, task.asked.closeness)
    words = weighable_words(task.mass, tools.finest, task.asked.closeness)
    rule = (usp_words(tools.finest, minimum.repeatability),) if minimum.rule else ()
    return (words, *rule, *(() if enough else tools.away))


def _left_out(tools: Tools) -> tuple[str, ...]:
    """What the designs could not count on."""
    if not tools.bench.glassware:
        return ("no glassware entered: volumes count as exact",)
    return (*tools.glass_away, *tools.unknown)
