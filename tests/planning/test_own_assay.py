"""A solid is weighed by the assay of the very bottle, in the plan and in its replay."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import pytest
from houses import booking, bought_bottle, cm3, g, house, made_from, recipe, solid, solution, wants

from stockroom.planning.facts import Bottle, Facts
from stockroom.planning.plan import plan
from stockroom.planning.replaying.replay import replay

SALT = solid()  # 100 g/mol
BRINE = solution(1.0, substance="salt")


def shelf(*bottles: Bottle) -> Facts:
    return house(
        [SALT, BRINE],
        methods=[made_from(BRINE, SALT)],
        recipes=[recipe(wants(BRINE, cm3(1000)))],
        bookings=[booking("K01", "01-12")],
        bottles=bottles,
    )


def jar(number: str, grams: float, assay: float | None) -> Bottle:
    return replace(bought_bottle(number, SALT, g(grams)), assay=assay)


@pytest.mark.parametrize(
    ("assay", "grams"), [(None, 100.0), (1.0, 100.0), (0.8, 125.0), (0.5, 200.0)]
)
def test_the_make_weighs_by_the_assay_of_its_bottle(assay: float | None, grams: float) -> None:
    facts = shelf(jar("B01", 500, assay))
    whole = plan(facts)
    [source] = whole.makes[0].sources
    assert (source.bottle, source.amount, source.strength) == ("B01", g(grams), None)
    assert replay(facts, whole) == ()


def test_two_jars_of_two_assays_make_it_up_together() -> None:
    # 40 g at 0.5 are 20 g of salt; the other 80 g are all salt
    facts = shelf(jar("B01", 40, 0.5), jar("B02", 90, None))
    whole = plan(facts)
    drawn = {source.bottle: source.amount for source in whole.makes[0].sources}
    assert drawn == {"B01": g(40), "B02": g(80)}
    assert replay(facts, whole) == ()


def test_a_replay_by_the_lines_assay_would_be_caught() -> None:
    facts = shelf(jar("B01", 500, 0.5))
    make = plan(facts).makes[0]
    half = replace(make, sources=(replace(make.sources[0], amount=g(100)),))
    assert replay(facts, replace(plan(facts), makes=(half,)))


@pytest.mark.parametrize("seed", range(20))
def test_jars_of_many_assays_give_the_solute_whole(seed: int) -> None:
    chance = Random(seed)
    jars = [
        jar(f"B{n:02d}", chance.uniform(5, 40), chance.choice([None, 0.9, 0.98, 0.995]))
        for n in range(1, 9)
    ]
    facts = shelf(*jars)
    whole = plan(facts)
    assert replay(facts, whole) == ()
    held = sum(one.left / 1e6 * (one.assay or 1.0) for one in jars)
    given = {one.number: one.assay or 1.0 for one in jars}
    if whole.makes:
        drawn = sum(s.amount / 1e6 * given[s.bottle] for s in whole.makes[0].sources)
        assert drawn == pytest.approx(100.0, abs=1e-4)
    else:
        assert held < 110.0
