"""How fast the reading commands are, as ratios; run by hand: python tests/benchmarks/speed.py

Start-up stands beside the bare interpreter. Planning stands beside reading the
same rows with plain sqlite3, for the practice college and for a generated store
of 300 bookings, 2 000 bottles and 20 000 entries. Medians of interleaved runs.
Nothing here is asserted: a machine's mood is not a test.
"""

from __future__ import annotations

import random
import sqlite3
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from datetime import date, timedelta
from pathlib import Path

from stockroom.planning.derive import with_derived
from stockroom.planning.plan import plan
from stockroom.service.database import make_practice
from stockroom.store.snapshot import facts

RUNS = 9
FIRST_DAY = date(2027, 1, 4)
TABLES = (
    "substance line keeping_rule method ingredient pack recipe requirement bar swap booking "
    "bottle parent entry term closure place department"
).split()


# a bench sum should answer as fast as a command that reads the store
COMMANDS = {
    "past": ["past"],
    "plan": ["plan"],
    "plan --cautious": ["plan", "--cautious"],
    "strength": ["strength", "100 vol", "--of", "hydrogen peroxide", "--to", "mol/dm3"],
    "weigh": ["weigh", "2 L", "0.200 mol/dm3", "--of", "sodium thiosulfate pentahydrate"],
    "dilute": ["dilute", "500 cm3", "0.100 mol/dm3", "--from", "B01"],
    "titrate": ["titrate", "KMnO4 on Fe2+", "24.10", "--titrant", "S08", "--sample", "25 cm3"],
    "hazards": ["hazards", "sodium hydroxide", "0.40 mol/dm3"],
    "fades": ["fades", "B01"],
}


def median_seconds(job: Callable[[], object], runs: int = RUNS) -> float:
    """The median time of a job over some runs."""
    times = []
    for _ in range(runs):
        begun = time.perf_counter()
        job()
        times.append(time.perf_counter() - begun)
    return statistics.median(times)


def start_ups(store: Path) -> None:
    """Whole processes, as multiples of the bare interpreter, interleaved."""
    call = "from stockroom.cli.main import run; run({})"
    jobs = {
        "bare interpreter": [sys.executable, "-c", "pass"],
        "import typer": [sys.executable, "-c", "import typer"],
        "stockroom --help": [sys.executable, "-c", call.format(["--help"])],
    }
    for name, words in COMMANDS.items():
        asked = call.format(["--store", str(store), *words])
        jobs[f"stockroom {name}"] = [sys.executable, "-c", asked]
    times: dict[str, list[float]] = {name: [] for name in jobs}
    for _ in range(RUNS):
        for name, words in jobs.items():
            begun = time.perf_counter()
            subprocess.run(words, check=True, capture_output=True)
            times[name].append(time.perf_counter() - begun)
    bare = statistics.median(times["bare interpreter"])
    for name, row in times.items():
        median = statistics.median(row)
        print(f"  {name:<20} {1000 * median:6.0f} ms  {median / bare:5.1f} × bare")


def read_plainly(store: Path) -> int:
    """Every row the plan needs, fetched with sqlite3 and nothing done with them."""
    with sqlite3.connect(f"file:{store}?mode=ro", uri=True) as link:
        return sum(len(link.execute(f"SELECT * FROM {name}").fetchall()) for name in TABLES)


def planning(name: str, store: Path) -> None:
    """Reading and planning one store, beside plain reading of the same rows."""
    rows = read_plainly(store)
    plainly = median_seconds(lambda: read_plainly(store))
    reading = median_seconds(lambda: facts(store, FIRST_DAY))
    known = with_derived(facts(store, FIRST_DAY))
    deciding = median_seconds(lambda: plan(known), 5)
    answer = plan(known)
    print(f"  {name}: {rows} rows, {len(answer.needs)} needs, {len(answer.makes)} makes")
    print(f"    plain sqlite3 {plainly:.4f} s")
    print(f"    snapshot      {reading:.4f} s  {reading / plainly:5.1f} × plain")
    print(f"    plan          {deciding:.4f} s  {deciding / plainly:5.1f} × plain")


