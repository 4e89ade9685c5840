"""A draw says at once which bookings are short by it."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

from stockroom.measure.amounts import Amount
from stockroom.service.draw_effects import draw_and_tell
from stockroom.service.plan import term_plan

TODAY = date(2027, 1, 25)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def test_a_draw_says_who_is_short_by_it(own: Path) -> None:
    before = {each.ref for each in term_plan(own, as_at=TODAY).short}
    done = draw_and_tell(own, "S11", Amount.cm3(500), **WHO)
    new = [each for each in term_plan(own, as_at=TODAY).short if each.ref not in before]
    assert new
    for each in new:
        assert any(x.startswith(f"{each.booking} is now short of ") for x in done.details)


def test_a_draw_nobody_misses_says_nothing_of_it(own: Path) -> None:
    done = draw_and_tell(own, "B06", Amount.grams(1), **WHO)
    assert not any("is now short" in each for each in done.details)
