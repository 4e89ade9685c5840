"""What a store holds, as text: each table as CSV, and a digest that tells two contents apart.

Lossless: whole numbers and fractions in full, days ISO, a flag 0 or 1. An empty cell is blank in
a column of text, and unknown in any other; no column of ours is both. Read a page at a time, so
that a ledger of any length takes the same memory.
"""

from __future__ import annotations

import csv
import hashlib
import io
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from stockroom.errors import StoreTrouble
from stockroom.store.columns import COLUMNS, KEPT_BESIDE
from stockroom.store.reading import Reader, Row

PAGE = 5_000
"""Rows held at a time. Our choice: a few megabytes."""

Columns = Mapping[str, tuple[str, ...]]


@dataclass(frozen=True, slots=True)
class Content:
    """How many rows a table has, and the SHA-256 of them as CSV, in hexadecimal digits."""

    rows: int
    digest: str


@dataclass(frozen=True, slots=True)
class Page:
    """So many rows of a table as CSV in UTF-8; the first page is the heading, of no rows."""

    rows: int
    text: bytes


def handed_on() -> dict[str, tuple[str, ...]]:
    """The tables that are handed on, each with its columns."""
    return {table: names for table, names in COLUMNS.items() if table not in KEPT_BESIDE}


def columns_there(reader: Reader) -> dict[str, tuple[str, ...]]:
    """The tables and columns of a file as it stands, in whatever layout it was written."""
    tables = reader.ask(
        "SELECT name FROM sqlite_master WHERE type = 'table' AND name <> 'alembic_version'"
        " AND name NOT LIKE 'sqlite~_%' ESCAPE '~' ORDER BY name"
    )
    asked = "SELECT name FROM pragma_table_info(?) ORDER BY cid"
    return {
        row["name"]: tuple(str(each["name"]) for each in reader.ask(asked, row["name"]))
        for row in tables
    }


def pages(reader: Reader, table: str, columns: tuple[str, ...]) -> Iterator[Page]:
    """A table as CSV, heading first, in the order of its first column: its row number or key.

    Raises: StoreTrouble for a cell that is neither text nor a number.
    """
    yield Page(0, _csv([columns]))
    for rows in rows_in_pages(reader, table, columns):
        yield Page(len(rows), _csv(_checked(table, row) for row in rows))


def rows_in_pages(reader: Reader, table: str, columns: tuple[str, ...]) -> Iterator[list[Row]]:
    """The rows of a table in the order of its first column, so many at a time."""
    key, names = f'"{columns[0]}"', ", ".join(f'"{name}"' for name in columns)
    asked = f"SELECT {names} FROM {table}"
    # from key to key and not by OFFSET, which would read all that went before once more
    page = reader.ask(f"{asked} ORDER BY {key} LIMIT {PAGE}")
    while page:
        yield page
        last = page[-1][0]
        page = reader.ask(f"{asked} WHERE {key} > ? ORDER BY {key} LIMIT {PAGE}", last)


def contents(reader: Reader, columns: Columns) -> dict[str, Content]:
    """The content of each table. Raises: as `pages`."""
    return {table: content_of(pages(reader, table, names)) for table, names in columns.items()}


def content_of(pages_of_table: Iterable[Page]) -> Content:
    """The content that pages add up to."""
    digest, rows = hashlib.sha256(), 0
    for page in pages_of_table:
        digest.update(page.text)
        rows += page.rows
    return Content(rows, digest.hexdigest())


def digest_of(found: Mapping[str, Content]) -> str:
    """One digest of several tables, whatever their order."""
    lines = (f"{table} {found[table].rows} {found[table].digest}\n" for table in sorted(found))
    return hashlib.sha256("".join(lines).encode()).hexdigest()


def _csv(rows: Iterable[Iterable[Any]]) -> bytes:
    text = io.StringIO(newline="")
    # the line end of RFC 4180; with it the writer quotes a lone CR or LF inside a cell too.
    # It writes nothing for None, and for a float the shortest text that reads back as that very one
    csv.writer(text, lineterminator="\r\n").writerows(rows)
    return text.getvalue().encode()


def _checked(table: str, row: Row) -> Row:
    if not _PLAIN.issuperset(map(type, row)):
        odd = next(value for value in row if type(value) not in _PLAIN)
        raise StoreTrouble(
            f"{table} {row[0]} holds {odd!r}, neither text nor a number.",
            "Put the last good copy of the store back.",
        )
    return row


_PLAIN = frozenset({str, int, float, type(None)})
