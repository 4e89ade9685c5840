"""No need goes short that any sharing of the bottles would serve: held against every sharing.

Thousands of small random shelves of one line that nobody makes or sells. The judge here works
in units of 50 cm³ from dates and strengths alone: it tries every way, for each need in its
rank, and counts the fewest sealed bottles any of them opens.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from datetime import timedelta
from random import Random

import pytest
from houses import (
    MONDAY,
    booking,
    bought_bottle,
    cm3,
    found,
    house,
    keeps,
    made_bottle,
    recipe,
    solution,
    wants,
)

from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.measure.days import PrintedDate
from stockroom.planning.explode import explode, standing
from stockroom.planning.facts import Closeness, Facts, Firmness
from stockroom.planning.net import Netted, net
from stockroom.planning.plan import plan
from stockroom.planning.replaying.replay import replay
from stockroom.planning.wants import Settled

UNIT = cm3(50)
# more than counts as too close to call, and in all bottles together less than a unit
DREGS = cm3(10)
PART = {Closeness.EXACT: 0.005, Closeness.CLOSE: 0.05, Closeness.ROUGH: 0.20}
SHELVES_A_ROUND, ROUNDS = 200, 16


@dataclass(frozen=True)
class Jar:
    """A bottle as the judge sees it: units left, strength found on day 0, days as numbers."""

    number: str
    left: int
    strength: float
    last: int
    sealed: bool
    life_opened: int


@dataclass(frozen=True)
class Ask:
    """A need as the judge sees it: units on a day, how close, firm before pencilled."""

    number: str
    units: int
    day: int
    closeness: Closeness
    pencilled: bool

    @property
    def rank(self) -> tuple[bool, int, str]:
        return self.pencilled, self.day, self.number


@dataclass(frozen=True)
class Shelf:
    jars: tuple[Jar, ...]
    asks: tuple[Ask, ...]
    rate: float


def random_shelf(luck: Random) -> Shelf:
    rate = luck.choice([0.0, 0.0, 0.002, 0.004])
    life = luck.choice([0, 0, 4, 8, 15])
    jars = []
    for n in range(luck.randint(1, 4)):
        sealed = luck.random() < 0.4
        strength = 0.1 if sealed else luck.choice([0.097, 0.1, 0.1, 0.1035, 0.085])
        left, last = luck.randint(1, 4), luck.choice([10, 16, 22, 99])
        jars.append(Jar(f"B{n}", left, strength, last, sealed, life if sealed else 0))
    asks = []
    for n in range(luck.randint(1, 5)):
        closeness = luck.choice([*Closeness, Closeness.CLOSE, Closeness.ROUGH])
        pencilled = luck.random() < 0.3
        asks.append(Ask(f"K{n}", luck.randint(1, 3), luck.randint(1, 25), closeness, pencilled))
    return Shelf(tuple(jars), tuple(sorted(asks, key=lambda ask: ask.rank)), rate)


def facts_of(shelf: Shelf) -> Facts:
    fades = [Rule(RuleKind.FADES, law=Law(1, shelf.rate))] if shelf.rate else []
    life = next((jar.life_opened for jar in shelf.jars if jar.life_opened), 0)
    opened = [keeps(life, Origin.OPENED)] if life else []
    line = solution(0.1, rules=(*fades, *opened))
    bottles = []
    for jar in shelf.jars:
        bottle = bought_bottle if jar.sealed else made_bottle
        bottles.append(
            bottle(
                jar.number, line, jar.left * UNIT + DREGS, checks=(found("01-04", jar.strength),),
                printed=PrintedDate("", (MONDAY + timedelta(jar.last),)),
            )
        )  # fmt: skip
    recipes, bookings = [], []
    for ask in shelf.asks:
        one = wants(line, ask.units * UNIT, closeness=ask.closeness)
        recipes.append(recipe(one, code=ask.number))
        firmness = Firmness.PENCILLED if ask.pencilled else Firmness.FIRM
        on = (MONDAY + timedelta(ask.day)).isoformat()
        bookings.append(booking(ask.number, on, recipe=ask.number, firmness=firmness))
    return house([line], recipes=recipes, bookings=bookings, bottles=bottles)


# -- the judge ------------------------------------------------------------------------

Splits = tuple[tuple[int, int], ...]


class Judge:
    """Every way to serve some needs of a shelf, and the fewest sealed bottles it opens."""

    def __init__(self, shelf: Shelf) -> None:
        self.shelf = shelf
        self._ways = {ask.number: self._ways_of(ask) for ask in shelf.asks}

    def strength(self, jar: Jar, ask: Ask) -> float:
        # the law counts from the day it was made, and what is bought has none
        return jar.strength * (1 if jar.sealed else math.exp(-self.shelf.rate * ask.day))

    def _will_do(self, jar: Jar, ask: Ask) -> bool:
        part = PART.get(ask.closeness)
        apart = abs(self.strength(jar, ask) / 0.1 - 1)
        return ask.day <= jar.last and (part is None or apart <= part + 1e-12)

    def _ways_of(self, ask: Ask) -> list[Splits]:
        """All whole units of it from bottles of one strength; of any, where presence will do."""
        fit = [n for n, jar in enumerate(self.shelf.jars) if self._will_do(jar, ask)]
        ways: set[Splits] = set()
        for first in fit:
            alike = [n for n in fit if self._alike(ask, first, n)]
            ways |= set(self._split(ask.units, alike))
        return sorted(ways)

    def _alike(self, ask: Ask, one: int, other: int) -> bool:
        if ask.closeness is Closeness.PRESENT:
            return True
        first, second = (self.strength(self.shelf.jars[n], ask) for n in (one, other))
        return abs(first / second - 1) <= 1e-3

    def _split(self, units: int, jars: list[int]) -> list[Splits]:
        if not units:
            return [()]
        if not jars:
            return []
        most = min(units, self.shelf.jars[jars[0]].left)
        row: list[Splits] = []
        for some in range(most + 1):
            rest = self._split(units - some, jars[1:])
            row += [((jars[0], some), *more) if some else more for more in rest]
        return row

    def fewest_opened(self, asks: list[Ask]) -> int | None:
        """The fewest sealed bottles opened to serve all of these; None when nothing does."""
        self._best: int | None = None
        first_days: list[int | None] = [None] * len(self.shelf.jars)
        # the fewest ways first, or a hopeless shelf would be searched to the end
        row = sorted(asks, key=lambda ask: len(self._ways[ask.number]))
        self._try(row, [jar.left for jar in self.shelf.jars], first_days)
        return self._best

    def _try(self, rest: list[Ask], left: list[int], first: list[int | None]) -> None:
        opened = sum(
            jar.sealed and day is not None for jar, day in zip(self.shelf.jars, first, strict=True)
        )
        if self._best is not None and opened >= self._best:
            return
        if not rest:
            self._best = opened
            return
        ask = rest[0]
        for way in self._ways[ask.number]:
            if any(units > left[n] for n, units in way):
                continue
            after, days = list(left), list(first)
            for n, units in way:
                after[n] -= units
                seen = days[n]
                days[n] = ask.day if seen is None else min(seen, ask.day)
            self._drawn[ask.number] = way
            if self._lasts(days):
                self._try(rest[1:], after, days)
            del self._drawn[ask.number]

    _drawn: dict[str, Splits]

    def _lasts(self, first: list[int | None]) -> bool:
        """No bottle is drawn on after its life since opening."""
        days = {ask.number: ask.day for ask in self.shelf.asks}
        for number, way in self._drawn.items():
            for n, _ in way:
                life, opened = self.shelf.jars[n].life_opened, first[n]
                if life and opened is not None and days[number] > opened + life:
                    return False
        return True


def best(shelf: Shelf) -> tuple[list[str], int]:
    """Who is served when none goes short avoidably, first in rank first; the fewest opened."""
    judge = Judge(shelf)
    judge._drawn = {}
    served: list[Ask] = []
    fewest = 0
    for ask in shelf.asks:
        opened = judge.fewest_opened([*served, ask])
        if opened is not None:
            served.append(ask)
            fewest = opened
    return [ask.number for ask in served], fewest


def settled(shelf: Shelf) -> Netted:
    facts = facts_of(shelf)
    return net(facts, explode(facts, standing(facts.bookings, facts.as_at, facts.end)))


def served_by(netted: Netted) -> list[str]:
    return [w.need.booking.number for w in netted.wants if w.settled is Settled.HELD]


def opened_by(netted: Netted) -> int:
    shelf = netted.shelf
    return sum(shelf.is_sealed(n) and bool(made) for n, made in shelf.promises.items())


@pytest.mark.parametrize("seed", range(ROUNDS))
def test_nobody_goes_short_whom_another_sharing_would_serve(seed: int) -> None:
    luck = Random(seed)
    for _ in range(SHELVES_A_ROUND):
        shelf = random_shelf(luck)
        netted = settled(shelf)
        served, opened = best(shelf)
        assert (served_by(netted), opened_by(netted)) == (served, opened), shelf


@pytest.mark.parametrize("seed", range(ROUNDS, ROUNDS + 4))
def test_nothing_is_promised_twice(seed: int) -> None:
    luck = Random(seed)
    for _ in range(SHELVES_A_ROUND):
        netted = settled(random_shelf(luck))
        for bottle in netted.shelf.facts.bottles:
            drawn = sum(p.amount for w in netted.wants for p in w.promises
                        if p.bottle == bottle.number)  # fmt: skip
            assert netted.shelf.left[bottle.number] == bottle.left - drawn >= 0
        for want in netted.wants:
            if want.settled is Settled.HELD:
                assert sum(promise.amount for promise in want.promises) == want.need.amount


@pytest.mark.parametrize("seed", range(ROUNDS + 4, ROUNDS + 8))
def test_put_together_once_is_equal_to_the_end_where_strength_counts_from_opening(
    seed: int,
) -> None:
    """The replay opens each bottle on its first day, and finds every class one strength."""
    luck = Random(seed)
    shared = 0
    for _ in range(SHELVES_A_ROUND):
        shelf = sealed_shelf(luck)
        facts = facts_of(shelf)
        lines = {
            key: replace(line, rules=tuple(_from_opening(rule) for rule in line.rules))
            for key, line in facts.lines.items()
        }
        facts = replace(facts, lines=lines)
        made = plan(facts)
        assert replay(facts, made) == (), (seed, shelf)
        shared += any(len(answer.draws) > 1 for answer in made.needs)
    # a law over shelves where nothing is ever put together would hold of anything
    assert shared > SHELVES_A_ROUND / 20


def sealed_shelf(luck: Random) -> Shelf:
    """All still sealed; the early asks are pencilled, so that late ones choose before them."""
    shelf = random_shelf(luck)
    jars = [replace(jar, sealed=True, strength=0.1, life_opened=0, last=99) for jar in shelf.jars]
    asks = [
        replace(
            ask,
            pencilled=ask.day < 15,
            closeness=luck.choice([Closeness.CLOSE, Closeness.ROUGH]),
        )
        for ask in shelf.asks
    ]
    ranked = sorted(asks, key=lambda ask: ask.rank)
    return Shelf(tuple(jars), tuple(ranked), luck.choice([0.002, 0.004, 0.01]))


def _from_opening(rule: Rule) -> Rule:
    return replace(rule, origin=Origin.OPENED) if rule.kind is RuleKind.FADES else rule
