"""An answer that one works out and everybody waits for who asks the same meanwhile."""

from __future__ import annotations

import threading
from collections.abc import Callable
from typing import Generic, TypeVar

Value = TypeVar("Value")


class MadeOnce(Generic[Value]):
    """A value to come: `make` is called by the one who made this, the others `wait`."""

    def __init__(self) -> None:
        self._done = threading.Event()
        self._value: Value
        self._error: BaseException | None = None

    def make(self, call: Callable[[], Value]) -> Value:
        """Work it out, and let go of those who wait, with the value or with what went wrong."""
        try:
            self._value = call()
            return self._value
        except BaseException as error:
            self._error = error
            raise
        finally:
            self._done.set()

    def wait(self) -> Value:
        """The value, once it is there. Raises: what working it out raised."""
        self._done.wait()
        if self._error is not None:
            raise self._error
        return self._value
