"""What the plan says: the term, a day's past bottles, one booking's readiness, one why.

Each opens the store for reading only, so nothing heavy is loaded. Every plan is replayed
before anything of it is told.
"""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.errors import BadDate, BadInput
from stockroom.measure.days import parse_day
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.ready import Readiness, readiness
from stockroom.service.backup_age import with_backup
from stockroom.service.kept import MANY, kept
from stockroom.service.known import known_of
from stockroom.service.printed_plans import beside_the_kept
from stockroom.service.replayed import replayed_plan
from stockroom.service.why import reasons
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown


def term_plan(
    path: StoreAt,
    *,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    cautious: bool = False,
) -> Plan:
    """The plan from `as_at`, for the term or for the period given.

    `cautious`, here and below: every strength at its lower 95 % limit, where there is one.
    """

    def make() -> Plan:
        known = known_of(path, as_at, start, end, cautious=cautious)
        whole = start is None and end is None
        return with_backup(path, beside_the_kept(path, known, replayed_plan(known), whole=whole))

    return kept(path, "term", (as_at, start, end, cautious), make)


def to_make(
    path: StoreAt,
    *,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    cautious: bool = False,
) -> Plan:
    """The term's plan with only the makes worked on from `start` to `end`."""
    whole = term_plan(path, as_at=as_at, cautious=cautious)
    first, last = start or whole.start, end or whole.end
    chosen = tuple(m for m in whole.makes if first <= m.on <= last or _finished(m, first, last))
    return replace(whole, start=first, end=last, makes=chosen)


def _finished(make: Make, first: date, last: date) -> bool:
    return make.finish_on is not None and first <= make.finish_on <= last


def past_on(path: StoreAt, *, as_at: date, on: date, cautious: bool = False) -> Plan:
    """A plan whose `past` is told for the day `on`, from what is known as at `as_at`."""
    # an earlier day is told as it stood then, not with what has happened since
    then = min(as_at, on)

    def make() -> Plan:
        return replayed_plan(known_of(path, then, cautious=cautious), past_day=on)

    return replace(kept(path, "past", (then, on, cautious), make), as_at=as_at)


def ready(path: StoreAt, ref: str, *, as_at: date, cautious: bool = False) -> Readiness:
    """Is everything good for a booking number, or for all bookings of a day?

    Raises UnknownName for a booking that does not exist, BadDate for a day
    that cannot be read.
    """
    asked = (ref, as_at, cautious)
    return kept(path, "ready", asked, lambda: _ready(path, ref, as_at, cautious), most=MANY)


def _ready(path: StoreAt, ref: str, as_at: date, cautious: bool) -> Readiness:
    known = known_of(path, as_at, cautious=cautious)
    booking = next((b for b in known.bookings if b.number.lower() == ref.strip().lower()), None)
    if booking is not None:
        whole = replayed_plan(_reaching(path, known, booking.on))
        recipe = known.recipes[booking.recipe, booking.version]
        title = f"{booking.number} {recipe.title}, {booking.on}"
        answer = readiness(known, whole, (booking.number,), title, booking.on)
        over = booking.on < as_at or booking.firmness in (Firmness.DONE, Firmness.DROPPED)
        if not over:
            return answer
        state = booking.firmness if booking.on >= as_at else f"over as at {as_at}"
        return replace(answer, ready=False, to_do=(f"{booking.number} is {state}: not planned",))
    try:
        day = parse_day(ref)
    except BadDate as error:
        # "K99" is a number mistyped, "31/02/2027" a day that is not there
        raise (error if sum(map(str.isdigit, ref)) > 3 else _no_such(known, ref)) from None
    known = _reaching(path, known, day)
    numbers = tuple(b.number for b in known.bookings if b.on == day)
    title = f"{day}: {', '.join(numbers) or 'nothing booked'}"
    return readiness(known, replayed_plan(known), numbers, title, day)


def _reaching(path: StoreAt, known: Facts, day: date) -> Facts:
    """The same facts, over a period that holds the day."""
    if day <= known.end:
        return known
    cautious = known.lower_limits is not None
    return known_of(path, known.as_at, known.start, day, cautious=cautious)


def _no_such(known: Facts, ref: str) -> BadInput:
    return unknown("booking", ref, [booking.number for booking in known.bookings])


def why(
    path: StoreAt, ref: str, *, as_at: date, instead: str | None = None, cautious: bool = False
) -> tuple[str, ...]:
    """The reasons behind any line of the plan, bottle or name; or why not `instead`.

    At most five lines. Raises: as `service.why.reasons`.
    """

    def make() -> tuple[str, ...]:
        return reasons(path, known_of(path, as_at, cautious=cautious), ref, instead)

    return kept(path, "why", (ref, instead, as_at, cautious), make, most=MANY)
