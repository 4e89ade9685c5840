"""The day a stock falls below its level, and the day it runs out: usable stock only."""

from __future__ import annotations

from typing import Any

from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    keeps,
    made_bottle,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Origin
from stockroom.planning.buying.money import budgets, spent_on
from stockroom.planning.decisions import Order, Plan
from stockroom.planning.facts import Department, Line, Placed

HALF = solution(0.5, rules=(keeps(2),))


def salt(level: float = 100, life: int | None = None) -> Line:
    rules = (keeps(life, Origin.RECEIVED),) if life else ()
    return solid(level=g(level), packs=(pack(g(500), 10),), rules=rules)


def term(line: Line, *days: str, held: float = 130, received: str = "01-04") -> Plan:
    """50 g for each class."""
    return planned(
        [line, HALF], methods=[made_from(HALF, line)], recipes=[recipe(wants(HALF, cm3(1000)))],
        bookings=[booking(f"K{n}", on) for n, on in enumerate(days, 1)],
        bottles=[bought_bottle("B1", line, g(held), received)],
    )  # fmt: skip


def order(made: Plan) -> Order:
    (one,) = made.orders
    return one


def test_both_days_stand_in_the_order() -> None:
    # 130 g is 80 after the first class and 30 after the second; the third wants 50
    one = order(term(salt(), "01-20", "02-03", "02-17"))
    assert (one.falls_below, one.runs_out) == (day("01-20"), day("02-17"))
    assert one.need_by == day("01-20")


def test_enough_for_all_never_runs_out() -> None:
    one = order(term(salt(), "01-20"))
    assert (one.falls_below, one.runs_out) == (day("01-20"), None)


def test_a_bottle_going_past_counts_out_the_day_after() -> None:
    # received 4 January, 30 days: good through 3 February, a class on the 10th
    one = order(term(salt(life=30), "01-12", "02-10", held=400))
    assert (one.falls_below, one.runs_out) == (day("02-04"), day("02-04"))
    # the order is still dated from the class that wants it
    assert one.need_by == day("02-10")


def test_below_from_the_first_day_is_said_of_that_day() -> None:
    one = order(term(salt(level=200), "02-10"))
    assert (one.falls_below, one.need_by) == (day("01-04"), day("02-10"))


def test_a_bottle_that_goes_past_after_the_last_class_is_told_as_a_level() -> None:
    made = term(salt(life=60), "01-12", held=400)
    assert made.orders == ()
    (level,) = made.levels
    assert (level.on, level.left, level.runs_out) == (day("03-06"), 0, day("03-06"))


def test_a_line_nobody_draws_on_falls_when_its_bottle_goes_past() -> None:
    line = salt(life=30)
    made = planned([line], bottles=[bought_bottle("B1", line, g(130))])
    (level,) = made.levels
    assert (level.on, level.runs_out) == (day("02-04"), day("02-04"))
    assert any("none from 2027-02-04" in note.text for note in made.notes)


def test_a_made_line_falls_when_its_bottle_goes_past() -> None:
    acid = solution(2.0, "acid", level=cm3(1000), rules=(keeps(30),))
    made = planned(
        [acid, solid("neat")], methods=[made_from(acid, solid("neat"))],
        bottles=[made_bottle("S1", acid, cm3(1900))],
    )  # fmt: skip
    (level,) = made.levels
    assert (level.on, level.left) == (day("02-04"), 0)


# -- whose money ----------------------------------------------------------------------


def placed(pence: int = 1001, **more: Any) -> Placed:
    usual: dict[str, Any] = {"shares": (("BI", 250), ("CH", 751))}
    return Placed(
        "P01", "salt", g(100), "100 g", 2, pence, day("01-04"), day("01-18"), **{**usual, **more}
    )


def test_spent_promised_and_left_for_each_department() -> None:
    line, half = solid(packs=(pack(g(500), 10.00),)), solution(0.5)
    made = planned(
        [line, half], methods=[made_from(half, line)], recipes=[recipe(wants(half, cm3(6000)))],
        bookings=[booking("K1", "02-09")], placed=(placed(),),
        departments=(Department("CH", "chemistry", 2000), Department("OU", "outreach", 500)),
    )  # fmt: skip
    row = {one.department: (one.spent, one.promised, one.left) for one in made.budgets}
    # 300 g, 200 of them on their way
    assert row == {"BI": (250, 0, None), "CH": (751, 1000, 249), "OU": (0, 0, 500)}


def test_going_over_with_what_was_ordered_already_warns_and_blocks_nothing() -> None:
    made = planned([solid()], placed=(placed(),), departments=(Department("CH", "chemistry", 700),))
    (note,) = [note.text for note in made.notes if note.subject == "CH"]
    assert note == ("orders come to £7.51 of £7.00 left: £0.51 over, £7.51 of it ordered already")


def test_of_a_cancelled_order_only_what_came_is_spent_to_the_penny() -> None:
    assert spent_on(placed(cancelled=day("01-11"))) == (("BI", 0), ("CH", 0))
    half = spent_on(placed(cancelled=day("01-11"), came=g(100)))
    assert half == (("BI", 125), ("CH", 375))
    assert sum(pence for _, pence in spent_on(placed())) == 1001


def test_a_department_without_a_limit_that_spends_nothing_is_left_out() -> None:
    from houses import house

    assert budgets(house([solid()], departments=(Department("PH", "physics"),)), ()) == []
