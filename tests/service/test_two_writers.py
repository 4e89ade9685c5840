"""Two people at once: nothing saved is lost, and nothing is drawn twice."""

from __future__ import annotations

import json
import subprocess
import sys
import threading
from datetime import date
from pathlib import Path
from typing import Any

import pytest
from small_house import small_house

from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import stock
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 4)
MANY = 500


def draw(path: Path, cubic: float, by: str) -> str:
    """What somebody is told who draws from S13."""
    try:
        done = stock.draw(path, "S13", Amount.cm3(cubic), on=None, today=TODAY, by=by)
    except StockroomError as refusal:
        return refusal.message
    return done.text


# a program of its own each: a process that shares this one's memory would prove less
PROGRAM = """
import json, sys
from datetime import date
from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import stock
from stockroom.settings import store_at
saved, refused, day = [], [], date(2027, 1, 4)
# begun on a word, so that neither has finished before the other is awake
print("ready", flush=True)
sys.stdin.readline()
for turn in range(int(sys.argv[3])):
    number = ("S04", "S13", "S14")[turn % 3]
    try:
        done = stock.draw(
            store_at(sys.argv[1]), number, Amount.cm3(1), on=None, today=day, by=sys.argv[2]
        )
        saved.append([number, done.entry])
    except StockroomError as refusal:
        refused.append([number, refusal.message])
print(json.dumps({"saved": saved, "refused": refused}))
"""


def started(path: Path, by: str) -> subprocess.Popen[str]:
    """One person at a desk of their own, ready to draw 500 times, a cm³ at a time."""
    words = [sys.executable, "-c", PROGRAM, getattr(path, "url", str(path)), by, str(MANY)]
    person = subprocess.Popen(words, stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True)
    assert person.stdout
    assert person.stdout.readline() == "ready\n"
    return person


def left(path: Path) -> dict[str, int]:
    return {bottle.number: bottle.left for bottle in facts(path, TODAY).bottles}


def entries(path: Path) -> dict[int, tuple[str, str, str, int]]:
    """Every entry of the ledger: its bottle, kind, initials and change."""
    asked = (
        "SELECT e.id, b.number, e.kind, e.by, e.change FROM entry e"
        " JOIN bottle b ON b.id = e.bottle_id"
    )
    with reading(path) as reader:
        return {row[0]: tuple(row)[1:] for row in reader.ask(asked)}


def test_of_two_draws_of_100_from_130_exactly_one_is_saved(own: Path) -> None:
    told: list[str] = []
    gate = threading.Barrier(2)

    def together(by: str) -> None:
        gate.wait()
        told.append(draw(own, 100, by))

    people = [threading.Thread(target=together, args=(by,)) for by in ("T1", "T2")]
    for person in people:
        person.start()
    for person in people:
        person.join()
    saved, refused = sorted(told)
    assert saved.startswith("Drew 100 cm³ from S13")
    # 30 are left, and whoever had the 100 is named
    assert refused.startswith("S13 holds 30 cm³; 100 cm³ asked. T")
    assert left(own)["S13"] == Amount.cm3(30).micro


@pytest.fixture
def few(own: Path, tmp_path: Path) -> Path:
    """A store that a draw reads quickly, where it may be a file: a thousand are drawn there."""
    salts = ("iron(II) sulfate", "silver nitrate", "sulfuric acid")
    return small_house(tmp_path / "few.sqlite", salts) if isinstance(own, Path) else own


def test_two_programs_drawing_500_times_each_lose_nothing(few: Path) -> None:
    before, old = left(few), entries(few)
    people = {by: started(few, by) for by in ("T1", "T2")}
    # all are awake: now
    for person in people.values():
        assert person.stdin
        person.stdin.write("\n")
        person.stdin.flush()
    told: dict[str, Any] = {by: json.loads(p.communicate()[0]) for by, p in people.items()}
    after, new = left(few), entries(few)
    fresh = {number: entry for number, entry in new.items() if number not in old}
    assert {number: new[number] for number in old} == old
    # each of the thousand was saved, under its own number, or refused with a reason
    answered = [(by, *draw) for by in told for draw in told[by]["saved"]]
    assert len(answered) + sum(len(told[by]["refused"]) for by in told) == 2 * MANY
    assert {number: entry for number, entry in fresh.items() if entry[1] == "drawn"} == {
        number: (bottle, "drawn", by, -1_000) for by, bottle, number in answered
    }
    for number in ("S04", "S13", "S14"):
        taken = sum(bottle == number for _, bottle, _ in answered) * 1_000
        assert after[number] == before[number] - taken >= 0
    # S13 holds 130 and is asked for 333: it ends at nothing, and not below
    assert after["S13"] == 0
    short = [said for by in told for bottle, said in told[by]["refused"] if bottle == "S13"]
    assert len(short) >= 333 - 130
    assert all(s.startswith(("S13 holds 0", "Busy")) for s in short)
