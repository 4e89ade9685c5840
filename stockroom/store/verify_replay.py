"""The ledger read from its first entry to its last, by rules of its own: sums, days, pairs.

Nothing of the snapshot is used, so that one can prove the other. Entries come in pages,
and only what a bottle is known by is held on to: a million entries need no more room
than a thousand.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Collection, Iterator
from dataclasses import dataclass, field
from datetime import date

from stockroom.findings import Fault
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.kinds import BEGINNINGS, EntryKind
from stockroom.store.reading import Reader, Row

PAGE = 20_000
"""Entries read at once. Our choice."""

MOST = 20
"""Faults of one kind told one by one; the rest are counted. Our choice."""

Told = tuple[str, int]
"""A day as ISO text and the entry that gives it."""


@dataclass(slots=True)
class Replay:
    """What the entries come to by bottle, whatever is kept beside them."""

    numbers: dict[int, str]
    kinds: dict[int, str]
    held: dict[int, int] = field(default_factory=dict)
    # the earliest day anything holds of a bottle, and the days its story begins
    first: dict[int, Told] = field(default_factory=dict)
    begun: dict[int, list[Told]] = field(default_factory=dict)
    # bottles whose days do not follow the order of entering: only these need another look
    late: set[int] = field(default_factory=set)
    faults: list[Fault] = field(default_factory=list)

    def number(self, bottle: int) -> str:
        """The label of a bottle."""
        return self.numbers.get(bottle, f"bottle row {bottle}")

    def say(self, bottle: int, micro: int) -> str:
        """Micro-units of what a bottle holds, in words."""
        return format_amount(Amount(Kind(self.kinds.get(bottle, "items")), micro))


def replayed(reader: Reader) -> Replay:
    """The whole ledger in the order it was entered, with what is wrong in it."""
    story = Replay(
        reader.pairs("SELECT id, number FROM bottle"),
        reader.pairs("SELECT bottle.id, line.kind FROM bottle JOIN line ON line.id = line_id"),
    )
    early, clock, gaps, cells = (Few(name) for name in ("days", "clock", "gaps", "cells"))
    dips = _read(reader, story, early, clock, gaps, cells)
    story.faults += [*gaps.told(), *cells.told(), *_below(story, dips), *early.told()]
    story.faults += [*_begun(story), *clock.faults[:1], *_pairs(reader, story)]
    story.faults += _kept(reader, story)
    return story


class Few:
    """Faults of one kind: the first are told, the others counted."""

    def __init__(self, check: str) -> None:
        self.check = check
        self.faults: list[Fault] = []
        self.more = 0

    def add(self, subject: str, text: str, mend: str, *, remark: bool = False) -> None:
        """Take in one fault."""
        if len(self.faults) < MOST:
            self.faults.append(Fault(subject, text, self.check, mend, remark))
        else:
            self.more += 1

    def told(self) -> Iterator[Fault]:
        """Those that are told, and one line for the others."""
        yield from self.faults
        if self.more:
            yield more(self.check, self.more)


def few(faults: list[Fault], check: str) -> list[Fault]:
    """The first of many faults of one kind, and a line for how many more there are."""
    over = len(faults) - MOST
    return [*faults[:MOST], more(check, over)] if over > 0 else faults


def more(check: str, count: int) -> Fault:
    """The line for faults of one kind that are too many to tell."""
    return Fault("store", f"{count} more like these", check, "Mend those, then ask again.")


@dataclass(slots=True)
class _Dip:
    """That a bottle was below nothing: the first entry, what it held then, and the last."""

    entry: int
    held: int
    last: int
    # somebody looked since, and what there is was entered
    counted: bool = False


def _read(
    reader: Reader, story: Replay, early: Few, clock: Few, gaps: Few, cells: Few
) -> dict[int, _Dip]:
    held, first, begun, undone = story.held, story.first, story.begun, undone_in(reader)
    dips: dict[int, _Dip] = {}
    good: set[str] = set(EntryKind)
    order: dict[int, str] = {}
    latest: Told = ("", 0)
    for number, bottle, kind, happened, entered, moment, change, rights in _entries(reader):
        now = held[bottle] = held.get(bottle, 0) + change
        if number in undone or rights is not None or happened < order.get(bottle, ""):
            story.late.add(bottle)
        else:
            order[bottle] = happened
        if now < 0:
            _dip(dips, bottle, number, now if change < 0 else None)
        elif kind == EntryKind.COUNTED and bottle in dips and number not in undone:
            dips[bottle].counted = True
        if happened > entered and number not in undone:
            text = f"entry {number} happened {happened}, after it was entered ({entered})"
            early.add(story.number(bottle), text, _right(number))
        if moment < latest[0]:
            text = f"entry {number} was entered {moment}, after entry {latest[1]} of {latest[0]}"
            # a clock can be set back a thousand times, and once is enough to be told of it
            clock.add("clock", text, _CLOCK, remark=True)
        if number != latest[1] + 1:
            _gap(reader, gaps, latest[1] + 1, number - 1)
        if happened not in good or entered not in good or kind not in good:
            _check_words(cells, number, good, (happened, entered), kind)
        latest = moment, number
        if rights is None and number not in undone:
            if bottle not in first or happened < first[bottle][0]:
                first[bottle] = happened, number
            if kind in BEGINNINGS:
                begun.setdefault(bottle, []).append((happened, number))
    return dips


def _dip(dips: dict[int, _Dip], bottle: int, entry: int, held: int | None) -> None:
    found = dips.get(bottle)
    if found is not None:
        found.last, found.counted = entry, False
    elif held is not None:
        dips[bottle] = _Dip(entry, held, entry)


def _below(story: Replay, dips: dict[int, _Dip]) -> Iterator[Fault]:
    found = Few("balance")
    for bottle, dip in sorted(dips.items(), key=lambda each: each[1].entry):
        text = f"at {story.say(bottle, dip.held)} after entry {dip.entry}"
        text += ", and counted since" if dip.counted else ""
        found.add(story.number(bottle), text, _COUNT, remark=dip.counted)
    return found.told()


def _gap(reader: Reader, gaps: Few, first: int, last: int) -> None:
    # a server gives out numbers that no entry takes: those of whoever was refused
    if not isinstance(reader.connection, sqlite3.Connection):
        return
    which = f"entry {first}" if first == last else f"entries {first} to {last}"
    text = f"{which} {'is' if first == last else 'are'} not there: another program took it away"
    mend = "Put the last good copy back: stockroom restore FILE."
    gaps.add("entry", text, mend)


def _check_words(cells: Few, entry: int, good: set[str], days: Collection[str], kind: str) -> None:
    if kind not in good:
        text = f"entry {entry} is of the kind {kind!r}, which nobody knows here"
        cells.add("entry", text, "Put the last good copy back: stockroom restore FILE.")
    for day in days:
        if _is_day(day):
            good.add(day)
        else:
            text = f"entry {entry} carries {day!r}, which is no day"
            cells.add("entry", text, "Put the last good copy back: stockroom restore FILE.")


def _is_day(text: str) -> bool:
    try:
        return date.fromisoformat(text).isoformat() == text
    except ValueError:
        return False


def undone_in(reader: Reader) -> set[int]:
    """The entries that another one puts right."""
    return {row[0] for row in reader.ask(_UNDONE)}


_UNDONE = "SELECT puts_right FROM entry WHERE puts_right IS NOT NULL"
_COUNT = "Count it and enter what is really there: stockroom count."
_CLOCK = "A clock was set back. Look at that computer's; the order of the entries is safe."


def _entries(reader: Reader) -> Iterator[Row]:
    # by pages and not by one long question: a server would send the whole of its answer at once
    last = 0
    while rows := reader.ask(_PAGE, last, PAGE):
        yield from rows
        last = rows[-1][0]


_PAGE = (
    "SELECT id, bottle_id, kind, happened_on, entered_on, entered_at, change, puts_right"
    " FROM entry WHERE id > ? ORDER BY id LIMIT ?"
)


def _right(entry: int) -> str:
    return f"stockroom put-right {entry} --why …, then enter it anew."


_TWICE = "No command can do that: put the last good copy back, stockroom restore FILE."


def _begun(story: Replay) -> Iterator[Fault]:
    """Bottles whose story does not begin with how they came to be, or begins twice."""
    found = Few("days")
    for bottle, (day, entry) in sorted(story.first.items()):
        beginnings = sorted(story.begun.get(bottle, ()))
        if not beginnings:
            text = f"entry {entry} is of a bottle that never arrived and was never made"
            found.add(story.number(bottle), text, _right(entry))
        elif day < beginnings[0][0]:
            text = f"entry {entry} happened {day}, before it was there ({beginnings[0][0]})"
            found.add(story.number(bottle), text, _right(entry))
        if len(beginnings) > 1:
            text = f"came to be twice: entries {beginnings[0][1]} and {beginnings[1][1]}"
            found.add(story.number(bottle), text, _TWICE)
    return found.told()


def _pairs(reader: Reader, story: Replay) -> list[Fault]:
    """Entries that put right what they do not cancel."""
    faults = Few("put right")
    asked = (EntryKind.COUNTED, EntryKind.PUT_RIGHT, MOST + 1)
    for entry, rights, bottle, counted in reader.ask(_UNEQUAL, *asked):
        text = f"entry {entry} puts entry {rights} right and does not cancel it"
        text += ", and it was counted since" if counted else ""
        faults.add(story.number(bottle), text, _COUNT, remark=bool(counted))
    return list(faults.told())


_UNEQUAL = (
    "SELECT entry.id, wrong.id, entry.bottle_id, EXISTS (SELECT 1 FROM entry counted"
    " WHERE counted.bottle_id = entry.bottle_id AND counted.id > entry.id AND counted.kind = ?)"
    " FROM entry JOIN entry wrong ON wrong.id = entry.puts_right"
    " WHERE entry.bottle_id <> wrong.bottle_id OR entry.change <> -wrong.change"
    " OR wrong.id >= entry.id OR wrong.puts_right IS NOT NULL OR entry.kind <> ?"
    " ORDER BY entry.id LIMIT ?"
)


def _kept(reader: Reader, story: Replay) -> Iterator[Fault]:
    """Balances kept beside the ledger that are not what its entries come to."""
    found = Few("kept")
    kept = reader.pairs("SELECT bottle_id, held FROM kept_balance")
    for bottle in sorted(kept.keys() | story.held.keys()):
        held, sums = kept.get(bottle), story.held.get(bottle, 0)
        if held != sums and (held or sums):
            said = "nothing" if held is None else story.say(bottle, held)
            text = f"kept as {said}, and its entries come to {story.say(bottle, sums)}"
            found.add(story.number(bottle), text, AFRESH)
    return found.told()


AFRESH = "The entries are what counts: stockroom verify --afresh --by INITIALS keeps it by them."
