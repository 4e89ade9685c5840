"""A handed-out folder built into a store again: same rows, same numbers, same history.

The tables are made in the layout the folder was written in, filled, and then brought up by the
migrations, so that an older folder takes the way an older store takes.
"""

from __future__ import annotations

import csv
from collections.abc import Callable, Iterator, Sequence
from datetime import date
from itertools import islice
from pathlib import Path
from typing import Any

import sqlalchemy as sa
from sqlalchemy import Connection
from sqlalchemy.exc import DBAPIError

from stockroom.errors import StoreTrouble
from stockroom.settings import Server, StoreAt
from stockroom.store.content import PAGE, contents
from stockroom.store.engine import Session, create, reader_in
from stockroom.store.manifest import DAMAGED, Manifest, TableFile, check_files, read
from stockroom.store.reading import Reader
from stockroom.store.trouble import REVISIONS

_TYPES: dict[str, sa.types.TypeEngine[Any]] = {
    "text": sa.String(),
    "whole": sa.BigInteger(),
    "number": sa.Float(),
    "day": sa.Date(),
    "flag": sa.Boolean(),
}
_READ: dict[str, Callable[[str], Any]] = {
    "text": str,
    "whole": int,
    "number": float,
    "day": date.fromisoformat,
    "flag": lambda cell: bool(int(cell)),
}


def hand_back(path: StoreAt, folder: Path) -> Manifest:
    """Build a store at `path` from a folder that was handed out, and prove it is the same.

    Raises: StoreTrouble when something is there already, the folder is damaged or from a
    newer program, or its rows break a guard; then no store is left behind.
    """
    manifest = read(folder)
    check_files(folder, manifest)

    def put_in(connection: Connection) -> None:
        _fill(connection, folder, manifest)
        # before anything is brought up: the digests are of the rows as they were handed out
        held: Any = connection.connection.driver_connection
        _compare(Reader(held), folder, manifest)

    def fill(session: Session) -> None:
        _fill(session.connection(), folder, manifest)
        _compare(reader_in(session), folder, manifest)

    if isinstance(path, Server):
        _check_newest(folder, manifest)
        create(path, fill)
    else:
        create(path, rows=(manifest.layout, put_in))
    return manifest


def _check_newest(folder: Path, manifest: Manifest) -> None:
    if manifest.layout != REVISIONS[-1]:
        raise StoreTrouble(
            f"{folder} was handed out in an earlier layout ({manifest.layout}).",
            "Read it into a file first, hand that out, and read the new folder into the server.",
        )


def _fill(connection: Connection, folder: Path, manifest: Manifest) -> None:
    for each in manifest.tables:
        names = (sa.column(name, _TYPES[kind]) for name, kind in each.columns.items())
        adding = sa.table(each.table, *names).insert()
        rows = _rows(folder / each.file, each)
        while page := list(islice(rows, PAGE)):
            _add(connection, adding, page, each)


def _add(
    connection: Connection, adding: sa.Insert, page: Sequence[dict[str, Any]], told: TableFile
) -> None:
    try:
        with connection.begin_nested():
            connection.execute(adding, page)
    except DBAPIError as error:
        if len(page) > 1:
            # the database says of thousands of rows only that one is bad: each by itself, then
            for row in page:
                _add(connection, adding, [row], told)
        key = next(iter(page[0].items()))
        named = f"{told.file}, row with {key[0]} {key[1]}," if len(page) == 1 else told.file
        raise StoreTrouble(f"{named} cannot be read back: {error.orig}.", DAMAGED) from error


def _rows(path: Path, told: TableFile) -> Iterator[dict[str, Any]]:
    read_by = [(_READ[kind], kind == "text") for kind in told.columns.values()]
    with path.open(encoding="utf-8", newline="") as file:
        reader = csv.reader(file, strict=True)
        names = next(reader, [])
        if names != list(told.columns):
            raise StoreTrouble(f"{told.file} has other columns than the manifest says.", DAMAGED)
        for cells in reader:
            try:
                values = [
                    # blank is unknown, but for text, which is never unknown
                    convert(cell) if cell or blank else None
                    for (convert, blank), cell in zip(read_by, cells, strict=True)
                ]
            except ValueError as error:
                where = f"{told.file} line {reader.line_num}"
                raise StoreTrouble(f"{where} cannot be read: {error}.", DAMAGED) from error
            yield dict(zip(names, values, strict=True))


def _compare(reader: Reader, folder: Path, manifest: Manifest) -> None:
    """Pass when a store holds what the folder says. Raises: StoreTrouble."""
    found = contents(reader, {each.table: tuple(each.columns) for each in manifest.tables})
    other = [table for table, content in manifest.contents.items() if found[table] != content]
    if other:
        raise StoreTrouble(f"Read back, {', '.join(other)} differ from {folder}.", DAMAGED)
