"""An order for a drop more says which bottle was too close to call."""

from __future__ import annotations

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    g,
    made_bottle,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.planning.decisions import Order

SALT = solid(packs=(pack(g(500), 9.0),), level=g(10))
TENTH = solution(0.1)


def ordered(amount: float) -> list[Order]:
    """S1 holds 130 cm³; any more of it is made from salt, which then falls below its level."""
    made = planned(
        [SALT, TENTH], methods=[made_from(TENTH, SALT)],
        recipes=[recipe(wants(TENTH, cm3(amount)))], bookings=[booking("K1", "02-12")],
        bottles=[made_bottle("S1", TENTH, cm3(130)), bought_bottle("B1", SALT, g(11))],
    )  # fmt: skip
    return list(made.orders)


def test_what_was_too_close_to_call_is_a_reason_of_the_order() -> None:
    (order,) = ordered(129)
    assert any(each.endswith("in S1: too close to call") for each in order.reasons)


@pytest.mark.parametrize(("amount", "orders"), [(120, 0), (140, 1)])
def test_nothing_else_is_said_to_be(amount: float, orders: int) -> None:
    made = ordered(amount)
    assert len(made) == orders
    assert not [words for order in made for words in order.reasons if "too close" in words]
