"""One entry in words, for whoever is about to put it right."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.reports.diary_text import DiaryRow, change_words, left_words, said_words
from stockroom.reports.words import day_heading


@dataclass(frozen=True, slots=True)
class EntryTold:
    """What an entry says: a heading, and what was written, each with its name."""

    heading: str
    bottle: str
    rows: tuple[tuple[str, str], ...]


def entry_told(bottle: str, item: str, entries: Iterable[DiaryRow]) -> tuple[EntryTold, ...]:
    """The entry asked about, and those that put it right, in the order they happened."""
    return tuple(_told(bottle, item, each) for each in entries)


def _told(bottle: str, item: str, entry: DiaryRow) -> EntryTold:
    undone = f"yes, by entry {entry.undone_by}" if entry.undone_by else ""
    rows = (
        ("What", f"{entry.kind} {change_words(entry)}".strip()),
        ("Left after it", left_words(entry)),
        ("Happened", day_heading(entry.happened)),
        ("Entered", f"{day_heading(entry.entered)}, by {entry.by}"),
        ("Said", said_words(entry)),
        ("Put right", undone),
    )
    heading = f"Entry {entry.entry}: {bottle} {item}"
    return EntryTold(heading, bottle, tuple((name, said) for name, said in rows if said))
