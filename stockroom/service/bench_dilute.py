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

from stockroom.chemistry.making import volume_of_stock
from stockroom.chemistry.mixing import part_in
from stockroom.errors import BadAmount, BadInput, MissingFigure, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_number, format_strength, unit_mark
from stockroom.measure.strengths import StrengthUnit
from stockroom.service import bench_mixing as mixing
from stockroom.service.bench import Named, Sum, cm3, conventions_of, cubic_of, grams
from stockroom.service.bench_cautions import cautions_of
from stockroom.service.bench_held import Held, Task, from_bottle, from_text
from stockroom.service.bench_known import Asked
from stockroom.service.bench_measuring import measured
from stockroom.service.bench_names import Stuff, house_lines, of_line, solute
from stockroom.service.bench_tools import Minimum, Tools, tools_on
from stockroom.service.bottle_strength import bottle_among
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain

_SAME = 1e-9  # two routes to one strength differ in the last bits
_BOTTLE = re.compile(r"[BbSs]\d+[a-z]?")
_WATER = frozenset({"water", "distilled water", "deionised water"})
_NOTHING = re.compile(r"0(?:[.,]0*)? ?[^\d.,].*")
_BY_THE_MARK = "made up to the mark: no volumes are added together"


def dilute(
    volume: Amount,
    text: str,
    *,
    source: str,
    second: str = "",
    of: str = "",
    density: float | None = None,
    closeness: float = 0.05,
    store: StoreAt | None = None,
    as_at: date | None = None,
) -> Sum:
    """What to take of `source`, and of `second` where two are mixed, for a volume of `text`.

    Each is a strength, "neat", or a bottle; a bottle counts at what it is expected to hold
    on the day, and says so. `density` in g/cm³ is the source's. A mass to make is answered
    by mass, from strengths in per cent by mass. What is taken of one source is measured to
    the `closeness`, a fraction, with the glass of the house that is in on the day.
    Raises: BadInput, UnknownName, MissingFigure; NotAllowed when it cannot be reached.
    """
    if not source or _is_water(source):
        raise BadInput(f"{text} is diluted from what?", 'Add --from "91 vol", or --from B01.')
    # a second solution of nothing is the water there is without one
    second = "" if _is_water(second) or _NOTHING.fullmatch(second.strip()) else second
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
    already = _already(task)
    if already is not None:
        return replace(_as_it_stands(task, already), practice=shelf.practice)
    answer = replace(_answer(task), cautions=_cautions(task), practice=shelf.practice)
    answer = replace(answer, details=(*answer.details, *_density_unused(task)))
    if len(task.held) > 1 or volume.kind is Kind.MASS or mixing.shrinks(task):
        return answer
    tools = tools_on(store, as_at, step=None, minimum=Minimum())
    return _with_glass(answer, task, closeness, tools)


def _with_glass(answer: Sum, task: Task, closeness: float, tools: Tools) -> Sum:
    told, ways = measured(answer.value, task.volume.number, closeness, tools)
    practice = answer.practice or tools.practice
    return replace(answer, details=(*answer.details, *told), ways=ways, practice=practice)


def _is_water(text: str) -> bool:
    return " ".join(text.split()).casefold() in _WATER


def _already(task: Task) -> Held | None:
    """The source that is as strong as what is wanted, if one is."""
    return next((held for held in task.held if held.same_as(task.wanted)), None)


def _as_it_stands(task: Task, held: Held) -> Sum:
    whole, unit = task.volume.number, task.volume.unit
    amount = grams(whole) if task.volume.kind is Kind.MASS else cm3(whole)
    answer = f"{amount} of {held.name} as it stands: it is that strong already"
    note = (f"{held.typed}: {held.note}",) if held.note else ()
    return Sum(answer, whole, unit, note, amounts=(Named(held.name, whole, unit),))


def _density_unused(task: Task) -> tuple[str, ...]:
    held = task.held[0]
    if task.given is None or mixing.shrinks(task) or held.uses_density:
        return ()
    return (f"density {task.given:g} g/cm³ took no part",)


def _answer(task: Task) -> Sum:
    strength = task.wanted.strength
    if strength.unit is StrengthUnit.PARTS and strength.part_of is None:
        return _part(task)
    if task.volume.kind is Kind.MASS:
        return mixing.by_mass(task)
    if mixing.shrinks(task):
        return mixing.ethanol(task)
    return mixing.two(task) if len(task.held) > 1 else _one(task)


