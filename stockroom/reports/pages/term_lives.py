"""The life of each solution over the term, as bars to draw and as words that say the same."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from datetime import date, timedelta

from stockroom.keeping.verdict import USABLE, verdict
from stockroom.planning.decisions import Answer, Make, Outcome, Plan
from stockroom.planning.facts import Facts
from stockroom.reports.pages.term_choice import Chosen
from stockroom.reports.words import named, raised, weekday_and_day

WIDEST, NARROWEST, USUAL = 900, 2, 7
"""Pixels: the whole term is no wider than the first where its days are no narrower. Our choice."""

TOLD = 12
"""Things said in words of one solution; more are counted. Our choice."""


@dataclass(frozen=True, slots=True)
class Bar:
    """A stretch of days in pixels from the first Monday: `kind` is life, stands, use or short."""

    kind: str
    x: int
    width: int


@dataclass(frozen=True, slots=True)
class Life:
    """One solution: its bars, and in words what they show."""

    key: str
    name: str
    item: str
    bars: tuple[Bar, ...]
    words: str
    short: bool


@dataclass(frozen=True, slots=True)
class Lives:
    """All of them under one scale: `weeks` are (number, x), `shut` the closed days as bars."""

    day: int
    width: int
    today: int | None
    weeks: tuple[tuple[int, int], ...]
    shut: tuple[Bar, ...]
    rows: tuple[Life, ...]


@dataclass(slots=True)
class _Told:
    bars: list[Bar] = field(default_factory=list)
    words: list[str] = field(default_factory=list)
    short: bool = False


def lives_of(known: Facts, plan: Plan, chosen: Chosen) -> Lives:
    """Every line that is needed or made, by name, as far as the choice leaves it."""
    scale = _Scale(known)
    told: dict[str, _Told] = {}
    _stocks(known, plan, chosen, scale, told)
    for make in plan.makes:
        if chosen.make(make):
            _make(make, scale, told.setdefault(make.line, _Told()))
    for need in plan.needs:
        if chosen.booking(need.booking.number) and chosen.item(need.item):
            _use(need, scale, told.setdefault(need.line, _Told()))
    rows = (_life(known, key, one) for key, one in told.items())
    today = scale.at(plan.as_at) if known.start <= plan.as_at <= known.end else None
    return Lives(
        day=scale.day,
        width=scale.at(scale.last) + scale.day,
        today=today,
        weeks=tuple(scale.weeks()),
        shut=tuple(scale.shut(known)),
        rows=tuple(sorted(rows, key=lambda life: (life.name.casefold(), life.key))),
    )


class _Scale:
    def __init__(self, known: Facts) -> None:
        self.first = known.start - timedelta(days=known.start.weekday())
        self.last = known.end + timedelta(days=6 - known.end.weekday())
        count = (self.last - self.first).days + 1
        self.day = max(NARROWEST, min(USUAL, WIDEST // count))

    def at(self, on: date) -> int:
        return (min(max(on, self.first), self.last) - self.first).days * self.day

    def bar(self, kind: str, first: date, last: date) -> Bar:
        """From the morning of the first day to the evening of the last."""
        return Bar(kind, self.at(first), max(self.day, self.at(last) + self.day - self.at(first)))

    def weeks(self) -> Iterator[tuple[int, int]]:
        days = (self.last - self.first).days + 1
        return ((n + 1, n * 7 * self.day) for n in range(days // 7))

    def shut(self, known: Facts) -> Iterator[Bar]:
        days = [self.first + timedelta(days=n) for n in range((self.last - self.first).days + 1)]
        began: date | None = None
        for on in [*days, self.last + timedelta(days=1)]:
            is_shut = on <= self.last and not known.calendar.is_open(on)
            if is_shut and began is None:
                began = on
            if not is_shut and began is not None:
                yield self.bar("shut", began, on - timedelta(days=1))
                began = None


def _stocks(
    known: Facts, plan: Plan, chosen: Chosen, scale: _Scale, told: dict[str, _Told]
) -> None:
    """The bottles that needs are drawn from, each from now to its last day."""
    wanted = [n for n in plan.needs if chosen.booking(n.booking.number) and chosen.item(n.item)]
    drawn = {draw.bottle for need in wanted for draw in need.draws}
    for bottle in known.bottles:
        if bottle.number not in drawn:
            continue
        judged = verdict(bottle.record, known.lines[bottle.line].rules, known.as_at)
        if judged.condition in USABLE:
            one = told.setdefault(bottle.line, _Told())
            until = judged.usable_until
            one.bars.append(scale.bar("life", known.as_at, until or scale.last))
            lasts = f"good until {_day(until, known)}" if until else "no last day"
            one.words.append(f"{bottle.number} {lasts}")


def _make(make: Make, scale: _Scale, one: _Told) -> None:
    until = make.good_until
    if make.ready > make.on:
        one.bars.append(scale.bar("stands", make.on, make.ready - timedelta(days=1)))
    one.bars.append(scale.bar("life", make.ready, until or scale.last))
    ready = f", ready {weekday_and_day(make.ready)}" if make.ready > make.on else ""
    lasts = f", good until {weekday_and_day(until)}" if until and until <= scale.last else ""
    one.words.append(f"{make.id} made {weekday_and_day(make.on)}{ready}{lasts}")


def _use(need: Answer, scale: _Scale, one: _Told) -> None:
    lacking = need.outcome in (Outcome.SHORT, Outcome.REFUSED)
    on = need.booking.on
    one.bars.append(scale.bar("short" if lacking else "use", on, on))
    word = "short" if lacking else "used"
    one.words.append(f"{word} {weekday_and_day(on)} for {need.booking.number}")
    one.short = one.short or lacking


def _life(known: Facts, key: str, one: _Told) -> Life:
    line = known.lines[key]
    more = len(one.words) - TOLD
    words = [*one.words[:TOLD], *([f"and {more} more in the list of days"] if more > 0 else [])]
    bars = _drawn_in_order(one.bars)
    name = named(line.item, line.strength_text)
    return Life(raised(key), name, line.item, tuple(bars), "; ".join(words), one.short)


def _drawn_in_order(bars: Iterable[Bar]) -> list[Bar]:
    """What lies beneath first: a life, then what stands, then uses and what is short."""
    order = ("life", "stands", "use", "short")
    return sorted(set(bars), key=lambda bar: (order.index(bar.kind), bar.x, bar.width))


def _day(on: date, known: Facts) -> str:
    return weekday_and_day(on) if on.year == known.as_at.year else on.isoformat()
