"""The planner of batches against the proved optimum, and against reading its own rows.

    python tests/benchmarks/optimum.py                       50 and 200 bookings, 10 seeds each
    python tests/benchmarks/optimum.py --sizes 200 --limit 0.75 --seconds 120
    python tests/benchmarks/optimum.py --sizes               only the speed of a large term

Gaps are those of `Cost.total`, the one sum of minutes, waste, shortage and minutes over the
limit, between `arrange` and what HiGHS proves on one thread. Ratios come first: the times
are this machine's. Nothing here is asserted.
"""

from __future__ import annotations

import argparse
import gc
import sqlite3
import statistics
import tempfile
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from terms import Term, demands_of, limited, problem_of, term_of

from stockroom.lots.arrange import arrange
from stockroom.lots.check import faults
from stockroom.lots.cost import cost_of
from stockroom.lots.exact import gap, prove
from stockroom.lots.model import Problem

HEAD = (
    "bookings seeds proved | gap: median  mean  worst | not proved, to the bound: median worst | "
    "shorts avoidable, faults | solver ÷ planner: median  least | planner"
)


@dataclass(frozen=True, slots=True)
class Row:
    """One term: how far the planner was from the best, and how long both took."""

    gap: float
    proved: bool
    avoidable: bool
    faults: int
    solver: float
    planner: float


def timed(job: Callable[[], object]) -> float:
    """The seconds of one run, with the garbage of the runs before it swept up first."""
    gc.collect()
    begun = time.perf_counter()
    job()
    return time.perf_counter() - begun


def compared(problem: Problem, seconds: float, *, start: bool) -> Row:
    """The planner and the solver on one problem; `start`: the solver is told the plan first."""
    planner = statistics.median(timed(lambda: arrange(problem)) for _ in range(3))
    mine = arrange(problem)
    begun = time.perf_counter()
    proof = prove(problem, seconds=seconds, start=mine if start else None)
    solver = time.perf_counter() - begun
    cost = cost_of(problem, mine)
    best = proof.cost.total if proof.proved else proof.bound
    return Row(
        gap=cost.total / best - 1 if proof.proved and best > 0 else gap(cost.total, best),
        proved=proof.proved,
        avoidable=cost.short > proof.cost.short + 1.0,
        faults=len(faults(problem, mine)) + len(faults(problem, proof.arrangement)),
        solver=solver,
        planner=planner,
    )


def problems(size: int, seeds: int, asked: argparse.Namespace) -> list[Problem]:
    """The problems of one size, limited to a share of their unlimited peak where asked."""
    made = []
    for seed in range(1, seeds + 1):
        term = term_of(size, seed=seed, levels=asked.levels, vessels=not asked.any_vessel)
        problem = replace(problem_of(term), whole=asked.whole)
        if asked.limit:
            problem = limited(problem, arrange(problem).batches, asked.limit)
        made.append(problem)
    return made


def line(size: int, rows: Sequence[Row]) -> str:
    """One line of the table; a dash where there is nothing to tell."""
    sure = [100 * row.gap for row in rows if row.proved]
    open_ = [100 * row.gap for row in rows if not row.proved]
    ratios = [row.solver / row.planner for row in rows]
    told = (
        f"{statistics.median(sure):6.2f} % {statistics.mean(sure):5.2f} % {max(sure):5.2f} %"
        if sure
        else f"{'–':>6} {'–':>7} {'–':>7}"
    )
    left = f"{statistics.median(open_):5.2f} % {max(open_):5.2f} %" if open_ else "–"
    return (
        f"{size:8} {len(rows):5} {len(sure):6} |     {told} | {left:>38} | "
        f"{sum(row.avoidable for row in rows):16} {sum(row.faults for row in rows):7} | "
        f"{statistics.median(ratios):14.0f} × {min(ratios):7.0f} × | "
        f"{1000 * statistics.median(row.planner for row in rows):6.1f} ms"
    )


