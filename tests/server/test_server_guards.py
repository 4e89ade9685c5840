"""On a server too the database itself refuses to have history altered, or a bottle overdrawn."""

from __future__ import annotations

import threading
from collections.abc import Iterator
from typing import Any

import psycopg
import pytest
import server_stores
from psycopg.errors import RaiseException

from stockroom.settings import Server

pytestmark = pytest.mark.server

NEW = (
    "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    " strength_text, reason, note, booking, puts_right, about) VALUES"
)
ROW = "((SELECT id FROM bottle WHERE number = 'S13'), '{}', '2027-01-04', '2027-01-04', '', 'T1', {}, '', '', '', '', {}, false)"  # noqa: E501
GUARDED = (
    "entry booking_change row_change hazard_text reading reading_taken_back placed placed_share"
    " placed_came placed_change printed_plan walk walk_end submission backup_made bottle"
).split()


def row(change: int, kind: str = "drawn", puts_right: str = "NULL") -> str:
    return ROW.format(kind, change, puts_right)


@pytest.fixture
def raw(own: Server) -> Iterator[psycopg.Connection[Any]]:
    with server_stores.raw(own) as opened:
        yield opened


def held(raw: psycopg.Connection[Any], number: str = "S13") -> int:
    asked = (
        "SELECT held, (SELECT SUM(change) FROM entry WHERE bottle_id = bottle.id) FROM kept_balance"
        " JOIN bottle ON bottle.id = bottle_id WHERE number = %s"
    )
    found = raw.execute(asked, (number,)).fetchone()
    assert found is not None
    assert found[0] == found[1]
    return int(found[0])


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE entry SET change = 0 WHERE id = 1",
        "DELETE FROM entry WHERE id = 1",
        "DELETE FROM bottle WHERE id = 1",
        "INSERT INTO entry SELECT * FROM entry WHERE id = 1",
        "INSERT INTO entry SELECT * FROM entry WHERE id = 1 ON CONFLICT (id) DO NOTHING",
        "INSERT INTO entry SELECT * FROM entry WHERE id = 1 ON CONFLICT (id) DO UPDATE SET by = ''",
    ],
)
def test_the_ledger_refuses(raw: psycopg.Connection[Any], statement: str) -> None:
    with pytest.raises(RaiseException, match=r"^KEPT "):
        raw.execute(statement)


@pytest.mark.parametrize("table", GUARDED)
def test_no_record_is_emptied_at_once(raw: psycopg.Connection[Any], table: str) -> None:
    with pytest.raises(RaiseException, match=r"^KEPT "):
        raw.execute(f"TRUNCATE {table} CASCADE")


def test_a_draw_beyond_the_balance_is_refused(raw: psycopg.Connection[Any]) -> None:
    raw.execute(NEW + row(-130_000))
    with pytest.raises(RaiseException, match=r"^NOTENOUGH "):
        raw.execute(NEW + row(-1))
    assert held(raw) == 0


def test_two_rows_of_one_statement_are_judged_one_after_the_other(
    raw: psycopg.Connection[Any],
) -> None:
    with pytest.raises(RaiseException, match=r"^NOTENOUGH "):
        raw.execute(f"{NEW} {row(-100_000)}, {row(-100_000)}")
    assert held(raw) == 130_000
    raw.execute(f"{NEW} {row(-130_000)}, {row(50_000)}, {row(-50_000)}")
    assert held(raw) == 0


def test_an_entry_is_put_right_once(raw: psycopg.Connection[Any]) -> None:
    righting = NEW + row(0, "put right", "1")
    raw.execute(righting)
    with pytest.raises(RaiseException, match="once"):
        raw.execute(righting)


def test_a_reading_goes_only_where_it_is_kept(raw: psycopg.Connection[Any]) -> None:
    raw.execute("INSERT INTO reading (place_id, at, centi) VALUES (1, '2027-01-04T09:00', 500)")
    with pytest.raises(RaiseException, match=r"^KEPT What a logger read is never removed"):
        raw.execute("DELETE FROM reading")
    raw.execute(
        "INSERT INTO row_change (table_name, row_key, column_name, before, after, why, by,"
        " entered_on, entered_at) VALUES ('readings', 'F1', 'at', '', '', '', '', '2027-01-04', '')"
    )
    raw.execute(
        "INSERT INTO reading_taken_back (place_id, at, centi, change_id)"
        " SELECT place_id, at, centi, (SELECT MAX(id) FROM row_change) FROM reading"
    )
    assert raw.execute("DELETE FROM reading").rowcount == 1


@pytest.mark.parametrize("isolation", ["READ COMMITTED", "REPEATABLE READ", "SERIALIZABLE"])
def test_two_who_draw_past_this_program_at_once_overdraw_nothing(
    own: Server, raw: psycopg.Connection[Any], isolation: str
) -> None:
    """The second waits for the first one's row, and is then refused, under any isolation."""
    with server_stores.raw(own) as other:
        for each in (raw, other):
            each.execute(f"BEGIN ISOLATION LEVEL {isolation}")
            each.execute("SELECT COUNT(*) FROM entry")
        raw.execute(NEW + row(-100_000))
        refused: list[str] = []

        def second() -> None:
            try:
                other.execute(NEW + row(-100_000))
            except psycopg.Error as error:
                refused.append(str(error))
            other.rollback()

        waiting = threading.Thread(target=second)
        waiting.start()
        raw.commit()
        waiting.join()
    assert len(refused) == 1
    assert refused[0].startswith(("NOTENOUGH", "could not serialize"))
    assert held(raw) == 30_000
