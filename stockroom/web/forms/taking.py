"""Forms for what is taken out of a bottle: drawn, spilled, lent and brought back."""

from __future__ import annotations

from stockroom.service import stock
from stockroom.service.answers import Done
from stockroom.service.typed import drawn_of
from stockroom.web.forms.field import BOTTLE, ON, Field, Form
from stockroom.web.forms.typed import Typed

AMOUNT = Field("amount", "Amount", "amount", needed=True, hint="with its unit, as 2 g")


def _draw(typed: Typed) -> Done:
    bottle = typed.needed("bottle")
    said = drawn_of(bottle, typed.or_none("amount"), typed.or_none("gross"), typed.or_none("tare"))
    return stock.draw(typed.path, bottle, said, booking=typed.or_none("booking"), **typed.when())


def _spill(typed: Typed) -> Done:
    return stock.spill(
        typed.path,
        typed.needed("bottle"),
        typed.amount("amount"),
        note=typed.text("note"),
        **typed.when(),
    )


FORMS = (
    Form(
        "draw",
        "Drawn",
        "Some was taken out: what is left goes down by it.",
        (
            BOTTLE,
            Field(
                "amount", "Amount", "amount", hint="100 cm3, 20 g, or what is left: a third left"
            ),
            Field("booking", "For the booking", "booking", hint="K16, if it is for one"),
            Field("gross", "Or the bottle weighs now", "amount", hint="772 g, with its cap"),
            Field("tare", "Empty it weighs", "amount", hint="172 g; kept for the next time"),
            ON,
        ),
        _draw,
    ),
    Form(
        "spill",
        "Spilled",
        "Some was spilled: taken off what is left, and never counted as used.",
        (BOTTLE, AMOUNT, Field("note", "How it came about", "long"), ON),
        _spill,
    ),
)
"""The forms of this file."""
