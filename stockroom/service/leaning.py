"""What leans on an entry: what would become impossible without it, and what is worth knowing.

Only the first stands in the way of putting it right; everything else can fall away and
leave a story that still holds together.
"""

from __future__ import annotations

from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.service.work import Work
from stockroom.store.estimates import WEIGHED
from stockroom.store.history import beginning_of, children, is_poured, noted, parents
from stockroom.store.kinds import BEGINNINGS, EntryKind, evened_count, made_into
from stockroom.store.ledger import entries_of
from stockroom.store.tables import Bottle, Entry
from stockroom.store.unnamed import NAMED

_USES = (EntryKind.DRAWN, EntryKind.DECANTED, EntryKind.LENT)


def whole_of(work: Work, entry: Entry) -> Entry:
    """The entry that stands for all of what happened: of a pouring, the one in its new bottle."""
    if entry.kind != EntryKind.DECANTED:
        return entry
    # the note names the bottle it went into, and numbers are never used again
    into = work.bottle(made_into(entry.note))
    return beginning_of(work.session, into) or entry


def check_nothing_leans(work: Work, bottle: Bottle, wrong: Entry) -> None:
    """Pass unless other entries need this one to be true. Raises: NotAllowed, listing them."""
    count = evened_count(wrong.note) if wrong.kind == EntryKind.COUNTED else None
    if count is not None:
        raise NotAllowed(
            f"Entry {wrong.id} only {wrong.note}.",
            f"Put entry {count} right, or what was entered late before it.",
        )
    listed = [_listed(entry) for entry in _leaning(work, bottle, wrong)]
    if wrong.kind in BEGINNINGS or _names(wrong):
        listed += [
            f"{work.called(child)} {'poured' if is_poured(work.session, child) else 'made'} from it"
            for child in children(work.session, bottle)
        ]
    if listed:
        raise NotAllowed(
            f"{bottle.number} has later entries: {'; '.join(listed)}.", "Put those right first."
        )


def _names(entry: Entry) -> bool:
    """Whether an entry says what an unknown is."""
    return entry.kind == EntryKind.SET_ASIDE and entry.reason == NAMED


def _listed(entry: Entry) -> str:
    return f"entry {entry.id} {entry.kind} {entry.happened_on}"


def _leaning(work: Work, bottle: Bottle, wrong: Entry) -> list[Entry]:
    """The entries of the bottle that could not be without this one."""
    entries = entries_of(work.session, bottle)
    if wrong.kind in BEGINNINGS:
        return [entry for entry in entries if entry.id != wrong.id]
    later = [entry for entry in entries if _place(entry) > _place(wrong)]
    if wrong.kind == EntryKind.LOST:
        # what was never missing cannot have turned up
        return [entry for entry in later[:1] if entry.kind == EntryKind.TURNED_UP]
    if wrong.kind == EntryKind.TURNED_UP:
        # and what was not found cannot have been used
        return [entry for entry in later if entry.kind != EntryKind.LOST]
    if _names(wrong):
        # it was used for what the name says, and nobody draws from an unknown
        return [entry for entry in later if entry.kind in _USES]
    if wrong.kind == EntryKind.LENT and wrong.change < 0:
        return _come_back(entries, wrong)
    return []


def _place(entry: Entry) -> tuple[str, int]:
    return entry.happened_on.isoformat(), entry.id or 0


def _come_back(entries: list[Entry], wrong: Entry) -> list[Entry]:
    """What came back of loans, where without this loan more came back than was lent."""
    loans = [entry for entry in entries if entry.kind == EntryKind.LENT and entry.id != wrong.id]
    came = [entry for entry in loans if entry.change > 0]
    return came if sum(entry.change for entry in loans) > 0 else []


def taken_since(work: Work, bottle: Bottle, wrong: Entry) -> str:
    """What left the bottle after an entry, in words; "" for nothing."""
    taken = [
        _listed(entry)
        for entry in entries_of(work.session, bottle)
        if entry.change < 0 and _place(entry) > _place(wrong)
    ]
    return f" Taken since: {'; '.join(taken)}." if taken else ""


def worth_knowing(work: Work, bottle: Bottle, wrong: Entry) -> tuple[str, ...]:
    """What was worked out from an entry and stays as it was; asked before it is put right."""
    if wrong.kind == EntryKind.FOUND:
        return tuple(
            f"{work.called(child)} was made by that strength {spell_day(begun.happened_on)}."
            for child in children(work.session, bottle)
            if (begun := beginning_of(work.session, child)) is not None
            and begun.kind == EntryKind.MADE
            and _place(begun) > _place(wrong)
        )
    if wrong.kind != EntryKind.DRAWN:
        return ()
    if into := made_into(wrong.note):
        others = parents(work.session, work.bottle(into))
        gave = noted(work.session, wrong.note, EntryKind.DRAWN, others)
        made = [f"entry {one.id}" for one in gave if one.id != wrong.id]
        other = f", and {', '.join(made)}" if made else ""
        return (f"It went into {into}, which still stands{other}.",)
    if wrong.note.startswith(WEIGHED) and bottle.tare is not None:
        tare = format_amount(Amount(Kind.MASS, bottle.tare))
        return (
            f"The tare of {bottle.number} stays {tare}; a right one: --tare at its next weighing.",
        )
    return ()
