"""How fast the ledger is, as ratios: python tests/benchmarks/ledger.py --entries 1000000

One event inside a running process stands beside the bare SQLite transaction it needs, a load
of entries beside SQLAlchemy Core's own, the whole shelf beside plain reading of a kept table,
`verify --quick` beside the plain sum. Medians of interleaved runs; processor time beside the
clock, since a busy machine spoils the one and not the other. Nothing here is asserted.
"""

from __future__ import annotations

import argparse
import random
import resource
import shutil
import sqlite3
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Iterator
from contextlib import closing
from datetime import date, datetime, timedelta
from functools import partial
from itertools import islice
from pathlib import Path

from sqlalchemy import create_engine, insert
from sqlmodel import select

from stockroom.measure.amounts import Amount
from stockroom.service import drawing, stock
from stockroom.service.database import make_practice
from stockroom.store.balances import balances
from stockroom.store.engine import Session, held_open, writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, Stamp
from stockroom.store.ledger_bulk import CHUNK, append_many
from stockroom.store.reading import reading
from stockroom.store.tables import Bottle, Entry, Line, Place
from stockroom.store.verify import verify

TODAY = date(2027, 3, 1)
BOTTLES = 2_000
FULL = 10**9
FULL_B06 = Amount.grams(300)
Seconds = tuple[float, float]
"""By the clock, and of the processor."""


def timed(job: Callable[[], object]) -> Seconds:
    """How long a job takes once."""
    clock, processor = time.perf_counter(), time.process_time()
    job()
    return time.perf_counter() - clock, time.process_time() - processor


def side_by_side(jobs: dict[str, Callable[[], object]], runs: int) -> dict[str, Seconds]:
    """The medians of jobs run in turn."""
    found: dict[str, list[Seconds]] = {name: [] for name in jobs}
    for _ in range(runs):
        for name, job in jobs.items():
            found[name].append(timed(job))
    return {
        name: (statistics.median(s[0] for s in row), statistics.median(s[1] for s in row))
        for name, row in found.items()
    }


def tell(name: str, taken: Seconds, beside: Seconds) -> None:
    """One line: milliseconds by the clock and of the processor, and the two ratios."""
    (clock, processor), (other, bare) = taken, beside
    print(
        f"  {name:<24} {1000 * clock:10.2f} ms {clock / other:6.2f} ×"
        f"   processor {1000 * processor:10.2f} ms {processor / bare if bare else 0:6.2f} ×"
    )


# the reads an event is judged by, its write, and the same promise to the disc
NEEDED = (
    "SELECT version_num FROM alembic_version",
    "SELECT * FROM house WHERE setting = 'practice'",
    "SELECT * FROM bottle WHERE number = 'B06'",
    "SELECT * FROM line WHERE id = (SELECT line_id FROM bottle WHERE number = 'B06')",
    "SELECT * FROM keeping_rule WHERE line_id = (SELECT line_id FROM bottle WHERE number = 'B06')",
    "SELECT * FROM place",
    "SELECT * FROM entry WHERE bottle_id = (SELECT id FROM bottle WHERE number = 'B06')"
    " AND kind <> 'drawn' ORDER BY happened_on, id",
    "SELECT SUM(change) FROM entry WHERE happened_on <= '2027-03-01'"
    " AND bottle_id = (SELECT id FROM bottle WHERE number = 'B06')",
    "SELECT held FROM kept_balance WHERE bottle_id = (SELECT id FROM bottle WHERE number = 'B06')",
)
AT_A2 = "(SELECT bottle_id FROM entry WHERE place_id = (SELECT id FROM place WHERE place = 'A2'))"
LINES = f"(SELECT line_id FROM bottle WHERE id IN {AT_A2})"
NEIGHBOURS = (
    f"SELECT * FROM bottle WHERE id IN {AT_A2}",
    f"SELECT * FROM entry WHERE bottle_id IN {AT_A2} ORDER BY happened_on, id",
    f"SELECT bottle_id, SUM(change) FROM entry WHERE bottle_id IN {AT_A2} GROUP BY bottle_id",
    f"SELECT * FROM line WHERE id IN {LINES}",
    f"SELECT * FROM keeping_rule WHERE line_id IN {LINES}",
    f"SELECT * FROM substance WHERE id IN (SELECT substance_id FROM line WHERE id IN {LINES})",
)
WRITTEN = (
    "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    " strength_text, reason, note, booking) SELECT id, 'drawn', '2027-03-01', '2027-03-01',"
    " '2027-03-01 09:00:00', 'T1', -1, '', '', '', '' FROM bottle WHERE number = 'B06'"
)


