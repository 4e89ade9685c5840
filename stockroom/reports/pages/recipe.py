"""Recipes as pages: the list, and one with its lines, bars, swaps, versions and bookings."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from stockroom.measure.days import format_time
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Booking, Facts, Firmness, Recipe
from stockroom.planning.making.make_card import goes_of
from stockroom.planning.never_kept import dangers_of
from stockroom.planning.ready import readiness
from stockroom.planning.spare import RecipeSpare
from stockroom.reports.pages.recipe_lines import Line, changes_between, lines_of
from stockroom.reports.paper.day_notes import NO_REFERENCE
from stockroom.reports.spare_text import advice
from stockroom.reports.words import counted, day_heading, raised
from stockroom.safety.cautions import Step, cautions_about

_AHEAD = (Firmness.PENCILLED, Firmness.FIRM)


@dataclass(frozen=True, slots=True)
class Listed:
    """One recipe in the list: its next booking and that one's day, "" for none this term."""

    code: str
    title: str
    lines: tuple[str, ...]
    booking: str
    on: str


@dataclass(frozen=True, slots=True)
class Recipes:
    """The recipes that hold every word of `what`, of so many there are."""

    what: str
    rows: tuple[Listed, ...]
    many: int


@dataclass(frozen=True, slots=True)
class Swapped:
    """What may stand in for a line: how much of it, where a factor is known, and a note."""

    line: str
    instead: str
    conversion: str
    note: str


@dataclass(frozen=True, slots=True)
class Version:
    """A version: what changed in it since the one before, a sentence each."""

    number: int
    changed: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Ahead:
    """A booking still to come, and whether all it needs is there as things stand."""

    number: str
    on: str
    groups: str
    department: str
    firmness: str
    version: int
    ready: str


@dataclass(frozen=True, slots=True)
class Page:
    """One version of a recipe. `newest` is the number of the latest one.

    `at_bench` and `after` are cautions and words, each at its step; `assessment` is the local
    reference, `uncovered` what is wrong with it, "" for nothing. `spare` is what classes
    drew in one sentence, "" where nothing was drawn.
    """

    code: str
    title: str
    version: int
    newest: int
    lines: tuple[Line, ...]
    bars: tuple[tuple[str, str], ...]
    swaps: tuple[Swapped, ...]
    handling: str
    at_bench: tuple[str, ...]
    after: tuple[str, ...]
    assessment: str
    uncovered: str
    versions: tuple[Version, ...]
    ahead: tuple[Ahead, ...]
    through: str
    spare: str


def recipes_page(known: Facts, what: str = "") -> Recipes:
    """Every recipe in its newest version, by code, that has all the words in code, title or line.

    Case does not count, and a word may be the beginning or a part of another.
    """
    newest = {code: one for (code, _), one in sorted(known.recipes.items())}
    words = raised(what).casefold().split()
    found = [one for one in newest.values() if _holds(known, one, words)]
    ahead = _bookings_ahead(known)
    rows = tuple(_listed(one, ahead.get(one.code, [])) for one in found)
    return Recipes(what.strip(), rows, len(newest))


def recipe_page(known: Facts, plan: Plan, recipe: Recipe, spare: RecipeSpare | None) -> Page:
    """One version of a recipe, with the bookings of any version still to come this term."""
    versions = sorted(
        (one for (code, _), one in known.recipes.items() if code == recipe.code),
        key=lambda one: one.version,
    )
    return Page(
        code=recipe.code,
        title=raised(recipe.title),
        version=recipe.version,
        newest=versions[-1].version,
        lines=lines_of(known, recipe),
        bars=tuple((raised(bar.substance), raised(bar.reason)) for bar in recipe.bars),
        swaps=tuple(_swaps(recipe)),
        handling=raised(recipe.handling),
        at_bench=(*_dangers(known, recipe), *_cautions(known, recipe, Step.USE)),
        after=tuple(_after(known, recipe)),
        assessment=raised(recipe.assessment),
        uncovered="" if recipe.assessment else NO_REFERENCE,
        versions=tuple(_versions(known, versions)),
        ahead=tuple(_ahead(known, plan, recipe)),
        through=day_heading(known.end),
        spare=advice(spare) if spare is not None and spare.lines else "",
    )


