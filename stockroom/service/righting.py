"""Undoing an entry without rubbing it out: what may be undone, and what goes with it."""

from __future__ import annotations

from stockroom.errors import NotAllowed, UnknownName
from stockroom.measure.days import spell_day
from stockroom.service.work import Work
from stockroom.store.history import children, noted, undone_by
from stockroom.store.kinds import BEGINNINGS, EntryKind
from stockroom.store.ledger import Event, entries_of, evening_note, made_note, opened_note
from stockroom.store.tables import Bottle, Entry


def standing(work: Work, number: int) -> Entry:
    """The entry, when it may still be put right.

    Raises: UnknownName; NotAllowed when it was put right already, or is itself a putting-right.
    """
    entry = work.session.get(Entry, number)
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


def check_nothing_leans(work: Work, bottle: Bottle, wrong: Entry) -> None:
    """Pass unless other entries need this one to be true. Raises: NotAllowed, listing them."""
    # anything else can fall away and leave a story that still holds together
    if wrong.kind not in BEGINNINGS:
        return
    later = [entry for entry in entries_of(work.session, bottle) if entry.id != wrong.id]
    listed = [f"entry {entry.id} {entry.kind} {entry.happened_on}" for entry in later]
    listed += [f"{work.called(child)} made from it" for child in children(work.session, bottle)]
    if listed:
        raise NotAllowed(
            f"{bottle.number} has later entries: {'; '.join(listed)}.", "Put those right first."
        )


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
    """Write the entry that undoes another. Raises: NotEnough when the balance would not bear it."""
    # written today under the slip's own bottle, whoever asks: the pair must cancel there
    bottle = work.session.get_one(Bottle, wrong.bottle_id)
    event = Event(EntryKind.PUT_RIGHT, change=-wrong.change, reason=reason, puts_right=wrong.id)
    return work.write(bottle, event)


def with_it(work: Work, bottle: Bottle, wrong: Entry) -> list[Entry]:
    """What was written only because of an entry.

    The draws of a make, the opening a draw implied, what evened out an earlier count.
    """
    notes = {
        EntryKind.MADE: made_note(bottle.number),
        EntryKind.DRAWN: opened_note(wrong.id),
        EntryKind.COUNTED: evening_note(wrong.id),
    }
    note = notes.get(EntryKind(wrong.kind))
    if wrong.kind == EntryKind.DRAWN and _drawn_again(work, bottle, wrong):
        # another draw needs it open, whoever opened it
        return []
    return noted(work.session, note) if note else []


def _drawn_again(work: Work, bottle: Bottle, wrong: Entry) -> bool:
    entries = entries_of(work.session, bottle)
    return any(e.kind == EntryKind.DRAWN and e.id != wrong.id for e in entries)
