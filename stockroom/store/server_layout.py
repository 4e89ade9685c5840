"""The layout of a server's store: brought to the newest, its rows put by first."""

from __future__ import annotations

from itertools import count
from typing import Any

from sqlalchemy import Connection

from stockroom.store.columns import COLUMNS
from stockroom.store.server_link import tables
from stockroom.store.trouble import REVISIONS


def migrate(connection: Connection) -> None:
    """Bring the tables behind an open connection to the newest layout, in its transaction."""
    from stockroom.store import engine

    engine.migrate(connection)
    compare_by_letter(connection.connection.driver_connection)


def compare_by_letter(raw: Any) -> None:
    """Let every text be compared letter by letter, as in a file.

    A database has the order of some language, where "a" comes before "B"; two houses with
    the same rows would then be told in another order. Done column by column, so that a
    database of any language will do.
    """
    found = raw.execute(
        "SELECT table_name, column_name FROM information_schema.columns"
        " WHERE table_schema = current_schema() AND data_type IN ('character varying', 'text')"
        " AND collation_name IS DISTINCT FROM 'C' ORDER BY table_name, ordinal_position"
    ).fetchall()
    columns: dict[str, list[str]] = {}
    for table, column in found:
        columns.setdefault(table, []).append(column)
    for table, names in columns.items():
        changes = (f'ALTER COLUMN "{name}" TYPE varchar COLLATE "C"' for name in names)
        raw.execute(f'ALTER TABLE "{table}" {", ".join(changes)}')


def put_by(raw: Any) -> str:
    """Copy every table into a schema beside the store's before the layout changes; its name.

    A server has no file to copy, and this is part of the same transaction: either the
    rows are put by and the layout is new, or neither.
    """
    names = (f"before_{REVISIONS[-1]}" + (f"_{n}" if n > 1 else "") for n in count(1))
    name = next(each for each in names if not _is_schema(raw, each))
    own = tables(raw)
    raw.execute(f'CREATE SCHEMA "{name}"')
    for table in sorted(own):
        raw.execute(f'CREATE TABLE "{name}"."{table}" AS TABLE "{table}"')
    return name


def _is_schema(raw: Any, name: str) -> bool:
    return bool(raw.execute("SELECT 1 FROM pg_namespace WHERE nspname = %s", (name,)).fetchone())


def count_on(raw: Any) -> None:
    """Let every table's next row number follow the highest there is."""
    for table, columns in COLUMNS.items():
        if "id" in columns:
            raw.execute(
                f"SELECT setval(pg_get_serial_sequence('{table}', 'id'),"
                f" COALESCE((SELECT MAX(id) FROM {table}), 0) + 1, false)"
            )
