"""The connection to a server's store, and the reading half over it.

What is asked is written once, as SQLite takes it; here a `?` becomes the driver's own
mark, and answers come back as SQLite gives them: days as ISO text, yes and no as 1 and
0, whole sums as whole numbers. So nothing above this file knows which engine answers.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Any, cast

from stockroom.errors import StoreTrouble
from stockroom.settings import Server
from stockroom.store.reading import Reader, Row
from stockroom.store.server_trouble import no_address, no_driver, nothing_there, translated
from stockroom.store.trouble import foreign

if TYPE_CHECKING:
    import psycopg

CONNECT_SECONDS = 5
"""How long a server may take to answer at all. A house choice."""

# a colleague's computer that lost its power must not keep the store shut for everybody:
# its server notices after about a minute. Our choice; on a socket of one machine it has no use
_ALIVE = "tcp_keepalives_idle=30 tcp_keepalives_interval=10 tcp_keepalives_count=3"


def connect(server: Server) -> psycopg.Connection[Any]:
    """An open connection. Raises: StoreTrouble (no driver, no such address, not let in)."""
    try:
        import psycopg
        from psycopg.conninfo import conninfo_to_dict
    except ImportError as error:
        raise no_driver(server) from error
    try:
        parts = conninfo_to_dict(server.url.replace("+psycopg://", "://", 1))
    except psycopg.ProgrammingError as error:
        raise no_address(server) from error
    parts.setdefault("connect_timeout", CONNECT_SECONDS)
    parts.setdefault("application_name", "stockroom")
    with translated(server):
        connection = psycopg.connect(**cast(Any, parts))
        _check_letters(connection, server)
        return connection


def _check_letters(connection: psycopg.Connection[Any], server: Server) -> None:
    encoding = connection.info.parameter_status("server_encoding")
    if encoding != "UTF8":
        connection.close()
        raise StoreTrouble(
            f"{server} keeps its texts in {encoding}, which has no letter for ³ or °.",
            "Make its database again: createdb --encoding=UTF8 --template=template0 NAME.",
        )


def kept_alive() -> str:
    """The settings, as SQL, by which the server notices a writer that is no longer there."""
    named = (part.partition("=") for part in _ALIVE.split())
    return "; ".join(f"SET {name} = {value}" for name, _, value in named)


def revision(connection: psycopg.Connection[Any], server: Server) -> str | None:
    """The layout the store is in. Raises: StoreTrouble where there is none, or another's."""
    names = tables(connection)
    if not names:
        raise nothing_there(server)
    # other programs keep an alembic_version too, so our own tables are asked for
    if not {"alembic_version", "entry", "house"} <= names:
        raise foreign(server)
    row = connection.execute("SELECT version_num FROM alembic_version").fetchone()
    return None if row is None else str(row[0])


def tables(connection: psycopg.Connection[Any]) -> set[str]:
    """The names of all tables where ours would stand."""
    found = connection.execute(
        "SELECT relname FROM pg_class AS t JOIN pg_namespace AS s"
        " ON s.oid = t.relnamespace WHERE s.nspname = current_schema() AND relkind IN ('r', 'p')"
    )
    return {str(row[0]) for row in found}


@dataclass(frozen=True, slots=True)
class ServerReader(Reader):
    """The reading half over a server: the same questions, the same answers."""

    connection: Any
    cursor: Any

    def ask(self, sql: str, *values: Any) -> list[Row]:
        """The rows any question gives; `?` stands for a value, as everywhere."""
        self.cursor.execute(_with_marks(sql), values)
        return cast(list[Row], self.cursor.fetchall())


def reader_over(connection: Any) -> ServerReader:
    """A reader on an open connection, one's own or one lent by the writing half."""
    # one cursor for all questions: teaching a new one costs as much as a small question.
    # On it and not on the connection, which the writing half reads in its own way
    cursor = connection.cursor(row_factory=_rows)
    for name, loader in _loaders():
        cursor.adapters.register_loader(name, loader)
    return ServerReader(connection, cursor)


class _Row(tuple[Any, ...]):
    """A row as SQLite's: by place, by name, and unpacked."""

    __slots__ = ()
    places: dict[str, int]

    def __getitem__(self, key: Any) -> Any:
        if isinstance(key, str):
            try:
                return tuple.__getitem__(self, self.places[key])
            except KeyError:
                raise IndexError("No item with that key") from None
        return tuple.__getitem__(self, key)

    def keys(self) -> list[str]:
        """The names of the columns, in order."""
        return list(self.places)


def _rows(cursor: psycopg.Cursor[Any]) -> Callable[[Sequence[Any]], Any]:
    named = [column.name for column in cursor.description or ()]
    # of two columns of one name the first is meant, as in SQLite
    places = {name: place for place, name in reversed(list(enumerate(named)))}
    return _row_class(tuple(sorted(places.items(), key=lambda each: each[1])))


@lru_cache(maxsize=256)
def _row_class(places: tuple[tuple[str, int], ...]) -> type[_Row]:
    return type("ServerRow", (_Row,), {"__slots__": (), "places": dict(places)})


# a text in quotes is left alone; outside one a ? is a value, and a % stands for itself
_MARKS = re.compile(r"'(?:[^']|'')*'|\?|%")


@lru_cache(maxsize=512)
def _with_marks(sql: str) -> str:
    return _MARKS.sub(_mark, sql)


def _mark(found: re.Match[str]) -> str:
    text = found.group()
    return "%s" if text == "?" else text.replace("%", "%%")


@lru_cache(maxsize=1)
def _loaders() -> tuple[tuple[str, Any], ...]:
    """How a day, a yes or no, and the sum of whole numbers become what SQLite gives."""
    from psycopg.adapt import Loader
    from psycopg.types.datetime import DateLoader

    class Day(DateLoader):
        """A day as ISO text, in whatever order the server writes it."""

        def load(self, data: Any) -> Any:
            return super().load(data).isoformat()

    class YesOrNo(Loader):
        """True and false as 1 and 0."""

        def load(self, data: Any) -> int:
            return int(bytes(data) == b"t")

    class Sum(Loader):
        """A sum of whole numbers as one, a mean as a float."""

        def load(self, data: Any) -> int | float:
            text = bytes(data).decode()
            return int(text) if text.lstrip("-").isdigit() else float(text)

    return (("date", Day), ("bool", YesOrNo), ("numeric", Sum))
