"""Not to buy for throwing away: whether half an order will be used before it lapses, unopened.

Where it will not, the order is queried, and several deliveries are offered in its
place, each coming for the needs that it will outlast.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.buying.course import Course, in_hand_day, order_by_day
from stockroom.planning.buying.packs import Choice, Rate, choose, keeps_unopened
from stockroom.planning.decisions import Delivery
from stockroom.planning.facts import Facts, Pack

# more deliveries than this and nobody would arrange them: our choice
_MOST = 6


@dataclass(slots=True)
class _Part:
    """One delivery: it keeps until `until`, and brings `amount`."""

    until: date | None
    amount: int
    order_by: date
    need_by: date


def used_by(facts: Facts, course: Course, rate: Rate | None, until: date) -> int:
    """How much of an order is used by a day: by the needs that wait for it, then at the rate."""
    used = sum(waiting.amount for waiting in course.waiting if waiting.take.start <= until)
    last = facts.horizon or facts.end
    beyond = rate.taken_in((until - last).days) if rate and until > last else 0
    return used + beyond


def deliveries(
    facts: Facts, course: Course, wanted: int, packs: tuple[Pack, ...], lead: int
) -> tuple[Delivery, ...]:
    """The deliveries an order may be split into, the first first; none where that is no help.

    `wanted` is what all of them must bring, the level included, which comes with the last.
    """
    parts = _parts(facts, course, wanted, lead)
    row = [(part, choose(packs, part.amount, part.amount)) for part in parts]
    # no smaller pack: every delivery would be thrown away like the whole
    whole = choose(packs, wanted, wanted)
    if len(row) < 2 or not packs or all(choice.size >= whole.size for _, choice in row):
        return ()
    return tuple(_delivery(part, choice) for part, choice in row)


def _delivery(part: _Part, choice: Choice) -> Delivery:
    return Delivery(
        choice.text, choice.count, choice.size, choice.pence, part.order_by, part.need_by
    )


def _parts(facts: Facts, course: Course, wanted: int, lead: int) -> list[_Part]:
    calendar = facts.calendar
    parts: list[_Part] = []
    for waiting in sorted(course.waiting, key=lambda one: one.take.start):
        take, last = waiting.take, parts[-1] if parts else None
        lapsed = last is not None and last.until is not None and take.start > last.until
        if last is None or (lapsed and len(parts) < _MOST):
            comes = in_hand_day(facts, take)
            until = keeps_unopened(facts, course.line, comes)
            last = _Part(until, 0, order_by_day(facts, take, lead), take.need.on)
            parts.append(last)
        last.amount += waiting.amount
    rest = wanted - sum(part.amount for part in parts)
    last = parts[-1] if parts else None
    if rest > 0 and last is not None and last.until is not None:
        # what only fills the shelf up again may come when the last delivery has lapsed
        comes = calendar.on_or_after(last.until)
        parts.append(_Part(None, rest, calendar.before(comes, lead), comes))
    return parts
