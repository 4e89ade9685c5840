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
    AS_BY_MASS,
    by_mass,
    dry,
    from_volume,
    grams_per_dm3,
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
    except MissingFigure:
        # no formula, no per cent of it: what went in is told all the same
        stated = _beside(line, recipes, set())
        if not stated:
            raise
        return tuple(stated)
    beside = _beside(line, recipes, {line.substance} if own else set())
    if beside or own is None:
        # several things share one density nobody holds
        return (*([own] if own else []), *beside) or (Part(stuff, 100.0, UNKNOWN_STRENGTH),)
    return (own,)


def one(stuff: Stuff, strength: Strength | None) -> Part:
    """A substance at a strength, or as it is where none is given."""
    if strength is None:
        return Part(stuff, 100.0)
    return _solute(stuff, strength) or Part(stuff, 100.0, UNKNOWN_STRENGTH)


def _solute(stuff: Stuff, strength: Strength | None) -> Part | None:
    # "1 in 10" says nothing by itself; the method says one part of what
    if strength is None or (strength.unit is StrengthUnit.PARTS and not strength.part_of):
        return None
    try:
        found = by_mass(strength, stuff)
    except MissingFigure:
        if strength.unit is not StrengthUnit.SATURATED:
            raise
        return None
    return Part(stuff, dry(found.percent, stuff), found.note)


def _beside(line: Line, recipes: Recipes, known: set[str]) -> list[Part]:
    grams: dict[str, tuple[Stuff, float]] = {}
    for stuff, much in _grams(line, recipes, _DEEPEST):
        if stuff.substance not in known:
            before = grams.get(stuff.substance, (stuff, 0.0))[1]
            grams[stuff.substance] = (stuff, before + much)
    if len(grams) == 1 and not known:
        ((stuff, much),) = grams.values()
        found = from_volume(much, stuff)
        return [Part(stuff, dry(found.percent, stuff), found.note)]
    return [
        Part(stuff, dry(min(100.0, much / 10.0), stuff), AS_BY_MASS)
        for stuff, much in grams.values()
        if much
    ]


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
    return [(stuff, own), *(each for each in beside if each[0].substance != stuff.substance)]


def _own_grams(line: Line, stuff: Stuff) -> float | None:
    from stockroom.measure.parsing import parse_strength

    if not line.strength_text:
        # a neat liquid: at the density of its label, else as heavy as water
        return 1000.0 * (line.density or 1.0) if line.form is Form.LIQUID else None
    try:
        return grams_per_dm3(parse_strength(line.strength_text), stuff)
    except (MissingFigure, BadAmount):
        return None
