"""A plan kept and made again stays as it was; a make moves only when that saves something."""

from __future__ import annotations

import random
from dataclasses import dataclass, replace
from datetime import date, timedelta
from functools import lru_cache

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
from stockroom.planning.changing.changes import About, What
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


def test_a_make_whose_latest_need_is_dropped_stays_on_its_usual_day() -> None:
    """K12 is on the day after: without it the make for K07 could wait, and does not."""
    known = remembered(small_house(5))
    before, after = usual_days(kept(known)), usual_days(kept(cancelled(known, "K12")))
    assert date(2027, 1, 19) in before["weak 0.2 mol/dm3"]
    assert after == before


def placed(plan_kept: KeptPlan) -> set[tuple[str, date]]:
    return {(make.line, make.on) for make in plan_kept.makes}


@dataclass(frozen=True)
class Dropped:
    """A house with one class dropped: as it was kept, as it is then, and with nothing kept.

    `staying` is the minutes of the kept makes that still serve a class, each on its day.
    """

    before: KeptPlan
    after: KeptPlan
    forgetful: KeptPlan
    staying: int

    @property
    def moved(self) -> set[tuple[str, date]]:
        return placed(self.after) - placed(self.before)

    @property
    def would_move(self) -> set[tuple[str, date]]:
        return placed(self.forgetful) - placed(self.before)


@lru_cache
def dropped(seed: int, place: int) -> Dropped:
    known = small_house(seed)
    number = known.bookings[place].number
    before = kept(known)
    return Dropped(
        before,
        kept(cancelled(replace(known, usual=usual_days(before)), number)),
        kept(cancelled(known, number)),
        sum(make.minutes for make in before.makes if set(make.bookings) - {number}),
    )


CASES = [(seed, place) for seed in range(30) for place in (0, -1)]


@pytest.mark.parametrize(("seed", "place"), CASES)
def test_a_make_moves_only_where_that_saves_minutes(seed: int, place: int) -> None:
    """The kept makes that still serve a class would do, so a new day has to cost less than they."""
    case = dropped(seed, place)
    assert not case.moved or case.after.minutes < case.staying


def test_the_days_kept_are_what_holds_them_there() -> None:
    """Without them many of these houses put a make on another day: so something was compared."""
    cases = [dropped(*case) for case in CASES]
    held = [case for case in cases if case.would_move and not case.moved]
    assert len(held) >= len(cases) // 6
    assert any(case.moved for case in cases)


# -- one house, by hand -------------------------------------------------------------------

WEAK = solution(0.1, "weak", rules=(keeps(3),))
SALT = solid()
BOTTLE = bought_bottle("B01", SALT, g(500))


def by_hand(*classes: tuple[str, str]) -> Facts:
    """What is made here keeps three days, and may be made on the open day before at the latest."""
    return house([SALT, WEAK], methods=[made_from(WEAK, SALT)],
                 recipes=[recipe(wants(WEAK, cm3(50)))], bottles=[BOTTLE],
                 bookings=[booking(number, on) for number, on in classes])  # fmt: skip


def made_on(known: Facts) -> list[tuple[str, tuple[str, ...]]]:
    return [(f"{make.on:%m-%d}", make.bookings) for make in kept(known).makes]


FIRST, SECOND, THIRD = ("K01", "01-12"), ("K02", "01-14"), ("K03", "01-15")
TWO = by_hand(FIRST, SECOND)


def test_a_class_dropped_leaves_the_make_of_the_other_on_its_kept_day() -> None:
    assert made_on(TWO) == [("01-11", ("K01", "K02"))]
    assert made_on(cancelled(TWO, "K01")) == [("01-13", ("K02",))]
    assert made_on(cancelled(remembered(TWO), "K01")) == [("01-11", ("K02",))]


def test_a_day_that_would_cost_a_second_batch_is_not_kept_to() -> None:
    """Made on the 11th it is past by the 15th; one batch on the 13th serves both."""
    more = replace(by_hand(FIRST, SECOND, THIRD), usual=usual_days(kept(TWO)))
    told = compared(kept(TWO), kept(cancelled(more, "K01")))
    assert made_on(cancelled(more, "K01")) == [("01-13", ("K02", "K03"))]
    (make,) = (change for change in told.changes if change.about is About.MAKE)
    assert What.DAY in make.what
    assert "moved from 2027-01-11 to 2027-01-13" in make.text


def test_a_kept_day_that_no_longer_does_is_not_kept_to() -> None:
    """Past its life by the class, or on a day gone by."""
    for day in (date(2027, 1, 8), date(2027, 1, 14)):
        known = replace(by_hand(SECOND), usual={WEAK.key: (day,)})
        assert made_on(known) == [("01-13", ("K02",))]
    late = replace(cancelled(remembered(TWO), "K01"), as_at=date(2027, 1, 12))
    assert made_on(late) == [("01-13", ("K02",))]
