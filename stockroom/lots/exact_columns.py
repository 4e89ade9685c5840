"""Rows and columns of a mixed-integer programme, and what our columns stand for.

Volumes are told in dm³ here, and what goes to a demand as a share of it, so that the
figures a solver sees lie near 1.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from math import inf
from typing import NamedTuple

from stockroom.lots.model import Problem

DM3 = 1000.0
"""cm³ in a dm³."""


class Run(NamedTuple):
    """A batch that may be started: its sort and day, and its columns."""

    sort: int
    day: int
    vessels: int
    volume: int
    most: float
    most_vessels: int


class Flow(NamedTuple):
    """Something that may be given: to a demand or to the part of a batch, and its column.

    From a batch of day `made`, or from lot `lot`; the other is −1. `scale` turns the column
    into cm³.
    """

    column: int
    scale: float
    made: int
    lot: int
    demand: int = -1
    into: tuple[int, int] = (-1, -1)
    part: int = 0


@dataclass(slots=True)
class Programme:
    """Columns with their costs and bounds, and rows of (column, figure) with theirs."""

    problem: Problem
    costs: list[float] = field(default_factory=list)
    tops: list[float] = field(default_factory=list)
    whole: list[bool] = field(default_factory=list)
    rows: list[tuple[float, list[tuple[int, float]], float]] = field(default_factory=list)
    constant: float = 0.0
    runs: dict[tuple[int, int], Run] = field(default_factory=dict)
    flows: list[Flow] = field(default_factory=list)
    shorts: list[int] = field(default_factory=list)
    chosen: dict[int, int] = field(default_factory=dict)

    def column(self, cost: float, top: float = inf, *, whole: bool = False) -> int:
        """A new column from 0 to `top`; its number."""
        self.costs.append(cost)
        self.tops.append(top)
        self.whole.append(whole)
        return len(self.costs) - 1

    def row(self, low: float, terms: list[tuple[int, float]], high: float) -> None:
        """Terms that add up to between `low` and `high`."""
        self.rows.append((low, terms, high))
