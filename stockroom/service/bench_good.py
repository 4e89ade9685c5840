"""How good a weighed solution is, in words: its uncertainty, and what it is made up in."""

from __future__ import annotations

import math
from collections.abc import Sequence
from contextlib import suppress

from stockroom.chemistry.atomic_weights import molar_mass_doubt
from stockroom.chemistry.glassware import ISO_CYLINDERS, GlassKind, Ware, ware
from stockroom.chemistry.made import by_what, made
from stockroom.chemistry.steps import Step
from stockroom.chemistry.uncertainty import Budget, Doubt, Input, exact_enough, with_spread
from stockroom.errors import BadAmount, BadInput, MissingFigure
from stockroom.measure.formats import format_number
from stockroom.measure.strengths import StrengthUnit
from stockroom.service.bench import cm3
from stockroom.service.bench_counted import as_written
from stockroom.service.bench_steps import per_cent
from stockroom.service.bench_task import Task
from stockroom.service.bench_tools import Tools

_UNKNOWN_FORMULA = 1.2e-4
"""The share of a molar mass it may be off by where only the number is known.

The widest of the common salts by the limits of `atomic_weights.py`.
"""

_TOLD = 3  # shares of a budget that are printed: the rest is small beside them
_NO_NUMBER = frozenset({StrengthUnit.SATURATED, StrengthUnit.PARTS})


def how_good(task: Task, steps: Sequence[Step]) -> tuple[str, ...]:
    """The strength with its uncertainty, what most of it comes from, and whether it is exact.

    Nothing where no instrument is known that could be off.
    """
    how = by_what(steps)
    if not how or task.strength.unit in _NO_NUMBER:
        return ()
    value, unit = as_written(_as_made(task, steps), task.strength, task.stuff)
    budget, closeness = made(value, steps, _bottle_inputs(task)), task.asked.closeness
    shown = with_spread(budget.value, budget.expanded(), unit=unit)
    first = "the first: " if len(steps) > 1 or steps[0].volume != task.cubic else ""
    with_a = f"for ±{per_cent(closeness)} with a {how.replace(', ', ' and a ')}"
    short = exact_enough(budget.value, budget.standard, closeness, how=with_a, unit=unit)
    told = (f"{first}{shown} (k = 2): {how}", _mostly(budget, steps), short)
    return tuple(each for each in told if each)


def vessel_for(cubic: float, flask: str, tools: Tools) -> tuple[Ware | None, tuple[str, ...]]:
    """What it is made up in, and a word where nobody chose it and no flask is of that size.

    Raises: BadAmount where there is none of the kind asked for; BadInput.
    """
    asked = flask.strip().upper()
    if asked == "CYLINDER":
        return _cylinder(cubic, must=True), ()
    if asked in ("A", "B", "AS"):
        return ware("flask", cubic, asked), ()
    if asked:
        raise BadInput(f"--flask {flask!r} is not A, B or cylinder.", "Write --flask A.")
    own = [each for each in tools.bench.glassware if each.kind is GlassKind.FLASK]
    for each in sorted(own, key=lambda each: (each.glass_class, each.name)):
        if abs(each.size - cubic) < 1e-6:
            return each, ()
    return _nominal(cubic)


def _nominal(cubic: float) -> tuple[Ware | None, tuple[str, ...]]:
    try:
        return ware("flask", cubic, "B"), ()
    except BadAmount:
        found = _cylinder(cubic, must=False)
        if found is None:
            return None, (f"no vessel is held for {cm3(cubic)}: its own error is not counted",)
        size = f"a {format_number(found.size)} cm³ cylinder"
        return found, (f"{cm3(cubic)} is no flask's size: taken as made up in {size}",)


def _cylinder(cubic: float, *, must: bool) -> Ware | None:
    sizes = sorted(size for size, _ in ISO_CYLINDERS.sizes if size >= cubic)
    if sizes:
        return ware("cylinder", sizes[0], "B")
    if must:
        raise BadAmount(
            f"{cm3(cubic)}: no measuring cylinder of {ISO_CYLINDERS.name} is so large.",
            "Leave --flask out, or make it in parts.",
        )
    return None


def _as_made(task: Task, steps: Sequence[Step]) -> float:
    """The strength that comes of the amounts as they are measured, to the nearest mark."""
    needed = task.poured if task.poured is not None else task.mass or 0.0
    held = math.prod(step.amount / step.volume for step in steps)
    return task.strength.value * held / (needed / task.cubic)


def _mostly(budget: Budget, steps: Sequence[Step]) -> str:
    shares = [(_said(name, len(steps) > 1), share) for name, share in budget.components[:_TOLD]]
    parts = ", ".join(f"{name} {per_cent(share / budget.value)}" for name, share in shares)
    return f"standard uncertainty {per_cent(budget.relative)}, most from {parts}"


def _said(name: str, many: bool) -> str:
    """ "mass 1: balance" of several steps as "balance (step 1)"; of one step, the doubt alone."""
    quantity, _, doubt = name.rpartition(": ")
    what, _, number = quantity.rpartition(" ")
    if doubt == "temperature" and quantity.startswith("taken"):
        doubt = "temperature of what is taken"
    if quantity in ("molar mass", "assay"):
        return quantity
    return f"{doubt} (step {number})" if many and what and number.isdecimal() else doubt


def _bottle_inputs(task: Task) -> tuple[Input, ...]:
    """The assay and the molar mass, as far as their doubts are known."""
    mass = task.stuff.molar_mass
    if mass is None or task.liquid:
        return (task.assay,)
    return task.assay, Input("molar mass", mass, (_mass_doubt(task.stuff.formula, mass),))


def _mass_doubt(formula: str, mass: float) -> Doubt:
    if formula:
        # an element whose limits nobody holds leaves the usual share
        with suppress(MissingFigure):
            return molar_mass_doubt(formula)
    return Doubt("elements", _UNKNOWN_FORMULA * mass)
