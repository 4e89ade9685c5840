"""The calendar: read back by its library, expanded by another, and held against the plan."""

from __future__ import annotations

from collections import Counter
from dataclasses import replace
from datetime import date, timedelta
from pathlib import Path
from typing import Any

import houses
import icalendar
import pytest
import recurring_ical_events

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.plan import plan
from stockroom.reports.files.calendar import Calendar, State, calendar_lines, calendar_of, counts
from stockroom.reports.files.calendar_ics import calendar_bytes
from stockroom.service.sheets import known_and_planned

HIDEOUS = "salt, fine; \\ grade\n\x07 🧪 " + "long " * 40


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


def read(calendar: Calendar) -> list[Any]:
    found = icalendar.Calendar.from_ical(calendar_bytes(calendar))
    return list(found.walk("VEVENT"))


def after(known: Facts, **changed: dict[str, Any]) -> tuple[Facts, Plan]:
    """The same house with one booking otherwise: its number as the key."""
    bookings = tuple(replace(b, **changed.get(b.number, {})) for b in known.bookings)
    other = replace(known, bookings=bookings)
    return other, plan(other)


def test_as_many_entries_a_day_as_the_plan_has(college: tuple[Facts, Plan]) -> None:
    known, made = college
    found = icalendar.Calendar.from_ical(calendar_bytes(calendar_of(known, made)))
    expanded = recurring_ical_events.of(found).between(date(2026, 12, 1), date(2027, 4, 1))
    kinds: dict[str, Counter[date]] = {}
    for each in expanded:
        begins = each.decoded("dtstart")
        on = begins.date() if hasattr(begins, "date") else begins
        (kind,) = each.categories
        kinds.setdefault(kind, Counter())[on] += 1
    assert kinds["make"] + kinds["start"] == Counter(make.on for make in made.makes)
    assert kinds["finish"] == Counter(
        m.finish_on for m in made.makes if m.finish_on and m.finish_on > m.on
    )
    assert kinds["titrate"] + kinds["look"] == Counter(check.best for check in made.checks)
    assert kinds["order"] == Counter(max(o.order_by, made.as_at) for o in made.orders)
    assert kinds["booking"] == Counter(booking.on for booking in known.bookings)
    assert kinds["destroy"] == Counter(watch.on for watch in made.watch)


def test_whole_days_end_before_the_next_and_ring_the_evening_before(
    college: tuple[Facts, Plan],
) -> None:
    events = read(calendar_of(*college))
    assert len({event["uid"] for event in events}) == len(events)
    for event in events:
        begins, ends = event.decoded("dtstart"), event.decoded("dtend")
        assert event["transp"] == "TRANSPARENT"
        assert event["summary"].startswith("PRACTICE ")
        alarms = [alarm.decoded("trigger") for alarm in event.walk("VALARM")]
        if event.categories == ["booking"]:
            assert alarms == []
        elif event.categories == ["destroy"]:
            assert alarms == [timedelta(0)]
            assert ends - begins == timedelta(minutes=30)
        else:
            # the evening before today is over
            assert alarms == ([timedelta(hours=-6)] if begins > houses.MONDAY else [])
            assert ends - begins == timedelta(days=1)


def test_the_file_is_folded_and_the_same_again(college: tuple[Facts, Plan]) -> None:
    first = calendar_of(*college)
    written = calendar_bytes(first)
    assert all(len(line) <= 75 for line in written.split(b"\r\n"))
    assert written.count(b"\n") == written.count(b"\r\n")
    again = calendar_of(*college, calendar_lines(first))
    assert {entry.state for entry in again.entries} == {State.SAME}
    assert calendar_bytes(again) == written


def test_a_booking_moved_changes_entries_and_adds_none(college: tuple[Facts, Plan]) -> None:
    """Scenario T42: K13 from 4 to 9 February."""
    first = calendar_of(*college)
    moved = after(college[0], K13={"on": date(2027, 2, 9)})
    second = calendar_of(*moved, calendar_lines(first))
    assert {e.uid for e in second.entries} == {e.uid for e in first.entries}
    assert not any(entry.withdrawn for entry in second.entries)
    changed = [e for e in second.entries if e.state is State.CHANGED]
    assert {e.sequence for e in changed} == {1}
    assert any(e.work.thing == "K13" and e.work.on == date(2027, 2, 9) for e in changed)
    # with nothing remembered the identifiers are the same, since no day is part of them
    assert {e.uid for e in calendar_of(*moved).entries} == {e.uid for e in first.entries}


