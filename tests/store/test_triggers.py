"""The ledger refuses, in the database itself, to be altered, shortened or overdrawn."""

from __future__ import annotations

import sqlite3
from collections.abc import Iterator
from pathlib import Path

import pytest

pytestmark = pytest.mark.file

NEW = (
    "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    " strength_text, reason, note, booking, puts_right) VALUES"
    " (:bottle, :kind, '2027-01-04', '2027-01-04', '', 'T1', :change, '', '', '', '', :right)"
)


@pytest.fixture
def raw(own: Path) -> Iterator[sqlite3.Connection]:
    connection = sqlite3.connect(own)
    yield connection
    connection.close()


def bottle(raw: sqlite3.Connection, number: str) -> int:
    return int(raw.execute("SELECT id FROM bottle WHERE number = ?", (number,)).fetchone()[0])


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE entry SET change = 0 WHERE id = 1",
        "UPDATE entry SET by = 'T9'",
        "DELETE FROM entry WHERE id = 1",
        "DELETE FROM bottle WHERE id = 1",
        "INSERT OR REPLACE INTO entry SELECT * FROM entry WHERE id = 1",
    ],
)
def test_the_ledger_refuses(raw: sqlite3.Connection, statement: str) -> None:
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT "):
        raw.execute(statement)


@pytest.mark.parametrize(
    "statement", ["UPDATE booking_change SET by = ''", "DELETE FROM booking_change"]
)
def test_the_record_of_a_booking_refuses(raw: sqlite3.Connection, statement: str) -> None:
    raw.execute(
        "INSERT INTO booking_change (booking_id, entered_on, entered_at, by, what, before, after)"
        " VALUES (1, '2027-01-04', '', 'T1', 'groups', '8', '9')"
    )
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT "):
        raw.execute(statement)


def test_a_draw_beyond_the_balance_is_refused(raw: sqlite3.Connection) -> None:
    held = {"bottle": bottle(raw, "S13"), "kind": "drawn", "right": None}
    raw.execute(NEW, {**held, "change": -130_000})
    with pytest.raises(sqlite3.IntegrityError, match=r"^NOTENOUGH "):
        raw.execute(NEW, {**held, "change": -1})


def test_an_entry_is_put_right_once(raw: sqlite3.Connection) -> None:
    values = {"bottle": bottle(raw, "S13"), "kind": "put right", "change": 0, "right": 1}
    raw.execute(NEW, values)
    with pytest.raises(sqlite3.IntegrityError, match="once"):
        raw.execute(NEW, values)


def test_other_rows_may_still_be_altered(raw: sqlite3.Connection) -> None:
    assert raw.execute("UPDATE booking SET groups = 13 WHERE number = 'K06'").rowcount == 1


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE row_change SET by = ''",
        "DELETE FROM row_change",
        "INSERT OR REPLACE INTO row_change SELECT * FROM row_change",
    ],
)
def test_the_record_of_a_correction_refuses(raw: sqlite3.Connection, statement: str) -> None:
    raw.execute(
        "INSERT INTO row_change (table_name, row_key, column_name, before, after, why, by,"
        " entered_on, entered_at) VALUES ('places', 'A2', 'name', '', 'x', 'y', 'T1', '', '')"
    )
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT "):
        raw.execute(statement)


@pytest.fixture
def reading(raw: sqlite3.Connection) -> tuple[int, str, int]:
    """A reading of a logger, as its row."""
    row = (1, "2027-01-04T09:00", 500)
    raw.execute("INSERT INTO reading (place_id, at, centi) VALUES (?, ?, ?)", row)
    return row


def change_row(raw: sqlite3.Connection) -> int:
    named = "table_name, row_key, column_name, before, after, why, by, entered_on, entered_at"
    marks = "'readings', 'F1', 'at', '', '', '', '', '2027-01-04', ''"
    return int(raw.execute(f"INSERT INTO row_change ({named}) VALUES ({marks})").lastrowid or 0)


def keep(raw: sqlite3.Connection, row: tuple[int, str, int]) -> None:
    named = "place_id, at, centi, change_id"
    raw.execute(
        f"INSERT INTO reading_taken_back ({named}) VALUES (?, ?, ?, ?)", (*row, change_row(raw))
    )


def test_a_reading_goes_only_where_it_is_kept(
    raw: sqlite3.Connection, reading: tuple[int, str, int]
) -> None:
    keep(raw, (reading[0], reading[1], 600))
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT What a logger read is never removed"):
        raw.execute("DELETE FROM reading")
    keep(raw, reading)
    assert raw.execute("DELETE FROM reading").rowcount == 1


@pytest.mark.parametrize(
    "statement", ["UPDATE reading_taken_back SET centi = 0", "DELETE FROM reading_taken_back"]
)
def test_what_was_taken_back_stays(
    raw: sqlite3.Connection, reading: tuple[int, str, int], statement: str
) -> None:
    keep(raw, reading)
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT What was taken back is never"):
        raw.execute(statement)
