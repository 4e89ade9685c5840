"""A sheet and its copies: held against the one printed last, and given the next number.

To look at a sheet writes nothing; to print one takes the next number and keeps its lines.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import replace
from typing import Any, Protocol, TypeVar

from stockroom.errors import NotAllowed, StoreTrouble
from stockroom.service import copies
from stockroom.settings import StoreAt

A = TypeVar("A", bound=Any)
Drawn = TypeVar("Drawn")


class Kind(Protocol):
    """What has to be known of a kind of sheet: the name of its copies, and what is held."""

    @property
    def name(self) -> str:
        """The name of its copies."""

    @property
    def lines(self) -> Callable[[Any], Mapping[str, str]]:
        """What a sheet says, line by line."""

    def since(self, sheet: Any, number: str, before: Mapping[str, str]) -> Any:
        """What it says otherwise than the copy of that number, which said `before`."""


def held_against(path: StoreAt, kind: Kind, sheet: A, about: str) -> A:
    """The sheet with what it says otherwise than the copy printed last of the same.

    `about` tells one sheet of its kind from another: a Monday, a booking, a make.
    """
    before = copies.copy_before(path, kind.name, about)
    if before is None or not before.lines:
        return sheet
    told = kind.since(sheet, before.number, before.lines)
    return replace(sheet, head=replace(sheet.head, since=told))


def numbered(path: StoreAt, kind: Kind, sheet: A, about: str, *, by: str, otherwise: str) -> A:
    """The sheet under the next copy's number, its lines kept.

    `otherwise` is how it can be read without one. Raises: NotAllowed where none can be taken.
    """
    with _telling(otherwise):
        return _next(path, kind, sheet, about, by)


def printed(
    path: StoreAt,
    kind: Kind,
    sheet: A,
    about: str,
    *,
    by: str,
    otherwise: str,
    draw: Callable[[A], Drawn],
) -> tuple[A, Drawn]:
    """The sheet under the next copy's number, and what `draw` makes of it, as one piece.

    What cannot be drawn takes no number. While it is drawn nobody else can save, so `draw` asks
    nobody and waits for nothing. Raises: as `numbered`, and as `draw`.
    """
    from stockroom.store.engine import joined

    with _telling(otherwise), joined(path):
        copy = _next(path, kind, sheet, about, by)
        return copy, draw(copy)


def _next(path: StoreAt, kind: Kind, sheet: A, about: str, by: str) -> A:
    head, lines = sheet.head, kind.lines(sheet)
    number = copies.number_copy(path, kind.name, about, lines, as_at=head.as_at, by=by)
    return replace(sheet, head=replace(head, copy=number))


@contextmanager
def _telling(otherwise: str) -> Iterator[None]:
    try:
        yield
    except StoreTrouble as trouble:
        raise NotAllowed(
            f"No copy can be numbered, so nothing was printed. {trouble.message}",
            f"{otherwise} {trouble.hint}".strip(),
        ) from trouble
