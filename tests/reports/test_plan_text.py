from __future__ import annotations

from dataclasses import replace

import pytest
from sample_plan import ACID_FIRST, NEEDS, PLAN

from stockroom.planning.decisions import Outcome, Plan
from stockroom.reports.plan_text import plan_text

ORDER = (
    "CANNOT BE DONE",
    "ORDER BY",
    "FALLS BELOW THE LINE ON",
    "MAKE",
    "CHECK",
    "PAST, WEAK, UNDATED",
    "BOOKINGS",
    "NOTES",
    "GUESSES",
)
EMPTY = Plan(PLAN.as_at, PLAN.start, PLAN.end, PLAN.house)


def headings(text: str) -> list[str]:
    return [name for line in text.splitlines() for name in ORDER if line.startswith(name)]


def test_sections_stand_in_order() -> None:
    assert headings(plan_text(PLAN, 80)) == list(ORDER)


def test_empty_sections_are_left_off() -> None:
    assert headings(plan_text(EMPTY, 80)) == ["GUESSES"]


@pytest.mark.parametrize("width", [60, 80, 120])
def test_no_line_is_wider_than_the_page(width: int) -> None:
    assert max(len(line) for line in plan_text(PLAN, width).splitlines()) <= width


def test_the_head_counts_bookings_and_outcomes() -> None:
    assert "2 bookings, 3 needs: have 1, make 1, short 1" in plan_text(PLAN, 80)


def test_what_cannot_be_done_says_when_and_why() -> None:
    text = plan_text(PLAN, 120)
    assert "K01.1  Tue 2027-01-12  lithium chloride 0.500 mol/dm³, 55 cm³ short: B28" in text


def test_a_refused_need_is_told_though_nothing_is_short() -> None:
    refused = replace(NEEDS[1], outcome=Outcome.REFUSED, reasons=("barred: chloride",))
    text = plan_text(replace(PLAN, needs=(refused,), short=()), 120)
    assert "528 cm³: refused, barred: chloride" in text


def test_lateness_is_said_in_words() -> None:
    assert "late by 6 open days" in plan_text(PLAN, 80)


def test_an_order_in_time_says_nothing_of_lateness() -> None:
    order = replace(PLAN.orders[0], late=0)
    assert "late by" not in plan_text(replace(PLAN, orders=(order,)), 80)


def test_every_make_carries_its_own_caution() -> None:
    # two makes of one day: whoever makes the second has not read the first
    assert plan_text(PLAN, 120).count(ACID_FIRST) == 2


def test_a_booking_tells_its_outcomes_and_its_needs() -> None:
    text = plan_text(PLAN, 120)
    assert "R01 Iodine clock, 8 groups, CH, firm: have 1, make 1" in text
    assert "make     hydrogen peroxide 0.100 mol/dm³ 528 cm³ from M03" in text


def test_the_next_command_asks_about_what_is_short() -> None:
    assert "stockroom why K01.1" in plan_text(PLAN, 80)
