"""A plan kept and made again stays as it was; a make moves only when that saves something."""

from __future__ import annotations

import random
from dataclasses import replace
from datetime import date, timedelta

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    g,
    house,
    keeps,
    made_from,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.planning.changing.causes import compared
from stockroom.planning.changing.changes import What
from stockroom.planning.changing.kept import KeptPlan, kept_of, usual_days
from stockroom.planning.changing.kept_form import digest, read, written
from stockroom.planning.changing.what_if import cancelled, with_groups
from stockroom.planning.facts import Facts
from stockroom.planning.plan import plan

SPARE = solid("spare salt")


def small_house(seed: int) -> Facts:
    """A stock and two dilutions of it with lives of days, and classes on a dozen days."""
    draw = random.Random(seed)
    salt = solid()
    stock = solution(1.0, "stock", rules=(keeps(draw.choice((10, 20, 40))),))
    weak = [solution(0.1 * n, "weak", rules=(keeps(draw.randint(1, 9)),)) for n in (1, 2)]
    recipes = [recipe(wants(line, cm3(50), per="group"), code=f"R0{n}")
               for n, line in enumerate(weak, 1)]  # fmt: skip
    first = date(2027, 1, 6)
    days = [first + timedelta(n) for n in range(60) if (first + timedelta(n)).weekday() < 5]
    bookings = [
        booking(f"K{n:02d}", draw.choice(days).isoformat(), recipe=f"R0{draw.randint(1, 2)}",
                groups=draw.randint(1, 12))
        for n in range(1, draw.randint(3, 13))
    ]  # fmt: skip
    methods = [made_from(stock, salt, minutes=20), *(made_from(line, stock) for line in weak)]
    return house([salt, stock, *weak, SPARE], methods=methods, recipes=recipes,
                 bookings=bookings, bottles=[bought_bottle("B01", salt, g(500))])  # fmt: skip


def kept(known: Facts) -> KeptPlan:
    return kept_of(known, plan(known))


def remembered(known: Facts) -> Facts:
    """The same facts in a house that kept its plan."""
    return replace(known, usual=usual_days(kept(known)))


@pytest.mark.parametrize("seed", range(60))
def test_a_plan_made_again_is_the_plan_that_was_kept(seed: int) -> None:
    before = kept(small_house(seed))
    after = kept(remembered(small_house(seed)))
    assert compared(before, after).changes == ()
    assert digest(before) == digest(after)
    assert read(written(before)) == before


@pytest.mark.parametrize("seed", range(60))
def test_an_unrelated_bottle_moves_no_make(seed: int) -> None:
    known = remembered(small_house(seed))
    more = replace(known, bottles=(*known.bottles, bought_bottle("B09", SPARE, g(5))))
    assert compared(kept(known), kept(more)).changes == ()


@pytest.mark.parametrize("seed", range(60))
def test_every_change_of_a_random_house_has_its_cause(seed: int) -> None:
    known = remembered(small_house(seed))
    first, last = known.bookings[0].number, known.bookings[-1].number
    asked = cancelled(with_groups(known, first, 20), last)
    told = compared(kept(known), kept(asked), supposed=True)
    assert told.changes
    assert all(change.text and change.cause for change in told.changes)
    assert all(f" {n}" not in change.cause for change in told.changes for n in ("None", "0001"))


@pytest.mark.parametrize("seed", range(30))
def test_a_make_of_the_same_bookings_moves_only_to_save_something(seed: int) -> None:
    """A class is dropped: what is made for others, and for the same others, stays on its day."""
    known = remembered(small_house(seed))
    dropped = known.bookings[-1].number
    before, after = kept(known), kept(cancelled(known, dropped))
    for change in compared(before, after).changes:
        if change.what == (What.DAY,) and dropped not in change.touched.bookings:
            assert "saves" in change.text or after.minutes < before.minutes
