"""How good a strength is that was made: the doubts of balance, glass and bottle together.

The doubts of a mass and of a volume stand here once; titrations take them from here too.
Everything is a product or a quotient, so no library is loaded and a plan may ask for
every make. Masses in g, volumes in cm³.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING

from stockroom.chemistry.figures import positive
from stockroom.chemistry.glassware import GlassKind, Ware
from stockroom.chemistry.uncertainty import (
    Budget,
    Doubt,
    Input,
    normal,
    quotient,
    rectangular,
    triangular,
)
from stockroom.chemistry.weighing import Scale
from stockroom.measure.formats import format_number

if TYPE_CHECKING:
    from stockroom.chemistry.steps import Step

SWING_C = 4.0
"""How far a room's temperature may be from the 20 °C of the glass. Source: QUAM:2012, A1."""

WATER_PER_C = 2.1e-4
"""The growth of water for each °C, as a fraction; glass grows little. Source: QUAM:2012, A1."""

FILLING = 0.2
"""How well a mark is filled to, as a share of the tolerance: QUAM:2012, A1 has 0.02 of 0.1."""


def mass_input(
    grams: float,
    step_g: float,
    *,
    linearity_g: float | None = None,
    repeatability_g: float = 0.0,
    name: str = "mass",
) -> Input:
    """A mass by difference, with the doubts of its balance.

    `linearity_g` is the limit on the balance's sheet; without it half a step of the
    display. Tare and gross each have it, so it counts twice.
    Source: EURACHEM/CITAC QUAM:2012, example A2.

    >>> round(mass_input(0.3888, 0.0001, linearity_g=0.00015).standard, 7)
    0.0001225
    """
    limit = positive(step_g, "balance step", "g") / 2 if linearity_g is None else linearity_g
    doubts = [rectangular("balance", limit, times=2)]
    if repeatability_g:
        doubts.append(normal("repeatability", repeatability_g))
    return Input(name, positive(grams, "mass", "g"), tuple(doubts))


def volume_input(
    volume: float,
    piece: Ware,
    *,
    fills: int = 1,
    name: str = "volume",
) -> Input:
    """A measured volume, with the doubts of tolerance, filling or reading, and temperature.

    The tolerance is the same at every filling of one pipette, so it counts `fills`
    times; how well it is filled is not.
    Source: EURACHEM/CITAC QUAM:2012, examples A1 and A2; the reading of marks is ours.
    """
    glass = triangular(str(piece.kind), fills * piece.tolerance)
    doubts = (glass, _filling(piece, fills), warmth(volume))
    return Input(name, positive(volume, "volume", "cm³"), doubts)


def warmth(volume: float) -> Doubt:
    """What a room not quite at 20 °C does to a measured volume, in its own unit.

    Source: EURACHEM/CITAC QUAM:2012, example A1.
    """
    return rectangular("temperature", volume * SWING_C * WATER_PER_C)


def assay_input(assay: float, limit: float = 0.0) -> Input:
    """The fraction of the solid that is the substance, ± the limit on its label.

    >>> round(assay_input(0.9999, 0.0001).standard, 6)
    5.8e-05
    """
    return Input("assay", assay, (rectangular("label", limit),) if limit else ())


def made(strength: float, steps: Sequence[Step], others: Sequence[Input] = ()) -> Budget:
    """The budget of a strength that those steps made; in the unit of `strength`.

    A step whose instrument is not known counts as exact. `others` are further factors:
    the assay, the molar mass, the stock solution as its own budget's `as_input`.
    Raises: BadAmount for a figure not above 0.

    >>> from stockroom.chemistry.steps import Step
    >>> by_flask = Step(12.41, 500, Scale("balance", 0.01))
    >>> f"{made(0.1000, [by_flask]).standard:.1e}"
    '3.3e-05'
    """
    over: list[Input] = list(others)
    under: list[Input] = []
    for number, step in enumerate(steps, start=1):
        which = f" {number}" if len(steps) > 1 else ""
        over.append(_amount(step, which))
        under.append(_volume(step, which))
    known = math.prod(each.value for each in over) / math.prod(each.value for each in under)
    return quotient(over, under, scale=positive(strength, "strength") / known)


def by_what(steps: Sequence[Step]) -> str:
    """The instruments that decide, in words: "class B flask, 0.01 g balance"."""
    seen: dict[str, None] = {}
    for step in reversed(steps):
        for tool in (step.vessel, step.tool):
            if isinstance(tool, Ware):
                seen[f"class {tool.glass_class} {_kind_in_words(tool)}"] = None
            elif tool:
                seen[f"{format_number(tool.step)} g balance"] = None
    return ", ".join(seen)


def _kind_in_words(piece: Ware) -> str:
    return "measuring cylinder" if piece.kind is GlassKind.CYLINDER else str(piece.kind)


def _amount(step: Step, which: str) -> Input:
    if isinstance(step.tool, Scale):
        scale = step.tool
        return mass_input(
            step.amount, scale.step, repeatability_g=scale.repeatability, name=f"mass{which}"
        )
    if step.tool is None:
        return Input(f"amount{which}", positive(step.amount, "amount"))
    return volume_input(step.amount, step.tool, fills=step.fills, name=f"taken{which}")


def _volume(step: Step, which: str) -> Input:
    if step.vessel is None:
        return Input(f"volume{which}", positive(step.volume, "volume", "cm³"))
    return volume_input(step.volume, step.vessel, name=f"volume{which}")


def _filling(piece: Ware, fills: int) -> Doubt:
    if piece.kind.one_mark:
        return normal("filling", FILLING * piece.tolerance * math.sqrt(fills))
    # what runs out lies between two readings; a cylinder is read once
    readings = 1 if piece.kind is GlassKind.CYLINDER else 2
    return rectangular("reading", piece.step / 2, times=readings)
