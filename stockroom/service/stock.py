"""What happens at the shelf: bottles arrive, are opened, drawn from, moved, counted, discarded.

Each function is one unit of work and writes at least one ledger entry. `on` is
the day it happened (today when None), `today` the day it is entered, `by` the
initials. Arrivals are in `arriving.py`, draws in `drawing.py`, loans in `lending.py`, and
handed on here. Making up is in `making.py`; looks, titrations and losses in `checks.py`.
"""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.days import spell_day
from stockroom.service.answers import Done

# whoever writes at the shelf finds all of it here
from stockroom.service.arriving import Label as Label
from stockroom.service.arriving import arrive as arrive
from stockroom.service.asking import check_count
from stockroom.service.drawing import draw as draw
from stockroom.service.drawing import spill as spill
from stockroom.service.estimates import Weighed as Weighed
from stockroom.service.lending import lend as lend
from stockroom.service.lending import lend_back as lend_back
from stockroom.service.recount import check_first, count_in, round_named
from stockroom.service.righting import check_nothing_later
from stockroom.service.righting import put_right as put_right
from stockroom.service.standing import told_of_place
from stockroom.service.taking import holds, opening_of
from stockroom.service.touching import check_may_move, check_may_open
from stockroom.service.work import check_at_hand, working
from stockroom.settings import StoreAt
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, left, opened_by_draw


def open_bottle(path: StoreAt, bottle: str, *, on: date | None, today: date, by: str) -> Done:
    """Write the day a bottle was opened, and say how long it is good now.

    A day no later than the draw that was taken to have opened it counts instead of that.

    Raises: NotAllowed when it was opened already (the first day is kept), gone, not found,
    past its safety date or condemned by its test.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        seen = check_at_hand(work, found)
        check_may_open(work, found)
        # a later opening would lengthen a life that is running already
        first = opening_of(work, found)
        if first is None and seen.record.opened is not None:
            raise NotAllowed(
                f"{found.number} was poured from a bottle opened {spell_day(seen.record.opened)};"
                " that day counts.",
                f"Its source is named by: stockroom diary {found.number}",
            )
        if first is not None and not (work.on <= first.happened_on and opened_by_draw(first)):
            raise NotAllowed(
                f"{found.number} was opened on {spell_day(first.happened_on)}; that day is kept.",
                f"If it is wrong, put entry {first.id} right first.",
            )
        entry = work.write(found, Event(EntryKind.OPENED))
        after = work.verdict(found)
        until = f"; {after.until_word} {spell_day(after.good_until)}" if after.good_until else ""
        why = f" ({after.decided_by})" if until else ""
        return work.done(f"Opened {work.called(found)}{until}{why}.", found, entry)


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

    Zero is a count. `walk` names the round of counting it belongs to, "" for none. Less of a
    solution than entered, with nothing drawn, is asked about: water lost, or not written down.
    Raises: BadAmount for the wrong kind; NotAllowed for over 5 % more than the bottle's size, too
    little to be seen or counted twice on one walk, unless `sure`, and for a walk that was
    ended; UnknownName for one that nobody started.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        round_ = round_named(work, walk)
        if not sure:
            check_first(work, found, round_, "confirm with --sure")
            check_count(work, found, amount)
        counted = count_in(work, found, amount, walk=round_, sure=sure)
        return work.done(f"{counted.text}.", found, counted.entry, details=counted.details)


def discard(
    path: StoreAt, bottle: str, *, how: str, why: str, on: date | None, today: date, by: str
) -> Done:
    """Throw a bottle away: it is gone, its number and its history stay.

    Raises: BadInput unless it is said how and why; NotAllowed when it is gone already,
    or has an entry of a later day, which is named.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        # first, or somebody would be asked how and why of what is gone already
        check_at_hand(work, found)
        for name, said in (("How", how), ("Why", why)):
            if not said.strip():
                asked = f"{name} was {found.number} discarded?"
                raise BadInput(asked, f"Add --{name.lower()} and a word.")
        check_nothing_later(work, found)
        # what is left goes with it, or a bottle that is gone would still hold something
        held, said = left(work.session, found), holds(work, found)
        event = Event(EntryKind.DISCARDED, change=-held, reason=why.strip(), note=how.strip())
        entry = work.write(found, event)
        text = f"Discarded {work.called(found)}, {said}: {how.strip()}."
        return work.done(text, found, entry)