def _holds(known: Facts, recipe: Recipe, words: Sequence[str]) -> bool:
    things = [known.lines[each.line] for each in recipe.requirements]
    names = [name for line in things for name in (line.key, line.substance)]
    text = raised(" ".join([recipe.code, recipe.title, *names])).casefold()
    return all(word in text for word in words)


def _bookings_ahead(known: Facts) -> dict[str, list[Booking]]:
    found: dict[str, list[Booking]] = {}
    for booking in sorted(known.bookings, key=lambda one: (one.on, one.minute, one.number)):
        if booking.on >= known.as_at and booking.firmness in _AHEAD:
            found.setdefault(booking.recipe, []).append(booking)
    return found


def _listed(recipe: Recipe, ahead: Sequence[Booking]) -> Listed:
    lines = dict.fromkeys(raised(each.line) for each in recipe.requirements)
    number, on = (ahead[0].number, day_heading(ahead[0].on)) if ahead else ("", "")
    return Listed(recipe.code, raised(recipe.title), tuple(lines), number, on)


def _swaps(recipe: Recipe) -> Iterator[Swapped]:
    for swap in recipe.swaps:
        times = "" if swap.factor is None else f"mass × {swap.factor:g}"
        yield Swapped(raised(swap.line), raised(swap.instead), times, raised(swap.note))


def _cautions(known: Facts, recipe: Recipe, step: Step) -> Iterator[str]:
    """The usual cautions of a step for what this recipe uses, unless its own words say them."""
    said = (recipe.handling, recipe.never_kept, recipe.waste)
    items: dict[tuple[int, str], list[str]] = {}
    for need in recipe.requirements:
        line = known.lines[need.line]
        for caution in cautions_about([goes_of(line)], said=said, steps=(step,)):
            # no container takes what is never kept before it is destroyed; what it then is, and
            # where it goes, its recipe knows best
            if recipe.never_kept and caution.collects and recipe.waste:
                continue
            first = "once destroyed: " if recipe.never_kept and caution.collects else ""
            items.setdefault((caution.number, f"{first}{caution.text}"), []).append(line.item)
    for (_, text), names in sorted(items.items()):
        yield raised(f"{', '.join(dict.fromkeys(names))}: {text}")


def _dangers(known: Facts, recipe: Recipe) -> tuple[str, ...]:
    lines = [known.lines[each.line] for each in recipe.requirements]
    why = dangers_of(recipe.never_kept, recipe, lines) if recipe.never_kept else ()
    return tuple(raised(each) for each in why)


def _after(known: Facts, recipe: Recipe) -> Iterator[str]:
    yield from _dangers(known, recipe)
    if recipe.never_kept:
        yield raised(f"Never kept: {recipe.never_kept}")
    if recipe.waste:
        yield raised(recipe.waste)
    yield from _cautions(known, recipe, Step.WASTE)


def _versions(known: Facts, versions: Sequence[Recipe]) -> Iterable[Version]:
    before = (None, *versions)
    rows = [Version(one.version, changes_between(known, old, one))
            for old, one in zip(before, versions, strict=False)]  # fmt: skip
    return reversed(rows)


def _ahead(known: Facts, plan: Plan, recipe: Recipe) -> Iterator[Ahead]:
    for booking in _bookings_ahead(known).get(recipe.code, ()):
        found = readiness(known, plan, (booking.number,), recipe.title, booking.on)
        to_do = counted(len(found.to_do), "thing")
        spare = f" + {booking.spare / 10:g} %" if booking.spare else ""
        yield Ahead(
            booking.number,
            f"{day_heading(booking.on)}, {format_time(booking.minute)}",
            f"{counted(booking.groups, 'group')}{spare}",
            booking.department,
            str(booking.firmness),
            booking.version,
            "yes" if found.ready else f"not yet: {to_do} to do",
        )
