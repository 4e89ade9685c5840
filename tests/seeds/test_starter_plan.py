"""The starter house with a small prep room of its own: it loads, and what is made comes out right.

The expected amounts for a dm³ are worked out by hand from molar masses, strengths and densities.
"""

from __future__ import annotations

import csv
import shutil
from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.measure.amounts import PER_UNIT
from stockroom.service.database import new_store, seeds_folder

if TYPE_CHECKING:
    from stockroom.planning.decisions import Plan

# a class practical and what it wants of each line, in cm³
WANTED = {
    "copper(II) sulfate 0.500 mol/dm3": 1000,
    "sulfuric acid 2.00 mol/dm3": 5000,
    "hydrochloric acid 2.00 mol/dm3": 2000,
    "sodium hydroxide 0.400 mol/dm3": 1000,
    "sodium carbonate 0.500 mol/dm3": 500,
    "sodium thiosulfate 0.200 mol/dm3": 2000,
    "ammonium iron(II) sulfate 0.100 mol/dm3": 500,
    "hydrogen peroxide 10 vol": 500,
    "glucose 10 % w/v": 500,
    "Benedict's reagent": 500,
}
# what stands on the shelves, in g for solids and cm³ for the rest
HELD = {
    "copper(II) sulfate pentahydrate": 1000,
    "sulfuric acid 98 % w/w": 2500,
    "hydrochloric acid 36 % w/w": 2500,
    "sodium hydroxide pellets": 1000,
    "sodium carbonate, anhydrous": 1000,
    "sodium thiosulfate pentahydrate": 1000,
    "ammonium iron(II) sulfate hexahydrate": 500,
    "hydrogen peroxide 100 vol": 500,
    "glucose monohydrate": 500,
    "trisodium citrate dihydrate": 500,
}
# of each ingredient for 1 dm³, worked out by hand, in g for solids and cm³ for the rest
PER_DM3 = {
    # 0.500 × 249.69
    "copper(II) sulfate 0.500 mol/dm3": {"copper(II) sulfate pentahydrate": 124.8},
    # 98 % at 1.84 g/cm³ is 18.39 mol/dm³
    "sulfuric acid 2.00 mol/dm3": {"sulfuric acid 98 % w/w": 108.8},
    # 36 % at 1.18 g/cm³ is 11.65 mol/dm³
    "hydrochloric acid 2.00 mol/dm3": {"hydrochloric acid 36 % w/w": 171.7},
    # 0.400 × 40.00 ÷ 0.97
    "sodium hydroxide 0.400 mol/dm3": {"sodium hydroxide pellets": 16.49},
    # 0.500 × 105.99
    "sodium carbonate 0.500 mol/dm3": {"sodium carbonate, anhydrous": 52.99},
    # one in five of the stock, and 1.00 × 248.18 in that
    "sodium thiosulfate 0.200 mol/dm3": {"sodium thiosulfate 1.00 mol/dm3": 200},
    "sodium thiosulfate 1.00 mol/dm3": {"sodium thiosulfate pentahydrate": 248.2},
    # 0.100 × 392.14, in acid one in four of the stock
    "ammonium iron(II) sulfate 0.100 mol/dm3": {
        "ammonium iron(II) sulfate hexahydrate": 39.21,
        "sulfuric acid 0.500 mol/dm3": 1000,
    },
    "sulfuric acid 0.500 mol/dm3": {"sulfuric acid 2.00 mol/dm3": 250},
    "hydrogen peroxide 10 vol": {"hydrogen peroxide 100 vol": 100},
    # 100 × 198.17 ÷ 180.16
    "glucose 10 % w/v": {"glucose monohydrate": 110.0},
    "Benedict's reagent": {
        "trisodium citrate dihydrate": 173,
        "sodium carbonate, anhydrous": 100,
        "copper(II) sulfate pentahydrate": 17.3,
    },
}
# mass fractions and hydrates are worked out to four figures above
CLOSE = 5e-4


