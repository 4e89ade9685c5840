"""What is asked of the planner of batches, and what it answers: plain numbers, frozen.

Days are whole numbers from 0, the first day looked at. Volumes are cm³, work minutes;
value is in minutes too (`objective.py`). Sorts, demands and lots refer to each other by
their place in the problem's rows.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from math import inf

Days = tuple[int, ...]
"""One figure for each day of the problem; −1 where there is none."""


@dataclass(frozen=True, slots=True)
class Part:
    """What a batch takes of another sort: `share` cm³ for each cm³ made.

    For a batch started on day t the part must be in hand: a batch of it started from
    `first[t]` to `last[t]` will do (−1: none will), and so will a lot that is good on
    day t and holds `strength` (a fraction of what the sort starts at) then.
    """

    sort: int
    share: float
    first: Days
    last: Days
    strength: float = 0.0


@dataclass(frozen=True, slots=True)
class Sort:
    """One solution that can be made here.

    A batch of volume x in y vessels takes `minutes` · y + `per_cm3` · x of work on the day
    it starts, and `finishing` · y on the day `finish_on[t]` (empty: the same day). Each
    vessel holds at most `largest` and at least `smallest`. `waste` is what a cm³ made and
    not used costs. Volumes are rounded up to whole `step`s (0: made to the need). `parts`
    name sorts that come later in the row, so that a sort never comes before what it goes
    into. `usual` are days it stood under in the plan last printed: among equals one of
    them is kept, the last day that would do included.
    """

    name: str
    minutes: float
    per_cm3: float = 0.0
    smallest: float = 0.0
    largest: float = inf
    waste: float = 0.0
    parts: tuple[Part, ...] = ()
    finishing: float = 0.0
    finish_on: Days = ()
    step: float = 0.0
    usual: frozenset[int] = frozenset()


@dataclass(frozen=True, slots=True)
class Demand:
    """So much of a sort, used on day `use`, at least `strength` strong (a fraction).

    A batch started from `first` to `last` will do; `first` > `last`: none will.
    """

    sort: int
    volume: float
    first: int
    last: int
    use: int
    strength: float = 0.0


@dataclass(frozen=True, slots=True)
class Lot:
    """What stands on the shelf of a sort: good through day `until`.

    On day t it holds `strength` · e^(−`decay` · t) of what the sort starts at. `waste` is
    what a cm³ of it left over costs: nothing, unless it goes past within the problem.
    """

    sort: int
    volume: float
    until: int
    strength: float = 1.0
    decay: float = 0.0
    waste: float = 0.0


@dataclass(frozen=True, slots=True)
class Problem:
    """All of it. Batches start on `working` days only; `limit` is minutes a day, None: no limit.

    `whole`: each demand, and each part of a batch, comes from one batch or one lot, never
    from two. `busy` is minutes already spoken for on each day (empty: none).
    """

    days: int
    working: tuple[int, ...]
    sorts: tuple[Sort, ...]
    demands: tuple[Demand, ...]
    lots: tuple[Lot, ...] = ()
    limit: float | None = None
    whole: bool = False
    busy: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class Batch:
    """One batch of the answer: `volume` cm³ in `vessels`, all of one sort on one day."""

    sort: int
    day: int
    vessels: int
    volume: float


@dataclass(frozen=True, slots=True)
class Gift:
    """`volume` cm³ from a batch or a lot to a demand, or to a batch as its n-th part.

    Exactly one of `batch` and `lot` is not −1; exactly one of `demand` and `into` is not −1.
    """

    volume: float
    batch: int = -1
    lot: int = -1
    demand: int = -1
    into: int = -1
    part: int = 0


@dataclass(frozen=True, slots=True)
class Arrangement:
    """The answer: batches, who gets what from where, and what each demand is short, cm³."""

    batches: tuple[Batch, ...] = ()
    gifts: tuple[Gift, ...] = ()
    short: tuple[float, ...] = field(default=())
