"""Invented terms of any size, the same for the same seed: bookings, solutions, bottles, vessels.

The mix is our choice and follows what a teaching store is like: a Monday to start on, one
closed Monday more, an empty first week so that everything can be made in time; about half of
the solutions from solids, a third from those, the rest from those again; lives from the same
day to a year. A practical asks for two to six solutions, always at the same strengths; in a
week it runs on one to five days, on each for one class or, where there are many bookings to
a solution, for several. So a large term has many bookings and far fewer different needs.

    term = term_of(200, seed=3)
    problem = problem_of(term)
"""

from __future__ import annotations

import random
from dataclasses import dataclass, replace
from math import exp, inf, log

from stockroom.lots.model import Batch, Demand, Lot, Part, Problem, Sort

SIZES = {50: (10, 12), 200: (25, 40), 1000: (60, 90), 5000: (150, 225), 20000: (300, 450)}
"""Bookings: solutions and bottles that go with them."""

LIVES = ((0, 8), (1, 5), (3, 7), (7, 15), (14, 15), (30, 15), (90, 15), (180, 10), (365, 10))
"""Days a solution keeps, and how many of a hundred do."""

GRADES = (0.7, 0.8, 0.9, 0.95)
"""Least strengths recipes ask for: rough, close and strict needs of one solution. Our choice."""

BOOKINGS_TO_A_SOLUTION = 10
"""With more than so many in a term several classes do a practical on the same day. Our choice."""


@dataclass(frozen=True, slots=True)
class Solution:
    """How one solution is made and keeps. `parts`: (solution, cm³ of it for each cm³)."""

    name: str
    life: int
    decay: float
    lead: int
    minutes: float
    per_cm3: float
    smallest: float
    largest: float
    waste: float
    parts: tuple[tuple[int, float], ...] = ()
    part_strength: float = 0.0


@dataclass(frozen=True, slots=True)
class Bottle:
    """What is on the shelf: cm³, last good day, and the strength it holds on day 0."""

    solution: int
    volume: float
    until: int
    strength: float


@dataclass(frozen=True, slots=True)
class Term:
    """All of it. A booking row is (solution, day, strength asked for, cm³)."""

    days: int
    working: tuple[int, ...]
    solutions: tuple[Solution, ...]
    bottles: tuple[Bottle, ...]
    bookings: tuple[tuple[int, int, float, float], ...]
    limit: float | None = None


