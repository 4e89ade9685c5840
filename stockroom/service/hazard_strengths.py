"""How many per cent by mass a thing could be at the most, and whose figure that is.

Limits count by mass, labels mostly by volume. A density table is used where one is
held; without one, per cents by volume are taken as per cents by mass for what is
denser than water, and as if in the pure liquid for what is lighter: both on the
safer side, and both said.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.chemistry.strength import (
    BY_MASS,
    PER_MOLE,
    canonical,
    express,
    percent_by_mass,
)
from stockroom.errors import MissingFigure
from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.strength import last_check
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Line
from stockroom.safety.limits import Limit
from stockroom.service.bench import canonical_of, tabulated
from stockroom.service.bench_names import Stuff

COVERAGE = 2.0
"""A found strength is taken at its value and twice its standard uncertainty."""

AS_BY_MASS = "% w/v taken as % w/w, the safer side in what is denser than water"
AS_PURE = "approximate: taken as light as the pure liquid, the safer side"

_CHLORINE = "available chlorine"
_ROOM_C = 20.0
_SAME_MASS = 1e-3


@dataclass(frozen=True, slots=True)
class Highest:
    """The most a bottle could be: the strength, and in words where it comes from."""

    strength: Strength
    words: str


def highest_of(line: Line, record: Record | None = None) -> Highest | None:
    """The label's strength, or the last found one with twice its uncertainty if that is more.

    None for a line without a strength. What it has lost since is not taken off.
    """
    found = _found(line, record) if record else None
    if found and (line.strength is None or found.strength.value > line.strength):
        return found
    if not line.strength_text:
        return None
    return Highest(parse_strength(line.strength_text), f"label, {line.strength_text}")


def _found(line: Line, record: Record) -> Highest | None:
    checks = [check.on for check in record.checks if check.kind is CheckKind.FOUND]
    check = last_check(record, max(checks), CheckKind.FOUND) if checks else None
    if check is None or check.strength is None or line.unit not in set(StrengthUnit):
        return None
    most = check.strength + COVERAGE * (check.uncertainty or 0.0)
    text = format_strength(most, line.unit)
    spread = "" if check.uncertainty else ", its uncertainty not written"
    words = f"found {format_strength(check.strength, line.unit)} on {spell_day(check.on)}{spread}"
    if check.uncertainty:
        words += f", with twice its uncertainty {text}"
    return Highest(Strength(most, StrengthUnit(line.unit), text), words)


@dataclass(frozen=True, slots=True)
class ByMass:
    """So many per cent by mass of a form of a substance; `note` says what was taken for it."""

    percent: float
    note: str = ""


def by_mass(strength: Strength, stuff: Stuff) -> ByMass:
    """A strength in per cent by mass. Raises: MissingFigure, BadAmount as any conversion."""
    if strength.unit in BY_MASS:
        masses = {"molar_mass": stuff.molar_mass, "dry_mass": stuff.dry_mass}
        return ByMass(percent_by_mass(strength, **masses, of=stuff.name))
    if strength.unit is StrengthUnit.SATURATED:
        return _saturated(strength, stuff)
    grams = grams_per_dm3(strength, stuff)
    # a density printed beside that very strength is the bottle's own
    if stuff.density and stuff.strength_text == strength.text:
        return ByMass(min(100.0, grams / 10.0 / stuff.density))
    return from_volume(grams, stuff)


def grams_per_dm3(strength: Strength, stuff: Stuff) -> float:
    """A strength in g/dm³ of the form. Raises: MissingFigure, BadAmount as any conversion."""
    if strength.unit is StrengthUnit.PARTS and strength.part_of is not None:
        return grams_per_dm3(strength.part_of, stuff) / strength.value
    if strength.unit in BY_MASS or strength.unit is StrengthUnit.SATURATED:
        # of a weight of solution as much is taken as fills 1 dm³ at the density of water or more
        return by_mass(strength, stuff).percent * 10.0 * max(stuff.density or 1.0, 1.0)
    pure = stuff.pure_density if strength.unit is StrengthUnit.VV else None
    conc = canonical_of(strength, stuff, pure)
    mass = stuff.molar_mass if conc.unit == PER_MOLE else None
    return express(conc, StrengthUnit.GRAMS, molar_mass=mass, of=stuff.name)


def from_volume(grams: float, stuff: Stuff) -> ByMass:
    """So many g/dm³ in per cent by mass, through the density table or on the safer side."""
    table = tabulated(stuff)
    if table:
        from stockroom.chemistry.densities import percent_ww_for

        try:
            return ByMass(percent_ww_for(table, grams_per_dm3=grams))
        except MissingFigure:
            pass  # stronger than the table goes: the safer side is good enough up there
    pure = stuff.pure_density
    if pure is not None and pure < 1.0:
        return ByMass(min(100.0, grams / 10.0 / pure), AS_PURE)
    return ByMass(min(100.0, grams / 10.0), AS_BY_MASS)


def _saturated(strength: Strength, stuff: Stuff) -> ByMass:
    from stockroom.chemistry.solubility import solubility

    celsius = _ROOM_C if strength.celsius is None else strength.celsius
    held = solubility(celsius, *stuff.names)
    return ByMass(held.percent_ww, f"saturated at {celsius:g} °C: {held.source}")


def dry(percent: float, stuff: Stuff) -> float:
    """Per cent of the form as per cent of the substance without its water of crystallisation."""
    if not stuff.molar_mass or not stuff.dry_mass:
        return percent
    part = stuff.dry_mass / stuff.molar_mass
    # two sets of atomic weights differ in the fourth figure, and a limit must not feel it
    return percent if abs(part - 1) < _SAME_MASS else percent * part


def counted_as(
    percent: float, stuff: Stuff, limits: Iterable[Limit]
) -> tuple[tuple[str, float], ...]:
    """The per cent in each other way its limits count it; `percent` is without crystal water."""
    ways = dict.fromkeys(limit.percent_of for limit in limits if limit.percent_of)
    return tuple((way, min(100.0, _counted(percent, stuff, way))) for way in ways)


def _counted(percent: float, stuff: Stuff, way: str) -> float:
    mass = stuff.dry_mass
    if mass is None:
        return percent
    if way == _CHLORINE:
        conc = canonical(Strength(percent, StrengthUnit.WW, way), molar_mass=mass, density=1.0)
        return express(conc, StrengthUnit.CHLORINE_WW, molar_mass=mass, density=1.0)
    from stockroom.chemistry.formula import molar_mass

    return percent * molar_mass(way) / mass
