"""Open a store for writing: one transaction, taken at once, kept whole or not at all."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable, Iterator
from contextlib import closing, contextmanager
from filecmp import cmp
from itertools import count
from pathlib import Path
from typing import Any

from alembic import command
from alembic.config import Config
from sqlalchemy import Connection, Engine, create_engine, event, text
from sqlalchemy.exc import DBAPIError
from sqlalchemy.pool import NullPool
from sqlmodel import Session as Session

from stockroom.errors import StoreTrouble
from stockroom.settings import Server, StoreAt
from stockroom.store.reading import Reader
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
    if isinstance(path, Server):
        from stockroom.store import server

        with server.writing(path) as session:
            yield session
        return
    check_there(path)
    with _borders(path):
        # rw and not rwc: a mistyped path must not become a new, empty store
        engine = _engine(path, mode="rw")
        try:
            with Session(engine) as session, session.begin():
                if is_older(path, _revision(session.connection(), path)):
                    put_by(path)
                    migrate(session.connection())
                yield session
        finally:
            engine.dispose()


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
    return Reader(_raw(session.connection()))


def create(path: StoreAt, fill: Callable[[Session], None] | None = None) -> None:
    """Make a store at `path`, empty or filled by `fill`; a failure leaves no file behind.

    Raises: StoreTrouble when something is there already, or it cannot be written.
    """
    if isinstance(path, Server):
        from stockroom.store import server

        server.create(path, fill)
        return
    if path.exists():
        raise StoreTrouble(f"There is already something at {path}.", "Choose another --store PATH.")
    with _borders(path):
        try:
            path.parent.mkdir(parents=True, exist_ok=True)
            _build(path)
            if fill is not None:
                with writing(path) as session:
                    fill(session)
        except BaseException:
            # half a store would be refused as damaged later, by somebody who did not cause it
            for leftover in (path, Path(f"{path}-wal"), Path(f"{path}-shm")):
                leftover.unlink(missing_ok=True)
            raise


def _build(path: Path) -> None:
    engine = _engine(path, mode="rwc")
    try:
        with engine.connect() as connection:
            # the journal mode stays with the file, and cannot change inside a transaction
            _raw(connection).execute("PRAGMA journal_mode = WAL")
        with engine.begin() as connection:
            migrate(connection)
    finally:
        engine.dispose()


def migrate(connection: Connection) -> None:
    """Bring the tables behind an open connection to the newest layout, in its transaction."""
    config = Config()
    # a per cent sign in a folder's name would be read as a substitution
    config.set_main_option("script_location", str(MIGRATIONS).replace("%", "%%"))
    config.attributes["connection"] = connection
    command.upgrade(config, "head")


def _engine(path: Path, *, mode: str) -> Engine:
    address = f"{path.resolve().as_uri()}?mode={mode}"

    def connect() -> sqlite3.Connection:
        # isolation_level None: the driver would otherwise begin late, and not before CREATE TABLE
        opened = sqlite3.connect(address, uri=True, timeout=BUSY_SECONDS, isolation_level=None)
        opened.execute("PRAGMA foreign_keys = ON")
        return opened

    # no pool: a command writes once, and an idle connection would keep the journal open
    engine = create_engine("sqlite://", creator=connect, poolclass=NullPool)
    event.listen(engine, "begin", _begin_at_once)
    return engine


# IMMEDIATE: two readers who both decide to write would each block the other for good
def _begin_at_once(connection: Connection) -> None:
    connection.exec_driver_sql("BEGIN IMMEDIATE")


def _raw(connection: Connection) -> Any:
    return connection.connection.driver_connection


def _revision(connection: Connection, path: Path) -> str | None:
    names = set(connection.execute(text("SELECT name FROM sqlite_master")).scalars())
    # other programs keep an alembic_version too, so our own tables are asked for
    if not {"alembic_version", "entry", "house"} <= names:
        raise foreign(path)
    found = connection.execute(text("SELECT version_num FROM alembic_version")).scalar()
    return None if found is None else str(found)


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
