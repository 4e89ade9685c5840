"""Write the stores of earlier layouts that `test_every_revision.py` opens, and how they were read.

    python tests/store/layouts/write_layouts.py [REVISION...]

Run by hand in a clone with its history, when a migration is added: name the commit that last
wrote the layout before it in `WRITTEN_BY`, then run this for that revision. The program of that
commit is unpacked into a temporary folder and makes a practice store with its own commands, a
slip and its putting-right among them. What it holds becomes REVISION.sql.gz, and what that
program read in it REVISION.json.gz: balances, dates, places, the story of every bottle, bookings.

No program ever stopped at 0004 and 0005, which came in one change with 0006: those two are the
store of 0003, brought up by the next program's migrations, with rows put into the new tables.
Files already there are never made anew without being named: they are what was written then.
"""

from __future__ import annotations

import gzip
import io
import os
import sqlite3
import subprocess
import sys
import tarfile
import tempfile
from contextlib import closing
from pathlib import Path

HERE = Path(__file__).parent
REPOSITORY = HERE.parents[2]

WRITTEN_BY = {
    "0001": "20a73b4",
    "0002": "39d6049",
    "0003": "57a171b",
    "0004": "f389ba9",
    "0005": "f389ba9",
    "0006": "f389ba9",
    "0007": "6558a65",
    "0008": "d1c0f5f",
}
"""The last commit whose program wrote each layout."""

BROUGHT_UP = {"0004": "0003", "0005": "0003"}
"""Layouts no program stopped at, with the one their store was written in."""

EVENTS = """\
draw S05 "200 cm3" --on 2027-01-05 --by T1
put-right 179 --why "meant 20 cm3" --by T2
draw S05 "20 cm3" --on 2027-01-05 --by T2
found B01 "90.5 vol" --by T1
look S03 --good --note "starch blank clear, \\"very\\" clear" --by T1
count B06 "630 g" --by T2
move S01 F1 --by T1
arrive "lithium chloride" "100 g" --printed 2029-01 --place A2 --by T1
make "starch 0.5 % w/v" "200 cm3" --place F1 --by T1
open B02 --by T1
turned-up B28 --place A2 --by T2
spoil S12 --why "breath check fails" --by T1
spill B18 "2 g" --by T1
lend B32 "10 g" --to "the physics store" --by T1
discard S14 --how "iron waste bottle" --why past --by T1
printed B21 2027-05-04 --by T1
book R05 --on 2027-01-21 --at 09:15 --groups 12 --dept CH --by T1
shift K06 --groups 13 --by T1
cancel K05 --by T1
change departments CH left_gbp=50 --why "order of May" --by T1
"""
"""What happens in every store, as each program since the first could be told it."""

SINCE = {
    "0002": """\
rule "starch 0.5 % w/v" look lasts="5 d" --why "warm room" --by T1
logger F1 fridge.csv --by T1
""",
    "0003": """\
logger F1 --take-back --from 2027-01-02 --to 2027-01-02 --why "the other fridge" --by T1
""",
    "0006": """\
order "silver nitrate" 1 "25 g" --price 46.00 --expected 2027-01-18 --by P1
plan --keep --by T1
""",
}
"""What could be told first in each layout."""

ROWS = {
    "0004": """\
INSERT INTO placed VALUES (1, 'P01', 1, 25000000, '25 g', 1, 4600, 'a supplier', '2027-01-04',
 '2027-01-18', '2027-01-04', '2027-01-04 09:00:00', 'P1', '');
INSERT INTO placed_share VALUES (1, 1, 1, 4600);
""",
    "0005": """\
INSERT INTO printed_plan VALUES (1, 'P01', '2027-01-04', '2027-01-04 09:00:00', 'T1', 0, '', '{}',
 '{}', '{}');
""",
}
"""Rows for the tables of the layouts that no program stopped at."""

FRIDGE = "time,temperature\n" + "".join(
    f"2027-01-0{1 + hour // 24} {hour % 24:02}:00,{5 + hour % 3}.25\n" for hour in range(72)
)

COMMANDS = """\
import shlex, sys
from stockroom.cli.main import run

for line in sys.argv[2].splitlines():
    try:
        run(["--store", sys.argv[1], "--as-at", "2027-01-06", *shlex.split(line)])
    except SystemExit as leaving:
        if leaving.code:
            raise SystemExit(line)
"""

