"""What classes really drew beside what was planned, and the spare that would have done.

By recipe and stock line: each class's draws are a part of the sum before spare (1 is just
that sum), so that classes of different sizes compare. The spare that would do is the
smallest whole per cent that covers the upper one-sided 95 % prediction limit of the next
class, mean + t · s · sqrt(1 + 1/n), with n - 1 degrees of freedom, and the most that any
class drew above its plan.
Source: the prediction interval for one future observation of a normal sample, as in any
statistics text; Hahn & Meeker, Statistical Intervals (1991), section 4.8.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.fits import reach_of
from stockroom.measure.amounts import Kind
from stockroom.planning.explode import amount_needed
from stockroom.planning.facts import Booking, Facts, Firmness, Per, Recipe
from stockroom.planning.numbers import natural

FEWEST = 3
"""Fewer classes leave no spread to judge by. Our choice."""

# 1.1 in binary is a hair over eleven tenths, and must not ask for another per cent
_EDGE = 1e-9


@dataclass(frozen=True, slots=True)
class Sitting:
    """One class's draws of one line, micro-units: planned with its spare, `plain` without."""

    booking: str
    on: date
    groups: int
    planned: int
    plain: int
    used: int

    @property
    def part(self) -> float:
        """What it drew as a part of the sum before spare."""
        return self.used / self.plain


@dataclass(frozen=True, slots=True)
class LineSpare:
    """What the classes of a recipe drew of one line, by day. Parts are of the plain sum.

    `per_group` is true where every amount is per group; `carries` false for a stand-by,
    which gets no spare. `limit` is None for fewer than three classes.
    """

    line: str
    item: str
    strength: str
    kind: Kind
    per_group: bool
    carries: bool
    sittings: tuple[Sitting, ...]
    mean: float
    spread: float
    limit: float | None

    @property
    def most(self) -> float:
        """The most any class drew, as a part of its plain sum."""
        return max(sitting.part for sitting in self.sittings)

    @property
    def overdrawn(self) -> tuple[Sitting, ...]:
        """The classes that drew more than was planned for them, spare and all."""
        return tuple(one for one in self.sittings if one.used > one.planned)

    @property
    def as_planned(self) -> bool:
        """True when every class drew exactly its plan: then nothing is known of what it used."""
        return all(one.used == one.planned for one in self.sittings)

    @property
    def would_do(self) -> int | None:
        """The whole per cent of spare that would do; None where too few classes tell."""
        if self.limit is None:
            return None
        needed = max(self.limit, self.most if self.overdrawn else 0.0)
        return max(0, math.ceil(100 * (needed - 1.0) - _EDGE))


@dataclass(frozen=True, slots=True)
class RecipeSpare:
    """A recipe's lines with draws, and the spare of its bookings, in whole or part per cents.

    `now` are the spares of the classes counted, `ahead` those of the bookings still to
    come by number. `silent` names its lines nobody drew for a booking.
    """

    code: str
    title: str
    lines: tuple[LineSpare, ...]
    now: tuple[float, ...]
    ahead: tuple[tuple[str, float], ...]
    silent: tuple[str, ...]

    @property
    def classes(self) -> int:
        """How many classes anything was drawn for."""
        return len({sitting.booking for line in self.lines for sitting in line.sittings})

    @property
    def decides(self) -> LineSpare | None:
        """The line that asks for the largest spare; None where none can be told."""
        told = [line for line in self.lines if line.carries and line.would_do is not None]
        return max(told, key=lambda line: (line.would_do or 0, line.limit or 0.0), default=None)

    @property
    def would_do(self) -> int | None:
        """The spare that would have done for every line that tells; None where none does."""
        return self.decides.would_do if self.decides else None


def spares(facts: Facts) -> list[RecipeSpare]:
    """Every recipe anything was drawn for, by code. `facts` hold all bookings and draws."""
    codes = sorted({booking.recipe for booking in facts.bookings}, key=natural)
    return [found for code in codes if (found := spare_of(facts, code)).lines]


