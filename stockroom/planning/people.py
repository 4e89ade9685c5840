"""Who must be there and when: the work of each day, evenings, and what may not be left standing."""

from __future__ import annotations

from collections import Counter
from collections.abc import Collection, Iterable, Iterator, Mapping
from dataclasses import replace
from datetime import date

from stockroom.findings import Finding
from stockroom.measure.days import format_time
from stockroom.planning.decisions import CheckToDo, DayLoad, Make, Watch
from stockroom.planning.explode import Need
from stockroom.planning.facts import Booking, Facts, Line, Recipe
from stockroom.planning.making.equipment import largest_vessel_on
from stockroom.planning.never_kept import dangers_of
from stockroom.planning.timing import DAY_MINUTES, ready_at

# common practice, no source
MIX_BEFORE, DESTROY_AFTER = 30, 30


# -- the work of each day -----------------------------------------------------------


def day_loads(facts: Facts, makes: list[Make], checks: list[CheckToDo]) -> list[DayLoad]:
    """The hands-on work of every day that has any: makes, finishing them, and titrations.

    A check counts on its best day; one that only saves work does not. Over the limit, the
    makes that could be made earlier are named with the latest day on which they still fit.
    """
    work = _Work(facts, makes, checks)
    return [work.load(day) for day in sorted(work.minutes)]


class _Work:
    def __init__(self, facts: Facts, makes: list[Make], checks: list[CheckToDo]) -> None:
        self.facts, self.limit = facts, facts.house.day_minutes
        self.by_id = {make.id: make for make in makes}
        self.minutes: Counter[date] = Counter()
        self.makes: dict[date, list[str]] = {}
        self.checks: dict[date, list[str]] = {}
        for make in makes:
            # filtering on Monday what was started on Friday is Monday's work
            for day, minutes in _spells(make):
                self.minutes[day] += minutes
                row = self.makes.setdefault(day, [])
                row += [make.id] if make.id not in row else []
        for check in checks:
            if check.minutes and not check.optional:
                self.minutes[check.best] += check.minutes
                self.checks.setdefault(check.best, []).append(check.subject)
        # as the days would be with every move made that was found so far
        self.moved = self.minutes.copy()

    def load(self, day: date) -> DayLoad:
        """One day; what goes earlier takes its room there when later days are looked at."""
        total, names = self.minutes[day], self.makes.get(day, [])
        moves = []
        if self.limit and total > self.limit:
            row = [self.by_id[name] for name in names if self.by_id[name].on == day]
            for make in row:
                to = self._earlier(make)
                moves += [(make.id, to)] if to else []
        checks = tuple(self.checks.get(day, ()))
        return DayLoad(day, total, self.limit, tuple(names), checks, tuple(moves))

    def _earlier(self, make: Make) -> date | None:
        """The latest earlier day with room for it; the room is then taken."""
        without = self.moved.copy()
        without.subtract(dict(_spells(make)))
        for day in earlier_days(self.facts, make, self.by_id):
            spells = dict(self._spells_from(make, day))
            if all(without[on] + more <= self.limit for on, more in spells.items()):
                without.update(spells)
                self.moved = without
                return day
        return None

    def _spells_from(self, make: Make, day: date) -> list[tuple[date, int]]:
        if not make.finishing:
            return [(day, make.minutes)]
        calendar, method = self.facts.calendar, self.facts.methods[make.line]
        finished = ready_at((day, calendar.open_from), method, calendar)[0]
        begun = make.minutes - make.finishing
        if finished == day:
            return [(day, make.minutes)]
        return [(day, begun), (finished, make.finishing)]


def _spells(make: Make) -> list[tuple[date, int]]:
    """The days a make is worked on, and the minutes of each."""
    if make.finish_on in (None, make.on):
        return [(make.on, make.minutes)]
    assert make.finish_on is not None
    return [(make.on, make.minutes - make.finishing), (make.finish_on, make.finishing)]


def earlier_days(facts: Facts, make: Make, by_id: dict[str, Make]) -> Iterator[date]:
    """The open days a make could be started on before its own, the latest first.

    It must still keep, what goes into it be ready the day before, and balance and vessel be
    no worse than on its own day. What is titrated when finished stays where it is, since an
    earlier result would count for less.
    """
    if make.fresh or facts.methods[make.line].titrated:
        return
    first = max(make.earliest, facts.as_at)
    day = facts.calendar.before(make.on, 1)
    while day >= first:
        parts = (by_id[source.make] for source in make.sources if source.make in by_id)
        if all(part.ready < day for part in parts) and _as_well_equipped(facts, day, make.on):
            yield day
        day = facts.calendar.before(day, 1)


def _as_well_equipped(facts: Facts, day: date, usual: date) -> bool:
    def finest(on: date) -> int | None:
        return min((b.step for b in facts.balances if b.here(on)), default=None)

    step, known = finest(day), finest(usual)
    if known is not None and (step is None or step > known):
        return False
    held, largest = largest_vessel_on(facts, day), largest_vessel_on(facts, usual)
    return held is None or largest is None or held >= largest


def load_notes(facts: Facts, loads: Iterable[DayLoad], makes: list[Make]) -> Iterable[Finding]:
    """A note for each day over the limit, with the makes that could be made earlier."""
    by_id = {make.id: make for make in makes}
    for load in loads:
        if load.over:
            to = dict(load.movable)
            names = [
                f"{name} ({to[name]})" if name in to else name
                for name in load.makes
                if by_id[name].on == load.day
                and next(earlier_days(facts, by_id[name], by_id), None)
            ]
            yield Finding(
                load.day.isoformat(),
                f"{load.minutes} min hands-on; could be made earlier: {', '.join(names) or 'none'}",
            )


