"""Bookings: made, shifted, dropped. Every change is also appended to the booking's record."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom import clock
from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.days import format_time, spell_day
from stockroom.measure.formats import format_number
from stockroom.planning.facts import Firmness
from stockroom.service import booking_effects as effects
from stockroom.service.answers import Done
from stockroom.service.booking_rules import check_day, check_in_use, check_may_be_dropped
from stockroom.service.work import initials
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.booking_limits import checked_groups, checked_spare
from stockroom.store.engine import Session, reader_in, writing
from stockroom.store.history import changes_of, terms
from stockroom.store.ledger import next_booking_number
from stockroom.store.likeness import unknown
from stockroom.store.snapshot import calendar_of
from stockroom.store.tables import Booking, BookingChange, Department, House, Recipe


@dataclass(frozen=True, slots=True)
class Hand:
    """Who changes a booking, on what day."""

    session: Session
    today: date
    by: str

    def record(self, booking: Booking, what: str, before: str, after: str) -> None:
        """Append one change to the booking's record."""
        assert booking.id is not None
        change = BookingChange(
            booking_id=booking.id,
            entered_on=self.today,
            entered_at=clock.now().isoformat(sep=" "),
            by=self.by,
            what=what,
            before=before,
            after=after,
        )
        self.session.add(change)

    def done(self, text: str, details: tuple[str, ...] = (), *, undo: str = "") -> Done:
        """The answer, saying whether this is the practice store, and what takes it back."""
        setting = self.session.get(House, "practice")
        practice = setting is not None and setting.value == "yes"
        return Done(text, "", None, "stockroom plan", practice, details, undo)


def book(
    path: StoreAt,
    number: str | None,
    recipe: str,
    on: date,
    time: int,
    groups: int,
    department: str,
    *,
    spare: float | None = None,
    firmness: str = "firm",
    room: str = "",
    version: int | None = None,
    keep: bool = False,
    today: date,
    by: str,
) -> Done:
    """Book a recipe: the next number unless one is given, the newest version unless one is.

    `time` in minutes after midnight, `spare` in per cent (10 when None).
    Raises: BadInput for groups outside 1-200, spare over 50 %, no department or
    a number in use; BadDate before today; UnknownName; NotAllowed on a closed
    day unless `keep`.
    """
    firm = _firmness(firmness)
    with writing(path) as session:
        hand = Hand(session, today, initials(by))
        found = names.find_recipe(session, recipe, version)
        payer = _payer(session, department)
        _check_day(hand, on, keep=keep)
        assert found.id is not None and payer.id is not None
        booking = Booking(
            # checked inside the transaction, or two desks could be given one number
            number=_number(session, number),
            recipe_id=found.id,
            on_day=on,
            minute=time,
            groups=checked_groups(groups),
            spare=checked_spare(spare),
            department_id=payer.id,
            firmness=firm,
            room=room,
        )
        return _booked(hand, booking)


def _booked(hand: Hand, booking: Booking) -> Done:
    """Save a new booking, and say what is odd about it."""
    session = hand.session
    twice = effects.the_same(session, booking)
    session.add(booking)
    session.flush()
    # its first state, so that the record can be read from the beginning
    hand.record(booking, "booked", "", _in_words(session, booking))
    text = f"Booked {booking.number}: {_in_words(session, booking)}."
    rooms = effects.room_shared(reader_in(session), booking)
    details = (*twice, *rooms, *_outside_terms(session, booking.on_day))
    return hand.done(text, details, undo=f"stockroom cancel {booking.number}")


def _firmness(word: str) -> Firmness:
    if word not in [firm.value for firm in Firmness]:
        raise unknown("firmness", word, [firm.value for firm in Firmness])
    return Firmness(word)


def _payer(session: Session, department: str) -> Department:
    # money is split by department to the penny, and a guess here would be paid by somebody
    if not department.strip():
        raise BadInput(
            f'Department "{department}": a booking needs to know who pays.', "Add --dept CH."
        )
    return names.find_department(session, department)


def _number(session: Session, number: str | None) -> str:
    # numbers on printed sheets must stay true, so a free one is always a new one
    if number is None:
        return next_booking_number(session)
    if names.number_in_use(session, number):
        raise BadInput(f"{number} is booked already.", "Leave the number out for the next one.")
    return number.strip()


def _check_day(hand: Hand, on: date, *, keep: bool) -> None:
    check_day(on, calendar_of(reader_in(hand.session)), today=hand.today, keep=keep)


def _outside_terms(session: Session, on: date) -> tuple[str, ...]:
    """One line when terms are written down and the day lies in none of them."""
    spans = terms(session)
    if not spans or any(first <= on <= last for first, last in spans):
        return ()
    return (f"{spell_day(on)} is outside every term.",)


def _in_words(session: Session, booking: Booking) -> str:
    recipe = session.get_one(Recipe, booking.recipe_id)
    groups = "1 group" if booking.groups == 1 else f"{booking.groups} groups"
    return (
        f"{recipe.recipe} {recipe.title}, {spell_day(booking.on_day)}"
        f" {format_time(booking.minute)}, {groups}, {format_number(booking.spare / 10)} % spare,"
        f" {booking.firmness}"
    )


