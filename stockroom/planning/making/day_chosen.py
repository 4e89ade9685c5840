"""Why a batch is started on its day: the last that will do, or what a day before it saves."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date

from stockroom.planning.facts import Facts
from stockroom.planning.making.batch import Batch, Source
from stockroom.planning.timing import hours


@dataclass(frozen=True, slots=True)
class Load:
    """Hands-on minutes of makes by day, and the limit they are held to (0: none)."""

    limit: int = 0
    minutes: Mapping[date, int] = field(default_factory=dict)

    def with_room_for(self, day: date, more: int) -> bool:
        """True when so many minutes more still fit on that day."""
        return not self.limit or self.minutes.get(day, 0) + more <= self.limit


def load_of(facts: Facts, batches: Iterable[Batch]) -> Load:
    """The work of these batches; finishing counts on the day it is done."""
    minutes: dict[date, int] = {}
    for batch in batches:
        method, vessels = batch.method, batch.vessels
        started, finished = batch.start[0], batch.ready[0]
        minutes[started] = minutes.get(started, 0) + method.minutes * vessels
        minutes[finished] = minutes.get(finished, 0) + method.finish_minutes * vessels
    return Load(facts.house.day_minutes, minutes)


def day_reason(facts: Facts, batch: Batch, load: Load) -> str:
    """In one sentence, with the days it speaks of."""
    for_day = min(item.use_on for item in batch.run.items)
    if batch.run.items[0].fresh:
        return f"fresh: made on the morning of {for_day}"
    standing = batch.method.stands_hours
    stands = f", stands {hours(standing)}" if standing else ""
    last = min(item.latest for item in batch.run.items)
    if batch.start[0] == for_day and any(want.under is None for want in batch.wants):
        return f"on the morning of {for_day} itself{stands}: the day before would not do any more"
    if batch.start[0] >= last:
        return f"the last day that is ready for {for_day}{stands}: {batch.start[0]}"
    return f"{batch.start[0]}{stands}: {_sooner(facts, batch, load, last)}"


def _sooner(facts: Facts, batch: Batch, load: Load, last: date) -> str:
    """What starting it before the last day that would do is good for."""
    if not load.with_room_for(last, batch.method.minutes * batch.vessels):
        full = load.minutes.get(last, 0)
        return f"{last} would do, and is full ({full} of {load.limit} min)"
    shared = [source for source in batch.sources if _shared(source)]
    if shared:
        names = ", ".join(dict.fromkeys(source.line.key for source in shared))
        return f"{last} would do, but one make of {names} then serves this and others"
    if batch.start[0] in facts.usual.get(batch.line.key, ()):
        return f"the day it has in the plan kept; {last} would do as well"
    return f"{last} would do as well, and saves nothing"


def _shared(source: Source) -> bool:
    """True for a made ingredient whose batch goes into more than this one."""
    return source.batch is not None and len(source.batch.run.items) > 1
