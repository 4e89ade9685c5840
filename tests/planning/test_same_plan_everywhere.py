"""The same facts give the same plan: whatever the order of rows, and in whichever interpreter.

Python puts the words of a set in another order each time it starts, by PYTHONHASHSEED; a
plan that hung on it would be another tomorrow.
"""

from __future__ import annotations

import hashlib
import os
import subprocess
import sys
from dataclasses import fields, is_dataclass, replace
from datetime import date
from enum import Enum
from pathlib import Path
from random import Random
from typing import Any

import pytest
import random_houses
from houses import day
from random_houses import VESSELS, mixed, random_house, shuffled

from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Balance, Facts
from stockroom.planning.plan import plan
from stockroom.store.snapshot import facts

HOUSES = range(300, 500)
FIRST = "2027-01-04"

# what a fresh interpreter does: every plan as text, with its figures to ten places
TELL = """
import sys
from datetime import date
from pathlib import Path
sys.path[:0] = sys.argv[3:]
from random_houses import random_house
from test_same_plan_everywhere import as_text
from stockroom.planning.derive import with_derived
from stockroom.planning.plan import plan
from stockroom.store.snapshot import facts
college = with_derived(facts(Path(sys.argv[1]), date.fromisoformat("2027-01-04")))
for known in (college, *map(random_house, range(30))):
    print(as_text(plan(known)))
"""


def as_text(value: Any) -> str:
    """A decision in full, each figure to ten places: what may differ by machine is rounded."""
    if isinstance(value, float):
        return f"{value:.10g}"
    if isinstance(value, Enum) or value is None or isinstance(value, str | int):
        return repr(value)
    if is_dataclass(value):
        row = (f"{f.name}={as_text(getattr(value, f.name))}" for f in fields(value))
        return f"{type(value).__name__}({', '.join(row)})"
    if isinstance(value, tuple):
        return f"({', '.join(map(as_text, value))})"
    # a set has no order to be told in, so none may stand in a plan
    assert not isinstance(value, set | frozenset | dict), value
    return str(value)


def told(seed: str, store: Path) -> str:
    """A digest of what an interpreter started with this hash seed makes of the same houses."""
    places = [str(Path(random_houses.__file__).parent), str(Path(__file__).parent)]
    ran = subprocess.run(
        [sys.executable, "-c", TELL, str(store), FIRST, *places],
        capture_output=True,
        env={**os.environ, "PYTHONHASHSEED": seed, "PYTHONIOENCODING": "utf-8"},
        check=False,
    )
    assert ran.returncode == 0, ran.stderr.decode()
    assert ran.stdout.count(b"Plan(as_at=") == 31
    return hashlib.sha256(ran.stdout).hexdigest()


def test_every_interpreter_makes_the_same_plan(practice: Path) -> None:
    assert len({told(seed, practice) for seed in ("0", "1", "31337")}) == 1


@pytest.mark.parametrize("first", range(HOUSES.start, HOUSES.stop, 100))
def test_the_order_of_rows_does_not_change_the_plan_of_a_random_house(first: int) -> None:
    for seed in range(first, first + 100):
        known = random_house(seed)
        assert plan(mixed(known, seed + 1)) == plan(known), f"house {seed}"


def test_the_order_of_rows_does_not_change_the_colleges_plan(practice: Path) -> None:
    known = with_derived(facts(practice, date.fromisoformat(FIRST)))
    made = plan(known)
    for seed in range(3):
        assert plan(mixed(known, seed)) == made


def test_the_order_of_packs_and_of_what_is_on_its_way_does_not_change_the_plan() -> None:
    for seed in range(60):
        known = random_house(seed)
        assert plan(with_other_orders(known, seed)) == plan(known), f"house {seed}"


# V1 and V2 are both away on a day in these, and a plan named them as the rows stood
NAMED_AS_THE_ROWS_STOOD = (9042, 9059, 9065, 5066)


@pytest.mark.parametrize("seed", [*NAMED_AS_THE_ROWS_STOOD, *range(500, 530)])
def test_the_order_of_the_equipment_does_not_change_the_plan(seed: int) -> None:
    known = replace(random_house(seed), vessels=VESSELS, balances=BALANCES)
    made = plan(known)
    for other in range(4):
        assert plan(with_other_equipment(known, other)) == made, f"house {seed}"


# two of a kind, and spans of days that overlap: nothing but its name tells one from the other
BALANCES = (
    Balance("B1", 100_000),
    Balance("B2", 10_000, ((day("01-11"), day("01-22")), (day("01-18"), day("02-05")))),
    Balance("B3", 10_000, ((day("01-18"), day("01-29")),)),
)


def with_other_equipment(known: Facts, seed: int) -> Facts:
    """The same house, with vessels and balances, and the days each is away, in another order."""
    luck = Random(seed)
    vessels = [replace(v, away=tuple(shuffled(luck, v.away))) for v in known.vessels]
    balances = [replace(b, away=tuple(shuffled(luck, b.away))) for b in known.balances]
    return replace(
        known,
        vessels=tuple(shuffled(luck, vessels)),
        balances=tuple(shuffled(luck, balances)),
    )


def with_other_orders(known: Facts, seed: int) -> Facts:
    luck = Random(seed)
    lines = {
        key: replace(line, packs=tuple(shuffled(luck, line.packs)))
        for key, line in known.lines.items()
    }
    return replace(known, lines=lines, placed=tuple(shuffled(luck, known.placed)))


def test_a_plan_with_a_set_in_it_could_not_be_told() -> None:
    with pytest.raises(AssertionError):
        as_text((frozenset({"a"}),))


def test_figures_are_told_to_ten_places() -> None:
    assert as_text(0.1 + 0.2) == as_text(0.3) == "0.3"
    assert as_text(0.3) != as_text(0.3000001)