def grow(store: Path, bookings: int, bottles: int, entries: int, seed: int = 7) -> None:
    """Add invented bookings, bottles and draws to a practice store until it has so many."""
    chance = random.Random(seed)
    with sqlite3.connect(store) as link:
        _more_bookings(link, chance, bookings)
        _more_bottles(link, chance, bottles)
        _more_draws(link, chance, entries)


def _columns(link: sqlite3.Connection, table: str) -> list[str]:
    return [row[1] for row in link.execute(f"PRAGMA table_info({table})") if row[1] != "id"]


def _copies(link: sqlite3.Connection, table: str, rows: list[dict[str, object]]) -> None:
    names = list(rows[0])
    marks = ", ".join("?" * len(names))
    link.executemany(
        f"INSERT INTO {table} ({', '.join(names)}) VALUES ({marks})",
        [tuple(row[name] for name in names) for row in rows],
    )


def _all(link: sqlite3.Connection, table: str) -> list[dict[str, object]]:
    names = ["id", *_columns(link, table)]
    found = link.execute(f"SELECT {', '.join(names)} FROM {table} ORDER BY id").fetchall()
    return [dict(zip(names, row, strict=True)) for row in found]


def _more_bookings(link: sqlite3.Connection, chance: random.Random, wanted: int) -> None:
    known = _all(link, "booking")
    day_column = "on_day" if "on_day" in known[0] else "held_on"
    rows = []
    for number in range(len(known), wanted):
        row = dict(chance.choice(known))
        row.pop("id")
        day = FIRST_DAY + timedelta(days=chance.randrange(7, 80))
        day -= timedelta(days=max(0, day.weekday() - 4))
        row |= {"number": f"K{number + 1:03d}", day_column: day.isoformat()}
        rows.append(row)
    _copies(link, "booking", rows)


def _more_bottles(link: sqlite3.Connection, chance: random.Random, wanted: int) -> None:
    known = [row for row in _all(link, "bottle") if row["received_on"] or row["made_on"]]
    rows = []
    for number in range(len(_all(link, "bottle")), wanted):
        row = dict(chance.choice(known))
        row.pop("id")
        row |= {"number": f"X{number}"}
        rows.append(row)
    _copies(link, "bottle", rows)
    begun = "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    begun += " strength_text, reason, note, booking) SELECT id, iif(made_here, 'made', 'arrived'),"
    begun += " coalesce(made_on, received_on), '2027-01-04', '2027-01-04T08:00:00', 'XX', size,"
    begun += " '', '', '', '' FROM bottle WHERE number LIKE 'X%'"
    link.execute(begun)


def _more_draws(link: sqlite3.Connection, chance: random.Random, wanted: int) -> None:
    [(so_far,)] = link.execute("SELECT count(*) FROM entry").fetchall()
    bottles = link.execute("SELECT id, size FROM bottle WHERE number LIKE 'X%'").fetchall()
    draw = "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    draw += " strength_text, reason, note, booking) VALUES (?, 'drawn', '2027-01-03', '2027-01-04',"
    draw += " '2027-01-04T08:00:00', 'XX', ?, '', '', '', '')"
    rows = []
    for number in range(so_far, wanted):
        bottle, size = bottles[number % len(bottles)]
        rows.append((bottle, -(size // 40)))
    link.executemany(draw, rows)


def main() -> None:
    """Print all figures."""
    with tempfile.TemporaryDirectory() as folder:
        college, big = Path(folder) / "college.sqlite", Path(folder) / "big.sqlite"
        make_practice(college)
        make_practice(big)
        grow(big, bookings=300, bottles=2000, entries=20_000)
        print("Start-up, whole process")
        start_ups(college)
        print("Planning")
        planning("the college", college)
        planning("300 bookings, 2 000 bottles, 20 000 entries", big)


if __name__ == "__main__":
    main()
