"""One unit of work at the shelf: the store open for writing, and who does it when."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, replace
from datetime import date
from typing import TypeVar, cast

from stockroom import clock
from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed
from stockroom.keeping.rules import Rule
from stockroom.keeping.verdict import Condition, Verdict, verdict
from stockroom.measure.amounts import BASE_UNIT, Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount, unit_mark
from stockroom.planning import facts
from stockroom.service.answers import Done
from stockroom.service.once import entered_a_moment_ago
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.desk import Desk
from stockroom.store.engine import Session, reader_in, writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, Stamp, append, before_it_was_there, entries_of
from stockroom.store.reading import Reader
from stockroom.store.remembered import answers_in
from stockroom.store.snapshot_bottles import bottle_of
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle, Entry, Line

Value = TypeVar("Value")


@dataclass(frozen=True, slots=True)
class Work:
    """The open session, the stamp its entries carry, and whether this is practice."""

    session: Session
    stamp: Stamp
    practice: bool

    @property
    def on(self) -> date:
        """The day it happened."""
        return self.stamp.happened_on

    @property
    def reader(self) -> Reader:
        """The reading half, on this very transaction."""
        return reader_in(self.session)

    @property
    def desk(self) -> Desk:
        """Where rows are read into the store, in this work's name."""
        stamp = self.stamp
        return Desk(self.session, stamp.by, stamp.entered_on, stamp.entered_at)

    def bottle(self, number: str) -> Bottle:
        """The bottle with that number. Raises: UnknownName."""
        return names.find_bottle(self.session, number)

    def line(self, bottle: Bottle) -> Line:
        """What the bottle holds."""
        known, asked = answers_in(self.session), ("line", bottle.line_id)
        if asked not in known:
            known[asked] = self.session.get_one(Line, bottle.line_id)
        return cast(Line, known[asked])

    def place_id(self, place: str) -> int | None:
        """The place by its name. Raises: UnknownName with the nearest."""
        return names.find_place(self.session, place).id

    def write(self, bottle: Bottle, event: Event, *, on: date | None = None) -> Entry:
        """Append one entry under this work's stamp. Raises: as `ledger.append`."""
        stamp = self.stamp if on is None else replace(self.stamp, happened_on=on)
        return append(self.session, bottle, event, stamp)

    def seen(self, bottle: Bottle) -> facts.Bottle:
        """The bottle as the planner would see it that day. Raises: BadDate before it was there."""
        # through the reading half, so that both halves judge a bottle by the same facts
        found = self._once(
            (bottle.number, self.on), lambda: bottle_of(self.reader, bottle.number, self.on)
        )
        if found is None:
            raise before_it_was_there(bottle, spell_day(self.on), None)
        return found

    def verdict(self, bottle: Bottle) -> Verdict:
        """The verdict on the bottle that day."""
        return verdict(self.seen(bottle).record, self.rules(bottle), self.on)

    def rules(self, bottle: Bottle) -> tuple[Rule, ...]:
        """How what is in the bottle ages."""
        key = self.line(bottle).key
        return self._once((key,), lambda: lines_of(self.reader, key)[key].rules)

    def _once(self, asked: tuple[object, ...], ask: Callable[[], Value]) -> Value:
        """The answer to a question, asked again only when something was written since."""
        # whatever is still to be written is sent first, which lets go of what was known
        self.session.flush()
        known = answers_in(self.session)
        if asked not in known:
            known[asked] = ask()
        return cast(Value, known[asked])

    def say(self, bottle: Bottle, micro: int) -> str:
        """Micro-units of what the bottle holds, in words."""
        return format_amount(Amount(Kind(self.line(bottle).kind), micro))

    def called(self, bottle: Bottle) -> str:
        """The bottle's number and what is in it."""
        return f"{bottle.number} {self.line(bottle).key}"

    def done(
        self,
        text: str,
        bottle: Bottle,
        entry: Entry,
        *,
        following: str = "",
        details: tuple[str, ...] = (),
        last: int | None = None,
        also: tuple[int, ...] = (),
    ) -> Done:
        """What was saved, as the answer to whoever asked; `last` of the entries, where several."""
        # the number is what put-right asks for, should this prove a slip
        several = last is not None and last != entry.id
        told = f"{text} Entries {entry.id}–{last}." if several else f"{text} Entry {entry.id}."
        asked = entered_a_moment_ago(self.reader, entry)
        details = (*details, *asked)
        return Done(told, bottle.number, entry.id, following, self.practice, details, also=also)


