"""A program that is there to be killed: it has everything loaded, and works until it is shot.

    python tests/victim.py      then one JSON line per worker on standard input

Each line names the work and the store. A worker of its own is let go for it, its number is
answered, and once it is dead how it died. Forked and not started: two hundred of them would
otherwise spend their lives importing; for the same reason `warm` does one event of each kind
here, on a store nobody looks at. What the worker was told is saved, it notes in a file.
"""

from __future__ import annotations

import itertools
import json
import os
import random
import resource
import signal
import sys
from collections.abc import Callable
from dataclasses import asdict
from datetime import date, datetime
from pathlib import Path
from typing import Any

from sqlalchemy import Engine, event

from stockroom import clock
from stockroom.bringing.answers import answers_of
from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import making, stock
from stockroom.service.answers import Done
from stockroom.service.bring_in import Meant, bring_in
from stockroom.service.database import new_store

REFUSED = 3
"""How a worker ends whose act was refused in words."""

DAY = date(2027, 1, 4)
MADE = "copper sulfate 0.5 mol/dm3"
SECOND_BOTTLES = Meant(answers=answers_of(["changed=second"]))
SAID: dict[str, Any] = {"on": None, "today": DAY, "by": "T1"}


def main() -> None:
    """Let go of one worker per line, and tell how each ended."""
    for line in sys.stdin:
        asked = json.loads(line)
        if asked["work"] == "warm":
            _warm(Path(asked["path"]))
            continue
        number = os.fork()
        if number == 0:
            _worker(asked)
        print(number, flush=True)
        _, ended = os.waitpid(number, 0)
        print(os.waitstatus_to_exitcode(ended), flush=True)


def _warm(path: Path) -> None:
    """One event of each kind, so that the workers begin where a second event would."""
    for event_of in (make, arrive, bring, draw):
        event_of(path, random.Random(0))


def _worker(asked: dict[str, Any]) -> None:
    """Do what was asked until killed, and never come back. Exit 1 where it broke by itself."""
    try:
        if asked.get("after") is not None:
            _die_at(asked["after"])
        _WORK[asked["work"]](asked)
    except BaseException as trouble:
        print(f"{type(trouble).__name__}: {trouble}", file=sys.stderr, flush=True)
        os._exit(1)
    os._exit(0)


def _die_at(turn: int) -> None:
    """Kill this very program at its so-many-th statement that writes, or at the saving of it."""
    left = itertools.count(turn, -1)

    def fall(*_: object) -> None:
        if next(left) == 0:
            os.kill(os.getpid(), signal.SIGKILL)

    def written(_c: object, _cursor: object, statement: str, *_rest: object) -> None:
        if statement.lstrip().upper().startswith(("INSERT", "UPDATE", "CREATE")):
            fall()

    event.listen(Engine, "after_cursor_execute", written)
    event.listen(Engine, "commit", fall)


def _events(asked: dict[str, Any]) -> None:
    """Make, arrive by three, bring in a list, draw from what is sealed, until killed."""
    path, chance = Path(asked["path"]), random.Random(asked["seed"])
    with open(asked["told"], "ab", buffering=0) as told:
        # not for ever: where no shot falls the test should fail, and not hang
        for _ in range(200):
            try:
                done = chance.choice((make, make, arrive, bring, draw))(path, chance)
            except StockroomError as refusal:
                told.write(f"- {refusal}\n".encode())
            else:
                told.write(f"{done.entry}\n".encode())


def make(path: Path, chance: random.Random) -> Done:
    """Make a little copper sulfate: a draw, a bottle and its parent."""
    volume = Amount.cm3(chance.randint(1, 9))
    return making.make_up(path, MADE, volume, sources=[], place="A1", **SAID)


def arrive(path: Path, chance: random.Random) -> Done:
    """Three bottles at once."""
    size = Amount.grams(chance.choice((100, 500)))
    return stock.arrive(
        path, "copper(II) sulfate pentahydrate", size, printed="none", place="A1", count=3, **SAID
    )


def bring(path: Path, chance: random.Random) -> Done:
    """A list of twelve bottles, from a file that was never seen before."""
    rows = [f"sodium chloride,A2,{chance.randint(100, 900_000)} mg,none\n" for _ in range(12)]
    file = path.with_name(f"list {chance.random()}.csv")
    file.write_text("what,where,how much,printed\n" + "".join(rows))
    done = bring_in(path, file, as_meant=SECOND_BOTTLES, today=DAY, by="T1")
    assert len(done.written) == 12, done
    return Done("brought in")


def draw(path: Path, chance: random.Random) -> Done:
    """A gram from the bottle that arrived last."""
    # the last to arrive is sealed more often than not: its opening is a second entry
    return stock.draw(path, _last_bought(path), Amount.grams(chance.randint(1, 3)), **SAID)


def _last_bought(path: Path) -> str:
    from stockroom.store.reading import reading

    with reading(path) as reader:
        rows = reader.ask("SELECT number FROM bottle WHERE number LIKE 'B%' ORDER BY id DESC")
    return str(rows[0][0])


def _new(asked: dict[str, Any]) -> None:
    """Make a house from a folder of tables."""
    new_store(Path(asked["path"]), tables=Path(asked["tables"]))


def _act(asked: dict[str, Any]) -> None:
    """Do one act of the simulated year, and write down what came of it."""
    sys.path.insert(0, str(Path(__file__).parent / "year"))
    from year_acts import Act, perform

    now = datetime.fromisoformat(asked["now"])
    clock.now = lambda: now
    if "limit" in asked:
        resource.setrlimit(resource.RLIMIT_FSIZE, (asked["limit"], asked["limit"]))
    today = date.fromisoformat(asked["today"])
    told, code = {}, 0
    try:
        told = asdict(perform(Path(asked["path"]), Act(**asked["act"]), today, asked["by"]))
    except StockroomError as refusal:
        told, code = {"refused": refusal.message}, REFUSED
    Path(asked["told"]).write_text(json.dumps(told))
    os._exit(code)


_WORK: dict[str, Callable[[dict[str, Any]], None]] = {"act": _act, "events": _events, "new": _new}

if __name__ == "__main__":
    main()
