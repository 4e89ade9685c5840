"""Killed at any moment, the store holds whole events and all that were answered."""

from __future__ import annotations

import contextlib
import json
import os
import random
import shutil
import signal
import sqlite3
import subprocess
import sys
import time
from collections.abc import Iterator
from contextlib import closing
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import pytest
import victim
from small_house import small_house

from stockroom.service.database import new_store
from stockroom.store.columns import COLUMNS
from stockroom.store.snapshot import facts

pytestmark = pytest.mark.file

KILLED = -signal.SIGKILL
"""How a program ends that was shot."""


@dataclass
class Ground:
    """Where workers are let go and shot: the program that forks them."""

    program: subprocess.Popen[str]

    def shoot(self, asked: dict[str, Any], after: float | None = None) -> int:
        """Let a worker go, and kill it after so many seconds; how it ended."""
        assert self.program.stdin
        self.program.stdin.write(json.dumps(asked) + "\n")
        self.program.stdin.flush()
        number = self._line()
        if after is not None:
            time.sleep(after)
            # what is done sooner than that has ended by itself
            with contextlib.suppress(ProcessLookupError):
                os.kill(number, signal.SIGKILL)
        return self._line()

    def _line(self) -> int:
        assert self.program.stdout
        return int(self.program.stdout.readline())


