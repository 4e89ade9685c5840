"""Two people at once: nothing saved is lost, and nothing is drawn twice."""

from __future__ import annotations

import subprocess
import sys
import threading
from datetime import date
from pathlib import Path

from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import stock
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 4)


def draw(path: Path, cubic: float, by: str) -> str:
    """What somebody is told who draws from S13."""
    try:
        done = stock.draw(path, "S13", Amount.cm3(cubic), on=None, today=TODAY, by=by)
    except StockroomError as refusal:
        return refusal.message
    return done.text


# a program of its own each: a process that shares this one's memory would prove less
MANY = """
import sys
from datetime import date
from pathlib import Path
from stockroom.measure.amounts import Amount
from stockroom.service import stock
for _ in range(40):
    stock.draw(
        Path(sys.argv[1]), "S04", Amount.cm3(1), on=None, today=date(2027, 1, 4), by=sys.argv[2]
    )
"""


def left(path: Path, number: str) -> int:
    return next(b.left for b in facts(path, TODAY).bottles if b.number == number)


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
    assert refused.startswith("S13 holds 30 cm³; 100 cm³ asked. T")
    assert left(own, "S13") == Amount.cm3(30).micro


def test_two_programs_writing_at_once_lose_nothing(own: Path) -> None:
    before, entries = left(own, "S04"), len(diary(own, "S04"))
    people = [subprocess.Popen([sys.executable, "-c", MANY, own, by]) for by in ("T1", "T2")]
    assert [person.wait() for person in people] == [0, 0]
    assert before - left(own, "S04") == Amount.cm3(80).micro
    assert len(diary(own, "S04")) == entries + 80
