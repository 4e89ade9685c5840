"""Every form there is, under its heading, in the order they are listed."""

from __future__ import annotations

from stockroom.web.forms import (
    arriving,
    booking,
    destroying,
    house,
    looking,
    making,
    ordering,
    righting,
    shelf,
    taking,
    titrating,
)
from stockroom.web.forms.field import Form, by_name

FORMS: tuple[Form, ...] = (
    *arriving.FORMS,
    *taking.FORMS,
    *shelf.FORMS,
    *looking.FORMS,
    *titrating.FORMS,
    *making.FORMS,
    *ordering.FORMS,
    *booking.FORMS,
    *destroying.FORMS,
    *righting.FORMS,
    *house.FORMS,
)
"""All of them."""

BY_NAME = by_name(FORMS)
"""Each by the name in its address."""


def subjects() -> dict[str, list[Form]]:
    """The forms under their headings, in the order of the list."""
    found: dict[str, list[Form]] = {}
    for form in FORMS:
        found.setdefault(form.subject, []).append(form)
    return found
