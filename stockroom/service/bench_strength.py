"""Bench sum: a strength turned into another unit.

What is typed is made a concentration first (`bench_known.py`), then said in the unit
wanted; every convention, density and solubility that took part is named under it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace

from stockroom.chemistry.strength import BY_MASS, PER_MOLE, Concentration, express
from stockroom.errors import BadAmount, BadInput, MissingFigure
from stockroom.measure.formats import format_number
from stockroom.measure.parsing import gas_volume
from stockroom.measure.reading import quote
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench import (
    Sum,
    conventions_of,
    counted_for,
    figures_of,
    mass_for,
    strength_of,
    tabulated,
)
from stockroom.service.bench_counted import read_strength
from stockroom.service.bench_known import Asked, Known, known, pure_density_of
from stockroom.service.bench_names import Stuff, house_lines, solute
from stockroom.settings import StoreAt

_ONE_IN = re.compile(r"\s*1 in(?:\s+of\s+(?P<stock>.+))?\s*", re.IGNORECASE)
_BEGINS_WITH_NUMBER = re.compile(r"[0-9.]|[MN] ?/ ?[0-9]")
_WORTH_A_LOOK = {PER_MOLE: 8.0, "g/dm3": 300.0}  # every table goes further than this
_PARTS_BELOW = 1 - 1e-9


@dataclass(frozen=True, slots=True)
class Given:
    """The figures given with a question, as in `Asked`; `gas` is the dm³/mol to count vol at."""

    density: float | None = None
    pure_density: float | None = None
    part_of: str = ""
    celsius: float | None = None
    gas: float | None = None


def convert(
    text: str, *, of: str, to: str, given: Given | None = None, store: StoreAt | None = None
) -> Sum:
    """The strength `text` of the substance `of` in the unit `to`.

    What is `given` stands before any table; a density is the pure liquid's where nothing
    but % v/v wants one.
    Raises: BadInput, UnknownName; MissingFigure naming the figure to read off the label.
    """
    given, lines = given or Given(), house_lines(store)
    figures = (given.density, given.pure_density, given.part_of, given.celsius)
    asked = Asked(solute(of, lines), tuple(lines), *figures)
    strength, target = _read(text, to, asked, given.gas)
    units = _units(strength, target)
    _refuse_unused(units, given)
    asked = _with_densities(strength, target, asked)
    held = known(strength, asked, by_mass=target.unit in BY_MASS)
    if strength.unit is StrengthUnit.PARTS:
        # the density given was that of what is diluted
        asked = replace(asked, density=None)
    value, said = _said_in(target, held, asked)
    answer = f"{text} {asked.stuff.name} is {_shown(value, to, target)}"
    mass = figures_of(asked.stuff, None) if _counts_mass(strength, target) else ()
    notes = (*held.notes, *said, *_beyond(held.conc, asked.stuff), *_not_used(units, given))
    return Sum(answer, value, to, (*mass, *dict.fromkeys(notes)))


def _read(text: str, to: str, asked: Asked, gas: float | None) -> tuple[Strength, Strength]:
    gas_volume(gas, f"--gas-volume {gas}")
    strength = _counted_at(strength_of(text, asked.stuff), gas)
    return strength, _counted_at(_target(to, asked), gas)


def _with_densities(strength: Strength, target: Strength, asked: Asked) -> Asked:
    if BY_MASS & {strength.unit, target.unit} or asked.pure_density is not None:
        return asked
    # nothing here has a solution's density, so the one given is the pure liquid's
    return replace(asked, pure_density=asked.density)


def _units(*strengths: Strength) -> frozenset[StrengthUnit]:
    """Every unit that takes part, that of what is diluted too."""
    inner = [each.part_of for each in strengths if each.part_of]
    return frozenset(each.unit for each in (*strengths, *inner))


def _refuse_unused(units: frozenset[StrengthUnit], given: Given) -> None:
    # what is typed and then left out of the sum would be taken for a part of its answer
    if given.part_of and StrengthUnit.PARTS not in units:
        raise BadInput(
            f"--from {given.part_of!r}: nothing here is a part of it.",
            'Write the strength as "1 in 10", or use: stockroom dilute',
        )
    if given.gas and not given.part_of and StrengthUnit.VOL not in units:
        raise BadInput(f"--gas-volume {given.gas:g}: no vol in this sum.", "Leave it out.")


def _not_used(units: frozenset[StrengthUnit], given: Given) -> tuple[str, ...]:
    """The figures given that no part of this sum asked for."""
    dense = BY_MASS | {StrengthUnit.VV, StrengthUnit.SATURATED, StrengthUnit.PARTS}
    told = []
    if given.density is not None and not units & dense:
        told.append(f"density {given.density:g} g/cm³ took no part")
    if given.pure_density is not None and StrengthUnit.VV not in units:
        told.append(f"--pure-density {given.pure_density:g} took no part: nothing here is % v/v")
    if given.celsius is not None and StrengthUnit.SATURATED not in units:
        told.append(
            f"{given.celsius:g} °C took no part: densities are those at the temperature named"
        )
    return tuple(told)


def _beyond(conc: Concentration, stuff: Stuff) -> tuple[str, ...]:
    """A word where a strength is above all that its density table holds."""
    least = _WORTH_A_LOOK.get(conc.unit, 0.0)
    table = tabulated(stuff) if conc.value > least else ""
    if not table:
        return ()
    from stockroom.chemistry.densities import percent_ww_for

    try:
        if conc.unit == PER_MOLE:
            percent_ww_for(table, molar=conc.value, molar_mass=stuff.molar_mass)
        else:
            percent_ww_for(table, grams_per_dm3=conc.value)
    except MissingFigure as trouble:
        return (f"! is it meant? {trouble.message}",)
    return ()


def _counted_at(strength: Strength, gas: float | None) -> Strength:
    # what is written beside the number is on the label, and stands before what is asked for
    part_of = _counted_at(strength.part_of, gas) if strength.part_of else None
    return replace(strength, gas_volume=strength.gas_volume or gas, part_of=part_of)


def _target(to: str, asked: Asked) -> Strength:
    """One of the unit that is wanted; its value is what the number is counted in."""
    one_in = _ONE_IN.fullmatch(to)
    if one_in:
        written = one_in["stock"] or asked.part_of
        stock = strength_of(written, asked.stuff) if written else None
        return Strength(1.0, StrengthUnit.PARTS, to.strip(), part_of=stock)
    return _one_of(to, asked)


def _one_of(to: str, asked: Asked) -> Strength:
    if not to.strip() or _BEGINS_WITH_NUMBER.match(to.strip()):
        shown = f"--to {quote(to)}: "
        what = "a unit alone is wanted, without a number." if to.strip() else "which unit?"
        raise BadAmount(f"{shown}{what}", 'Write --to mol/dm3, or "% w/w".')
    try:
        found = read_strength(f"1 {to}", asked.stuff, where="--to")
        return replace(found, text=to.strip())
    except BadAmount as bad:
        # the one in front is ours, and nobody typed it
        message = bad.message.replace(quote(f"1 {to}"), quote(to))
        hint = bad.hint.replace('"1 ', '"').replace(" after the number", "")
        raise BadAmount(message, hint) from None


def _said_in(target: Strength, held: Known, asked: Asked) -> tuple[float, tuple[str, ...]]:
    """The concentration in the unit of `target`, and the figures that brought it there."""
    if target.unit is StrengthUnit.PARTS:
        return _one_in(target, held, asked)
    stuff = asked.stuff
    density, pure = held.density, None
    said: tuple[str, ...] = ()
    if target.unit in BY_MASS and density is None:
        density, said = _density_of(held.conc, asked)
    elif target.unit is StrengthUnit.VV:
        pure, said = pure_density_of(asked)
    one = counted_for(target, stuff)
    value = express(
        held.conc,
        target.unit,
        molar_mass=mass_for(target.unit, stuff),
        density=density,
        pure_density=pure,
        dry_mass=stuff.dry_mass if target.unit is StrengthUnit.MOLAL else None,
        reaction=one.reaction,
        gas_volume=one.gas_volume,
        of=stuff.name,
    )
    # "mM" is a thousandth of mol/dm3
    return value / target.value, (*conventions_of(target, stuff), *said)


def _one_in(target: Strength, held: Known, asked: Asked) -> tuple[float, tuple[str, ...]]:
    if target.part_of is None:
        raise MissingFigure(
            f"--to {target.text!r}: one part of what?",
            'Write --to "1 in of 2 mol/dm3", or add --from "2 mol/dm3".',
        )
    stock = known(target.part_of, asked, by_mass=False)
    parts = stock.conc.value / held.conc.value
    if stock.conc.unit != held.conc.unit or parts < _PARTS_BELOW:
        raise BadAmount(
            f"{target.part_of.text} is no stronger than what is to be a part of it.",
            "Give what it is diluted from.",
        )
    meant = f"one part in {format_number(parts)} parts in total, by volume"
    return parts, (*stock.notes, meant)


def _density_of(conc: Concentration, asked: Asked) -> tuple[float | None, tuple[str, ...]]:
    """The density of so many mol/dm³: the one given, else where its table comes to as many."""
    if asked.density is not None:
        return asked.density, figures_of(asked.stuff, asked.density)[-1:]
    table = tabulated(asked.stuff)
    if not table:
        return None, ()
    from stockroom.chemistry.densities import density_at, in_words, percent_ww_for

    mass = asked.stuff.molar_mass
    if conc.unit == PER_MOLE:
        percent = percent_ww_for(table, molar=conc.value, molar_mass=mass)
    else:
        percent = percent_ww_for(table, grams_per_dm3=conc.value)
    found = density_at(table, percent)
    return found.value, (in_words(found),)


def _shown(value: float, to: str, target: Strength) -> str:
    if target.unit is StrengthUnit.PARTS:
        stock = f" of {target.part_of.text}" if target.part_of else ""
        return f"1 in {format_number(value)}{stock}"
    return f"{format_number(value)} {to}"


def _counts_mass(strength: Strength, target: Strength) -> bool:
    """Did the molar mass take part? Then it is shown."""
    in_moles = {StrengthUnit.MOLAR, StrengthUnit.VOL, StrengthUnit.NORMAL}
    return not {strength.unit, target.unit} <= in_moles
