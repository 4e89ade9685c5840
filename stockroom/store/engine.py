"""Open a store for writing: one transaction, taken at once, kept whole or not at all."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable, Iterator
from contextlib import closing, contextmanager, suppress
from contextvars import ContextVar
from filecmp import cmp
from functools import lru_cache
from itertools import count
from pathlib import Path
from typing import Any

from sqlalchemy import Connection, Engine, create_engine, event
from sqlalchemy.exc import DBAPIError
from sqlalchemy.pool import NullPool
from sqlmodel import Session as Session

from stockroom.errors import StoreTrouble
from stockroom.settings import Server, StoreAt
from stockroom.store.held import held, hold, let_go
from stockroom.store.parts import part_of, publish
from stockroom.store.reading import Reader
from stockroom.store.remembered import keep_rows
from stockroom.store.trouble import (
    BUSY_SECONDS,
    REVISIONS,
    check_there,
    foreign,
    in_words,
    is_older,
    translated,
)

MIGRATIONS = Path(__file__).parent / "migrations"


@contextmanager
def writing(path: StoreAt) -> Iterator[Session]:
    """A session on the store at `path`: saved when the block ends well, else nothing is.

    The write lock is taken before anything is read, so what the block reads is
    still true when it saves.

    Raises: StoreTrouble (missing, busy, damaged, read-only, too new, full disc);
    NotEnough when a draw would take a bottle below nothing.
    """
    joined = _JOINED.get()
    if joined is not None and joined[0] == path:
        # apart within the whole: what a refusal cuts short leaves nothing, whoever catches it
        with joined[1].begin_nested():
            yield joined[1]
        return
    if isinstance(path, Server):
        from stockroom.store import server

        with server.writing(path) as session:
            yield session
        return
    check_there(path)
    with _borders(path):
        # rw and not rwc: a mistyped path must not become a new, empty store
        engine = _engine(path, mode="rw")
        with Session(held(path, engine.connect) or engine) as session, session.begin():
            keep_rows(session)
            if is_older(path, _revision(session.connection(), path)):
                put_by(path)
                migrate(session.connection())
            yield session


@contextmanager
def held_open(path: StoreAt) -> Iterator[None]:
    """Hold the store's file open over the block, for whoever writes in it many times.

    Each piece of work is still saved by itself. It counts for this thread alone, and other
    writers are not kept out. Raises: StoreTrouble when it is not there.
    """
    if isinstance(path, Server):
        yield
        return
    check_there(path)
    with _borders(path):
        mine = hold(path, _engine(path, mode="rw").connect)
    try:
        yield
    finally:
        if mine:
            let_go(path)


_JOINED: ContextVar[tuple[StoreAt, Session] | None] = ContextVar("joined", default=None)


@contextmanager
def joined(path: StoreAt) -> Iterator[Session]:
    """As `writing`, and what asks to write in that store inside the block joins in: one piece."""
    with writing(path) as session:
        token = _JOINED.set((path, session))
        try:
            yield session
        finally:
            _JOINED.reset(token)


def bring_up_to_date(path: Path) -> None:
    """Bring a store in an earlier layout to the newest, after putting a copy beside it.

    Raises: StoreTrouble when it cannot be written; the store is then as it was.
    """
    with writing(path):
        pass


def put_by(path: Path) -> Path:
    """Copy a store beside itself before its layout is changed; the copy's path.

    A copy of that very store is left alone, and one of another is never written over:
    the new one then has a number behind its name. Raises: OSError, sqlite3.Error.
    """
    fresh = path.with_name(f"{path.name}.before-{REVISIONS[-1]}.part")
    # left by somebody who was cut off
    fresh.unlink(missing_ok=True)
    try:
        with closing(sqlite3.connect(path)) as held, closing(sqlite3.connect(fresh)) as new:
            held.backup(new)
        copy = _place_for(fresh)
        # named only now that it is whole: half a copy must never pass for one
        fresh.replace(copy)
    finally:
        fresh.unlink(missing_ok=True)
    return copy


def _place_for(fresh: Path) -> Path:
    """The name for a copy: that of one exactly like it, else the first that is free."""
    name = fresh.with_suffix("")
    names = (name if n == 1 else name.with_name(f"{name.name}-{n}") for n in count(1))
    return next(each for each in names if not each.exists() or cmp(fresh, each, shallow=False))


def reader_in(session: Session) -> Reader:
    """The reading half on a writer's own connection: it sees what is not saved yet."""
    # rows still pending in the session would be missing from what the reader sees
    session.flush()
    connection = session.connection()
    if connection.dialect.name == "postgresql":
        from stockroom.store import server_writing

        return server_writing.reader_on(connection)
    return Reader(_raw(connection))


Rows = tuple[str, Callable[[Connection], None]]
"""The layout rows were written in, and what puts them into tables of that layout."""


