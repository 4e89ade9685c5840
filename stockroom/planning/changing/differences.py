"""What differs between a plan that was kept and the plan now.

What was made, drawn, ordered or checked since is done and not gone. Makes, orders and checks
are held against each other in `differences_of_work.py`; `change_words.py` has the words.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

from stockroom.planning.changing import change_words as words
from stockroom.planning.changing.changes import About, Change, Touched, What
from stockroom.planning.changing.differences_of_work import (
    Said,
    bottles_in,
    check_changes,
    make_changes,
    order_changes,
    said,
    sense_of,
)
from stockroom.planning.changing.kept import KeptBooking, KeptNeed, KeptPlan
from stockroom.planning.decisions import Outcome
from stockroom.planning.facts import Firmness, Happened, HappenedKind
from stockroom.planning.numbers import natural


def differences(
    before: KeptPlan, after: KeptPlan, happened: Sequence[Happened] = ()
) -> tuple[Change, ...]:
    """Every change from one plan to the other, causes still blank: bookings first, then by kind."""
    bookings = list(_bookings(before, after))
    over = frozenset(change.ref for change in bookings if change.done)
    makes = list(make_changes(before, after, happened, over))
    made = frozenset(h.subject for h in happened if h.kind is HappenedKind.MADE)
    return (
        *bookings,
        *_needs(before, after, makes, made, over),
        *makes,
        *order_changes(before, after, happened),
        *check_changes(before, after, happened, over),
    )


def _bookings(before: KeptPlan, after: KeptPlan) -> Iterator[Change]:
    known = {booking.number: booking for booking in before.bookings}
    found = {booking.number: booking for booking in after.bookings}
    for number in sorted({*known, *found}, key=natural):
        was, now = known.get(number), found.get(number)
        what, text = _booking(was, now, before, after)
        booking = now or was
        if not what or booking is None:
            continue
        yield Change(
            About.BOOKING,
            number if was else "",
            number if now else "",
            booking.recipe,
            what,
            text,
            touched=Touched(
                bookings=frozenset({number}),
                day=was.on if was else None,
                sense=_asks_more(was, now, what),
            ),
        )


def _booking(
    was: KeptBooking | None, now: KeptBooking | None, before: KeptPlan, after: KeptPlan
) -> Said:
    here = was is not None and was.standing and was.on >= before.as_at
    there = now is not None and now.standing and now.on >= after.as_at
    if was and here and now and there:
        return said(words.booking_parts(was, now))
    if now and there:
        return (What.ADDED,), words.booking_added(now)
    if not was or not here:
        return (), ""
    if _over(was, now, after):
        return (What.PAST,), f"its day, {(now or was).on}, is past"
    return (What.GONE,), words.booking_gone(was, now)


def _asks_more(was: KeptBooking | None, now: KeptBooking | None, what: tuple[What, ...]) -> int:
    if was is None or now is None or {What.GONE, What.PAST} & set(what):
        return 1 if What.ADDED in what else -1
    # a booking that was dropped and is back is added, whatever it was before
    return 1 if What.ADDED in what else sense_of(was.groups, now.groups)


def _over(was: KeptBooking, now: KeptBooking | None, after: KeptPlan) -> bool:
    """True when its day came and went, and nobody dropped it before."""
    if now is None:
        return was.on < after.as_at
    return now.firmness is Firmness.DONE or (now.standing and now.on < after.as_at)


def _needs(
    before: KeptPlan,
    after: KeptPlan,
    makes: Iterable[Change],
    made: frozenset[str],
    over: frozenset[str],
) -> Iterator[Change]:
    """Needs in both plans that come to something else, and those of new bookings that fall short.

    An amount that only follows its make is told there; a need of a make that was carried
    out is told with it.
    """
    resized = {m.ref for m in makes if What.AMOUNT in m.what} - {""}
    known = {(need.ref, need.line): need for need in before.needs}
    now = {(need.ref, need.line): need for need in after.needs}
    standing = {booking.number for booking in before.bookings if booking.standing}
    for key in sorted({*known, *now}, key=lambda key: (_ref(key[0]), key[1])):
        was, is_now = known.get(key), now.get(key)
        what, text = _need(was, is_now, resized, standing)
        need = is_now or was
        if not what or need is None or need.booking in over or _served(was, is_now, made):
            continue
        yield Change(
            About.NEED,
            key[0] if was else "",
            key[0] if is_now else "",
            words.named(need.item, need.strength),
            what,
            text,
            touched=Touched(
                need.line,
                frozenset({need.booking}),
                bottles_in(was.sources if was else (), is_now.sources if is_now else ()),
                was.on if was else None,
                _worse(was, is_now),
            ),
        )


_HARDER = (Outcome.HAVE, Outcome.MAKE, Outcome.BUY, Outcome.SHORT, Outcome.REFUSED)


def _worse(was: KeptNeed | None, now: KeptNeed | None) -> int:
    """1 where more has to be done for it than before, or more of it is wanted; -1 for less."""
    if was is None or now is None:
        return 1 if now else -1
    outcomes = sense_of(_HARDER.index(was.outcome), _HARDER.index(now.outcome))
    return outcomes or sense_of(was.amount, now.amount)


def _ref(ref: str) -> tuple[tuple[str, int, str], int]:
    booking, _, number = ref.rpartition(".")
    return natural(booking), int(number) if number.isdigit() else 0


def _need(
    was: KeptNeed | None, now: KeptNeed | None, resized: set[str], standing: set[str]
) -> Said:
    if was and now:
        with_its_make = bool(was.make and now.make) and was.make in resized
        parts = [
            (part, text)
            for part, text in words.need_parts(was, now)
            if not (with_its_make and part == "amount")
        ]
        return said(parts)
    # of a booking that came or went only what cannot be had is told one by one
    if now and (now.short or now.booking in standing):
        return (What.ADDED,), words.need_now(now)
    if was and was.short:
        return (What.GONE,), f"no longer short of {words.need_short(was)}"
    return (), ""


def _served(was: KeptNeed | None, now: KeptNeed | None, made: frozenset[str]) -> bool:
    if was is None or now is None or not was.make or not now.sources:
        return False
    return {source.bottle for source in now.sources} <= made
