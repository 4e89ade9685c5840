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
from stockroom.store.engine import MIGRATIONS, put_by, writing
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


def rows(path: Path, question: str) -> list[tuple[object, ...]]:
    with closing(sqlite3.connect(path)) as held:
        return held.execute(question).fetchall()


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


def test_a_copy_that_is_there_is_kept_and_none_is_made_twice(older: Path) -> None:
    first = put_by(older)
    assert put_by(older) == first
    with closing(sqlite3.connect(older)) as raw:
        raw.executescript("INSERT INTO place VALUES (2, 'A2', '', NULL, '', '')")
    second = put_by(older)
    assert second.name == f"{first.name}-2"
    held = [len(rows(copy, "SELECT * FROM place")) for copy in (first, second)]
    assert held == [1, 2]


def test_half_a_copy_is_never_taken_for_one(older: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(fresh: Path) -> Path:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(engine, "_place_for", full)
    with pytest.raises(StoreTrouble, match="No space left"):
        facts(older, date(2027, 1, 5))
    assert [path.name for path in older.parent.iterdir()] == ["old.sqlite"]
    assert rows(older, "SELECT version_num FROM alembic_version") == [("0001",)]


@pytest.mark.parametrize(("setting", "house"), [("name", True), ("practice", False)])
def test_rules_of_an_older_store_are_its_own_unless_it_is_practice(
    older: Path, setting: str, house: bool
) -> None:
    with closing(sqlite3.connect(older)) as raw:
        raw.executescript(f"UPDATE house SET setting = '{setting}', value = 'yes'")
    (rule,) = facts(older, date(2027, 1, 5)).lines["starch 1 %"].rules
    assert rule.house is house


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


_SHEET = (
    "hazard_text VALUES (1, 1, 'Danger', 'H314', '', 'x', '', 'T1', '2027-01-04', '2027-01-04')"
)
_READING = "reading VALUES (1, 1, '2027-01-04T09:00', 2000)"


@pytest.mark.parametrize(
    ("row", "statement", "past"),
    [
        (_SHEET, "UPDATE hazard_text SET statements = ''", "altered"),
        (_SHEET, "DELETE FROM hazard_text", "removed"),
        (_SHEET, f"INSERT OR REPLACE INTO {_SHEET}", "written over"),
        (_READING, "UPDATE reading SET centi = 0", "altered"),
        (_READING, "DELETE FROM reading", "removed"),
        (_READING, f"INSERT OR REPLACE INTO {_READING}", "written over"),
        (_READING, f"INSERT OR REPLACE INTO {_READING.replace('(1,', '(2,')}", "written over"),
    ],
)
def test_what_a_sheet_said_and_a_logger_read_is_kept(
    older: Path, row: str, statement: str, past: str
) -> None:
    with writing(older):
        pass
    with closing(sqlite3.connect(older)) as raw:
        raw.execute(f"INSERT INTO {row}")
        with pytest.raises(sqlite3.IntegrityError, match=f"^KEPT .* is never {past}"):
            raw.execute(statement)
