"""Two technicians who follow the plan as people do: late, a little more, sometimes not at all."""

from __future__ import annotations

import random
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from datetime import date, timedelta
from pathlib import Path

from year_acts import Act

from stockroom.errors import BrokenPlan, StockroomError
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Make, Order, Plan
from stockroom.planning.facts import Bottle, Facts, Firmness
from stockroom.service.plan import term_plan
from stockroom.store.snapshot import facts

PLACES = ("A1", "A2", "A3")


@dataclass
class People:
    """What the two know on a day, and what they have still to do."""

    path: Path
    chance: random.Random
    plan: Plan | None = None
    makes: list[tuple[date, Make]] = field(default_factory=list)
    coming: list[tuple[date, Order]] = field(default_factory=list)
    written: list[int] = field(default_factory=list)
    seen: set[str] = field(default_factory=set)
    known: Facts | None = None

    def day(self, today: date) -> Iterator[Act]:
        """What is done on a day, one thing after the other; each is chosen after the one before."""
        self.known = facts(self.path, today)
        if today.weekday() == 0 or self.plan is None:
            yield from self._week(today)
        if today.weekday() > 4 and self.chance.random() < 0.7:
            return
        yield from self._arrivals(today)
        yield from self._makes(today)
        yield from self._classes(today)
        for _ in range(self.chance.randint(1, 5)):
            act = self._odd_job(today)
            if act is not None:
                yield act

    def _week(self, today: date) -> Iterator[Act]:
        """Make the plan, note what to do by it, and take the bookings that came in."""
        try:
            self.plan = term_plan(self.path, as_at=today, start=today, end=today + timedelta(21))
        except BrokenPlan:
            raise
        except StockroomError:
            # a bottle nobody can judge stops a plan now and then, and is told; work goes on
            self.plan = None
        plan = self.plan
        if plan is not None:
            for make in plan.makes:
                key = f"{make.line} {','.join(make.bookings)}"
                # one in eight is forgotten, and some are begun late
                if key not in self.seen and self.chance.random() < 0.88:
                    self.makes.append(
                        (make.on + timedelta(self.chance.choice((0, 0, 0, 1, 3))), make)
                    )
                self.seen.add(key)
            for order in plan.orders:
                if order.order_by <= today + timedelta(7) and f"{order.line}!" not in self.seen:
                    self.seen.add(f"{order.line}!")
                    self.coming.append((today + timedelta(self.chance.randint(5, 20)), order))
        for _ in range(self.chance.randint(1, 4)):
            yield self._booking(today)

    def _booking(self, today: date) -> Act:
        assert self.known is not None
        recipe, _version = self.chance.choice(sorted(self.known.recipes))
        day = today + timedelta(self.chance.randint(8, 25))
        words = {
            "recipe": recipe,
            "on": day.isoformat(),
            "minute": str(self.chance.choice((555, 670, 810))),
            "groups": str(self.chance.randint(2, 14)),
            "department": self.chance.choice(("CH", "BI")),
        }
        return Act("book", words=words)

    def _arrivals(self, today: date) -> Iterator[Act]:
        due = [each for each in self.coming if each[0] <= today]
        self.coming = [each for each in self.coming if each[0] > today]
        for _, order in due:
            self.seen.discard(f"{order.line}!")
            year = today.year + self.chance.randint(1, 3)
            printed = self.chance.choice(("none", f"{self.chance.randint(1, 12):02}/{year}"))
            for size in order.sold_as:
                words = {
                    "line": order.line,
                    "printed": printed,
                    "place": self.chance.choice(PLACES),
                    "count": str(min(3, max(1, order.packs))),
                }
                yield Act("arrive", "", size.size, order.kind.value, words=words)

    def _makes(self, today: date) -> Iterator[Act]:
        due = [each for each in self.makes if each[0] <= today]
        self.makes = [each for each in self.makes if each[0] > today]
        for _, make in due:
            volume = int(make.volume * self.chance.choice((1, 1, 1, 1.2, 0.9, 0.6)))
            volume = max(1000, volume // 1000 * 1000)
            words = {"line": make.line, "place": self.chance.choice(PLACES)}
            late = self.chance.choice((0, 0, 0, 0, 1))
            yield Act("make", "", volume, Kind.VOLUME.value, late, words)

    def _classes(self, today: date) -> Iterator[Act]:
        for need in self.plan.needs if self.plan else ():
            if need.booking.on == today and need.booking.firmness is not Firmness.DROPPED:
                for draw in need.draws:
                    bottle = draw.bottle or self._of_line(draw.line)
                    amount = int(draw.amount * self.chance.uniform(0.8, 1.1))
                    if bottle and amount:
                        words = {"booking": need.booking.number}
                        yield Act("draw", bottle, amount, draw.kind.value, words=words)

    def _of_line(self, line: str) -> str:
        """A bottle made since the plan was printed, the newest of its line."""
        made = [b.number for b in facts(self.path, date.max).bottles if b.line == line]
        return made[-1] if made else ""

    def _odd_job(self, today: date) -> Act | None:
        assert self.known is not None
        bottle = self.chance.choice(self.known.bottles)
        job = self.chance.choices([name for name, _ in _JOBS], [often for _, often in _JOBS])[0]
        return _CHOOSE.get(job, _plain)(self, job, bottle, today)

    def late(self) -> int:
        """How many days ago something happened that is written down now."""
        return self.chance.choice((0, 0, 0, 0, 0, 0, 1, 2, 3, 7, 20))

    def some(self, bottle: Bottle) -> int:
        """An amount somebody might take from a bottle: now and then more than there is."""
        part = self.chance.choice((0.02, 0.05, 0.1, 0.3, 1.0, 1.5))
        return max(1000, int(bottle.left * part) // 1000 * 1000)

    def kind(self, bottle: Bottle) -> str:
        """What the bottle's amounts are of."""
        assert self.known is not None
        return self.known.lines[bottle.line].kind.value


_JOBS = (
    ("draw", 22), ("count", 8), ("judge", 4), ("look", 6), ("found", 6), ("move", 5), ("open", 4),
    ("spill", 3), ("lend", 2), ("lend back", 2), ("lost", 2), ("turned up", 4), ("spoil", 1),
    ("discard", 2), ("put right", 6), ("decant", 4), ("mix", 3), ("shift", 2), ("cancel", 1),
    ("take back", 1),
)  # fmt: skip

Chooses = Callable[[People, str, Bottle, date], Act | None]


def _plain(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    return Act(job, bottle.number, ago=people.late())


def _amount(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    return Act(job, bottle.number, people.some(bottle), people.kind(bottle), people.late())


def _count(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    micro = int(bottle.left * people.chance.choice((0.5, 0.9, 0.98, 1, 1, 1.02)))
    return Act(job, bottle.number, micro, people.kind(bottle), people.late())


def _judge(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    eye = people.chance.choice(("a third left", "about half left", "nearly empty"))
    return Act(job, bottle.number, ago=people.late(), words={"eye": eye})


def _placed(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    place = people.chance.choice(PLACES)
    return Act(job, bottle.number, ago=people.late(), words={"place": place})


def _look(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    passed = people.chance.choice(("yes", "yes", "yes", "no"))
    return Act(job, bottle.number, ago=people.late(), words={"passed": passed})


def _found(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    assert people.known is not None
    line = people.known.lines[bottle.line]
    if line.strength is None or line.unit != "mol/dm3":
        return None
    words = {"strength": f"{line.strength * people.chance.uniform(0.9, 1.02):.4g} {line.unit}"}
    return Act(job, bottle.number, ago=people.late(), words=words)


def _put_right(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    if not people.written:
        return None
    # of what was written lately, mostly
    entry = people.chance.choice(people.written[-40:])
    return Act(job, words={"entry": str(entry)})


def _pour(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    assert people.known is not None
    like = [b.number for b in people.known.bottles if b.line == bottle.line and b is not bottle]
    if job == "mix" and not like:
        return None
    words = {"place": people.chance.choice(PLACES)}
    if job == "mix":
        words["with"] = people.chance.choice(like)
    return Act(job, bottle.number, people.some(bottle), people.kind(bottle), people.late(), words)


def _rebook(people: People, job: str, bottle: Bottle, today: date) -> Act | None:
    assert people.known is not None
    ahead = [booking for booking in people.known.bookings if booking.on >= today]
    if not ahead:
        return None
    words = {"booking": people.chance.choice(ahead).number}
    if job == "shift":
        words["on"] = (today + timedelta(people.chance.randint(1, 20))).isoformat()
    return Act(job, words=words)


_CHOOSE: dict[str, Chooses] = {
    "draw": _amount,
    "spill": _amount,
    "lend": _amount,
    "lend back": _amount,
    "count": _count,
    "judge": _judge,
    "move": _placed,
    "turned up": _placed,
    "look": _look,
    "found": _found,
    "put right": _put_right,
    "decant": _pour,
    "mix": _pour,
    "shift": _rebook,
    "cancel": _rebook,
    "take back": _rebook,
}
