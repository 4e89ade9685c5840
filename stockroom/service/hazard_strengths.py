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
from stockroom.chemistry.uncertainty import COVERAGE
from stockroom.errors import BadAmount, MissingFigure
from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.strength import last_check
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form, Line
from stockroom.safety.limits import Limit
from stockroom.service.bench import canonical_of, table_ends, tabulated
from stockroom.service.bench_names import Stuff

AS_BY_MASS = "% w/v taken as % w/w, the safer side in what is denser than water"
AS_PURE = "approximate: taken as light as the pure liquid, the safer side"

_CHLORINE = "available chlorine"
_FLAMMABLE = "flammable"
_LIGHTEST = 0.6
"""g/cm³, less than any usual solvent's: stands for the density of one nobody holds. Ours."""
_ROOM_C = 20.0
_SAME_MASS = 1e-3
_WHOLE = 100.0
_AS_WATER = 0.995
"""g/cm³ from which a density is that of water for a per cent by mass: ours, no source."""


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
    """A strength in per cent by mass.

    Raises: MissingFigure, BadAmount as any conversion, and BadAmount for more in 1 dm³
    than any solution of it holds.
    """
    if strength.unit in BY_MASS:
        masses = {"molar_mass": stuff.molar_mass, "dry_mass": stuff.dry_mass}
        return ByMass(percent_by_mass(strength, **masses, of=stuff.name))
    if strength.unit is StrengthUnit.SATURATED:
        return _saturated(strength, stuff)
    grams = grams_per_dm3(strength, stuff)
    _refuse_impossible(grams, strength, stuff)
    # a density printed beside that very strength is the bottle's own
    if stuff.density and stuff.strength_text == strength.text:
        return ByMass(min(100.0, grams / 10.0 / stuff.density))
    return from_volume(grams, stuff)


_BEYOND_THE_TABLE = 1.25
"""No solution holds so much more than the strongest of a density table, which ends about where
the substance stops dissolving. Ours, no source; hydrochloric acid of 45 % comes to 1.15."""
_PURE_ROUNDED = 1.02
_HEAVIEST = 2500.0
"""g/dm³, more than a solution of zinc bromide holds, the heaviest salt of a bench. From memory."""


def _refuse_impossible(grams: float, strength: Strength, stuff: Stuff) -> None:
    most, whose = _most_held(stuff)
    if grams > most:
        raise BadAmount(
            f"{strength.text} of {stuff.name} is {format_number(grams)} g in 1 dm³, and no"
            f" solution holds so much: {whose}.",
            "Read the strength again: mol/dm3, g/dm3 or % w/w?",
        )


def _most_held(stuff: Stuff) -> tuple[float, str]:
    """The g/dm³ that no solution of it passes, and what says so."""
    table, pure = tabulated(stuff), stuff.pure_density
    if table and table_ends(table) < _WHOLE:
        from stockroom.chemistry.densities import density_at

        end = density_at(table, table_ends(table))
        strongest = 10.0 * end.high * end.value
        shown = f"{end.high:g} % w/w, the strongest held, has {format_number(round(strongest))} g"
        return strongest * _BEYOND_THE_TABLE, f"{shown} ({end.source})"
    if pure is not None:
        return 1000.0 * pure * _PURE_ROUNDED, f"the pure liquid weighs {pure:g} g/cm³"
    return _HEAVIEST, f"the heaviest have about {format_number(_HEAVIEST)} g"


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


def by_volume(strength: Strength, stuff: Stuff) -> float | None:
    """The g/dm³ of a strength that counts by volume; None for one by mass, or saturated."""
    if strength.unit in BY_MASS or strength.unit is StrengthUnit.SATURATED:
        return None
    return grams_per_dm3(strength, stuff)


def least_density(grams: Iterable[tuple[Stuff, float]]) -> float:
    """The least g/cm³ a solution of so many g/dm³ each could have, the rest being water.

    Of one light liquid by its table, where one is held; of several as if nothing drew
    together on mixing. What is heavier than water is left out, so that a per cent worked
    out with it is never too low.
    """
    light = [(stuff, much, less) for stuff, much in grams if (less := _lighter(stuff, much))]
    if len(light) == 1 and tabulated(light[0][0]):
        ((stuff, much, _),) = light
        return much / 10.0 / from_volume(much, stuff).percent
    return max(_LIGHTEST, 1.0 - sum(less for _, _, less in light))


def _lighter(stuff: Stuff, much: float) -> float:
    """The kg by which a dm³ is lighter for so many g of it being there in the place of water."""
    pure = stuff.pure_density
    if pure is not None:
        return max(0.0, much / 1000.0 * (1.0 / pure - 1.0))
    neat = stuff.form is Form.LIQUID and not stuff.strength_text
    # counted as heavy as water, as its density is not known: it may be far lighter
    unknown = neat and stuff.storage_group == _FLAMMABLE
    return much / 1000.0 * (1.0 - _LIGHTEST) if unknown else 0.0


def over_least(density: float) -> str:
    """What was taken for a per cent by mass of a solution of at least that density, in words."""
    if density > _AS_WATER:
        return AS_BY_MASS
    return f"taken over {density:.2f} g/cm³, the least the liquids together could weigh"


def _saturated(strength: Strength, stuff: Stuff) -> ByMass:
    from stockroom.chemistry.solubility import solubility

    celsius = _ROOM_C if strength.celsius is None else strength.celsius
    held = solubility(celsius, *stuff.names)
    # the tables count what dissolves without its crystal water, and here its form is wanted
    return ByMass(held.percent_ww / _dry_part(stuff), f"saturated at {celsius:g} °C: {held.source}")


def dry(percent: float, stuff: Stuff) -> float:
    """Per cent of the form as per cent of the substance without its water of crystallisation."""
    return percent * _dry_part(stuff)


def _dry_part(stuff: Stuff) -> float:
    if not stuff.molar_mass or not stuff.dry_mass:
        return 1.0
    part = stuff.dry_mass / stuff.molar_mass
    # two sets of atomic weights differ in the fourth figure, and a limit must not feel it
    return 1.0 if abs(part - 1) < _SAME_MASS else part


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
