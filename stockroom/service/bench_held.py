"""What stands on the bench for a dilution: a strength, a neat liquid or a bottle, made comparable.

Two strengths are compared as they are written where they are written alike; else through
what each comes to (`bench_known.py`): mol/dm³ or g/dm³, or % w/w where masses are to add.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date
from typing import TYPE_CHECKING

from stockroom.chemistry.densities import density_at, in_words, percent_ww_for
from stockroom.chemistry.ethanol import is_ethanol
from stockroom.chemistry.strength import BY_MASS, PER_MOLE, Concentration, percent_by_mass
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form
from stockroom.service.bench import (
    canonical_of,
    conventions_of,
    density_for,
    figures_of,
    of_which,
    strength_of,
    tabulated,
)
from stockroom.service.bench_cautions import STRONG_PERCENT
from stockroom.service.bench_known import Asked, Known, known, pure_density_of
from stockroom.service.bench_names import Stuff, of_line
from stockroom.service.bottle_strength import standing

if TYPE_CHECKING:
    from stockroom.planning.facts import Bottle, Line

# units of so much per volume: two strengths in the same one need no figure to be compared
_PER_VOLUME = frozenset(
    {
        StrengthUnit.MOLAR,
        StrengthUnit.GRAMS,
        StrengthUnit.WV,
        StrengthUnit.VV,
        StrengthUnit.VOL,
        StrengthUnit.PPM_MV,
        StrengthUnit.NORMAL,
        StrengthUnit.CHLORINE,
    }
)
_GRAMS_PER_PERCENT = 10.0  # in 1 dm³, at the density of water
_COUNTS_MOLES = frozenset({StrengthUnit.MOLAR, StrengthUnit.VOL, StrengthUnit.NORMAL})
_NEAT = "neat"
_ALSO_NEAT = frozenset({_NEAT, "pure", "undiluted", "glacial"})
_SAME = 1e-4  # of a strength: nobody measures closer, and molar masses are rounded
_PURE = Strength(100.0, StrengthUnit.WW, _NEAT)


@dataclass(frozen=True, slots=True)
class Held:
    """One side of the sum: as typed, its strength as written, and what is known beside it.

    `found` is the strength of a bottle as expected, and `note` how it is known; `stuff` is
    what the bottle says it holds. Without `found` the sum works from `strength`.
    """

    typed: str
    strength: Strength
    asked: Asked
    found: Concentration | None = None
    note: str = ""
    neat: bool = False

    @property
    def name(self) -> str:
        """As typed, with the name of what it holds."""
        return f"{self.typed} {self.asked.stuff.name}".strip()

    @property
    def by_mass(self) -> bool:
        """Is its strength written by mass?"""
        return self.found is None and self.strength.unit in BY_MASS

    def known(self) -> Known:
        """What its strength comes to per volume. Raises: MissingFigure, BadAmount."""
        if self.found is not None:
            return Known(self.found)
        if not self.neat or is_ethanol(self.asked.stuff.substance):
            return known(self.strength, self.asked, by_mass=False)
        pure, words = pure_density_of(self.asked)
        if pure is None:
            raise MissingFigure(
                f"{self.name}: I need the density of the pure liquid.",
                "Read it off the label and add --density.",
            )
        return Known(canonical_of(_PURE, self.asked.stuff, pure), pure, words)

    def alike(self, wanted: Strength) -> float | None:
        """Its strength in the unit of `wanted`, where no figure at all is needed for that."""
        if self.found is not None or wanted.unit not in _PER_VOLUME:
            return None
        if self.neat and wanted.unit is StrengthUnit.VV:
            return 100.0
        return self.strength.value if _kind(self.strength) == _kind(wanted) else None

    def same_as(self, wanted: Held) -> bool:
        """Is it as strong as that, written alike or by what both come to?"""
        if self.found is None and not self.neat and _kind(self.strength) == _kind(wanted.strength):
            return abs(self.strength.value - wanted.strength.value) <= _SAME * self.strength.value
        try:
            mine, other = self.known().conc, wanted.known().conc
        except (MissingFigure, BadAmount):
            return False
        return mine.unit == other.unit and abs(mine.value - other.value) <= _SAME * other.value

    @property
    def strong(self) -> bool:
        """Is it concentrated, as bought? False where nothing is known that would tell."""
        if self.neat:
            return True
        try:
            return self.percent_ww() >= STRONG_PERCENT
        except (MissingFigure, BadAmount):
            return self._grams_per_dm3() >= STRONG_PERCENT * _GRAMS_PER_PERCENT

    def _grams_per_dm3(self) -> float:
        try:
            conc = self.known().conc
        except (MissingFigure, BadAmount):
            return 0.0
        per_mole = self.asked.stuff.molar_mass if conc.unit == PER_MOLE else 1.0
        return conc.value * (per_mole or 0.0)

    @property
    def uses_density(self) -> bool:
        """Would a density given for it take part in a sum?"""
        counted = (StrengthUnit.VV, StrengthUnit.SATURATED)
        inner = self.strength.part_of
        units = {self.strength.unit, *((inner.unit,) if inner else ())}
        return self.neat or bool(units & (BY_MASS | set(counted)))

    def percent_ww(self) -> float:
        """Its % w/w. Raises: MissingFigure where no table turns it into one; BadAmount."""
        stuff = self.asked.stuff
        if self.by_mass:
            return percent_by_mass(
                self.strength, molar_mass=stuff.molar_mass, dry_mass=stuff.dry_mass, of=stuff.name
            )
        table = tabulated(stuff)
        if not table:
            raise MissingFigure(
                f"{self.name}: no density table turns it into % w/w.",
                "Give every strength in % w/w, or every one per volume.",
            )
        conc = self.known().conc
        if conc.unit == PER_MOLE:
            return percent_ww_for(table, molar=conc.value, molar_mass=stuff.molar_mass)
        return percent_ww_for(table, grams_per_dm3=conc.value)

    def density(self) -> tuple[float, str]:
        """Its g/cm³ and whose figure that is. Raises: MissingFigure where none is held."""
        stuff, percent = self.asked.stuff, self.percent_ww()
        found: float | None = None
        if self.neat:
            pure = self.known()
            return pure.density or 0.0, pure.notes[0]
        if self.by_mass:
            found, whose = density_for(self.asked.density, self.strength, stuff, self.asked.lines)
        if found is not None:
            shown = f"{found:.4f} g/cm³ ({whose})" if whose else f"{found:g} g/cm³ as given"
            return found, f"density {shown}"
        table = tabulated(stuff)
        if not table:
            raise MissingFigure(
                f"{self.name}: volumes need its density.",
                'Ask for a mass, as "500 g", which needs none; or name it with --of.',
            )
        read = density_at(table, percent)
        return read.value, in_words(read)


@dataclass(frozen=True, slots=True)
class Task:
    """What was asked: how much, how strong, from one or two sources.

    `given` is the density that was typed, g/cm³.
    """

    volume: Amount
    wanted: Held
    held: tuple[Held, ...]
    given: float | None = None

    @property
    def stuff(self) -> Stuff:
        """What is dissolved."""
        return self.wanted.asked.stuff

    @property
    def all(self) -> tuple[Held, ...]:
        """What is wanted, then the sources."""
        return (self.wanted, *self.held)

    def beside(self) -> tuple[str, float, tuple[float, ...]]:
        """A unit of solute per volume, the wanted strength and the sources' in it.

        Raises: MissingFigure naming the figure that would make them comparable.
        """
        strength = self.wanted.strength
        alike = [value for held in self.held if (value := held.alike(strength)) is not None]
        if len(alike) == len(self.held):
            return str(strength.unit), strength.value, tuple(alike)
        wanted, *stocks = (held.known().conc for held in self.all)
        if any(stock.unit != wanted.unit for stock in stocks):
            named = " and ".join(held.typed for held in self.held)
            raise MissingFigure(
                f"{strength.text} and {named} cannot be compared without a molar mass.",
                "Add --of with the name or the formula.",
            )
        return wanted.unit, wanted.value, tuple(stock.value for stock in stocks)

    def notes(self) -> tuple[str, ...]:
        """How the strengths of the bottles are known."""
        return tuple(f"{held.typed}: {held.note}" for held in self.held if held.note)

    def words(self) -> tuple[str, ...]:
        """What each side comes to per volume, how that is known, and the figures used."""
        told = [each for held in self.held for each in _words(held)]
        told += self._wanted_words()
        counted = any(held.strength.unit not in _COUNTS_MOLES for held in self.all)
        mass = figures_of(self.stuff, None) if counted else ()
        return tuple(dict.fromkeys((*told, *mass)))

    def _wanted_words(self) -> tuple[str, ...]:
        strength = self.wanted.strength
        if self.wanted.by_mass:
            conc = self.wanted.known().conc
            comes_to = f"{strength.text} is {format_strength(conc.value, conc.unit)}"
            dense = of_which(strength.text, (self.wanted.density()[1],))
            return (*conventions_of(strength, self.stuff), comes_to, *dense)
        try:
            return conventions_of(strength, self.stuff)
        except BadAmount:
            return ()  # two normalities of no stated reaction were compared as they stand


def from_text(typed: str, asked: Asked) -> Held:
    """A side typed as a strength, or as "neat". Raises: BadAmount."""
    if typed.strip().casefold() in _ALSO_NEAT:
        return _neat(typed, asked)
    strength = strength_of(typed, asked.stuff)
    if strength.unit is StrengthUnit.VV:
        # nothing here has a solution's density, so the one given is the pure liquid's
        asked = replace(asked, pure_density=asked.density)
    return Held(typed, strength, asked)


def from_bottle(bottle: Bottle, line: Line, on: date, given: float | None = None) -> Held:
    """A bottle as it should stand on the day.

    A bought liquid whose strength nobody found counts as its label says, or as neat
    where the label states no strength. Raises: MissingFigure for any other without one;
    NotAllowed past its safety date.
    """
    found = standing(bottle, line, on)
    stuff = of_line(line)
    asked = Asked(stuff, (stuff,), given)
    if found.expected is not None:
        strength = Strength(found.expected, StrengthUnit(found.unit), found.number)
        conc = Concentration(found.expected, found.unit)
        return Held(found.number, strength, asked, conc, found.note)
    if line.form is not Form.LIQUID:
        raise MissingFigure(f"{found.number} has no strength to dilute from.", "Titrate it first.")
    if not line.strength_text:
        return replace(_neat(found.number, asked), note=f"neat; {found.condition}")
    note = f"{line.strength_text} by its label, not found; {found.condition}"
    return Held(found.number, parse_strength(line.strength_text), asked, note=note)


def _neat(typed: str, asked: Asked) -> Held:
    asked = replace(asked, pure_density=asked.density)
    if is_ethanol(asked.stuff.substance):
        return Held(typed, Strength(100.0, StrengthUnit.VV, _NEAT), asked, neat=True)
    return Held(typed, _PURE, asked, neat=True)


def _words(held: Held) -> list[str]:
    try:
        said = held.known()
    except (MissingFigure, BadAmount):
        # two strengths written alike were compared without it
        return [f"{held.typed}: {held.note}"] if held.note else []
    comes_to = f"{held.typed} is {format_strength(said.conc.value, said.conc.unit)}"
    return [", ".join(each for each in (comes_to, held.note) if each), *said.notes]


def _kind(strength: Strength) -> tuple[StrengthUnit, str, float | None]:
    return strength.unit, strength.reaction, strength.gas_volume
