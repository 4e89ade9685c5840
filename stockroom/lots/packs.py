"""Which packs cover a need: exactly the cheapest, or exactly the least too much."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import gcd
from typing import Literal

from stockroom.errors import BadAmount

Pack = tuple[int, int]
"""Size and price of one pack, in whole units of the caller's own: say g and pence."""

MOST_STEPS = 20_000_000
"""Steps of the slow way we are ready to wait for: some ten seconds. Our choice."""


def cover(
    need: int, packs: Sequence[Pack], *, first: Literal["price", "excess"] = "price"
) -> tuple[int, ...]:
    """How many of each pack, in the order given, so that the sizes add up to `need` or more.

    `first="price"`: the least price, then the least excess, then the fewest packs.
    `first="excess"`: the least excess, then the fewest packs, then the least price. What is
    still equal is settled the same way whatever the order of the row. A need of 0 or less
    takes no packs. `BadAmount` where there is no pack, a size is not above 0 or a price is
    below 0.

    Work: in units of the sizes' greatest common divisor, packs × the best-value pack's size,
    whatever the need. Only where that would put more of the other packs in than the need
    holds is it packs × need, and then `BadAmount` for more than `MOST_STEPS`.
    """
    for size, price in packs:
        if size <= 0 or price < 0:
            raise BadAmount(
                f"A pack of {size} at {price} cannot be bought.", "Correct its size or its price."
            )
    if not packs:
        raise BadAmount(f"There is no pack to cover {need} with.", "Add a pack to the line.")
    if need <= 0:
        return (0,) * len(packs)
    order = sorted(range(len(packs)), key=lambda n: (-packs[n][0], packs[n][1], n))
    unit = gcd(*(size for size, _ in packs))
    sizes = [packs[n][0] // unit for n in order]
    units = -(-need // unit)
    keys = _keys(units, sizes, [packs[n][1] for n in order], first)
    most = MOST_STEPS // len(packs)
    found = _by_remainders(units, sizes, keys) if max(sizes) <= most else None
    if found is None and units > most:
        words = ", ".join(str(size) for size, _ in packs)
        raise BadAmount(
            f"A need of {need} in packs of {words} takes too long to cover exactly.",
            "Round the sizes so that they share a larger common divisor.",
        )
    found = found or _by_need(units, sizes, keys)
    counts = dict(zip(order, found, strict=True))
    return tuple(counts[n] for n in range(len(packs)))


def _keys(need: int, sizes: list[int], prices: list[int], first: str) -> list[int]:
    """One whole number for each pack, so that the sums of it compare in the order wanted.

    Without a pack to spare there are at most `need` packs, of less than `need` + the largest
    size together: each figure stands clear of the one after it.
    """
    packs, total, price = need + 1, need + max(sizes), (max(prices) + 1) * (need + 1)
    if first == "price":
        return [(p * total + s) * packs + 1 for s, p in zip(sizes, prices, strict=True)]
    return [(s * packs + 1) * price + p for s, p in zip(sizes, prices, strict=True)]


def _by_remainders(need: int, sizes: list[int], keys: list[int]) -> list[int] | None:
    """Counts of least key, by remainders of the best-value pack; None where it cannot tell.

    Let b be the pack with the least key for its size. A total W costs `key[b] · W / size[b]`
    and, for each other pack in it, a surcharge `key · size[b] − key[b] · size`, never below
    0. The least surcharge of a total so depends on its remainder by `size[b]` alone, as long
    as the other packs are no more than the total itself; when they are more, it is only a
    lower bound and no answer.
    """
    best = min(range(len(sizes)), key=lambda n: Fraction(keys[n], sizes[n]))
    size = sizes[best]
    if need < size:  # the other way is the shorter one
        return None
    extra = [key * size - keys[best] * each for key, each in zip(keys, sizes, strict=True)]
    least, came_by = _surcharges(size, sizes, extra)
    bounds = (
        (keys[best] * total + surcharge, total)
        for total in range(need, need + max(sizes))
        if (surcharge := least[total % size]) is not None
    )
    _, total = min(bounds)
    counts = [0] * len(sizes)
    remainder, rest = total % size, total
    while came_by[remainder] >= 0:
        pack = came_by[remainder]
        counts[pack] += 1
        rest -= sizes[pack]
        remainder = (remainder - sizes[pack]) % size
    if rest < 0:
        return None
    counts[best] += rest // size
    return counts


def _surcharges(
    size: int, sizes: list[int], extra: list[int]
) -> tuple[list[int | None], list[int]]:
    """The least surcharge of each remainder by `size`, and the pack it came by (−1: none).

    One pack after another: adding it walks in rings through the remainders, and twice round
    a ring settles it.
    """
    least: list[int | None] = [0] + [None] * (size - 1)
    came_by = [-1] * size
    for pack, each in enumerate(sizes):
        rings = gcd(each, size)
        if each % size == 0:
            continue
        for ring in range(rings):
            here = ring
            for _ in range(2 * (size // rings)):
                there = (here + each) % size
                so_far, now = least[here], least[there]
                if so_far is not None and (now is None or so_far + extra[pack] < now):
                    least[there] = so_far + extra[pack]
                    came_by[there] = pack
                here = there
    return least, came_by


def _by_need(need: int, sizes: list[int], keys: list[int]) -> list[int]:
    """Counts of least key, by every need from 1 up: always exact."""
    least, came_by = [0] * (need + 1), [0] * (need + 1)
    rows = list(enumerate(zip(sizes, keys, strict=True)))
    for units in range(1, need + 1):
        least[units], came_by[units] = min(
            (least[units - size if units > size else 0] + key, pack) for pack, (size, key) in rows
        )
    counts = [0] * len(sizes)
    while need > 0:
        counts[came_by[need]] += 1
        need -= sizes[came_by[need]]
    return counts
