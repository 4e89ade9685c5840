"""What would change if: the difference to the plan, worked out and never written.

The store is opened for reading, and what may not be entered may not be supposed either.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.days import format_time, spell_day
from stockroom.planning.changing import what_if as suppose
from stockroom.planning.changing.causes import compared
from stockroom.planning.changing.changes import Comparison
from stockroom.planning.changing.kept import kept_of
from stockroom.planning.facts import Booking, Bottle, Facts, Happened, HappenedKind, Recipe
from stockroom.service.booking_rules import check_day, check_in_use, check_may_be_dropped
from stockroom.service.known import known_from, on_the_safe_side
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.booking_limits import checked_groups, checked_spare, next_number
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, reading

USUAL_SESSION = 100
"""Minutes a class lasts where the house does not say: as `Booking` and the snapshot have it."""

SAFE_SIDE = "every strength at its lower 95 % limit"


@dataclass(frozen=True, slots=True)
class Shift:
    """A booking on another day, or at another time in minutes after midnight."""

    booking: str
    on: date | None = None
    minute: int | None = None


@dataclass(frozen=True, slots=True)
class Extra:
    """One more booking. What is not said is as in the recipe's last booking of the term."""

    recipe: str
    on: date
    groups: int
    minute: int | None = None
    department: str = ""


@dataclass(frozen=True, slots=True)
class Asked:
    """Everything supposed at once; `groups` is booking and number of groups."""

    groups: tuple[tuple[str, int], ...] = ()
    shifts: tuple[Shift, ...] = ()
    without: tuple[str, ...] = ()
    cancels: tuple[str, ...] = ()
    extras: tuple[Extra, ...] = ()
    cautious: bool = False
    keep_closed: bool = False


@dataclass(frozen=True, slots=True)
class Supposed:
    """The difference it would make, and what was asked in words."""

    asked: tuple[str, ...]
    comparison: Comparison
    house: str
    practice: bool


def what_if(path: StoreAt, asked: Asked, *, as_at: date) -> Supposed:
    """The plan as it would be against the plan as it is.

    Raises: BadInput when nothing is asked, for groups outside 1-200, and for what is so
    already; BadDate before today; UnknownName with the nearest; NotAllowed on a closed day
    unless `keep_closed`, for a booking dropped or done, and for one outside the days planned.
    """
    with reading(path) as reader:
        facts = known_from(reader, as_at)
        supposing = _Supposing(reader, facts, asked)
        said = list(supposing.carry_out())
        if asked.cautious:
            said.append(Happened(HappenedKind.HOUSE, "", SAFE_SIDE))
        if not said:
            raise BadInput("What if what? Nothing was asked.", "stockroom what-if --groups K08=11")
        after = supposing.facts
        if asked.cautious:
            after = on_the_safe_side(reader, after)
    befell = [each for each in said if each.kind is not HappenedKind.BOOKING]
    comparison = compared(
        kept_of(facts, replayed_plan(facts)),
        kept_of(after, replayed_plan(after)),
        befell,
        supposed=True,
    )
    house = facts.house
    return Supposed(tuple(each.said for each in said), comparison, house.name, house.practice)


