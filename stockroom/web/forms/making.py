"""Forms for what is made up, poured from one bottle into another, or poured together."""

from __future__ import annotations

from stockroom.service import making, pouring
from stockroom.service.answers import Done
from stockroom.web.forms.field import AMOUNT, BOTTLE, ON, Field, Form, sure
from stockroom.web.forms.typed import Typed


def _make(typed: Typed) -> Done:
    return making.make_up(
        typed.path,
        typed.needed("line"),
        typed.amount("volume"),
        sources=[one.strip() for one in typed.text("sources").split(",") if one.strip()],
        place=typed.or_none("place"),
        sure=typed.yes("sure"),
        **typed.when(),
    )


def _decant(typed: Typed) -> Done:
    return pouring.decant(
        typed.path,
        typed.needed("bottle"),
        typed.amount("amount"),
        place=typed.or_none("place"),
        size=typed.amount_or_none("size"),
        good_until=typed.day("good_until"),
        **typed.when(),
    )


def _mix(typed: Typed) -> Done:
    return pouring.mix(
        typed.path,
        typed.needed("first"),
        typed.needed("second"),
        typed.amount_or_none("amount"),
        place=typed.or_none("place"),
        size=typed.amount_or_none("size"),
        **typed.when(),
    )


_SUBJECT = "Making"
_WHERE = Field("place", "Where it is put", "place", hint="where the first stands, if left empty")
_HOLDS = Field("size", "The bottle poured into holds", "amount", hint="when full, as 1 dm3")

FORMS = (
    Form(
        "make",
        "Made up",
        "A solution was made up: its sources are drawn and it gets a number.",
        (
            Field(
                "line",
                "Solution",
                "line",
                needed=True,
                hint="with its strength",
            ),
            Field("volume", "How much", "amount", needed=True, hint="4620 cm3"),
            Field(
                "sources",
                "Made from the bottles",
                hint="S01, B08; left empty, the good ones going past soonest",
            ),
            Field("place", "Where it is put", "place", hint="F1"),
            sure("It was made so, and not entered yet"),
            ON,
        ),
        _make,
        _SUBJECT,
    ),
    Form(
        "decant",
        "Poured over",
        "Some was poured into another bottle: it gets a number, and keeps lot, strength and dates.",
        (
            BOTTLE,
            AMOUNT,
            _WHERE,
            _HOLDS,
            Field("good_until", "Its own label's date", "date", hint="no later than the source's"),
            ON,
        ),
        _decant,
        _SUBJECT,
    ),
    Form(
        "mix",
        "Poured together",
        "Two bottles of one thing were poured together, or one topped up: a new number for it.",
        (
            Field("first", "Poured out whole", "bottle", needed=True, hint="its number, as S02"),
            Field("second", "Added to it", "bottle", needed=True, hint="its number, as S31"),
            Field("amount", "How much of the second", "amount", hint="all of it, if left empty"),
            _WHERE,
            _HOLDS,
            ON,
        ),
        _mix,
        _SUBJECT,
    ),
)
"""The forms of this file."""
