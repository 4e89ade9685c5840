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
from stockroom.errors import BadAmount, MissingFigure, NotAllowed
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
    strength_of,
    tabulated,
)
from stockroom.service.bench_known import Asked, Known, known, pure_density_of
from stockroom.service.bench_names import Stuff, of_line

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
_COUNTS_MOLES = frozenset({StrengthUnit.MOLAR, StrengthUnit.VOL, StrengthUnit.NORMAL})
_NEAT = "neat"
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
            return (*conventions_of(strength, self.stuff), comes_to, self.wanted.density()[1])
        try:
            return conventions_of(strength, self.stuff)
        except BadAmount:
            return ()  # two normalities of no stated reaction were compared as they stand


def from_text(typed: str, asked: Asked) -> Held:
    """A side typed as a strength, or as "neat". Raises: BadAmount."""
    if typed.strip().casefold() == _NEAT:
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
    from stockroom.keeping.verdict import Condition, verdict

    judged = verdict(bottle.record, line.rules, on)
    number, expected = bottle.number, judged.strengths.expected
    if judged.safety and judged.condition is Condition.PAST:
        raise NotAllowed(
            f"{number} is past its safety date {judged.good_until} ({judged.decided_by}).",
            "Do not open or move it; tell whoever answers for it.",
        )
    stuff = of_line(line)
    asked = Asked(stuff, (stuff,), given)
    if expected is not None:
        note = f"expected on {on} from its {judged.strengths.basis} strength; {judged.condition}"
        strength = Strength(expected, StrengthUnit(line.unit), number)
        return Held(number, strength, asked, Concentration(expected, line.unit), note)
    if line.form is not Form.LIQUID:
        raise MissingFigure(f"{number} has no strength to dilute from.", "Titrate it first.")
    if not line.strength_text:
        return replace(_neat(number, asked), note=f"neat; {judged.condition}")
    note = f"{line.strength_text} by its label, not found; {judged.condition}"
    return Held(number, parse_strength(line.strength_text), asked, note=note)


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
