"""One batch for several classes where life, source and vessel allow it, and only there."""

from __future__ import annotations

from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    found,
    g,
    keeps,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Closeness, House, Line

SALT = solid()
JAR = bought_bottle("B1", SALT, g(5000), opened=day("01-04"))


def two_classes(
    line: Line, days: tuple[str, str], volumes: tuple[float, float] = (500, 500), **more: Any
) -> Plan:
    """Two bookings of one line on two days; `asked` and `method` go to needs and method."""
    asked, method = more.pop("asked", {}), more.pop("method", {})
    recipes = [
        recipe(wants(line, cm3(volume), **asked), code=f"R{n}") for n, volume in enumerate(volumes)
    ]
    bookings = [booking(f"K{n}", on, recipe=f"R{n}") for n, on in enumerate(days)]
    return planned(
        [SALT, line], methods=[made_from(line, SALT, **method)], recipes=recipes,
        bookings=bookings, bottles=[JAR], **more,
    )  # fmt: skip


def shares(made: Plan) -> list[tuple[str, ...]]:
    return [make.bookings for make in made.makes]


FIFTH = solution(0.2, rules=(keeps(28),))


def test_two_days_running_share_one_batch() -> None:
    # the worked case: 2 112 + 1 936 cm³ on Tuesday and Wednesday
    make = make_of(two_classes(FIFTH, ("01-19", "01-20"), (2112, 1936)), FIFTH)
    assert (make.bookings, make.on) == (("K0", "K1"), day("01-18"))
    assert (make.volume, make.needed) == (cm3(4048), cm3(4048))
    assert [number in make.reasons[0] for number in ("K0.1", "K1.1")] == [True, True]


def test_fresh_on_two_days_is_made_twice() -> None:
    made = two_classes(FIFTH, ("01-26", "01-28"), asked={"fresh": True})
    assert [(make.on, make.bookings) for make in made.makes] == [
        (day("01-26"), ("K0",)),
        (day("01-28"), ("K1",)),
    ]


def test_fresh_for_two_classes_of_one_day_is_made_once() -> None:
    made = two_classes(FIFTH, ("01-26", "01-26"), asked={"fresh": True})
    assert shares(made) == [("K0", "K1")]


@pytest.mark.parametrize(
    ("life", "batches"), [(2, [("K0",), ("K1",)]), (3, [("K0", "K1")]), (28, [("K0", "K1")])]
)
def test_a_short_life_parts_them(life: int, batches: list[tuple[str, ...]]) -> None:
    # made Monday 1 February for Tuesday; with two days it is past on Thursday
    line = solution(0.1, rules=(keeps(life),))
    assert shares(two_classes(line, ("02-02", "02-04"))) == batches


def test_the_two_day_solution_is_made_the_day_before_each() -> None:
    # iron(II) for Tuesday and Thursday: Monday 1 and Wednesday 3 February
    line = solution(0.1, rules=(keeps(2),))
    made = two_classes(line, ("02-02", "02-04"))
    assert [make.on for make in made.makes] == [day("02-01"), day("02-03")]


def test_the_recipes_freshest_age_parts_them_too() -> None:
    made = two_classes(FIFTH, ("02-02", "02-04"), asked={"freshest_days": 2})
    assert len(made.makes) == 2


def test_fading_out_of_closeness_parts_them() -> None:
    fades = solution(0.1, rules=(Rule(RuleKind.FADES, law=Law(1, 0.03)),))
    assert len(two_classes(fades, ("02-02", "02-03")).makes) == 2
    assert (
        len(two_classes(fades, ("02-02", "02-03"), asked={"closeness": Closeness.ROUGH}).makes) == 1
    )


def test_together_they_may_not_overfill_the_largest_vessel() -> None:
    five_litres = House(batch_step=cm3(1), largest_vessel=cm3(5000))
    together = two_classes(FIFTH, ("01-19", "01-20"), (2500, 2500), house=five_litres)
    apart = two_classes(FIFTH, ("01-19", "01-20"), (2500, 2501), house=five_litres)
    assert (len(together.makes), len(apart.makes)) == (1, 2)


def test_the_lines_own_largest_batch_counts_as_well() -> None:
    line = solution(0.2, rules=(keeps(28),), largest_batch=cm3(900))
    assert len(two_classes(line, ("01-19", "01-20")).makes) == 2


