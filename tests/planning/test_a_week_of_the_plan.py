"""One week of the plan, one day of what is past, and what a bottle's parents say of it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    days,
    found,
    g,
    house,
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

from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Closeness, Facts, Form, Line, Per
from stockroom.planning.plan import plan

# -- only what the week's bookings want -------------------------------------------------


RECHECK = Rule(RuleKind.RECHECK, days(28))


def two_weeks() -> Facts:
    """Two evening classes in two weeks, each with a make, an order, a check, a refusal, a shop."""
    made, lines, bottles, methods, recipes = [], [], [], [], []
    for number, on in (("K1", "02-02"), ("K2", "03-02")):
        salt = solid(f"salt {number}", packs=(pack(g(100), 5),))
        half, exact = solution(0.5, f"half {number}"), solution(0.1, number, rules=(RECHECK,))
        never = solution(3.0, f"never {number}", never_kept="can turn explosive")
        juice = Line(f"juice {number}", "juice", "juice", Form.SUNDRY, Kind.VOLUME)
        lines += [salt, half, exact, never, juice]
        methods.append(made_from(half, salt))
        bottles.append(made_bottle(f"S-{number}", exact, cm3(900), "2026-12-01"))
        asked = [
            wants(half, cm3(100)), wants(exact, cm3(100), closeness=Closeness.EXACT),
            wants(never, cm3(100)), wants(juice, cm3(100)),
        ]  # fmt: skip
        recipes.append(recipe(*asked, code=number))
        made.append(booking(number, on, 1110, recipe=number))
    return house(lines, methods=methods, recipes=recipes, bookings=made, bottles=bottles)


def week(first: str, last: str) -> Plan:
    facts = two_weeks()
    return plan(replace(facts, start=day(first), end=day(last), horizon=facts.end))


@pytest.mark.parametrize(
    ("first", "last", "shown"),
    [
        ("02-02", "02-02", ["K1"]),
        ("02-03", "03-02", ["K2"]),
        ("02-03", "03-01", []),
        ("02-02", "03-02", ["K1", "K2"]),
    ],
)
def test_a_week_shows_only_what_its_own_bookings_want(
    first: str, last: str, shown: list[str]
) -> None:
    part = week(first, last)
    assert sorted({need.booking.number for need in part.needs}) == shown
    assert [make.line for make in part.makes] == [f"half {n} 0.5 mol/dm3" for n in shown]
    assert sorted(order.line for order in part.orders) == [f"salt {n}" for n in shown]
    assert sorted(check.subject for check in part.checks) == [f"S-{n}" for n in shown]
    assert [short.booking for short in part.short] == shown
    assert sorted(note.subject for note in part.notes) == sorted(2 * shown)


def test_a_note_on_no_booking_is_shown_in_every_week() -> None:
    acid = solution(1.0, "acid", storage_group="acid")
    bleach = solution(1.0, "bleach", storage_group="hypochlorite")
    row = [
        replace(made_bottle(f"S{n}", x, cm3(9)), place="P") for n, x in enumerate((acid, bleach))
    ]
    facts = two_weeks()
    facts = replace(
        facts, bottles=(*facts.bottles, *row), start=day("02-03"), end=day("03-01"),
        lines={**facts.lines, acid.key: acid, bleach.key: bleach}, horizon=facts.end,
    )  # fmt: skip
    assert [note.subject for note in plan(facts).notes] == ["S0", "S1"]


# -- what is past on a day ---------------------------------------------------------------


def class_days(*row: str) -> Facts:
    """Classes that would each draw on a bottle past since 15 January, were it not past."""
    line = solution(0.1, rules=(keeps(10),))
    return house(
        [line], recipes=[recipe(wants(line, cm3(10)))],
        bookings=[booking(f"K{n}", on) for n, on in enumerate(row, 1)],
        bottles=[made_bottle("S1", line, cm3(500), "01-04")],
    )  # fmt: skip


@pytest.mark.parametrize(
    ("on", "whom"),
    [("01-15", ("K2", "K3")), ("01-26", ("K2", "K3")), ("01-27", ("K3",)), ("02-03", ())],
)
def test_past_matters_for_the_bookings_from_that_day_on(on: str, whom: tuple[str, ...]) -> None:
    facts = class_days("01-12", "01-26", "02-02")
    (told,) = plan(facts, past_day=day(on)).past
    assert told.matters_for == whom


@pytest.mark.parametrize(
    ("strength", "said"), [(0.1009, False), (0.1011, True), (0.0991, False), (0.0989, True)]
)
def test_a_bottle_to_watch_says_its_strength_when_over_one_per_cent_off(
    strength: float, said: bool
) -> None:
    line = solution(0.1, rules=(RECHECK,))
    bottle = made_bottle(
        "S1", line, cm3(500), "2026-11-01", checks=(found("2026-11-01", strength),)
    )
    (told,) = planned([line], bottles=[bottle]).past
    assert ("expected" in told.decided_by) is said
    assert not said or told.decided_by.endswith("(label 0.1 mol/dm3)")


# -- the doubt a bottle has from what it was made from -------------------------------------


YEARLY = Rule(RuleKind.RECHECK, days(365), Origin.OPENED)
AMMONIA = solution(10.0, "ammonia", rules=(YEARLY,))
WEAK_AMMONIA = solution(2.0, "ammonia")
OVERDUE_BY_SIX = "made from B16 6 d after its recheck fell due: in doubt with it"
SET_ASIDE = "made from B16, since set aside (rust)"


def doubts(made_on: str = "2026-10-12", lineage: tuple[str, ...] = ("B16",), **parent: Any) -> Any:
    """What is guessed of a rough class's bottle, made from one opened 6 October 2025."""
    opened = {"opened": day("2025-10-06"), **parent}
    jar = bought_bottle("B16", AMMONIA, cm3(210), "2025-09-29", **opened)
    child = replace(made_bottle("S20", WEAK_AMMONIA, cm3(420), made_on), lineage=lineage)
    made = planned(
        [AMMONIA, WEAK_AMMONIA],
        recipes=[recipe(wants(WEAK_AMMONIA, cm3(48), closeness=Closeness.ROUGH))],
        bookings=[booking("K16", "02-10")], bottles=[jar, child],
    )  # fmt: skip
    return [guess.text for guess in made.guesses if guess.subject == "S20"]


