"""What a written strength comes to, with every figure that took part named.

"20 vol" needs nothing more; "36 % w/w" a density, "saturated" a solubility, "1 in 10"
what it is one part of.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from stockroom.chemistry.strength import BY_MASS, PER_MOLE, Concentration
from stockroom.errors import MissingFigure
from stockroom.measure.formats import format_number
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench import (
    canonical_of,
    conventions_of,
    density_for,
    doubt_of_density,
    figures_of,
    strength_of,
    table_ends,
    tabulated,
)
from stockroom.service.bench_names import Stuff

if TYPE_CHECKING:
    from stockroom.chemistry.solubility import Solubility

_ROOM_FROM, _ROOM_TO = 15.0, 25.0  # °C: a density at 20 °C holds within half a per cent
_ANY_DENSITY = 1.0
_PURE = Strength(100.0, StrengthUnit.WW, "100 % w/w")


@dataclass(frozen=True, slots=True)
class Asked:
    """Whose strength it is, the house's own lines, and the figures given; None where not.

    Densities in g/cm³: of the solution and of the pure liquid. `part_of` is what "1 in 10"
    is one part of, `celsius` where "saturated" is meant.
    """

    stuff: Stuff
    lines: tuple[Stuff, ...] = ()
    density: float | None = None
    pure_density: float | None = None
    part_of: str = ""
    celsius: float | None = None


@dataclass(frozen=True, slots=True)
class Known:
    """A strength fit for sums; `density` is the solution's where it took part; `notes` say how."""

    conc: Concentration
    density: float | None = None
    notes: tuple[str, ...] = ()


def known(strength: Strength, asked: Asked, *, by_mass: bool) -> Known:
    """What a strength comes to. `by_mass`: it is wanted by mass, where a density may cancel.

    Raises: MissingFigure naming what to read off the label or to look up; BadAmount.
    """
    if strength.unit is StrengthUnit.SATURATED:
        return _saturated(strength, asked, by_mass)
    if strength.unit is StrengthUnit.PARTS:
        return _part(strength, asked)
    notes = conventions_of(strength, asked.stuff)
    if strength.unit is StrengthUnit.VV:
        pure, whose = pure_density_of(asked)
        return Known(canonical_of(strength, asked.stuff, pure), None, (*notes, *whose))
    if strength.unit not in BY_MASS:
        return Known(canonical_of(strength, asked.stuff, None), None, notes)
    if by_mass:
        # from mass to mass any density serves: it goes in and comes out again
        return Known(canonical_of(strength, asked.stuff, _ANY_DENSITY), _ANY_DENSITY, notes)
    density, assumed = density_for(asked.density, strength, asked.stuff, asked.lines)
    shown = figures_of(asked.stuff, density, assumed)[-1:] if density else ()
    doubt = doubt_of_density(asked.density, strength, asked.stuff)
    return Known(canonical_of(strength, asked.stuff, density), density, (*notes, *shown, *doubt))


def pure_density_of(asked: Asked) -> tuple[float | None, tuple[str, ...]]:
    """The density of the pure liquid, and the words that say whose it is.

    The one given, else a table's at 100 % w/w, else that in the tables of substances.
    """
    stuff, table = asked.stuff, tabulated(asked.stuff)
    given = asked.pure_density
    if given is not None:
        said = f"density of the pure liquid {format_number(given)} g/cm³, as given"
        return given, (said, *doubt_of_density(given, _PURE, stuff))
    if table and table_ends(table) == 100:
        from stockroom.chemistry.densities import density_at, in_words

        found = density_at(table, 100.0)
        return found.value, (f"pure liquid: {in_words(found)}",)
    held = stuff.pure_density
    if held is None:
        return None, ()
    return held, (f"density of the pure liquid {format_number(held)} g/cm³, from the tables",)


def _part(strength: Strength, asked: Asked) -> Known:
    stock = strength.part_of
    if stock is None and asked.part_of:
        stock = strength_of(asked.part_of, asked.stuff)
    if stock is None:
        raise MissingFigure(
            f'{asked.stuff.name} "{strength.text}": one part of what?',
            f'Write "{strength.text} of 2 mol/dm3", or add --from "2 mol/dm3".',
        )
    whole = known(stock, replace(asked, part_of=""), by_mass=False)
    conc = Concentration(whole.conc.value / strength.value, whole.conc.unit)
    # the density was that of what is diluted
    return Known(conc, None, (*conventions_of(strength, asked.stuff), *whole.notes))


def _saturated(strength: Strength, asked: Asked, by_mass: bool) -> Known:
    from stockroom.chemistry.solubility import molar_at_saturation, solubility

    stuff = asked.stuff
    celsius = asked.celsius if strength.celsius is None else strength.celsius
    if celsius is None:
        raise MissingFigure(
            f'{stuff.name} "{strength.text}": at what temperature?',
            'Write "saturated at 20 °C", or add --temperature 20.',
        )
    dry = stuff.formula.partition(".")[0] if stuff.is_hydrate else ""
    found = solubility(celsius, *stuff.names, dry)
    grams = f"{format_number(found.grams)} g {found.formula} in 100 g of water"
    notes = (f"{grams} at {celsius:g} °C ({found.source}; good to {found.good_to_percent:g} %)",)
    if by_mass:
        density, whose = _ANY_DENSITY, ""
    else:
        density, whose = _density_saturated(found, asked)
    molar = molar_at_saturation(found, density)
    return Known(Concentration(molar, PER_MOLE), density, (*notes, whose) if whose else notes)


def _density_saturated(found: Solubility, asked: Asked) -> tuple[float, str]:
    if asked.density is not None:
        return asked.density, f"density {format_number(asked.density)} g/cm³, as given"
    if found.density is not None:
        return found.density, f"density {format_number(found.density)} g/cm³, {found.density_of}"
    table = tabulated(asked.stuff)
    near = _ROOM_FROM <= found.celsius <= _ROOM_TO
    if table and near and found.percent_ww <= table_ends(table):
        from stockroom.chemistry.densities import density_at, in_words

        read = density_at(table, found.percent_ww)
        return read.value, in_words(read)
    raise MissingFigure(
        f"{asked.stuff.name} saturated at {found.celsius:g} °C is"
        f" {format_number(found.percent_ww)} % w/w; I need its density to turn that into mol/dm³.",
        "Look it up, or ask for % w/w or mol/kg, which need none.",
    )
