"""The term's load: hands-on minutes of each day, the house's limit, and the days over it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.planning.decisions import DayLoad, Plan
from stockroom.planning.facts import Facts
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.pictures.canvas import SIZE
from stockroom.reports.sheet import page, wrap
from stockroom.reports.words import counted, day

BAR = 10
"""Minutes that one sign of a bar of the text stands for, where the days are not too full."""

MAKES, CHECKS, LIMIT = "=", "o", "|"
_MOST_SIGNS = 36


@dataclass(frozen=True, slots=True)
class LoadDay:
    """The minutes of one day by what is done; `over` is what is above the limit, 0 for within."""

    on: date
    makes: int = 0
    checks: int = 0
    over: int = 0
    work: tuple[str, ...] = ()

    @property
    def minutes(self) -> int:
        """All hands-on minutes of the day."""
        return self.makes + self.checks


@dataclass(frozen=True, slots=True)
class Load:
    """Every day with work from `first` to `last`; `closed` are weekdays with nobody there.

    `limit` is minutes a day, 0 where the house keeps none.
    """

    head: Head
    first: date
    last: date
    limit: int
    days: tuple[LoadDay, ...]
    closed: tuple[date, ...]


def load_of(known: Facts, plan: Plan) -> Load:
    """The load of the plan's term, and of days outside it that have work for it."""
    days = tuple(_day(plan, one) for one in plan.loads)
    first = min([known.start, *(one.on for one in days)])
    last = max([known.end, *(one.on for one in days)])
    span = [first + timedelta(days=n) for n in range((last - first).days + 1)]
    closed = tuple(on for on in span if on.weekday() < 5 and not known.calendar.is_open(on))
    head = head_of(plan, "Hands-on minutes by day", _about(days, known.house.day_minutes))
    return Load(head, first, last, known.house.day_minutes, days, closed)


def _day(plan: Plan, load: DayLoad) -> LoadDay:
    on_it = [one for one in plan.checks if one.best == load.day and not one.optional]
    checks = min(load.minutes, sum(one.minutes for one in on_it if one.subject in load.checks))
    work = (*load.makes, *(f"check {subject}" for subject in load.checks))
    return LoadDay(load.day, load.minutes - checks, checks, load.over, work)


def _about(days: tuple[LoadDay, ...], limit: int) -> str:
    if not days:
        return "no make and no titration is planned"
    total = sum(one.minutes for one in days)
    words = f"{total} minutes planned on {counted(len(days), 'day')}"
    if not limit:
        return f"{words}; the house keeps no limit a day"
    over = [one for one in days if one.over]
    told = f"{counted(len(over), 'day')} over it" if over else "no day over it"
    return f"{words}; the limit is {limit} minutes a day, {told}"


def load_text(load: Load, width: int) -> str:
    """The load as text: a row a day, its minutes, a bar, and words where it is over."""
    most = max([load.limit, *(one.minutes for one in load.days)], default=0)
    step = BAR
    while most / step > _MOST_SIGNS:
        step += BAR
    rows = [_row(load, one, step, width) for one in load.days]
    key = [
        f"  {MAKES}  {step} minutes of making and finishing",
        f"  {CHECKS}  {step} minutes of titrating",
    ]
    key += [f"  {LIMIT}  the limit of {load.limit} minutes"] if load.limit else []
    closed = wrap(f"closed: {_closed(load)}", width) if load.closed else ""
    return page(
        [
            head_lines(load.head, width),
            "\n".join(rows),
            "\n".join(key) if rows else "",
            closed,
            foot_lines(load.head, width),
        ]
    )


def _row(load: Load, one: LoadDay, step: int, width: int) -> str:
    signs = MAKES * _signs(one.makes, step) + CHECKS * _signs(one.checks, step)
    if load.limit:
        at = _signs(load.limit, step)
        signs = signs.ljust(at)[:at] + LIMIT + signs[at:]
    changed = mark(load.head, one.on.isoformat())
    front = f"{changed}{day(one.on)}  {one.minutes:>4} min  {signs}".replace("\u00a0", " ")
    told = f"  {one.over} min OVER" if one.over else ""
    names = ", ".join(one.work)
    whole = f"{front}{told}  {names}"
    if len(whole) <= width:
        return whole.rstrip()
    return f"{front}{told}\n{wrap(names, width, indent=16, hang=16)}"


def _signs(minutes: int, step: int) -> int:
    # a short piece of work still shows
    return max(1, round(minutes / step)) if minutes else 0


def _closed(load: Load) -> str:
    told = [
        day(run[0]) + (f" to {day(run[-1])}" if len(run) > 1 else "") for run in runs(load.closed)
    ]
    return ", ".join(told)


def runs(days: tuple[date, ...]) -> list[list[date]]:
    """Weekdays in runs, a weekend between two of them no gap."""
    found: list[list[date]] = []
    for on in days:
        gap = (on - found[-1][-1]).days if found else 0
        if found and (gap == 1 or (gap == 3 and on.weekday() == 0)):
            found[-1].append(on)
        else:
            found.append([on])
    return found


def load_lines(load: Load) -> dict[str, str]:
    """Each day with its minutes."""
    return {
        one.on.isoformat(): f"{day(one.on)}: {one.minutes} minutes, {', '.join(one.work)}"
        for one in load.days
    }


def load_picture(
    load: Load, size: tuple[float, float] = SIZE, *, form: str = "svg", bare: bool = False
) -> bytes:
    """The picture of it; `size` in mm. On a page the title is the page's: `bare` is False."""
    from stockroom.reports.pictures.canvas import drawn
    from stockroom.reports.pictures.load_drawn import draw_load

    return drawn(load.head, lambda axes: draw_load(axes, load), form, size, bare=bare)


LOAD = Kind(
    "picture", load_text, load_lines, lambda load: {"picture": load_picture(load).decode("utf-8")}
)
