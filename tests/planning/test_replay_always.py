"""No plan of a random house, of the college or of the starter house has a fault."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import replace
from datetime import date, timedelta
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from random_houses import random_house

from stockroom.planning.cautious import with_caution
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.planning.plan import plan, whole_plan
from stockroom.planning.replaying.replay import Broken, replay
from stockroom.store.snapshot import facts

if TYPE_CHECKING:
    from conftest import Stockroom

HOUSES = 2000
# a hundred to a test, so that several hands can share them
BY = 100
FIRST, LAST = date(2027, 1, 4), date(2027, 3, 22)
MONDAYS = [FIRST + timedelta(7 * week) for week in range(12)]


@pytest.mark.parametrize("first", range(0, HOUSES, BY))
def test_no_plan_of_a_random_house_has_a_fault_or_promises_anything_twice(first: int) -> None:
    for seed in range(first, first + BY):
        known = random_house(seed)
        made = whole_plan(known)
        # all of it: what a week shows may lean on a bottle opened for another
        last = known.horizon or known.end
        faults = replay(known, replace(made, start=known.as_at, end=last))
        assert not faults, f"house {seed}: {faults[0]}"
        # summed once more, from the decisions and nothing else
        left = {bottle.number: bottle.left for bottle in known.bottles}
        for number, amount in taken(known, made):
            left[number] -= amount
        assert min(left.values(), default=0) >= 0, f"house {seed}: {left}"


def taken(known: Facts, made: Plan) -> Iterator[tuple[str, int]]:
    """Bottle and amount of everything the plan takes; what the ledger has is left out."""
    had = {draw.bottle for draw in known.drawn} - {bottle.number for bottle in known.bottles}
    for need in made.needs:
        yield from ((one.bottle, one.amount) for one in need.draws if one.bottle not in had)
    for make in made.makes:
        yield from ((one.bottle, one.amount) for one in make.sources if one.bottle)


def test_the_random_houses_come_to_every_outcome() -> None:
    """A house where nothing can be had would prove nothing."""
    seen: Counter[Outcome] = Counter()
    for seed in range(100):
        known = random_house(seed)
        seen.update(need.outcome for need in plan(known).needs)
    assert set(seen) == set(Outcome)
    assert min(seen.values()) >= 5, seen


@pytest.mark.parametrize("cautious", [False, True])
@pytest.mark.parametrize("day", MONDAYS, ids=str)
def test_the_colleges_plan_has_no_fault_on_any_monday(
    practice: Path, day: date, cautious: bool
) -> None:
    known = with_derived(facts(practice, day))
    known = with_caution(known, known.bottles) if cautious else known
    assert replay(known, plan(known)) == ()


@pytest.mark.parametrize("day", MONDAYS[::3], ids=str)
def test_a_week_of_the_colleges_plan_has_no_fault(practice: Path, day: date) -> None:
    known = with_derived(facts(practice, FIRST, day, day + timedelta(4)))
    assert replay(known, plan(known)) == ()


# the term as it goes, in the order of its days
EVENTS = (
    ("2027-01-11", "look S03 --good"),
    ("2027-01-12", "look S12 --bad"),
    ("2027-01-15", "spoil S05 --why cloudy"),
    ("2027-01-18", "shift K06 --groups 13"),
    ("2027-01-20", "draw S13 '100 cm3'"),
    ("2027-02-02", "shift K13 --on 2027-02-09"),
    ("2027-02-22", "found B27 '0.11 mol/dm3' --sure"),
    ("2027-03-03", "found S02 '0.0979 mol/dm3'"),
    ("2027-03-22", "spill B18 '2 g' --why 'knocked over'"),
)


def test_the_colleges_plan_has_no_fault_as_the_term_goes(stockroom: Stockroom, own: Path) -> None:
    from shlex import split

    for day, words in EVENTS:
        done = stockroom(*split(words), "--as-at", day, "--by", "T1", store=own)
        assert done.code == 0, done.err
        on = date.fromisoformat(day)
        for later in (on, on + timedelta(9)):
            known = with_derived(facts(own, later))
            assert replay(known, plan(known)) == (), (day, words, later)


def test_a_fault_of_the_planner_is_seen_in_a_random_house() -> None:
    """The balance of a bottle is written down after the plan was made: it is told by name."""
    known = next(
        known
        for known in map(random_house, range(100))
        if any(draw.bottle for make in plan(known).makes for draw in make.sources)
    )
    empty = replace(known, bottles=tuple(replace(bottle, left=0) for bottle in known.bottles))
    assert Broken.BALANCE in {fault.rule for fault in replay(empty, plan(known))}
