"""What is to be asked or refused about a row, and how one says what is meant."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from enum import IntEnum


class Weight(IntEnum):
    """How much a doubt stands in the way of a row."""

    NOTE = 0
    """Told, and nothing to answer."""
    CAREFUL = 1
    """Asked, and brought in on the careful side meanwhile."""
    ASKED = 2
    """Asked; the row waits for the answer."""
    REFUSED = 3
    """Cannot be read or cannot be; the row waits until it is said otherwise."""


@dataclass(frozen=True, slots=True)
class Doubt:
    """One doubt: the `field` and the `value` it is about, why, and what may be answered.

    `key` is what an answer begins with, "dates" or "3.strength"; empty for a note.
    `options` are what may stand behind it, the likeliest first.
    """

    weight: Weight
    field: str
    value: str
    text: str
    key: str = ""
    options: tuple[str, ...] = ()
    shown: str = ""
    """What the rest of the file shows of it, said with the question and not with each row."""

    @property
    def asked(self) -> str:
        """The question in full."""
        return f"{self.text}; {self.shown}" if self.shown else self.text


class Doubts:
    """The doubts of one row, gathered: none stops the reading of the rest of the row."""

    def __init__(
        self, row: int, cells: Mapping[str, str], leaders: Mapping[str, int] | None = None
    ) -> None:
        self._row, self._cells = row, cells
        # rows that say the same are asked about under the number of the first
        self._leaders = leaders or {}
        self.all: list[Doubt] = []

    def note(self, field: str, text: str) -> None:
        """Tell of something that needs no answer."""
        self._add(Weight.NOTE, field, text)

    def careful(
        self, field: str, text: str, *, key: str = "", options: Iterable[str] = (), shown: str = ""
    ) -> None:
        """Ask, while the row goes in on the careful side."""
        self._add(Weight.CAREFUL, field, text, key or self._key(field), options, shown)

    def ask(
        self, field: str, text: str, *, key: str = "", options: Iterable[str] = (), shown: str = ""
    ) -> None:
        """Ask; the row waits."""
        self._add(Weight.ASKED, field, text, key or self._key(field), options, shown)

    def refuse(self, field: str, text: str, *, options: Iterable[str] = ()) -> None:
        """Refuse the row for what stands in this field."""
        self._add(Weight.REFUSED, field, text, self._key(field), options)

    def of_row(self, text: str, options: Iterable[str]) -> None:
        """Ask about the row as a whole; it waits."""
        self._add(Weight.ASKED, "", text, str(self._row), options)

    def _key(self, field: str) -> str:
        return f"{self._leaders.get(field, self._row)}.{field}"

    def _add(
        self,
        weight: Weight,
        field: str,
        text: str,
        key: str = "",
        options: Iterable[str] = (),
        shown: str = "",
    ) -> None:
        value = self._cells.get(field, "")
        self.all.append(Doubt(weight, field, value, text, key, tuple(options), shown))


def in_one(reason: str, hint: str) -> str:
    """A reason and what to do about it as one text, without the stop at its end."""
    stop = "" if reason[-1:] in "?!" else "."
    return f"{reason.rstrip('.')}{stop} {hint}".strip().rstrip(".")
