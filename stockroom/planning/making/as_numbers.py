"""The groups of a plan as the numbers the planner of batches works on, and back.

Day 0 is the day the plan is made; volumes are cm³. A batch begun on a day before the last
that will do has that whole day: it may start as late as leaves its work inside hours.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, timedelta
from functools import lru_cache

from stockroom.lots.model import Days, Demand, Part, Problem, Sort
from stockroom.lots.objective import PENCE_A_MINUTE, POUR_AWAY
from stockroom.measure.workdays import Calendar
from stockroom.planning.amounts import UL_PER_DM3, draw_for, price, strong_enough
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.facts import Facts, Form, Ingredient, Line, Method
from stockroom.planning.making.groups import Group
from stockroom.planning.making.sizing import Sizing
from stockroom.planning.timing import Moment, latest_start, ready_at
from stockroom.planning.wants import Want
from stockroom.planning.windows import good_until, held

UL_PER_CM3 = 1000


@dataclass(slots=True)
class Numbers:
    """The problem, and what its rows stand for: `wants` by demand, `groups` by sort."""

    problem: Problem
    groups: list[Group]
    wants: list[Want]


def as_numbers(
    facts: Facts, groups: list[Group], shelf: Shelf, exact: frozenset[str] = frozenset()
) -> Numbers:
    """State what is to be made as a problem; lines in `exact` have no least batch."""
    return _Stating(facts, groups, shelf, exact).run()


class _Stating:
    def __init__(
        self, facts: Facts, groups: list[Group], shelf: Shelf, exact: frozenset[str]
    ) -> None:
        self.facts, self.groups, self.shelf, self.exact = facts, groups, shelf, exact
        self.calendar = facts.calendar
        last = max((w.latest[0] for g in groups for w in g.wants if w.latest), default=facts.as_at)
        uses = (want.need.on for group in groups for want in group.roots)
        self.days = self._day(max([last, *uses])) + 1
        self.working = tuple(
            day for day in range(self.days) if self.calendar.is_open(self._date(day))
        )
        self.span: dict[int, tuple[int, int]] = {}
        self.demands: list[Demand] = []
        self.asked: list[Want] = []

    def run(self) -> Numbers:
        for group in self.groups:
            self._ask(group)
        # from the top down, since what a stock must be in time for is known by then
        sorts = tuple(self._sort(group) for group in self.groups)
        problem = Problem(
            days=self.days,
            working=self.working,
            sorts=sorts,
            demands=tuple(self.demands),
            limit=float(self.facts.house.day_minutes) if self.facts.house.day_minutes else None,
            whole=True,
        )
        return Numbers(problem, self.groups, self.asked)

    def _day(self, day: date) -> int:
        return (day - self.facts.as_at).days

    def _date(self, day: int) -> date:
        return self.facts.as_at + timedelta(days=day)

    # -- what is asked for ---------------------------------------------------------------

    def _ask(self, group: Group) -> None:
        for want in group.roots:
            assert want.latest and want.amount is not None
            first, last = (self._day(day) for day in window(self.facts, want, self.shelf))
            use = self._day(want.need.on)
            volume = want.amount / UL_PER_CM3
            self.demands.append(Demand(group.number, volume, first, last, use))
            self.asked.append(want)
            self._reaches(group, first, last)
            self._starts_by(group, want.latest)

    def _reaches(self, group: Group, first: int, last: int) -> None:
        low, high = self.span.get(group.number, (first, last))
        self.span[group.number] = min(low, first), max(high, last)

    def _starts_by(self, group: Group, moment: Moment) -> None:
        day = self._day(moment[0])
        group.starts[day] = min(moment, group.starts.get(day, moment))

    # -- what can be made ----------------------------------------------------------------

    def _sort(self, group: Group) -> Sort:
        line, method = group.line, group.method
        sizing = Sizing(self.facts, line, method, exact=line.key in self.exact)
        low, high = self.span.get(group.number, (0, self.days - 1))
        span = [day for day in self.working if low <= day <= high]
        parts = tuple(self._part(group, one, child, span) for one, child in group.parts)
        usual = self.facts.usual.get(line.key, ())
        return Sort(
            name=line.key,
            minutes=float(method.minutes),
            smallest=sizing.least(group.wants) / UL_PER_CM3,
            largest=sizing.most / UL_PER_CM3 if sizing.most else float("inf"),
            waste=self._waste(group),
            parts=parts,
            finishing=float(method.finish_minutes),
            finish_on=self._finished(group, span) if method.finish_minutes else (),
            step=0.0 if sizing.exact else max(1, self.facts.house.batch_step) / UL_PER_CM3,
            usual=frozenset(self._day(day) for day in usual if day >= self.facts.as_at),
        )

    def _waste(self, group: Group) -> float:
        line = group.line
        until = good_until(line, self.facts.as_at)
        pence = price(self.facts, line) * UL_PER_CM3
        # what keeps is stock for another day; nobody knows of whom, so it is not worth nothing
        if until is None or until > self.facts.as_at:
            pence = 0.0
        return POUR_AWAY / UL_PER_CM3 + pence / PENCE_A_MINUTE

    def _start(self, group: Group, day: int) -> Moment:
        late = max(self.calendar.open_from, self.calendar.open_to - group.method.minutes)
        return group.starts.get(day, (self._date(day), late))

    def _finished(self, group: Group, span: list[int]) -> Days:
        row = list(range(self.days))
        for day in span:
            done = ready_at(self._start(group, day), group.method, self.calendar)[0]
            row[day] = min(self._day(done), self.days - 1)
        return tuple(row)

    def _part(self, group: Group, ingredient: Ingredient, child: Group, span: list[int]) -> Part:
        first, last = [-1] * self.days, [-1] * self.days
        # bought things it waits for: the soonest of them, since each want is held to its own
        ready = min(max(0, self._day(w.ready_from or self.facts.as_at)) for w in child.wants)
        oldest = 0
        for day in span:
            start = self._start(group, day)
            latest = _latest(start, child.method, self.calendar, self.facts.as_at)
            if latest is None:
                continue
            until = self._day(latest[0])
            oldest = self._first_good(group.line, ingredient, child.line, oldest, day)
            if max(oldest, ready) <= until:
                first[day], last[day] = max(oldest, ready), until
                self._reaches(child, max(oldest, ready), until)
                self._starts_by(child, latest)
        share = share_of(child.line, group.line, ingredient)
        return Part(child.number, share, tuple(first), tuple(last))

    def _first_good(
        self, product: Line, ingredient: Ingredient, line: Line, day: int, wanted: int
    ) -> int:
        """The first day, from `day` on, whose batch is good and strong enough on the day wanted."""
        while day < wanted:
            made, use = self._date(day), self._date(wanted)
            until = good_until(line, made)
            good = until is None or until >= use
            written = ingredient.per_dm3 is not None
            if good and (written or strong_enough(line, held(line, made, use), product)):
                break
            day += 1
        return day


def window(facts: Facts, want: Want, shelf: Shelf) -> tuple[date, date]:
    """The first and last day a make for a need may start: it keeps, and all it takes is there."""
    assert want.latest is not None
    last = want.latest[0]
    stood = [shelf.ready_on(p.bottle) for part in want.parts for p in part.promises]
    days = [want.earliest, want.ready_from, *stood]
    first = min(max((day for day in days if day), default=last), last)
    return first, _weighed_by(facts, want, first, last)


def _weighed_by(facts: Facts, want: Want, first: date, last: date) -> date:
    """The last day, back to `first`, on which there is a balance for what it takes of a solid."""
    solid = any(facts.lines[part.line].form is Form.SOLID for part in want.parts)
    day = last
    while solid and facts.balances and day > first:
        if any(balance.here(day) for balance in facts.balances):
            return day
        day = facts.calendar.before(day, 1)
    # no day has one: the batch stays where it is, and says so
    return last


def share_of(child: Line, product: Line, ingredient: Ingredient) -> float:
    """How much of a made ingredient goes into the same volume of product, at nominal strength."""
    return draw_for(child, child.strength, product, UL_PER_DM3, ingredient.per_dm3) / UL_PER_DM3


@lru_cache(maxsize=65536)
def _kept_latest(
    start: Moment, minutes: int, stands: float, finish: int, calendar: Calendar, floor: date
) -> Moment | None:
    method = Method("", (), minutes, finish_minutes=finish, stands_hours=stands)
    return latest_start(start, method, calendar, floor)


def _latest(start: Moment, method: Method, calendar: Calendar, floor: date) -> Moment | None:
    """As `latest_start`; asked again and again for the same few kinds of method."""
    minutes, stands = method.minutes, method.stands_hours
    return _kept_latest(start, minutes, stands, method.finish_minutes, calendar, floor)