def test_one_need_over_the_largest_vessel_is_still_made() -> None:
    one_litre = House(batch_step=cm3(1), largest_vessel=cm3(1000))
    made = two_classes(FIFTH, ("01-19", "03-20"), (1500, 10), house=one_litre)
    assert sum(make.volume for make in made.makes) == cm3(1510)


def test_three_may_be_cut_where_it_costs_least() -> None:
    # ten days' keeping: K0 with K1, then K2 alone, and never three makes
    line = solution(0.1, rules=(keeps(10),))
    recipes = [recipe(wants(line, cm3(100)))]
    bookings = [booking(f"K{n}", on) for n, on in enumerate(("01-12", "01-19", "01-26"))]
    made = planned(
        [SALT, line], methods=[made_from(line, SALT)], recipes=recipes, bookings=bookings,
        bottles=[JAR],
    )  # fmt: skip
    assert len(made.makes) == 2


def test_what_is_made_from_bottles_of_two_strengths_is_not_one_batch() -> None:
    strong, weak = solution(1.0, "stock"), solution(0.5, "dilution")
    bottles = [
        made_bottle("S1", strong, cm3(300), checks=(found("01-04", 1.00),)),
        made_bottle("S2", strong, cm3(300), checks=(found("01-04", 1.06),)),
    ]
    made = planned(
        [strong, weak], methods=[made_from(weak, strong)], recipes=[recipe(wants(weak, cm3(500)))],
        bookings=[booking("K1", "01-19"), booking("K2", "01-20")], bottles=bottles,
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.MAKE, "K2.1": Outcome.MAKE}
    assert [[source.bottle for source in make.sources] for make in made.makes] == [["S1"], ["S2"]]


def test_the_stock_for_a_shared_batch_is_made_once() -> None:
    liquid, stock, weak = (
        solution(s, n) for s, n in ((10.0, "acid"), (1.0, "stock"), (0.1, "weak"))
    )
    # either bottle holds enough for one class and not for two; their strengths differ
    bottles = [
        made_bottle("S1", liquid, cm3(20), checks=(found("01-04", 10.0),)),
        made_bottle("S2", liquid, cm3(20), checks=(found("01-04", 10.5),)),
    ]
    made = planned(
        [liquid, stock, weak], methods=[made_from(stock, liquid), made_from(weak, stock)],
        recipes=[recipe(wants(weak, cm3(1000)))],
        bookings=[booking("K1", "01-19"), booking("K2", "01-20")], bottles=bottles,
    )  # fmt: skip
    asked = sum(s.amount for make in made.makes for s in make.sources if s.line == stock.key)
    given = sum(make.needed for make in made.makes if make.line == stock.key)
    assert given == asked


def test_minutes_come_before_waste() -> None:
    # shared, 20 cm³ of a line that does not keep is poured away; apart, the work is done twice
    rough_steps = House(batch_step=cm3(30))
    line = solution(0.2, rules=(keeps(2),))
    made = two_classes(line, ("01-20", "01-20"), (35, 35), house=rough_steps)
    assert shares(made) == [("K0", "K1")]
    assert make_of(made, line).heel == cm3(20)


def three_weeks(*volumes: float) -> list[tuple[str, ...]]:
    """How three weekly classes of a line that keeps ten days share batches of whole 100 cm³."""
    line = solution(0.1, rules=(keeps(10),))
    row = [(f"K{n}", on) for n, on in enumerate(("01-12", "01-19", "01-26"))]
    made = planned(
        [SALT, line], methods=[made_from(line, SALT)],
        recipes=[recipe(wants(line, cm3(v)), code=f"K{n}") for n, v in enumerate(volumes)],
        bookings=[booking(number, on, recipe=number) for number, on in row], bottles=[JAR],
        house=House(batch_step=cm3(100), heel_floor=cm3(100)),
    )  # fmt: skip
    return shares(made)


def test_of_as_many_makes_those_are_chosen_that_throw_least_away() -> None:
    # K1 with K2 throws away 30 + 0 cm³; with K0 it would be 90 + 40
    assert three_weeks(70, 40, 60) == [("K0",), ("K1", "K2")]


def test_of_as_many_makes_and_as_much_waste_the_later_are_chosen() -> None:
    # K2 made a week later keeps longer: K1 goes with K0
    assert three_weeks(100, 100, 100) == [("K0", "K1"), ("K2",)]