@contextmanager
def working(path: StoreAt, *, on: date | None, today: date, by: str) -> Iterator[Work]:
    """One unit of work: saved when the block ends well, else nothing is.

    `on` is the day it happened, today when not said; it is entered today.
    Raises: BadInput without initials, BadDate for a day to come, StoreTrouble.
    """
    initials(by)
    happened = on or today
    # a day to come would sit in every later picture as if it had happened
    if happened > today:
        raise BadDate(
            f"{spell_day(happened)} is still to come: today is {spell_day(today)}.",
            "Give the day it happened with --on.",
        )
    with writing(path) as session:
        # read inside the work: a store is not opened twice to ask its name
        setting = reader_in(session).pairs(_PRACTICE)
        stamp = Stamp(happened, today, clock.now(), by)
        yield Work(session, stamp, practice=setting.get("practice") == "yes")


_PRACTICE = "SELECT setting, value FROM house WHERE setting = 'practice'"


def initials(by: str) -> str:
    """The initials, when there are any. Raises: BadInput."""
    if not by.strip():
        raise BadInput("Whose initials?", "Add --by T1, or set STOCKROOM_BY.")
    return by.strip()


def check_amount(line: Line, amount: Amount) -> Amount:
    """The amount, when it is more than nothing and of the line's kind. Raises: BadAmount."""
    check_kind(line, amount)
    # an entry of nothing would only hide a slip
    if amount.micro <= 0:
        raise BadAmount(f"{format_amount(amount)} of {line.key} is nothing.", "How much was it?")
    return amount


def check_kind(line: Line, amount: Amount) -> None:
    """Pass when the amount is of the line's kind. Raises: BadAmount."""
    if amount.kind != line.kind:
        raise BadAmount(
            f"{line.key} is measured by {line.kind}, and {format_amount(amount)} is not.",
            f"Give it in {unit_mark(BASE_UNIT[Kind(line.kind)])}.",
        )


def check_at_hand(work: Work, bottle: Bottle) -> facts.Bottle:
    """The bottle as seen, when it is on the shelf at all.

    Raises: NotAllowed when it is gone or was not found.
    """
    seen = work.seen(bottle)
    if seen.record.gone:
        raise NotAllowed(
            f"{bottle.number} is gone: {last_said(work, bottle, EntryKind.DISCARDED)}.",
            "Use another bottle.",
        )
    if seen.record.not_found:
        raise NotAllowed(
            f"{bottle.number} was not found: {last_said(work, bottle, EntryKind.LOST)}."
            " So it is found? Where?",
            f"stockroom turned-up {bottle.number} --place …",
        )
    return seen


def check_in_use(work: Work, bottle: Bottle) -> facts.Bottle:
    """The bottle as seen, when it may be drawn from. Raises: NotAllowed, with the reason."""
    seen = check_at_hand(work, bottle)
    if seen.record.set_aside:
        raise NotAllowed(
            f"{bottle.number} is set aside: {seen.record.set_aside}.",
            f"Use another, or look at it: stockroom look {bottle.number} --good, or --bad.",
        )
    return seen


def last_said(work: Work, bottle: Bottle, kind: EntryKind) -> str:
    """Who said it last of a bottle, when, and what of it: "8 January 2027, T1, not on D1"."""
    # the last of them is the one that still holds
    entry = entries_of(work.session, bottle, kind)[-1]
    said = entry.reason or entry.note
    return f"{spell_day(entry.happened_on)}, {entry.by}" + (f", {said}" if said else "")


def doubts(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """One line when the bottle is not sound that day: worth knowing, and no reason to refuse."""
    found = work.verdict(bottle)
    if found.condition is Condition.SOUND:
        return ()
    warned = f" {found.warning.capitalize()}." if found.warning else ""
    return (f"{bottle.number} is {found.condition}: {found.decided_by}.{warned}",)


def unsettled(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """One line when its printed date has two readings and nobody has said which is right."""
    printed = work.seen(bottle).record.printed
    if printed is None or not printed.ambiguous:
        return ()
    listed = " or ".join(spell_day(day) for day in printed.readings)
    return (
        f'Printed "{printed.text}" can be {listed}: planned on the earlier. To settle it:'
        f" stockroom printed {bottle.number} {printed.readings[-1]}, or {printed.readings[0]}.",
    )
