"""Everything out again: a store as a folder of tables and words, and such a folder read back."""

from __future__ import annotations

import shlex
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from datetime import date
from pathlib import Path

# handed on by name: the command line passes them from the store to the report
from stockroom.planning.facts import Bottle as Bottle
from stockroom.planning.facts import Facts as Facts
from stockroom.service.answers import Done
from stockroom.settings import StoreAt
from stockroom.store import reading
from stockroom.store.diary import Diary as Diary
from stockroom.store.diary import diaries
from stockroom.store.reading import Reader
from stockroom.store.snapshot import facts_from
from stockroom.store.snapshot_bottles import bottles_of


@dataclass(frozen=True, slots=True)
class Everything:
    """What the readable copy tells: every booking and bottle there ever was, and its story.

    `terms` are named, with their first and last day; `lists` the list and row that a bottle was
    brought in from, by its number.
    """

    known: Facts
    bottles: tuple[Bottle, ...]
    diaries: Iterable[Diary]
    terms: tuple[tuple[str, date, date], ...]
    lists: Mapping[str, str]


Words = Callable[[Everything], Iterable[str]]
"""What writes the readable copy."""


def hand_out(path: StoreAt, folder: Path, *, as_at: date, words: Words) -> Done:
    """Write every table of the store and a readable copy into a new folder.

    All of one moment; the store itself is only read. `as_at` is the day the readable copy
    tells the shelves for. Raises: StoreTrouble when the folder holds something, or cannot be
    written: then nothing is left of it.
    """
    from stockroom.store.handing_out import check_free, hand_out_to

    check_free(folder)
    with reading.reading(path) as reader:
        manifest = hand_out_to(reader, folder, lambda: words(_everything(reader, as_at)))
    rows = sum(content.rows for content in manifest.contents.values())
    return Done(
        f"Handed out to {folder}.",
        next=f"stockroom --store NEW.sqlite new --from {shlex.quote(str(folder))}",
        practice=manifest.practice,
        details=(
            f"{manifest.contents['entry'].rows} entries; {rows} rows in {len(manifest.tables)}"
            " tables.",
            "house.txt is to be read, README.txt says what each file, column and unit is.",
        ),
    )


def handed_back(path: StoreAt, folder: Path) -> Done:
    """Build a store from a folder that was handed out, and prove that it is the same.

    Tables that are not as they were handed out are refused; of a readable copy that is not, or
    a file that was put beside, it is told, since the store is the same without.
    Raises: StoreTrouble when something is at `path` already, or the folder is damaged or
    newer: then nothing is left of the store.
    """
    from stockroom.store.handing_back import hand_back
    from stockroom.store.manifest import odd_beside

    manifest = hand_back(path, folder)
    found = manifest.contents
    rows = sum(content.rows for content in found.values())
    return Done(
        f"Made {path} as it was handed out in {folder}.",
        next="stockroom plan",
        practice=manifest.practice,
        details=(
            f"{found['bottle'].rows} bottles, {found['entry'].rows} entries; {rows} rows in"
            f" {len(found)} tables.",
            "Every table was read back and compared: nothing differs.",
            *odd_beside(folder, manifest),
        ),
    )


def _everything(reader: Reader, as_at: date) -> Everything:
    first, last = _booked(reader, as_at)
    return Everything(
        known=facts_from(reader, as_at, first, last),
        bottles=bottles_of(reader, as_at, gone=True),
        diaries=diaries(reader),
        terms=tuple(
            (row["term"], date.fromisoformat(row["starts_on"]), date.fromisoformat(row["ends_on"]))
            for row in reader.rows("term", "ORDER BY starts_on, id")
        ),
        lists={
            row["number"]: _list_in(row["source"])
            for row in reader.rows("bottle", "WHERE source LIKE 'brought in: %'")
        },
    )


def _list_in(source: str) -> str:
    # the marks in brackets are for the program, to know the row again
    return source.rpartition(" [")[0] or source


def _booked(reader: Reader, as_at: date) -> tuple[date, date]:
    """The days from the first booking ever to the last, `as_at` among them."""
    first, last = reader.ask("SELECT MIN(on_day), MAX(on_day) FROM booking")[0]
    days = [date.fromisoformat(str(each)) for each in (first, last) if each is not None]
    return min([as_at, *days]), max([as_at, *days])
