"""Forms for what is never kept: ticked as destroyed, or the tick taken back."""

from __future__ import annotations

from stockroom.reports.pages.form_cautions import form_caution
from stockroom.service import destroying
from stockroom.service.answers import Done
from stockroom.web.forms.field import Field, Form
from stockroom.web.forms.typed import Typed

BOOKING = Field("booking", "Booking", "booking", needed=True, hint="the class it was mixed for")


def _destroyed(typed: Typed) -> Done:
    when = typed.when()
    return destroying.destroyed(
        typed.path, typed.needed("booking"), today=when["today"], by=when["by"]
    )


def _not_destroyed(typed: Typed) -> Done:
    when = typed.when()
    return destroying.not_destroyed(
        typed.path,
        typed.needed("booking"),
        why=typed.needed("why"),
        today=when["today"],
        by=when["by"],
    )


FORMS = (
    Form(
        "destroyed",
        "Destroyed",
        "What is never kept was destroyed, every vessel rinsed: ticked with your initials.",
        (BOOKING,),
        _destroyed,
        subject="Bookings",
        caution=form_caution("destroyed"),
    ),
    Form(
        "destroyed-undo",
        "Tick taken back",
        "It was ticked as destroyed and was not: it stands on the sheets again.",
        (BOOKING, Field("why", "Why", "long", needed=True)),
        _not_destroyed,
        subject="Putting right",
    ),
)
"""The forms of this file."""