TELL = """\
import json, sys
from datetime import date
from pathlib import Path
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

path = Path(sys.argv[1])
known = facts(path, date(2027, 1, 6), date(2027, 1, 4), date(2027, 3, 26))

def bottle(each):
    record = each.record
    dates = [record.received, record.opened, record.made]
    return {
        "line": each.line, "left": each.left, "size": each.size, "place": each.place,
        "dates": [day and day.isoformat() for day in dates],
        "checks": [[check.on.isoformat(), check.kind, check.passed] for check in record.checks],
        "aside": record.set_aside, "not_found": record.not_found,
        "lineage": list(each.lineage),
    }

def story(number):
    return [
        [told.entry, told.happened.isoformat(), told.entered.isoformat(), told.by, told.kind,
         told.change.micro, told.left.micro, told.said, told.place, told.booking,
         told.puts_right, told.undone_by]
        for told in diary(path, number)
    ]

print(json.dumps({
    "bottles": {each.number: bottle(each) for each in known.bottles},
    "stories": {each.number: story(each.number) for each in known.bottles},
    "bookings": [
        [each.number, each.recipe, each.version, each.on.isoformat(), each.minute, each.groups,
         each.spare, each.department, each.firmness] for each in known.bookings
    ],
}, indent=0, sort_keys=True))
"""
"""Read by the old program and, in the test, by this one: the two must say the same."""

BRING_UP = """\
import sys
from alembic import command
from alembic.config import Config
from sqlalchemy import create_engine
from stockroom.store.engine import MIGRATIONS

config = Config()
config.set_main_option("script_location", str(MIGRATIONS))
with create_engine(f"sqlite:///{sys.argv[1]}").begin() as connection:
    config.attributes["connection"] = connection
    command.upgrade(config, sys.argv[2])
"""


def build(revision: str, folder: Path) -> None:
    """Make the store of a revision in an empty folder, and write its two files."""
    store = folder / "store.sqlite"
    first = BROUGHT_UP.get(revision, revision)
    program = _unpacked(WRITTEN_BY[first], folder / "program")
    (folder / "fridge.csv").write_text(FRIDGE, encoding="utf-8")
    words = EVENTS + "".join(lines for since, lines in SINCE.items() if since <= first)
    _run(program, folder, COMMANDS, str(store), f"demo\n{words}")
    told = _run(program, folder, TELL, str(store))
    if first != revision:
        later = _unpacked(WRITTEN_BY[revision], folder / "later")
        _run(later, folder, BRING_UP, str(store), revision)
        with closing(sqlite3.connect(store)) as held:
            held.executescript("".join(rows for at, rows in ROWS.items() if at <= revision))
    with closing(sqlite3.connect(store)) as held:
        (found,) = held.execute("SELECT version_num FROM alembic_version").fetchone()
        assert found == revision, found
        dump = "\n".join(held.iterdump())
    # no time and no name inside, so that the same content is the same file
    (HERE / f"{revision}.sql.gz").write_bytes(gzip.compress(dump.encode(), 9, mtime=0))
    (HERE / f"{revision}.json.gz").write_bytes(gzip.compress(told.encode(), 9, mtime=0))


def _unpacked(commit: str, folder: Path) -> Path:
    packed = subprocess.run(
        ["git", "archive", commit, "stockroom", "seeds_data"],
        cwd=REPOSITORY,
        check=True,
        capture_output=True,
    ).stdout
    with tarfile.open(fileobj=io.BytesIO(packed)) as files:
        files.extractall(folder, filter="data")
    return folder


def _run(program: Path, folder: Path, code: str, *words: str) -> str:
    ran = subprocess.run(
        [sys.executable, "-c", code, *words],
        cwd=folder,
        env={**os.environ, "PYTHONPATH": str(program)},
        capture_output=True,
        text=True,
        encoding="utf-8",
        check=False,
    )
    if ran.returncode:
        raise SystemExit(ran.stderr)
    return ran.stdout


def main() -> None:
    """Build the revisions named, else those that have no files yet."""
    named = sys.argv[1:]
    for revision in WRITTEN_BY:
        if revision in named or not (named or (HERE / f"{revision}.sql.gz").exists()):
            with tempfile.TemporaryDirectory() as folder:
                build(revision, Path(folder))
            print(f"{revision}: written by {WRITTEN_BY[revision]}")


if __name__ == "__main__":
    main()
