"""Forms for what is taken out of a bottle: drawn, spilled, lent and brought back."""

from __future__ import annotations

from stockroom.service import stock
from stockroom.service.answers import Done
from stockroom.service.draw_effects import draw_and_tell
from stockroom.service.typed import drawn_of
from stockroom.web.forms.field import AMOUNT, BOTTLE, ON, Field, Form
from stockroom.web.forms.typed import Typed


def _draw(typed: Typed) -> Done:
    bottle, amount, gross = typed.needed("bottle"), typed.or_none("amount"), typed.or_none("gross")
    with typed.about("gross" if gross and not amount else "amount"):
        said = drawn_of(bottle, amount, gross, typed.or_none("tare"))
    booking = typed.or_none("booking")
    return draw_and_tell(typed.path, bottle, said, booking=booking, **typed.when())


def _spill(typed: Typed) -> Done:
    bottle, amount, note = typed.needed("bottle"), typed.amount("amount"), typed.text("note")
    return stock.spill(typed.path, bottle, amount, note=note, **typed.when())


def _lend(typed: Typed) -> Done:
    bottle, amount, to = typed.needed("bottle"), typed.amount("amount"), typed.needed("to")
    return stock.lend(typed.path, bottle, amount, to=to, **typed.when())


def _lend_back(typed: Typed) -> Done:
    bottle, amount, whom = typed.needed("bottle"), typed.amount("amount"), typed.text("whom")
    return stock.lend_back(typed.path, bottle, amount, whom=whom, **typed.when())


_DRAWN = Field("amount", "Amount", "amount", hint="100 cm3, 20 g, or what is left: a third left")
_GROSS = Field(
    "gross", "The bottle weighs now", "amount", hint="instead of an amount: 772 g, with its cap"
)
_TARE = Field("tare", "Empty it weighs", "amount", hint="172 g; kept with its number")

FORMS = (
    Form(
        "draw",
        "Drawn",
        "Some was taken out: what is left goes down by it.",
        (
            BOTTLE,
            _DRAWN,
            Field("booking", "For the booking", "booking", hint="K16, if it is for one"),
            _GROSS,
            _TARE,
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
    Form(
        "lend",
        "Lent",
        "Some was lent: taken off what is left, and never counted as used.",
        (BOTTLE, AMOUNT, Field("to", "To whom", needed=True, hint="the physics store"), ON),
        _lend,
    ),
    Form(
        "lend-back",
        "Came back",
        "Some of what was lent came back: it is in the bottle again, and no longer lent.",
        (BOTTLE, AMOUNT, Field("whom", "From whom", hint="only where several have some"), ON),
        _lend_back,
    ),
)
"""The forms of this file."""
