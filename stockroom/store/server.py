"""A store kept by a PostgreSQL server: the same tables, the same guards, other locks.

Reading is here and stays light; writing is in `server_writing.py`.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

from stockroom.settings import Server
from stockroom.store.reading import Reader
from stockroom.store.server_link import connect, reader_over, revision
from stockroom.store.server_trouble import translated
from stockroom.store.trouble import is_older

if TYPE_CHECKING:
    import psycopg
    from sqlmodel import Session


@contextmanager
def reading(server: Server) -> Iterator[Reader]:
    """A reader on the server's store, held still at one moment; it cannot write.

    Raises: StoreTrouble when it cannot be reached, is no store at all, or is too new.
    """
    with translated(server):
        connection = _up_to_date(server)
        try:
            yield reader_over(connection)
        finally:
            connection.close()


def _up_to_date(server: Server) -> psycopg.Connection[Any]:
    """A connection to the store, brought to the newest layout first where it is older."""
    connection = _connect(server)
    try:
        older = is_older(server, revision(connection, server))
    except BaseException:
        connection.close()
        raise
    if not older:
        return connection
    connection.close()
    # loaded here: it happens once in the life of a store, and reading stays light
    from stockroom.store.server_writing import bring_up_to_date

    bring_up_to_date(server)
    return _connect(server)


def _connect(server: Server) -> psycopg.Connection[Any]:
    connection = connect(server)
    # after it: where the driver is missing, `connect` says so
    from psycopg import IsolationLevel

    # one snapshot for the whole reading, so that balances and entries are of the same moment
    connection.isolation_level = IsolationLevel.REPEATABLE_READ
    connection.read_only = True
    return connection


@contextmanager
def writing(server: Server) -> Iterator[Session]:
    """A session on the server's store: saved when the block ends well, else nothing is.

    Raises: StoreTrouble (not reached, busy, read-only, too new, full disc); NotEnough.
    """
    from stockroom.store import server_writing

    with server_writing.writing(server) as session:
        yield session


def create(server: Server, fill: Callable[[Session], None] | None = None) -> None:
    """Make a store in an empty database, empty or filled by `fill`; a failure leaves nothing.

    Raises: StoreTrouble when something is there already, or it cannot be written.
    """
    from stockroom.store import server_writing

    server_writing.create(server, fill)
