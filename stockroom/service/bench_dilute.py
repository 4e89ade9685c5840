"""Bench sum: what to take of something stronger, a strength or a bottle at what it should hold.

A solution of so much per volume is made up to its mark, so no volumes are added. Where two
are mixed, where ethanol meets water and where per cents by mass are asked for, the ways of
`bench_mixing.py` say what adds and what does not.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date
from difflib import get_close_matches
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom.chemistry.ethanol import is_ethanol
from stockroom.chemistry.making import volume_of_stock
from stockroom.chemistry.mixing import part_in
from stockroom.errors import BadInput, NotAllowed, UnknownName
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.strengths import StrengthUnit
from stockroom.safety.cautions import HOUSE_LINE
from stockroom.service import bench_mixing as mixing
from stockroom.service.bench import Sum, caution_of, cm3, conventions_of, cubic_of
from stockroom.service.bench_held import Held, Task, from_bottle, from_text
from stockroom.service.bench_known import Asked
from stockroom.service.bench_names import Stuff, house_lines, of_line, solute

if TYPE_CHECKING:
    from stockroom.planning.facts import Bottle, Facts

_SAME = 1e-9  # two routes to one strength differ in the last bits
_BOTTLE = re.compile(r"[BbSs]\d+[a-z]?")
_STRONG_INTO_WEAK = "! The stronger into the weaker, never the reverse."
_BY_THE_MARK = "made up to the mark: no volumes are added together"


def dilute(
    volume: Amount,
    text: str,
    *,
    source: str,
    second: str = "",
    of: str = "",
    density: float | None = None,
    store: Path | None = None,
    as_at: date | None = None,
) -> Sum:
    """What to take of `source`, and of `second` where two are mixed, for a volume of `text`.

    Each is a strength, "neat", or a bottle; a bottle counts at what it is expected to hold
    on the day, and says so. `density` in g/cm³ is the source's. A mass to make is answered
    by mass, from strengths in per cent by mass.
    Raises: BadInput, UnknownName, MissingFigure; NotAllowed when it cannot be reached.
    """
    if not source:
        raise BadInput(f"{text} is diluted from what?", 'Add --from "91 vol", or --from B01.')
    if volume.kind is not Kind.MASS:
        cubic_of(volume)
    # the density given is the first one's: two solutions have two
    dense: dict[str, float | None] = {source: density}
    dense.setdefault(second, None)
    typed = [each for each in (source, second) if each]
    shelf = _shelf(dense, store, as_at)
    stuff = _stuff(of, [*typed, text], list(shelf.bottles.values()), shelf.lines)
    asked = Asked(stuff, tuple(shelf.lines))
    held = tuple(
        shelf.bottles.get(each) or from_text(each, replace(asked, density=dense[each]))
        for each in typed
    )
    task = Task(volume, from_text(text, asked), held, density)
    answer = _answer(task)
    words = (*answer.details, *_cautions(task))
    return Sum(answer.text, answer.value, answer.unit, words, shelf.practice)


def _answer(task: Task) -> Sum:
    strength = task.wanted.strength
    if strength.unit is StrengthUnit.PARTS and strength.part_of is None:
        return _part(task)
    if task.volume.kind is Kind.MASS:
        return mixing.by_mass(task)
    if is_ethanol(task.stuff.substance):
        return mixing.ethanol(task)
    return mixing.two(task) if len(task.held) > 1 else _one(task)


def _one(task: Task) -> Sum:
    (held,), cubic = task.held, task.volume.number
    unit, wanted, (stock,) = task.beside()
    # diluting never makes stronger; evaporating is no job for a bench sum
    if wanted > stock * (1 + _SAME):
        strength = task.wanted.strength
        shown = f"{format_number(strength.value * stock / wanted)} {strength.unit}"
        raise NotAllowed(
            f"Cannot reach {task.wanted.typed} from"
            f" {held.typed if held.typed == shown else f'{held.typed} ({shown})'}.",
            "Open a stronger bottle or lower the need.",
        )
    taken = volume_of_stock(cubic, wanted, stock, unit=unit)
    answer = f"{cm3(taken)} of {held.name}, made up to {cm3(cubic)}"
    return Sum(answer, taken, "cm3", (*task.words(), _BY_THE_MARK))


def _part(task: Task) -> Sum:
    """So many parts of the source in the total, whatever its strength is."""
    strength, (held, *more) = task.wanted.strength, task.held
    if more or task.volume.kind is Kind.MASS:
        raise BadInput(
            f"{strength.text} is a part of one source, by volume.",
            "Leave --with out, and give a volume.",
        )
    part, _ = part_in(task.volume.number, strength.value)
    answer = f"{cm3(part)} of {held.name}, made up to {cm3(task.volume.number)}"
    note = (f"{held.typed}: {held.note}",) if held.note else ()
    meant = conventions_of(strength, task.stuff)
    return Sum(answer, part, "cm3", (*meant, *_weaker(held, strength.value), *note, _BY_THE_MARK))


def _weaker(held: Held, parts: float) -> tuple[str, ...]:
    # a source without a number of its own, "saturated" or crude, is diluted all the same
    conc = held.found
    if conc is not None:
        return (f"it comes to {format_strength(conc.value / parts, conc.unit)}",)
    value = held.alike(held.strength)
    if value is None:
        return ()
    return (f"it comes to {format_strength(value / parts, held.strength.unit)}",)


def _cautions(task: Task) -> tuple[str, ...]:
    """The caution at this step and, under it, whose word comes first."""
    caution = caution_of(task.stuff)
    if caution and len(task.held) > 1:
        caution = (*caution, _STRONG_INTO_WEAK)
    return (*caution, HOUSE_LINE) if caution else ()


def _stuff(of: str, texts: Sequence[str], bottles: Sequence[Held], lines: list[Stuff]) -> Stuff:
    """What is dissolved: a bottle says its own, a name is looked up, "vol" says peroxide."""
    own = [held.asked.stuff for held in bottles]
    if len({stuff.substance for stuff in own}) > 1:
        raise NotAllowed(
            f"{' and '.join(stuff.name for stuff in own)} are different substances.",
            "Record what they make as a named mixture, or as waste.",
        )
    if own:
        return own[0]
    if of:
        return solute(of, lines)
    # without a name, "vol" can only be peroxide; anything else is compared as written
    if any(re.search(r"\bvols?\b", each) for each in texts):
        return solute("hydrogen peroxide", lines)
    return Stuff("", "", None, None)


@dataclass(frozen=True, slots=True)
class _Shelf:
    """The bottles that were named, one's own lines, and whether it is the practice store."""

    bottles: dict[str, Held]
    lines: list[Stuff]
    practice: bool = False


def _shelf(dense: Mapping[str, float | None], store: Path | None, as_at: date | None) -> _Shelf:
    numbers = [each for each in dense if _BOTTLE.fullmatch(each)]
    if not numbers or store is None:
        return _Shelf({}, house_lines(store))
    # loaded here: a sum without a bottle opens no store and needs no rules
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    known = facts(store, day_for(store, as_at))
    held = {}
    for number in numbers:
        bottle = _bottle(known, number[0].upper() + number[1:])
        held[number] = from_bottle(bottle, known.lines[bottle.line], known.as_at, dense[number])
    lines = [] if known.house.practice else [of_line(line) for line in known.lines.values()]
    return _Shelf(held, lines, known.house.practice)


def _bottle(known: Facts, number: str) -> Bottle:
    held = {bottle.number: bottle for bottle in known.bottles}
    if number in held:
        return held[number]
    near = ", ".join(get_close_matches(number, held, n=3, cutoff=0.3))
    raise UnknownName(
        f"No bottle {number!r} on {known.as_at}.", f"Nearest: {near}." if near else ""
    )