def create(
    path: StoreAt, fill: Callable[[Session], None] | None = None, *, rows: Rows | None = None
) -> None:
    """Make a store at `path`, empty or filled by `fill`; a failure leaves no file behind.

    `rows`, for a file only, go in while its tables are in their layout, and are brought up too.
    Raises: StoreTrouble when something is there already, or it cannot be written.
    """
    if isinstance(path, Server):
        from stockroom.store import server

        server.create(path, fill)
        return
    check_nothing_there(path)
    with _borders(path):
        path.parent.mkdir(parents=True, exist_ok=True)
        with part_of(path) as part:
            _build(part, rows)
            if fill is not None:
                _fill(part, fill)
            try:
                # named only now that it is whole: half a store must never pass for one
                publish(part, path)
            except FileExistsError:
                check_nothing_there(path)
                raise


def _fill(path: Path, fill: Callable[[Session], None]) -> None:
    engine = _engine(path, mode="rw")
    try:
        with Session(engine) as session, session.begin():
            fill(session)
    finally:
        engine.dispose()


def check_nothing_there(path: Path) -> None:
    """Pass when nothing stands at the path. Raises: StoreTrouble."""
    if path.exists():
        raise StoreTrouble(f"There is already something at {path}.", "Choose another --store PATH.")


def _build(path: Path, rows: Rows | None) -> None:
    engine = _engine(path, mode="rwc")
    try:
        with engine.connect() as connection:
            # the journal mode stays with the file, and cannot change inside a transaction
            _raw(connection).execute("PRAGMA journal_mode = WAL")
        with engine.begin() as connection:
            if rows is not None:
                layout, put_in = rows
                migrate(connection, layout)
                put_in(connection)
            migrate(connection)
    finally:
        engine.dispose()


def migrate(connection: Connection, layout: str = "head") -> None:
    """Bring the tables behind an open connection to a layout, the newest, in its transaction."""
    # only a store of an earlier layout, or a new one, ever asks for it
    from alembic import command
    from alembic.config import Config

    config = Config()
    # a per cent sign in a folder's name would be read as a substitution
    config.set_main_option("script_location", str(MIGRATIONS).replace("%", "%%"))
    config.attributes["connection"] = connection
    command.upgrade(config, layout)


def _engine(path: Path, *, mode: str) -> Engine:
    return _engine_at(f"{path.resolve().as_uri()}?mode={mode}")


# kept for the questions it has worked out: with no connection in it, files may come and go
@lru_cache(maxsize=16)
def _engine_at(address: str) -> Engine:
    def connect() -> sqlite3.Connection:
        # isolation_level None: the driver would otherwise begin late, and not before CREATE TABLE
        opened = sqlite3.connect(address, uri=True, timeout=BUSY_SECONDS, isolation_level=None)
        opened.execute("PRAGMA foreign_keys = ON")
        _journal(opened)
        return opened

    # no pool: a command writes once, and an idle connection would keep the journal open
    engine = create_engine("sqlite://", creator=connect, poolclass=NullPool)
    event.listen(engine, "begin", _begin_at_once)
    return engine


def _journal(opened: sqlite3.Connection) -> None:
    """See that a store keeps the journal in which readers stop no writer."""
    # a restore that was cut off leaves the other one, for good; a file of others is left alone
    if opened.execute("PRAGMA journal_mode").fetchone() != ("wal",) and _is_ours(opened):
        # somebody reads it right now, or the folder may not be written: the next time, then
        with suppress(sqlite3.OperationalError):
            opened.execute("PRAGMA journal_mode = WAL")


def _is_ours(raw: Any) -> bool:
    ours = "SELECT COUNT(*) FROM sqlite_master WHERE name IN ('alembic_version', 'entry', 'house')"
    # other programs keep an alembic_version too, so our own tables are asked for
    return bool(raw.execute(ours).fetchone()[0] == 3)


# IMMEDIATE: two readers who both decide to write would each block the other for good
def _begin_at_once(connection: Connection) -> None:
    connection.exec_driver_sql("BEGIN IMMEDIATE")


def _raw(connection: Connection) -> Any:
    return connection.connection.driver_connection


def _revision(connection: Connection, path: Path) -> str | None:
    raw = _raw(connection)
    if not _is_ours(raw):
        raise foreign(path)
    found = raw.execute("SELECT version_num FROM alembic_version").fetchone()
    return None if found is None else str(found[0])


@contextmanager
def _borders(path: Path) -> Iterator[None]:
    with translated(path):
        try:
            yield
        except DBAPIError as error:
            if isinstance(error.orig, sqlite3.Error):
                raise in_words(error.orig, path) from error
            raise
        except OSError as error:
            raise StoreTrouble(
                f"{path} cannot be written: {error.strerror}.", "Choose another --store PATH."
            ) from error
