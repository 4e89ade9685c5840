"""What happens at the shelf: bottles arrive, are opened, drawn from, moved, counted, discarded.

Each function is one unit of work and writes at least one ledger entry. `on` is
the day it happened (today when None), `today` the day it is entered, `by` the
initials. Making up is in `making.py`; looks, titrations and losses in `checks.py`.
"""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.service.answers import Done
from stockroom.service.arriving import (
    arrived,
    check_number,
    date_printed,
    new_bottle,
    told_of_printed,
    write_openings,
)
from stockroom.service.coming import came_of, may_be_of
from stockroom.service.counting import difference, which_it_was
from stockroom.service.righting import (
    check_nothing_later,
    check_nothing_leans,
    reverse,
    standing,
    with_it,
)
from stockroom.service.standing import cap_of, told_of_place
from stockroom.service.taking import (
    check_not_barred,
    open_if_sealed,
    opening_of,
    remains,
    still_standing,
    take,
    write_off,
)
from stockroom.service.touching import check_may_move, check_may_open
from stockroom.service.work import (
    check_amount,
    check_at_hand,
    check_in_use,
    check_kind,
    doubts,
    working,
)
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, left, overfull
from stockroom.store.tables import Bottle


def arrive(
    path: StoreAt,
    line: str,
    size: Amount,
    *,
    printed: str | None,
    place: str,
    count: int = 1,
    opened: date | None = None,
    cap: str = "",
    note: str = "",
    order: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Put bottles that came on the shelf; each gets a number of its own.

    `size` is what one holds; `printed` the date as printed on it, or "none", which
    must be said; `opened` the day it was opened, if it was; `cap` vented, tight or blank;
    `order` the number of the order they came of.
    Raises: BadInput, UnknownName, BadAmount, BadDate; NotAllowed for an order of something else.
    """
    on_label, closed_by = date_printed(printed), cap_of(cap)
    check_number(count)
    with working(path, on=on, today=today, by=by) as work:
        # the size tells a solid from the solution of the same name
        found = names.find_line(work.session, line, kind=size.kind)
        check_amount(found, size)
        event = Event(
            EntryKind.ARRIVED, change=size.micro, place_id=work.place_id(place), note=note
        )
        bottles = [new_bottle(work, found, size, on_label, note, closed_by) for _ in range(count)]
        entries = [work.write(bottle, event) for bottle in bottles]
        if opened is not None:
            write_openings(work, bottles, opened)
        came = came_of(work, order, found, entries) if order else may_be_of(work, found)
        text = f"{arrived(bottles, found, size)}, at {place}."
        # those that came together are alike, so what is said of one holds for all
        details = (*told_of_printed(work, bottles[0]), *told_of_place(work, bottles[0]), *came)
        return work.done(text, bottles[0], entries[0], details=details)


def open_bottle(path: StoreAt, bottle: str, *, on: date | None, today: date, by: str) -> Done:
    """Write the day a bottle was opened, and say how long it is good now.

    Raises: NotAllowed when it was opened already (the first day is kept), gone, not found,
    past its safety date or condemned by its test.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        check_at_hand(work, found)
        check_may_open(work, found)
        # a later opening would lengthen a life that is running already
        first = opening_of(work, found)
        if first is not None:
            raise NotAllowed(
                f"{found.number} was opened on {spell_day(first.happened_on)}; that day is kept.",
                f"If it is wrong, put entry {first.id} right first.",
            )
        entry = work.write(found, Event(EntryKind.OPENED))
        after = work.verdict(found)
        until = f"; good until {spell_day(after.good_until)}" if after.good_until else ""
        why = f" ({after.decided_by})" if until else ""
        return work.done(f"Opened {work.called(found)}{until}{why}.", found, entry)


def draw(
    path: StoreAt,
    bottle: str,
    amount: Amount,
    *,
    booking: str | None = None,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Take so much from a bottle; a sealed one is opened by it.

    Raises: NotEnough when less is left; NotAllowed when it is not found, set
    aside, gone, past its safety date, or barred by the booking's recipe; BadAmount
    for the wrong kind.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        check_amount(work.line(found), amount)
        seen = check_at_hand(work, found)
        check_may_open(work, found)
        check_in_use(work, found)
        # found before anything is written: a draw for a booking nobody knows is refused whole
        served = names.find_booking(work.session, booking) if booking else None
        if served is not None:
            check_not_barred(work, found, served)
        number = served.number if served else ""
        # judged before the draw, which may open a sealed bottle
        doubtful, stands = doubts(work, found), still_standing(work, seen)
        event = Event(EntryKind.DRAWN, change=-amount.micro, booking=number, note=stands)
        entry = take(work, found, event)
        noted = (f"{stands}: noted",) if stands else ()
        details = (*open_if_sealed(work, found, entry), *doubtful, *noted)
        text = f"Drew {format_amount(amount)} from {work.called(found)}; {remains(work, found)}."
        return work.done(text, found, entry, details=details)


def spill(
    path: StoreAt,
    bottle: str,
    amount: Amount,
    *,
    note: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write off what was spilled: its own reason, kept out of consumption. Raises: as `draw`."""
    event = Event(EntryKind.SPILLED, change=-amount.micro, note=note)
    with working(path, on=on, today=today, by=by) as work:
        return write_off(work, bottle, amount, event, "Spilled")


def lend(
    path: StoreAt, bottle: str, amount: Amount, *, to: str, on: date | None, today: date, by: str
) -> Done:
    """Write off what was lent, and to whom. Raises: BadInput when nobody is named; as `draw`."""
    if not to.strip():
        raise BadInput(
            f"{format_amount(amount)} of {bottle} lent to whom?", 'Add --to "the physics store".'
        )
    event = Event(EntryKind.LENT, change=-amount.micro, reason=f"to {to.strip()}")
    with working(path, on=on, today=today, by=by) as work:
        # what was spilled has happened; lending can still be left undone
        check_may_open(work, work.bottle(bottle))
        return write_off(work, bottle, amount, event, "Lent")


def move(path: StoreAt, bottle: str, place: str, *, on: date | None, today: date, by: str) -> Done:
    """Stand a bottle somewhere else; wrong neighbours there are told, never refused.

    Raises: UnknownName with the nearest places; NotAllowed when it is gone, not found, or
    past its safety date, when nobody moves it.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        # where it stood decides how fast it aged, so the answer names both places
        before = check_at_hand(work, found).place
        check_may_move(work, found)
        entry = work.write(found, Event(EntryKind.MOVED, place_id=work.place_id(place)))
        start = f" from {before}" if before else ""
        text = f"Moved {work.called(found)}{start} to {place}."
        return work.done(text, found, entry, details=told_of_place(work, found))


def count(
    path: StoreAt,
    bottle: str,
    amount: Amount,
    *,
    walk: str = "",
    sure: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write what is really in a bottle; the difference is an entry, nothing is rubbed out.

    Zero is a count. `walk` names the round of counting. Less of a solution than entered,
    with nothing drawn, is asked about: water lost, or not written down. Raises: BadAmount for the
    wrong kind; NotAllowed for over 5 % more than the bottle's size, unless `sure`.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        check_kind(work.line(found), amount)
        if overfull(found, amount.micro) and not sure:
            raise NotAllowed(
                f"{found.number} holds {work.say(found, found.size)} when full;"
                f" {format_amount(amount)} counted?",
                "Check the unit, or confirm with --sure.",
            )
        # against what was there on the day of the count, not today
        before = check_at_hand(work, found).left
        # asked before the entry, which would itself be the last count
        details = which_it_was(work, found, before, amount.micro)
        change = amount.micro - before
        entry = work.write(found, Event(EntryKind.COUNTED, change=change, note=walk))
        text = f"Counted {format_amount(amount)} of {work.called(found)}"
        return work.done(f"{text}{difference(work, found, change)}.", found, entry, details=details)


def discard(
    path: StoreAt, bottle: str, *, how: str, why: str, on: date | None, today: date, by: str
) -> Done:
    """Throw a bottle away: it is gone, its number and its history stay.

    Raises: BadInput unless it is said how and why; NotAllowed when it is gone already,
    or has an entry of a later day, which is named.
    """
    for name, said in (("How", how), ("Why", why)):
        if not said.strip():
            raise BadInput(f"{name} was {bottle} discarded?", f"Add --{name.lower()} and a word.")
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        check_at_hand(work, found)
        check_nothing_later(work, found)
        # what is left goes with it, or a bottle that is gone would still hold something
        held = left(work.session, found)
        event = Event(EntryKind.DISCARDED, change=-held, reason=why.strip(), note=how.strip())
        entry = work.write(found, event)
        text = f"Discarded {work.called(found)}, {work.say(found, held)}: {how.strip()}."
        return work.done(text, found, entry)


def put_right(
    path: StoreAt, entry: int, reason: str, *, on: date | None, today: date, by: str
) -> Done:
    """Undo one entry without rubbing it out: totals are as if it had never happened.

    The draws of a make are put right with it.
    Raises: UnknownName; BadInput without a reason; NotAllowed when it is put right
    already, is a putting-right itself, or has later entries leaning on it (they
    are listed); NotEnough when the balance would fall below nothing.
    """
    if not reason.strip():
        raise BadInput(f"Why is entry {entry} wrong?", "One word is enough: --why …")
    with working(path, on=on, today=today, by=by) as work:
        wrong = standing(work, entry)
        bottle = work.session.get_one(Bottle, wrong.bottle_id)
        check_nothing_leans(work, bottle, wrong)
        # found before the reversal, which would hide them
        others = with_it(work, bottle, wrong)
        written = reverse(work, wrong, reason.strip())
        for other in others:
            reverse(work, other, reason.strip())
        what = f"{wrong.kind} {spell_day(wrong.happened_on)} by {wrong.by}"
        text = f"Put right entry {entry}: {bottle.number} {what}; {remains(work, bottle)}."
        details = tuple(f"Entry {other.id} put right with it." for other in others)
        return work.done(text, bottle, written, details=details)
