"""What the bench sums share: the answer's shape, the figures they look up, their cautions.

Every sum works with no store. Where there is one, the house's own lines come
before the built-in names. The sums themselves are in `bench_strength.py`,
`bench_weigh.py` and `bench_dilute.py`.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from stockroom.chemistry.peroxide import MOLAR_MASS, ask_vol
from stockroom.chemistry.strength import Concentration, canonical
from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench_names import Stuff, density_of

_CAUTIONS = {
    "acid": "Acid into water, slowly, stirring, never the reverse; let it cool before the mark.",
    "alkali": "Into water in portions, stirring: it heats; let it cool before the mark.",
    "peroxide": "Vented cap, cool, dark; nothing goes back into the bottle.",
    "hypochlorite": "Never near acid (chlorine) or ammonia; vented cap.",
}
"""By storage group; the-job section 7, nos. 2 to 5, in our words."""


@dataclass(frozen=True, slots=True)
class Sum:
    """One answer: in words, as a number in `unit`, and the figures it used."""

    text: str
    value: float
    unit: str
    details: tuple[str, ...] = ()
    practice: bool = False


def strength_of(text: str, stuff: Stuff) -> Strength:
    """A strength as typed; a bare number of peroxide is asked about.

    Raises: BadAmount for one that cannot be read, or is nothing at all.
    """
    # a bare number is asked about here, where the likely answer is known
    bare = re.fullmatch(r"\s*[\d.,]+\s*%?\s*", text)
    if bare and stuff.molar_mass and abs(stuff.molar_mass - MOLAR_MASS) < 0.1:
        raise ask_vol(text)
    strength = parse_strength(text)
    if strength.unit is not StrengthUnit.SATURATED and strength.value <= 0:
        raise BadAmount(f"strength {text!r} is nothing at all.", "Give a strength above 0.")
    return strength


def canonical_of(strength: Strength, stuff: Stuff, density: float | None) -> Concentration:
    """The strength in the unit sums are done in, from what is known of the substance."""
    return canonical(
        strength,
        molar_mass=stuff.molar_mass,
        density=density,
        pure_density=density,
        of=stuff.name,
    )


def density_for(
    given: float | None, strength: Strength, stuff: Stuff, lines: list[Stuff]
) -> tuple[float | None, str]:
    """The density to use, and whose it is where nobody gave it."""
    if given is not None or strength.unit is not StrengthUnit.WW:
        return given, ""
    found = density_of(strength.value, stuff, lines)
    return found, f"assumed, that of {stuff.substance} {strength.text}" if found else ""


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


def caution_of(stuff: Stuff) -> tuple[str, ...]:
    """The caution of its storage group, marked, if it has one."""
    caution = _CAUTIONS.get(stuff.storage_group)
    return (f"! {caution}",) if caution else ()


def grams(mass: float) -> str:
    """A mass in words."""
    return f"{format_number(mass)} g"


def cm3(cubic: float) -> str:
    """A volume in words."""
    return f"{format_number(cubic)} cm³"
