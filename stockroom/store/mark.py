"""A mark of a store: the same text only while nothing at all was saved in it.

For whoever keeps answers in memory. The ledger's last entry would not do, since a booking that
is moved or a rule that is changed stands in no ledger. A mark is read BEFORE the facts it is to
stand for: what is saved in between then makes the next mark another, and never an old answer.
"""

from __future__ import annotations

import os
import sqlite3
import threading
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any, Protocol

from stockroom.errors import StockroomError
from stockroom.settings import Server, StoreAt
from stockroom.store.held import mark_of

LET_GO = 2.0
"""Seconds after which a store that nobody asks about is closed. Our choice.

While it is held, what was saved may stand beside the file only, where somebody who copies the
file would miss it, and no backup can be put in its place.
"""

_BUSY_SECONDS = 0.1

ASKED_FOR = 5
"""Seconds a server may take to tell its mark; then nothing is kept. Our choice."""


class Marks:
    """The marks of the stores asked about, each held open for reading as long as it is asked for.

    For many threads; who asks of one store never waits for another that does not answer.
    `let_go_after` is in seconds.
    """

    def __init__(self, let_go_after: float = LET_GO) -> None:
        self._lock = threading.Lock()
        self._watched: dict[StoreAt, _Alone] = {}
        self._let_go_after = let_go_after
        self._asked = 0.0
        self._timer: threading.Timer | None = None

    def of(self, path: StoreAt) -> str | None:
        """The mark of a store now; None where it cannot be told, and nothing is to be kept."""
        with self._lock:
            store = self._watched.get(path)
            if store is None:
                store = self._watched[path] = _Alone(_watch_on(path))
        with store.lock:
            mark = store.watch.mark()
        # after it was opened: else one opened while all are closed would be held for ever
        with self._lock:
            self._asked = time.monotonic()
            if self._timer is None:
                self._wait(self._let_go_after)
        return mark

    def close(self) -> None:
        """Let go of every store at once."""
        with self._lock:
            if self._timer is not None:
                self._timer.cancel()
                self._timer = None
            watched = list(self._watched.values())
        for store in watched:
            with store.lock:
                store.watch.close()

    def _wait(self, seconds: float) -> None:
        self._timer = threading.Timer(seconds, self._rest)
        # nobody waits for it who wants to leave
        self._timer.daemon = True
        self._timer.start()

    def _rest(self) -> None:
        with self._lock:
            if self._timer is None or threading.current_thread() is not self._timer:
                return
            self._timer = None
            idle = time.monotonic() - self._asked
            if idle < self._let_go_after:
                self._wait(self._let_go_after - idle)
                return
            watched = list(self._watched.values())
        rested = [store.rest() for store in watched]
        # one that had something to write back is looked at once more before it is closed
        with self._lock:
            if self._timer is None and not all(rested):
                self._wait(self._let_go_after)


class _Alone:
    """A watch that one thread at a time may use."""

    def __init__(self, watch: _Watch) -> None:
        self.lock, self.watch = threading.Lock(), watch

    def rest(self) -> bool:
        """As the watch's own."""
        with self.lock:
            return self.watch.rest()


class _Watch(Protocol):
    def mark(self) -> str | None:
        """The mark now; None where it cannot be told."""

    def rest(self) -> bool:
        """Close, for now, where that loses nothing; whether it is closed."""

    def close(self) -> None:
        """Close."""


def _watch_on(path: StoreAt) -> _Watch:
    return _OfServer(path) if isinstance(path, Server) else _OfFile(path)


