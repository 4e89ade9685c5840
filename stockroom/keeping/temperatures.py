"""What a logger wrote of a place, and what so much warmth does to anything that ages there.

Readings are local clock time to the minute. Between two of them the pace is taken
to run straight from one to the other (trapezoid): a logger samples and does not
average, and a step would count a whole morning at the night's temperature. Of
readings further apart than the gap limit nobody knows what lay between: there the
place's own temperature counts, as it does before the first and after the last.
A day runs from midnight to midnight.
"""

from __future__ import annotations

import math
import operator
from array import array
from bisect import bisect_left, bisect_right
from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import date, datetime, timedelta
from itertools import accumulate, pairwise

from stockroom.errors import BadDate
from stockroom.keeping.arrhenius import MKT_EA, Response, kinetic_response, temperature_at

MINUTES_PER_DAY = 1440

GAP_STEPS, GAP_MINUTES, GAP_MOST = 3, MINUTES_PER_DAY, 7 * MINUTES_PER_DAY
"""Readings further apart than 3 usual steps and than a day leave a gap, and further apart than
a week always. Ours, no source."""

# a life split over two stays at one temperature must come out a whole one
_SLACK = 1e-9


def minute_of(moment: datetime) -> int:
    """A clock time as minutes since midnight of 1 January of the year 1, seconds dropped."""
    return midnight(moment.date()) + 60 * moment.hour + moment.minute


def midnight(day: date) -> int:
    """The minute a day begins at, counted as in `minute_of`."""
    return (day.toordinal() - 1) * MINUTES_PER_DAY


def moment_of(minute: int) -> datetime:
    """The clock time of a minute; `minute_of` undone."""
    return datetime.min + timedelta(minutes=minute)


@dataclass(frozen=True, slots=True)
class Summary:
    """What a record says of a stretch of time.

    In the means readings equally far apart count alike, as the pharmacopoeia has it (USP
    29 <1160>); others by the time between them (trapezoid). `gaps` are the stretches
    inside it that no reading tells of.
    """

    count: int
    first: datetime
    last: datetime
    lowest: float
    highest: float
    mean: float
    kinetic: float
    gaps: tuple[tuple[datetime, datetime], ...] = ()


@dataclass(frozen=True, slots=True)
class TemperatureLog:
    """The readings of one place, in order of time: `minutes` as in `minute_of`, and their °C.

    Raises: BadDate when they do not run forward, or there are none. What was added
    up once for a response is kept, so that asking again takes a few steps only.
    """

    minutes: tuple[int, ...]
    celsius: tuple[float, ...]
    gap_limit: int = field(init=False, compare=False)
    _held: array[int] = field(init=False, repr=False, compare=False)
    _sums: dict[Response, tuple[array[float], array[float]]] = field(
        init=False, repr=False, compare=False
    )

    def __post_init__(self) -> None:
        forward = all(map(operator.lt, self.minutes, self.minutes[1:]))
        if not self.minutes or len(self.minutes) != len(self.celsius) or not forward:
            raise BadDate(
                f"{len(self.minutes)} times with {len(self.celsius)} temperatures"
                " are no record that runs forward.",
                "Give one temperature for each time, the earliest first.",
            )
        object.__setattr__(self, "gap_limit", gap_limit(self.minutes))
        spans = map(self._told, map(operator.sub, self.minutes[1:], self.minutes))
        object.__setattr__(self, "_held", array("q", accumulate(spans, initial=0)))
        object.__setattr__(self, "_sums", {})

    def __hash__(self) -> int:
        # a year of readings is not gone through to look a bottle up
        return hash((len(self.minutes), self.minutes[0], self.minutes[-1], self.celsius[-1]))

    @classmethod
    def of(cls, readings: Iterable[tuple[datetime, float]]) -> TemperatureLog:
        """A record of these readings, in any order. Raises: BadDate for two at one time."""
        ordered = sorted((minute_of(when), degrees) for when, degrees in readings)
        return cls(tuple(at for at, _ in ordered), tuple(degrees for _, degrees in ordered))

    @property
    def first(self) -> datetime:
        """When it begins."""
        return moment_of(self.minutes[0])

    @property
    def last(self) -> datetime:
        """When it ends."""
        return moment_of(self.minutes[-1])

    def _told(self, span: int) -> int:
        return span if span <= self.gap_limit else 0

    def own_minutes(
        self, response: Response, start: int, end: int, elsewhere: float = 0.0
    ) -> float:
        """Minutes at the response's own temperature that do what `start` to `end` did here.

        `elsewhere` is the pace where no reading tells; 0 leaves that time out.
        """
        paced_end, held_end = self._until(response, end)
        paced_start, held_start = self._until(response, start)
        untold = (end - start) - (held_end - held_start)
        return paced_end - paced_start + untold * elsewhere

    def told_minutes(self, start: int, end: int) -> int:
        """How many of the minutes from `start` to `end` the readings tell of."""
        return self._told_until(end) - self._told_until(start)

    def summary(
        self, start: int | None = None, end: int | None = None, *, ea_kj_mol: float = MKT_EA
    ) -> Summary | None:
        """Extremes, means and gaps of the readings from `start` to `end`; None without any."""
        low = 0 if start is None else bisect_left(self.minutes, start)
        high = len(self.minutes) if end is None else bisect_right(self.minutes, end)
        if low >= high:
            return None
        minutes, degrees = self.minutes[low:high], self.celsius[low:high]
        response = kinetic_response(ea_kj_mol)
        return Summary(
            count=high - low,
            first=moment_of(minutes[0]),
            last=moment_of(minutes[-1]),
            lowest=min(degrees),
            highest=max(degrees),
            mean=self._mean(minutes, list(degrees)),
            kinetic=temperature_at(response, self._mean(minutes, [*map(response.pace, degrees)])),
            gaps=tuple(
                (moment_of(one), moment_of(two))
                for one, two in pairwise(minutes)
                if not self._told(two - one)
            ),
        )

    def _mean(self, minutes: tuple[int, ...], values: list[float]) -> float:
        spans = [self._told(two - one) for one, two in pairwise(minutes)]
        if len(set(spans)) <= 1 or not any(spans):
            return math.fsum(values) / len(values)
        halves = (
            span * (one + two) for span, (one, two) in zip(spans, pairwise(values), strict=True)
        )
        return sum(halves) / (2 * sum(spans))

    def _until(self, response: Response, minute: int) -> tuple[float, int]:
        """Own minutes and told minutes from the first reading up to a minute."""
        paces, sums = self._added_up(response)
        at, part, span = self._placed(minute)
        if not part:
            return sums[at], self._held[at]
        rise = (paces[at + 1] - paces[at]) * part / (2 * span)
        return sums[at] + part * (paces[at] + rise), self._held[at] + part

    def _told_until(self, minute: int) -> int:
        at, part, _ = self._placed(minute)
        return self._held[at] + part

    def _placed(self, minute: int) -> tuple[int, int, int]:
        """The last reading not after a minute, the told minutes since, and to the next one."""
        at = bisect_right(self.minutes, minute) - 1
        if at < 0:
            return 0, 0, 0
        if at + 1 == len(self.minutes):
            return at, 0, 0
        span = self.minutes[at + 1] - self.minutes[at]
        return at, minute - self.minutes[at] if self._told(span) else 0, span

    def _added_up(self, response: Response) -> tuple[array[float], array[float]]:
        if response not in self._sums:
            # a logger has a few hundred different readings a year, and exponentials are slow
            pace = {degrees: response.pace(degrees) for degrees in set(self.celsius)}
            paces = array("d", map(pace.__getitem__, self.celsius))
            spans = map(operator.sub, self._held[1:], self._held)
            doubled = map(operator.mul, spans, map(operator.add, paces, paces[1:]))
            sums = array("d", accumulate(map((0.5).__mul__, doubled), initial=0.0))
            self._sums[response] = paces, sums
        return self._sums[response]


