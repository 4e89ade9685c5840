"""How fast paper is, as ratios to an empty page; run by hand: python tests/benchmarks/paper.py

Typesetting alone, after start-up: the first call of each template, which reads the typeface, is
left out. The typesetter remembers what it set, so each run has another week or other labels. 500
labels are those of the practice college over and over, under numbers of their own; theirs is
processor time too, since a busy machine takes longer.
Nothing here is asserted: a machine's mood is not a test.
"""

from __future__ import annotations

import statistics
import tempfile
import time
from collections.abc import Callable, Iterable
from dataclasses import replace
from datetime import date, timedelta
from functools import partial
from pathlib import Path

from stockroom.reports.paper.label import LABEL, Labels, Sort
from stockroom.reports.paper.label_grid import FULL, Grid
from stockroom.reports.paper.label_set import Wish, labels_of
from stockroom.reports.paper.week import WEEK, week_of
from stockroom.reports.typesetting import typeset
from stockroom.service.database import make_practice
from stockroom.service.labels import labelled
from stockroom.service.sheets import known_and_planned

RUNS = 5
FIRST_DAY, MONDAY = date(2027, 1, 4), date(2027, 1, 25)
MANY = 500


def median_seconds(jobs: Iterable[Callable[[], object]]) -> float:
    """The median time of some jobs, after the first, which does not count."""
    first, *rest = jobs
    first()
    taken = []
    for job in rest:
        start = time.perf_counter()
        job()
        taken.append(time.perf_counter() - start)
    return statistics.median(taken)


def empty_page() -> object:
    """The bare typesetter on a page with nothing on it."""
    import typst

    return typst.compile(b"#set page(width: 10mm, height: 10mm)\n")


def many_labels(store: Path) -> Labels:
    """Labels of 500 bottles, three by eight to a sheet."""
    found = labelled(store, ["all"], as_at=FIRST_DAY)
    wish = Wish(Sort.FULL, FULL, Grid(3, 8, 0.0, 0.0))
    house = (found.house, found.practice)
    sheet = labels_of(house, FIRST_DAY, found.bottles, found.batches, found.places, wish)
    mine = sheet.labels
    labels = (replace(mine[n % len(mine)], number=f"S{n:03d}") for n in range(MANY))
    return replace(sheet, labels=tuple(labels))


def main() -> None:
    """Print the medians, and each as so many empty pages."""
    with tempfile.TemporaryDirectory() as folder:
        store = Path(folder) / "practice.sqlite"
        make_practice(store)
        known, plan = known_and_planned(store, as_at=FIRST_DAY)
        mondays = [MONDAY + timedelta(weeks=n) for n in range(RUNS)]
        weeks = [WEEK.data(week_of(known, plan, monday, {})) for monday in mondays]
        labels = many_labels(store)
        ones = [LABEL.data(replace(labels, labels=(each,))) for each in labels.labels[:RUNS]]

        bare = median_seconds([empty_page] * RUNS)
        print(f"{'empty page, the bare typesetter':36} {bare:8.3f} s")
        week = median_seconds([partial(typeset, "week", each) for each in weeks])
        print(f"{'week sheet':36} {week:8.3f} s, {week / bare:6.1f} times")
        one = median_seconds([partial(typeset, "label", each) for each in ones])
        print(f"{'one label':36} {one:8.3f} s, {one / bare:6.1f} times")

        start, work = time.perf_counter(), time.process_time()
        data = LABEL.data(labels)
        codes = time.process_time() - work
        typeset("label", data)
        took, work = time.perf_counter() - start, time.process_time() - work
        print(f"{f'{MANY} labels, 24 to a sheet':36} {took:8.3f} s, {took / bare:6.1f} times")
        print(f"{'  of processor time':36} {work:8.3f} s, of it the codes {codes:.3f} s")


if __name__ == "__main__":
    main()
