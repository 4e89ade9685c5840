"""Between several sources: which is preferred, who gets the last of it, what may be mixed."""

from __future__ import annotations

from dataclasses import replace

import pytest
from houses import (
    answer,
    booking,
    bought_bottle,
    cm3,
    found,
    g,
    house,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Bottle, Firmness, Form, House, Ingredient, Line, Method
from stockroom.planning.plan import plan

TENTH = solution(0.1)

# -- strengths that may be put together ---------------------------------------------


@pytest.mark.parametrize(
    ("other", "outcome"),
    [(0.10005, Outcome.HAVE), (0.1005, Outcome.SHORT), (0.0995, Outcome.SHORT)],
)
def test_only_bottles_within_a_thousandth_are_put_together(other: float, outcome: Outcome) -> None:
    row = [
        made_bottle(number, TENTH, cm3(300), checks=(found("01-04", strength),))
        for number, strength in (("S1", 0.1), ("S2", other))
    ]
    need = recipe(wants(TENTH, cm3(500)))
    made = planned([TENTH], recipes=[need], bookings=[booking("K1", "01-12")], bottles=row)
    assert outcomes(made) == {"K1.1": outcome}


# -- the last of what two fall back on ------------------------------------------------


FIRST, OTHER, LAST_ONE = solid("a first"), solid("b other"), solid("z last")
ONE, TWO = solution(1.0, "one"), solution(1.0, "two")


def both_fall_back(earlier: Line, later: Line) -> Plan:
    """A firm class of one line, a pencilled one of another, and salt for one of them."""
    methods = [
        made_from(ONE, Ingredient((FIRST.key, LAST_ONE.key))),
        made_from(TWO, Ingredient((OTHER.key, LAST_ONE.key))),
    ]
    return planned(
        [FIRST, OTHER, LAST_ONE, ONE, TWO], methods=methods,
        recipes=[recipe(wants(earlier, cm3(100))), recipe(wants(later, cm3(100)), code="R02")],
        bookings=[
            booking("K1", "02-10"),
            booking("K2", "02-12", recipe="R02", firmness=Firmness.PENCILLED),
        ],
        bottles=[bought_bottle("B1", LAST_ONE, g(10))],
    )  # fmt: skip


@pytest.mark.parametrize(("earlier", "later"), [(ONE, TWO), (TWO, ONE)])
def test_the_last_of_a_later_choice_goes_to_the_firm_class(earlier: Line, later: Line) -> None:
    made = both_fall_back(earlier, later)
    assert outcomes(made) == {"K1.1": Outcome.MAKE, "K2.1": Outcome.BUY}


@pytest.mark.parametrize("firm_falls_back", [True, False])
def test_whether_it_is_a_first_or_a_later_choice_does_not_matter(firm_falls_back: bool) -> None:
    one, two = recipe(wants(ONE, cm3(100)), code="R1"), recipe(wants(LAST_ONE, g(10)), code="R2")
    firm, pencilled = ("R1", "R2") if firm_falls_back else ("R2", "R1")
    made = planned(
        [FIRST, LAST_ONE, ONE], methods=[made_from(ONE, Ingredient((FIRST.key, LAST_ONE.key)))],
        recipes=[one, two],
        bookings=[
            booking("K1", "02-10", recipe=firm),
            booking("K2", "02-12", recipe=pencilled, firmness=Firmness.PENCILLED),
        ],
        bottles=[bought_bottle("B1", LAST_ONE, g(10))],
    )  # fmt: skip
    assert outcomes(made)["K1.1"] is (Outcome.MAKE if firm_falls_back else Outcome.HAVE)
    assert outcomes(made)["K2.1"] is Outcome.BUY


# -- what a method nobody wrote prefers ------------------------------------------------


def same(line: Line) -> Line:
    return replace(line, substance="acid")


STRONG, WEAK, WEAKER = (solution(strength, "acid") for strength in (2.0, 0.5, 0.1))
CRYSTALS, FLAKES = same(solid("crystals")), same(solid("flakes"))
NEAT = Line(
    "acid neat", "acid", "acid", Form.LIQUID, Kind.VOLUME, 10.0, "mol/dm3", "10 mol/dm3"
)  # fmt: skip
HELD = {
    "strong": made_bottle("S1", STRONG, cm3(500)),
    "weaker": made_bottle("S2", WEAKER, cm3(500)),
    "flakes": bought_bottle("B1", FLAKES, g(500)),
    "crystals": bought_bottle("B2", CRYSTALS, g(500)),
    "neat": bought_bottle("B3", NEAT, cm3(500)),
}


def derived(*bottles: Bottle) -> Plan:
    facts = house(
        [STRONG, WEAK, WEAKER, CRYSTALS, FLAKES, NEAT],
        methods=[Method(WEAK.key, ()), Method(STRONG.key, ())],
        recipes=[recipe(wants(WEAK, cm3(100)))], bookings=[booking("K1", "02-12")],
        bottles=bottles,
    )  # fmt: skip
    return plan(with_derived(facts))


@pytest.mark.parametrize(
    ("held", "source"),
    [
        (("strong", "flakes", "crystals", "neat", "weaker"), STRONG),
        (("flakes", "crystals", "neat", "weaker"), CRYSTALS),
        (("flakes", "neat", "weaker"), FLAKES),
        (("neat", "weaker"), NEAT),
        # nothing held: the first solid is bought, and the stronger solution not made for it
        (("weaker",), CRYSTALS),
    ],
)
def test_it_comes_from_a_stronger_solution_then_a_solid_then_a_liquid(
    held: tuple[str, ...], source: Line
) -> None:
    made = derived(*(HELD[name] for name in held))
    assert [one.line for one in make_of(made, WEAK).sources] == [source.key]
    assert len(made.makes) == 1


# -- rounding beyond what there is ------------------------------------------------------


BESIDE = solution(0.1, "beside")


def chained(jar: float, volume: float) -> Plan:
    """1 mol/dm³ made from a jar of so many g at 100 g/dm³, and so many cm³ of 0.1 from that.

    Beside it 101 cm³ of another line, from a jar with plenty.
    """
    salt, strong, weak = solid(), solution(1.0, "strong"), solution(0.1, "weak")
    methods = [made_from(strong, salt), made_from(weak, strong), made_from(BESIDE, OTHER)]
    return planned(
        [salt, strong, weak, OTHER, BESIDE], methods=methods,
        recipes=[recipe(wants(weak, cm3(volume)), wants(BESIDE, cm3(101)))],
        bookings=[booking("K1", "02-12")],
        bottles=[bought_bottle("B1", salt, g(jar)), bought_bottle("B2", OTHER, g(500))],
        house=House(batch_step=cm3(50)),
    )  # fmt: skip


def volumes(made: Plan) -> dict[str, int]:
    return {make.item: make.volume for make in made.makes}


def test_where_rounding_up_outgrows_a_chain_the_exact_need_is_made() -> None:
    # 1 001 cm³ of 0.1 take 10.01 g; rounded to 1 050 they would take 10.5 of the 10.2 there are
    made = chained(10.2, 1001)
    assert answer(made, "K1.1").outcome is Outcome.MAKE
    assert volumes(made) == {"strong": cm3(100.1), "weak": cm3(1001), "beside": cm3(150)}
    assert made.orders == ()


def test_where_the_chain_is_long_enough_it_is_rounded_up() -> None:
    whole = {"strong": cm3(150), "weak": cm3(1050), "beside": cm3(150)}
    assert volumes(chained(15, 1001)) == whole


def test_the_exact_need_beyond_the_jar_is_still_bought() -> None:
    made = chained(10, 1001)
    assert answer(made, "K1.1").outcome is Outcome.BUY
    assert len(made.orders) == 1
