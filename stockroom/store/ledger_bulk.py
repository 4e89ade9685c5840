"""Many entries at once, for what is brought in or read back: each checked as one alone is.

An entry that needs more than its own line (it puts another right, or changes what a bottle
held on a day with later entries) goes the way of the single ones, and so does one that is
refused, for its words.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import date
from typing import Any

from sqlmodel import Session

from stockroom.store.engine import reader_in
from stockroom.store.kinds import BEGINNINGS, STANDING
from stockroom.store.ledger import ADDED, Event, Stamp, append, row_of
from stockroom.store.remembered import forget
from stockroom.store.tables import Bottle

CHUNK = 10_000
"""Entries sent to the engine together: enough for its speed, little enough to hold. Our choice."""


@dataclass(slots=True)
class _Known:
    """What decides whether the next entry of a bottle may stand: its days and what it holds."""

    held: int
    begun: date | None
    # the latest day of any entry: what happened before it is not the last word
    last: date | None


def append_many(session: Session, told: Iterable[tuple[Bottle, Event, Stamp]]) -> int:
    """Write entries in the order they are given; how many were written.

    They are checked as `ledger.append` checks each, against those before them as well, and
    only so many are held at once. Raises: as `append`; what was written before is then still
    in the transaction, for the caller to give up.
    """
    bulk = _Bulk(session)
    for bottle, event, stamp in told:
        bulk.add(bottle, event, stamp)
    bulk.save()
    return bulk.count


@dataclass(slots=True)
class _Bulk:
    session: Session
    count: int = 0
    known: dict[int | None, _Known] = field(default_factory=dict)
    waiting: list[dict[str, Any]] = field(default_factory=list)

    def add(self, bottle: Bottle, event: Event, stamp: Stamp) -> None:
        """Take in one entry."""
        self.count += 1
        known = self.known.get(bottle.id) or self._learn(bottle)
        if not _plain(known, event, stamp):
            self.save()
            append(self.session, bottle, event, stamp)
            # what it changed besides is asked again
            del self.known[bottle.id]
            return
        known.held += event.change
        on = stamp.happened_on
        if event.kind in BEGINNINGS and (known.begun is None or on < known.begun):
            known.begun = on
        known.last = on if known.last is None else max(on, known.last)
        self.waiting.append(row_of(int(bottle.id or 0), event, stamp, on))
        if len(self.waiting) >= CHUNK:
            self.save()

    def save(self) -> None:
        """Send what waits to the engine."""
        if self.waiting:
            # as with a single entry: what waits in the session goes first
            self.session.flush()
            self.session.connection().execute(ADDED, self.waiting)
            forget(self.session)
            self.waiting = []

    def _learn(self, bottle: Bottle) -> _Known:
        # a bottle nobody asked about has nothing waiting, so the store knows all of it
        asked = (bottle.id, bottle.id, *BEGINNINGS, bottle.id)
        row = reader_in(self.session).ask(_ASKED, *asked)[0]
        found = self.known[bottle.id] = _Known(int(row[0]), _day(row[1]), _day(row[2]))
        return found


_MARKS = ", ".join("?" * len(BEGINNINGS))
_ASKED = (
    "SELECT COALESCE((SELECT held FROM kept_balance WHERE bottle_id = ?), 0),"
    " (SELECT MIN(happened_on) FROM entry WHERE bottle_id = ?"
    f" AND kind IN ({_MARKS}) AND {STANDING}),"
    f" (SELECT MAX(happened_on) FROM entry WHERE bottle_id = ? AND {STANDING})"
)


def _day(written: str | None) -> date | None:
    return date.fromisoformat(written) if written else None


def _plain(known: _Known, event: Event, stamp: Stamp) -> bool:
    """Whether an entry may stand as it is, with nothing to be written beside it."""
    on = stamp.happened_on
    there = event.kind in BEGINNINGS or (known.begun is not None and known.begun <= on)
    # a later count stays true, which takes an entry more; and it must have been there that day
    late = bool(event.change) and known.last is not None and known.last > on
    enough = event.change >= 0 or known.held + event.change >= 0
    return there and enough and not late and event.puts_right is None and bool(stamp.by.strip())
