"""A store that is missing, foreign, damaged, locked, full or too new is said so in words."""

from __future__ import annotations

import contextlib
import sqlite3
from collections.abc import Callable
from datetime import date
from pathlib import Path

import pytest
from sqlalchemy import text

from stockroom.errors import StoreTrouble
from stockroom.store import engine
from stockroom.store.engine import writing
from stockroom.store.snapshot import facts

DAY = date(2027, 1, 4)
LONG = "x" * 200_000
"""More than the free pages of the practice store can take."""


def read(path: Path) -> None:
    facts(path, DAY)


def write(path: Path, *statements: str) -> None:
    with writing(path) as session:
        for statement in statements or ("UPDATE booking SET groups = 1",):
            session.connection().execute(text(statement))


BOTH = pytest.mark.parametrize("use", [read, write])


@BOTH
def test_a_missing_store_says_how_to_make_one(tmp_path: Path, use: Callable[[Path], None]) -> None:
    with pytest.raises(StoreTrouble, match=r"No store at .*nowhere") as caught:
        use(tmp_path / "nowhere.sqlite")
    assert "stockroom demo" in caught.value.hint
    assert list(tmp_path.iterdir()) == []


@BOTH
def test_a_folder_is_no_store(tmp_path: Path, use: Callable[[Path], None]) -> None:
    with pytest.raises(StoreTrouble, match="is a folder"):
        use(tmp_path)


@BOTH
@pytest.mark.parametrize("content", [b"", b"name,amount\nhypo,640\n" * 400, b"\x00" * 8192])
def test_another_kind_of_file_is_left_alone(
    tmp_path: Path, content: bytes, use: Callable[[Path], None]
) -> None:
    path = tmp_path / "list.csv"
    path.write_bytes(content)
    with pytest.raises(StoreTrouble, match="is not a stockroom store"):
        use(path)
    assert path.read_bytes() == content


@BOTH
def test_another_programs_database_is_left_alone(
    tmp_path: Path, use: Callable[[Path], None]
) -> None:
    path = tmp_path / "other.sqlite"
    with sqlite3.connect(path) as connection:
        connection.execute("CREATE TABLE alembic_version (version_num TEXT)")
        connection.execute("CREATE TABLE song (title TEXT)")
    connection.close()
    with pytest.raises(StoreTrouble, match="is not a stockroom store"):
        use(path)


@pytest.mark.file
@pytest.mark.parametrize("part", [0.3, 0.6, 0.9])
def test_a_store_cut_short_is_called_damaged(own: Path, part: float) -> None:
    whole = own.read_bytes()
    own.write_bytes(whole[: int(len(whole) * part)])
    with pytest.raises(StoreTrouble, match="damaged") as caught:
        read(own)
    assert caught.value.hint.endswith("Put the last good copy of the file back.")


@pytest.mark.file
@BOTH
def test_a_store_from_a_newer_program_is_not_touched(
    own: Path, use: Callable[[Path], None]
) -> None:
    with sqlite3.connect(own) as connection:
        connection.execute("UPDATE alembic_version SET version_num = '0099'")
    connection.close()
    with pytest.raises(StoreTrouble, match=r"newer stockroom \(revision 0099"):
        use(own)


@pytest.mark.file
def test_a_store_somebody_else_is_writing_to_is_busy(
    own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(engine, "BUSY_SECONDS", 0.05)
    other = sqlite3.connect(own, isolation_level=None)
    other.execute("BEGIN IMMEDIATE")
    with pytest.raises(StoreTrouble, match="Busy: somebody else is writing"):
        write(own)
    other.close()


def test_reading_goes_on_while_somebody_writes(own: Path) -> None:
    with writing(own) as session:
        session.connection().execute(text("UPDATE booking SET groups = 199"))
        assert {booking.groups for booking in facts(own, DAY).bookings} != {199}


@pytest.mark.file
@pytest.mark.parametrize(
    ("pragma", "said"),
    [("query_only = ON", "read but not written"), ("max_page_count = 1", "is full")],
)
def test_a_store_that_cannot_take_more_says_that_nothing_was_saved(
    own: Path, pragma: str, said: str
) -> None:
    with pytest.raises(StoreTrouble, match=said) as caught:
        write(own, f"PRAGMA {pragma}", f"UPDATE booking SET room = '{LONG}'")
    assert "nothing was saved" in caught.value.message
    assert LONG not in {booking.room for booking in facts(own, DAY).bookings}


def test_what_a_trigger_says_reaches_the_user(own: Path) -> None:
    with pytest.raises(StoreTrouble, match="never altered"):
        write(own, "UPDATE entry SET change = 0")


def test_an_error_of_ones_own_saves_nothing(own: Path) -> None:
    with contextlib.suppress(RuntimeError), writing(own) as session:
        session.connection().execute(text("UPDATE booking SET groups = 199"))
        raise RuntimeError
    assert 199 not in {booking.groups for booking in facts(own, DAY).bookings}
