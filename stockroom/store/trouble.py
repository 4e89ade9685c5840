"""What goes wrong between us and the file, said in words a technician can act on.

The plain driver's errors become `StoreTrouble` (or `NotEnough`, from the trigger
that guards every balance). Light: reading commands import this.
"""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from stockroom.errors import NotEnough, Refused, StoreTrouble
from stockroom.settings import StoreAt

REVISIONS = ("0001", "0002", "0003", "0004", "0005", "0006", "0007", "0008", "0009")
"""The migrations this program knows, oldest first; the last is what it writes."""

REPLACED = "replaced"
"""The layout mark of a file whose place another took while somebody still had it open."""

BUSY_SECONDS = 5.0
"""How long a writer waits for another before it gives up. A house choice."""


def missing(path: Path) -> StoreTrouble:
    """The error for a store that is not there."""
    return StoreTrouble(
        f"No store at {path}.",
        "Make one with `stockroom new`, or try the practice college: `stockroom demo`.",
    )


def foreign(path: StoreAt) -> StoreTrouble:
    """The error for a file, or a database, that is something else."""
    return StoreTrouble(
        f"{path} is not a stockroom store.", "Give the right file with --store PATH."
    )


def damaged(path: Path) -> StoreTrouble:
    """The error for a store that can no longer be read through."""
    return StoreTrouble(
        f"The store {path} is damaged and cannot be read to its end.",
        "Nothing was changed. Put the last good copy of the file back.",
    )


def unfinished(path: Path) -> StoreTrouble:
    """The error for a store whose last writer was cut off, where nobody may finish for it."""
    return StoreTrouble(
        f"{path} was not closed properly, and may not be written to from here.",
        f"Copy it together with {path.name}-wal to a folder of your own, and read it there.",
    )


def check_there(path: Path) -> None:
    """Pass when a file stands at the path. Raises: StoreTrouble."""
    # the driver would only say that it cannot open it
    if path.is_dir():
        raise StoreTrouble(f"{path} is a folder, not a store.", "Name the file inside it.")
    if not path.exists():
        raise missing(path)


def is_older(path: StoreAt, revision: str | None) -> bool:
    """True when the store is in an earlier layout of this program, and can be brought up.

    Raises: StoreTrouble for a file with no layout mark, or with a newer one.
    """
    if revision is None:
        raise foreign(path)
    if revision == REPLACED:
        raise StoreTrouble(
            f"A backup was put in the place of {path} a moment ago; nothing was saved.",
            "Look at the store, then enter it again.",
        )
    if revision not in REVISIONS:
        raise StoreTrouble(
            f"{path} was written by a newer stockroom (revision {revision};"
            f" this one knows up to {REVISIONS[-1]}).",
            "Upgrade the program; nothing was changed.",
        )
    return revision != REVISIONS[-1]


def in_words(error: sqlite3.Error, path: Path) -> Refused:
    """The driver's error as one of ours, quoting the file it is about."""
    name, text = _name_of(error, path), str(error)
    # the two words our triggers begin with
    if text.startswith("NOTENOUGH"):
        return NotEnough("That is more than the bottle holds; nothing was saved.", "Count it.")
    if text.startswith("KEPT"):
        return StoreTrouble(text.removeprefix("KEPT "), "Add a new entry instead: put-right.")
    for start, words in _WORDS.items():
        if name.startswith(start):
            return StoreTrouble(words[0].format(path=path), words[1])
    # by name and not by number: each name has several extended numbers
    if name.startswith("SQLITE_NOTADB") or "no such table" in text:
        return foreign(path)
    if name.startswith("SQLITE_CORRUPT"):
        return damaged(path)
    return StoreTrouble(f"The store {path} cannot be used: {text}.", "Nothing was saved.")


def _name_of(error: sqlite3.Error, path: Path) -> str:
    """The driver's name for what went wrong, put straight where the file shows more."""
    # absent on errors the driver raises itself, before it asks the library
    name = str(getattr(error, "sqlite_errorname", ""))
    # a full disc is told as such only where the file itself should grow, not its side files
    if name.startswith("SQLITE_IOERR") and _room(path) < LEAST_ROOM:
        return "SQLITE_FULL"
    # there and not to be opened: it is the right that is missing, on the file or on its folder
    if name.startswith("SQLITE_CANTOPEN") and path.exists():
        return "SQLITE_READONLY" if os.access(path, os.R_OK) else "SQLITE_PERM"
    return name


LEAST_ROOM = 65_536
"""Bytes: with less than this free, a store's side files do not fit beside it."""


def _room(path: Path) -> int:
    """The bytes still free on the disc that holds a file; as much as wanted where unknown."""
    # loaded here: something has gone wrong already, and reading stays light
    from shutil import disk_usage

    try:
        return disk_usage(path.parent).free
    except OSError:
        return LEAST_ROOM


# each says what became of the entry: that is what somebody at the bench needs to know
_WORDS = {
    "SQLITE_BUSY": (
        "Busy: somebody else is writing to {path}; nothing was saved.",
        "Try again in a moment.",
    ),
    "SQLITE_LOCKED": (
        "Busy: somebody else is writing to {path}; nothing was saved.",
        "Try again in a moment.",
    ),
    "SQLITE_READONLY": (
        "{path} may be read but not written; nothing was saved.",
        "Ask for the right to write to that file and its folder.",
    ),
    "SQLITE_FULL": (
        "The disc that holds {path} is full; nothing was saved.",
        "Make room, then enter it again.",
    ),
    "SQLITE_PERM": (
        "{path} may not be read; nothing was saved.",
        "Ask for the right to read and write that file and its folder.",
    ),
    "SQLITE_CANTOPEN": (
        "{path} cannot be opened; nothing was saved.",
        "Look whether the folder is there and may be written to.",
    ),
    "SQLITE_IOERR": (
        "The disc that holds {path} did not answer; nothing was saved.",
        "Look at the disc or the network drive, then try again.",
    ),
}


@contextmanager
def translated(path: Path) -> Iterator[None]:
    """Turn the plain driver's errors inside the block into ours. Raises: Refused."""
    try:
        yield
    except sqlite3.Error as error:
        raise in_words(error, path) from error
