"""Changes since the copy printed last, told by their causes: the bookings first.

A booking that moved takes every line of its day with it. Line by line they would hide the one
cause, so they are counted beside it.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.reports.paper.head import Since, change_words, gone_since, since
from stockroom.reports.words import counted

_BOOKING = re.compile(r"(?:\d{4}-\d\d-\d\d )?(?:booking )?([A-Z]\d+)")
_NUMBER = re.compile(r"\b[A-Z]\d+\b")
_MAKES = re.compile(r"(?:\d{4}-\d\d-\d\d )?(?:make|start|finish)\b")


@dataclass(frozen=True, slots=True)
class Made:
    """A bottle made here in the days of a sheet: when, of what line as a sheet writes it, for whom.

    `bookings` are the numbers it was made for, none where nobody wrote any.
    """

    bottle: str
    on: date
    line: str
    bookings: tuple[str, ...] = ()

    @property
    def key(self) -> str:
        """What a copy keeps of it, so that the next one knows which were made since."""
        return f"{self.on} made {self.bottle}"

    def did(self, key: str) -> bool:
        """Whether this is what came of the line of that key."""
        begins = [f"{self.on} {verb} {self.line}" for verb in ("make", "start")]
        whose = next((key.removeprefix(each) for each in begins if key.startswith(each)), None)
        if not whose:
            return whose == ""
        # of several of one line on one day, each says whom it is for
        named = {*_NUMBER.findall(whose)} & {*self.bookings}
        return whose.startswith(" for ") and bool(named or not self.bookings)


def since_by_booking(
    number: str,
    before: Mapping[str, str],
    now: Mapping[str, str],
    today: date,
    passed: Mapping[str, tuple[str, ...]] | None = None,
    made: Sequence[Made] = (),
) -> Since:
    """As `since`, with the changes in the order of their causes.

    Bookings that are new, moved, gone or changed, each in one line that counts the lines it
    takes with it; then what was made since; then what else is gone; then makes; then the rest.
    `passed` tells by key the bottles passed over and why: "S05: set aside", said where such a
    bottle was named before. `made` are the bottles made in the sheet's days: a line that is gone
    since it was done is told by its bottle, all in one: "made: S25 starch 0.5 % w/v".
    """
    told, gone = since(number, before, now, today), gone_since(before, now, today)
    fresh = [each for each in made if each.key not in before]
    done = {key: row for key in gone if (row := [each for each in fresh if each.did(key)])}
    left = tuple(key for key in gone if key not in done)
    lines = _Lines(before, now, told.marked, left, passed or {}, _made_words(done.values()))
    return Since(number, told.marked, tuple(lines.told()))


def _made_words(done: Iterable[Sequence[Made]]) -> tuple[str, ...]:
    said = dict.fromkeys(f"{each.bottle} {each.line}" for row in done for each in row)
    return (f"made: {'; '.join(said)}",) if said else ()


@dataclass(frozen=True, slots=True)
class _Lines:
    before: Mapping[str, str]
    now: Mapping[str, str]
    marked: tuple[str, ...]
    gone: tuple[str, ...]
    passed: Mapping[str, tuple[str, ...]]
    made: tuple[str, ...]

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
        row += self.made
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