def gap_limit(minutes: tuple[int, ...]) -> int:
    """The longest time between two readings that is no gap: 3 usual steps, from a day to a week."""
    steps = sorted(map(operator.sub, minutes[1:], minutes))
    usual = steps[len(steps) // 2] if steps else 0
    return min(max(GAP_STEPS * usual, GAP_MINUTES), GAP_MOST)


@dataclass(frozen=True, slots=True)
class Stretch:
    """A bottle's time in one place, `first` to `last`: its °C and its record, where known."""

    first: date
    last: date
    temperature_c: float | None = None
    log: TemperatureLog | None = None

    def pace(self, response: Response | None) -> float:
        """The pace where no reading tells; 1 where no temperature is known either."""
        if response is None or self.temperature_c is None:
            return 1.0
        return response.pace(self.temperature_c)

    def own_days(self, response: Response | None, since: date, until: date) -> float:
        """Days at the response's own temperature that do what `since` to `until` did here.

        Nothing for days that run backwards. Without a response each day counts once.
        """
        if until <= since:
            return 0.0
        if response is None or self.log is None:
            return (until - since).days * self.pace(response)
        start, end = midnight(since), midnight(until)
        return self.log.own_minutes(response, start, end, self.pace(response)) / MINUTES_PER_DAY

    def told_days(self) -> float:
        """How many days of it the record tells of."""
        if self.log is None:
            return 0.0
        return self.log.told_minutes(midnight(self.first), midnight(self.last)) / MINUTES_PER_DAY

    def reach(self, response: Response | None, since: date, own_days: float) -> date:
        """The last day by which no more than `own_days` are used up here, counted from `since`.

        The bottle is taken to stay for good; `date.max` when that never ends.
        """
        left, pace = own_days + _SLACK, self.pace(response)
        furthest = (date.max - since).days
        if self.log is not None and response is not None:
            # within the record day by day; what comes after it is as without
            told = max(0, min((self.log.last.date() - since).days + 1, furthest))
            days = bisect_right(
                range(told + 1),
                left,
                key=lambda count: self.own_days(response, since, since + timedelta(days=count)),
            )
            if days <= told:
                return since + timedelta(days=days - 1)
            # the slack is in `left` once, and what the record used is taken off it
            left -= self.own_days(response, since, since + timedelta(days=told))
            since, furthest = since + timedelta(days=told), furthest - told
        return date.max if left >= pace * furthest else since + timedelta(days=int(left / pace))
