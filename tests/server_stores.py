"""The same stores on a real server: where `STOCKROOM_TEST_SERVER` names one, tests run there.

`tests/server/real_server.py` starts a server and prints the address to give. A test that
needs a file (it opens it with the plain driver, copies it, cuts it short) is marked
`pytest.mark.file` and left out there, as is one that opens no store at all. One that needs
a server is marked `pytest.mark.server`, and left out everywhere else.
"""

from __future__ import annotations

import os
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

import psycopg
import pytest

from stockroom.settings import Server

ADDRESS = os.environ.get("STOCKROOM_TEST_SERVER", "")
"""The server to test on, with no database named; blank for files."""

# a test asks for a store by one of these
_OPEN_A_STORE = {"practice", "own", "term"}


def named(name: str) -> Server:
    """The address of one database on the server."""
    return Server(ADDRESS.replace("/?", f"/{name}?", 1))


def make(name: str, *, like: Server | None = None) -> Server:
    """A new database, empty or a copy of another."""
    template = f"TEMPLATE {_name(like)}" if like else ""
    with raw(named("postgres")) as opened:
        # page by page through the log, as it is usual since 15, costs five times as much
        quick = "STRATEGY FILE_COPY" if opened.info.server_version >= 150_000 else ""
        opened.execute(f"CREATE DATABASE {name} {template} {quick}")
    return named(name)


def drop(store: Server) -> None:
    """Remove a database, whoever still looks at it."""
    _tell(f"DROP DATABASE {_name(store)} WITH (FORCE)")


def shut(store: Server) -> None:
    """Let a database be read only from now on."""
    _tell(f"ALTER DATABASE {_name(store)} SET default_transaction_read_only = on")


@contextmanager
def raw(store: Server) -> Iterator[psycopg.Connection[Any]]:
    """The plain driver on a store, each statement its own transaction."""
    with psycopg.connect(store.url.replace("+psycopg", "", 1), autocommit=True) as opened:
        yield opened


def own_name() -> str:
    """A name no other run, and no other worker of this one, uses."""
    return f"of_{os.environ.get('PYTEST_XDIST_WORKER', 'one')}_{os.getpid()}"


def fits(item: pytest.Item) -> bool:
    """Whether a test belongs in this run: over files, or over a server."""
    of_server = item.get_closest_marker("server") is not None
    if not ADDRESS:
        return not of_server
    asked = set(getattr(item, "fixturenames", ()))
    return of_server or (bool(asked & _OPEN_A_STORE) and item.get_closest_marker("file") is None)


def _name(store: Server) -> str:
    return store.url.split("://", 1)[1].split("/", 1)[1].split("?", 1)[0]


def _tell(sentence: str) -> None:
    with raw(named("postgres")) as opened:
        opened.execute(sentence)
