"""Copy a store from its file into an empty database, and prove the copy, in one transaction."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from sqlalchemy import Table
from sqlmodel import Session

from stockroom.errors import StoreTrouble
from stockroom.settings import Server
from stockroom.store.columns import KEPT_BESIDE
from stockroom.store.content import contents, handed_on, pages
from stockroom.store.described import kinds_of, tables_in_order
from stockroom.store.engine import create, reader_in
from stockroom.store.reading import Reader, reading

Check = Callable[[Reader, Reader], None]
"""A further proof over both stores, the file's first; it raises where they differ."""


@dataclass(frozen=True, slots=True)
class Moved:
    """What was copied and compared: rows by table, and the last entry that came along."""

    rows: dict[str, int]
    last_entry: int


def move(path: Path, server: Server, check: Check) -> Moved:
    """Copy every table of the file into the server's empty database, and compare.

    Each table is compared row by row, by digest; what each bottle holds is summed anew by
    the server's own guards, and compared too. The file is read at one moment, and left as
    it was. Raises: StoreTrouble (also where the two differ); then nothing is on the server.
    """
    with reading(path) as source:
        rows: dict[str, int] = {}

        def fill(session: Session) -> None:
            for table in tables_in_order():
                _copy(source, session, table)
            target = reader_in(session)
            rows.update(_compared(source, target, server))
            check(source, target)

        create(server, fill)
        last = source.ask("SELECT COALESCE(MAX(id), 0) FROM entry")[0][0]
    return Moved(rows, int(last))


def _copy(source: Reader, session: Session, table: Table) -> None:
    kinds = kinds_of(table)
    names = ", ".join(f'"{name}"' for name in kinds)
    # an empty cell is unknown, but in a column of text it is an empty text
    texts = ", ".join(f'"{name}"' for name, kind in kinds.items() if kind == "text")
    never = f", FORCE_NOT_NULL ({texts})" if texts else ""
    into = f'COPY "{table.name}" ({names}) FROM STDIN WITH (FORMAT csv, HEADER{never})'
    raw = session.connection().connection.driver_connection
    assert raw is not None
    with raw.cursor() as cursor, cursor.copy(into) as copying:
        for page in pages(source, table.name, tuple(kinds)):
            copying.write(page.text)


def _compared(source: Reader, target: Reader, server: Server) -> dict[str, int]:
    columns = handed_on()
    ours, theirs = contents(source, columns), contents(target, columns)
    other = [table for table, content in ours.items() if theirs[table] != content]
    for table in sorted(KEPT_BESIDE):
        asked = f"SELECT * FROM {table} ORDER BY 1"
        if [tuple(row) for row in source.ask(asked)] != [tuple(row) for row in target.ask(asked)]:
            other.append(table)
    if other:
        raise StoreTrouble(
            f"What came to {server} differs in {', '.join(other)}; nothing was moved.",
            "See what the file says of itself: stockroom verify.",
        )
    return {table: content.rows for table, content in ours.items()}
