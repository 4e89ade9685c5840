"""What the classes of a day ask for on the week sheet: set out, fetch, destroy, clear away."""

from __future__ import annotations

import re
from collections.abc import Iterator
from datetime import date

from stockroom.keeping.strength import strengths_on
from stockroom.measure.days import format_time
from stockroom.planning.amounts import say_strength
from stockroom.planning.decisions import Answer, Draw, Outcome, Plan, Watch
from stockroom.planning.facts import EXACT, Booking, Facts, Firmness, Form, Recipe
from stockroom.planning.known import how_known
from stockroom.planning.never_kept import standing_of
from stockroom.planning.people import clock, longest_stay, unstaffed
from stockroom.reports.paper.day_times import TO_SET_OUT, times_of
from stockroom.reports.paper.week_parts import Class, Item, Job, made_when, tied
from stockroom.reports.words import amount, by_bottle, counted, named, raised, weekday_and_day

_PASSED_OVER = " not used: "
_SENTENCE = re.compile(r"(?<=[.!])\s+(?=[A-Z])")
_MINUTES_BEFORE = re.compile(r"(\d+) ?min\b[^.;]*\bbefore\b")
_DAY_BEFORE = re.compile(r"overnight|(?:day|evening) before", re.IGNORECASE)


class Classes:
    """The jobs that bookings give, by day; dropped ones give none."""

    def __init__(self, known: Facts, plan: Plan) -> None:
        self.known, self.plan = known, plan
        self.bottles = {bottle.number: bottle for bottle in known.bottles}
        self.makes = {make.id: make for make in plan.makes}
        self.short = {each.ref: each.reason for each in plan.short}
        meant = [b for b in known.bookings if b.firmness is not Firmness.DROPPED]
        self.meant = sorted(meant, key=lambda b: (b.on, b.minute, b.number))

    def on(self, day: date) -> list[Booking]:
        """The bookings of a day by the clock."""
        return [booking for booking in self.meant if booking.on == day]

    def heading(self, booking: Booking) -> Class:
        """The booking at the top of its day."""
        title = raised(self._recipe(booking).title)
        firm = "" if booking.firmness is Firmness.FIRM else str(booking.firmness)
        about = (
            counted(booking.groups, "group"),
            booking.room,
            booking.department,
            booking.number,
            firm,
            self._staffed(booking),
        )
        told = ", ".join(each for each in about if each)
        key = f"{booking.on} booking {booking.number}"
        return Class(key, format_time(booking.minute), title, told)

    def _recipe(self, booking: Booking) -> Recipe:
        return self.known.recipes[booking.recipe, booking.version]

    def _staffed(self, booking: Booking) -> str:
        gaps = {each.number: self._unstaffed(each) for each in self.on(booking.on)}
        mine = gaps[booking.number]
        spans = " and ".join(f"{clock(first)} to {clock(last)}" for first, last in mine)
        longest = longest_stay(gaps, booking.number)
        return f"someone must be here {spans}{f', {longest}' if longest else ''}" if spans else ""

    def _unstaffed(self, booking: Booking) -> list[tuple[int, int]]:
        kept = bool(self._recipe(booking).never_kept)
        return unstaffed(self.known, booking, never_kept=kept)

    # -- the day before --------------------------------------------------------------------

    def for_tomorrow(self, day: date) -> Iterator[Job]:
        """What is soaked or fetched on this day for a class of a later one."""
        for booking in self.meant:
            if booking.on > day and self.known.calendar.before(booking.on, 1) == day:
                yield from self._fetched(booking, day)
                for number, words in enumerate(self._handling(booking)):
                    # what comes from a shop has its own line, with its amounts
                    bought = "bought" in words and self._from_shop(booking)
                    if _DAY_BEFORE.search(words) and not bought:
                        whom = f"for {booking.number}, {weekday_and_day(booking.on)}"
                        key = f"{day} handling {booking.number} {number}"
                        yield Job(key, "", words, (whom,))

    def _fetched(self, booking: Booking, day: date) -> Iterator[Job]:
        row = self._from_shop(booking)
        if row:
            things = ", ".join(f"{amount(n.amount, n.kind)} of {named(n.item, '')}" for n in row)
            whom = f"for {booking.number}, {weekday_and_day(booking.on)}"
            yield Job(f"{day} shop {booking.number}", "", f"from a shop: {things}", (whom,))

    def _from_shop(self, booking: Booking) -> list[Answer]:
        needs = [n for n in self.plan.needs if n.booking.number == booking.number]
        shop = [n for n in needs if self.known.lines[n.line].form is Form.SUNDRY]
        return [need for need in shop if need.outcome is Outcome.BUY]

    # -- the day itself --------------------------------------------------------------------

    def set_out(self, booking: Booking) -> Iterator[Job]:
        """What stands before the class, and what its recipe says of handling, by the clock."""
        needs = [n for n in self.plan.needs if n.booking.number == booking.number]
        items = tuple(self._item(need) for need in needs)
        whom = f"{booking.number} {raised(self._recipe(booking).title)}"
        place = f"{format_time(booking.minute)} {booking.room}".strip()
        key = f"{booking.on} set out {booking.number}"
        yield Job(key, "", f"{whom}, {place}", items=items)
        for number, words in enumerate(self._handling(booking)):
            if not _DAY_BEFORE.search(words):
                key = f"{booking.on} handling {booking.number} {number}"
                yield Job(key, self._before(booking, words), words)

    def _handling(self, booking: Booking) -> list[str]:
        handling = raised(self._recipe(booking).handling).strip()
        return [words for words in _SENTENCE.split(handling) if words]

    def _before(self, booking: Booking, words: str) -> str:
        if TO_SET_OUT.search(words):
            begins = times_of(self.known, self.plan, booking.on).set_out
            return format_time(begins[booking.number]) if booking.number in begins else ""
        found = _MINUTES_BEFORE.search(words)
        minute = booking.minute - int(found[1]) if found else -1
        return format_time(minute) if minute >= 0 else ""

    def _item(self, need: Answer) -> Item:
        what = f"{amount(need.amount, need.kind)} {named(need.item, need.strength)}"
        key = f"{need.booking.on} set out {need.booking.number} {raised(need.line)}"
        if need.outcome in (Outcome.SHORT, Outcome.REFUSED):
            reason = self.short.get(need.ref) or (need.reasons[-1] if need.reasons else "")
            return Item(key, what, raised(f"{need.outcome.value.upper()}: {reason}"), tick=False)
        row = [self._drawn(need, draw) for draw in by_bottle(need.draws) if draw.bottle]
        row += [self._made(need)] if need.make in self.makes else []
        if not row:
            shop = self.known.lines[need.line].form is Form.SUNDRY
            row = ["from a shop" if shop else "still to come: see the orders"]
        passed = (each.split(_PASSED_OVER, 1) for each in need.reasons if _PASSED_OVER in each)
        why = tuple(raised(f"{bottle}: {reason}") for bottle, reason in passed)
        return Item(key, what, " + ".join(row), passed=why)

    def _made(self, need: Answer) -> str:
        make = self.makes[need.make]
        if make.ready == need.booking.on == make.on:
            return "to be made that day"
        when = made_when(make, self.plan.as_at)
        return f"{when}, once its order has come" if need.order else when

    def _drawn(self, need: Answer, draw: Draw) -> str:
        bottle, line = self.bottles[draw.bottle], self.known.lines[need.line]
        share = f"{amount(draw.amount, draw.kind)} " if draw.amount != need.amount else ""
        place = f" in {bottle.place}" if bottle.place else ""
        origin = tied(f"{share}from {bottle.number}{place}")
        if not (draw.strength and line.strength):
            return origin
        known = how_known(bottle, strengths_on(bottle.record, line.rules, need.booking.on))
        near = abs(draw.strength / line.strength - 1) <= EXACT
        asked = raised(need.strength) == raised(line.strength_text)
        if near and asked and not known.startswith("found"):
            return origin
        return f"{origin}, expected {say_strength(line, draw.strength)} ({known})"

    # -- after it ----------------------------------------------------------------------------

    def never_kept(self, day: date) -> tuple[list[Job], list[Job]]:
        """What may not be mixed too soon, and what must be destroyed and signed for."""
        watch = [each for each in self.plan.watch if each.on == day]
        return [_mix(each) for each in watch], [_destroy(each) for each in watch]

    def cleared(self, booking: Booking) -> Iterator[Job]:
        """The waste of a class, as its recipe says."""
        waste = raised(self._recipe(booking).waste)
        if waste:
            ends = booking.minute + booking.lasts_minutes
            time = format_time(ends) if ends < 1440 else clock(ends)
            yield Job(f"{booking.on} waste {booking.number}", time, f"{booking.number} {waste}")


def _mix(watch: Watch) -> Job:
    key, title = f"{watch.on} mix {watch.booking}", f"{watch.booking} {raised(watch.title)}"
    what = f"mix for {title}, not sooner: never kept"
    return Job(key, f"from {clock(watch.not_before)}", what, _dangers(watch))


def _dangers(watch: Watch) -> tuple[str, ...]:
    return tuple(raised(each).rstrip(".") for each in watch.dangers)


def _destroy(watch: Watch) -> Job:
    title = f"{watch.booking} {raised(watch.title)}"
    by = clock(watch.destroy_by)
    if watch.ticked_by:
        what = f"{title}: destroyed, ticked by {watch.ticked_by}"
        return Job(f"{watch.on} destroy {watch.booking}", "", what)
    how = raised(watch.how).rstrip(".")
    key, what = f"{watch.on} destroy {watch.booking}", f"destroy what is left of {title}"
    # in sentences of their own: what is joined by semicolons would run together
    told = ". ".join((*_dangers(watch), how, standing_of(watch).rstrip(".")))
    return Job(key, f"by {by}", what, (told,), sign=True)