def shift(
    path: StoreAt,
    booking: str,
    *,
    on: date | None = None,
    time: int | None = None,
    groups: int | None = None,
    firmness: str | None = None,
    keep: bool = False,
    today: date,
    by: str,
) -> Done:
    """Change a booking's day, time, groups or firmness; what it was stays on record.

    Raises: UnknownName; BadInput when nothing would change, or for groups
    outside 1-200; BadDate before today; NotAllowed on a closed day unless
    `keep`, and for a booking dropped or done unless its firmness is given.
    """
    # None means leave as it is; no column of a booking may become empty
    wanted: dict[str, object] = {"on_day": on, "minute": time, "groups": groups}
    wanted["firmness"] = None if firmness is None else _firmness(firmness)
    with writing(path) as session:
        hand = Hand(session, today, initials(by))
        found = names.find_booking(session, booking)
        # said outright, a firmness is the way back into the plan
        if firmness is None:
            check_in_use(found.number, found.firmness)
        if on is not None:
            _check_day(hand, on, keep=keep)
        if groups is not None:
            checked_groups(groups)
        before, undo = found.groups, _shifted_back(found, wanted)
        changes = _changes(hand, found, wanted)
        details = _outside_terms(session, found.on_day) if on is not None else ()
        if on is not None or time is not None:
            session.flush()
            details += effects.room_shared(reader_in(session), found)
        if found.groups != before:
            session.flush()
            recipe = session.get_one(Recipe, found.recipe_id)
            details += effects.extra(reader_in(session), found, recipe, before)
        return hand.done(f"{found.number}: {'; '.join(changes)}.", details, undo=undo)


def _shifted_back(booking: Booking, wanted: dict[str, object]) -> str:
    """The command that makes a booking again what it is now, before it is changed."""
    back = [
        f"{option} {_say(column, getattr(booking, column))}"
        for column, option in _OPTIONS.items()
        if wanted[column] not in (None, getattr(booking, column))
    ]
    return " ".join(["stockroom shift", booking.number, *back])


def _changes(hand: Hand, booking: Booking, wanted: dict[str, object]) -> list[str]:
    """Change what differs from what is wanted, and say it. Raises: BadInput where nothing does."""
    changes = [
        _change(hand, booking, column, value)
        for column, value in wanted.items()
        if value is not None and value != getattr(booking, column)
    ]
    if not changes:
        raise BadInput(
            f"{booking.number} is so already: {_in_words(hand.session, booking)}.",
            "Say what changes with --on, --at, --groups or --firmness.",
        )
    return changes


_SAID = {"on_day": "day", "minute": "time", "groups": "groups", "firmness": "firmness"}
_OPTIONS = {"on_day": "--on", "minute": "--at", "groups": "--groups", "firmness": "--firmness"}


def _change(hand: Hand, booking: Booking, column: str, value: object, why: str = "") -> str:
    before, after = _say(column, getattr(booking, column)), _say(column, value)
    # the record has no column of its own for it, and is only ever read by people
    after += f" ({why.strip()})" if why.strip() else ""
    setattr(booking, column, value)
    hand.session.add(booking)
    hand.record(booking, _SAID[column], before, after)
    return f"{_SAID[column]} {before} → {after}"


def _say(column: str, value: object) -> str:
    if isinstance(value, date):
        return value.isoformat()
    return format_time(int(str(value))) if column == "minute" else str(value)


def cancel(path: StoreAt, booking: str, *, why: str = "", today: date, by: str) -> Done:
    """Drop a booking: it leaves the plan, makes not done are withdrawn, those done stay as stock.

    Raises: UnknownName; NotAllowed when it is dropped already, or done.
    """
    with writing(path) as session:
        hand, reader = Hand(session, today, initials(by)), reader_in(session)
        found = names.find_booking(session, booking)
        check_may_be_dropped(found.number, found.firmness)
        # asked before it is dropped: afterwards the plan no longer has them
        gone = effects.withdrawn(reader, found.number, today)
        _change(hand, found, "firmness", Firmness.DROPPED.value, why)
        details = (*gone, *effects.kept_as_stock(reader, found.number, today))
        text = f"Dropped {found.number}: {_in_words(session, found)}."
        return hand.done(text, details, undo=f"stockroom cancel {found.number} --undo --why …")


def take_back(path: StoreAt, booking: str, *, why: str, today: date, by: str) -> Done:
    """Take a cancelling back: the booking is as firm as it was before. Both stay on record.

    Raises: UnknownName; NotAllowed for one that is not dropped; BadInput without a reason.
    """
    if not why.strip():
        raise BadInput(f"Why is {booking} taken back?", "One word is enough: --why …")
    with writing(path) as session:
        hand = Hand(session, today, initials(by))
        found = names.find_booking(session, booking)
        if found.firmness != Firmness.DROPPED:
            raise NotAllowed(f"{found.number} is not dropped: it is {found.firmness}.")
        _change(hand, found, "firmness", _before_dropped(session, found), why)
        past = found.on_day < today
        told = (f"{spell_day(found.on_day)} is past: it changes no plan.",) if past else ()
        text = f"{found.number} is back: {_in_words(session, found)}."
        return hand.done(text, told, undo=f"stockroom cancel {found.number}")


def _before_dropped(session: Session, booking: Booking) -> str:
    """How firm a booking was before it was dropped; firm where nobody wrote that down."""
    dropped = [one for one in changes_of(session, booking) if _drops(one)]
    return dropped[-1].before if dropped else Firmness.FIRM.value


def _drops(change: BookingChange) -> bool:
    return change.what == _SAID["firmness"] and change.after.startswith(Firmness.DROPPED.value)
