from __future__ import annotations

import random
from collections.abc import Sequence
from typing import Any, Literal

import pytest
import scipy.optimize

from stockroom.errors import BadAmount
from stockroom.lots import packs as rooms
from stockroom.lots.packs import cover

PACKS = [(25, 9), (100, 22), (250, 40), (500, 65), (1000, 105)]
Mode = Literal["price", "excess"]


def figures(need: int, packs: Sequence[tuple[int, int]], counts: Sequence[int]) -> tuple[int, ...]:
    """Price, excess and number of packs."""
    total = sum(size * n for (size, _), n in zip(packs, counts, strict=True))
    price = sum(each * n for (_, each), n in zip(packs, counts, strict=True))
    assert total >= need
    return price, total - need, sum(counts)


def by_trial(need: int, packs: Sequence[tuple[int, int]], first: Mode) -> tuple[int, ...]:
    """The best figures of every need from 1 up, pack by pack."""
    rows = [(0, 0, 0)]
    for wanted in range(1, need + 1):
        tried = []
        for size, price in packs:
            before = rows[max(0, wanted - size)]
            tried.append((before[0] + price, before[1] + size, before[2] + 1))
        rows.append(min(tried, key=lambda each: each if first == "price" else (*each[1:], each[0])))
    price, total, number = rows[need]
    return price, total - need, number


def test_620_g_are_cheapest_as_500_100_and_25() -> None:
    assert cover(620, PACKS) == (1, 1, 0, 1, 0)
    assert figures(620, PACKS, cover(620, PACKS)) == (96, 5, 3)


@pytest.mark.parametrize(
    ("need", "counts"),
    [
        (1, (1, 0, 0, 0, 0)),
        (250, (1, 0, 0, 0, 0)),
        (251, (0, 1, 0, 0, 0)),
        (501, (1, 1, 0, 0, 0)),
        (12_001, (1, 0, 0, 1, 2)),
    ],
)  # a well-known exercise (from memory), answers computed by hand
def test_least_excess_then_fewest_packs(need: int, counts: tuple[int, ...]) -> None:
    sizes = [(size, 0) for size in (250, 500, 1000, 2000, 5000)]
    assert cover(need, sizes, first="excess") == counts


def test_nothing_needed_takes_no_packs() -> None:
    assert cover(0, PACKS) == cover(-5, PACKS) == (0, 0, 0, 0, 0)


def test_one_dear_small_pack_beside_a_cheap_large_one() -> None:
    # 10 for 8 beats 6 small for 12, though it leaves 4 over
    assert cover(6, [(1, 2), (10, 8)]) == (0, 1)
    assert cover(6, [(1, 2), (10, 8)], first="excess") == (6, 0)


def test_equal_prices_take_the_least_excess_then_the_fewest_packs() -> None:
    assert cover(8, [(4, 5), (8, 10), (9, 10)]) == (0, 1, 0)


def test_the_order_of_the_packs_does_not_matter() -> None:
    for need in range(1, 700, 37):
        there, back = cover(need, PACKS), cover(need, PACKS[::-1])
        assert there == back[::-1]


def test_two_hundred_random_needs_cost_what_trial_and_a_solver_find() -> None:
    chance = random.Random(1)
    for n in range(200):
        need = chance.randint(1, 9000)
        packs = [
            (size, round(chance.uniform(0.8, 1.3) * 100 * size**0.8))
            for size in (25, 100, 250, 500, 1000, 2500)
        ]
        found = figures(need, packs, cover(need, packs))
        in_25s = [(size // 25, price) for size, price in packs]
        assert found[0] == by_trial(-(-need // 25), in_25s, "price")[0]
        if n % 8 == 0:
            assert found[0] == pytest.approx(_by_solver(need, packs), abs=1e-3)


def _by_solver(need: int, packs: list[tuple[int, int]]) -> float:
    solver: Any = scipy.optimize
    return float(
        solver.milp(
            [price for _, price in packs],
            constraints=solver.LinearConstraint([[size for size, _ in packs]], need),
            integrality=[1] * len(packs),
            options={"mip_rel_gap": 0},
        ).fun
    )


@pytest.mark.parametrize("first", ["price", "excess"])
def test_random_needs_and_packs_agree_with_trying_every_need(first: Mode) -> None:
    chance = random.Random(2)
    for _ in range(400):
        largest = chance.choice((6, 20, 60))
        packs = [
            (chance.randint(1, largest), chance.randint(0, chance.choice((3, 40))))
            for _ in range(chance.randint(1, 5))
        ]
        need = chance.randint(1, chance.choice((5, 50, 300)))
        counts = cover(need, packs, first=first)
        assert figures(need, packs, counts) == by_trial(need, packs, first), (packs, need)


def test_both_ways_of_working_are_tried_and_give_the_same_figures() -> None:
    """The argument by remainders, held against the other way wherever it gives an answer."""
    chance, answered = random.Random(3), 0
    for _ in range(300):
        sizes = chance.sample(range(1, 40), 4)
        packs = [(size, chance.randint(1, 30)) for size in sizes]
        need = chance.randint(1, 200)
        keys = rooms._keys(need, sizes, [price for _, price in packs], "price")
        short_way = rooms._by_remainders(need, sizes, keys)
        long_way = rooms._by_need(need, sizes, keys)
        if short_way is not None:
            answered += 1
            assert figures(need, packs, short_way) == figures(need, packs, long_way)
    assert 50 < answered < 300


def test_a_million_grams_with_a_common_divisor_of_1_take_few_steps(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setattr(rooms, "MOST_STEPS", 20_000)  # four packs: 5 000 units and no more
    packs = [(250, 50), (453, 100), (1000, 170), (2500, 401)]
    # worked by hand: 0.1604 a gram in the largest pack, 0.17 and more in the others
    assert cover(1_000_000, packs) == (0, 0, 0, 400)
    counts = cover(1_000_453, packs)
    assert figures(1_000_453, packs, counts)[0] == 400 * 401 + 100


def test_what_takes_too_long_is_said_and_not_begun() -> None:
    with pytest.raises(BadAmount, match="99999999 in packs of 9999991, 10000019"):
        cover(99_999_999, [(9_999_991, 5), (10_000_019, 6)], first="excess")


@pytest.mark.parametrize("pack", [(0, 5), (-1, 5), (10, -1)])
def test_a_pack_without_a_size_or_with_a_negative_price_is_told(pack: tuple[int, int]) -> None:
    with pytest.raises(BadAmount, match=f"pack of {pack[0]} at {pack[1]}"):
        cover(10, [(5, 5), pack])


def test_no_pack_at_all_is_told() -> None:
    with pytest.raises(BadAmount, match="no pack to cover 10"):
        cover(10, [])
