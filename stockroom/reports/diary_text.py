"""The story of one bottle: every entry with its number, slips and their putting-right included."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date
from functools import lru_cache
from typing import Any, Protocol

from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_about, format_amount
from stockroom.reports.sheet import PRACTICE, columns
from stockroom.reports.words import raised

# a ledger draws the same amounts again and again; bounded, since it may be longer than memory
_written = lru_cache(maxsize=8192)(format_amount)

_HEADING = ("entry", "happened", "entered", "by", "what", "amount", "left", "")


# a row of its own, because the ledger's are the store's, and reports know no store
@dataclass(frozen=True, slots=True)
class DiaryRow:
    """One entry: `left` is what the bottle holds after it, `change` signed.

    `puts_right` is the entry it undoes, `undone_by` the one that undid it.
    """

    entry: int
    happened: date
    entered: date
    by: str
    kind: str
    change: Amount
    left: Amount
    said: str = ""
    place: str = ""
    booking: str = ""
    puts_right: int | None = None
    undone_by: int | None = None
    about: bool = False


class Entry(Protocol):
    """An entry as the store tells it, with what a row says of it."""

    @property
    def entry(self) -> int: ...
    @property
    def happened(self) -> date: ...
    @property
    def entered(self) -> date: ...
    @property
    def by(self) -> str: ...
    @property
    def kind(self) -> str: ...
    @property
    def change(self) -> Amount: ...
    @property
    def left(self) -> Amount: ...
    @property
    def said(self) -> str: ...
    @property
    def place(self) -> str: ...
    @property
    def booking(self) -> str: ...
    @property
    def puts_right(self) -> int | None: ...
    @property
    def undone_by(self) -> int | None: ...
    @property
    def about(self) -> bool: ...


def diary_rows(entries: Iterable[Entry]) -> Iterator[DiaryRow]:
    """The store's entries as rows, one by one: a ledger may be longer than memory."""
    for told in entries:
        yield DiaryRow(
            entry=told.entry,
            happened=told.happened,
            entered=told.entered,
            by=told.by,
            kind=told.kind,
            change=told.change,
            left=told.left,
            said=told.said,
            place=told.place,
            booking=told.booking,
            puts_right=told.puts_right,
            undone_by=told.undone_by,
            about=told.about,
        )


def diary_text(
    bottle: str, item: str, entries: Sequence[DiaryRow], width: int, *, practice: bool
) -> str:
    """A bottle's entries under a heading, one a row, in the order they are given."""
    rows = [_HEADING, *(_cells(told) for told in entries)]
    lines = [raised(f"{bottle} {item}"), *columns(rows, width, indent=0)]
    return "\n".join([PRACTICE, *lines] if practice else lines)


def entry_line(told: DiaryRow) -> str:
    """One entry on one line of its own, however long."""
    return "  ".join(cell for cell in _cells(told) if cell)


def _cells(told: DiaryRow) -> tuple[str, ...]:
    return (
        str(told.entry),
        told.happened.isoformat(),
        told.entered.isoformat(),
        told.by,
        f"{told.kind} (put right by {told.undone_by})" if told.undone_by else told.kind,
        change_words(told),
        left_words(told),
        said_words(told),
    )


def change_words(told: DiaryRow) -> str:
    """What an entry added or took, signed: "+500 cm³"; "" for one that changed no amount."""
    # a plus sign sets what came in apart from what was counted to be there
    sign = "+" if told.change.micro > 0 else ""
    return f"{sign}{_written(told.change)}" if told.change.micro else ""


def left_words(told: DiaryRow) -> str:
    """What was left after an entry, with "about" where that was judged by eye."""
    return format_about(told.left) if told.about and told.left.micro else _written(told.left)


def said_words(told: DiaryRow) -> str:
    """What it puts right, where to, for which booking, and what somebody said of it."""
    mends = f"puts right {told.puts_right}" if told.puts_right else ""
    to = f"at {told.place}" if told.place else ""
    booking = f"for {told.booking.replace(';', ', ')}" if told.booking else ""
    return "; ".join(part for part in (mends, to, booking, told.said) if part)


def diary_json(
    bottle: str, item: str, entries: Sequence[DiaryRow], *, practice: bool
) -> dict[str, Any]:
    """The same as data: amounts are numbers in `unit`, days are ISO text."""
    return {
        "bottle": bottle,
        "item": item,
        "practice": practice,
        "entries": [_entry(told) for told in entries],
    }


def _entry(told: DiaryRow) -> dict[str, Any]:
    return {
        "entry": told.entry,
        "happened": told.happened.isoformat(),
        "entered": told.entered.isoformat(),
        "by": told.by,
        "what": told.kind,
        "amount": told.change.number,
        "left": told.left.number,
        "unit": told.left.unit,
        "about": told.about,
        "place": told.place,
        "booking": told.booking,
        "said": told.said,
        "puts_right": told.puts_right,
        "put_right_by": told.undone_by,
    }