@pytest.fixture(scope="module")
def small(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A house of one practical: of an event the writing takes most, and not the planning."""
    path = tmp_path_factory.mktemp("small") / "small.sqlite"
    return small_house(path, ("copper(II) sulfate", "sodium chloride", "sulfuric acid"), ("R09",))


@pytest.fixture(scope="module")
def ground(small: Path) -> Iterator[Ground]:
    words = [sys.executable, victim.__file__]
    with subprocess.Popen(
        words, stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True
    ) as program:
        assert program.stdin
        warm = Path(shutil.copy(small, small.with_name("warm.sqlite")))
        program.stdin.write(json.dumps({"work": "warm", "path": str(warm)}) + "\n")
        yield Ground(program)
        program.stdin.close()


@pytest.fixture
def quiet(small: Path, tmp_path: Path) -> Path:
    """A copy of it to write in."""
    return Path(shutil.copy(small, tmp_path / "quiet.sqlite"))


@dataclass
class Witness:
    """Looks at a store after each accident, and remembers what it had seen before."""

    path: Path
    told: Path
    seen: list[tuple[Any, ...]] = field(default_factory=list)
    old: int = 0

    def __post_init__(self) -> None:
        """Remember which bottles stood there before anything happened."""
        with closing(sqlite3.connect(self.path)) as raw:
            (self.old,) = raw.execute("SELECT MAX(id) FROM bottle").fetchone()

    def look(self) -> None:
        """Whole, nothing lost that was there or was answered, no event half written."""
        with closing(sqlite3.connect(self.path)) as raw:
            assert raw.execute("PRAGMA integrity_check").fetchall() == [("ok",)]
            assert raw.execute("PRAGMA foreign_key_check").fetchall() == []
            entries = raw.execute("SELECT * FROM entry ORDER BY id").fetchall()
            assert entries[: len(self.seen)] == self.seen
            self.seen = entries
            answered = [int(line) for line in self._lines() if line.isdigit()]
            assert {row[0] for row in entries}.issuperset(answered)
            for fault, question in HALVES.items():
                assert raw.execute(question, {"old": self.old}).fetchall() == [], fault
            kept = raw.execute("SELECT name FROM sqlite_master WHERE name = 'kept_balance'")
            if kept.fetchall():
                assert raw.execute(_KEPT).fetchall() == []

    def _lines(self) -> list[str]:
        return self.told.read_text().splitlines() if self.told.exists() else []


# each gives the events of which only a part is there; the college's own rows are whole too
HALVES = {
    "a bottle without a beginning": """
        SELECT number FROM bottle b WHERE 1 <> (SELECT COUNT(*) FROM entry e
        WHERE e.bottle_id = b.id AND e.kind IN ('made', 'arrived'))""",
    "made here, and nothing drawn for it": """
        SELECT b.number FROM bottle b JOIN parent p ON p.bottle_id = b.id WHERE b.id > :old AND
        NOT EXISTS (SELECT 1 FROM entry e WHERE e.bottle_id = p.parent_id AND e.kind = 'drawn'
        AND e.note = 'into ' || b.number)""",
    "made here, and no parents": """
        SELECT b.number FROM entry e JOIN bottle b ON b.id = e.bottle_id WHERE e.kind = 'made'
        AND b.id > :old AND NOT EXISTS (SELECT 1 FROM parent p WHERE p.bottle_id = b.id)""",
    "drawn for what was never made": """
        SELECT note FROM entry WHERE note LIKE 'into S%'
        AND substr(note, 6) NOT IN (SELECT number FROM bottle)""",
    "drawn from, and never opened": """
        SELECT e.id FROM entry e JOIN bottle b ON b.id = e.bottle_id WHERE e.kind = 'drawn'
        AND b.made_here = 0 AND b.id > :old AND NOT EXISTS
        (SELECT 1 FROM entry o WHERE o.bottle_id = e.bottle_id AND o.kind = 'opened')""",
    "not all three that arrived": """
        SELECT n FROM (SELECT COUNT(*) AS n FROM entry WHERE kind = 'arrived'
        AND bottle_id > :old) WHERE n % 3 <> 0""",
    "not all twelve of a list": """
        SELECT substr(source, 1, instr(source, '.csv')) AS list FROM bottle
        WHERE source LIKE 'brought in: list%' GROUP BY list HAVING COUNT(*) <> 12""",
    "below nothing": "SELECT bottle_id FROM entry GROUP BY bottle_id HAVING SUM(change) < 0",
}

_KEPT = """
    SELECT b.id, k.held FROM bottle b LEFT JOIN kept_balance k ON k.bottle_id = b.id
    LEFT JOIN entry e ON e.bottle_id = b.id GROUP BY b.id, k.held
    HAVING COALESCE(k.held, 0) <> COALESCE(SUM(e.change), 0)"""


def test_killed_180_times_at_makes_and_imports_nothing_is_half_written(
    ground: Ground, small: Path, quiet: Path, tmp_path: Path
) -> None:
    chance, usual, lines = random.Random(5), _usual_seconds(quiet), []
    # six houses, thirty shots at each: what an event costs grows with what the others brought
    for house in range(6):
        path = Path(shutil.copy(small, tmp_path / f"house {house}.sqlite"))
        witness = Witness(path, tmp_path / f"told {house}")
        asked = {"work": "events", "path": str(path), "told": str(witness.told)}
        for turn in range(30):
            # half by the clock, half at a statement: the clock seldom hits the moment of saving
            by_clock = turn % 2 == 0
            at = None if by_clock else chance.randint(0, 9)
            after = chance.uniform(0, 1.5 * usual) if by_clock else None
            shot = ground.shoot({**asked, "seed": f"{house} {turn}", "after": at}, after)
            assert shot == KILLED
            witness.look()
            if turn % 10 == 0:
                victim.draw(path, chance)
        lines += witness.told.read_text().splitlines()
    # of each kind some were saved before the shot
    assert len([line for line in lines if line.isdigit()]) > 20
    assert "None" in lines


def test_the_witness_sees_half_an_event(quiet: Path, tmp_path: Path) -> None:
    witness = Witness(quiet, tmp_path / "told")
    witness.look()
    with closing(sqlite3.connect(quiet)) as raw, raw:
        raw.execute("INSERT INTO bottle SELECT NULL, 'S99', " + _REST + " FROM bottle LIMIT 1")
    with pytest.raises(AssertionError, match="a bottle without a beginning"):
        witness.look()
    witness.told.write_text("999999\n")
    with pytest.raises(AssertionError):
        Witness(quiet, witness.told).look()


_REST = ", ".join(COLUMNS["bottle"][2:])


def _usual_seconds(path: Path) -> float:
    """How long an event takes here and now, so that shots fall on slow machines as on fast ones."""
    victim.make(path, random.Random(1))
    # the first of them imported and compiled, as no worker does
    started = time.monotonic()
    victim.make(path, random.Random(2))
    return time.monotonic() - started


@pytest.fixture
def tables(tmp_path: Path) -> Path:
    """A folder of tables: a small house."""
    folder = tmp_path / "tables"
    folder.mkdir()
    (folder / "places.csv").write_text("place,name\nA1,a shelf\n")
    return folder


def test_killed_20_times_while_a_house_is_made_there_is_a_whole_one_or_none(
    ground: Ground, tables: Path, tmp_path: Path
) -> None:
    path, chance = tmp_path / "house" / "new.sqlite", random.Random(7)
    asked = {"work": "new", "path": str(path), "tables": str(tables)}
    started = time.monotonic()
    new_store(tmp_path / "first.sqlite", tables=tables)
    usual = time.monotonic() - started
    for _ in range(20):
        ground.shoot(asked, chance.uniform(0, 1.1 * usual))
        if path.exists():
            # it was done just before the shot: then it is a house to work in
            assert facts(path, victim.DAY).places
            path.unlink()
    new_store(path, tables=tables)
    # what was cut off was cleared away by the next who made one there
    assert [each.name for each in path.parent.iterdir()] == ["new.sqlite"]
