"""Bench sum: a strength turned into another unit."""

from __future__ import annotations

from pathlib import Path

from stockroom.chemistry.strength import express
from stockroom.measure.formats import format_number
from stockroom.measure.parsing import parse_strength
from stockroom.service.bench import Sum, canonical_of, density_for, figures_of, strength_of
from stockroom.service.bench_names import house_lines, solute


def convert(
    text: str, *, of: str, to: str, density: float | None = None, store: Path | None = None
) -> Sum:
    """The strength `text` of the substance `of` in the unit `to`.

    `density` in g/cm³ is the solution's, or the pure liquid's for % v/v.
    Raises: BadInput, UnknownName; MissingFigure naming the figure to read off the label.
    """
    lines = house_lines(store)
    stuff = solute(of, lines)
    strength = strength_of(text, stuff)
    unit = parse_strength(f"1 {to}", where="--to")
    density, assumed = density_for(density, strength, stuff, lines)
    conc = canonical_of(strength, stuff, density)
    value = express(
        conc,
        unit.unit,
        molar_mass=stuff.molar_mass,
        density=density,
        pure_density=density,
        of=stuff.name,
    )
    value /= unit.value or 1.0  # "mM" is a thousandth of mol/dm3
    shown = f"{format_number(value)} {to}"
    return Sum(f"{text} {stuff.name} is {shown}", value, to, figures_of(stuff, density, assumed))
