"""Forms for orders: placed, placed as the plan has it, put off, cancelled."""

from __future__ import annotations

from stockroom.service import ordering
from stockroom.service.answers import Done
from stockroom.service.order_terms import Asked
from stockroom.service.typed import pence_or_none
from stockroom.web.forms.field import LINE, ON, WHY, Field, Form
from stockroom.web.forms.typed import Typed


def _order(typed: Typed) -> Done:
    price = typed.read("price", lambda text: pence_or_none(text, "Price of one pack"))
    asked = Asked(
        typed.needed("line"),
        typed.whole_needed("packs"),
        typed.amount("size"),
        price,
        typed.day("expected"),
        typed.or_none("supplier"),
        typed.text("department"),
        typed.text("note"),
    )
    return ordering.order(typed.path, asked, **typed.when())


def _order_planned(typed: Typed) -> Done:
    number, expected, note = typed.needed("order"), typed.day("expected"), typed.text("note")
    return ordering.order_planned(
        typed.path,
        number,
        expected=expected,
        note=note,
        meant=typed.text("meant"),
        **typed.when(),
    )


def _put_off(typed: Typed) -> Done:
    number, expected = typed.needed("order"), typed.day_needed("expected")
    why = typed.text("why")
    return ordering.put_off(typed.path, number, expected=expected, why=why, **typed.when())


def _cancel(typed: Typed) -> Done:
    number, why = typed.needed("order"), typed.needed("why")
    return ordering.cancel_order(typed.path, number, why=why, **typed.when())


_SUBJECT = "Orders"
_EXPECTED = Field("expected", "Expected on", "date", hint="by its lead time, if left empty")
_NOTE = Field("note", "Anything to remember of it", "long")
_MEANT = Field(
    "meant",
    "What stood beside the number",
    hint="as ascorbic acid, 1 × 100 g; where it no longer does, nothing is saved",
)
_NUMBER = Field("order", "Order", needed=True, hint="its number, as P01")

FORMS = (
    Form(
        "order",
        "Ordered",
        "Something was ordered: it gets a number, and the plan counts on it from its day.",
        (
            LINE,
            Field("packs", "Packs", "number", needed=True, hint="how many"),
            Field("size", "One pack holds", "amount", needed=True, hint="500 g"),
            Field("price", "Price of one pack", hint="in pounds, 46.00; else as entered for it"),
            Field("supplier", "Supplier", hint="who sells it"),
            _EXPECTED,
            Field("department", "Whose money", "department", hint="only if it is not to be split"),
            _NOTE,
            ON,
        ),
        _order,
        _SUBJECT,
    ),
    Form(
        "order-planned",
        "Ordered as planned",
        "An order of the plan was sent off as it now stands, at the price the plan shows.",
        (
            Field("order", "Order of the plan", needed=True, hint="its number, as O02"),
            _MEANT,
            _EXPECTED,
            _NOTE,
            ON,
        ),
        _order_planned,
        _SUBJECT,
    ),
    Form(
        "order-put-off",
        "Put off",
        "An order comes on another day: the plan counts on it from then.",
        (
            _NUMBER,
            Field("expected", "Expected now on", "date", needed=True),
            Field("why", "Why", hint="what the supplier said"),
            ON,
        ),
        _put_off,
        _SUBJECT,
    ),
    Form(
        "order-cancel",
        "Order cancelled",
        "The rest of an order will not come; what came of it stays.",
        (_NUMBER, WHY, ON),
        _cancel,
        _SUBJECT,
    ),
)
"""The forms of this file."""