def events(store: Path, runs: int) -> None:
    """Each kind of event beside the bare transaction, in one process that holds the file open."""
    link = sqlite3.connect(store, isolation_level=None)
    link.execute("PRAGMA foreign_keys = ON")

    def bare(needed: tuple[str, ...] = NEEDED) -> None:
        link.execute("BEGIN IMMEDIATE")
        for question in needed:
            link.execute(question).fetchall()
        link.execute(WRITTEN)
        link.execute("COMMIT")

    little, by = Amount.grams(0.001), "T1"
    jobs: dict[str, Callable[[], object]] = {
        "bare transaction": bare,
        "bare, with neighbours": partial(bare, NEEDED + NEIGHBOURS),
        "draw": lambda: drawing.draw(store, "B06", little, on=None, today=TODAY, by=by),
        "count": lambda: stock.count(store, "B06", FULL_B06, on=None, today=TODAY, by=by),
        "move": lambda: stock.move(store, "B06", "A2", on=None, today=TODAY, by=by),
        "spill": lambda: drawing.spill(
            store, "B06", little, note="fell", on=None, today=TODAY, by=by
        ),
    }
    with held_open(store), closing(link):
        taken = side_by_side(jobs, runs)
    for name, seconds in taken.items():
        # what is moved is told of all that stands there, so that is read for it as well
        beside = "bare, with neighbours" if name == "move" else "bare transaction"
        tell(name, seconds, taken[beside])


