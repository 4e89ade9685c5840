"""What was typed into "try it": read field by field, and a refusal put beside its field."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import date
from typing import TypeVar

from starlette.datastructures import QueryParams

from stockroom.errors import BadInput, StockroomError
from stockroom.measure.days import spell_day
from stockroom.reports.pages.what_if import MOST_ROWS, SUPPOSED, Where, value_at
from stockroom.service.typed import day_or_none, time_or_none, whole
from stockroom.service.what_if import Asked, Extra, Shift

Value = TypeVar("Value")

LONGEST = 200
"""Signs a field takes. Our choice."""

NAMES = tuple(ask.name for each in SUPPOSED for ask in each.asks)


def typed_in(query: QueryParams) -> dict[str, list[str]]:
    """Each field's values, one a row. Raises: BadInput for more rows or signs than are taken."""
    typed = {name: query.getlist(name) for name in NAMES}
    for name, values in typed.items():
        if len(values) > MOST_ROWS:
            told = f"{name} is there {len(values)} times, and {MOST_ROWS} are taken."
            raise BadInput(told, "Try fewer things at once.")
        for value in values:
            if len(value) > LONGEST:
                told = f"{value[:30]}… is {len(value)} signs long, and {LONGEST} are taken."
                raise BadInput(told, "Say it shorter.")
    return typed


@dataclass
class Trying:
    """The fields of one request as they are read; `troubles` is what is wrong, beside what."""

    typed: Mapping[str, list[str]]
    troubles: dict[Where, tuple[str, str]] = field(default_factory=dict)

    def asked(self, *, cautious: bool, keep_closed: bool) -> Asked:
        """All that can be read; what cannot stands in `troubles`."""
        return Asked(
            groups=self._each("groups", self._resized),
            shifts=self._each("shift", self._shifted),
            without=self._each("without", lambda row: self._at("without", row)),
            cancels=self._each("cancel", lambda row: self._at("cancel", row)),
            extras=self._each("book", self._booked),
            cautious=cautious,
            keep_closed=keep_closed,
        )

    def blame(self, error: StockroomError) -> bool:
        """Put a refusal beside the field it quotes; whether there is one."""
        told = error.message
        quoting = [where for where in self._filled() if self._longest(told, where) > 1]
        if not quoting:
            return False
        # the longest says most; then whose row is quoted most, as a booking may stand in two;
        # and of two alike the later one came too much
        chosen = max(
            reversed(quoting), key=lambda each: (self._longest(told, each), self._row(told, each))
        )
        self.troubles[chosen] = in_our_words(error)
        return True

    def _longest(self, told: str, where: Where) -> int:
        """Signs of the longest spelling of a value that a message quotes."""
        return max((len(each) for each in self._spelt(where) if _quotes(told, each)), default=0)

    def _row(self, told: str, where: Where) -> int:
        """How many values of the same row a message quotes."""
        kind = next(each for each in SUPPOSED if where[0] in (ask.name for ask in each.asks))
        return sum(bool(self._longest(told, (ask.name, where[1]))) for ask in kind.asks)

    def _resized(self, row: int) -> tuple[str, int] | None:
        number = self._read("number", row, lambda text: whole(text, "Groups"))
        if not self._at("number", row):
            self._want("number", row, f"How many groups for {self._at('groups', row)}?")
        return None if number is None else (self._at("groups", row), number)

    def _shifted(self, row: int) -> Shift | None:
        on, minute = self._day("day", row), self._time("time", row)
        if not self._at("day", row) and not self._at("time", row):
            self._want("day", row, f"{self._at('shift', row)} on which day, or at which time?")
        return Shift(self._at("shift", row), on, minute)

    def _booked(self, row: int) -> Extra | None:
        on = self._day("on", row)
        groups = self._read("for", row, lambda text: whole(text, "Groups"))
        minute = self._time("at", row)
        for name, told in (("on", "on which day?"), ("for", "for how many groups?")):
            if not self._at(name, row):
                self._want(name, row, f"{self._at('book', row)} {told}")
        if on is None or groups is None:
            return None
        return Extra(self._at("book", row), on, groups, minute, self._at("dept", row))

    def _each(self, first: str, read: Callable[[int], Value | None]) -> tuple[Value, ...]:
        """The rows of a kind whose first field is filled; one filled only behind it is wrong."""
        kind = next(each for each in SUPPOSED if each.asks[0].name == first)
        found = []
        for row in range(max(len(self.typed[ask.name]) for ask in kind.asks)):
            value = read(row) if self._at(first, row) else None
            if value is not None:
                found.append(value)
            elif not self._at(first, row) and any(self._at(ask.name, row) for ask in kind.asks):
                self._want(first, row, f"{kind.asks[0].label} is empty.")
        return tuple(found)

    def _day(self, name: str, row: int) -> date | None:
        return self._read(name, row, lambda text: day_or_none(text, "Day"))

    def _time(self, name: str, row: int) -> int | None:
        return self._read(name, row, lambda text: time_or_none(text, "Time"))

    def _read(self, name: str, row: int, parse: Callable[[str], Value]) -> Value | None:
        text = self._at(name, row)
        if not text:
            return None
        try:
            return parse(text)
        except StockroomError as error:
            self.troubles[name, row] = in_our_words(error)
            return None

    def _want(self, name: str, row: int, told: str) -> None:
        self.troubles[name, row] = (told, "Fill it in, or empty the row.")

    def _at(self, name: str, row: int) -> str:
        return value_at(self.typed, name, row)

    def _filled(self) -> list[Where]:
        return [
            (name, row)
            for name, values in self.typed.items()
            for row, value in enumerate(values)
            if value.strip()
        ]

    def _spelt(self, where: Where) -> list[str]:
        """A value as it was typed, and a day as a refusal spells it."""
        text = self._at(*where)
        if not text or where[0] not in ("day", "on"):
            return [text]
        day = day_or_none(text, "")
        return [text] if day is None else [text, spell_day(day), day.isoformat()]


_IN_OUR_WORDS = (
    ("--keep-closed", "Tick the box to keep it though the house is closed."),
    ("Add a department", "Fill in the department."),
    ("Check the year", "Check the year."),
    ("--as-at", "Give a day of the term."),
    ("--undo", "Book it again, or take its cancelling back first."),
    ("--firmness", "Take its cancelling back first."),
)
"""What a hint for the command line says, and what it means on this page."""


def in_our_words(error: StockroomError) -> tuple[str, str]:
    """A refusal as the page says it: without the options of a command."""
    hint = next((ours for theirs, ours in _IN_OUR_WORDS if theirs in error.hint), error.hint)
    message, _, _ = error.message.partition(", in --")
    ended = message if message.endswith((".", "?")) else f"{message}."
    return ended, hint


def _quotes(message: str, value: str) -> bool:
    """Whether a value stands in a message, as a word of its own."""
    return bool(value) and bool(
        re.search(rf"(?<!\w){re.escape(value)}(?!\w)", message, re.IGNORECASE)
    )
