"""What the replay has found of the planner, each as the smallest house that shows it.

A mark says that the planner is still to be mended; once it is, the mark must go.
"""

from __future__ import annotations

from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    found,
    g,
    house,
    made_bottle,
    made_from,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.planning.facts import Closeness, Ingredient
from stockroom.planning.plan import plan
from stockroom.planning.replaying.replay import replay

SALT = solid()
JAR = bought_bottle("B1", SALT, g(500), opened=day("01-04"))
FIFTH = solution(0.2, "fifth")


def test_a_make_that_fades_before_it_is_diluted_gives_more() -> None:
    """1.00 mol/dm³ made on 12 January holds 0.92 on 1 February: 108 cm³ are as 100 were."""
    fading = solution(1.0, "stock", rules=(Rule(RuleKind.FADES, law=Law(1, 0.004)),))
    known = house(
        [SALT, fading, FIFTH],
        methods=[made_from(fading, SALT, minutes=60), made_from(FIFTH, fading)],
        recipes=[recipe(wants(FIFTH, cm3(500), freshest_days=2))],
        bookings=[booking("K1", "01-13"), booking("K2", "02-01")],
        bottles=[JAR],
    )
    assert replay(known, plan(known)) == ()


def test_a_millionth_of_a_litre_of_rounding_is_nothing_to_buy() -> None:
    stock = solution(1.0, "stock")
    checked = found("01-04", 1.03)
    held = Ingredient((stock.key, SALT.key), only_if_held=frozenset({stock.key}))
    known = house(
        [SALT, stock, FIFTH],
        methods=[made_from(FIFTH, held)],
        recipes=[
            recipe(wants(FIFTH, cm3(140)), code="R1"),
            recipe(wants(FIFTH, cm3(540)), code="R2"),
            recipe(wants(stock, cm3(480), closeness=Closeness.PRESENT), code="R3"),
        ],
        bookings=[
            booking("K1", "01-12", recipe="R1"),
            booking("K2", "01-13", recipe="R2"),
            booking("K3", "02-15", recipe="R3"),
        ],
        bottles=[
            JAR,
            made_bottle("S1", stock, cm3(400), checks=(checked,)),
            made_bottle("S2", stock, cm3(400), checks=(checked,)),
        ],
    )
    assert replay(known, plan(known)) == ()
