"""Which packs: the exact cheapest cover, by what will be used of it before it lapses."""

from __future__ import annotations

import itertools
from dataclasses import replace
from datetime import timedelta

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    keeps,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)
from hypothesis import given
from hypothesis import strategies as st

from stockroom.keeping.rules import Origin
from stockroom.measure.days import PrintedDate
from stockroom.planning.buying.packs import Rate, choose, keeps_unopened, years
from stockroom.planning.decisions import Order
from stockroom.planning.facts import Facts, Line, Pack

SMALL = Pack(g(100), "100 g", 900)
LARGE = Pack(g(500), "500 g", 4400)
SACK = Pack(g(2500), "2.5 kg", 9000)


def chosen(row: list[Pack], wanted: float, used: float | None = None) -> tuple[str, int, int]:
    choice = choose(row, g(wanted), g(wanted if used is None else used))
    return choice.text, choice.count, choice.pence


def test_a_mixture_of_sizes_covers_for_least_money() -> None:
    assert chosen([SMALL, LARGE, SACK], 558) == ("500 g + 100 g", 1, 5300)
    assert chosen([SMALL, LARGE, SACK], 490) == ("500 g", 1, 4400)
    assert chosen([SMALL, LARGE, SACK], 690) == ("500 g + 2 × 100 g", 1, 6200)


@pytest.mark.parametrize(("used", "text"), [(42, "100 g"), (300, "100 g"), (2500, "2.5 kg")])
def test_a_larger_pack_only_where_it_is_used(used: float, text: str) -> None:
    # 2.5 kg is 3.6 p/g against 9 p/g, but only for whoever uses it
    assert chosen([SMALL, SACK], 42, used)[0] == text


def test_a_penny_by_the_gram_is_not_worth_more_money_now() -> None:
    # 8.8 p/g and 9 p/g: five times the money for a fiftieth
    assert chosen([SMALL, LARGE], 42, 600) == ("100 g", 1, 900)


def test_no_pack_known_says_so() -> None:
    assert chosen([], 5) == ("no pack entered", 1, 0)


sizes = st.lists(st.tuples(st.integers(1, 40), st.integers(0, 500)), min_size=1, max_size=4)


@given(sizes, st.integers(1, 120))
def test_as_cheap_as_trying_everything(row: list[tuple[int, int]], wanted: int) -> None:
    packs = [Pack(g(size), f"{size} g", pence) for size, pence in row]
    counts = [range(-(-wanted // size) + 1) for size, _ in row]
    if len(list(itertools.islice(itertools.product(*counts), 20_001))) > 20_000:
        return
    cheapest = min(
        sum(n * pence for n, (_, pence) in zip(many, row, strict=True))
        for many in itertools.product(*counts)
        if sum(n * size for n, (size, _) in zip(many, row, strict=True)) >= wanted
    )
    choice = choose(packs, g(wanted), g(wanted))
    assert choice.pence == cheapest
    assert choice.size >= g(wanted)


@given(sizes, st.integers(1, 120), st.integers(0, 400))
def test_what_is_used_never_makes_it_cost_more_by_use(
    row: list[tuple[int, int]], wanted: int, more: int
) -> None:
    packs = [Pack(g(size), f"{size} g", pence) for size, pence in row]
    used = g(wanted + more)
    least, choice = choose(packs, g(wanted), g(wanted)), choose(packs, g(wanted), used)
    assert choice.pence * min(least.size, used) <= least.pence * min(choice.size, used)
    assert choice.dearer == choice.pence - least.pence
    assert choose(list(reversed(packs)), g(wanted), used) == choice


# -- in the plan -----------------------------------------------------------------------


def order_of(salt: Line, *, held: float = 0, grams: float = 42) -> Order:
    """42 g of a salt in the term, from 4 January to 26 March: 81 days."""
    half = solution(0.5)
    made = planned(
        [salt, half], methods=[made_from(half, salt)],
        recipes=[recipe(wants(half, cm3(20 * grams)))], bookings=[booking("K1", "02-10")],
        bottles=[bought_bottle("B1", salt, g(held), "2026-06-01")] if held else [],
    )  # fmt: skip
    (order,) = made.orders
    return order


def test_five_hundred_grams_and_not_two_and_a_half_kilos() -> None:
    """Need 42 g, level 100: 42 g in 81 days is 189 g a year, so 2.5 kg would last 13 years."""
    order = order_of(solid(level=g(100), packs=(LARGE, SACK)), held=120)
    assert (order.pack, order.packs) == ("500 g", 1)
    said = "; ".join(order.reasons)
    assert "500 g lasts 2.6 years at this rate" in said
    assert "and not 2.5 kg for £90.00: it lasts 13 years at this rate" in said


def test_a_mixture_is_one_set_with_its_sizes_beside_it() -> None:
    order = order_of(solid(packs=(SMALL, LARGE)), grams=560)
    assert (order.packs, order.pack, order.amount) == (1, "500 g + 100 g", g(600))
    assert order.mixture == (("500 g", 1, 4400), ("100 g", 1, 900))
    assert "two sizes, £1.00 less than 6 × 100 g" in order.reasons


def test_the_slower_of_two_packs_dates_the_order() -> None:
    slow = replace(LARGE, lead=15)
    quick = order_of(solid(packs=(SMALL, LARGE)), grams=560)
    late = order_of(solid(packs=(SMALL, slow)), grams=560)
    assert quick.order_by == day("01-25")
    assert late.order_by == day("01-18")


def test_how_long_an_unopened_pack_keeps() -> None:
    salt = solid(rules=(keeps(100, Origin.RECEIVED),))
    made = planned([salt])
    assert made.orders == ()
    facts = _house(salt, printed="2026-12-31")
    # the last bottle came on 1 June with seven months on it; the house gives a hundred days
    assert keeps_unopened(facts, salt, day("2027-02-01")) == day("2027-05-12")
    assert keeps_unopened(facts, solid(), day("2027-02-01")) == day("2027-09-02")
    assert keeps_unopened(_house(salt), solid("other"), day("2027-02-01")) is None


def _house(salt: Line, printed: str = "") -> Facts:
    from houses import house

    stamped = PrintedDate(printed, (day(printed),)) if printed else None
    return house([salt], bottles=[bought_bottle("B1", salt, g(1), "2026-06-01", printed=stamped)])


@pytest.mark.parametrize(
    ("days", "said"),
    [
        (1, "1 month"),
        (89, "2 months"),
        (365, "1 year"),
        (765, "2.1 years"),
        (840, "2.3 years"),
        (4100, "11 years"),
    ],
)
def test_a_length_of_stock_in_words(days: int, said: str) -> None:
    assert years(timedelta(days=days)) == said


def test_nothing_used_lasts_nobody_knows_how_long() -> None:
    assert Rate(0, 81).lasts(g(100)) is None
    assert Rate(1, 81).lasts(g(10**6)) == timedelta(days=36_500)


def test_a_level_above_the_largest_pack_is_queried() -> None:
    salt = solid(level=g(300), packs=(SMALL,))
    made = planned([salt], bottles=[bought_bottle("B1", salt, g(400))])
    assert [note.text for note in made.notes if note.subject == "salt"] == [
        "its level of 300 g is above its largest pack of 100 g: is that meant?"
    ]
    plain = planned([replace(salt, level=g(100))], bottles=[bought_bottle("B1", salt, g(400))])
    assert plain.notes == ()
    assert pack(g(100), 9).pence == 900
