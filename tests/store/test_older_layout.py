"""A store in an earlier layout is brought up to date where it stands, after a copy of it."""

from __future__ import annotations

import sqlite3
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest
from alembic import command
from alembic.config import Config
from sqlalchemy import create_engine

from stockroom.errors import StoreTrouble
from stockroom.store import engine
from stockroom.store.engine import MIGRATIONS, writing
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts
from stockroom.store.trouble import REVISIONS


@pytest.fixture
def older(tmp_path: Path) -> Path:
    """A store as the first layout had it, with one house, place and line in it."""
    path = tmp_path / "old.sqlite"
    config = Config()
    config.set_main_option("script_location", str(MIGRATIONS))
    opened = create_engine(f"sqlite:///{path}")
    with opened.begin() as connection:
        config.attributes["connection"] = connection
        command.upgrade(config, "0001")
    opened.dispose()
    with closing(sqlite3.connect(path)) as raw:
        raw.executescript(_ROWS)
    return path


_ROWS = """
INSERT INTO house VALUES ('name', 'Old House', '');
INSERT INTO place VALUES (1, 'A1', 'cupboard', 19.0, '', '');
INSERT INTO line VALUES (1, 'starch 1 %', 'starch', NULL, 'solution', 'volume', 10.0, 'g/dm3',
 '1 %', '', NULL, 1.0, NULL, NULL, NULL, '', 0, '', '');
INSERT INTO keeping_rule VALUES (1, 1, 'life', 7, 'days', 'made', 'any', 0,
 NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL, 'bench');
INSERT INTO bottle VALUES (1, 'S01', 1, 500000, NULL, '2027-01-04', '', '', '', '', 1, '');
INSERT INTO entry VALUES (1, 1, 'made', '2027-01-04', '2027-01-04', '2027-01-04T09:00', 'T1',
 500000, NULL, '', NULL, 1, '', '', '', NULL);
"""


def test_reading_an_older_store_brings_it_up_and_loses_nothing(older: Path) -> None:
    known = facts(older, date(2027, 1, 5))
    assert [bottle.number for bottle in known.bottles] == ["S01"]
    assert known.bottles[0].left == 500000
    assert len(known.lines["starch 1 %"].rules) == 1


def test_a_copy_of_the_older_store_stands_beside_it(older: Path) -> None:
    before = older.read_bytes()
    with reading(older):
        pass
    copy = older.with_name(f"old.sqlite.before-{REVISIONS[-1]}")
    assert copy.exists()
    with closing(sqlite3.connect(copy)) as held:
        assert held.execute("SELECT version_num FROM alembic_version").fetchone() == ("0001",)
    assert len(copy.read_bytes()) == len(before)


def test_writing_to_an_older_store_brings_it_up_too(older: Path) -> None:
    with writing(older):
        pass
    with closing(sqlite3.connect(older)) as held:
        found = held.execute("SELECT version_num FROM alembic_version").fetchone()
    assert found == (REVISIONS[-1],)


def test_a_change_of_layout_that_fails_leaves_the_store_as_it_was(
    older: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(connection: object) -> None:
        raise StoreTrouble("half way", "try again")

    monkeypatch.setattr(engine, "migrate", fail)
    with pytest.raises(StoreTrouble, match="half way"):
        facts(older, date(2027, 1, 5))
    with closing(sqlite3.connect(older)) as held:
        assert held.execute("SELECT version_num FROM alembic_version").fetchone() == ("0001",)


def test_the_ledger_of_an_older_store_is_still_kept(older: Path) -> None:
    with reading(older):
        pass
    with (
        closing(sqlite3.connect(older)) as raw,
        pytest.raises(sqlite3.IntegrityError, match="never altered"),
    ):
        raw.execute("UPDATE entry SET change = 0")


def test_what_a_suppliers_sheet_said_is_never_altered(older: Path) -> None:
    with writing(older):
        pass
    with closing(sqlite3.connect(older)) as raw:
        raw.execute(
            "INSERT INTO hazard_text (line_id, signal_word, statements, pictograms, sheet, why,"
            " by, entered_on, entered_at) VALUES (1, 'danger', 'H314', '', 'x', '', 'T1',"
            " '2027-01-04', '2027-01-04T09:00')"
        )
        with pytest.raises(sqlite3.IntegrityError, match="never removed"):
            raw.execute("DELETE FROM hazard_text")
