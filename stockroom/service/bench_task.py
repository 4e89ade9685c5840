"""What a weighing is asked for, and what it takes: of a solid the g, of a liquid the cm³ too."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from stockroom.chemistry.made import assay_input
from stockroom.chemistry.making import mass_for, volume_of_stock
from stockroom.chemistry.strength import BY_MASS, PER_MOLE, Concentration
from stockroom.chemistry.uncertainty import Input
from stockroom.errors import BadInput, MissingFigure, NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form
from stockroom.service.bench import cm3, cubic_of, figures_of, grams, of_which, strength_of
from stockroom.service.bench_held import Held, from_text
from stockroom.service.bench_known import Asked as Given
from stockroom.service.bench_known import known
from stockroom.service.bench_names import Stuff, jar_of, solid
from stockroom.service.bench_tools import Minimum

_ROOM_C = 20.0
_GRAMS_PER_DM3 = 10.0  # of 1 g in 100 g of water, where the solute takes up no room at all
_TABLE_WITHIN = 1.1  # the tables of solubility are good to a tenth at their worst
_NEVER = 3.0  # warm water and patience do much, but not that
_WELL_BELOW = 0.5
_CM3_PER_DM3 = 1000.0
_GRAMS_PER_CM3 = 1.0  # few salts go so far, and sugar does not


@dataclass(frozen=True, slots=True)
class Assay:
    """The per cent of a solid that is the substance, and ± how much by its label.

    `at_least`: the label states no more than that; the sum counts on the least.
    Raises: BadInput for a per cent that is none.
    """

    percent: float | None = None
    within: float = 0.0
    at_least: bool = False

    def __post_init__(self) -> None:
        if self.percent is not None and not 0 < self.percent <= 100:
            raise BadInput(
                f"assay {self.percent:g} % is not above 0 and at most 100.", "Read it again."
            )
        if self.percent is not None and self.within >= self.percent:
            raise BadInput(
                f"assay {self.percent:g} ± {self.within:g} % says nothing.", "Read it again."
            )

    def of(self, stuff: Stuff) -> Input:
        """The assay to use, the label's where none was given, with its doubt."""
        fraction = stuff.assay if self.percent is None else self.percent / 100
        return assay_input(fraction, self.within / 100)

    def words(self, used: Input) -> str:
        """The assay that was used, as it is printed."""
        percent = format_number(used.value * 100)
        spread = f" ± {format_number(self.within)}" if self.within else ""
        least = ": the least by its label" if self.at_least else ""
        return f"assay {percent}{spread} %{least}"


@dataclass(frozen=True, slots=True)
class Asked:
    """What was typed: so much of such a strength, of which form, how near, by which means.

    `density` in g/cm³ is a neat liquid's, or the solution's for % w/w of a solid.
    `step` in g takes the place of the house's balances; `flask` is A, B, cylinder or
    blank. Raises: BadInput for a closeness that is none.
    """

    volume: Amount
    text: str
    of: str
    assay: Assay = field(default_factory=Assay)
    step: float | None = None
    closeness_percent: float = 5.0
    density: float | None = None
    flask: str = ""
    minimum: Minimum = field(default_factory=Minimum)

    def __post_init__(self) -> None:
        if not 0 < self.closeness_percent < 100:
            raise BadInput(
                f"--closeness {self.closeness_percent:g} % is not above 0 and below 100.",
                "Write it as 5.",
            )

    @property
    def closeness(self) -> float:
        """The closeness as a fraction."""
        return self.closeness_percent / 100


@dataclass(frozen=True, slots=True)
class Task:
    """The amount that was worked out: `mass` in g where known, `poured` in cm³ of a liquid.

    `strongest` is the g/cm³ that a stronger solution may be made to, None where unknown.
    """

    asked: Asked
    stuff: Stuff
    strength: Strength
    cubic: float
    assay: Input
    mass: float | None
    poured: float | None = None
    strongest: float | None = None
    used: tuple[str, ...] = ()

    @property
    def liquid(self) -> bool:
        """Is it measured and not weighed?"""
        return self.poured is not None


def task_of(asked: Asked, lines: list[Stuff]) -> Task:
    """The mass of the solid, or the volume of the liquid, that was asked for.

    Raises: BadInput, UnknownName, MissingFigure; NotAllowed for what is kept as a
    solution, what would not dissolve, and a liquid too weak.
    """
    stuff = to_weigh(asked.of, lines)
    cubic, strength = cubic_of(asked.volume), strength_of(asked.text, stuff)
    if stuff.form is Form.SOLUTION:
        raise NotAllowed(
            f"{stuff.name} is kept as a solution, {stuff.strength_text}: it is not weighed.",
            f'Try: stockroom dilute "{cm3(cubic)}" "{asked.text}" '
            f'--from "{stuff.strength_text}" --of "{stuff.name}"',
        )
    # a density in the tables of substances is that of a liquid
    if stuff.form is Form.LIQUID or (stuff.form is None and stuff.pure_density):
        return _liquid(asked, stuff, strength, cubic, lines)
    wanted = known(strength, Given(stuff, tuple(lines), asked.density), by_mass=False)
    assay, unit_mass = asked.assay.of(stuff), _per_unit(wanted.conc, stuff)
    strongest, warned = _dissolves(wanted.conc, stuff, unit_mass)
    mass = mass_for(cubic, wanted.conc.value, molar_mass=unit_mass, assay=assay.value)
    share = asked.assay.words(assay)
    if not warned and mass > cubic * _GRAMS_PER_CM3:
        warned = (f"! {grams(mass)} in {cm3(cubic)}: will so much dissolve?",)
    used = (*warned, *figures_of(stuff, None), *wanted.notes, share, *_left_out(asked, stuff))
    return Task(asked, stuff, strength, cubic, assay, mass, strongest=strongest, used=used)


