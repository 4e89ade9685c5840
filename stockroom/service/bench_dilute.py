"""Bench sum: what to take of something stronger, a strength or a bottle at what it should hold."""

from __future__ import annotations

import re
from datetime import date
from difflib import get_close_matches
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom.chemistry.making import volume_of_stock
from stockroom.chemistry.strength import Concentration
from stockroom.errors import BadInput, MissingFigure, NotAllowed, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_number, format_strength
from stockroom.service.bench import (
    Sum,
    canonical_of,
    caution_of,
    cm3,
    cubic_of,
    density_for,
    figures_of,
    strength_of,
)
from stockroom.service.bench_names import Stuff, house_lines, of_line, solute

if TYPE_CHECKING:
    from stockroom.planning.facts import Bottle, Facts

_SAME = 1e-9  # two routes to one strength differ in the last bits


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
    cubic = cubic_of(volume)
    if not source:
        raise BadInput(f"{text} is diluted from what?", 'Add --from "91 vol", or --from B01.')
    if store and re.fullmatch(r"[BbSs]\d+[a-z]?", source):
        return _from_bottle(cubic, text, source.upper()[0] + source[1:], store, as_at)
    lines = house_lines(store)
    stuff = solute(of, lines) if of else _guessed(text, source)
    strong = strength_of(source, stuff)
    density, assumed = density_for(density, strong, stuff, lines)
    figures = figures_of(stuff, density, assumed)
    return _diluted(cubic, text, canonical_of(strong, stuff, density), source, stuff, figures)


def _diluted(
    cubic: float,
    text: str,
    stock: Concentration,
    source: str,
    stuff: Stuff,
    figures: tuple[str, ...],
) -> Sum:
    strength = strength_of(text, stuff)
    wanted = canonical_of(strength, stuff, None)
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
    answer = f"{cm3(taken)} of {source} {stuff.name}".strip() + f", made up to {cm3(cubic)}"
    comes_to = f"{source} is {format_strength(stock.value, stock.unit)}"
    return Sum(answer, taken, "cm3", (comes_to, *figures, *caution_of(stuff)))


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
    answer = _diluted(cubic, text, stock, number, stuff, figures_of(stuff, None))
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
