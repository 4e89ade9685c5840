"""Does a label agree with itself, and with the table? c = 10·w·d/M, and d at that % w/w.

Copied handbook tables hold wrong rows: a formic acid of 90 % at 1.13 g/cm³ printed as
23.6 mol/dm³, where its own figures give 22.1.
"""

from __future__ import annotations

from stockroom.chemistry.densities.lookup import covers, density_at
from stockroom.chemistry.making import molarity_of_liquid
from stockroom.errors import MissingFigure
from stockroom.findings import Finding
from stockroom.measure.formats import format_number

WITHIN = 0.01
"""How far the three figures may disagree, as a fraction: labels print them to three figures.

Common practice, no source; rows of a widely reprinted table known to be right differ by up
to 0.8 %, those known to be wrong by 2 to 7 %.
"""


def label_findings(
    name: str,
    percent_ww: float,
    density: float,
    *,
    molar: float,
    molar_mass: float,
    within: float = WITHIN,
) -> list[Finding]:
    """What is wrong between % w/w, g/cm³ and mol/dm³ printed together; empty where they agree.

    `within` is a fraction of what the first two come to.
    Raises: BadAmount for a figure not above 0, or above 100 %.
    """
    comes_to = molarity_of_liquid(percent_ww, density, molar_mass)
    if abs(molar - comes_to) <= within * comes_to:
        return []
    text = (
        f"{percent_ww:g} % w/w at {density:g} g/cm³ comes to {format_number(comes_to)} mol/dm³,"
        f" not {molar:g}: one of the three is wrong"
    )
    return [Finding(name, text)]


def density_findings(
    name: str, percent_ww: float, density: float, *, within: float = WITHIN
) -> list[Finding]:
    """What is wrong between a density and the table at that % w/w; empty where none is held.

    Raises: BadAmount for a per cent outside 0 to 100.
    """
    if not covers(name):
        return []
    try:
        held = density_at(name, percent_ww)
    except MissingFigure:
        return []  # stronger than the table goes, which says nothing against the label
    if abs(density - held.value) <= within * held.value:
        return []
    text = (
        f"{percent_ww:g} % w/w weighs {format_number(held.value)} g/cm³ at"
        f" {held.temperature_c:g} °C ({held.source}), not {density:g}"
    )
    return [Finding(name, text)]
