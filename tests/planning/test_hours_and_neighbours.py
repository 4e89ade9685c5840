"""Notes on hours, mornings and places: told just past the edge, and not on it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    made_bottle,
    made_from,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.record import Stay
from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Booking, Bottle, Place
from stockroom.planning.plan import plan

TENTH = solution(0.1)
SALT = solid()


def notes(made: Plan) -> list[tuple[str, str]]:
    return [(note.subject, note.text) for note in made.notes]


# -- staffed hours ------------------------------------------------------------------


def session(minute: int, lasts: int = 100, **asked: Any) -> Plan:
    """The plan of one session served from the shelf."""
    return planned(
        [TENTH], recipes=[recipe(wants(TENTH, cm3(10)), **asked)],
        bookings=[booking("K1", "01-12", minute, lasts_minutes=lasts)],
        bottles=[made_bottle("S1", TENTH, cm3(500))],
    )  # fmt: skip


@pytest.mark.parametrize(("minute", "lasts"), [(480, 100), (890, 100), (480, 510)])
def test_a_session_that_fills_the_staffed_hours_is_not_told(minute: int, lasts: int) -> None:
    assert notes(session(minute, lasts)) == []


@pytest.mark.parametrize(
    ("minute", "lasts", "said"),
    [
        (479, 100, "07:59 to 09:39 is outside staffed hours (08:00 to 16:30): "
                   "someone must be here from 07:29 (07:29 to 08:00 is not staffed)"),
        (890, 101, "14:50 to 16:31 is outside staffed hours (08:00 to 16:30): "
                   "someone must be here from 14:20 (16:30 to 16:31 is not staffed)"),
    ],
)  # fmt: skip
def test_a_minute_outside_the_staffed_hours_is_told(minute: int, lasts: int, said: str) -> None:
    assert notes(session(minute, lasts)) == [("K1", said)]


def test_what_is_never_kept_is_mixed_half_an_hour_before_and_destroyed_half_an_hour_after() -> None:
    ((subject, text),) = notes(session(555, never_kept="Can turn explosive."))
    assert (subject, text) == (
        "K1",
        "2027-01-12: mix not before 08:45, destroy by 11:25 and tick it with initials. "
        "Can turn explosive.",
    )


# -- full mornings ------------------------------------------------------------------


def mornings(*classes: tuple[Booking, int]) -> list[tuple[str, str]]:
    """The notes for classes that each want a fresh line of their own, so many minutes to make."""
    lines = {one.recipe: solution(0.1, one.recipe) for one, _ in classes}
    made = planned(
        [SALT, *lines.values()],
        methods=[made_from(lines[one.recipe], SALT, minutes=minutes) for one, minutes in classes],
        recipes=[recipe(wants(line, cm3(10), fresh=True), code=c) for c, line in lines.items()],
        bookings=[one for one, _ in classes], bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    return notes(made)


def class_at(number: str, minute: int, on: str = "01-12") -> Booking:
    return booking(number, on, minute, recipe=number)


# opens 08:00, first class 09:15: 75 minutes
def test_fresh_makes_that_do_not_fit_before_the_first_class_are_told() -> None:
    row = mornings((class_at("K1", 555), 41), (class_at("K2", 555), 35))
    said = "2 fresh makes take 76 min before 09:15, and 75 min are staffed: "
    assert row == [("2027-01-12", said + "somebody earlier, or two at once")]


def test_fresh_makes_that_just_fit_are_not_told() -> None:
    assert mornings((class_at("K1", 555), 40), (class_at("K2", 555), 35)) == []


def test_what_is_due_for_a_later_class_does_not_fill_the_morning() -> None:
    assert mornings((class_at("K1", 555), 60), (class_at("K2", 660), 60)) == []


def test_the_mornings_of_two_days_are_counted_apart() -> None:
    assert mornings((class_at("K1", 555), 60), (class_at("K2", 555, "01-13"), 60)) == []


# -- places -------------------------------------------------------------------------


@pytest.mark.parametrize(("degrees", "told"), [(20.0, False), (30.0, False), (31.0, True)])
def test_a_place_where_it_fades_half_as_fast_again_is_told(degrees: float, told: bool) -> None:
    # the factor is the test's own: 1.5 times as fast for each 10 °C above 20 °C
    law = Law(1, 0.0001, at_c=20.0, factor_per_10c=1.5)
    line = solution(0.1, rules=(Rule(RuleKind.FADES, law=law),))
    bottle = made_bottle("S1", line, cm3(500), stays=(Stay(day("01-04"), "W1", degrees),))
    said = [("S1", "stands at 31 °C and fades 1.6 times as fast there: move it")]
    assert notes(plan(house([line], bottles=[bottle]))) == (said if told else [])


def shelved(*groups: tuple[str, str], meant_for: str = "", **record: Any) -> list[tuple[str, str]]:
    """The notes on bottles B1, B2 ... of these storage groups in these places."""
    lines = [solution(1.0, f"line {n}", storage_group=group) for n, (group, _) in enumerate(groups)]
    bottles = [
        replace(bought_bottle(f"B{n}", line, cm3(100), **record), place=place)
        for n, (line, (_, place)) in enumerate(zip(lines, groups, strict=True), 1)
    ]
    return notes(plan(house(lines, bottles=bottles, places=(Place("P1", "P1", 20.0, meant_for),))))


PEROXIDE_FIRE = "peroxide beside flammable, fire: move"


def test_peroxide_beside_a_flammable_is_told_of_both() -> None:
    # common practice, no source
    row = shelved(("peroxide", "P1"), ("flammable", "P1"))
    assert row == [
        ("B1", f"stands beside B2 in P1: {PEROXIDE_FIRE} one"),
        ("B2", f"stands beside B1 in P1: {PEROXIDE_FIRE} one"),
    ]


def test_in_two_places_they_are_not_neighbours() -> None:
    assert shelved(("peroxide", "P1"), ("flammable", "P2")) == []


def test_a_place_meant_for_the_other_is_told_with_nobody_beside() -> None:
    told = f"stands in P1, kept for flammable: {PEROXIDE_FIRE} it"
    assert shelved(("peroxide", "P1"), meant_for="flammable") == [("B1", told)]


def test_bottles_of_which_no_place_is_known_are_not_neighbours() -> None:
    assert shelved(("peroxide", ""), ("flammable", "")) == []


@pytest.mark.parametrize("state", [{"gone": True}, {"not_found": True}])
def test_what_does_not_stand_there_is_nobodys_neighbour(state: dict[str, Any]) -> None:
    assert shelved(("peroxide", "P1"), ("flammable", "P1"), **state) == []


def test_an_empty_bottle_is_nobodys_neighbour() -> None:
    acid, bleach = (solution(1.0, n, storage_group=n) for n in ("acid", "hypochlorite"))
    row: list[Bottle] = [
        replace(made_bottle("S1", acid, 0), place="P1"),
        replace(made_bottle("S2", bleach, cm3(100)), place="P1"),
    ]
    assert notes(plan(house([acid, bleach], bottles=row))) == []
