"""The shorter sheets: fresh, past, usage, buying, ready, why, bench sums."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING, cast

import pytest
from sample_plan import NEEDS, PERMANGANATE, PLAN, HandReadiness, cubic

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Draw, Plan
from stockroom.reports.buying_text import buying_text
from stockroom.reports.makes_text import fresh_text
from stockroom.reports.past_text import past_text
from stockroom.reports.ready_text import ready_text, served, why_text
from stockroom.reports.usage_text import usage_text

if TYPE_CHECKING:
    from stockroom.planning.ready import Readiness

EMPTY = Plan(PLAN.as_at, PLAN.start, PLAN.end, PLAN.house)


def readiness(*, ready: bool) -> Readiness:
    to_do = () if ready else ("make M03 in the morning",)
    return cast("Readiness", HandReadiness(ready=ready, to_do=to_do))


def test_fresh_goes_by_day_with_steps_and_sources() -> None:
    text = fresh_text(PLAN, 80)
    assert " Tue 26 Jan 2027\n  M03 [fresh] hydrogen peroxide 0.100 mol/dm³, 528 cm³" in text
    assert "from 6.612 cm³ of B01" in text
    assert "Measure, make up, mix." in text


def test_work_on_a_second_day_stands_under_that_day_too() -> None:
    second = fresh_text(PLAN, 120).split(" Thu 28 Jan 2027\n")[1]
    assert second.startswith("  M04 potassium permanganate 0.0200 mol/dm³: finish")


def test_a_heel_is_kept_or_poured_away_in_words() -> None:
    assert "120 cm³ over: label it and keep it" in fresh_text(PLAN, 80)
    poured = replace(PLAN, makes=(replace(PERMANGANATE, heel_kept=False),))
    assert "120 cm³ over: pour away" in fresh_text(poured, 80)


def test_past_names_the_condition_the_rule_and_the_booking() -> None:
    text = past_text(PLAN, date(2027, 1, 4), 100)
    assert "S09  ○ past" in text
    assert "decided by: made 2026-12-14 + 7 d" in text
    assert "matters for K01" in text


def test_usage_parts_solutions_from_bought_form() -> None:
    solutions, bought = usage_text(PLAN, 100).split("IN BOUGHT FORM")
    assert "4 048 cm³  sodium thiosulfate 0.200 mol/dm³, 368 cm³ of it spare" in solutions
    assert "84.5 g  potassium iodide" in bought


def test_buying_is_ordered_by_order_by_and_adds_up_the_money() -> None:
    sooner = replace(PLAN.orders[0], id="O02", item="amylase", order_by=date(2026, 12, 1))
    text = buying_text(replace(PLAN, orders=(*PLAN.orders, sooner)), 100)
    assert text.index("amylase") < text.index("lithium chloride")
    assert "all  £29.00" in text


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (fresh_text(EMPTY, 80), "Nothing to make up"),
        (past_text(EMPTY, EMPTY.as_at, 80), "Every bottle is sound."),
        (usage_text(EMPTY, 80), "Nothing is used"),
        (buying_text(EMPTY, 80), "Nothing to order"),
    ],
)
def test_an_empty_answer_is_said_in_words(text: str, said: str) -> None:
    assert said in text


def test_ready_begins_with_yes_or_no() -> None:
    assert ready_text(readiness(ready=True), 80).splitlines()[0] == "YES"
    assert ready_text(readiness(ready=False), 80).splitlines()[0] == "NO: 1 thing to do"


def test_ready_says_practice_beside_its_answer() -> None:
    first = ready_text(readiness(ready=False), 80, practice=True).splitlines()[0]
    assert first == "NO: 1 thing to do   PRACTICE"


def test_a_need_of_one_bottle_says_its_amount_once() -> None:
    assert served(NEEDS[0]).replace("\u00a0", " ").endswith("1 144 cm³ from S04")


def test_a_need_of_two_bottles_says_how_much_of_each() -> None:
    draws = tuple(Draw(cubic(572), Kind.VOLUME, bottle=number) for number in ("S04", "S25"))
    text = served(replace(NEEDS[0], draws=draws)).replace("\u00a0", " ")
    assert text.endswith("from 572 cm³ of S04 + 572 cm³ of S25")


def test_five_reasons_stay_five_lines() -> None:
    reasons = tuple("word " * 40 for _ in range(5))
    assert len(why_text(reasons).splitlines()) == 5
    assert why_text(reasons, practice=True).startswith("PRACTICE\n")
