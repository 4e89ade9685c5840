"""Bench sum: what to weigh for a mass of solution, and the water that goes with it.

Per cents by mass and molalities are made by weighing both, and no flask or density takes part.
"""

from __future__ import annotations

from stockroom.chemistry.figures import positive
from stockroom.chemistry.strength import BY_MASS, percent_by_mass
from stockroom.errors import BadAmount, NotAllowed
from stockroom.measure.strengths import Strength
from stockroom.planning.facts import Form
from stockroom.service.bench import Named, Sum, conventions_of, figures_of, grams, strength_of
from stockroom.service.bench_names import Stuff
from stockroom.service.bench_steps import weighable_words
from stockroom.service.bench_task import Asked, Task, to_weigh
from stockroom.service.bench_tools import Tools


def weigh_into(asked: Asked, lines: list[Stuff], tools: Tools) -> tuple[Sum, Task]:
    """The g of the form and of the water for a mass of solution, and what was asked.

    Raises: BadAmount for a strength per volume; NotAllowed for what is bought as a solution.
    """
    stuff = to_weigh(asked.of, lines)
    strength, whole = strength_of(asked.text, stuff), positive(asked.volume.number, "mass", "g")
    if stuff.strength_text:
        raise NotAllowed(
            f"{stuff.name} is bought as {stuff.strength_text}: it is not weighed dry.",
            f'Try: stockroom dilute "{grams(whole)}" "{asked.text}" '
            f'--from "{stuff.strength_text}" --of "{stuff.name}"',
        )
    assay = asked.assay.of(stuff)
    mass = whole * _share(strength, stuff, whole) / assay.value
    water = whole - mass
    if water < 0:
        raise NotAllowed(
            f"{grams(mass)} of {stuff.name} are more than the {grams(whole)} to make.",
            "Lower the strength, or check the assay.",
        )
    used = (*figures_of(stuff, None), *conventions_of(strength, stuff), asked.assay.words(assay))
    finest = tools.finest
    scale = weighable_words(mass, finest, asked.closeness) if finest else tools.note
    answer = f"{grams(mass)} of {stuff.name} and {grams(water)} of water, {grams(whole)} in all"
    amounts = (
        Named(stuff.name, mass, "g"),
        Named("water", water, "g"),
        Named("in all", whole, "g"),
    )
    details = (*used, "by mass: exact, since masses add", scale)
    found = Sum(answer, mass, "g", details, tools.practice, amounts=amounts)
    liquid = mass if stuff.form is Form.LIQUID else None
    return found, Task(asked, stuff, strength, 0.0, assay, mass, liquid)


def _share(strength: Strength, stuff: Stuff, whole: float) -> float:
    if strength.unit not in BY_MASS:
        raise BadAmount(
            f'{grams(whole)} is a mass to make, and "{strength.text}" is so much in a volume.',
            "Give a volume to make, or the strength in % w/w or mol/kg.",
        )
    percent = percent_by_mass(
        strength, molar_mass=stuff.molar_mass, dry_mass=stuff.dry_mass, of=stuff.name
    )
    return percent / 100
