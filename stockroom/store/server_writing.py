"""Write in a server's store: one writer at a time, one transaction, kept whole or not at all."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import lru_cache
from typing import Any

from sqlalchemy import Connection, Engine, create_engine, event
from sqlalchemy.exc import DBAPIError
from sqlalchemy.pool import NullPool
from sqlmodel import Session

from stockroom.settings import Server
from stockroom.store import server_layout
from stockroom.store.reading import Reader
from stockroom.store.server_link import connect, kept_alive, reader_over, revision, tables
from stockroom.store.server_trouble import not_kept, taken, translated
from stockroom.store.trouble import BUSY_SECONDS, is_older

# all writers of one store ask for the same lock; the number has no other meaning
_LOCK = "SELECT pg_advisory_xact_lock(20270104, hashtext(current_schema()))"


@contextmanager
def writing(server: Server) -> Iterator[Session]:
    """A session on the server's store: saved when the block ends well, else nothing is.

    As on a file, one writer at a time: the lock is taken before anything is read, so
    what the block reads is still true when it saves.

    Raises: StoreTrouble (not reached, busy, read-only, too new, full disc); NotEnough
    when a draw would take a bottle below nothing.
    """
    with _session(server) as session:
        link = session.connection()
        if is_older(server, revision(_raw(link), server)):
            server_layout.put_by(_raw(link))
            server_layout.migrate(link)
        yield session


def create(server: Server, fill: Callable[[Session], None] | None = None) -> None:
    """Make a store in an empty database, empty or filled by `fill`; a failure leaves nothing.

    Raises: StoreTrouble when something is there already, or it cannot be written.
    """
    with _session(server) as session:
        link = session.connection()
        standing = tables(_raw(link))
        if standing:
            raise taken(server, standing)
        server_layout.migrate(link)
        if fill is not None:
            fill(session)
            session.flush()
            # rows that brought their own numbers along have not moved the counters
            server_layout.count_on(_raw(link))


def bring_up_to_date(server: Server) -> None:
    """Bring a store in an earlier layout to the newest, after putting its rows by.

    Raises: StoreTrouble when it cannot be written; the store is then as it was.
    """
    with writing(server):
        pass


def reader_on(connection: Connection) -> Reader:
    """The reading half on a writer's own connection, the same one for all it asks."""
    info = connection.info
    if "reader" not in info:
        info["reader"] = reader_over(_raw(connection))
    reader: Reader = info["reader"]
    return reader


@contextmanager
def _session(server: Server) -> Iterator[Session]:
    saving: list[bool] = []
    seen: list[object] = []
    with translated(server):
        try:
            with Session(_engine(server)) as session:
                event.listen(session, "before_commit", lambda _: saving.append(True))
                # a row that is looked at again is not asked for again: each question travels
                event.listen(session, "loaded_as_persistent", lambda _, row: seen.append(row))
                with session.begin():
                    yield session
                    # refused rows are told before the saving begins: what fails then is the line
                    session.flush()
        except DBAPIError as error:
            if saving and error.connection_invalidated:
                raise not_kept(server) from error
            raise


@lru_cache(maxsize=8)
def _engine(server: Server) -> Engine:
    # no pool: a command writes once, and the server keeps no connection open for nothing.
    # READ COMMITTED whatever the server's usual: a snapshot taken before the lock would be old
    engine = create_engine(
        "postgresql+psycopg://",
        creator=lambda: connect(server),
        poolclass=NullPool,
        isolation_level="READ COMMITTED",
        use_native_hstore=False,
    )
    event.listen(engine, "begin", _one_at_a_time)
    return engine


def _one_at_a_time(connection: Connection) -> None:
    wait = f"SET LOCAL lock_timeout = {round(BUSY_SECONDS * 1000)}"
    _raw(connection).execute(f"{kept_alive()}; {wait}; {_LOCK}")


def _raw(connection: Connection) -> Any:
    return connection.connection.driver_connection