class _OfFile:
    """A file watched through one connection, which alone can say exactly what others saved.

    `_count` goes up with each change seen. Between two connections the file itself has to tell:
    one that lay still (`_still`) for as long as we wait before the first was closed (`_left`), and
    is the same when the next is open, with no journal beside it, was not written to. Lying still
    for so long, it has a time that no later change can share, however coarse the disc's clock.
    """

    def __init__(self, path: Path) -> None:
        self._path = path
        self._held: sqlite3.Connection | None = None
        self._file = (0, 0)
        self._part = path
        self._count = 0
        self._version = 0
        self._still: _State | None = None
        self._left: _State | None = None

    def mark(self) -> str | None:
        """The mark now; None where it cannot be told."""
        try:
            return self._mark()
        except (OSError, sqlite3.Error):
            # missing, busy for good, no store: whoever reads it next is told in words
            self.close()
            return None

    def _mark(self) -> str | None:
        if self._held is not None and mark_of(self._path) != self._file:
            # a backup was put in its place: the old file is to be gone when nobody has it open
            self.close()
        if self._held is None:
            self._open()
        if self._part.exists():
            # somebody makes a backup ready to be put here, and must have the store alone
            self.close()
            return None
        self._look()
        return str(self._count)

    def _look(self) -> None:
        """Count what others saved since the last look."""
        assert self._held is not None
        version = _version(self._held)
        if version != self._version:
            self._version = version
            self._count += 1
            self._still = None

    def _open(self) -> None:
        path = self._path.resolve()
        self._part = Path(f"{path}.part")
        self._file = mark_of(path)
        mode = "rw" if os.access(path, os.W_OK) else "ro"
        # its own calls stand behind one lock, whichever thread they come from
        self._held = sqlite3.connect(
            f"{path.as_uri()}?mode={mode}",
            uri=True,
            timeout=_BUSY_SECONDS,
            isolation_level=None,
            check_same_thread=False,
        )
        self._held.execute("PRAGMA query_only = ON")
        self._version = _version(self._held)
        # after the version: what was saved before it stands in the file or in its journal
        self._still = _state_of(path)
        if self._still is None or self._still != self._left:
            self._count += 1
        if mark_of(path) != self._file:
            raise OSError(f"{path} was replaced while it was opened")

    def rest(self) -> bool:
        """Close where the file has everything; else have it written back, and wait once more."""
        if self._held is None:
            return True
        try:
            return self._rest(self._held)
        except (OSError, sqlite3.Error):
            self.close()
            return True

    def _rest(self, held: sqlite3.Connection) -> bool:
        state = _state_of(self._path)
        # after the state: what is saved from here on changes the file, and is seen below
        self._look()
        if state is not None and state == self._still:
            self._shut()
            self._left = state if _state_of(self._path) == state else None
            return True
        if state is None and _written_back(held):
            state = _state_of(self._path)
        self._still = state
        if state is None:
            # somebody else is at it, and will write it back
            self.close()
        return state is None

    def close(self) -> None:
        """Close, with nothing known of what happens until it is opened again."""
        self._shut()
        self._left = None

    def _shut(self) -> None:
        if self._held is not None:
            held, self._held = self._held, None
            held.close()


_State = tuple[int, int, int, int, int]
"""A file's disc, number, length, and when it and what is said of it were changed last."""


def _version(held: sqlite3.Connection) -> int:
    return int(held.execute("PRAGMA data_version").fetchall()[0][0])


def _state_of(path: Path) -> _State | None:
    """How a file lies there; None where a journal beside it has more to say."""
    stat = path.stat()
    journal = Path(f"{path.resolve()}-wal")
    if journal.exists() and journal.stat().st_size:
        return None
    return stat.st_dev, stat.st_ino, stat.st_size, stat.st_mtime_ns, stat.st_ctime_ns


def _written_back(held: sqlite3.Connection) -> bool:
    """Have the journal written into the file; False where others are reading or writing."""
    try:
        busy, *_ = held.execute("PRAGMA wal_checkpoint(TRUNCATE)").fetchall()[0]
    except sqlite3.Error:
        return False
    return not busy


class _OfServer:
    """A server's store: the moment it stands at, by which it tells itself what is visible."""

    def __init__(self, server: Server) -> None:
        self._server = server
        self._ask: Callable[[], str] | None = None
        self._held: Any = None

    def mark(self) -> str | None:
        """The mark now; None where it cannot be told."""
        # loaded here: a store in a file needs no driver
        from stockroom.store.server_link import connect
        from stockroom.store.server_trouble import translated

        try:
            with translated(self._server):
                if self._held is None:
                    self._held = connect(self._server)
                    self._held.autocommit = True
                    self._held.execute(f"SET statement_timeout = {ASKED_FOR * 1000}")
                row = self._held.execute("SELECT pg_current_snapshot()::text").fetchone()
                return str(row[0])
        except StockroomError:
            self.close()
            return None

    def rest(self) -> bool:
        """Close: what a server says of itself is true for every connection."""
        self.close()
        return True

    def close(self) -> None:
        """Close."""
        if self._held is not None:
            held, self._held = self._held, None
            held.close()
