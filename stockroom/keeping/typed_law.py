"""A law typed in, with its figures in any units, and how a typed strength fades by it."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from datetime import date

from stockroom.chemistry.strength import canonical
from stockroom.errors import BadAmount, BadInput
from stockroom.keeping import hypochlorite
from stockroom.keeping.arrhenius import ea_of, q10_of
from stockroom.keeping.laws import (
    DAYS_PER_MONTH,
    FACTORS,
    Kinetics,
    check_law,
    days_to_part,
    days_until,
    first_below,
    kinetics,
    strength_after,
    warmth,
)
from stockroom.keeping.logger_file import COLDEST_C, WARMEST_C
from stockroom.keeping.rules import Law
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import NUMBER, read_number, tidy
from stockroom.measure.strengths import Strength

DAYS_PER = {
    "second": 1 / 86_400,
    "minute": 1 / 1440,
    "hour": 1 / 24,
    "day": 1.0,
    "week": 7.0,
    "month": DAYS_PER_MONTH,
    "year": 12 * DAYS_PER_MONTH,
}
_SHORT = {"s": "second", "sec": "second", "min": "minute", "h": "hour", "hr": "hour"}
_SHORT |= {"d": "day", "wk": "week", "mo": "month", "y": "year", "yr": "year"}
# beyond any unit's: a slip in the zeros, and too long to print
_FASTEST = 1e15
_DURATION = re.compile(rf"(?P<number>{NUMBER}) ?(?P<unit>[a-z]+)\.?", re.IGNORECASE)
# g/mol, so that 12 % w/v of it can be told in mol/dm³; source: formula mass, see `formula.py`
_NAOCL = 74.442


@dataclass(frozen=True, slots=True)
class Typed:
    """A law as typed, each figure None or "" where it was not given.

    `rate` is per `per`; the rate of order 0 and 2 is in the unit of the strength.
    `at_c` is the temperature of the rate, `to_c` the one it stands at.
    """

    order: int | None = None
    rate: float | None = None
    per: str = "day"
    at_c: float | None = None
    to_c: float | None = None
    energy: float | None = None
    factor: float | None = None
    named: str = ""


@dataclass(frozen=True, slots=True)
class FadingSum:
    """How a typed strength fades where it stands; times in days, inf for never.

    `rate` is per `per`, in `rate_of` for order 0 and 2; `times` how much faster it is
    than at the law's own temperature. `energy` and `factor` (per 10 °C, between the two
    temperatures or over the next ten degrees) are one told by the other. `after` is
    (days, strength left), `below` (strength as typed, days, first day it is below).
    """

    strength: Strength
    law: Law
    here_c: float | None
    order: int
    rate: float
    per: str
    rate_of: str
    times: float
    t90: float
    half: float
    energy: float | None = None
    factor: float | None = None
    after: tuple[float, float] | None = None
    below: tuple[str, float, date | None] | None = None
    doubts: tuple[str, ...] = ()


def fading_sum(
    text: str, typed: Typed, *, below: str = "", after: str = "", today: date
) -> FadingSum:
    """The course of a typed strength under a typed law, from `today` on.

    Raises: BadInput for a law that is none or wants a figure; BadAmount for strengths
    that cannot be read.
    """
    strength, law = _read(text, "strength"), law_typed(typed)
    here = typed.at_c if typed.to_c is None else typed.to_c
    start = _in_law_unit(strength, law)
    settled, times = kinetics(law, start), warmth(law, here)
    there = Kinetics(settled.order, settled.rate * times)
    found = FadingSum(
        strength=strength,
        law=law,
        here_c=here,
        order=settled.order,
        rate=there.rate * DAYS_PER[_unit(typed.per)],
        per=_unit(typed.per),
        rate_of=hypochlorite.UNIT if law.named else str(strength.unit),
        times=times,
        t90=days_to_part(start, 0.9, there),
        half=days_to_part(start, 0.5, there),
        doubts=hypochlorite.doubts(start, None, here, here) if law.named else (),
    )
    found = _with_both(found)
    found = _with_below(found, there, start, below, today) if below else found
    return _with_after(found, there, start, after) if after else found


def law_typed(typed: Typed) -> Law:
    """The law of figures as typed, its rate turned to days. Raises: BadInput, BadAmount."""
    _check_places(typed)
    if typed.named:
        return _named(typed)
    if typed.order is None or typed.rate is None:
        wanted = "--order" if typed.order is None else "--rate"
        other = f"--rate {typed.rate:g}" if typed.order is None else f"--order {typed.order}"
        said = other if typed.rate is not None or typed.order is not None else "neither"
        raise BadInput(
            f"A law wants its {wanted}: {said} was said.", "As --order 2 --rate 0.0090 --per month."
        )
    warmed = typed.factor is not None or typed.energy is not None
    if warmed and typed.at_c is None:
        raise BadInput(
            f"At how many °C is the rate {typed.rate:g} per {typed.per}?",
            "Add --at, as --at 20.",
        )
    if typed.to_c is not None and not warmed:
        raise BadInput(
            f"The rate at {typed.at_c or 0:g} °C says nothing of {typed.to_c:g} °C by itself.",
            "Add --ea in kJ/mol, or --factor per 10 °C.",
        )
    least, most = FACTORS
    if typed.factor is not None and not least <= typed.factor <= most:
        raise BadAmount(
            f"A factor of {typed.factor:g} per 10 °C is not between {least:g} and {most:g}.",
            "How many times faster in a place 10 °C warmer, as 2.5?",
        )
    if typed.rate > 0 and not 1 / _FASTEST <= typed.rate <= _FASTEST:
        raise BadAmount(f"A rate of {typed.rate:g} is no figure of a law.", "Check its zeros.")
    rate = typed.rate / DAYS_PER[_unit(typed.per)]
    return check_law(Law(typed.order, rate, typed.at_c, typed.factor, typed.energy))


def _check_places(typed: Typed) -> None:
    for name, figure in (("--at", typed.at_c), ("--to", typed.to_c)):
        if figure is not None and not COLDEST_C <= figure <= WARMEST_C:
            raise BadAmount(
                f"{name} {figure:g} °C is not between {COLDEST_C:g} and {WARMEST_C:g}.",
                "In °C, and not in kelvin or °F?",
            )


def _named(typed: Typed) -> Law:
    given = {"--order": typed.order, "--rate": typed.rate, "--ea": typed.energy}
    law = check_law(Law(2, 0.0, typed.at_c, named=typed.named.lower()))
    extra = [name for name, figure in (given | {"--factor": typed.factor}).items() if figure]
    if extra:
        raise BadInput(
            f"The {typed.named} law brings its own figures: leave {', '.join(extra)} out.",
            "It wants only --at, the temperature.",
        )
    if typed.at_c is None and typed.to_c is None:
        raise BadInput(
            f"At how many °C does it stand, by the {typed.named} law?", "Add --at, as --at 20."
        )
    return law


def _unit(name: str) -> str:
    word = name.strip().lower()
    word = _SHORT.get(word, word.removesuffix("s"))
    if word not in DAYS_PER:
        raise BadInput(f'"{name}" is no unit of time.', f"Use {', '.join(DAYS_PER)}.")
    return word


def days_of(text: str, where: str) -> float:
    """A length of time as typed, in days: "90 d", "6 h"; a month is 30.4375. Raises: BadInput."""
    match = _DURATION.fullmatch(tidy(text))
    if match is None:
        raise BadInput(f'{where} "{text}" is no length of time.', 'Write it as "90 days".')
    return (
        float(read_number(match["number"], where=where, whole=text))
        * DAYS_PER[_unit(match["unit"])]
    )


def _read(text: str, where: str) -> Strength:
    strength = parse_strength(text, where=where)
    if strength.value <= 0:
        raise BadAmount(f'{where} "{text}" is nothing to fade.', "Give a strength above 0.")
    return strength


def _in_law_unit(strength: Strength, law: Law) -> float:
    """The strength as typed; for the hypochlorite law in mol/dm³."""
    if not law.named:
        return strength.value
    return canonical(strength, molar_mass=_NAOCL, of="sodium hypochlorite").value


def _with_both(found: FadingSum) -> FadingSum:
    law = found.law
    if law.at_c is None or law.named:
        return found
    # over the stretch asked about, else over the next ten degrees, as printed factors are
    apart = found.here_c if found.here_c not in (None, law.at_c) else None
    energy, factor = law.ea_kj_mol, law.factor_per_10c
    if energy is not None:
        factor = q10_of(energy, law.at_c, apart)
    elif factor is not None:
        energy = ea_of(factor, law.at_c, apart)
    return replace(found, energy=energy, factor=factor)


def _with_below(
    found: FadingSum, there: Kinetics, start: float, text: str, today: date
) -> FadingSum:
    asked = _read(text, "--below")
    lowest = asked.value
    if found.law.named or asked.unit is not found.strength.unit:
        # the other unit is a fixed multiple only where both can be told in mol/dm³
        if not found.law.named:
            raise BadAmount(
                f'"{asked.text}" cannot be set beside "{found.strength.text}" without a substance.',
                f"Give --below in {found.strength.unit}.",
            )
        lowest = _in_law_unit(asked, found.law)
    first = first_below(
        lambda day: strength_after(start, there, float((day - today).days)), lowest, today
    )
    return replace(found, below=(asked.text, days_until(start, lowest, there), first))


def _with_after(found: FadingSum, there: Kinetics, start: float, text: str) -> FadingSum:
    days = days_of(text, "--after")
    left = strength_after(start, there, days) / start * found.strength.value
    return replace(found, after=(days, left))
