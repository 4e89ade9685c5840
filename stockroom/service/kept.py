"""Answers kept in memory while nothing was saved in the store: for a server, and only there.

A command answers once and ends, so it keeps nothing and pays nothing. A server is asked the
same again and again: what it worked out stands beside the mark of the store (`store/mark.py`),
which any saving changes, in whatever table, by whatever program. Every worker has its own.
"""

from __future__ import annotations

import threading
from collections import OrderedDict
from collections.abc import Callable, Hashable, Iterator
from contextlib import contextmanager
from typing import Any, TypeVar, cast

from stockroom.service.made_once import MadeOnce
from stockroom.settings import StoreAt
from stockroom.store.mark import Marks

Value = TypeVar("Value")

MOST = 8
"""Answers of a kind that are kept: a day or two as seen by a class, and never a whole memory.

The plan of a university's store takes some tens of megabytes with its facts. Our choice.
"""

MANY = 64
"""As many of the small ones, a few lines each. Our choice."""


class Kept:
    """The answers kept, of each kind so many, those asked for last; for many threads."""

    def __init__(self) -> None:
        self._marks = Marks()
        self._lock = threading.Lock()
        self._newest: dict[StoreAt, str] = {}
        self._answers: dict[str, OrderedDict[_Asked, MadeOnce[Any]]] = {}

    def answer(
        self,
        path: StoreAt,
        kind: str,
        asked: tuple[Hashable, ...],
        make: Callable[[], Value],
        most: int,
    ) -> Value:
        """As `kept`."""
        # before anything is read: see `store/mark.py`
        mark = self._marks.of(path)
        if mark is None:
            return make()
        key = (path, mark, asked)
        with self._lock:
            self._drop_older(path, mark)
            answers = self._answers.setdefault(kind, OrderedDict())
            found = answers.get(key)
            if found is None:
                mine: MadeOnce[Value] = MadeOnce()
                answers[key] = mine
                if len(answers) > most:
                    answers.popitem(last=False)
            else:
                answers.move_to_end(key)
        if found is not None:
            return cast(Value, found.wait())
        try:
            return mine.make(make)
        except BaseException:
            with self._lock:
                # it may be mended by the next time; and it may have been dropped meanwhile
                if answers.get(key) is mine:
                    del answers[key]
            raise

    def close(self) -> None:
        """Forget everything, and let go of every store."""
        with self._lock:
            self._answers.clear()
            self._newest.clear()
        self._marks.close()

    def _drop_older(self, path: StoreAt, mark: str) -> None:
        if self._newest.get(path) == mark:
            return
        self._newest[path] = mark
        for answers in self._answers.values():
            for key in [key for key in answers if key[0] == path and key[1] != mark]:
                del answers[key]


_Asked = tuple[StoreAt, str, tuple[Hashable, ...]]
"""The store, its mark, and what was asked."""

_KEPT: Kept | None = None
_USERS = 0
_TURNING = threading.Lock()


@contextmanager
def answers_kept() -> Iterator[None]:
    """Keep answers over the block: what a server does while it serves. May be nested."""
    keep_answers()
    try:
        yield
    finally:
        stop_keeping()


def keep_answers() -> None:
    """Begin to keep answers in this process; each call wants its `stop_keeping`."""
    global _KEPT, _USERS
    with _TURNING:
        _USERS += 1
        _KEPT = _KEPT or Kept()


def stop_keeping() -> None:
    """Forget what was kept and let go of the stores, once nobody keeps any more."""
    global _KEPT, _USERS
    with _TURNING:
        _USERS = max(_USERS - 1, 0)
        if _USERS == 0 and _KEPT is not None:
            ended, _KEPT = _KEPT, None
            ended.close()


def keeping() -> bool:
    """Whether answers are kept in this process now."""
    return _KEPT is not None


def kept(
    path: StoreAt,
    kind: str,
    asked: tuple[Hashable, ...],
    make: Callable[[], Value],
    *,
    most: int = MOST,
) -> Value:
    """What `make` gives for a question of a kind, worked out once while nothing is saved.

    Many who ask the same at once wait for one of them; an error is told to all of those and
    not kept. `make` reads whatever it needs from the store itself: what was read before this
    call may be older than the mark it would be kept under. What it gives is never changed by
    anybody. `most` of the kind are kept. Raises: as `make`.
    """
    memory = _KEPT
    return make() if memory is None else memory.answer(path, kind, asked, make, most)