def story(session: Session, entries: int, seed: int = 7) -> Iterator[tuple[Bottle, Event, Stamp]]:
    """Bottles that arrive and are drawn from in no order, until there are so many entries."""
    chance, place = random.Random(seed), session.exec(select(Place)).first()
    bottles = session.exec(select(Bottle).where(Bottle.source == "benchmark")).all()
    began, moment = date(2026, 9, 1), datetime(2026, 12, 31, 9, 0)
    assert place is not None
    came = Event(EntryKind.ARRIVED, change=FULL, place_id=place.id)
    for bottle in bottles:
        yield bottle, came, Stamp(began, began, moment, "T1")
    for number in range(entries - len(bottles)):
        day = began + timedelta(days=120 * number // entries)
        taken = Event(EntryKind.DRAWN, change=-chance.randrange(1, 1000))
        yield chance.choice(bottles), taken, Stamp(day, day, moment, "T1")


def more_bottles(store: Path) -> None:
    """Bottles to write about, with no entry yet."""
    with writing(store) as session:
        line = session.exec(select(Line)).first()
        assert line is not None
        assert line.id is not None
        for number in range(BOTTLES):
            session.add(
                Bottle(number=f"B{number + 1000}", line_id=line.id, size=FULL, source="benchmark")
            )


def load(store: Path, entries: int) -> int:
    """The story written through `append_many`, in one transaction."""
    with writing(store) as session:
        return append_many(session, story(session, entries))


def by_core(store: Path, entries: int) -> Seconds:
    """The same rows through SQLAlchemy Core alone, into the table without its triggers."""
    with closing(sqlite3.connect(store)) as link:
        named = "SELECT name FROM sqlite_master WHERE type = 'trigger' AND tbl_name = 'entry'"
        for (name,) in link.execute(named).fetchall():
            link.execute(f"DROP TRIGGER {name}")
    engine = create_engine(f"sqlite:///{store}")
    clock = processor = 0.0
    with Session(engine) as session, engine.connect() as connection:
        told = map(_row, story(session, entries))
        while rows := list(islice(told, CHUNK)):
            # making the rows is not part of what is timed
            taken = timed(partial(connection.execute, insert(Entry), rows))
            clock, processor = clock + taken[0], processor + taken[1]
        taken = timed(connection.commit)
    engine.dispose()
    return clock + taken[0], processor + taken[1]


def _row(told: tuple[Bottle, Event, Stamp]) -> dict[str, object]:
    bottle, event, stamp = told
    return Entry(
        bottle_id=bottle.id or 0,
        kind=event.kind.value,
        happened_on=stamp.happened_on,
        entered_on=stamp.entered_on,
        entered_at=stamp.entered_at.isoformat(sep=" "),
        by=stamp.by,
        change=event.change,
        place_id=event.place_id,
    ).model_dump(exclude={"id"})


def shelf_and_proof(store: Path, runs: int) -> None:
    """Reading all balances beside a kept table, and proving the store beside the plain sum."""
    link = sqlite3.connect(store)
    link.execute(
        "CREATE TEMP TABLE flat AS SELECT number, key, kind, held FROM kept_balance"
        " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
    )
    plainly = "SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id"
    with reading(store) as reader, closing(link):
        shelf = side_by_side(
            {
                "a kept table, plainly": lambda: link.execute("SELECT * FROM flat").fetchall(),
                "two columns of it": lambda: link.execute("SELECT * FROM kept_balance").fetchall(),
                "balances": lambda: balances(reader),
            },
            50,
        )
        proof = side_by_side(
            {
                "SUM … GROUP BY": lambda: link.execute(plainly).fetchall(),
                "verify --quick": lambda: verify(store, quick=True),
            },
            runs,
        )
    for taken, beside in ((shelf, "a kept table, plainly"), (proof, "SUM … GROUP BY")):
        for name, seconds in taken.items():
            tell(name, seconds, taken[beside])


def most_memory(store: Path, what: str, entries: int) -> float:
    """The most memory a process of its own took for one of the jobs, in MB."""
    words = [sys.executable, __file__, "--job", what, str(store), "--entries", str(entries)]
    said = subprocess.run(words, check=True, capture_output=True, text=True).stdout
    return float(said.split()[-1])


def job(what: str, store: Path, entries: int) -> None:
    """What `most_memory` starts."""
    if what == "load":
        load(store, entries)
    else:
        verify(store, quick=True)
    print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024)


def figures(folder: Path, entries: int, runs: int) -> None:
    """All of them, on stores made in a folder."""
    college = folder / "college.sqlite"
    make_practice(college)
    print("One event, beside the bare transaction it needs")
    events(Path(shutil.copy(college, folder / "events.sqlite")), 15 * runs)
    empty = Path(shutil.copy(college, folder / "empty.sqlite"))
    more_bottles(empty)
    print(f"{entries} entries in one load, beside SQLAlchemy Core without triggers")
    big = Path(shutil.copy(empty, folder / "big.sqlite"))
    core = by_core(Path(shutil.copy(empty, folder / "core.sqlite")), entries)
    tell("SQLAlchemy Core", core, core)
    tell("append_many", timed(lambda: load(big, entries)), core)
    print(f"The whole shelf, and its proof, of {entries} entries")
    shelf_and_proof(big, runs)
    print("Memory at most, for a tenth of the entries and for all")
    tenth = Path(shutil.copy(empty, folder / "tenth.sqlite"))
    for what in ("load", "verify"):
        first = most_memory(tenth, what, entries // 10)
        source = empty if what == "load" else big
        second = most_memory(source, what, entries)
        print(f"  {what:<24} {first:6.1f} MB, {second:6.1f} MB")


def main() -> None:
    """Print all figures, or do one job for a process of its own."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--entries", type=int, default=1_000_000)
    parser.add_argument("--runs", type=int, default=3)
    parser.add_argument("--job", nargs=2, help=argparse.SUPPRESS)
    given = parser.parse_args()
    if given.job:
        job(given.job[0], Path(given.job[1]), given.entries)
        return
    with tempfile.TemporaryDirectory() as folder:
        figures(Path(folder), given.entries, given.runs)


if __name__ == "__main__":
    main()
