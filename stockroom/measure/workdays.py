"""Open days: weekends and closures hold no work and no deliveries."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass, field
from datetime import date, timedelta

from stockroom.errors import BadDate

_ONE_DAY = timedelta(days=1)
# over a year: the longest real closure is far shorter, a slip in the list is not
_LOOK_DAYS = 400
_MONDAY_TO_FRIDAY = 5


@dataclass(frozen=True, slots=True)
class Calendar:
    """The days and hours when somebody is there.

    `closed` holds first and last day of each closure, both closed; weekends always
    are. `open_from` and `open_to` are minutes after midnight (08:00 and 16:30).
    Raises: BadDate when a closure or the hours run backwards, and, from any
    search, when no open day lies within 400 days.
    """

    closed: tuple[tuple[date, date], ...] = ()
    open_from: int = 480
    open_to: int = 990
    # closures as single weekdays, kept so that a plan can ask thousands of times
    _closed_days: frozenset[date] = field(init=False, repr=False, compare=False)
    _closed_counts: tuple[int, ...] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        if not 0 <= self.open_from < self.open_to <= 1440:
            raise BadDate(
                f"Open from minute {self.open_from} to {self.open_to} is not a day's work.",
                "Give the opening time before the closing time.",
            )
        days = frozenset(day for first, last in self.closed for day in _weekdays(first, last))
        object.__setattr__(self, "_closed_days", days)
        object.__setattr__(self, "_closed_counts", tuple(sorted(day.toordinal() for day in days)))

    def is_open(self, day: date) -> bool:
        """Whether anybody is there on `day`."""
        return day.weekday() < _MONDAY_TO_FRIDAY and day not in self._closed_days

    def on_or_before(self, day: date) -> date:
        """`day` if it is open, else the last open day before it."""
        return day if self.is_open(day) else self._step(day, -1)

    def on_or_after(self, day: date) -> date:
        """`day` if it is open, else the first open day after it."""
        return day if self.is_open(day) else self._step(day, 1)

    def before(self, day: date, n: int = 1) -> date:
        """The `n`-th open day strictly before `day`; with n = 0, `on_or_before`."""
        if _count(n) == 0:
            return self.on_or_before(day)
        for _ in range(n):
            day = self._step(day, -1)
        return day

    def after(self, day: date, n: int = 1) -> date:
        """The `n`-th open day strictly after `day`; with n = 0, `on_or_after`."""
        if _count(n) == 0:
            return self.on_or_after(day)
        for _ in range(n):
            day = self._step(day, 1)
        return day

    def between(self, earlier: date, later: date) -> int:
        """How many open days follow `earlier`, up to and including `later`; never below 0."""
        return max(self._open_through(later) - self._open_through(earlier), 0)

    def _open_through(self, day: date) -> int:
        # day 1 of the ordinal count was a Monday, so whole weeks need no loop
        weeks, rest = divmod(day.toordinal(), 7)
        weekdays = _MONDAY_TO_FRIDAY * weeks + min(rest, _MONDAY_TO_FRIDAY)
        return weekdays - bisect_right(self._closed_counts, day.toordinal())

    def _step(self, start: date, days: int) -> date:
        day, step = start, days * _ONE_DAY
        try:
            for _ in range(_LOOK_DAYS):
                day += step
                if self.is_open(day):
                    return day
        except OverflowError:
            pass
        way = "after" if days > 0 else "before"
        raise BadDate(
            f"No open day within {_LOOK_DAYS} days {way} {start}.", "Check the closed days."
        )


def _weekdays(first: date, last: date) -> list[date]:
    if last < first:
        raise BadDate(f"Closed from {first} to {last} runs backwards.", "Swap the two days.")
    span = (last - first).days + 1
    days = (first + timedelta(days=n) for n in range(span))
    return [day for day in days if day.weekday() < _MONDAY_TO_FRIDAY]


def _count(n: int) -> int:
    if n < 0:
        raise BadDate(f"{n} open days is less than none.", "Give 0 or more.")
    return n