def test_what_is_cancelled_is_withdrawn_once_and_comes_back_as_itself(
    college: tuple[Facts, Plan],
) -> None:
    first = calendar_of(*college)
    dropped = after(college[0], K08={"firmness": Firmness.DROPPED})
    second = calendar_of(*dropped, calendar_lines(first))
    gone = {str(e["uid"]): e for e in read(second) if e.get("status") == "CANCELLED"}
    (booking,) = [e for e in first.entries if (e.work.kind, e.work.thing) == ("booking", "K08")]
    assert booking.uid in gone
    assert all(e["sequence"] == 1 and "withdrawn: " in e["summary"] for e in gone.values())
    assert all(not event.walk("VALARM") for event in gone.values())
    told = "Withdrawn: done or no longer needed."
    assert all(event["description"].startswith(told) for event in gone.values())
    third = calendar_of(*dropped, calendar_lines(second))
    assert calendar_bytes(third) == calendar_bytes(second)
    back = calendar_of(*college, calendar_lines(third))
    assert {e.uid for e in back.entries} == {e.uid for e in first.entries}
    assert [e.sequence for e in back.entries if e.uid == booking.uid] == [2]


def test_a_day_that_is_over_keeps_its_entry_and_the_same_make_gets_another() -> None:
    salt = houses.solid()
    line = houses.solution(0.1, rules=(houses.keeps(30),))
    known = houses.house(
        [salt, line],
        methods=[houses.made_from(line, salt)],
        recipes=[houses.recipe(houses.wants(line, houses.cm3(100)))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.bought_bottle("B01", salt, houses.g(500))],
    )
    first = calendar_of(known, plan(known))
    (make,) = [e for e in first.entries if e.work.kind == "make"]
    late = replace(known, as_at=make.work.on + timedelta(days=1), start=known.start)
    second = calendar_of(late, plan(late), calendar_lines(first))
    (again,) = [e for e in second.entries if e.work.kind == "make"]
    assert again.uid != make.uid
    assert make.uid not in {e.uid for e in second.entries}
    assert make.uid in calendar_lines(second)


def test_two_makes_of_one_thing_for_the_same_class_are_two(college: tuple[Facts, Plan]) -> None:
    known, made = college
    twice = replace(made, makes=(*made.makes, replace(made.makes[0], id="M99")))
    entries = calendar_of(known, twice).entries
    assert (
        len({e.uid for e in entries}) == len(entries) == len(calendar_of(known, made).entries) + 1
    )


def test_any_text_comes_back_as_it_was(college: tuple[Facts, Plan]) -> None:
    known, made = college
    order = replace(made.orders[0], item=HIDEOUS, supplier="A, B; C")
    written = calendar_of(known, replace(made, orders=(order,)))
    (event,) = [e for e in read(written) if e.categories == ["order"]]
    assert "salt, fine; \\ grade\n 🧪 long long" in event["summary"]
    assert "from A, B; C" in event["description"]


@pytest.mark.parametrize("kept", ["", "{}", "[]", "null", '{"on": 7}', "no json"])
def test_what_cannot_be_read_of_the_last_file_is_entered_anew(
    college: tuple[Facts, Plan], kept: str
) -> None:
    found = calendar_of(*college, {"x": kept})
    assert {entry.state for entry in found.entries} == {State.NEW}


def test_what_is_over_and_what_is_withdrawn_are_counted_apart(
    college: tuple[Facts, Plan],
) -> None:
    known, made = college
    first = calendar_of(known, made)
    late = replace(known, as_at=date(2027, 1, 20))
    second = calendar_of(late, plan(late), calendar_lines(first))
    gone = [entry for entry in second.entries if entry.withdrawn]
    planned = len(second.entries) - len(gone)
    said = counts(second)
    assert said.startswith(f"{planned} entries: ")
    assert said.endswith(f"; {len(gone)} withdrawn; {len(second.over)} over, left out")
    new = [entry for entry in second.entries if entry.state is State.NEW]
    assert len(first.entries) + len(new) == planned + len(gone) + len(second.over)


def test_a_late_order_stays_where_it_was_put_out_until_it_is_placed(
    college: tuple[Facts, Plan],
) -> None:
    known, made = college
    (order,) = [o for o in made.orders if o.order_by <= made.as_at][:1]
    made = replace(made, orders=(order,))
    first = calendar_of(known, made)
    later = replace(made, as_at=made.as_at + timedelta(days=2))
    second = calendar_of(known, later, calendar_lines(first))
    (entry,) = [e for e in second.entries if e.work.kind == "order"]
    assert entry.work.on == made.as_at
    (event,) = [e for e in read(second) if e.categories == ["order"]]
    assert not event.walk("VALARM")
    placed = replace(later, orders=())
    third = calendar_of(known, placed, calendar_lines(second))
    (entry,) = [e for e in third.entries if e.work.kind == "order"]
    assert entry.withdrawn
    fourth = calendar_of(known, placed, calendar_lines(third))
    assert not [e for e in fourth.entries if e.work.kind == "order"]
