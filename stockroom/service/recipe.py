"""Recipes as they are looked up: all of them, or one version with the plan of its bookings."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import MissingFigure
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Recipe
from stockroom.planning.spare import RecipeSpare
from stockroom.service.known import known_from
from stockroom.service.sheets import known_and_planned
from stockroom.service.spare import learn_spare
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import reading


@dataclass(frozen=True, slots=True)
class Asked:
    """One version of a recipe, the facts and the term's plan, and what its classes drew.

    `spare` is None while nothing was ever drawn for a class of it.
    """

    known: Facts
    plan: Plan
    recipe: Recipe
    spare: RecipeSpare | None


def recipes_known(path: StoreAt, *, as_at: date) -> Facts:
    """The facts as at a day, with every recipe in every version. Raises: StoreTrouble."""
    with reading(path) as reader:
        return known_from(reader, as_at)


def recipe_asked(path: StoreAt, name: str, version: int | None, *, as_at: date) -> Asked:
    """A recipe by its code, in the version asked for or the newest.

    Raises: UnknownName with the nearest for a code or a version that is not there.
    """
    known, plan = known_and_planned(path, as_at=as_at)
    versions = {
        one.version: one for one in known.recipes.values() if plain(one.code) == plain(name)
    }
    if not versions:
        raise unknown("recipe", name, {one.code for one in known.recipes.values()})
    number = max(versions) if version is None else version
    if number not in versions:
        code = next(iter(versions.values())).code
        raise unknown(f"version of {code}", str(number), map(str, sorted(versions)))
    recipe = versions[number]
    return Asked(known, plan, recipe, _spare(path, recipe.code, as_at))


def _spare(path: StoreAt, code: str, as_at: date) -> RecipeSpare | None:
    try:
        return learn_spare(path, code, as_at=as_at)[0]
    except MissingFigure:
        return None
