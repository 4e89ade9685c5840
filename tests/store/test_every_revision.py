"""Stores as each earlier layout was written: they open, are copied, come up and hold the same.

The stores under `layouts/` were written by the programs of their day; `write_layouts.py` says how.
"""

from __future__ import annotations

import gzip
import json
import sqlite3
import sys
from contextlib import closing
from datetime import date
from pathlib import Path
from runpy import run_path

import pytest
from alembic import command
from alembic.config import Config
from alembic.script import ScriptDirectory
from sqlalchemy import create_engine

from stockroom.errors import StoreTrouble
from stockroom.service.plan import term_plan
from stockroom.service.verify import verify
from stockroom.store.backup import check_sound
from stockroom.store.content import columns_there, contents
from stockroom.store.engine import MIGRATIONS, writing
from stockroom.store.reading import as_it_stands, reading
from stockroom.store.tables import Term
from stockroom.store.trouble import REVISIONS

LAYOUTS = Path(__file__).with_name("layouts")
EARLIER = REVISIONS[:-1]
earlier = pytest.mark.parametrize("revision", EARLIER)


def unpacked(name: str) -> str:
    return gzip.decompress((LAYOUTS / name).read_bytes()).decode()


def stored(revision: str, folder: Path) -> Path:
    """The store of a layout, as the program of its day left it."""
    path = folder / "house.sqlite"
    with closing(sqlite3.connect(path)) as held:
        held.executescript(unpacked(f"{revision}.sql.gz"))
        held.execute("PRAGMA journal_mode = WAL")
    return path


def layout_of(path: Path) -> str:
    with closing(sqlite3.connect(path)) as held:
        return str(held.execute("SELECT version_num FROM alembic_version").fetchone()[0])


def test_every_earlier_layout_has_its_store() -> None:
    """Fails when a migration is added: `write_layouts.py` says how the store before it is kept."""
    kept = {path.name.removesuffix(".sql.gz") for path in LAYOUTS.glob("*.sql.gz")}
    assert kept == set(EARLIER)


@earlier
def test_a_store_of_an_earlier_layout_comes_up_and_holds_the_same(
    revision: str, tmp_path: Path
) -> None:
    path = stored(revision, tmp_path)
    assert layout_of(path) == revision
    with as_it_stands(path) as (reader, _):
        columns = columns_there(reader)
        before = contents(reader, columns)
    with reading(path) as reader:
        # the columns it had then, in the tables it had then: not a cell has changed
        assert contents(reader, columns) == before
        check_sound(reader, str(path))
    assert layout_of(path) == REVISIONS[-1]
    copy = tmp_path / f"house.sqlite.before-{REVISIONS[-1]}"
    with as_it_stands(copy) as (reader, found):
        assert (found, contents(reader, columns)) == (revision, before)


@earlier
def test_it_is_read_as_the_program_of_its_day_read_it(
    revision: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    path = stored(revision, tmp_path)
    monkeypatch.setattr(sys, "argv", ["tell", str(path)])
    exec(run_path(str(LAYOUTS / "write_layouts.py"))["TELL"], {})
    assert json.loads(capsys.readouterr().out) == json.loads(unpacked(f"{revision}.json.gz"))


@earlier
def test_it_can_be_planned_and_written_to(revision: str, tmp_path: Path) -> None:
    path = stored(revision, tmp_path)
    plan = term_plan(path, as_at=date(2027, 1, 6))
    assert len({need.booking.number for need in plan.needs}) == 29
    assert verify(path).faults == ()
    with writing(path) as session:
        session.add(Term(term="next", starts_on=date(2027, 4, 19), ends_on=date(2027, 7, 9)))
    with closing(sqlite3.connect(path)) as raw:
        for entry in ("UPDATE entry SET change = 0", "DELETE FROM entry"):
            with pytest.raises(sqlite3.IntegrityError, match="KEPT A ledger entry is never"):
                raw.execute(entry)


def test_no_layout_is_ever_taken_back(tmp_path: Path) -> None:
    path = stored(EARLIER[-1], tmp_path)
    with reading(path):
        pass
    config = Config()
    config.set_main_option("script_location", str(MIGRATIONS))
    before = path.read_bytes()
    opened = create_engine(f"sqlite:///{path}")
    with opened.connect() as connection:
        config.attributes["connection"] = connection
        with pytest.raises(NotImplementedError, match="never taken back"):
            command.downgrade(config, "-1")
    opened.dispose()
    assert path.read_bytes() == before
    for step in ScriptDirectory(str(MIGRATIONS)).walk_revisions():
        with pytest.raises(NotImplementedError, match="never taken back"):
            step.module.downgrade()


def test_an_older_program_leaves_a_newer_store_alone(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = stored(EARLIER[-1], tmp_path)
    with reading(path):
        pass
    before = path.read_bytes()
    # this program, as it was before the last migration
    monkeypatch.setattr("stockroom.store.trouble.REVISIONS", EARLIER)
    for open_it in (reading, writing):
        newer = f"newer stockroom .revision {REVISIONS[-1]}; this"
        with pytest.raises(StoreTrouble, match=newer), open_it(path):
            pass
    assert path.read_bytes() == before
