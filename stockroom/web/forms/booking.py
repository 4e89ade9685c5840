"""Forms for bookings: booked, shifted, cancelled, and the cancelling taken back."""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.service import bookings
from stockroom.service.answers import Done
from stockroom.service.booking_orders import with_orders
from stockroom.service.typed import percent
from stockroom.web.forms.field import WHY, Field, Form
from stockroom.web.forms.typed import AtField, Typed


def _book(typed: Typed) -> Done:
    return with_orders(typed.path, lambda: _booked(typed), today=typed.today)


def _booked(typed: Typed) -> Done:
    return bookings.book(
        typed.path,
        None,
        typed.needed("recipe"),
        typed.day_needed("on"),
        typed.time_needed("time"),
        typed.whole_needed("groups"),
        typed.needed("department"),
        spare=typed.read("spare", lambda text: percent(text, "Spare")),
        firmness=typed.text("firmness") or "firm",
        room=typed.text("room"),
        keep=typed.yes("keep"),
        today=typed.today,
        by=typed.signed(),
    )


def _shift(typed: Typed) -> Done:
    changed = ("on", "time", "groups", "firmness")
    number = typed.needed("booking")
    if not any(typed.text(name) for name in changed):
        told = f"{number}: shifted how?"
        raise AtField("on", BadInput(told, "Fill in the day, the time, the groups or how firm."))
    return with_orders(typed.path, lambda: _shifted(typed, number), today=typed.today)


def _shifted(typed: Typed, number: str) -> Done:
    return bookings.shift(
        typed.path,
        number,
        on=typed.day("on"),
        time=typed.time("time"),
        groups=typed.whole("groups"),
        firmness=typed.or_none("firmness"),
        keep=typed.yes("keep"),
        today=typed.today,
        by=typed.signed(),
    )


def _cancel(typed: Typed) -> Done:
    number, why = typed.needed("booking"), typed.text("why")
    return bookings.cancel(typed.path, number, why=why, today=typed.today, by=typed.signed())


def _take_back(typed: Typed) -> Done:
    number, why = typed.needed("booking"), typed.needed("why")
    return bookings.take_back(typed.path, number, why=why, today=typed.today, by=typed.signed())


_SUBJECT = "Bookings"
_BOOKING = Field("booking", "Booking", "booking", needed=True, hint="its number, as K06")
_KEEP = Field("keep", "Keep it though the house is closed that day", "yes", late=True)
_FIRM = (("pencilled", "pencilled"), ("firm", "firm"), ("done", "done"))

FORMS = (
    Form(
        "book",
        "Booked",
        "A recipe is booked on a day, and the plan counts with it.",
        (
            Field("recipe", "Recipe", "recipe", needed=True, hint="its code, as R04"),
            Field("on", "Day", "date", needed=True, hint="2027-01-21"),
            Field("time", "Starts at", "time", needed=True, hint="09:15"),
            Field("groups", "Groups", "number", needed=True, hint="or performances"),
            Field("department", "Whose money", "department", needed=True, hint="CH"),
            Field("spare", "Spare", usual="10", hint="how much over, in per cent"),
            Field("firmness", "How firm", "choice", choices=_FIRM[:2], usual="firm"),
            Field("room", "Room", hint="LAB1"),
            _KEEP,
        ),
        _book,
        _SUBJECT,
    ),
    Form(
        "shift",
        "Shifted",
        "A booking's day, time, groups or firmness changed; what it was stays on record.",
        (
            _BOOKING,
            Field("on", "Its new day", "date", hint="as before, if left empty"),
            Field("time", "Its new time", "time", hint="as before, if left empty"),
            Field("groups", "Its new groups", "number", hint="as before, if left empty"),
            Field("firmness", "How firm", "choice", choices=(("", "as before"), *_FIRM)),
            _KEEP,
        ),
        _shift,
        _SUBJECT,
    ),
    Form(
        "cancel",
        "Booking cancelled",
        "A booking falls out: makes not done are withdrawn, what was made for it stays as stock.",
        (_BOOKING, Field("why", "Why", hint="class on a trip")),
        _cancel,
        _SUBJECT,
    ),
    Form(
        "cancel-undo",
        "Booked again",
        "The cancelling of a booking is taken back: it is booked as before.",
        (_BOOKING, WHY),
        _take_back,
        _SUBJECT,
    ),
)
"""The forms of this file."""
