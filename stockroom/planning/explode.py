"""Step 1: bookings into dated needs, with every step of the sum kept for `why`."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from datetime import date

from stockroom.errors import UnknownName
from stockroom.planning.amounts import say
from stockroom.planning.facts import Booking, Drawn, Facts, Firmness, Line, Per, Recipe, Requirement
from stockroom.planning.numbers import Natural, natural


@dataclass(frozen=True, slots=True)
class Need:
    """One requirement of one booking: so much of a line, on a day. Micro-units.

    `drawn` holds what the ledger says was already drawn for it, bottle by bottle. `rank`
    says who is served first: firm before pencilled, then by day, time and number.
    """

    ref: str
    booking: Booking
    recipe: Recipe
    requirement: Requirement
    line: Line
    amount: int
    sum_in_words: str
    drawn: tuple[Drawn, ...] = ()
    rank: tuple[int, date, int, Natural, int] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        pencilled = int(self.booking.firmness is Firmness.PENCILLED)
        booking = self.booking
        # the number last: a draw of lots, but one that always falls the same way
        number = natural(booking.number)
        rank = (pencilled, booking.on, booking.minute, number, self.requirement.number)
        # worked out once: every sorting of wants asks for it
        object.__setattr__(self, "rank", rank)

    @property
    def missing(self) -> int:
        """What is still to be found: nothing once its amount without spare was drawn."""
        drawn = sum(draw.amount for draw in self.drawn)
        plain = amount_needed(self.requirement, self.booking.groups, 0)
        # spare is for accidents: a class that was served without it wants no more
        return 0 if drawn and drawn >= plain else max(0, self.amount - drawn)

    @property
    def on(self) -> date:
        """The day of the booking."""
        return self.booking.on

    @property
    def fresh(self) -> bool:
        """True when it must be made the same morning: the recipe says so, or it is never kept."""
        return self.requirement.fresh or bool(self.line.never_kept)


def explode(facts: Facts, bookings: Iterable[Booking]) -> tuple[Need, ...]:
    """Every need of these bookings, in order of day, time, booking and recipe line.

    Raises UnknownName for a recipe or stock line the facts do not hold.
    """
    drawn = _drawn_for(facts)
    needs = [
        _need(facts, booking, recipe, requirement, drawn)
        for booking in sorted(bookings, key=lambda b: (b.on, b.minute, natural(b.number)))
        for recipe in [_recipe_of(facts, booking)]
        for requirement in recipe.requirements
    ]
    return tuple(needs)


def _drawn_for(facts: Facts) -> dict[tuple[str, str], list[Drawn]]:
    """By booking and line, what the ledger says was drawn; each draw serves one need."""
    row: dict[tuple[str, str], list[Drawn]] = {}
    for draw in facts.drawn:
        if draw.booking:
            row.setdefault((draw.booking, draw.line), []).append(draw)
    return row


def standing(bookings: Iterable[Booking], start: date, end: date) -> list[Booking]:
    """The bookings from `start` to `end` that still stand: pencilled or firm."""
    wanted = (Firmness.PENCILLED, Firmness.FIRM)
    return [b for b in bookings if start <= b.on <= end and b.firmness in wanted]


def amount_needed(requirement: Requirement, groups: int, spare: int) -> int:
    """Micro-units for a booking: amount × what it is per × (1 + spare), rounded up.

    `spare` is in thousandths; stand-bys carry none.
    """
    total = requirement.amount * count_of(requirement.per, groups)
    if not requirement.spare:
        return total
    # in whole numbers throughout: a float would now and then round a whole one up by one
    return -(-total * (1000 + spare) // 1000)


def count_of(per: Per, groups: int) -> int:
    """How many times a recipe's amount is wanted: its groups, or once."""
    return groups if per in (Per.GROUP, Per.PERFORMANCE) else 1


def _need(
    facts: Facts,
    booking: Booking,
    recipe: Recipe,
    requirement: Requirement,
    drawn: dict[tuple[str, str], list[Drawn]],
) -> Need:
    line = facts.lines.get(requirement.line)
    if line is None:
        raise UnknownName(
            f"{recipe.code} line {requirement.number} asks for {requirement.line!r}, "
            "which is no stock line.",
            "Add the line, or mend the recipe.",
        )
    amount = amount_needed(requirement, booking.groups, booking.spare)
    words = _sum_in_words(requirement, booking, line, amount)
    ref = f"{booking.number}.{requirement.number}"
    # the ledger names the booking and not the recipe line, so the first of a kind is filled
    mine = _take(drawn.get((booking.number, line.key), []), amount)
    return Need(ref, booking, recipe, requirement, line, amount, words, mine)


def _take(draws: list[Drawn], amount: int) -> tuple[Drawn, ...]:
    """Use up draws to this amount; what is over is left for the recipe's next line of the kind."""
    mine = []
    while draws and amount > 0:
        draw = draws.pop(0)
        share = min(draw.amount, amount)
        mine.append(replace(draw, amount=share))
        if draw.amount > share:
            draws.insert(0, replace(draw, amount=draw.amount - share))
        amount -= share
    return tuple(mine)


def _recipe_of(facts: Facts, booking: Booking) -> Recipe:
    recipe = facts.recipes.get((booking.recipe, booking.version))
    if recipe is None:
        raise UnknownName(
            f"{booking.number} is booked on {booking.recipe} version {booking.version}, "
            "which is not written.",
            "Add the recipe, or book another.",
        )
    return recipe


def _sum_in_words(requirement: Requirement, booking: Booking, line: Line, amount: int) -> str:
    count = count_of(requirement.per, booking.groups)
    each, total = say(requirement.amount, line.kind), say(requirement.amount * count, line.kind)
    what = requirement.per if count == 1 else f"{requirement.per}s"
    words = f"{count} {what} × {each} = {total}"
    if requirement.spare and booking.spare:
        words += f", + {booking.spare / 10:g} % spare = {say(amount, line.kind)}"
    return words
