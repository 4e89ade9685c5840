"""A store kept by a PostgreSQL server: the same tables, the same guards, other locks."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager

from sqlmodel import Session

from stockroom.errors import StoreTrouble
from stockroom.settings import Server
from stockroom.store.reading import Reader


@contextmanager
def reading(server: Server) -> Iterator[Reader]:
    """A reader on the server's store. Raises: StoreTrouble."""
    raise StoreTrouble(f"{server} cannot be used yet.", "Give a file with --store PATH.")
    yield


@contextmanager
def writing(server: Server) -> Iterator[Session]:
    """A session on the server's store: saved when the block ends well. Raises: StoreTrouble."""
    raise StoreTrouble(f"{server} cannot be used yet.", "Give a file with --store PATH.")
    yield


def create(server: Server, fill: Callable[[Session], None] | None = None) -> None:
    """Make a store on the server, empty or filled by `fill`. Raises: StoreTrouble."""
    raise StoreTrouble(f"{server} cannot be used yet.", "Give a file with --store PATH.")
