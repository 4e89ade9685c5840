"""The form that puts an entry right: both stay to be seen."""

from __future__ import annotations

from stockroom.service import righting
from stockroom.service.answers import Done
from stockroom.web.forms.field import ON, Field, Form
from stockroom.web.forms.typed import Typed


def _put_right(typed: Typed) -> Done:
    typed.needed("entry")
    number = typed.read("entry", righting.entry_number)
    assert number is not None
    return righting.put_right(typed.path, number, typed.needed("why"), **typed.when())


FORMS = (
    Form(
        "put-right",
        "Put right",
        "An entry was wrong: it is undone. Both stay to be seen, with who and why.",
        (
            Field("entry", "Entry", needed=True, hint="its number; each bottle's page lists them"),
            Field("why", "What was meant", needed=True, hint="meant 50 g"),
            ON,
        ),
        _put_right,
        "Putting right",
    ),
)
"""The form of this file."""
