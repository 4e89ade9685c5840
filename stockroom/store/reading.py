"""Open a store for reading only, through the plain driver: nothing heavy is imported."""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import Any

from stockroom.errors import StoreTrouble
from stockroom.settings import Server, StoreAt
from stockroom.store.columns import COLUMNS
from stockroom.store.trouble import (
    BUSY_SECONDS,
    check_there,
    foreign,
    is_older,
    translated,
    unfinished,
)

Row = sqlite3.Row


@dataclass(frozen=True, slots=True)
class Reader:
    """A store held still at one moment: what others write meanwhile is not seen."""

    connection: sqlite3.Connection

    def rows(self, table: str, tail: str = "ORDER BY id", *values: Any) -> list[Row]:
        """The rows of a table with all its columns; `tail` is the SQL after the table."""
        # COLUMNS is ours, so nothing typed by a person ever becomes SQL
        names = ", ".join(f'"{name}"' for name in COLUMNS[table])
        return self.ask(f"SELECT {names} FROM {table} {tail}", *values)

    def pairs(self, sql: str, *values: Any) -> dict[Any, Any]:
        """The answer to a two-column question, first column to second."""
        return {row[0]: row[1] for row in self.ask(sql, *values)}

    def ask(self, sql: str, *values: Any) -> list[Row]:
        """The rows any other question gives."""
        # named on the cursor: a connection lent by the writing half stays as it was
        cursor = self.connection.cursor()
        cursor.row_factory = sqlite3.Row
        return cursor.execute(sql, values).fetchall()


@contextmanager
def reading(path: StoreAt) -> Iterator[Reader]:
    """A reader on the store at `path`.

    Raises: StoreTrouble when it is missing, damaged, no store at all or too new.
    """
    if isinstance(path, Server):
        from stockroom.store import server

        with server.reading(path) as reader:
            yield reader
        return
    check_there(path)
    with translated(path):
        connection = _up_to_date(path)
        try:
            # one read transaction, so that balances and entries are of the same moment
            connection.execute("BEGIN")
            yield Reader(connection)
        finally:
            connection.close()


@contextmanager
def as_it_stands(path: Path) -> Iterator[tuple[Reader, str]]:
    """A reader on a file in whatever layout it is, and that layout: nothing is brought up.

    Raises: StoreTrouble when it is missing, damaged, no store at all or too new.
    """
    check_there(path)
    with translated(path):
        connection = _connect(path)
        try:
            connection.execute("BEGIN")
            revision = _revision(connection, path)
            is_older(path, revision)
            yield Reader(connection), str(revision)
        finally:
            connection.close()


def house_value(path: StoreAt, key: str) -> str | None:
    """One house setting as text; None when it is not set."""
    with reading(path) as reader:
        found = reader.rows("house", "WHERE setting = ?", key)
    return str(found[0]["value"]) if found else None


def practice_day(path: StoreAt) -> date | None:
    """The day a practice store opens on; None for a house of one's own."""
    written = house_value(path, "practice_day")
    return date.fromisoformat(written) if written else None


def _up_to_date(path: Path) -> sqlite3.Connection:
    """A connection to the store, brought to the newest layout first where it is older."""
    connection = _connect(path)
    try:
        older = is_older(path, _revision(connection, path))
    except BaseException:
        connection.close()
        raise
    if not older:
        return connection
    connection.close()
    # loaded here: it happens once in the life of a store, and reading stays light
    from stockroom.store.engine import bring_up_to_date

    bring_up_to_date(path)
    return _connect(path)


def _connect(path: Path) -> sqlite3.Connection:
    address = path.resolve().as_uri()
    # a reader that may write nothing cannot clear away the side files it opens the store with
    connection = _opened(f"{address}?mode={'rw' if os.access(path, os.W_OK) else 'ro'}")
    try:
        # opening is lazy: only the first question shows whether the file can be read
        connection.execute("SELECT 1 FROM sqlite_master LIMIT 1")
        connection.execute("PRAGMA query_only = ON")
    except sqlite3.OperationalError as error:
        connection.close()
        if not error.sqlite_errorname.startswith(_NO_SIDE_FILES):
            raise
        if _holds_entries(Path(f"{path}-wal")):
            raise unfinished(path) from error
        # no lock file can be made, in such a folder or on a full disc: then nobody writes either
        return _opened(f"{address}?immutable=1")
    except sqlite3.Error:
        connection.close()
        raise
    return connection


# what the driver says when it can neither make the side files nor use those that are there
_NO_SIDE_FILES = ("SQLITE_CANTOPEN", "SQLITE_READONLY", "SQLITE_IOERR_SHMSIZE", "SQLITE_FULL")


def _opened(address: str) -> sqlite3.Connection:
    return sqlite3.connect(address, uri=True, timeout=BUSY_SECONDS, isolation_level=None)


def _holds_entries(journal: Path) -> bool:
    # an empty one was left by a reader; only one with pages in it has something to add
    return journal.exists() and journal.stat().st_size > 0


def _revision(connection: sqlite3.Connection, path: Path) -> str | None:
    names = {row[0] for row in connection.execute("SELECT name FROM sqlite_master")}
    if not {"alembic_version", "entry", "house"} <= names:
        raise foreign(path)
    row = connection.execute("SELECT version_num FROM alembic_version").fetchone()
    if row is None:
        raise StoreTrouble(f"{path} carries no layout mark.", "Put the last good copy back.")
    return str(row[0])