def _left_out(asked: Asked, stuff: Stuff) -> tuple[str, ...]:
    """What was given and took no part, and a purity that the shelf's own jar has not."""
    told = []
    if asked.density is not None and not _by_density(strength_of(asked.text, stuff)):
        told.append(f"density {asked.density:g} g/cm³ took no part")
    jar = jar_of(stuff) if stuff.form is None and asked.assay.percent is None else None
    if jar is not None and jar.assay < 1:
        percent = format_number(jar.assay * 100)
        told.append(f"a formula counts as pure; as bought, {jar.name}: {percent} %. Give --assay")
    return tuple(told)


def _by_density(strength: Strength) -> bool:
    units = {strength.unit, *((strength.part_of.unit,) if strength.part_of else ())}
    return bool(units & (BY_MASS | {StrengthUnit.SATURATED}))


def to_weigh(of: str, lines: list[Stuff]) -> Stuff:
    """The form that is weighed or poured; of what is kept diluted too, the liquid itself."""
    found = solid(of, lines)
    if found.form is not Form.SOLUTION:
        return found
    same = [each for each in lines if each.substance == found.substance]
    liquids = [each for each in same if each.form is Form.LIQUID]
    if liquids:
        return liquids[0]
    neat = replace(found, name=found.substance, form=None, density=None, strength_text="")
    return neat if neat.pure_density else found


def _liquid(
    asked: Asked, stuff: Stuff, strength: Strength, cubic: float, lines: list[Stuff]
) -> Task:
    """The liquid off the bottle: of its own strength, or neat where its label states none."""
    assay = asked.assay.of(stuff)
    held = from_text(stuff.strength_text or "neat", Given(stuff, tuple(lines), asked.density))
    poured, notes = _poured(held, strength, cubic, assay.value)
    density, whose = _density(held, stuff)
    share = (asked.assay.words(assay),) if assay.value != 1 else ()
    used = dict.fromkeys((*figures_of(stuff, None), *notes, whose, *share))
    mass = poured * density if density else None
    told = tuple(filter(None, used))
    return Task(asked, stuff, strength, cubic, assay, mass, poured, used=told)


def _poured(
    held: Held, strength: Strength, cubic: float, assay: float
) -> tuple[float, tuple[str, ...]]:
    """The cm³ of the liquid for a volume, and the figures it was worked out with."""
    alike = held.alike(strength)
    if alike is not None:
        # written alike, they need no figure at all
        return volume_of_stock(cubic, strength.value, alike * assay, unit=strength.unit), ()
    stock = held.known()
    wanted = known(strength, replace(held.asked, density=None), by_mass=False)
    taken = volume_of_stock(
        cubic, wanted.conc.value, stock.conc.value * assay, unit=stock.conc.unit
    )
    return taken, (*of_which(strength.text, wanted.notes), *stock.notes)


def _density(held: Held, stuff: Stuff) -> tuple[float | None, str]:
    """The g/cm³ of the liquid as it stands, and whose it is where no note says so already."""
    try:
        found = held.known().density
    except MissingFigure:
        found = None
    if found:
        return found, ""
    said = f"density {format_number(stuff.density)} g/cm³" if stuff.density else ""
    return stuff.density, said


def _per_unit(conc: Concentration, stuff: Stuff) -> float:
    # g/dm³ over a "molar mass" of 1 g/g is the same sum by mass
    found = stuff.molar_mass if conc.unit == PER_MOLE else 1.0
    if found is None:
        raise MissingFigure(
            f"{stuff.name}: no formula is held, so a strength in moles cannot be weighed.",
            "Give --of its formula, or the strength in g/dm3 or % w/v.",
        )
    return found


def _dissolves(
    conc: Concentration, stuff: Stuff, unit_mass: float
) -> tuple[float | None, tuple[str, ...]]:
    """The g/cm³ of the solid that dissolve with ease, None where no table is held, and a warning.

    Raises: NotAllowed far above the saturated strength. Nothing is said where the
    solubility is not known.
    """
    from stockroom.chemistry.formula import molar_mass
    from stockroom.chemistry.solubility import helped_by, solubility

    dry = stuff.formula.partition(".")[0] if stuff.is_hydrate else ""
    try:
        found = solubility(_ROOM_C, *stuff.names, dry)
    except MissingFigure:
        return None, ()
    if conc.unit != PER_MOLE:
        return None, ()
    # no solution holds more than this in a dm³, since the solute takes up room as well
    most = found.grams * _GRAMS_PER_DM3 / molar_mass(found.formula)
    wanted, held = (format_strength(c, conc.unit) for c in (conc.value, float(f"{most:.2g}")))
    saturated = f"saturated at 20 °C is about {held} ({found.source})"
    helped = helped_by(*stuff.names)
    if helped and conc.value > most:
        return None, (f"! In water alone {held} at most: {helped}.",)
    if conc.value > most * _NEVER:
        raise NotAllowed(
            f"{wanted} {stuff.name} will not dissolve: {saturated}.",
            "Ask for a weaker one, or make it saturated.",
        )
    above = conc.value > most * _TABLE_WITHIN
    told = (f"! It may not dissolve: {saturated}.",) if above else ()
    return _WELL_BELOW * most * unit_mass / _CM3_PER_DM3, told
