"""When a want can be made: the last start in time and the first that keeps, or why never."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.days import format_time
from stockroom.planning.facts import Facts, Line, Method
from stockroom.planning.timing import Moment, hours, latest_start, ready_at
from stockroom.planning.wants import Want
from stockroom.planning.windows import earliest_start, will_do


@dataclass(frozen=True, slots=True)
class Times:
    """The days a make may start, `earliest` to `latest`, to be ready by `deadline`.

    `latest` is None when no day will do, and `cannot` says why; `said` is what has to be
    said of the day all the same.
    """

    latest: Moment | None
    earliest: date | None
    deadline: Moment
    cannot: str = ""
    said: str = ""


class MakingTimes:
    """Times of makes of one house. Wants that are alike are asked about once."""

    def __init__(self, facts: Facts) -> None:
        self.facts = facts
        self._known: dict[tuple[object, ...], Times] = {}

    def of(self, want: Want, line: Line, method: Method) -> Times:
        """When a want of a line can be made."""
        own = None if want.under else id(want.need.requirement)
        key = (line.key, own, want.need.on, want.need.booking.minute, want.deadline)
        if key not in self._known:
            self._known[key] = self._of(want, line, method)
        return self._known[key]

    def _of(self, want: Want, line: Line, method: Method) -> Times:
        latest, deadline, said = self._latest(want, line, method)
        if latest is None:
            return Times(None, None, deadline, self._why_never(want, line, method))
        fresh = want.under is None and want.need.fresh
        if fresh and latest[0] != want.need.on:
            return Times(None, None, deadline, self._not_by_then(want, line, method), said)
        requirement = want.need.requirement if want.under is None else None
        earliest = latest[0] if fresh else earliest_start(
            self.facts, line, requirement, want.use_day, latest[0]
        )  # fmt: skip
        return Times(latest, earliest, deadline, said=said)

    def _latest(self, want: Want, line: Line, method: Method) -> tuple[Moment | None, Moment, str]:
        """The last start in time and not too early to keep; else the morning itself may do."""
        found = self._last_good_start(want, line, method, want.deadline)
        own_time = (want.need.on, want.need.booking.minute)
        if found is not None or want.under is not None or want.deadline == own_time:
            return found, want.deadline, ""
        found = self._last_good_start(want, line, method, own_time)
        if found is None:
            return None, want.deadline, ""
        day_before = self.facts.calendar.before(want.need.on, 1)
        late = day_before < self.facts.as_at
        why = "it is too late for that" if late else "it would not keep, or not be ready"
        return found, own_time, f"not done by {day_before} as the house has it: {why}"

    def _last_good_start(
        self, want: Want, line: Line, method: Method, deadline: Moment
    ) -> Moment | None:
        found = latest_start(deadline, method, self.facts.calendar, self.facts.as_at)
        requirement = want.need.requirement if want.under is None else None
        if found is None or will_do(line, requirement, found[0], want.use_day):
            return found
        return None

    def _why_never(self, want: Want, line: Line, method: Method) -> str:
        start = latest_start(want.deadline, method, self.facts.calendar, date.min.replace(year=2))
        if start and start[0] >= self.facts.as_at:
            return f"cannot: {line.key} made on {start[0]} would not do on {want.use_day}"
        day = f"; work had to start by {start[0]}" if start else ""
        stands = f"stands {hours(method.stands_hours)}, " if method.stands_hours else ""
        return (
            f"cannot: {line.key} {stands}booked {want.need.on}, "
            f"and today is {self.facts.as_at}{day}"
        )

    def _not_by_then(self, want: Want, line: Line, method: Method) -> str:
        """Why what must be fresh cannot be: "…: ready 08:50, class 08:30"."""
        on, minutes = want.need.on, method.minutes + round(60 * method.stands_hours)
        at = format_time(want.need.booking.minute)
        words = (
            f"cannot: {line.key} takes {minutes} min on the morning of {on}, "
            f"and that day leaves no staffed time before {at}"
        )
        calendar = self.facts.calendar
        ready, minute = ready_at((on, calendar.open_from), method, calendar)
        # nobody is in on a closed day, and what is ready on another day has no hour to compare
        if ready != on or calendar.on_or_after(on) != on:
            return words
        return f"{words}: ready {format_time(minute)}, class {at}"
