"""Changes since the copy printed last, told by their causes: the bookings first.

A booking that moved takes every line of its day with it. Line by line they would hide the one
cause, so they are counted beside it.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date

from stockroom.reports.paper.head import Since, change_words, gone_since, since
from stockroom.reports.words import counted

_BOOKING = re.compile(r"(?:\d{4}-\d\d-\d\d )?(?:booking )?([A-Z]\d+)")
_NUMBER = re.compile(r"\b[A-Z]\d+\b")
_MAKES = re.compile(r"(?:\d{4}-\d\d-\d\d )?(?:make|start|finish)\b")


def since_by_booking(
    number: str,
    before: Mapping[str, str],
    now: Mapping[str, str],
    today: date,
    passed: Mapping[str, tuple[str, ...]] | None = None,
) -> Since:
    """As `since`, with the changes in the order of their causes.

    Bookings that are new, moved, gone or changed, each in one line that counts the lines it
    takes with it; then what else is gone; then makes; then the rest. `passed` tells by key the
    bottles passed over and why: "S05: set aside", said where such a bottle was named before.
    """
    told = since(number, before, now, today)
    lines = _Lines(before, now, told.marked, gone_since(before, now, today), passed or {})
    return Since(number, told.marked, tuple(lines.told()))


@dataclass(frozen=True, slots=True)
class _Lines:
    before: Mapping[str, str]
    now: Mapping[str, str]
    marked: tuple[str, ...]
    gone: tuple[str, ...]
    passed: Mapping[str, tuple[str, ...]]

    def told(self) -> list[str]:
        new = {_booking(key): key for key in self.marked if key not in self.before}
        gone = {_booking(key): key for key in self.gone}
        changed = {_booking(key): key for key in self.marked if key in self.before}
        whole = ({*new, *gone} | {one for one in changed if self._emptied(one)}) - {""}
        row = [
            f"{self._change(key)}{self._with(one, whole)}" for one, key in changed.items() if one
        ]
        row += [
            f"{self._came(new.get(one), gone.get(one))}{self._with(one, whole)}"
            for one in dict.fromkeys([*new, *gone])
            if one
        ]
        rest = [key for key in self.gone if not _booking(key) and not _hangs(key, whole)]
        row += [f"gone: {self.before[key]}" for key in rest]
        rest = [key for key in self.marked if not _booking(key) and not _hangs(key, whole)]
        makes_first = sorted(rest, key=lambda key: not _MAKES.match(key))
        return [*row, *(self._change(key) for key in makes_first)]

    def _came(self, new: str | None, gone: str | None) -> str:
        if new and gone:
            return f"moved: {self.now[new]} (was: {self.before[gone]})"
        return f"new: {self.now[new]}" if new else f"gone: {self.before[gone or '']}"

    def _emptied(self, booking: str) -> bool:
        """Whether nothing hangs on a booking any more that did: it was dropped, and is named."""
        mine = {booking}
        return not any(_hangs(key, mine) for key in self.now if not _booking(key))

    def _with(self, booking: str, whole: set[str]) -> str:
        if booking not in whole:
            return ""
        keys = [key for key in (*self.marked, *self.gone) if not _booking(key)]
        # what hangs on several is counted with the first of them
        count = sum(_hangs(key, whole) and _NUMBER.findall(key)[0] == booking for key in keys)
        return f"; {counted(count, 'line')} with it" if count else ""

    def _change(self, key: str) -> str:
        was = self.before.get(key)
        why = [each for each in self.passed.get(key, ()) if was and _names(was, each)]
        return "; ".join([change_words(was, self.now[key]), *why])


def _booking(key: str) -> str:
    """The booking a line is the line of; "" for any other line."""
    found = _BOOKING.fullmatch(key)
    return found[1] if found else ""


def _hangs(key: str, bookings: set[str]) -> bool:
    """Whether a line is there for these bookings and no others."""
    named = set(_NUMBER.findall(key))
    return bool(named) and named <= bookings


def _names(text: str, passed: str) -> bool:
    bottle = passed.split(":")[0]
    return re.search(rf"\b{re.escape(bottle)}\b", text) is not None
