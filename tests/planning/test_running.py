"""The steps of a line's stock agree with what the plan says of it, in the college and by chance."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from random_houses import random_house

from stockroom.planning.facts import Facts
from stockroom.planning.pictures.running import Running, running
from stockroom.planning.plan import whole_plan
from stockroom.service.sheets import known_and_planned

SULFURIC = "sulfuric acid 2.00 mol/dm3"


def disagreements(facts: Facts) -> list[str]:
    """Where the running of a line and the plan's level or order differ."""
    plan, found = whole_plan(facts), []
    told_of = {level.line for level in plan.levels} | {order.line for order in plan.orders}
    for key in sorted(told_of):
        told = running(facts, key, plan.orders)
        mine = [level for level in plan.levels if level.line == key]
        found += [
            f"{key}: {told.falls_below} {told.runs_out}, plan {level}"
            for level in mine
            if told.falls_below != (level.on, level.left) or told.runs_out != level.runs_out
        ]
        orders = [order for order in plan.orders if order.line == key]
        for order in orders[:1]:
            falls = told.falls_below[0] if told.falls_below else None
            if order.falls_below not in (None, falls):
                found.append(f"{key}: {told.falls_below}, {order.id} {order.falls_below}")
            if order.runs_out not in (None, told.runs_out):
                found.append(f"{key}: out {told.runs_out}, {order.id} {order.runs_out}")
    return found


@pytest.mark.parametrize("seed", range(12))
def test_a_random_house_runs_as_its_plan_says(seed: int) -> None:
    assert disagreements(random_house(seed)) == []


def test_the_college_runs_as_its_plan_says(practice: Path) -> None:
    known, plan = known_and_planned(practice, as_at=date(2027, 1, 4))
    for level in plan.levels:
        told = running(known, level.line, plan.orders)
        assert (told.falls_below, told.runs_out) == ((level.on, level.left), level.runs_out)
    assert [level.line for level in plan.levels] == ["potassium chloride", SULFURIC]


def test_days_do_not_run_backwards_and_nothing_is_less_than_nothing(practice: Path) -> None:
    known, plan = known_and_planned(practice, as_at=date(2027, 1, 4))
    for order in plan.orders:
        told: Running = running(known, order.line, plan.orders)
        days = [step.on for step in told.steps]
        assert days == sorted(days)
        assert min(min(step.left, step.with_orders) for step in told.steps) >= 0
        assert any(order.id in step.what for step in told.steps)
