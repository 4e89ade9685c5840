"""One thing made in runs: when to make how much, at the least cost, exactly.

Wagner & Whitin (1958), Management Science 5, 89–96, with what may be kept only so long and a
price for each period besides. Known cases with their published answers are in
tests/lots/test_published_lot_sizes.py.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import accumulate
from math import inf

from stockroom.errors import BadAmount

Figure = float | Sequence[float]
"""One figure for every period, or one for each."""


def cheapest_runs(
    demand: Sequence[float],
    set_up: Figure,
    carrying: Figure,
    life: int | None = None,
    unit_cost: Figure = 0,
) -> tuple[float, list[float]]:
    """The least cost, and how much is made in each period.

    `set_up` is paid in each period something is made in, `unit_cost` for each unit made in
    it, `carrying` for each unit kept from it to the next. A unit may be used up to `life`
    periods after the one it was made in; None: however long. Nothing is ever late, and what
    is made goes to demands in one piece of time, which loses nothing: of two makes that could
    both serve a demand the cheaper one is the same for every later demand. Of equally cheap
    ways the later make is taken. Work: periods × life. `BadAmount` for a negative demand or
    life, or a row of figures that is not as long as the demand.
    """
    periods = len(demand)
    keeps = periods if life is None else life
    _check(demand, keeps)
    fixed, price = _row(set_up, periods, "set-up"), _row(unit_cost, periods, "unit cost")
    held = [0, *accumulate(_row(carrying, periods, "carrying"))]
    best: list[float] = [0]
    chosen: list[tuple[int, int]] = []
    # for each make: the cost up to now with it serving last, and the first period it serves
    running: list[tuple[float, int]] = [(inf, 0)] * periods
    for now, wanted in enumerate(demand):
        cost, made, first = inf, -1, now
        for make in range(now, max(now - keeps, 0) - 1, -1):
            so_far, begun = running[make]
            if best[now] + fixed[make] < so_far:
                so_far, begun = best[now] + fixed[make], now
            so_far += wanted * (price[make] + held[now] - held[make])
            running[make] = so_far, begun
            if so_far < cost:
                cost, made, first = so_far, make, begun
        if not wanted and best[now] <= cost:
            cost, made = best[now], -1
        best.append(cost)
        chosen.append((made, first))
    return best[-1], _makes(demand, chosen)


def _check(demand: Sequence[float], life: int) -> None:
    if life < 0:
        raise BadAmount(f"A life of {life} periods is negative.", "0 means: the same period.")
    for period, wanted in enumerate(demand, 1):
        if wanted < 0:
            raise BadAmount(f"The demand of {wanted} in period {period} is negative.", "Mend it.")


def _makes(demand: Sequence[float], chosen: list[tuple[int, int]]) -> list[float]:
    """What is made in each period, read back from the last one."""
    makes: list[float] = [0] * len(demand)
    now = len(demand) - 1
    while now >= 0:
        made, first = chosen[now]
        if made < 0:
            now -= 1
            continue
        makes[made] += sum(demand[first : now + 1])
        now = first - 1
    return makes


def _row(figure: Figure, periods: int, what: str) -> list[float]:
    """One figure for each period."""
    if isinstance(figure, int | float):
        return [figure] * periods
    if len(figure) != periods:
        raise BadAmount(
            f"There are {len(figure)} figures of {what} for {periods} periods.",
            "Give one for each, or a single one.",
        )
    return list(figure)