def term_of(
    bookings: int,
    *,
    seed: int = 1,
    solutions: int = 0,
    bottles: int = -1,
    weeks: int = 12,
    levels: int = 3,
    one_strength: bool = False,
    vessels: bool = True,
    smallest: bool = True,
) -> Term:
    """A term of so many bookings; solutions and bottles go with the size unless given.

    `levels` 1 to 3; `one_strength`: every booking of a solution asks for the same.
    `vessels` and `smallest` False: any batch goes into one vessel, and no batch is too small.
    """
    chance = random.Random(f"{seed} {bookings}")
    usual = SIZES.get(bookings, (max(10, bookings // 12), max(0, bookings // 8)))
    number = solutions or usual[0]
    days = weeks * 7
    closed = 7 * chance.randrange(2, weeks)
    working = tuple(day for day in range(days) if day % 7 < 5 and day != closed)
    made = tuple(_solutions(chance, number, levels))
    if not vessels:
        made = tuple(replace(each, largest=inf) for each in made)
    if not smallest:
        made = tuple(replace(each, smallest=0.0) for each in made)
    count = usual[1] if bottles < 0 else bottles
    shelf = tuple(_bottle(chance, made) for _ in range(count))
    rows = tuple(_bookings(chance, bookings, made, working, weeks, one_strength))
    return Term(days, working, made, shelf, rows)


def _solutions(chance: random.Random, number: int, levels: int) -> list[Solution]:
    """Highest level first, so that what goes into a solution comes after it."""
    ends = {1: (0.0, 0.0), 2: (0.0, 0.45), 3: (0.12, 0.45)}[levels]
    third, second = round(number * ends[0]), round(number * ends[1])
    rows = []
    for n in range(number):
        level = 3 if n < third else 2 if n < second else 1
        below = range(third, second) if level == 3 else range(second, number)
        parts: tuple[tuple[int, float], ...] = ()
        if level > 1 and below:
            # some stocks are favourites: dilutions share them
            sources = {below[int(len(below) * chance.random() ** 2)] for _ in range(level - 1)}
            parts = tuple((each, round(chance.uniform(0.02, 0.5), 3)) for each in sorted(sources))
        rows.append(_solution(chance, f"L{level}-{n:03}", parts))
    return rows


def _solution(chance: random.Random, name: str, parts: tuple[tuple[int, float], ...]) -> Solution:
    life = chance.choices([days for days, _ in LIVES], [share for _, share in LIVES])[0]
    fades = life >= 3 and chance.random() < 0.4
    decay = -log(1 - chance.uniform(0.03, 0.15)) / life if fades else 0.0
    return Solution(
        name=name,
        life=life,
        decay=decay,
        lead=1 if life >= 7 and chance.random() < 0.35 else 0,
        minutes=float(chance.randint(8, 40)),
        per_cm3=round(chance.uniform(1.0, 4.0), 2) / 1000,
        smallest=float(chance.choice((50, 100, 150, 200, 250))),
        largest=float(chance.choice((500, 1000, 2000, 2500, 5000))),
        waste=round(chance.uniform(0.2, 6.0), 2) / 1000,
        parts=parts,
        part_strength=round(chance.uniform(0.80, 0.95), 2),
    )


def _bottle(chance: random.Random, solutions: tuple[Solution, ...]) -> Bottle:
    number = chance.randrange(len(solutions))
    solution = solutions[number]
    age = chance.uniform(0.0, 0.8) * solution.life
    volume = float(chance.choice((100, 250, 500, 1000, 2500)))
    left = round(volume * chance.uniform(0.1, 1.0))
    return Bottle(number, float(left), int(solution.life - age), exp(-solution.decay * age))


def _bookings(
    chance: random.Random,
    number: int,
    solutions: tuple[Solution, ...],
    working: tuple[int, ...],
    weeks: int,
    one_strength: bool,
) -> list[tuple[int, int, float, float]]:
    """Runs of practicals, each on one to five days of a week, cut at `number`."""
    practicals = _practicals(chance, solutions, one_strength)
    most = max(1, round(2 * number / (BOOKINGS_TO_A_SOLUTION * len(solutions))) - 1)
    rows: list[tuple[int, int, float, float]] = []
    while len(rows) < number:
        practical = practicals[int(len(practicals) * chance.random() ** 1.5)]
        week = chance.randrange(1, weeks)
        days = [day for day in working if day // 7 == week]
        for day in sorted(chance.sample(days, min(chance.randint(1, 5), len(days)))):
            for _ in range(chance.randint(1, most)):
                for solution, strength in practical:
                    rows.append((solution, day, strength, float(chance.randrange(20, 620, 20))))
    return rows[:number]


def _practicals(
    chance: random.Random, solutions: tuple[Solution, ...], one_strength: bool
) -> list[list[tuple[int, float]]]:
    """As many practicals as solutions, each with two to six of them and a strength for each."""
    asked = [_asked(chance, each) for each in solutions]
    made = []
    for _ in solutions:
        chosen = chance.sample(range(len(solutions)), min(chance.randint(2, 6), len(solutions)))
        made.append(
            [
                (each, asked[each] if one_strength else _asked(chance, solutions[each]))
                for each in chosen
            ]
        )
    return made


def _asked(chance: random.Random, solution: Solution) -> float:
    """One of the `GRADES` that a batch still holds after standing over a long weekend."""
    return min(chance.choice(GRADES), _held(solution))


def _held(solution: Solution) -> float:
    return int(100 * exp(-4 * solution.decay * (solution.lead > 0))) / 100


def demands_of(term: Term) -> dict[tuple[int, int, float], float]:
    """cm³ of each solution asked for on each day at each strength: all that matters of bookings."""
    total: dict[tuple[int, int, float], float] = {}
    for solution, day, strength, volume in term.bookings:
        key = solution, day, strength
        total[key] = total.get(key, 0.0) + volume
    return total


def problem_of(term: Term, demands: dict[tuple[int, int, float], float] | None = None) -> Problem:
    """The term as the planner of batches is asked it; `demands` where they are added up already."""
    total = demands_of(term) if demands is None else demands
    calendar = _Calendar(term)
    sorts = tuple(
        Sort(
            name=each.name,
            minutes=each.minutes,
            per_cm3=each.per_cm3,
            smallest=each.smallest,
            largest=each.largest,
            waste=each.waste,
            parts=tuple(
                _part(term, calendar, part, share, each.part_strength) for part, share in each.parts
            ),
        )
        for each in term.solutions
    )
    rows = []
    for (solution, day, strength), volume in sorted(total.items()):
        first, last = calendar.window(solution, strength, day)
        rows.append(Demand(solution, volume, first, last, day, strength))
    lots = tuple(_lot(term, bottle) for bottle in term.bottles)
    return Problem(term.days, term.working, sorts, tuple(rows), lots, term.limit)


def _part(term: Term, calendar: _Calendar, part: int, share: float, asked: float) -> Part:
    strength = min(asked, _held(term.solutions[part]))
    return Part(part, share, *calendar.windows(part, strength), strength)


def _lot(term: Term, bottle: Bottle) -> Lot:
    solution = term.solutions[bottle.solution]
    # what lasts beyond the term is not thrown away in it
    waste = solution.waste if bottle.until < term.days else 0.0
    return Lot(bottle.solution, bottle.volume, bottle.until, bottle.strength, solution.decay, waste)


class _Calendar:
    """Windows of days, counted up from what keeps how long and what must stand."""

    def __init__(self, term: Term) -> None:
        self.term = term
        self.rank: list[int] = []
        count = 0
        working = frozenset(term.working)
        for day in range(term.days):
            self.rank.append(count)
            count += day in working
        self.known: dict[tuple[int, float], tuple[tuple[int, ...], tuple[int, ...]]] = {}

    def window(self, solution: int, strength: float, day: int) -> tuple[int, int]:
        """First and last working day on which a batch used on `day` may be started."""
        made, days = self.term.solutions[solution], self.term.working
        age = made.life
        if made.decay and strength > 0:
            age = min(age, int(-log(strength) / made.decay + 1e-9))
        end = self.rank[day] - made.lead if made.lead else self._up_to(day)
        first = self.rank[max(day - age, 0)]
        if end < 0 or first > end:
            return (-1, -1) if end < 0 else (days[min(first, len(days) - 1)], days[end])
        return days[first], days[end]

    def _up_to(self, day: int) -> int:
        """The place in the row of the last working day up to `day`."""
        at = self.rank[day]
        row = self.term.working
        return at if at < len(row) and row[at] == day else at - 1

    def windows(self, solution: int, strength: float) -> tuple[tuple[int, ...], tuple[int, ...]]:
        """The same for every day of the term, −1 where no batch will do."""
        key = solution, strength
        if key not in self.known:
            both = [self.window(solution, strength, day) for day in range(self.term.days)]
            both = [each if each[0] <= each[1] else (-1, -1) for each in both]
            self.known[key] = tuple(a for a, _ in both), tuple(b for _, b in both)
        return self.known[key]


def limited(problem: Problem, batches: tuple[Batch, ...], share: float) -> Problem:
    """The problem with a daily limit: a share of the busiest day of an unlimited arrangement."""
    from stockroom.lots.cost import load_of

    return replace(problem, limit=round(share * max(load_of(problem, batches)), 1))
