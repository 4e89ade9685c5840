"""What of the term is shown: all of it, or what one department, recipe or item has to do with."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.errors import UnknownName
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.planning.numbers import natural
from stockroom.reports.pages.parts import Pairs
from stockroom.reports.words import raised

_NAMED = 12
"""Names told to whoever asked for one that is not there; more are counted. Our choice."""


@dataclass(frozen=True, slots=True)
class Choice:
    """What was asked for, "" for all: a department's code, a recipe's code, an item's name."""

    department: str = ""
    recipe: str = ""
    item: str = ""

    @property
    def everything(self) -> bool:
        """Whether nothing is left out."""
        return not (self.department or self.recipe or self.item)


@dataclass(frozen=True, slots=True)
class Offered:
    """What can be chosen: (value, words) of departments, recipes and items, in their order."""

    departments: Pairs
    recipes: Pairs
    items: Pairs


class Chosen:
    """The bookings, makes and lines that a choice leaves.

    A booking is left by its department and recipe, and by needing the item; a make by a
    booking it is for, and by being the item. Raises: UnknownName for a choice that is none.
    """

    def __init__(self, known: Facts, plan: Plan, choice: Choice) -> None:
        self.choice = choice
        meant = [b for b in known.bookings if b.firmness is not Firmness.DROPPED]
        meant = [b for b in meant if known.start <= b.on <= known.end]
        self.offered = _offered(known, plan, meant)
        _check("department", choice.department, self.offered.departments)
        _check("recipe", choice.recipe, self.offered.recipes)
        _check("item", choice.item, self.offered.items)
        needing = _needing(known, choice.item)
        self.bookings: dict[str, Booking] = {
            b.number: b
            for b in meant
            if choice.department in ("", b.department)
            and choice.recipe in ("", b.recipe)
            and (not choice.item or (b.recipe, b.version) in needing)
        }

    def booking(self, number: str) -> bool:
        """Whether a booking is shown."""
        return number in self.bookings

    def serves(self, numbers: Iterable[str]) -> bool:
        """Whether something for these bookings is shown; for none, only where all is."""
        row = list(numbers)
        return self.choice.everything if not row else any(each in self.bookings for each in row)

    def make(self, make: Make) -> bool:
        """Whether a make is shown."""
        return self.item(make.item) and self.serves(make.bookings)

    def item(self, name: str) -> bool:
        """Whether an item is shown."""
        return self.choice.item in ("", name)


def _needing(known: Facts, item: str) -> set[tuple[str, int]]:
    """The recipe versions that need an item."""
    return {
        version
        for version, recipe in known.recipes.items()
        if any(known.lines[each.line].item == item for each in recipe.requirements)
    }


def _offered(known: Facts, plan: Plan, meant: list[Booking]) -> Offered:
    names = {each.code: each.name for each in known.departments}
    codes = sorted({b.department for b in meant if b.department})
    recipes = {b.recipe: known.recipes[b.recipe, b.version].title for b in meant}
    items = {
        known.lines[each.line].item
        for b in meant
        for each in known.recipes[b.recipe, b.version].requirements
    } | {make.item for make in plan.makes}
    return Offered(
        tuple((code, names.get(code) or code) for code in codes),
        tuple((code, f"{code} {raised(recipes[code])}") for code in sorted(recipes, key=natural)),
        tuple((item, item) for item in sorted(items, key=str.casefold)),
    )


def _check(what: str, asked: str, offered: Pairs) -> None:
    names = [value for value, _ in offered]
    if asked and asked not in names:
        more = f" and {len(names) - _NAMED} more" if len(names) > _NAMED else ""
        there = f"The term has {', '.join(names[:_NAMED])}{more}." if names else "It has none."
        raise UnknownName(f"No {what} {asked[:80]!r} in this term.", there)
