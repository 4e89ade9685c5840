"""A booking tells at once what it wants ordered more, less or sooner."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.errors import BadInput
from stockroom.service.answers import Done
from stockroom.service.booking_orders import orders_told, with_orders

if TYPE_CHECKING:
    from pathlib import Path

    from stockroom.planning.decisions import Plan


def test_more_less_and_sooner_are_told_and_nothing_else(term: Plan) -> None:
    first, *_ = term.orders
    sooner = replace(first, order_by=date(2026, 12, 1))
    more = replace(first, packs=first.packs + 2)
    assert orders_told(term.orders, term.orders) == ()
    assert orders_told((first,), (sooner,)) == (
        f"Order {first.item}, {first.pack}, sooner: by 1 December 2026.",
    )
    (said,) = orders_told((first,), (more,))
    assert said.startswith(f"Order 2 × {first.pack} more of {first.item}, by ")
    (said,) = orders_told((first,), ())
    assert said == f"Order {first.packs} × {first.pack} less of {first.item}."


def test_what_is_refused_stays_refused(own: Path) -> None:
    def refused() -> Done:
        raise BadInput("no")

    with pytest.raises(BadInput, match="no"):
        with_orders(own, refused, today=date(2027, 1, 4))
