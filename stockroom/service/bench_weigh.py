"""Bench sum: what to weigh for a volume of solution."""

from __future__ import annotations

from pathlib import Path

from stockroom.chemistry.making import mass_for
from stockroom.chemistry.strength import PER_MOLE
from stockroom.chemistry.weighing import batch_to_weigh, least_weighable, relative_error
from stockroom.errors import BadInput, MissingFigure
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_number
from stockroom.service.bench import (
    Sum,
    canonical_of,
    caution_of,
    cm3,
    cubic_of,
    density_for,
    figures_of,
    grams,
    strength_of,
)
from stockroom.service.bench_names import house_lines, solid

_INTERMEDIATE = 10
"""An intermediate is made ten times as strong: one bulb pipette and one flask dilute it."""


def weigh(
    volume: Amount,
    text: str,
    *,
    of: str,
    assay_percent: float | None = None,
    step_g: float | None = None,
    closeness_percent: float = 5.0,
    density: float | None = None,
    store: Path | None = None,
) -> Sum:
    """The g to weigh of the form `of` for a volume of the strength `text`.

    `assay_percent` takes the place of the label's where given. With the balance's
    `step_g`, a mass too small for the closeness brings two offers: a larger batch,
    or ten times as strong and diluted. `density` in g/cm³ is the solution's, for % w/w.
    Raises: BadInput, UnknownName, MissingFigure.
    """
    lines = house_lines(store)
    stuff = solid(of, lines)
    assay = stuff.assay if assay_percent is None else _fraction(assay_percent)
    cubic = cubic_of(volume)
    strength = strength_of(text, stuff)
    density, assumed = density_for(density, strength, stuff, lines)
    conc = canonical_of(strength, stuff, density)
    # g/dm³ over a "molar mass" of 1 g/g is the same sum by mass
    unit_mass = stuff.molar_mass if conc.unit == PER_MOLE else 1.0
    if unit_mass is None:
        raise MissingFigure(
            f"{stuff.name}: no formula is held, so {text!r} cannot be weighed.",
            "Give --of its formula, or the strength in g/dm3 or % w/v.",
        )
    mass = mass_for(cubic, conc.value, molar_mass=unit_mass, assay=assay)
    answer = f"{grams(mass)} of {stuff.name}, made up to {cm3(cubic)}"
    used = (*figures_of(stuff, density, assumed), f"assay {format_number(assay * 100)} %")
    offers = _offers(mass, cubic, step_g, closeness_percent / 100) if step_g else ()
    return Sum(answer, mass, "g", (*used, *offers, *caution_of(stuff)))


def _fraction(assay_percent: float) -> float:
    if not 0 < assay_percent <= 100:
        raise BadInput(
            f"assay {assay_percent:g} % is not above 0 and at most 100.", "Read it again."
        )
    return assay_percent / 100


def _offers(mass: float, cubic: float, step: float, closeness: float) -> tuple[str, ...]:
    error = f"±{100 * relative_error(step, mass):.2g} %"
    least = least_weighable(step, closeness)
    if mass >= least:
        return (f"one step of the balance, {step:g} g, is {error} of it",)
    # both ways out are offered, since which wastes less depends on what keeps
    weighed, batch = batch_to_weigh(mass, cubic, least)
    flask = batch / _INTERMEDIATE
    part = cubic / _INTERMEDIATE
    return (
        f"too little for a {step:g} g balance: one step is {error}, wanted ±{100 * closeness:g} %",
        f"either {grams(weighed)} made up to {cm3(batch)}",
        f"or {grams(weighed)} made up to {cm3(flask)}, and {cm3(part)} of that to {cm3(cubic)}",
    )
