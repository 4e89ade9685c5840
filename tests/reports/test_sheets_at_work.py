"""What the bench sheet says of a draw nothing measures, and what `past` says to do next."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from sample_plan import PEROXIDE, PLAN

from stockroom.planning.decisions import Plan
from stockroom.reports.makes_text import fresh_text
from stockroom.reports.past_text import past_text

POOR = "0.35 cm³ of B01: nothing here measures it to 2 %; make more: 1 cm³ to 100 cm³"


def test_what_cannot_be_measured_stands_on_the_bench_sheet() -> None:
    text = fresh_text(replace(PLAN, makes=(replace(PEROXIDE, too_little=(POOR,)),)), 120)
    assert f"\n        {POOR}\n" in text


def next_after(plan: Plan) -> str:
    *_, last = past_text(plan, date(2027, 1, 4), 120).splitlines()
    return last


def test_past_suggests_a_look_at_the_first_bottle_it_would_help() -> None:
    starch, lithium = PLAN.past
    plan = replace(PLAN, past=(starch, replace(lithium, look_would_do=True)))
    assert next_after(plan) == "Next: stockroom why S09, stockroom look B28 --good"


def test_past_suggests_no_look_where_none_would_do() -> None:
    assert next_after(PLAN) == "Next: stockroom why S09"
