"""What stays as it is while an arrangement is looked for, laid out to be read quickly.

Built once from the problem: for each sort its work in figures, the days it could be made
at all, what it asks for itself, its lots and who takes of it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from math import floor, inf, log

from stockroom.errors import BadInput
from stockroom.lots.model import Days, Lot, Part, Problem, Sort
from stockroom.lots.objective import EARLY, UNUSUAL

Item = tuple[int, int, float, int, float, int, int]
"""What is asked of a sort: last and first day of a batch that will do, cm³, day of use,
strength, and who asks: (−1, demand), or the sort it goes into and which of its parts."""

Price = list[float]
"""Minutes that opening a batch costs beyond its own work, for each day; inf: it cannot be."""


@dataclass(slots=True)
class Opening:
    """What opening a batch costs in batches of its parts: `price`, and `beyond` `room` cm³ more.

    `room` None: what there is of the parts reaches for anything. `tilted` has EARLY for each
    day taken off, so that the least of a window is its cheapest day, the latest among equals;
    `known` keeps the day picked for a window.
    """

    price: Price
    room: Price | None = None
    beyond: Price = field(default_factory=list)
    tilted: Price = field(init=False)
    lowest: float = field(init=False)
    known: dict[tuple[int, int], tuple[int, float]] = field(default_factory=dict)
    much: dict[tuple[int, int, float], tuple[int, float]] = field(default_factory=dict)

    def __post_init__(self) -> None:
        self.tilted = [each - EARLY * day for day, each in enumerate(self.price)]
        self.lowest = min(self.price, default=0.0)

    def at(self, day: int, volume: float) -> float:
        """The cost for so much on one day."""
        if self.room is not None and volume > self.room[day] + 1e-9:
            return self.beyond[day]
        return self.price[day]


@dataclass(slots=True)
class Shelf:
    """One lot, and through which day it will do for a strength (worked out once each)."""

    number: int
    lot: Lot
    through: dict[float, int] = field(default_factory=dict)

    def last_day_for(self, strength: float) -> int:
        """The last day the lot holds `strength` and has not gone past; −1: it never will."""
        day = self.through.get(strength)
        if day is None:
            day = self.through[strength] = _last_day(self.lot, strength)
        return day


def _last_day(lot: Lot, strength: float) -> int:
    if lot.strength < strength:
        return -1
    if lot.decay <= 0.0 or strength <= 0.0:
        return lot.until
    # a hair of room, as two ways of working out one exponential differ in the last digit
    return min(lot.until, floor(log(lot.strength / strength) / lot.decay + 1e-9))


Row = tuple[int, int, int, float]
"""A day, the first and last day of a batch of the part for it (first > last: none will do),
and what opening one costs where its own parts ask for nothing."""


@dataclass(slots=True)
class Making:
    """One sort: `fix` minutes a vessel, `spare` for each cm³ made beyond need.

    `unusual`: minutes for a batch off the days of the plan last printed, to break ties.
    `way`: how its lots were used best so far, −1: not tried; `forced`: the
    one to use, −1: any.
    """

    number: int
    fix: float
    per: float
    smallest: float
    largest: float
    waste: float
    spare: float
    parts: tuple[Part, ...]
    usual: tuple[int, ...]
    unusual: float
    sort: Sort
    flat: bool
    alone: Price
    back: list[int]
    step: float
    items: list[Item] = field(default_factory=list)
    shelf: list[Shelf] = field(default_factory=list)
    takers: list[tuple[int, int, float]] = field(default_factory=list)
    rows: list[list[Row]] = field(default_factory=list)
    always: Opening = field(init=False)
    way: int = -1
    forced: int = -1

    def __post_init__(self) -> None:
        """A sort without parts pays nothing on any day it can be made."""
        self.always = Opening(self.alone)

    def dearest_share(self, item: Item) -> float:
        """cm³ of the batch that 1 cm³ of the item would have gone to; of a demand 1."""
        for number, place, share in self.takers:
            if (number, place) == item[5:]:
                return 1.0 / max(share, 1e-9)
        return 1.0


@dataclass(slots=True)
class Ground:
    """The whole problem laid out; `room` is what each day has left of the limit.

    `large`: there is so much of it that rare gains are not looked for; `settled`: the first
    passes are over.
    """

    problem: Problem
    days: int
    whole: bool
    makings: list[Making]
    room: list[float] | None
    large: bool
    settled: bool = False


LARGE = 500
"""Demands above which a problem is large. Our choice."""


def lay_out(problem: Problem) -> Ground:
    """Read the problem once, parts before what is made of them."""
    shelves: list[list[Shelf]] = [[] for _ in problem.sorts]
    for number, lot in enumerate(problem.lots):
        if lot.volume > 0.0:
            shelves[lot.sort].append(Shelf(number, lot))
    working = [False] * problem.days
    for day in problem.working:
        working[day] = True
    makings: list[Making | None] = [None] * len(problem.sorts)
    for number in range(len(problem.sorts) - 1, -1, -1):
        shelf = sorted(shelves[number], key=lambda each: (each.lot.until, each.number))
        makings[number] = _making(problem, number, working, makings, shelf)
    ready = [each for each in makings if each is not None]
    for making in ready:
        for place, part in enumerate(making.parts):
            ready[part.sort].takers.append((making.number, place, part.share))
            making.rows.append(_rows(making, part, ready[part.sort]))
    for number, demand in enumerate(problem.demands):
        making = ready[demand.sort]
        item = (
            back_to(making.back, demand.last),
            max(demand.first, 0),
            demand.volume,
            demand.use,
            demand.strength,
            -1,
            number,
        )
        if demand.volume > 0.0:
            making.items.append(item)
    room = None
    if problem.limit is not None:
        busy = problem.busy or (0.0,) * problem.days
        room = [max(problem.limit - each, 0.0) for each in busy]
    return Ground(problem, problem.days, problem.whole, ready, room, len(problem.demands) > LARGE)


def back_to(back: Sequence[int], day: int) -> int:
    """The last day up to `day` on which the sort can be made; −1: there is none."""
    if day < 0:
        return -1
    return back[min(day, len(back) - 1)]


def _making(
    problem: Problem,
    number: int,
    working: list[bool],
    makings: list[Making | None],
    shelf: list[Shelf],
) -> Making:
    sort = problem.sorts[number]
    alone = [0.0 if each else inf for each in working]
    spare = sort.waste + sort.per_cm3
    for part in sort.parts:
        of = makings[part.sort]
        if of is None:
            raise BadInput(
                f"{sort.name}: its part {part.sort} comes before it in the row",
                "Put each sort before the sorts that go into it.",
            )
        spare += part.share * of.spare
        upto = max((each.last_day_for(part.strength) for each in of.shelf), default=-1)
        for day, cost in enumerate(alone):
            if cost < inf:
                alone[day] = cost + _cheapest(of, part.first, part.last, day, upto)
    back, found = [], -1
    for day in range(problem.days):
        found = day if alone[day] < inf else found
        back.append(found)
    fix = sort.minutes + sort.finishing
    return Making(
        number=number,
        fix=fix,
        per=sort.per_cm3,
        smallest=sort.smallest,
        largest=sort.largest,
        waste=sort.waste,
        spare=spare,
        parts=sort.parts,
        usual=tuple(sorted(sort.usual)),
        unusual=EARLY * UNUSUAL if sort.usual else 0.0,
        sort=sort,
        flat=not sort.parts,
        alone=alone,
        back=back,
        step=sort.step,
        shelf=shelf,
    )


DEAR = 1e5
"""Minutes put on a day whose part only a lot can give, and none has enough left. Our choice."""


def _rows(making: Making, part: Part, of: Making) -> list[Row]:
    """One part on each day the sort could be made."""
    rows = []
    for day, cost in enumerate(making.alone):
        if cost == inf:
            continue
        first, last = part.first[day], part.last[day]
        if 0 <= first <= back_to(of.back, last):
            rows.append((day, first, last, of.fix))
        else:
            rows.append((day, 0, -1, DEAR))
    return rows


def _cheapest(of: Making, first: Days, last: Days, day: int, upto: int) -> float:
    """A batch of the part opened for this day alone, or nothing where a lot will do."""
    if day <= upto:
        return 0.0
    start, end = first[day], last[day]
    if start < 0 or end < start:
        return inf
    days = of.alone[start : end + 1]
    return min(days, default=inf) + of.fix
