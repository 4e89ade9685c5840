"""Files written under another name first, which get their own only once they are whole."""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from itertools import count
from pathlib import Path

if sys.platform != "win32":
    import fcntl

SIDE_FILES = ("-journal", "-wal", "-shm")
"""What SQLite puts beside a file: the end of each name."""


def clear(path: Path, *ends: str) -> None:
    """Remove a file and its side files, or only those of these `ends`."""
    for end in ends or ("", *SIDE_FILES):
        Path(f"{path}{end}").unlink(missing_ok=True)


@contextmanager
def part_of(path: Path) -> Iterator[Path]:
    """A file of one's own to write into, beside `path`: PATH.part, or PATH.part-2 and on.

    What somebody who was cut off left under such a name is removed. So is this one at the end
    of the block, unless it was given its name by then. Raises: OSError.
    """
    part, held = _first_free(path)
    with removed_after(part, held):
        yield part


def _first_free(path: Path) -> tuple[Path, int]:
    for number in count(1):
        part = Path(f"{path}.part{'' if number == 1 else f'-{number}'}")
        held = hold(part)
        if held is not None:
            return part, held
    raise AssertionError("numbers do not end")


@contextmanager
def removed_after(part: Path, held: int) -> Iterator[None]:
    """Remove a part and let go of it, however the block ends; not what got its name by then."""
    try:
        yield
    finally:
        try:
            # under that name another process may be at its own by now
            if _is_at(held, part):
                clear(part)
        finally:
            os.close(held)


def hold(part: Path) -> int | None:
    """Make a part for this process alone; None where another is at it. Raises: OSError.

    What it gives goes to `removed_after`.
    """
    _clear_abandoned(part)
    try:
        held = os.open(part, os.O_RDWR | os.O_CREAT | os.O_EXCL, 0o644)
    except FileExistsError:
        return None
    if _locked(held) and _is_at(held, part):
        return held
    # somebody took it for left behind in the moment before it was locked
    os.close(held)
    return None


def _clear_abandoned(part: Path) -> None:
    try:
        held = os.open(part, os.O_RDWR)
    except OSError:
        return
    try:
        if _locked(held) and _is_at(held, part):
            clear(part)
    finally:
        os.close(held)


def _locked(held: int) -> bool:
    """Whether the file is this process's own now: no process that lives still writes it."""
    # there an open file can be neither removed nor opened by another, which comes to the same
    if sys.platform == "win32":
        return True
    try:
        fcntl.flock(held, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except OSError:
        return False
    return True


def _is_at(held: int, path: Path) -> bool:
    try:
        return os.path.samestat(os.fstat(held), path.stat())
    except FileNotFoundError:
        return False


def publish(part: Path, path: Path) -> None:
    """Give a whole file its name. Raises: FileExistsError where something has it; OSError."""
    try:
        # a second name in one step, which the system refuses where the name is taken
        os.link(part, path)
    except FileExistsError:
        raise
    except OSError:
        # a disc without second names: the name is taken first, then the file moved onto it
        path.touch(exist_ok=False)
        part.replace(path)
    else:
        part.unlink()
