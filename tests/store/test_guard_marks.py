"""The triggers written down for `verify` are those the migrations make, on both engines."""

from __future__ import annotations

import re
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest

from stockroom.store.engine import create
from stockroom.store.guard_marks import GUARDS, mark
from stockroom.store.migrations import guards
from stockroom.store.migrations.guards import Guard, Keeper

# as a server numbers them: 1 for each row, 2 before, then what wakes it
BITS = {"ROW": 1, "BEFORE": 2, "INSERT": 4, "DELETE": 8, "UPDATE": 16, "TRUNCATE": 32}
MADE = re.compile(r"CREATE TRIGGER (\w+) (\w+) (\w+) ON (\w+) FOR EACH (\w+)")
BODY = re.compile(r"CREATE FUNCTION (\w+)\(.*\$guard\$(.*)\$guard\$", re.DOTALL)

Marks = dict[str, tuple[str, str, str]]


def on_server(made: dict[str, Guard | Keeper]) -> dict[str, tuple[str, str]]:
    """Name to table and mark, of every trigger a server would get."""
    said = [statement for each in made.values() for statement in each.postgresql]
    bodies = {found[1]: found[2] for each in said if (found := BODY.match(each))}
    triggers = [found.groups() for each in said if (found := MADE.match(each))]
    return {
        name: (table, mark(f"{BITS[when] + BITS[action] + BITS.get(each, 0)} {bodies[name]}"))
        for name, when, action, table, each in triggers
    }


def fresh(folder: Path, monkeypatch: pytest.MonkeyPatch) -> Marks:
    """What the migrations of today make, as `GUARDS` writes it."""
    made: dict[str, Guard | Keeper] = {}
    put_up, take_down = guards.put_up, guards.take_down

    def noted(*each: Guard | Keeper) -> None:
        made.update({one.name: one for one in each})
        put_up(*each)

    def forgotten(name: str) -> None:
        made.pop(name, None)
        take_down(name)

    monkeypatch.setattr(guards, "put_up", noted)
    monkeypatch.setattr(guards, "take_down", forgotten)
    path = folder / "fresh.sqlite"
    create(path)
    with closing(sqlite3.connect(path)) as held:
        rows = held.execute("SELECT name, tbl_name, sql FROM sqlite_master WHERE type = 'trigger'")
        file = {name: (table, mark(text)) for name, table, text in rows}
    server = on_server(made)
    return {
        name: (
            (file.get(name) or server[name])[0],
            file.get(name, ("", ""))[1],
            server.get(name, ("", ""))[1],
        )
        for name in sorted(file.keys() | server.keys())
    }


def test_every_trigger_is_written_down_as_it_is_made(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    now = fresh(tmp_path, monkeypatch)
    lines = [f'    "{name}": {now[name]},'.replace("'", '"') for name in now]
    assert now == GUARDS, "write in stockroom/store/guard_marks.py:\n" + "\n".join(lines)


def test_a_trigger_of_other_words_has_another_mark() -> None:
    assert mark("CREATE TRIGGER a  BEFORE\nUPDATE") == mark("CREATE TRIGGER a BEFORE UPDATE")
    assert mark("CREATE TRIGGER a BEFORE UPDATE") != mark("CREATE TRIGGER a AFTER UPDATE")