class _Supposing:
    """The facts while one thing after another is supposed of them."""

    def __init__(self, reader: Reader, facts: Facts, asked: Asked) -> None:
        self.reader = reader
        self.facts = facts
        self.asked = asked

    def carry_out(self) -> Iterator[Happened]:
        """Suppose it all, in a fixed order; what was supposed, in words."""
        _check_once(self.asked)
        yield from map(self._shift, self.asked.shifts)
        yield from (self._resize(*each) for each in self.asked.groups)
        yield from map(self._cancel, self.asked.cancels)
        yield from map(self._book, self.asked.extras)
        yield from map(self._without, self.asked.without)

    def _resize(self, number: str, groups: int) -> Happened:
        booking = self._booking(number)
        check_in_use(booking.number, booking.firmness)
        checked_groups(groups)
        _check_other(booking, booking.groups == groups, f"{groups} groups")
        self.facts = suppose.with_groups(self.facts, booking.number, groups)
        return _of(booking, f"{booking.groups} → {groups} groups")

    def _shift(self, shift: Shift) -> Happened:
        booking = self._booking(shift.booking)
        check_in_use(booking.number, booking.firmness)
        if shift.on is not None:
            self._check_day(shift.on)
            self._check_planned(shift.on)
        on, minute = shift.on or booking.on, _else(shift.minute, booking.minute)
        same = (on, minute) == (booking.on, booking.minute)
        _check_other(booking, same, f"on {on} {format_time(minute)}")
        self.facts = suppose.shifted(self.facts, booking.number, on=on, minute=minute)
        return _of(booking, f"on {on} {format_time(minute)}")

    def _cancel(self, number: str) -> Happened:
        booking = self._booking(number)
        check_may_be_dropped(booking.number, booking.firmness)
        self.facts = suppose.cancelled(self.facts, booking.number)
        return _of(booking, "dropped")

    def _book(self, extra: Extra) -> Happened:
        recipe = self._recipe(extra.recipe)
        self._check_day(extra.on)
        self._check_planned(extra.on)
        alike = [b for b in self.facts.bookings if b.recipe == recipe.code]
        model = max(alike, key=lambda b: (b.on, b.minute, b.number), default=None)
        minute = _else(extra.minute, model.minute if model else self.facts.calendar.open_from)
        numbers = [row[0] for row in self.reader.ask("SELECT number FROM booking")]
        booking = Booking(
            number=next_number("K", [*numbers, *(b.number for b in self.facts.bookings)]),
            recipe=recipe.code,
            version=recipe.version,
            on=extra.on,
            minute=minute,
            groups=checked_groups(extra.groups),
            spare=checked_spare(None),
            department=self._department(extra, model),
            lasts_minutes=self._session(),
        )
        self.facts = suppose.booked(self.facts, booking)
        words = f"{recipe.code} {booking.on} {format_time(minute)}, {booking.groups} groups"
        return _of(booking, f"{words}, {booking.department}")

    def _without(self, number: str) -> Happened:
        bottle = self._bottle(number)
        if bottle.record.not_found:
            raise BadInput(f"{bottle.number} was not found as it is.", "Leave it out.")
        if not bottle.left:
            raise BadInput(f"{bottle.number} is empty as it is.", "Leave it out.")
        self.facts = suppose.without(self.facts, bottle.number)
        said = f"without {bottle.number}"
        return Happened(HappenedKind.BOTTLE, bottle.number, said, line=bottle.line)

    def _booking(self, text: str) -> Booking:
        for booking in self.facts.bookings:
            if plain(booking.number) == plain(text):
                return booking
        rows = self.reader.ask("SELECT number, on_day FROM booking ORDER BY number")
        for row in rows:
            if plain(row["number"]) == plain(text):
                on = spell_day(date.fromisoformat(row["on_day"]))
                raise NotAllowed(
                    f"{row['number']} is on {on}, outside the days planned.",
                    "Give a day of its term with --as-at.",
                )
        raise unknown("booking", text, [row["number"] for row in rows])

    def _bottle(self, text: str) -> Bottle:
        for bottle in self.facts.bottles:
            if plain(bottle.number) == plain(text):
                return bottle
        # one that is no longer there, or not there yet, is no slip of the keyboard
        for row in self.reader.ask("SELECT number FROM bottle ORDER BY number"):
            if plain(row["number"]) == plain(text):
                on = spell_day(self.facts.as_at)
                raise BadInput(f"{row['number']} is not there on {on} as it is.", "Leave it out.")
        raise unknown("bottle", text, [bottle.number for bottle in self.facts.bottles])

    def _recipe(self, text: str) -> Recipe:
        recipes = self.facts.recipes.values()
        named = [r for r in recipes if plain(text) in (plain(r.code), plain(r.title))]
        if named:
            return max(named, key=lambda recipe: recipe.version)
        raise unknown("recipe", text, {name for r in recipes for name in (r.code, r.title)})

    def _department(self, extra: Extra, model: Booking | None) -> str:
        every = self.facts.departments
        if not extra.department:
            if model is not None:
                return model.department
            if len(every) == 1:
                return every[0].code
            raise BadInput(
                f"{extra.recipe} was booked by nobody yet: whose money is it?",
                f"Add a department: --book {extra.recipe},{extra.on},{extra.groups},CH",
            )
        for department in every:
            if plain(extra.department) in (plain(department.code), plain(department.name)):
                return department.code
        raise unknown("department", extra.department, [each.code for each in every])

    def _session(self) -> int:
        rows = self.reader.rows("house", "WHERE setting = ?", "session_minutes")
        return int(rows[0]["value"]) if rows else USUAL_SESSION

    def _check_day(self, on: date) -> None:
        facts, keep = self.facts, self.asked.keep_closed
        check_day(on, facts.calendar, today=facts.as_at, keep=keep)

    def _check_planned(self, on: date) -> None:
        last = self.facts.horizon or self.facts.end
        if on > last:
            raise NotAllowed(
                f"{spell_day(on)} is after the last day planned, {spell_day(last)}.",
                "Give a day of the term, or another with --as-at.",
            )


def _check_once(asked: Asked) -> None:
    """Pass when nothing is asked of one booking or bottle twice. Raises: BadInput, naming it."""
    cancels = list(asked.cancels)
    resized, shifted = [each[0] for each in asked.groups], [each.booking for each in asked.shifts]
    for option, names in (
        ("--groups", resized),
        ("--shift", shifted),
        ("--cancel", cancels),
        ("--without", list(asked.without)),
        # a class that is dropped has no groups and no day
        ("--cancel and --groups", [*set(map(plain, cancels)), *set(map(plain, resized))]),
        ("--cancel and --shift", [*set(map(plain, cancels)), *set(map(plain, shifted))]),
    ):
        seen: set[str] = set()
        for name in names:
            if plain(name) in seen:
                raise BadInput(f"{name.strip()} is named twice, in {option}.", "Name it once.")
            seen.add(plain(name))


def _of(booking: Booking, what: str) -> Happened:
    said = f"{booking.number} {what}"
    return Happened(HappenedKind.BOOKING, booking.number, said, bookings=(booking.number,))


def _check_other(booking: Booking, same: bool, what: str) -> None:
    if same:
        raise BadInput(f"{booking.number} is so already: {what}.", "Ask for something else.")


def _else(value: int | None, usual: int) -> int:
    # midnight is a time too
    return usual if value is None else value