def _one(task: Task) -> Sum:
    (held,), cubic = task.held, task.volume.number
    unit, wanted, (stock,) = task.beside()
    # diluting never makes stronger; evaporating is no job for a bench sum
    if wanted > stock * (1 + _SAME):
        strength = task.wanted.strength
        shown = f"{format_number(strength.value * stock / wanted)} {unit_mark(strength.unit)}"
        typed = unit_mark(held.typed)
        alike = held.found is None and held.strength.unit is strength.unit
        raise NotAllowed(
            f"Cannot reach {unit_mark(task.wanted.typed)} from"
            f" {typed if alike else f'{typed} ({shown})'}.",
            "Open a stronger bottle or lower the need.",
        )
    taken = volume_of_stock(cubic, wanted, stock, unit=unit)
    return _to_the_mark(task, taken, task.words())


def _to_the_mark(task: Task, taken: float, details: tuple[str, ...]) -> Sum:
    held, cubic = task.held[0], task.volume.number
    answer = f"{cm3(taken)} of {held.name}, made up to {cm3(cubic)}"
    amounts = (Named(held.name or held.typed, taken, "cm3"), Named("made up to", cubic, "cm3"))
    return Sum(answer, taken, "cm3", (*details, _BY_THE_MARK), amounts=amounts)


def _part(task: Task) -> Sum:
    """So many parts of the source in the total, whatever its strength is."""
    strength, (held, *more) = task.wanted.strength, task.held
    if more or task.volume.kind is Kind.MASS:
        raise BadInput(
            f"{strength.text} is a part of one source, by volume.",
            "Leave --with out, and give a volume.",
        )
    part, _ = part_in(task.volume.number, strength.value)
    note = (f"{held.typed}: {held.note}",) if held.note else ()
    meant = conventions_of(strength, task.stuff)
    return _to_the_mark(task, part, (*meant, *_weaker(held, strength.value), *note))


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
    """The cautions at this step: those of the strongest that is poured."""
    mixed = len(task.held) > 1
    return cautions_of(
        task.stuff,
        solid=False,
        strong=lambda: any(held.strong for held in task.held),
        percent=lambda: max(map(_per_cent, task.held)),
        mixed=mixed,
        to_mark=not mixed and task.volume.kind is not Kind.MASS and not mixing.shrinks(task),
    )


def _per_cent(held: Held) -> float:
    """Its % w/w; where nothing is known that would tell, as if it were neat."""
    try:
        return 100.0 if held.neat else held.percent_ww()
    except (MissingFigure, BadAmount):
        return 100.0


def _stuff(of: str, texts: Sequence[str], bottles: Sequence[Held], lines: list[Stuff]) -> Stuff:
    """What is dissolved: a bottle says its own, a name is looked up, "vol" says peroxide."""
    own = [held.asked.stuff for held in bottles]
    if len({stuff.substance for stuff in own}) > 1:
        raise NotAllowed(
            f"{' and '.join(stuff.name for stuff in own)} are different substances.",
            "Record what they make as a named mixture, or as waste.",
        )
    if own:
        _refuse_other(of, own[0], bottles[0].typed, lines)
        return own[0]
    if of:
        return solute(of, lines)
    # without a name, "vol" can only be peroxide; anything else is compared as written
    if any(re.search(r"\bvols?\b", each) for each in texts):
        return solute("hydrogen peroxide", lines)
    return Stuff("", "", None, None)


def _refuse_other(of: str, own: Stuff, number: str, lines: list[Stuff]) -> None:
    # what was typed and then left out of the sum would be taken for a part of its answer
    if not of or not own.substance:
        return
    named = solute(of, lines)
    if plain(named.substance) != plain(own.substance):
        raise BadInput(
            f"{number} holds {own.substance}, and --of says {named.substance}.",
            "Leave --of out, or name another bottle.",
        )


@dataclass(frozen=True, slots=True)
class _Shelf:
    """The bottles that were named, one's own lines, and whether it is the practice store."""

    bottles: dict[str, Held]
    lines: list[Stuff]
    practice: bool = False


def _shelf(dense: Mapping[str, float | None], store: StoreAt | None, as_at: date | None) -> _Shelf:
    numbers = [each for each in dense if _BOTTLE.fullmatch(each)]
    if not numbers or store is None:
        return _Shelf({}, house_lines(store))
    # loaded here: a sum without a bottle opens no store and needs no rules
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    known = facts(store, day_for(store, as_at))
    held = {}
    for number in numbers:
        bottle = bottle_among(known, number)
        held[number] = from_bottle(bottle, known.lines[bottle.line], known.as_at, dense[number])
    lines = [] if known.house.practice else [of_line(line) for line in known.lines.values()]
    return _Shelf(held, lines, known.house.practice)