@pytest.mark.parametrize(
    ("made_on", "said"), [("2026-10-06", []), ("2026-10-12", [OVERDUE_BY_SIX])]
)
def test_only_a_parent_overdue_on_the_day_it_was_made_is_a_doubt(
    made_on: str, said: list[str]
) -> None:
    assert doubts(made_on) == said


def test_a_parent_checked_in_time_is_no_doubt() -> None:
    assert doubts(checks=(found("2026-10-01", 10.0),)) == []


def test_a_parent_set_aside_since_is_a_doubt() -> None:
    assert doubts("2026-10-06", set_aside="rust") == [SET_ASIDE]


def test_a_parent_found_further_back_is_a_doubt_too() -> None:
    assert doubts(lineage=("S99", "B16")) == [OVERDUE_BY_SIX]


def test_what_was_made_from_nothing_known_has_no_doubt() -> None:
    assert doubts(lineage=("S99",)) == []


# -- spare in what is used -------------------------------------------------------------------


def test_the_spare_of_all_bookings_is_told_beside_what_is_used() -> None:
    # 5 groups of 100 cm³ with 10 %, 2 with 5 %: 700 cm³ and 50 + 10 to spare
    half, salt = solution(0.5), solid()
    made = planned(
        [half, salt], methods=[made_from(half, salt)],
        recipes=[recipe(wants(half, cm3(100), per=Per.GROUP))],
        bookings=[
            booking("K1", "01-19", groups=5, spare=100), booking("K2", "01-26", groups=2, spare=50),
        ],
    )  # fmt: skip
    spare = {(use.form, use.line): (use.amount, use.spare) for use in made.usage}
    assert spare[("solution", half.key)] == (cm3(760), cm3(60))
    assert spare[("bought", salt.key)] == (g(38), 0)
