"""Undoing an entry without rubbing it out: what may be undone, and what goes with it."""

from __future__ import annotations

import re
from datetime import date

from stockroom.errors import BadInput, NotAllowed, NotEnough, UnknownName
from stockroom.measure.days import spell_day
from stockroom.service.answers import Done
from stockroom.service.leaning import check_nothing_leans, taken_since, whole_of, worth_knowing
from stockroom.service.taking import opening_of, remains
from stockroom.service.unknown import name_taken_back
from stockroom.service.work import Work, working
from stockroom.settings import StoreAt
from stockroom.store.history import noted, parents, undone_by
from stockroom.store.kinds import BEGINNINGS, EntryKind, evening_note, made_note, opened_note
from stockroom.store.ledger import Event, entries_of, opened_by_draw
from stockroom.store.tables import Bottle, Entry

_TAKEN = (EntryKind.DRAWN, EntryKind.DECANTED, EntryKind.LENT)

_MOST = 2**63 - 1

_ELSEWHERE = {
    "K": "{0} is a booking: stockroom shift {0} or cancel {0} changes it, and keeps what it was.",
    "P": "{0} is an order: stockroom order --cancel {0} or --put-off {0}, and it stays written.",
    "B": "{0} is a bottle: stockroom diary {0} lists the numbers of its entries.",
    "S": "{0} is a bottle: stockroom diary {0} lists the numbers of its entries.",
}


def put_right(
    path: StoreAt, entry: int, reason: str, *, on: date | None, today: date, by: str
) -> Done:
    """Undo one entry without rubbing it out: totals are as if it had never happened.

    What was written only because of it goes with it: the draws of a make, both halves of a
    pouring, the opening a draw implied.
    Raises: UnknownName; BadInput without a reason; NotAllowed when it is put right
    already, is a putting-right itself, or has later entries leaning on it (they
    are listed); NotEnough when the balance would fall below nothing.
    """
    if not reason.strip():
        raise BadInput(f"Why is entry {entry} wrong?", "One word is enough: --why …")
    with working(path, on=on, today=today, by=by) as work:
        wrong = whole_of(work, standing(work, entry))
        bottle = work.session.get_one(Bottle, wrong.bottle_id)
        check_nothing_leans(work, bottle, wrong)
        known = worth_knowing(work, bottle, wrong)
        # found before the reversal, which would hide them
        others = with_it(work, bottle, wrong)
        written = reverse(work, wrong, reason.strip())
        for other in others:
            reverse(work, other, reason.strip())
        again = _opened_after_all(work, [wrong, *others])
        what = f"{wrong.kind} {spell_day(wrong.happened_on)} by {wrong.by}"
        text = f"Put right entry {wrong.id}: {bottle.number} {what}; {remains(work, bottle)}."
        details = tuple(f"Entry {other.id} put right with it." for other in others)
        unnamed = name_taken_back(work, bottle, wrong, reason.strip())
        return work.done(text, bottle, written, details=(*details, *again, *unnamed, *known))


def entry_number(written: str) -> int:
    """The number of an entry as typed; other numbers are told where theirs is put right.

    Raises: BadInput.
    """
    text = written.strip()
    if re.fullmatch(r"\d+", text):
        return int(text)
    kind = _ELSEWHERE.get(text[:1].upper(), "") if re.fullmatch(r"[A-Za-z]\d+[a-z]?", text) else ""
    raise BadInput(
        kind.format(text.upper()) if kind else f'"{written}" is no number of an entry.',
        "Each answer ends with the number of its entry. The counts of a walk and what came of an"
        " order are put right one by one: stockroom diary BOTTLE.",
    )


