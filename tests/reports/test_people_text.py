"""Days with too much work, what is never kept, and checks, in words and as data."""

from __future__ import annotations

import json
from dataclasses import replace
from datetime import date

import pytest
from sample_plan import PLAN

from stockroom.findings import Finding
from stockroom.planning.decisions import DayLoad, Plan, Watch, Worth
from stockroom.planning.people import watch_note
from stockroom.reports.checks_text import check_lines
from stockroom.reports.json_plan import plan_json
from stockroom.reports.plan_text import plan_text

MONDAY, TUESDAY, FRIDAY = date(2027, 1, 11), date(2027, 1, 12), date(2027, 1, 8)
QUIET = DayLoad(MONDAY, 30, 300, ("M01",))
HEAVY = DayLoad(TUESDAY, 345, 300, ("M02", "M03"), ("S02",), (("M03", FRIDAY),))
SILVER = Watch("K16", TUESDAY, "Silver mirror", 1380, 1450, "Drown it in salt water.")
SHOWN = replace(
    PLAN,
    loads=(QUIET, HEAVY),
    watch=(SILVER,),
    notes=(
        Finding("2027-01-12", "345 min hands-on; could be made earlier: M03"),
        watch_note(SILVER),
        Finding("K15", "18:30 is outside staffed hours"),
    ),
)


def section(plan: Plan, title: str, width: int = 120) -> list[str]:
    """The lines under a heading; [] where it is not there."""
    parts = [part.splitlines() for part in plan_text(plan, width).split("\n\n")]
    return next((part[1:] for part in parts if part[0] == title), [])


def test_only_days_over_the_limit_are_told_with_what_could_go_earlier() -> None:
    (line,) = section(SHOWN, "TOO MUCH FOR ONE DAY")
    assert line == (
        "  Tue 2027-01-12  345 of 300 min: M02, M03, titrating S02; "
        "could go earlier: M03 to Fri 2027-01-08"
    )


def test_where_nothing_fits_earlier_that_is_said() -> None:
    plan = replace(SHOWN, loads=(replace(HEAVY, movable=()),))
    (line,) = section(plan, "TOO MUCH FOR ONE DAY")
    assert line.endswith("nothing in it fits earlier")


def test_what_is_never_kept_has_its_times_and_a_blank_for_initials() -> None:
    (line,) = section(SHOWN, "NEVER KEPT", 200)
    assert line == (
        "  K16  Tue 2027-01-12  Silver mirror: mix not before 23:00, destroyed by 00:10 the day "
        "after, ticked by ........: Drown it in salt water."
    )


def test_who_destroyed_it_stands_in_place_of_the_blank() -> None:
    (line,) = section(replace(SHOWN, watch=(replace(SILVER, ticked_by="T2"),)), "NEVER KEPT", 200)
    assert "ticked by T2: Drown" in line


def test_what_a_section_tells_is_no_note_besides() -> None:
    assert section(SHOWN, "NOTES") == ["  K15: 18:30 is outside staffed hours"]


def test_a_quiet_plan_has_neither_section() -> None:
    text = plan_text(replace(SHOWN, loads=(QUIET,), watch=()), 80)
    assert "TOO MUCH FOR ONE DAY" not in text
    assert "NEVER KEPT" not in text


@pytest.mark.parametrize("width", [60, 80, 120])
def test_no_line_of_it_is_wider_than_the_page(width: int) -> None:
    assert max(len(line) for line in plan_text(SHOWN, width).splitlines()) <= width


def test_a_check_whose_interval_opens_on_a_closed_day_is_told_from_the_first_open_one() -> None:
    check = replace(PLAN.checks[0], not_before=date(2027, 2, 16), opens=date(2027, 2, 22))
    (line,) = check_lines((check,), 200)
    assert "between Mon 2027-02-22 and Thu 2027-03-04" in line


def test_a_check_with_one_day_left_is_on_that_day() -> None:
    check = replace(PLAN.checks[0], opens=date(2027, 3, 4), best=date(2027, 3, 4))
    (line,) = check_lines((check,), 200)
    assert ", on Thu 2027-03-04, for K21" in line


# -- as data --------------------------------------------------------------------------


def test_every_day_of_work_is_in_the_data() -> None:
    data = plan_json(SHOWN)
    assert json.loads(json.dumps(data)) == data
    assert [(load["day"], load["over"]) for load in data["loads"]] == [
        ("2027-01-11", 0), ("2027-01-12", 45)
    ]  # fmt: skip
    assert data["loads"][1] == {
        "day": "2027-01-12", "minutes": 345, "limit": 300, "over": 45, "makes": ["M02", "M03"],
        "checks": ["S02"], "movable": [{"make": "M03", "to": "2027-01-08"}],
    }  # fmt: skip


def test_no_limit_is_null() -> None:
    data = plan_json(replace(SHOWN, loads=(replace(HEAVY, limit=0),)))
    assert (data["loads"][0]["limit"], data["loads"][0]["over"]) == (None, 0)


def test_a_watch_is_dated_also_past_midnight() -> None:
    (watch,) = plan_json(SHOWN)["watch"]
    assert watch == {
        "booking": "K16", "on": "2027-01-12", "title": "Silver mirror",
        "not_before": "2027-01-12T23:00", "destroy_by": "2027-01-13T00:10",
        "how": "Drown it in salt water.", "dangers": [], "ticked_by": None,
    }  # fmt: skip


def test_the_worth_of_a_look_is_in_the_data() -> None:
    worth = Worth(("M14",), 10, (("O02", 2490),), (("CH", 2490),))
    check = replace(PLAN.checks[0], what="look", optional=True, worth=worth)
    (data,) = plan_json(replace(PLAN, checks=(check,)))["checks"]
    assert data["worth"] == {
        "makes": ["M14"], "minutes": 10, "orders": {"O02": 24.9}, "shares": {"CH": 24.9},
        "serves": [], "estimated": False,
    }  # fmt: skip
    assert "worth" not in plan_json(PLAN)["checks"][0]
