"""Ingredients with the limits that travel along, for the tests of hazards."""

from __future__ import annotations

from pathlib import Path

from stockroom.safety.clp import Classification, classify
from stockroom.safety.limits import Ingredient, Limit
from stockroom.store.hazards import limit_book

SEEDS = Path(__file__).parents[1] / "seeds_data"


def limits(substance: str) -> tuple[Limit, ...]:
    """The rows held for a substance."""
    return limit_book(SEEDS).of(substance)


def of(substance: str, percent: float, group: str = "") -> Ingredient:
    """So many per cent by mass of a substance, with the rows held for it."""
    return Ingredient(substance, percent, limits(substance), group=group)


def classed(*parts: tuple[str, float]) -> Classification:
    """The classification of a mixture: (substance, per cent by mass) each."""
    return classify(of(substance, percent) for substance, percent in parts)


def codes(*parts: tuple[str, float]) -> tuple[str, ...]:
    """Every statement of a mixture, H codes first."""
    found = classed(*parts)
    return found.statements + found.supplemental
