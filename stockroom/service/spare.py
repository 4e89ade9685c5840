"""What classes drew beside what was planned: found by any name, read and never applied."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadInput, MissingFigure
from stockroom.planning.facts import Facts, Recipe
from stockroom.planning.spare import RecipeSpare, spare_of, spares
from stockroom.service.finding import line_among
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, reading
from stockroom.store.snapshot import facts_from


def is_recipe(path: StoreAt, name: str) -> bool:
    """True when a name is a recipe's code or its whole title."""
    with reading(path) as reader:
        rows = reader.rows("recipe")
    wanted = plain(name)
    return any(wanted in (plain(row["recipe"]), plain(row["title"])) for row in rows)


def learn_spare(path: StoreAt, name: str, *, as_at: date) -> tuple[RecipeSpare, ...]:
    """The spare of a recipe (its code, title or a part of it), of the recipe of a booking, of
    every recipe that asks for a line; of all with draws where `name` is "".

    Raises: UnknownName with the nearest; MissingFigure where nothing was ever drawn for a
    booking of what is asked about.
    """
    with reading(path) as reader:
        known = _ever(reader, as_at)
    codes = _codes(known, name)
    found = [spare_of(known, code) for code in codes] if name.strip() else spares(known)
    told = tuple(one for one in found if one.lines)
    if not told:
        whose = f"a class of {', '.join(codes)}" if name.strip() else "any class"
        raise MissingFigure(
            f"Nothing was drawn for {whose} up to {as_at}, so there is nothing to learn from.",
            'Say whom it is for when you draw: stockroom draw S02 "500 cm3" --for K21',
        )
    return told


def _ever(reader: Reader, as_at: date) -> Facts:
    """Facts that hold every booking there ever was."""
    booked = reader.ask("SELECT MIN(on_day), MAX(on_day) FROM booking")
    first, last = next(iter(booked), (None, None))
    start = min(date.fromisoformat(first), as_at) if first else as_at
    end = max(date.fromisoformat(last), as_at) if last else as_at
    return facts_from(reader, as_at, min(start, as_at), end)


def _codes(known: Facts, name: str) -> list[str]:
    """The codes of the recipes a name stands for, the exact before the vague."""
    wanted = plain(name)
    recipes = {recipe.code: recipe for recipe in known.recipes.values()}
    if not wanted:
        return list(recipes)
    exact = [code for code, one in recipes.items() if wanted in (plain(code), plain(one.title))]
    booked = [b.recipe for b in known.bookings if plain(b.number) == wanted]
    titled = [code for code, one in recipes.items() if wanted in plain(one.title)]
    for found in (exact, booked, titled, _asking(known, name)):
        if found:
            return list(dict.fromkeys(found))
    titles = [*recipes, *(one.title for one in recipes.values()), *known.lines]
    raise unknown("recipe, booking or stock line", name, titles)


def _asking(known: Facts, name: str) -> list[str]:
    try:
        line = line_among(known, name)
    except BadInput:
        return []
    return [recipe.code for recipe in known.recipes.values() if _asks(recipe, line.key)]


def _asks(recipe: Recipe, key: str) -> bool:
    return any(one.line == key for one in recipe.requirements)
