"""A plan asked for again is not worked out again, and never given for other facts."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.service import replayed
from stockroom.store.snapshot import facts


@pytest.fixture
def known(practice: Path) -> Facts:
    replayed.forget_plans()
    return with_derived(facts(practice, date(2027, 1, 4)))


def test_the_same_facts_read_again_give_the_plan_made_before(known: Facts, practice: Path) -> None:
    made = replayed.replayed_plan(known)
    again = with_derived(facts(practice, date(2027, 1, 4)))
    assert again is not known
    assert replayed.replayed_plan(again) is made


def test_a_bottle_with_less_in_it_gives_another_plan(known: Facts) -> None:
    made = replayed.replayed_plan(known)
    emptier = tuple(replace(b, left=b.left - 1) if b.number == "S01" else b for b in known.bottles)
    other = replayed.replayed_plan(replace(known, bottles=emptier))
    assert other is not made


def test_what_is_past_on_another_day_is_asked_anew(known: Facts) -> None:
    made = replayed.replayed_plan(known)
    later = replayed.replayed_plan(known, past_day=date(2027, 2, 10))
    assert later.past != made.past


def test_no_more_than_a_few_are_kept(known: Facts) -> None:
    for number in range(6):
        replayed.replayed_plan(known, past_day=date(2027, 1, 4 + number))
    assert len(replayed._LAST) == 4
