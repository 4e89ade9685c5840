"""The college's needs, term totals and bought-form totals, as worked out by hand (b).

Each row: what the bookings and recipes ask, groups × amount × (1 + spare).
"""

from __future__ import annotations

import pytest
from scenario import use

from stockroom.planning.decisions import Plan

NEEDS = """
ammonia | 2.00 | 48
ammonium iron(II) sulfate | 0.100 | 3696
amylase | 0.50 | 594
ascorbic acid | 0.10 | 352
barium chloride | 0.100 | 66
Benedict's reagent | | 264
bleach, diluted | 1 in 10 | 880
bromine water | 0.020 | 110
calcium chloride | 0.500 | 110.5
copper(II) chloride | 0.500 | 110.5
copper(II) sulfate | 0.100 | 66
copper(II) sulfate | 0.500 | 840
DCPIP | 0.10 | 352
glucose | 1.0 | 88
glucose | 9.0 | 48
hydrochloric acid | 0.400 | 132
hydrochloric acid | 1.00 | 1199
hydrogen peroxide | 0.100 | 1596
hydrogen peroxide | 90-100 vol | 300
iodine in iodide | 0.0100 | 198
iron(II) sulfate | 0.100 | 66
limewater | saturated | 990
lithium chloride | 0.500 | 110.5
nitric acid | 0.400 | 132
potassium chloride | 0.500 | 110.5
potassium iodide | 0.100 | 2128
potassium iodide | 0.500 | 352
potassium iodide | 2.00 | 60
potassium permanganate | 0.0200 | 4620
silver nitrate | 0.0500 | 66
silver nitrate | 0.100 | 96
sodium carbonate | 0.500 | 1045
sodium chloride | 0.500 | 110.5
sodium hydroxide | 0.400 | 264
sodium hydroxide | 2.00 | 24
sodium thiosulfate | 0.0500 | 798
sodium thiosulfate | 0.100 | 1056
sodium thiosulfate | 0.200 | 4048
starch | 0.5 | 310
starch | 1.0 | 990
strontium chloride | 0.500 | 110.5
sulfuric acid | 0.250 | 3458
sulfuric acid | 1.00 | 3437.25
"""
ROWS = [tuple(cell.strip() for cell in row.split("|")) for row in NEEDS.strip().splitlines()]

BY_BOOKING = [
    ("sodium thiosulfate", "0.200", {"K05": 2112, "K06": 1936}),
    ("hydrochloric acid", "1.00", {"K04": 176, "K05": 396, "K06": 363, "K07": 44, "K22": 220}),
    ("sulfuric acid", "1.00", {"K11": 1100, "K13": 1100, "K18": 5.25, "K21": 352, "K25": 880}),
    ("starch", "0.5", {"K08": 88, "K09": 88, "K21": 44, "K24": 66, "K28": 24}),
    ("lithium chloride", "0.500", {"K01": 55, "K03": 49.5, "K29": 6}),
]


@pytest.mark.parametrize(("item", "strength", "total"), ROWS)
def test_the_term_needs_of_each_solution(term: Plan, item: str, strength: str, total: str) -> None:
    assert use(term, "solution", item, strength) == float(total)


def test_nothing_else_is_needed_but_the_stand_by_for_bromine(term: Plan) -> None:
    wanted = {(item, strength) for item, strength, _ in ROWS}
    others = {
        (u.item, u.strength)
        for u in term.usage
        if u.form == "solution"
        and not any(u.item == i and u.strength.startswith(s) for i, s in wanted)
    }
    assert others == {("sodium thiosulfate", "0.500 mol/dm3")}


@pytest.mark.parametrize(("item", "strength", "wanted"), BY_BOOKING)
def test_needs_booking_by_booking(
    term: Plan, item: str, strength: str, wanted: dict[str, float]
) -> None:
    needs = [a for a in term.needs if a.item == item and a.strength.startswith(strength)]
    assert {a.booking.number: a.amount / 1000 for a in needs} == wanted


@pytest.mark.parametrize(
    ("item", "grams"),
    [
        ("ammonium iron(II) sulfate hexahydrate", 144.9),
        ("potassium iodide", 84.5),
        ("potassium permanganate", 14.6),
        ("silver nitrate", 2.19),
        ("sodium thiosulfate pentahydrate", 268),
        ("lithium chloride", 2.34),
        ("ethanoic acid, glacial", 62.7),
        ("ethanol", 20.9),
    ],
)
def test_the_term_in_bought_form(term: Plan, item: str, grams: float) -> None:
    assert use(term, "bought", item) == pytest.approx(grams, rel=2e-3)


def test_concentrated_sulfuric_goes_into_esters_and_into_two_molar(term: Plan) -> None:
    """R13 takes 15.7 cm³ as it is; 3 075 cm³ of 2.00 takes 334 cm³ more (18.4 mol/dm³)."""
    assert use(term, "bought", "sulfuric acid") == pytest.approx(
        15.675 + 3074.875 * 2 / 18.386, rel=1e-3
    )


@pytest.mark.parametrize(("item", "cm3"), [("sulfuric acid", 3075), ("hydrochloric acid", 626)])
def test_acid_inside_other_solutions_counts(term: Plan, item: str, cm3: float) -> None:
    assert use(term, "stock", item, "2.00") == pytest.approx(cm3, abs=0.5)


def test_permanganate_by_booking(term: Plan) -> None:
    found = {a.booking.number: a.amount / 1000 for a in term.needs if "permang" in a.item}
    assert found == {"K11": 1650, "K13": 1650, "K25": 1320}