def spare_of(facts: Facts, code: str) -> RecipeSpare:
    """What one recipe's classes drew, up to and on `as_at`, whatever its versions.

    Only draws that name the booking count; spills, loans, counts and what was put right
    are no draws. A class nobody drew a line for is not counted for that line.
    """
    over = [b for b in facts.bookings if b.recipe == code and _is_over(facts, b)]
    drawn = _drawn(facts)
    by_line: dict[str, list[Sitting]] = {}
    for booking in sorted(over, key=lambda b: (b.on, b.minute, natural(b.number))):
        for key in _keys(facts, booking):
            used = drawn.get((booking.number, key), 0)
            if used > 0:
                by_line.setdefault(key, []).append(_sitting(facts, booking, key, used))
    recipe = max((r for r in facts.recipes.values() if r.code == code), key=lambda r: r.version)
    counted = {one.booking for row in by_line.values() for one in row}
    asked = dict.fromkeys(one.line for one in recipe.requirements)
    return RecipeSpare(
        code=code,
        title=recipe.title,
        lines=tuple(_line(facts, code, key, row) for key, row in sorted(by_line.items())),
        now=tuple(sorted({b.spare / 10 for b in over if b.number in counted})),
        ahead=tuple(_ahead(facts, code)),
        silent=tuple(key for key in asked if key not in by_line),
    )


def _is_over(facts: Facts, booking: Booking) -> bool:
    # of today's class the half may still be on the shelf, unless somebody says it is done
    past = booking.on < facts.as_at and booking.firmness is not Firmness.DROPPED
    return past or booking.firmness is Firmness.DONE


def _ahead(facts: Facts, code: str) -> Iterable[tuple[str, float]]:
    wanted = (Firmness.PENCILLED, Firmness.FIRM)
    for booking in sorted(facts.bookings, key=lambda b: (b.on, b.minute, natural(b.number))):
        if booking.recipe == code and booking.on >= facts.as_at and booking.firmness in wanted:
            yield booking.number, booking.spare / 10


def _drawn(facts: Facts) -> dict[tuple[str, str], int]:
    row: dict[tuple[str, str], int] = {}
    for draw in facts.drawn:
        if draw.booking and draw.on <= facts.as_at:
            row[draw.booking, draw.line] = row.get((draw.booking, draw.line), 0) + draw.amount
    return row


def _recipe(facts: Facts, booking: Booking) -> Recipe | None:
    return facts.recipes.get((booking.recipe, booking.version))


def _keys(facts: Facts, booking: Booking) -> list[str]:
    """The lines a booking asks for something of, each once, in the recipe's order."""
    recipe = _recipe(facts, booking)
    asked = [r.line for r in recipe.requirements if r.amount > 0] if recipe else []
    return [key for key in dict.fromkeys(asked) if key in facts.lines]


def _sitting(facts: Facts, booking: Booking, key: str, used: int) -> Sitting:
    # the ledger names the booking and not the recipe line: two lines of one stock are one sum
    recipe = _recipe(facts, booking)
    asked = [r for r in recipe.requirements if r.line == key] if recipe else []
    planned = sum(amount_needed(r, booking.groups, booking.spare) for r in asked)
    plain = sum(amount_needed(r, booking.groups, 0) for r in asked)
    return Sitting(booking.number, booking.on, booking.groups, planned, plain, used)


def _line(facts: Facts, code: str, key: str, sittings: list[Sitting]) -> LineSpare:
    line = facts.lines[key]
    asked = [
        requirement
        for recipe in facts.recipes.values()
        if recipe.code == code
        for requirement in recipe.requirements
        if requirement.line == key
    ]
    parts = [sitting.part for sitting in sittings]
    mean = math.fsum(parts) / len(parts)
    spread = _spread(parts, mean)
    return LineSpare(
        line=key,
        item=line.item,
        strength=line.strength_text,
        kind=line.kind,
        per_group=all(one.per in (Per.GROUP, Per.PERFORMANCE) for one in asked),
        carries=any(one.spare for one in asked),
        sittings=tuple(sittings),
        mean=mean,
        spread=spread,
        limit=_limit(len(parts), mean, spread),
    )


def _spread(parts: list[float], mean: float) -> float:
    if len(parts) < 2:
        return 0.0
    return math.sqrt(math.fsum((part - mean) ** 2 for part in parts) / (len(parts) - 1))


def _limit(count: int, mean: float, spread: float) -> float | None:
    """The upper one-sided 95 % prediction limit of the next class; None for too few."""
    if count < FEWEST:
        return None
    # no spread at all needs no t, and the library behind it need not be loaded
    return mean + (reach_of(count - 1) * spread * math.sqrt(1.0 + 1.0 / count) if spread else 0.0)
