"""What the plan says: the term, a day's past bottles, one booking's readiness, one why.

Each opens the store for reading only, so nothing heavy is loaded.
"""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

from stockroom.errors import BadDate, BadInput
from stockroom.measure.days import parse_day
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.plan import plan
from stockroom.planning.ready import Readiness, readiness
from stockroom.planning.why import instead as may_stand_in
from stockroom.planning.why import why as reasons_for
from stockroom.service.finding import line_among
from stockroom.store.likeness import unknown
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts, facts_from
from stockroom.store.snapshot_bottles import bottle_of, bottles_of


def _known(
    path: Path,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    *,
    cautious: bool = False,
) -> Facts:
    if not cautious:
        return with_derived(facts(path, as_at, start, end))
    # loaded here: only a plan on the safe side fits anything
    from stockroom.planning.cautious import with_caution
    from stockroom.store.refills import refills_of

    with reading(path) as reader:
        known = with_derived(facts_from(reader, as_at, start, end))
        every = bottles_of(reader, as_at, gone=True)
        return with_caution(known, every, refills_of(reader, as_at))


def term_plan(
    path: Path,
    *,
    as_at: date,
    start: date | None = None,
    end: date | None = None,
    cautious: bool = False,
) -> Plan:
    """The plan from `as_at`, for the term or for the period given.

    `cautious`, here and below: every strength at its lower 95 % limit, where there is one.
    """
    return plan(_known(path, as_at, start, end, cautious=cautious))


def to_make(
    path: Path,
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


def past_on(path: Path, *, as_at: date, on: date, cautious: bool = False) -> Plan:
    """A plan whose `past` is told for the day `on`, from what is known as at `as_at`."""
    # an earlier day is told as it stood then, not with what has happened since
    known = _known(path, min(as_at, on), cautious=cautious)
    return replace(plan(known, past_day=on), as_at=as_at)


def ready(path: Path, ref: str, *, as_at: date, cautious: bool = False) -> Readiness:
    """Is everything good for a booking number, or for all bookings of a day?

    Raises UnknownName for a booking that does not exist, BadDate for a day
    that cannot be read.
    """
    known = _known(path, as_at, cautious=cautious)
    booking = next((b for b in known.bookings if b.number.lower() == ref.strip().lower()), None)
    if booking is not None:
        whole = plan(_reaching(path, known, booking.on))
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
    return readiness(known, plan(known), numbers, title, day)


def _reaching(path: Path, known: Facts, day: date) -> Facts:
    """The same facts, over a period that holds the day."""
    if day <= known.end:
        return known
    cautious = known.lower_limits is not None
    return _known(path, known.as_at, known.start, day, cautious=cautious)


def _no_such(known: Facts, ref: str) -> BadInput:
    return unknown("booking", ref, [booking.number for booking in known.bookings])


def why(
    path: Path, ref: str, *, as_at: date, instead: str | None = None, cautious: bool = False
) -> tuple[str, ...]:
    """The reasons behind a need, make, order, bottle or item; or whether a swap may be made.

    At most five lines. Raises UnknownName when nothing of that name is known.
    """
    known = _known(path, as_at, cautious=cautious)
    whole = plan(known)
    if instead is not None:
        return _instead(known, whole, ref, instead)
    lines = reasons_for(known, whole, ref) or _gone(path, ref, as_at)
    if not lines:
        names = [*(a.booking.number for a in whole.needs), *(m.id for m in whole.makes)]
        names += [*(o.id for o in whole.orders), *(b.number for b in known.bottles), *known.lines]
        raise unknown("line of the plan, bottle or item", ref, names)
    return lines


def _instead(known: Facts, whole: Plan, ref: str, other: str) -> tuple[str, ...]:
    lines = may_stand_in(known, whole, ref, line_among(known, other).key)
    if not lines:
        asked = [a.booking.number for a in whole.needs] + [a.ref for a in whole.needs]
        raise unknown("booking or need", ref, asked)
    return lines


def _gone(path: Path, ref: str, as_at: date) -> tuple[str, ...]:
    """What there is to say of a bottle discarded since."""
    with reading(path) as reader:
        bottle = bottle_of(reader, ref.strip().upper(), as_at)
    return (f"{bottle.number} {bottle.line}: gone, discarded",) if bottle else ()
