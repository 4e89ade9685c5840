"""The morning note: the count first, everything due and nothing else, 72 columns."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta
from pathlib import Path

import houses
import pytest

from stockroom.planning.decisions import Plan, Short
from stockroom.planning.facts import Drawn, Facts, Firmness
from stockroom.planning.people import must_be_here
from stockroom.planning.plan import plan
from stockroom.reports.files.morning import Morning, morning_of, morning_text
from stockroom.reports.files.morning_shelf import at_the_shelf, leaned_on_late, not_written
from stockroom.reports.paper.day import day_of
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


def test_what_can_hurt_is_due_every_day_until_it_is_mended(college_file: Path) -> None:
    known, made = known_and_planned(college_file, as_at=houses.MONDAY)
    note = morning_of(known, made)
    (part,) = [each for each in note.parts if each.title == "AT THE SHELF"]
    assert part.counted
    assert [due.what.split()[0] for due in part.rows] == ["S19", "B04", "S12"]
    assert "tight cap" in part.rows[0].more[0]
    # B29 forms peroxides: its safety date is 2 March
    on = houses.day("03-03")
    (first, *_) = at_the_shelf(replace(known, as_at=on))
    assert first.what.startswith("B29 ")
    assert "do not open or move it; ask" in first.more[0]
    mended = tuple(replace(b, place="", cap="") for b in known.bottles)
    assert at_the_shelf(replace(known, bottles=mended)) == []


def test_an_overdue_check_is_due_once_a_class_leans_on_it(college_file: Path) -> None:
    """Scenario T12: S02, which nobody needs before March, is not nagged about."""
    known, made = known_and_planned(college_file, as_at=houses.MONDAY)
    assert leaned_on_late(made) == set()
    (check,) = [each for each in made.checks if each.subject == "B27"]
    soon = tuple(
        replace(n, booking=replace(n.booking, on=houses.day("01-18")))
        if n.booking.number in check.bookings
        else n
        for n in made.needs
    )
    near = replace(made, needs=soon)
    assert leaned_on_late(near) == {"B27"}
    (part,) = [each for each in morning_of(known, near).parts if each.title == "CHECK"]
    assert [due.what for due in part.rows] == ["titrate B27 bromine water 0.2 mol/dm³"]


def test_a_class_that_is_over_with_nothing_entered_is_asked_for(college_file: Path) -> None:
    known, _ = known_and_planned(college_file, as_at=houses.day("01-19"))
    (due,) = not_written(known)
    assert due.what == "K01, K02, K04, K03"
    drawn = tuple(Drawn("B01", "x", known.as_at, 1, number) for number in ("K01", "K02", "K04"))
    (due,) = not_written(replace(known, drawn=drawn))
    assert (due.what, due.more) == ("K03", ("nothing is entered as drawn for it",))
    assert not_written(replace(known, as_at=known.start)) == []


def test_a_class_that_is_short_is_counted(college: tuple[Facts, Plan]) -> None:
    known, made = college
    need = next(each for each in made.needs if each.booking.on >= made.as_at)
    lack = Short(
        need.ref, need.booking.number, need.item, need.strength, 1, need.kind, "none is left"
    )
    today = replace(made, as_at=need.booking.on, short=(lack,))
    note = morning_of(known, today)
    (part,) = [each for each in note.parts if each.title.startswith("CANNOT BE HAD")]
    assert part.counted
    assert len(part.rows) == 1


def test_on_a_closed_day_somebody_must_be_here_for_all_of_it() -> None:
    known = houses.house([])
    closed = replace(houses.booking("K01", "01-09", 555), lasts_minutes=60)
    assert must_be_here(known, closed, set_out=515, never_kept=False) == [(515, 615)]
    assert must_be_here(known, closed, set_out=515, never_kept=True) == [(515, 645)]
    # what is never kept is mixed half an hour before, whenever the rest is set out
    assert must_be_here(known, closed, set_out=545, never_kept=True) == [(525, 645)]


@pytest.mark.parametrize(("minute", "never_kept"), [(555, ""), (555, "explosive"), (485, "")])
def test_on_a_closed_day_the_note_and_the_page_for_the_day_say_the_same_hours(
    minute: int, never_kept: str
) -> None:
    on, salt = houses.day("01-09"), houses.solid()
    words = houses.recipe(houses.wants(salt, houses.g(1)), never_kept=never_kept)
    known = houses.house(
        [salt],
        recipes=[words],
        bookings=[houses.booking("K01", "01-09", minute)],
        bottles=[houses.bought_bottle("B1", salt, houses.g(50))],
        as_at=on,
    )
    made = plan(known)
    (part,) = [p for p in morning_of(known, made).parts if p.title == "SOMEONE MUST BE HERE"]
    hours = [due.what.removesuffix(": for K01") for due in part.rows]
    rows = [row for of in day_of(known, made, on).parts for row in of.rows]
    here = [row.what for row in rows if row.key.startswith("here")]
    assert here == [f"someone must be here from {each}: not staffed" for each in hours]
    assert len(here) == 1


def test_nobody_must_be_here_for_what_is_done(college_file: Path) -> None:
    known, made = known_and_planned(college_file, as_at=houses.day("02-10"))
    over = tuple(
        replace(b, firmness=Firmness.DONE) if b.number == "K16" else b for b in known.bookings
    )
    note = morning_of(replace(known, bookings=over), made)
    (part,) = [each for each in note.parts if each.title == "SOMEONE MUST BE HERE"]
    assert [due.what.rpartition(" ")[2] for due in part.rows] == ["K15"]
