"""Accidents on purpose: how an act is tried, and what became of it."""

from __future__ import annotations

import hashlib
import json
import random
import sqlite3
import subprocess
import sys
from collections.abc import Iterator
from contextlib import closing, contextmanager
from dataclasses import asdict, dataclass
from datetime import date, datetime, timedelta
from pathlib import Path
from typing import Any
from unittest import mock

import victim
from year_acts import Act, perform

from stockroom import clock
from stockroom.errors import StockroomError
from stockroom.service.answers import Done
from stockroom.service.once import once
from stockroom.store import engine

FAULTS = ("none", "killed", "locked", "disc full", "clock back", "sent twice")
LIKELY = (3, 2, 3, 2, 4)
CALM = 86
"""How often an act goes with no accident, where one goes with 14."""


@dataclass(frozen=True, slots=True)
class Came:
    """What came of an act: the answer, or the refusal in words; neither when it was killed."""

    done: Done | None = None
    refused: str = ""
    entered: date | None = None


@dataclass
class Hands:
    """Does acts on the store, with an accident where one is due. Use in a with block."""

    path: Path
    folder: Path
    chance: random.Random
    program: subprocess.Popen[str] | None = None
    sent: int = 0

    def __enter__(self) -> Hands:
        """Nothing yet: the program whose workers are killed is started with the first of them."""
        return self

    def __exit__(self, *_: object) -> None:
        """End that program."""
        if self.program is not None:
            self.program.communicate()

    def _let_go(self, asked: dict[str, Any]) -> int:
        """Have a worker do what is asked; how it ended."""
        if self.program is None:
            words = [sys.executable, victim.__file__]
            pipe = subprocess.PIPE
            self.program = subprocess.Popen(words, stdin=pipe, stdout=pipe, text=True)
        assert self.program.stdin
        assert self.program.stdout
        self.program.stdin.write(json.dumps(asked) + "\n")
        self.program.stdin.flush()
        # its number first, which nobody needs here
        self.program.stdout.readline()
        return int(self.program.stdout.readline())

    def do(self, act: Act, fault: str, today: date, now: datetime, by: str) -> Came:
        """Try an act under a fault. Anything but a refusal in words comes out as it is."""
        if fault in ("killed", "disc full"):
            return self._elsewhere(act, fault, today, now, by)
        if fault == "clock back":
            today -= timedelta(days=self.chance.randint(1, 60))
        try:
            with mock.patch.object(clock, "now", return_value=now), self._busy(fault):
                if fault == "sent twice":
                    return Came(self._twice(act, today, by), entered=today)
                return Came(perform(self.path, act, today, by), entered=today)
        except StockroomError as refusal:
            return Came(refused=refusal.message)

    def _twice(self, act: Act, today: date, by: str) -> Done:
        self.sent += 1
        token = f"{today} {self.sent}"
        first, again = (
            once(self.path, token, lambda: perform(self.path, act, today, by), today=today, by=by)
            for _ in range(2)
        )
        assert first == again, f"sent twice, {act} was answered {first} and then {again}"
        return first

    @contextmanager
    def _busy(self, fault: str) -> Iterator[None]:
        if fault != "locked":
            yield
            return
        with (
            closing(sqlite3.connect(self.path, isolation_level=None)) as other,
            mock.patch.object(engine, "BUSY_SECONDS", 0.02),
        ):
            other.execute("BEGIN IMMEDIATE")
            yield

    def _elsewhere(self, act: Act, fault: str, today: date, now: datetime, by: str) -> Came:
        """In a program of its own, which is shot at a statement or whose files may not grow."""
        told = self.folder / "told.json"
        told.unlink(missing_ok=True)
        asked: dict[str, Any] = {
            "work": "act",
            "path": str(self.path),
            "told": str(told),
            "act": asdict(act),
            "today": today.isoformat(),
            "now": now.isoformat(),
            "by": by,
        }
        # where it falls is drawn from the seed, not from the clock: the year must replay
        if fault == "killed":
            asked["after"] = self.chance.randint(0, 6)
        else:
            asked["limit"] = self.chance.choice((4096, 33_000, 40_000, 60_000))
        ended = self._let_go(asked)
        if ended == -9:
            return Came()
        said = json.loads(told.read_text())
        if ended == 0:
            return Came(Done(**{**said, "details": tuple(said["details"])}), entered=today)
        assert ended == victim.REFUSED, f"{act}: {said}"
        return Came(refused=said["refused"])


def drawn_fault(chance: random.Random, calm: int) -> str:
    """The accident that goes with the next act; mostly none."""
    return chance.choices(FAULTS, (calm, *LIKELY))[0]


def digest_of(path: Path) -> str:
    """The digest of everything in a store, row by row: alike only where all of it is."""
    with closing(sqlite3.connect(path)) as raw:
        lines = "\n".join(raw.iterdump())
    return hashlib.sha256(lines.encode()).hexdigest()