def small_house() -> dict[str, list[dict[str, str]]]:
    """A term, a place, a balance, carboys, one practical booked once, and full bottles."""
    needs = [
        {"recipe": "P1", "version": "1", "number": str(n), "line": line, "amount_cm3": str(cm3)}
        | {"per": "class", "closeness": "rough"}
        for n, (line, cm3) in enumerate(WANTED.items(), 1)
    ]
    bottles = [
        {"bottle": f"B{n:02d}", "line": line, "received": "2026-12-01", "place": "A1"}
        | {f"{stem}_{'cm3' if '%' in line or 'vol' in line else 'g'}": str(held)
           for stem in ("size", "left")}
        | {"left_on": "2026-12-18"}
        for n, (line, held) in enumerate(HELD.items(), 1)
    ]  # fmt: skip
    booked = {"booking": "K1", "recipe": "P1", "version": "1", "on": "2027-01-20", "time": "10:00"}
    return {
        "house": [{"setting": "batch_step_cm3", "value": "1"}],
        "terms": [{"term": "spring", "from": "2027-01-04", "to": "2027-03-26"}],
        "places": [{"place": "A1", "name": "cupboard", "temperature_c": "20"}],
        "departments": [{"department": "CH", "name": "chemistry"}],
        "balances": [{"balance": "BAL1", "step_g": "0.01"}],
        "vessels": [{"vessel": "carboy", "size_cm3": "10000"}],
        "recipes": [{"recipe": "P1", "version": "1", "title": "A bit of everything"}],
        "recipe_lines": needs,
        "bookings": [
            booked | {"groups": "1", "spare_percent": "0", "department": "CH", "firmness": "firm"}
        ],
        "bottles": bottles,
    }


@pytest.fixture(scope="module")
def plan(tmp_path_factory: pytest.TempPathFactory) -> Plan:
    from stockroom.service.plan import term_plan

    folder = tmp_path_factory.mktemp("starter")
    for path in (seeds_folder() / "starter").glob("*.csv"):
        shutil.copy(path, folder)
    for name, rows in small_house().items():
        columns = list(dict.fromkeys(column for row in rows for column in row))
        with (folder / f"{name}.csv").open("w", encoding="utf-8", newline="") as file:
            writer = csv.DictWriter(file, columns, restval="")
            writer.writeheader()
            writer.writerows(rows)
    store = folder / "starter.sqlite"
    new_store(store, tables=folder)
    return term_plan(store, as_at=date(2027, 1, 4))


def test_everything_is_made_from_what_stands_there(plan: Plan) -> None:
    assert {answer.line: answer.outcome for answer in plan.needs} == dict.fromkeys(WANTED, "make")
    assert not plan.short
    assert not plan.orders


@pytest.mark.parametrize("line", PER_DM3)
def test_the_amounts_for_a_dm3_are_those_worked_out_by_hand(plan: Plan, line: str) -> None:
    for make in (make for make in plan.makes if make.line == line):
        volume = make.volume / 1_000_000
        drawn: dict[str, float] = {}
        for draw in make.sources:
            drawn[draw.line] = drawn.get(draw.line, 0) + draw.amount / PER_UNIT[draw.kind]
        found = {name: amount / volume for name, amount in drawn.items()}
        assert found == pytest.approx(PER_DM3[line], rel=CLOSE)


def test_only_what_the_practical_wants_is_made(plan: Plan) -> None:
    assert {make.line for make in plan.makes} == set(PER_DM3)


def test_the_caution_stands_on_the_make_and_the_life_is_the_starters(plan: Plan) -> None:
    made = {make.line: make for make in plan.makes}
    acid = made["sulfuric acid 2.00 mol/dm3"]
    assert "Acid into water, slowly and stirring, never the reverse" in acid.cautions
    peroxide = made["hydrogen peroxide 10 vol"]
    assert peroxide.good_until is not None
    assert (peroxide.good_until - peroxide.on).days == 3