# -- evenings, and what is never kept -------------------------------------------------


def hour_notes(facts: Facts, bookings: Iterable[tuple[Booking, Recipe]]) -> Iterable[Finding]:
    """Bookings on closed days, and the hours of those that staffed hours do not cover."""
    calendar = facts.calendar
    opens, closes = clock(calendar.open_from), clock(calendar.open_to)
    for booking, recipe in bookings:
        begins, ends = booking.minute, booking.minute + booking.lasts_minutes
        gaps = unstaffed(facts, booking, never_kept=bool(recipe.never_kept))
        spans = " and ".join(f"{clock(first)} to {clock(last)}" for first, last in gaps)
        if not calendar.is_open(booking.on):
            yield Finding(booking.number, f"{booking.on} is a closed day: keep it?")
        elif begins < calendar.open_from or ends > calendar.open_to:
            yield Finding(
                booking.number,
                f"{clock(begins)} to {clock(ends)} is outside staffed hours ({opens} to {closes}): "
                f"someone must be here from {clock(begins - MIX_BEFORE)} ({spans} is not staffed)",
            )
        elif gaps:
            yield Finding(
                booking.number,
                f"ends {clock(ends)}, and staffed hours at {closes}: someone must stay to destroy "
                f"what is never kept ({spans} is not staffed)",
            )


def unstaffed(facts: Facts, booking: Booking, *, never_kept: bool) -> list[tuple[int, int]]:
    """The stretches somebody must be there for outside staffed hours, in minutes of the day.

    Half an hour before a session that staffed hours do not cover, to mix; half an hour after
    it where something must be destroyed. Empty for a session inside the hours.
    """
    calendar = facts.calendar
    begins, ends = booking.minute, booking.minute + booking.lasts_minutes
    inside = calendar.open_from <= begins and ends <= calendar.open_to
    first = begins if inside else begins - MIX_BEFORE
    last = ends + DESTROY_AFTER if never_kept else ends
    early = (first, min(last, calendar.open_from))
    late = (max(first, calendar.open_to), last)
    return [(start, end) for start, end in (early, late) if start < end]


def must_be_here(
    facts: Facts, booking: Booking, *, set_out: int, never_kept: bool
) -> list[tuple[int, int]]:
    """As `unstaffed`, and on a closed day, when nobody is there at all, the whole session.

    Then from when it is set out (`set_out`, a minute of the day) or what is never kept may be
    mixed, whichever comes first, to the end, or until all of it is destroyed.
    """
    if facts.calendar.is_open(booking.on):
        return unstaffed(facts, booking, never_kept=never_kept)
    ends = booking.minute + booking.lasts_minutes + (DESTROY_AFTER if never_kept else 0)
    return [(min(set_out, booking.minute - MIX_BEFORE), ends)]


def longest_stay(gaps: Mapping[str, Iterable[tuple[int, int]]], number: str) -> str:
    """Who must stay longest on a day, where that is after this booking's own last minute.

    `gaps` are the stretches of each booking of the day. "" where no other one goes on longer,
    or none of this one's own is to be covered.

    >>> longest_stay({"K15": [(1080, 1210)], "K16": [(1080, 1240)]}, "K15")
    'that day to 20:40 (K16)'
    """
    ends = {each: max(last for _, last in row) for each, row in gaps.items() if row}
    if number not in ends:
        return ""
    latest = max(ends, key=lambda each: ends[each])
    return f"that day to {clock(ends[latest])} ({latest})" if ends[latest] > ends[number] else ""


def watches(needs: Iterable[Need], short: Collection[str]) -> list[Watch]:
    """Each booking with something that is never kept, in the order of the needs.

    By the words of its recipe, else by those of a line it really gets (not in `short`).
    """
    row: dict[str, Watch] = {}
    lines: dict[str, list[Line]] = {}
    recipes: dict[str, Recipe] = {}
    for need in needs:
        recipes[need.booking.number] = need.recipe
        lines.setdefault(need.booking.number, []).append(need.line)
        gets = need.ref not in short
        how = need.recipe.never_kept or (need.line.never_kept if gets else "")
        if how and need.booking.number not in row:
            row[need.booking.number] = _watch(need, how)
    return [
        replace(watch, dangers=dangers_of(watch.how, recipes[number], lines[number]))
        for number, watch in row.items()
    ]


def _watch(need: Need, how: str) -> Watch:
    booking = need.booking
    return Watch(
        booking=booking.number,
        on=booking.on,
        title=need.recipe.title,
        not_before=booking.minute - MIX_BEFORE,
        destroy_by=booking.minute + booking.lasts_minutes + DESTROY_AFTER,
        how=how,
        ticked_by=booking.destroyed_by,
    )


def watch_note(watch: Watch) -> Finding:
    """The same in a sentence."""
    mix, destroy = clock(watch.not_before), clock(watch.destroy_by)
    return Finding(
        watch.booking,
        f"{watch.on}: mix not before {mix}, destroy by {destroy} and tick it with "
        f"initials. {watch.how}",
    )


def clock(minute: int) -> str:
    """A time of day; past midnight it says which day."""
    days, rest = divmod(minute, DAY_MINUTES)
    which = {0: "", 1: " the day after", -1: " the day before"}.get(days, f" {days} days on")
    return format_time(rest) + which
