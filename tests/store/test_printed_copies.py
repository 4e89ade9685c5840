"""Printed copies in the store: appended, numbered, never altered, and harmless when damaged."""

from __future__ import annotations

import sqlite3
from collections.abc import Iterator
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.store.printed_copies import last_copy, lines_written, next_copy
from stockroom.store.reading import reading

if TYPE_CHECKING:
    from conftest import Stockroom

NEW = (
    "INSERT INTO printed_copy (number, sheet, about, as_at, printed_at, by, lines)"
    " VALUES (?, ?, ?, ?, '2027-01-04 09:00', 'T1', ?)"
)
DAMAGED = ("", "{", "null", "[1, 2]", '"text"', "\x00\x01")


@pytest.fixture
def raw(own: Path) -> Iterator[sqlite3.Connection]:
    connection = sqlite3.connect(own, isolation_level=None)
    connection.execute(NEW, ("0001", "strip", "2027-01-04", "2027-01-04", '{"a":"one"}'))
    connection.execute(NEW, ("0002", "week", "2027-01-04", "2027-01-05", '{"b":"two"}'))
    connection.execute(NEW, ("0003", "strip", "2027-01-04", "2027-01-06", '{"a":"three"}'))
    yield connection
    connection.close()


@pytest.mark.file
@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE printed_copy SET by = 'T9'",
        "DELETE FROM printed_copy WHERE id = 1",
        "INSERT OR REPLACE INTO printed_copy SELECT * FROM printed_copy WHERE id = 1",
        "INSERT OR REPLACE INTO printed_copy SELECT 9, number, sheet, about, as_at, printed_at,"
        " by, lines FROM printed_copy WHERE id = 1",
    ],
)
def test_a_printed_copy_refuses(raw: sqlite3.Connection, statement: str) -> None:
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT A printed copy"):
        raw.execute(statement)


@pytest.mark.file
@pytest.mark.usefixtures("raw")
def test_the_copy_before_is_the_last_of_the_same_sheet_of_the_same_thing(own: Path) -> None:
    with reading(own) as reader:
        found = last_copy(reader, "strip", "2027-01-04")
        assert found is not None
        assert (found.number, found.as_at, found.by) == ("0003", date(2027, 1, 6), "T1")
        assert found.lines == {"a": "three"}
        assert last_copy(reader, "strip", "2027-04-12") is None
        assert last_copy(reader, "day", "2027-01-04") is None
        assert next_copy(reader) == "0004"


def test_the_first_copy_is_number_one(practice: Path) -> None:
    with reading(practice) as reader:
        assert next_copy(reader) == "0001"


def test_lines_keep_their_order_and_their_signs() -> None:
    assert lines_written({"b": "2 dm³", "a": "½"}) == '{"b": "2 dm³", "a": "½"}'


@pytest.mark.file
@pytest.mark.parametrize("lines", DAMAGED)
def test_damaged_lines_leave_nothing_to_mark_and_the_sheet_still_prints(
    raw: sqlite3.Connection, own: Path, stockroom: Stockroom, lines: str
) -> None:
    raw.execute(NEW, ("0004", "strip", "2027-01-04", "2027-01-07", lines))
    with reading(own) as reader:
        found = last_copy(reader, "strip", "2027-01-04")
    assert found is not None
    assert found.lines == {}
    told = stockroom("strip", "--json", store=own)
    assert (told.code, told.json["head"]["since"]) == (0, None)


@pytest.mark.file
def test_copies_are_handed_out_and_read_back(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    stockroom("strip", "--print", "s.pdf", store=own)
    stockroom("strip", "--print", "s.pdf", "--by", "T2", store=own)
    assert stockroom("verify", store=own).code == 0
    with sqlite3.connect(own) as connection:
        kept = connection.execute("SELECT * FROM printed_copy ORDER BY id").fetchall()
    assert [row[1] for row in kept] == ["0001", "0002"]
    handed = stockroom("hand-out", "out", store=own)
    assert handed.code == 0, handed.err
    back = tmp_path / "back.sqlite"
    came = stockroom("new", "--from", "out", store=back)
    assert came.code == 0, came.err
    with sqlite3.connect(back) as connection:
        assert connection.execute("SELECT * FROM printed_copy ORDER BY id").fetchall() == kept
