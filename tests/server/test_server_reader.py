"""The reading half over a server gives what it gives over a file, row by row."""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Iterator
from datetime import date
from pathlib import Path

import pytest
import server_stores

from stockroom.errors import StoreTrouble
from stockroom.settings import Server
from stockroom.store.columns import COLUMNS
from stockroom.store.engine import writing
from stockroom.store.reading import Reader, reading
from stockroom.store.snapshot import facts
from stockroom.store.tables import Department

pytestmark = pytest.mark.server


@pytest.fixture
def reader(practice: Server) -> Iterator[Reader]:
    with reading(practice) as opened:
        yield opened


def test_a_row_is_told_by_name_by_place_and_unpacked(reader: Reader) -> None:
    [row] = reader.ask("SELECT number, size AS full FROM bottle WHERE number = ?", "S13")
    number, full = row
    assert (row["number"], row[0], number) == ("S13",) * 3
    assert (row["full"], row[1]) == (full, full)
    assert dict(row) == {"number": "S13", "full": full}
    with pytest.raises(IndexError):
        row["empty"]


def test_of_two_columns_of_one_name_the_first_is_meant(reader: Reader) -> None:
    [row] = reader.ask("SELECT 1 AS one, 2 AS one, 3 AS three")
    assert (row["one"], row["three"], tuple(row)) == (1, 3, (1, 2, 3))


@pytest.mark.parametrize(
    ("sql", "values", "answer"),
    [
        ("SELECT ends_on FROM term ORDER BY id", (), "2027-03-26"),
        ("SELECT CAST(? AS DATE)", (date(2027, 1, 4),), "2027-01-04"),
        ("SELECT made_here FROM bottle WHERE number = ?", ("S13",), 1),
        ("SELECT made_here FROM bottle WHERE number = ?", ("B01",), 0),
        ("SELECT SUM(size) FROM vessel WHERE id < ?", (0,), None),
        ("SELECT '50 %' || ? || ' of what?'", ("b",), "50 %b of what?"),
        ("SELECT 7 % ?", (4,), 3),
        ("SELECT 'it''s ?'", (), "it's ?"),
    ],
)
def test_an_answer_is_what_a_file_gives(
    reader: Reader, college_file: Path, sql: str, values: tuple[object, ...], answer: object
) -> None:
    found = reader.ask(sql, *values)[0][0]
    assert (found, type(found)) == (answer, type(answer))
    if "CAST" not in sql:
        with reading(college_file) as file:
            assert file.ask(sql, *values)[0][0] == answer


def test_a_sum_of_whole_numbers_is_whole(reader: Reader) -> None:
    [row] = reader.ask("SELECT SUM(change), COUNT(*), AVG(change) FROM entry")
    assert [type(value) for value in row] == [int, int, float]


def test_every_table_is_read_as_from_the_file(reader: Reader, college_file: Path) -> None:
    with reading(college_file) as file:
        for table in COLUMNS:
            ours, theirs = (
                [tuple(row) for row in each.rows(table, "ORDER BY 1")] for each in (file, reader)
            )
            assert ours == theirs, table
            assert [list(map(type, row)) for row in ours] == [
                list(map(type, row)) for row in theirs
            ], table


def test_the_facts_are_those_of_the_file(practice: Server, college_file: Path) -> None:
    for day in (date(2027, 1, 4), date(2027, 2, 22)):
        assert facts(practice, day) == facts(college_file, day)


def test_texts_come_in_the_order_of_a_file_whatever_the_servers_language(
    own: Server, tmp_path: Path
) -> None:
    names = ["a", "B", "b", "A", "é", "e", "z", "Z", "_", "10", "9", "a b", "a-b", "ab"]
    with writing(own) as session:
        session.add_all(Department(department=f"x{name}", name=name) for name in names)
    with server_stores.raw(own) as raw:
        ordered = raw.execute("SELECT 'a' < 'B' COLLATE \"default\"").fetchone()
        assert ordered == (True,), "the test server's own order is that of a file: no proof"
    with reading(own) as reader:
        asked = "SELECT name FROM department WHERE department LIKE ? ORDER BY name"
        found = [row[0] for row in reader.ask(asked, "x%")]
    assert found == sorted(names)


def test_reading_is_of_one_moment(own: Server) -> None:
    with reading(own) as reader:
        before = reader.ask("SELECT COUNT(*) FROM department")[0][0]
        with writing(own) as session:
            session.add(Department(department="later", name=""))
        assert reader.ask("SELECT COUNT(*) FROM department")[0][0] == before


def test_reading_cannot_write(own: Server) -> None:
    with (
        pytest.raises(StoreTrouble, match="read but not written"),
        reading(own) as reader,
    ):
        reader.ask("UPDATE booking SET groups = 1 RETURNING id")


def test_reading_a_server_loads_nothing_heavy(practice: Server) -> None:
    code = (
        "import sys, datetime; from stockroom.settings import store_at;"
        " from stockroom.store.snapshot import facts;"
        " facts(store_at(sys.argv[1]), datetime.date(2027, 1, 4));"
        " print(*sorted({'sqlmodel', 'sqlalchemy', 'alembic', 'pint'} & set(sys.modules)))"
    )
    words = [sys.executable, "-c", code, practice.url]
    assert subprocess.run(words, capture_output=True, text=True, check=True).stdout == "\n"
