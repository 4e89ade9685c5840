"""Bench sum: what to weigh for a volume of solution, whether it can be, and how good it is.

`bench_task.py` works the amount out, `bench_tools.py` knows what there is to weigh and
measure with, `bench_good.py` says how good the result is, and `bench_steps.py` puts
into words the steps that do what the balance or the pipette cannot do at once.
"""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.chemistry.steps import STRONGEST, Step, design
from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Form
from stockroom.service.bench import Named, Sum, cm3, grams
from stockroom.service.bench_cautions import cautions_of
from stockroom.service.bench_good import how_good, vessel_for
from stockroom.service.bench_measuring import (
    NO_WAY,
    NOTHING_TO_MEASURE_WITH,
    as_asked,
    measured,
    measures,
    rows,
    too_little,
)
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
from stockroom.service.bench_weigh_mass import weigh_into
from stockroom.settings import StoreAt

Told = tuple[tuple[str, ...], tuple[tuple[Named, ...], ...]]
"""What there is to say, and the ways as amounts."""


def weigh(asked: Asked, *, store: StoreAt | None = None, as_at: date | None = None) -> Sum:
    """The g to weigh of a form for a volume of a strength; of a neat liquid the cm³ as well.

    An amount too small for the closeness brings the ways to make it all the same, with
    the balances and glass of the house that are in on the day. A mass to make, "500 g",
    is answered by mass, with the water.
    Raises: BadInput, UnknownName, MissingFigure; NotAllowed for what is kept as a
    solution or would not dissolve.
    """
    lines = house_lines(store)
    tools = tools_on(store, as_at, step=asked.step, minimum=asked.minimum)
    if asked.volume.kind is Kind.MASS:
        return _with_cautions(*weigh_into(asked, lines, tools))
    task = task_of(asked, lines)
    # looked up first: a flask that is none is refused whether it is needed or not
    vessel, in_what = vessel_for(task.cubic, asked.flask, tools)
    ways: tuple[tuple[Named, ...], ...] = ()
    if _at_once(task, tools):
        steps = (Step(task.mass, task.cubic, tools.finest, vessel),) if task.mass else ()
        good = how_good(task, steps) if tools.finest and not task.liquid else ()
        told = (*good, *in_what, *_weighing(task, tools))
        if task.poured is not None:
            little, ways = measured(task.poured, task.cubic, asked.closeness, tools)
            told = (*told, *little)
    else:
        told, ways = _in_steps(task, tools)
    value, unit = (task.mass, "g") if task.mass is not None else (task.poured or 0.0, "cm3")
    found = Sum(_answer(task), value, unit, (*task.used, *told), tools.practice, ways=ways)
    return _with_cautions(replace(found, amounts=_amounts(task)), task)


def _with_cautions(found: Sum, task: Task) -> Sum:
    solid = not task.liquid
    # what is bought as a liquid is as strong as it is sold
    strong = task.stuff.form is Form.LIQUID or bool(task.stuff.pure_density)
    to_mark = task.asked.volume.kind is not Kind.MASS
    told = cautions_of(task.stuff, solid=solid, strong=lambda: strong, to_mark=to_mark)
    return replace(found, cautions=told)


def _amounts(task: Task) -> tuple[Named, ...]:
    by_mass = (Named(task.stuff.name, task.mass, "g"),) if task.mass is not None else ()
    by_volume = (Named(task.stuff.name, task.poured, "cm3"),) if task.poured is not None else ()
    return (*by_mass, *by_volume, Named("made up to", task.cubic, "cm3"))


def _answer(task: Task) -> str:
    by_mass = grams(task.mass) if task.mass is not None else ""
    by_volume = cm3(task.poured) if task.poured is not None else ""
    amount = ", or ".join(each for each in (by_mass, by_volume) if each)
    label = f" {task.stuff.strength_text}" if task.liquid and task.stuff.strength_text else ""
    return f"{amount} of {task.stuff.name}{label}, made up to {cm3(task.cubic)}"


def _at_once(task: Task, tools: Tools) -> bool:
    """Can it be weighed as it is? With nothing known to weigh or measure by, yes."""
    if task.liquid:
        return not measures(tools)
    return tools.finest is None or weighable(task.mass or 0.0, tools.finest, task.asked.closeness)


def _in_steps(task: Task, tools: Tools) -> Told:
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
    if task.liquid and ways and as_asked(ways[0], task.cubic):
        return (measurable_words(ways[0]), *how_good(task, ways[0].steps)), rows(ways[:1])
    why = _weighing(task, tools) or (too_little(amount, task.cubic, closeness),)
    good = how_good(task, ways[0].steps) if ways else ()
    return (*why, *(offers(ways) or (NO_WAY,)), *good, *_left_out(tools)), rows(ways)


def _weighing(task: Task, tools: Tools) -> tuple[str, ...]:
    """What the balance of the day makes of the mass, or why there is none."""
    minimum = task.asked.minimum
    if task.liquid or task.mass is None:
        return () if measures(tools) or not tools.bench.glassware else (NOTHING_TO_MEASURE_WITH,)
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
    nothing = () if measures(tools) else (NOTHING_TO_MEASURE_WITH,)
    return (*nothing, *tools.glass_away, *tools.unknown)