def standing(work: Work, number: int) -> Entry:
    """The entry, when it may still be put right.

    Raises: UnknownName; NotAllowed when it was put right already, or is itself a putting-right.
    """
    # more than the store can number is no entry, and the engine would stumble over it
    entry = work.session.get(Entry, number) if number <= _MOST else None
    if entry is None:
        raise UnknownName(
            f"No entry {number} in the ledger.",
            "Each answer ends with the number of its entry; stockroom diary BOTTLE lists them all.",
        )
    if entry.kind == EntryKind.PUT_RIGHT:
        raise NotAllowed(
            f"Entry {number} is a putting-right itself.", "Enter what really happened instead."
        )
    again = undone_by(work.session, entry)
    if again is not None:
        raise NotAllowed(
            f"Entry {number} was put right by {again.by} on {spell_day(again.happened_on)}.",
            "Enter what really happened instead.",
        )
    return entry


def check_nothing_later(work: Work, bottle: Bottle) -> None:
    """Pass unless the bottle was still there on a later day. Raises: NotAllowed, naming the entry.

    Being missed later is no sign of it: what was thrown away is missed.
    """
    later = [
        entry
        for entry in entries_of(work.session, bottle)
        if entry.happened_on > work.on and entry.kind != EntryKind.LOST
    ]
    if later:
        # the last of them: a day after the first might still be too early
        last = later[-1]
        raise NotAllowed(
            f"{bottle.number} was there after {spell_day(work.on)}: entry {last.id},"
            f" {last.kind} {spell_day(last.happened_on)} by {last.by}.",
            f"Give --on {last.happened_on} or later, or put entry {last.id} right first.",
        )


def reverse(work: Work, wrong: Entry, reason: str) -> Entry:
    """Write the entry that undoes another.

    Raises: NotEnough when the balance would not bear it, listing what was taken since.
    """
    # written today under the slip's own bottle, whoever asks: the pair must cancel there
    bottle = work.session.get_one(Bottle, wrong.bottle_id)
    event = Event(EntryKind.PUT_RIGHT, change=-wrong.change, reason=reason, puts_right=wrong.id)
    try:
        return work.write(bottle, event)
    except NotEnough as error:
        since = taken_since(work, bottle, wrong)
        raise NotEnough(
            f"{error.message}{since}", "Put those right first." if since else error.hint
        ) from error


def with_it(work: Work, bottle: Bottle, wrong: Entry) -> list[Entry]:
    """What was written only because of an entry, and because of that in its turn.

    What went into a bottle made or poured, the opening a draw implied, what evened out an
    earlier count.
    """
    kind = EntryKind(wrong.kind)
    found: list[Entry] = []
    if kind in BEGINNINGS:
        gave = EntryKind.DRAWN if kind is EntryKind.MADE else EntryKind.DECANTED
        above = parents(work.session, bottle)
        found = noted(work.session, made_note(bottle.number), gave, above)
    elif kind in _TAKEN:
        found = noted(work.session, opened_note(wrong.id), EntryKind.OPENED, [bottle])
    elif kind in (EntryKind.COUNTED, EntryKind.DISCARDED):
        found = noted(work.session, evening_note(wrong.id), EntryKind.COUNTED, [bottle])
    return [each for one in found for each in (one, *_with_other(work, one))]


def _with_other(work: Work, other: Entry) -> list[Entry]:
    return with_it(work, work.session.get_one(Bottle, other.bottle_id), other)


def _opened_after_all(work: Work, undone: list[Entry]) -> tuple[str, ...]:
    """Write the opening that the draws still standing imply, where the one there was is undone."""
    told = []
    ids = {entry.bottle_id for entry in undone if entry.kind == EntryKind.OPENED}
    for bottle in (work.session.get_one(Bottle, one) for one in sorted(ids)):
        entries = entries_of(work.session, bottle)
        draws = [one for one in entries if one.kind in _TAKEN and one.change < 0]
        opening, first = opening_of(work, bottle), draws[0] if draws else None
        # one taken from a later draw is no word on the first
        if opening is not None and first is not None and opened_by_draw(opening):
            opening = opening if opening.happened_on <= first.happened_on else None
        if first is not None and opening is None and not bottle.made_here:
            event = Event(EntryKind.OPENED, note=opened_note(first.id))
            entry = work.write(bottle, event, on=first.happened_on)
            told.append(
                f"{bottle.number} was drawn from all the same: opened"
                f" {spell_day(first.happened_on)}, entry {entry.id}."
            )
    return tuple(told)
