"""What is in a line: its solute at the highest strength, and what its method puts beside it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.amounts import Kind
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Form, Ingredient, Line, Method
from stockroom.safety.hazards import Content
from stockroom.service.bench_names import Stuff, of_line
from stockroom.service.hazard_strengths import (
    by_mass,
    by_volume,
    dry,
    from_volume,
    grams_per_dm3,
    least_density,
    over_least,
)

UNKNOWN_STRENGTH = "its strength is not known: taken as undiluted, the safer side"

_DEEPEST = 6
_MICRO = 1e6


@dataclass(frozen=True, slots=True)
class Part:
    """So many per cent by mass of a substance, without crystal water; `stuff` is its form."""

    stuff: Stuff
    percent: float
    note: str = ""

    @property
    def content(self) -> Content:
        """The same as a value for whoever prints it."""
        return Content(self.stuff.substance or self.stuff.name, self.percent, self.note)


@dataclass(frozen=True, slots=True)
class Recipes:
    """The lines of a house and how they are made, by key."""

    lines: Mapping[str, Line]
    methods: Mapping[str, Method]


def parts_of(line: Line, strength: Strength | None, recipes: Recipes) -> tuple[Part, ...]:
    """What a line holds, each at the most it could be.

    A solid or a neat liquid is itself, whole. Raises: MissingFigure where a strength
    cannot be turned into a per cent.
    """
    stuff = of_line(line)
    if line.form in (Form.SOLID, Form.SUNDRY) or (line.form is Form.LIQUID and strength is None):
        return (Part(stuff, 100.0),)
    try:
        own = _solute(stuff, strength)
    except MissingFigure as missing:
        # no formula, no per cent of it: what went in is told all the same
        stated = _beside(line, recipes, set())
        if stated:
            return tuple(stated)
        if strength is None or strength.unit is not StrengthUnit.SATURATED:
            raise
        return (Part(stuff, 100.0, f"{UNKNOWN_STRENGTH}. {missing.message}"),)
    if own is None:
        return tuple(_beside(line, recipes, set())) or (Part(stuff, 100.0, UNKNOWN_STRENGTH),)
    return tuple(_with_own(own, strength, line, recipes))


def _with_own(own: Part, strength: Strength | None, line: Line, recipes: Recipes) -> list[Part]:
    """The solute first, and what the method puts beside it, all in the one solution."""
    grams = _added_up(line, recipes, {_name(own.stuff)})
    if not grams:
        return [own]
    # a label that counts by volume gives its grams; the others say the per cent themselves
    much = by_volume(strength, own.stuff) if strength else None
    held = [*grams, *([(own.stuff, much)] if much else [])]
    beside = _shared(grams, least_density(held))
    if much is None:
        return [own, *beside]
    (again,) = _shared([(own.stuff, much)], least_density(held))
    return [max(own, again, key=lambda part: part.percent), *beside]


def one(stuff: Stuff, strength: Strength | None) -> Part:
    """A substance at a strength, or as it is where none is given.

    Raises: MissingFigure where the strength cannot be turned into a per cent, and for a
    saturated solution of what nobody knows the solubility of.
    """
    if strength is None:
        return Part(stuff, 100.0)
    return _solute(stuff, strength) or Part(stuff, 100.0, UNKNOWN_STRENGTH)


def _solute(stuff: Stuff, strength: Strength | None) -> Part | None:
    # "1 in 10" says nothing by itself; the method says one part of what
    if strength is None or (strength.unit is StrengthUnit.PARTS and not strength.part_of):
        return None
    found = by_mass(strength, stuff)
    return Part(stuff, dry(found.percent, stuff), found.note)


def _beside(line: Line, recipes: Recipes, known: set[str]) -> list[Part]:
    grams = _added_up(line, recipes, known)
    if len(grams) == 1 and not known:
        ((stuff, much),) = grams
        found = from_volume(much, stuff)
        return [Part(stuff, dry(found.percent, stuff), found.note)]
    return _shared(grams, least_density(grams))


def _added_up(line: Line, recipes: Recipes, known: set[str]) -> list[tuple[Stuff, float]]:
    """The g/dm³ of each substance but those known, whichever ingredients bring it."""
    grams: dict[str, tuple[Stuff, float]] = {}
    for stuff, much in _grams(line, recipes, _DEEPEST):
        if much and _name(stuff) not in known:
            before = grams.get(_name(stuff), (stuff, 0.0))[1]
            grams[_name(stuff)] = (stuff, before + much)
    return list(grams.values())


def _shared(grams: list[tuple[Stuff, float]], density: float) -> list[Part]:
    """The parts of one solution, over the least density it could have."""
    words = over_least(density)
    return [
        Part(stuff, dry(min(100.0, much / 10.0 / density), stuff), words) for stuff, much in grams
    ]


def _name(stuff: Stuff) -> str:
    # two bought things without a substance are two things
    return stuff.substance or stuff.name


def _grams(line: Line, recipes: Recipes, deep: int) -> list[tuple[Stuff, float]]:
    """The g/dm³ of everything a line's method states an amount of."""
    method = recipes.methods.get(line.key)
    if method is None or not deep:
        return []
    return [
        (stuff, much)
        for ingredient in method.ingredients
        if ingredient.per_dm3 is not None
        for stuff, much in _from(ingredient, recipes, deep - 1)
    ]


def _from(ingredient: Ingredient, recipes: Recipes, deep: int) -> list[tuple[Stuff, float]]:
    held = recipes.lines.get(ingredient.lines[0])
    if held is None or ingredient.per_dm3 is None:
        return []
    # g for what is weighed, dm³ for what is measured
    much = ingredient.per_dm3 / _MICRO
    stuff = of_line(held)
    if held.kind is Kind.MASS:
        return [(stuff, much)]
    return [(each, much * grams) for each, grams in _per_dm3(held, stuff, recipes, deep)]


def _per_dm3(line: Line, stuff: Stuff, recipes: Recipes, deep: int) -> list[tuple[Stuff, float]]:
    beside = _grams(line, recipes, deep)
    own = _own_grams(line, stuff)
    if own is None:
        return beside
    return [(stuff, own), *(each for each in beside if _name(each[0]) != _name(stuff))]


def _own_grams(line: Line, stuff: Stuff) -> float | None:
    from stockroom.measure.parsing import parse_strength

    if not line.strength_text:
        # a neat liquid: at its own density, else as heavy as water
        neat = line.density or stuff.pure_density or 1.0
        return 1000.0 * neat if line.form is Form.LIQUID else None
    try:
        return grams_per_dm3(parse_strength(line.strength_text), stuff)
    except (MissingFigure, BadAmount):
        return None
