"""A year at the bench, from a seed: acts and accidents, and after each all that must hold.

`Year(...).run()` drives the real service and stops at the first thing that does not hold,
with the acts that led to it. The same seed gives the same ledger, bit for bit.
"""

from __future__ import annotations

import random
import re
import sqlite3
from collections import Counter, deque
from collections.abc import Callable
from contextlib import closing
from dataclasses import dataclass, field
from datetime import date, datetime, timedelta
from pathlib import Path
from typing import Any

from year_acts import Act
from year_faults import CALM, Came, Hands, digest_of, drawn_fault
from year_model import Fact, Model
from year_people import People

from stockroom.findings import Fault
from stockroom.service.plan import term_plan
from stockroom.service.verify import verify
from stockroom.store.snapshot import facts

START = date(2027, 1, 4)
BY = ("T1", "T2")
TAKES = ("draw", "spill", "lend")
POURS = ("decant", "mix")


class Broken(AssertionError):
    """Something that must always hold did not; the message says what, and what led to it."""


@dataclass
class Year:
    """One simulated year on the store at `path`, which it writes in.

    `every` and `plans` are how many steps lie between two thorough looks, and two plans; `calm`
    how often nothing goes wrong, against 14 times that something does.
    """

    path: Path
    folder: Path
    seed: int
    days: int = 365
    every: int = 25
    plans: int = 80
    calm: int = CALM
    told: Callable[[str], None] = lambda _: None
    model: Model = field(default_factory=Model)
    outcomes: Counter[str] = field(default_factory=Counter)
    refusals: Counter[str] = field(default_factory=Counter)
    last: deque[str] = field(default_factory=lambda: deque(maxlen=12))
    history: list[tuple[Any, ...]] = field(default_factory=list)
    step: int = 0
    set_back: set[int] = field(default_factory=set)

    def run(self) -> str:
        """Live through it; the digest of everything in the store at the end. Raises: Broken."""
        chance = random.Random(self.seed)
        people = People(self.path, random.Random(chance.random()))
        self._learn_what_stands()
        with Hands(self.path, self.folder, random.Random(chance.random())) as hands:
            for count in range(self.days):
                today = START + timedelta(days=count)
                for act in people.day(today):
                    self._one(act, hands, people, today, chance)
                if today.day == 1:
                    self.told(f"{today}: {self.step} steps, {len(self.history)} entries")
        self.look_through(START + timedelta(days=self.days), chance)
        return digest_of(self.path)

    def _one(
        self, act: Act, hands: Hands, people: People, today: date, chance: random.Random
    ) -> None:
        """One act under one fault, and what must hold after it."""
        self.step += 1
        fault, by = drawn_fault(chance, self.calm), chance.choice(BY)
        now = datetime.combine(today, datetime.min.time()) + timedelta(
            hours=8, seconds=self.step * 97 % 36000
        )
        before = len(self.history)
        came = hands.do(act, fault, today, now, by)
        state = "done" if came.done else "refused" if came.refused else "killed"
        self.outcomes[f"{act.verb}: {state}"] += 1
        self.outcomes[f"fault {fault}: {state}"] += 1
        self.last.append(f"{today} {by} {act} [{fault}] {came.done or came.refused or 'killed'}")
        if came.refused:
            self.refusals[re.sub(r"[\d.,\u202f\u00a0 ]+", " ", came.refused)[:50]] += 1
        new = self._read(before)
        if fault == "clock back":
            self.set_back |= {int(row["id"]) for row in new}
        self._must(bool(new) <= bool(came.done), f"refused or killed, yet {len(new)} entries")
        if came.done:
            self._learn(act, came, new)
            people.written += [int(row["id"]) for row in new if row["kind"] != "put right"]
        self._balances({row["number"] for row in new})
        if self.step % self.every == 0:
            self.look_through(today, chance)
        if self.step % self.plans == 0:
            # replayed inside: a plan that breaks a rule raises
            term_plan(self.path, as_at=today, start=today, end=today + timedelta(days=20))

    def _must(self, held: bool, what: str) -> None:
        if not held:
            led = "\n  ".join(self.last)
            raise Broken(f"seed {self.seed}, step {self.step}: {what}. What led to it:\n  {led}")

    def _ask(self, sql: str, *values: object) -> list[sqlite3.Row]:
        with closing(sqlite3.connect(self.path)) as raw:
            raw.row_factory = sqlite3.Row
            return raw.execute(sql, values).fetchall()

    def _read(self, before: int) -> list[sqlite3.Row]:
        """The entries written since; every one before them must still be there, unaltered."""
        top = self.history[-1][0] if self.history else 0
        new = self._ask(f"{_ENTRIES} WHERE e.id > ? ORDER BY e.id", top)
        (count,) = self._ask("SELECT COUNT(*) FROM entry")[0]
        self._must(count == before + len(new), f"{count} entries after {before} and {len(new)}")
        self.history += [tuple(row) for row in new]
        return new

    def _learn_what_stands(self) -> None:
        """Take over what the college starts with."""
        for row in sorted(self._read(0), key=lambda row: (row["happened_on"], row["id"])):
            change, on = int(row["change"]), date.fromisoformat(row["happened_on"])
            # what the house had counted stands against whatever is written down late
            counted = row["kind"] == "counted"
            seen = self.model.held(row["number"], on) + change if counted else None
            self.model.add(_fact(row, change, seen))

    def _learn(self, act: Act, came: Came, new: list[sqlite3.Row]) -> None:
        """Tell the model what was done, as it was meant and not as the ledger wrote it."""
        assert came.done is not None
        if act.verb == "put right":
            # either half of a pouring names the other as what was put right
            for line in (came.done.text, *came.done.details):
                for entry in re.findall(r"(?:Put right entry|^Entry) (\d+)(?=:| put right)", line):
                    self.model.never(int(entry))
            return
        for row in new:
            kind = str(row["kind"])
            # what evens out an earlier count is the ledger's own affair
            if kind == "counted" and str(row["note"]).startswith("keeps the count"):
                continue
            if kind == "counted" or kind == "discarded":
                counted = act.micro if kind == "counted" else 0
                self.model.add(_fact(row, 0, counted))
            else:
                self.model.add(_fact(row, self._meant(act, came, row, kind)))

    def _meant(self, act: Act, came: Came, row: sqlite3.Row, kind: str) -> int:
        """The change an act meant for the bottle of an entry."""
        if kind in ("opened", "moved", "looked", "found", "lost", "turned up", "set aside"):
            return 0
        if act.verb in TAKES:
            return -act.micro
        if act.verb in ("arrive", "lend back", "make") and kind != "drawn":
            return act.micro
        if act.verb == "decant":
            return act.micro if kind == "decanted in" else -act.micro
        # by eye, or worked out from a strength: how much only the service can say
        return int(row["change"])

    def _balances(self, numbers: set[str]) -> None:
        """Sum of the ledger, kept balance and model agree, and none is below nothing."""
        marks = ",".join("?" * len(numbers))
        only = f"WHERE b.number IN ({marks})" if numbers else ""
        for row in self._ask(f"{_BALANCES} {only} GROUP BY b.id", *sorted(numbers)):
            meant = self.model.held(row["number"])
            self._must(
                row["summed"] == row["held"] == meant >= 0,
                f"{row['number']} sums to {row['summed']}, is kept as {row['held']}, and must"
                f" hold {meant}",
            )

    def look_through(self, today: date, chance: random.Random) -> None:
        """Everything: the whole history, every balance, two days of the past, the file itself."""
        rows = [tuple(row) for row in self._ask(f"{_ENTRIES} ORDER BY e.id")]
        self._must(rows == self.history, "what was entered before is no longer as it was")
        self._balances(set())
        for _ in range(2):
            day = START + timedelta(days=chance.randint(0, max(0, (today - START).days)))
            for bottle in facts(self.path, day).bottles:
                meant = self.model.held(bottle.number, day)
                self._must(
                    bottle.left == meant,
                    f"{bottle.number} held {bottle.left} on {day}, and must have held {meant}",
                )
        proved = verify(self.path)
        faults = [fault for fault in proved.faults if not self._expected(fault)]
        self._must(not faults, f"verify found {faults}")

    def _expected(self, fault: Fault) -> bool:
        """Whether a finding is about a clock that was set back on purpose: that is to be told."""
        number = re.match(r"entry (\d+) happened", fault.text)
        after = fault.check == "days" and number is not None and int(number[1]) in self.set_back
        return after or (fault.check == "clock" and bool(self.set_back))


_ENTRIES = "SELECT e.*, b.number FROM entry e JOIN bottle b ON b.id = e.bottle_id"
_BALANCES = """
    SELECT b.number, COALESCE(SUM(e.change), 0) AS summed, k.held FROM bottle b
    LEFT JOIN entry e ON e.bottle_id = b.id LEFT JOIN kept_balance k ON k.bottle_id = b.id"""


def _fact(row: sqlite3.Row, change: int, counted: int | None = None) -> Fact:
    on = date.fromisoformat(row["happened_on"])
    return Fact(int(row["id"]), str(row["number"]), on, change, counted)
