"""The morning note: the count first, everything due and nothing else, 72 columns."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta
from pathlib import Path

import houses
import pytest

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.plan import plan
from stockroom.reports.files.morning import Morning, morning_of, morning_text
from stockroom.service.sheets import known_and_planned


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.day("02-01"))


def titles(note: Morning) -> list[str]:
    return [part.title for part in note.parts]


def test_everything_of_the_day_is_counted(college: tuple[Facts, Plan]) -> None:
    known, made = college
    note = morning_of(known, made)
    on = made.as_at
    begun = [make for make in made.makes if make.on == on]
    ended = [make for make in made.makes if make.finish_on == on and make.on < on]
    orders = [order for order in made.orders if order.order_by <= on]
    rows = {part.title: len(part.rows) for part in note.parts}
    assert rows.get("MAKE", 0) + rows.get("START", 0) == len(begun) > 0
    assert rows.get("FINISH", 0) == len(ended)
    assert rows.get("ORDER", 0) == len(orders)
    assert note.count == sum(len(part.rows) for part in note.parts if part.counted)
    first = morning_text(note).splitlines()[0]
    assert first == f"{note.count} things due today, Mon 1 Feb 2027"


def test_no_line_is_wider_than_a_mailer_shows(college: tuple[Facts, Plan]) -> None:
    known, made = college
    long = replace(made.orders[0], item="a name of many words " * 10, order_by=made.as_at)
    for some in (made, replace(made, orders=(long,))):
        text = morning_text(morning_of(known, some), 200)
        assert max(map(len, text.splitlines())) <= 72


def test_never_kept_is_destroyed_with_someone_there(college_file: Path) -> None:
    note = morning_of(*known_and_planned(college_file, as_at=houses.day("02-10")))
    text = morning_text(note)
    assert {"SOMEONE MUST BE HERE", "DESTROY"} <= {*titles(note)}
    assert "by 20:40: destroy what is left of K16 Silver mirror" in text
    assert "18:00 to 20:40: for K16" in text


def test_what_only_saves_work_is_told_and_not_counted(college: tuple[Facts, Plan]) -> None:
    known, made = college
    check = replace(made.checks[0], optional=True, best=made.as_at)
    note = morning_of(known, replace(made, makes=(), orders=(), watch=(), checks=(check,)))
    (part,) = [each for each in note.parts if each.title == "WOULD SAVE WORK"]
    assert not part.counted
    assert "WOULD SAVE WORK" in morning_text(note)


def test_a_check_that_should_have_been_done_stays_due(college: tuple[Facts, Plan]) -> None:
    known, made = college
    check = replace(made.checks[0], optional=False, best=made.as_at - timedelta(days=3))
    note = morning_of(known, replace(made, checks=(check,)))
    assert "CHECK" in titles(note)


def test_a_closed_day_with_nothing_says_both() -> None:
    known = houses.house([], as_at=houses.day("01-09"))
    note = morning_of(known, plan(known))
    assert note.count == 0
    assert morning_text(note).splitlines()[:3] == [
        "Nothing due today, Sat 9 Jan 2027",
        "this house",
        "Closed today.",
    ]