def gaps(asked: argparse.Namespace) -> None:
    """The table of gaps, one line for each size, and with --each one for each seed."""
    print(HEAD)
    for size in asked.sizes:
        rows = []
        for seed, problem in enumerate(problems(size, asked.seeds, asked), 1):
            row = compared(problem, asked.seconds, start=not asked.alone)
            rows.append(row)
            if asked.each:
                word = "proved" if row.proved else "open"
                times = f"{row.solver:.1f} s against {1000 * row.planner:.1f} ms"
                print(f"  seed {seed}: {100 * row.gap:.3f} % ({word}), {times}", flush=True)
        print(line(size, rows), flush=True)


def planned(term: Term) -> object:
    """From booking rows to batches: added up, asked and arranged."""
    return arrange(problem_of(term, demands_of(term)))


def objects(store: Path) -> object:
    """All bookings of a store as mapped objects, in a session of their own."""
    from mapped import Booking
    from sqlalchemy import create_engine, select
    from sqlalchemy.orm import Session

    engine = create_engine(f"sqlite:///{store}")
    with Session(engine) as session:
        rows = session.scalars(select(Booking)).all()
    engine.dispose()
    return rows


def stored(term: Term, store: Path) -> None:
    """The booking rows of a term in a file of their own."""
    with sqlite3.connect(store) as file:
        file.execute(
            "CREATE TABLE booking (id INTEGER PRIMARY KEY, solution INTEGER NOT NULL, "
            "day INTEGER NOT NULL, strength FLOAT NOT NULL, volume FLOAT NOT NULL)"
        )
        file.executemany(
            "INSERT INTO booking (solution, day, strength, volume) VALUES (?, ?, ?, ?)",
            term.bookings,
        )
    file.close()


def fetched(store: Path) -> object:
    """The same rows by the plain driver."""
    file = sqlite3.connect(store)
    rows = file.execute("SELECT * FROM booking").fetchall()
    file.close()
    return rows


def speed(size: int, small: int, runs: int) -> None:
    """A large term planned, beside loading its rows, and beside a small one."""
    large, little = term_of(size, seed=1), term_of(small, seed=1)
    with tempfile.TemporaryDirectory() as folder:
        store = Path(folder) / "term.db"
        stored(large, store)
        jobs: dict[str, Callable[[], object]] = {
            "plan": lambda: planned(large),
            "orm": lambda: objects(store),
            "raw": lambda: fetched(store),
            "small": lambda: planned(little),
        }
        objects(store)  # the import is nobody's loading time
        times: dict[str, list[float]] = {name: [] for name in jobs}
        for _ in range(runs):
            for name, job in jobs.items():
                times[name].append(timed(job))
    plan, orm, raw, least = (statistics.median(row) for row in times.values())
    print(f"{size} bookings planned ÷ their rows loaded as mapped objects: {plan / orm:.2f}")
    print(f"{size} bookings planned ÷ their rows fetched by the plain driver: {plan / raw:.1f}")
    print(f"{size} bookings ÷ {small} bookings, planned: {plan / least:.1f}")
    print(
        f"  planned {1000 * plan:.0f} ms, objects {1000 * orm:.0f} ms, "
        f"rows {1000 * raw:.0f} ms; {small} planned {1000 * least:.0f} ms"
    )


def main() -> None:
    """Read what was asked, print the tables."""
    reader = argparse.ArgumentParser(description=__doc__.partition("\n")[0])
    reader.add_argument("--sizes", type=int, nargs="*", default=[50, 200])
    reader.add_argument("--seeds", type=int, default=10)
    reader.add_argument("--seconds", type=float, default=60.0, help="of the solver, each term")
    reader.add_argument("--limit", type=float, default=0.0, help="share of the unlimited peak")
    reader.add_argument("--levels", type=int, default=3, choices=(1, 2, 3))
    reader.add_argument("--any-vessel", action="store_true", help="one vessel holds any batch")
    reader.add_argument("--whole", action="store_true", help="one giver to each taker")
    reader.add_argument("--alone", action="store_true", help="the solver is not told the plan")
    reader.add_argument("--each", action="store_true", help="a line for each seed as well")
    reader.add_argument("--large", type=int, default=20000, help="0: no speed of a large term")
    reader.add_argument("--small", type=int, default=1000)
    reader.add_argument("--runs", type=int, default=7)
    asked = reader.parse_args()
    if asked.sizes:
        gaps(asked)
    if asked.large:
        speed(asked.large, asked.small, asked.runs)


if __name__ == "__main__":
    main()
