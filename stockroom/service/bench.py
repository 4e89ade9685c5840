"""What the bench sums share: the answer's shape and the figures they look up.

Every sum works with no store. Where there is one, the house's own lines come
before the built-in names. The sums themselves are in `bench_strength.py`,
`bench_weigh.py` and `bench_dilute.py`.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from stockroom.chemistry.peroxide import MOLAR_MASS, ask_vol, convention
from stockroom.chemistry.strength import BY_MASS, Concentration, canonical, percent_by_mass
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench_counted import counted_in_words, read_strength, refuse_a_density
from stockroom.service.bench_names import Stuff, density_of, shipped_density_of

if TYPE_CHECKING:
    from stockroom.chemistry.normality import Equivalents

# the same ammonia is 28 % as NH3 and 57.6 % as NH4OH, and labels have both
_LABELS_DIFFER = 0.02  # 18 °C or 25 °C, and a rounded label, come to less than this
_MASSES = frozenset(
    {StrengthUnit.WW, StrengthUnit.WV, StrengthUnit.GRAMS, StrengthUnit.PPM_MM, StrengthUnit.PPM_MV}
)


@dataclass(frozen=True, slots=True)
class Named:
    """An amount with what it is of: "water", 297.4, "cm3"."""

    what: str
    value: float
    unit: str


@dataclass(frozen=True, slots=True)
class Sum:
    """One answer: in words, as a number in `unit`, and the figures it used.

    `amounts` are all that the answer names, in its order; `ways` are other ways to the
    same, each a row of amounts; `cautions` belong to the work itself.
    """

    text: str
    value: float
    unit: str
    details: tuple[str, ...] = ()
    practice: bool = False
    amounts: tuple[Named, ...] = ()
    ways: tuple[tuple[Named, ...], ...] = ()
    cautions: tuple[str, ...] = ()


def strength_of(text: str, stuff: Stuff) -> Strength:
    """A strength as typed; a bare number of peroxide is asked about.

    Raises: BadAmount for one that cannot be read, or is nothing at all.
    """
    # a bare number is asked about here, where the likely answer is known; "% vol" is how
    # spirits are labelled, and on a peroxide bottle it may be either
    bare = re.fullmatch(r"\s*[\d.,]+\s*(?:%?|%\s*vols?|vols?\s*%)\s*", text, re.IGNORECASE)
    if bare and _is_peroxide(stuff):
        raise ask_vol(text)
    refuse_a_density(text, stuff)
    strength = read_strength(text, stuff)
    for each in (strength, strength.part_of):
        if each and each.unit is not StrengthUnit.SATURATED and each.value <= 0:
            raise BadAmount(f"strength {text!r} is nothing at all.", "Give a strength above 0.")
    return strength


def canonical_of(strength: Strength, stuff: Stuff, density: float | None) -> Concentration:
    """The strength in the unit sums are done in, from what is known of the substance.

    Raises: BadAmount; MissingFigure naming the figure.
    """
    return canonical(
        counted_for(strength, stuff),
        molar_mass=mass_for(strength.unit, stuff),
        density=density,
        pure_density=density,
        dry_mass=stuff.dry_mass if strength.unit is StrengthUnit.MOLAL else None,
        of=stuff.name,
    )


def mass_for(unit: StrengthUnit, stuff: Stuff) -> float | None:
    """The g/mol that a strength in `unit` needs; None for one counted in moles by itself."""
    if unit in (StrengthUnit.MOLAR, StrengthUnit.NORMAL):
        return None
    # by far the commonest bench sum, and it loads no formula library
    if unit is StrengthUnit.VOL and _is_peroxide(stuff):
        return MOLAR_MASS
    return stuff.molar_mass


def counted_for(strength: Strength, stuff: Stuff) -> Strength:
    """A normality with its equivalents put in numbers; any other strength as it is.

    The reaction is looked up by every name of the substance. Raises: BadAmount with the
    readings it may have, where it is not stated.
    """
    if strength.unit is not StrengthUnit.NORMAL:
        return strength
    return replace(strength, reaction=f"{_equivalents(strength, stuff).per_mole:g} eq per mol")


def conventions_of(strength: Strength, stuff: Stuff) -> tuple[str, ...]:
    """What a strength was counted by, in words: the gas, the reaction, the chlorine, the parts.

    Printed under every sum that used it, so that nobody reads another convention into it.
    """
    unit = strength.unit
    if unit is StrengthUnit.VOL:
        return (convention(strength.gas_volume),)
    if unit is StrengthUnit.NORMAL:
        return (_equivalents(strength, stuff).said,)
    if unit is StrengthUnit.MOLAL:
        return ("molality: mol in 1 kg of water",)
    if unit in (StrengthUnit.CHLORINE, StrengthUnit.CHLORINE_WW):
        bare = re.search(r"\bppm (?![mw]/)", strength.text, re.IGNORECASE)
        ppm = ("ppm of available chlorine read as mg in 1 dm³",) if bare else ()
        return (*ppm, "available chlorine: one ClO⁻ oxidises as one Cl2 does")
    if unit is StrengthUnit.PARTS:
        shown = f"{strength.text.split(' of ')[0]} read as one part in"
        return (f"{shown} {format_number(strength.value)} parts in total",)
    if stuff.formula == "NH3" and unit in _MASSES and not strength.counted_as:
        return ("counted as NH3; a label that counts NH4OH is asked for as NH4OH",)
    return counted_in_words(strength, stuff)


def density_for(
    given: float | None, strength: Strength, stuff: Stuff, lines: Sequence[Stuff]
) -> tuple[float | None, str]:
    """The density to use, and whose it is where nobody gave it.

    The one given, else that of one's own line of the same % w/w, else the published
    table's, else a shipped line's. None where the strength needs none, or none is held.
    Raises: MissingFigure beyond the end of the table, naming its range.
    """
    if given is not None or strength.unit not in BY_MASS:
        return given, ""
    try:
        percent = percent_by_mass(
            strength, molar_mass=stuff.molar_mass, dry_mass=stuff.dry_mass, of=stuff.name
        )
    except MissingFigure:
        return None, ""  # without a molar mass the strength itself will say what it needs
    own = density_of(percent, stuff, lines)
    if own is not None:
        return own, f"that of your own line, {percent:g} % w/w"
    return _published(percent, stuff)


def doubt_of_density(given: float | None, strength: Strength, stuff: Stuff) -> tuple[str, ...]:
    """A word where the density given is far from the table's for that strength.

    Nothing where they agree, or where no table is held.
    """
    table = tabulated(stuff)
    if given is None or not table:
        return ()
    from stockroom.chemistry.densities import density_at

    try:
        percent = percent_by_mass(
            strength, molar_mass=stuff.molar_mass, dry_mass=stuff.dry_mass, of=stuff.name
        )
        held = density_at(table, percent).value
    except MissingFigure:
        return ()
    if abs(given / held - 1) <= _LABELS_DIFFER:
        return ()
    return (f"! {given:g} g/cm³ given, and the table has {held:.3f}: read the label again",)


def _published(percent: float, stuff: Stuff) -> tuple[float | None, str]:
    found = shipped_density_of(percent, stuff)
    table = tabulated(stuff)
    if not table or (found is not None and table_ends(table) < percent):
        whose = f"assumed, that of {stuff.substance} {percent:g} % w/w"
        return found, whose if found is not None else ""
    from stockroom.chemistry.densities import density_at

    read = density_at(table, percent)
    memory = ", from memory" if read.how == "c" else ""
    return read.value, f"at {read.temperature_c:g} °C: {read.source}{memory}"


def tabulated(stuff: Stuff) -> str:
    """The name under which a density table is held for the substance; empty where none is."""
    from stockroom.chemistry.densities import covers

    # a table's per cents are of the substance without its water of crystallisation
    return next((name for name in stuff.names if covers(name) and not stuff.is_hydrate), "")


def table_ends(name: str) -> float:
    """The strongest % w/w that the density table of that name holds."""
    from stockroom.chemistry.densities import density_at

    return density_at(name, 0.0).high


def cubic_of(volume: Amount) -> float:
    """The cm³ of a volume to make. Raises: BadAmount for anything but a volume above 0."""
    if volume.kind is not Kind.VOLUME or volume.micro <= 0:
        raise BadAmount(
            f"{format_number(volume.number)} {volume.unit} is not a volume to make.",
            "Give it in cm3 or dm3, above 0.",
        )
    return volume.number


def figures_of(stuff: Stuff, density: float | None, assumed: str = "") -> tuple[str, ...]:
    """The figures a sum used, in words."""
    mass = f"molar mass {stuff.molar_mass:.2f} g/mol" if stuff.molar_mass else ""
    dense = f"density {format_number(density)} g/cm³" if density else ""
    # a figure nobody gave must be seen to be one: the label may say another
    dense += f" ({assumed}; give --density off the label)" if assumed else ""
    return tuple(figure for figure in (mass, dense) if figure)


def of_which(typed: str, notes: tuple[str, ...]) -> tuple[str, ...]:
    """Notes of which the density says whose it is, where two strengths have one each."""
    return tuple(f"{typed}: {note}" if note.startswith("density") else note for note in notes)


def grams(mass: float) -> str:
    """A mass in words."""
    return f"{format_number(mass)} g"


def cm3(cubic: float) -> str:
    """A volume in words."""
    return f"{format_number(cubic)} cm³"


def _equivalents(strength: Strength, stuff: Stuff) -> Equivalents:
    from stockroom.chemistry.normality import equivalents

    shown = f'{stuff.name} "{strength.text}"'.strip()
    return equivalents(strength.reaction, *stuff.names, shown=shown)


def _is_peroxide(stuff: Stuff) -> bool:
    if stuff.formula:
        return stuff.formula == "H2O2"
    return stuff.given_mass is not None and abs(stuff.given_mass - MOLAR_MASS) < 0.1
