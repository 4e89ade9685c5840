"""Barred substances and allowed swaps: what a recipe must never meet, and what it may."""

from __future__ import annotations

from collections.abc import Collection
from typing import Protocol


class _Bar(Protocol):
    @property
    def substance(self) -> str: ...
    @property
    def reason(self) -> str: ...


class _Swap(Protocol):
    @property
    def line(self) -> str: ...
    @property
    def instead(self) -> str: ...
    @property
    def factor(self) -> float | None: ...
    @property
    def note(self) -> str: ...


class Rulings(Protocol):
    """The part of a recipe that says what is barred and what may be swapped."""

    @property
    def bars(self) -> Collection[_Bar]: ...
    @property
    def swaps(self) -> Collection[_Swap]: ...


def barred_by(recipe: Rulings, substance: str, own: Collection[str] = ()) -> str:
    """The reason this substance is barred in the recipe, or "".

    `own` holds the substances the recipe itself asks for by name: those are
    barred only in another part, so the recipe's own lines are let through.
    """
    if substance in own:
        return ""
    return next((bar.reason for bar in recipe.bars if bar.substance == substance), "")


def offer(
    recipe: Rulings, line: str, instead: str, substances: tuple[str, str]
) -> tuple[bool, str]:
    """May `instead` stand in for `line`? True or False, and the reason in words.

    `substances` are those of `line` and of `instead`; a swap may be written with
    either a line's key or its substance. A bar wins over a swap; what is neither
    barred nor written as a swap is refused too.
    """
    # first, so that no swap can let in what the recipe must never meet
    for bar in recipe.bars:
        if bar.substance == substances[1]:
            return False, f"barred: {bar.reason}"
    for swap in recipe.swaps:
        if swap.line in (line, substances[0]) and swap.instead in (instead, substances[1]):
            factor = f", mass × {swap.factor:g}" if swap.factor else ""
            return True, f"allowed{factor}: {swap.note}"
    return False, "not written in the recipe as an allowed swap"
