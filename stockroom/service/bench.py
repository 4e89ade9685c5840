"""Bench sums: turn a strength, weigh for a solution, dilute a stronger one.

Every sum works with no store. Where there is one, the house's own lines come
before the built-in names, and `dilute` takes a bottle's expected strength.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date
from difflib import get_close_matches
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom.chemistry.making import mass_for, volume_of_stock
from stockroom.chemistry.peroxide import MOLAR_MASS, ask_vol
from stockroom.chemistry.strength import PER_MOLE, Concentration, canonical, express
from stockroom.chemistry.weighing import batch_to_weigh, least_weighable, relative_error
from stockroom.errors import BadAmount, BadInput, MissingFigure, NotAllowed, UnknownName
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service.bench_names import Stuff, density_of, house_lines, of_line, solid, solute

if TYPE_CHECKING:
    from stockroom.planning.facts import Bottle, Facts

_INTERMEDIATE = 10
"""An intermediate is made ten times as strong: one bulb pipette and one flask dilute it."""

_SAME = 1e-9  # two routes to one strength differ in the last bits

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


def convert(
    text: str, *, of: str, to: str, density: float | None = None, store: Path | None = None
) -> Sum:
    """The strength `text` of the substance `of` in the unit `to`.

    `density` in g/cm³ is the solution's, or the pure liquid's for % v/v.
    Raises: BadInput, UnknownName; MissingFigure naming the figure to read off the label.
    """
    lines = house_lines(store)
    stuff = solute(of, lines)
    strength = _strength(text, stuff)
    unit = parse_strength(f"1 {to}", where="--to")
    density, assumed = _density(density, strength, stuff, lines)
    conc = _canonical(strength, stuff, density)
    value = express(
        conc,
        unit.unit,
        molar_mass=stuff.molar_mass,
        density=density,
        pure_density=density,
        of=stuff.name,
    )
    value /= unit.value or 1.0  # "mM" is a thousandth of mol/dm3
    shown = f"{format_number(value)} {to}"
    return Sum(f"{text} {stuff.name} is {shown}", value, to, _figures(stuff, density, assumed))


def weigh(
    volume: Amount,
    text: str,
    *,
    of: str,
    assay_percent: float | None = None,
    step_g: float | None = None,
    closeness_percent: float = 5.0,
    density: float | None = None,
    store: Path | None = None,
) -> Sum:
    """The g to weigh of the form `of` for a volume of the strength `text`.

    `assay_percent` takes the place of the label's where given. With the balance's
    `step_g`, a mass too small for the closeness brings two offers: a larger batch,
    or ten times as strong and diluted. `density` in g/cm³ is the solution's, for % w/w.
    Raises: BadInput, UnknownName, MissingFigure.
    """
    lines = house_lines(store)
    stuff = solid(of, lines)
    assay = stuff.assay if assay_percent is None else _fraction(assay_percent)
    cubic = _cubic(volume)
    strength = _strength(text, stuff)
    density, assumed = _density(density, strength, stuff, lines)
    conc = _canonical(strength, stuff, density)
    # g/dm³ over a "molar mass" of 1 g/g is the same sum by mass
    unit_mass = stuff.molar_mass if conc.unit == PER_MOLE else 1.0
    if unit_mass is None:
        raise MissingFigure(
            f"{stuff.name}: no formula is held, so {text!r} cannot be weighed.",
            "Give --of its formula, or the strength in g/dm3 or % w/v.",
        )
    mass = mass_for(cubic, conc.value, molar_mass=unit_mass, assay=assay)
    answer = f"{_grams(mass)} of {stuff.name}, made up to {_cm3(cubic)}"
    used = (*_figures(stuff, density, assumed), f"assay {format_number(assay * 100)} %")
    offers = _offers(mass, cubic, step_g, closeness_percent / 100) if step_g else ()
    return Sum(answer, mass, "g", (*used, *offers, *_caution(stuff)))


def dilute(
    volume: Amount,
    text: str,
    *,
    source: str,
    of: str = "",
    density: float | None = None,
    store: Path | None = None,
    as_at: date | None = None,
) -> Sum:
    """The cm³ of `source` (a strength or a bottle) to make up to a volume of `text`.

    A bottle counts at what it is expected to hold on the day, and says so.
    Raises: BadInput, UnknownName, MissingFigure; NotAllowed when it is not strong enough.
    """
    cubic = _cubic(volume)
    if not source:
        raise BadInput(f"{text} is diluted from what?", 'Add --from "91 vol", or --from B01.')
    if store and re.fullmatch(r"[BbSs]\d+[a-z]?", source):
        return _from_bottle(cubic, text, source.upper()[0] + source[1:], store, as_at)
    lines = house_lines(store)
    stuff = solute(of, lines) if of else _guessed(text, source)
    strong = _strength(source, stuff)
    density, assumed = _density(density, strong, stuff, lines)
    figures = _figures(stuff, density, assumed)
    return _diluted(cubic, text, _canonical(strong, stuff, density), source, stuff, figures)


def _diluted(
    cubic: float,
    text: str,
    stock: Concentration,
    source: str,
    stuff: Stuff,
    figures: tuple[str, ...],
) -> Sum:
    strength = _strength(text, stuff)
    wanted = _canonical(strength, stuff, None)
    if wanted.unit != stock.unit:
        raise MissingFigure(
            f"{text} and {source} cannot be compared without a molar mass.",
            "Add --of with the name or the formula.",
        )
    # diluting never makes stronger; evaporating is no job for a bench sum
    if wanted.value > stock.value * (1 + _SAME):
        held = f"{format_number(strength.value * stock.value / wanted.value)} {strength.unit}"
        raise NotAllowed(
            f"Cannot reach {text} from {source if source == held else f'{source} ({held})'}.",
            "Open a stronger bottle or lower the need.",
        )
    taken = volume_of_stock(cubic, wanted.value, stock.value, unit=stock.unit)
    answer = f"{_cm3(taken)} of {source} {stuff.name}".strip() + f", made up to {_cm3(cubic)}"
    comes_to = f"{source} is {format_strength(stock.value, stock.unit)}"
    return Sum(answer, taken, "cm3", (comes_to, *figures, *_caution(stuff)))


def _from_bottle(cubic: float, text: str, number: str, store: Path, as_at: date | None) -> Sum:
    # loaded here: a sum without a bottle opens no store and needs no rules
    from stockroom.keeping.verdict import verdict
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    on = day_for(store, as_at)
    known = facts(store, on)
    bottle = _bottle(known, number)
    line = known.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, on)
    expected = judged.strengths.expected
    if expected is None:
        raise MissingFigure(f"{number} has no strength to dilute from.", "Titrate it first.")
    stock = Concentration(expected, line.unit)
    stuff = of_line(line)
    answer = _diluted(cubic, text, stock, number, stuff, _figures(stuff, None))
    basis = f"expected on {on} from its {judged.strengths.basis} strength; {judged.condition}"
    return Sum(
        answer.text,
        answer.value,
        answer.unit,
        (f"{answer.details[0]}, {basis}", *answer.details[1:]),
        known.house.practice,
    )


def _bottle(known: Facts, number: str) -> Bottle:
    held = {bottle.number: bottle for bottle in known.bottles}
    if number in held:
        return held[number]
    near = ", ".join(get_close_matches(number, held, n=3, cutoff=0.3))
    raise UnknownName(
        f"No bottle {number!r} on {known.as_at}.", f"Nearest: {near}." if near else ""
    )


def _guessed(text: str, source: str) -> Stuff:
    """Without a name, "vol" can only be peroxide; anything else is compared as written."""
    if any(re.search(r"\bvols?\b", each) for each in (text, source)):
        return solute("hydrogen peroxide")
    return Stuff("", "", None, None)


def _strength(text: str, stuff: Stuff) -> Strength:
    # a bare number is asked about here, where the likely answer is known
    bare = re.fullmatch(r"\s*[\d.,]+\s*%?\s*", text)
    if bare and stuff.molar_mass and abs(stuff.molar_mass - MOLAR_MASS) < 0.1:
        raise ask_vol(text)
    strength = parse_strength(text)
    if strength.unit is not StrengthUnit.SATURATED and strength.value <= 0:
        raise BadAmount(f"strength {text!r} is nothing at all.", "Give a strength above 0.")
    return strength


def _canonical(strength: Strength, stuff: Stuff, density: float | None) -> Concentration:
    return canonical(
        strength,
        molar_mass=stuff.molar_mass,
        density=density,
        pure_density=density,
        of=stuff.name,
    )


def _density(
    given: float | None, strength: Strength, stuff: Stuff, lines: list[Stuff]
) -> tuple[float | None, str]:
    """The density to use, and whose it is where nobody gave it."""
    if given is not None or strength.unit is not StrengthUnit.WW:
        return given, ""
    found = density_of(strength.value, stuff, lines)
    return found, f"assumed, that of {stuff.substance} {strength.text}" if found else ""


def _fraction(assay_percent: float) -> float:
    if not 0 < assay_percent <= 100:
        raise BadInput(
            f"assay {assay_percent:g} % is not above 0 and at most 100.", "Read it again."
        )
    return assay_percent / 100


def _cubic(volume: Amount) -> float:
    if volume.kind is not Kind.VOLUME or volume.micro <= 0:
        raise BadAmount(
            f"{format_number(volume.number)} {volume.unit} is not a volume to make.",
            "Give it in cm3 or dm3, above 0.",
        )
    return volume.number


def _offers(mass: float, cubic: float, step: float, closeness: float) -> tuple[str, ...]:
    error = f"±{100 * relative_error(step, mass):.2g} %"
    least = least_weighable(step, closeness)
    if mass >= least:
        return (f"one step of the balance, {step:g} g, is {error} of it",)
    # both ways out are offered, since which wastes less depends on what keeps
    weighed, batch = batch_to_weigh(mass, cubic, least)
    flask = batch / _INTERMEDIATE
    part = cubic / _INTERMEDIATE
    return (
        f"too little for a {step:g} g balance: one step is {error}, wanted ±{100 * closeness:g} %",
        f"either {_grams(weighed)} made up to {_cm3(batch)}",
        f"or {_grams(weighed)} made up to {_cm3(flask)}, and {_cm3(part)} of that to {_cm3(cubic)}",
    )


def _figures(stuff: Stuff, density: float | None, assumed: str = "") -> tuple[str, ...]:
    mass = f"molar mass {stuff.molar_mass:.2f} g/mol" if stuff.molar_mass else ""
    dense = f"density {format_number(density)} g/cm³" if density else ""
    # a figure nobody gave must be seen to be one: the label may say another
    dense += f" ({assumed}; give --density off the label)" if assumed else ""
    return tuple(figure for figure in (mass, dense) if figure)


def _caution(stuff: Stuff) -> tuple[str, ...]:
    caution = _CAUTIONS.get(stuff.storage_group)
    return (f"! {caution}",) if caution else ()


def _grams(mass: float) -> str:
    return f"{format_number(mass)} g"


def _cm3(cubic: float) -> str:
    return f"{format_number(cubic)} cm³"
