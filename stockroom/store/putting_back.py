"""A backup put in the place of a store, which is kept.

The present store is held alone while a proved copy of it is set aside; then the backup takes
its name in one step. Cut off anywhere, one whole store stands in the place.
"""

from __future__ import annotations

import os
import shutil
import sqlite3
from collections import Counter
from collections.abc import Iterator
from contextlib import closing, contextmanager, suppress
from dataclasses import dataclass
from datetime import date
from pathlib import Path

from stockroom.errors import StoreTrouble
from stockroom.store.backup import Proof, alone, copy_proved, free_place, prove_copy_of, settle
from stockroom.store.content import Columns, columns_there, contents, rows_in_pages
from stockroom.store.held import mark_of
from stockroom.store.parts import SIDE_FILES, clear, part_of, publish
from stockroom.store.reading import Reader, Row
from stockroom.store.trouble import BUSY_SECONDS, REPLACED, foreign, in_words, translated


@dataclass(frozen=True, slots=True)
class Newer:
    """What the store that was put aside had and the backup has not: entries, whose, up to when.

    `more` counts the entries that only the backup has; `tables` names the others that differ.
    """

    entries: int = 0
    by: tuple[str, ...] = ()
    last: date | None = None
    more: int = 0
    tables: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class PutBack:
    """What was put back, and where the store before it is kept: None where there was none.

    `newer` is None where that could not be read; `journal` is what a store that was moved away
    had left there.
    """

    proof: Proof
    kept: Path | None = None
    newer: Newer | None = None
    journal: Path | None = None


def put_back(path: Path, copy: Path, kept_name: str) -> PutBack:
    """Put the backup `copy` in the place of the store at `path`, and keep that under a free name.

    Raises: StoreTrouble when the backup is no sound store, somebody has the present one open,
    or that is something else than a store; sqlite3.Error and OSError of the folder.
    """
    # a link to a store stays one, and the file it leads to is what is replaced
    path = path.resolve()
    path.parent.mkdir(parents=True, exist_ok=True)
    with part_of(path) as fresh:
        proof = copy_proved(copy, fresh)
        _keep_journal(fresh)
        if not path.exists():
            journal = _journal_aside(path, kept_name)
            _publish(fresh, path)
            done = PutBack(proof, journal=journal)
        elif _is_broken(path):
            _allow_alike(path, fresh)
            done = PutBack(proof, _bytes_aside(path, kept_name))
            os.replace(fresh, path)
        else:
            with _held_alone(path) as reader:
                kept = _copy_aside(reader, path, kept_name)
                done = PutBack(proof, kept, _newer(reader, fresh))
                _allow_alike(path, fresh)
                os.replace(fresh, path)
                _spoil(reader.connection)
        settle(path)
        return done


def _journal_aside(path: Path, name: str) -> Path | None:
    """What lies beside a store that was moved away, kept: its last entries may be there alone."""
    kept = None
    for end in ("-journal", "-wal"):
        left = Path(f"{path}{end}")
        if left.exists() and left.stat().st_size:
            with free_place(path.parent, name) as (_, place):
                kept = Path(f"{place}{end}")
                publish(left, kept)
    # left there, they would be read as the side files of the backup
    clear(path, *SIDE_FILES)
    return kept


def _publish(fresh: Path, path: Path) -> None:
    try:
        publish(fresh, path)
    except FileExistsError as error:
        raise StoreTrouble(
            f"A store was put at {path} meanwhile; it was left as it is.",
            "Look at it, then restore again.",
        ) from error


def _keep_journal(fresh: Path) -> None:
    # a copy may have been set aside in the other journal mode, in which readers stop writers
    with closing(sqlite3.connect(fresh)) as held:
        held.execute("PRAGMA journal_mode = WAL")


def _allow_alike(path: Path, fresh: Path) -> None:
    # whoever might write in the store before may do so after
    shutil.copymode(path, fresh)
    stood = path.stat()
    # another's file can be given back to them by the superuser only, and not on every system
    with suppress(OSError, AttributeError):
        os.chown(fresh, stood.st_uid, stood.st_gid)


def _is_broken(path: Path) -> bool:
    """Whether a store of ours that cannot be read stands there. Raises: StoreTrouble."""
    if path.is_dir():
        raise StoreTrouble(f"{path} is a folder, not a store.", "Name the file inside it.")
    with path.open("rb") as file:
        if file.read(16) != b"SQLite format 3\0":
            raise _left_alone(path)
    try:
        with closing(sqlite3.connect(path, timeout=BUSY_SECONDS)) as held:
            names = {row[0] for row in held.execute("SELECT name FROM sqlite_master")}
            sound = held.execute("PRAGMA quick_check(1)").fetchone() == ("ok",)
    except sqlite3.DatabaseError as error:
        if not error.sqlite_errorname.startswith(("SQLITE_CORRUPT", "SQLITE_NOTADB")):
            raise in_words(error, path) from error
        return True
    if not {"alembic_version", "entry", "house"} <= names:
        raise _left_alone(path)
    return not sound


def _left_alone(path: Path) -> StoreTrouble:
    return StoreTrouble(
        f"{foreign(path).message} It was left alone.", "Rename it to keep it, then restore again."
    )


def _bytes_aside(path: Path, name: str) -> Path:
    """A damaged store as it lies, with its journal: somebody may still read something out of it."""
    with free_place(path.parent, name) as (fresh, kept):
        shutil.copyfile(path, fresh)
        journal = Path(f"{path}-wal")
        if journal.exists():
            shutil.copyfile(journal, f"{kept}-wal")
        settle(fresh)
        fresh.rename(kept)
    # left there, it would be read as the journal of the backup
    clear(path, "-wal", "-shm")
    return kept


def _copy_aside(reader: Reader, path: Path, name: str) -> Path:
    with free_place(path.parent, name) as (fresh, kept):
        prove_copy_of(reader, _layout(reader), fresh)
        fresh.rename(kept)
    return kept


def _layout(reader: Reader) -> str:
    return str(reader.ask("SELECT version_num FROM alembic_version")[0][0])


@contextmanager
def _held_alone(path: Path) -> Iterator[Reader]:
    """The store with its journal written into it, and nobody else able to open it."""
    stood = mark_of(path)
    with translated(path), closing(_alone_with(path)) as held:
        # waited for behind another restore, this would be the file that lost its name
        if mark_of(path) != stood:
            raise StoreTrouble(
                f"A backup was put in the place of {path} a moment ago; it was left as it is.",
                "Look at the store, then restore again if it must be.",
            )
        try:
            yield Reader(held)
        except BaseException:
            # it stays where it is, so it gets back the journal in which readers stop nobody
            with suppress(sqlite3.Error):
                held.execute("PRAGMA locking_mode = NORMAL")
                held.execute("PRAGMA journal_mode = WAL")
            raise


def _alone_with(path: Path) -> sqlite3.Connection:
    held = sqlite3.connect(path, timeout=BUSY_SECONDS, isolation_level=None)
    try:
        # this mode has no second file beside the store, and can be had by one alone
        held.execute("PRAGMA locking_mode = EXCLUSIVE")
        held.execute("PRAGMA journal_mode = DELETE")
        # kept after the COMMIT, in this locking mode; an open one would stop the copying
        held.execute("BEGIN EXCLUSIVE")
        held.execute("COMMIT")
    except sqlite3.OperationalError as error:
        held.close()
        if error.sqlite_errorname.startswith(("SQLITE_BUSY", "SQLITE_LOCKED")):
            raise StoreTrouble(
                f"Somebody else has {path} open; it was left as it is.",
                "Close it everywhere, pages too, then restore again.",
            ) from error
        raise
    return held


def _spoil(held: sqlite3.Connection) -> None:
    """Make the replaced file refuse whoever opened it before, and has waited for it since.

    What they wrote would be saved in a file that no longer has a name.
    """
    held.execute("PRAGMA journal_mode = MEMORY")
    held.execute("UPDATE alembic_version SET version_num = ?", (REPLACED,))


def _newer(held: Reader, fresh: Path) -> Newer:
    with alone(fresh) as (reader, _):
        mine, theirs = columns_there(held), columns_there(reader)
        # one of them may be of an earlier layout: what both know is compared
        both = {table: _shared(names, theirs[table]) for table, names in mine.items()
                if table in theirs}  # fmt: skip
        ours, more = _only_ours(held, reader, both["entry"])
        before, after = contents(held, both), contents(reader, both)
        other = {table for table in both if before[table] != after[table]}
        other |= _alone_in(held, mine, theirs) | _alone_in(reader, theirs, mine)
    whose = Counter(by for by, _ in ours)
    return Newer(
        entries=len(ours),
        by=tuple(by for by, _ in whose.most_common()),
        last=max((date.fromisoformat(on) for _, on in ours), default=None),
        more=more,
        tables=tuple(sorted(other.difference(_OWN_NEWS))),
    )


def _shared(mine: tuple[str, ...], theirs: tuple[str, ...]) -> tuple[str, ...]:
    return tuple(name for name in mine if name in theirs)


def _alone_in(reader: Reader, mine: Columns, theirs: Columns) -> set[str]:
    """Tables with something written in them that the other layout has no table or column for."""
    found = set()
    for table, names in mine.items():
        more = [name for name in names if name not in theirs.get(table, ())]
        written = " OR ".join(f"\"{name}\" NOT IN ('', 0)" for name in more)
        # names out of the file's own book, and not typed by a person
        if more and reader.ask(f'SELECT 1 FROM "{table}" WHERE {written} LIMIT 1'):
            found.add(table)
    return found


# told by themselves, or following from what is; every backup is noted after it was made
_OWN_NEWS = ("entry", "kept_balance", "backup_made")


def _only_ours(
    held: Reader, other: Reader, columns: tuple[str, ...]
) -> tuple[list[tuple[str, str]], int]:
    """By whom and when each entry was entered that only the first has; how many only the other."""
    ours: list[tuple[str, str]] = []
    more = 0
    mine, theirs = _entries(held, columns), _entries(other, columns)
    left, right = next(mine, None), next(theirs, None)
    while left is not None or right is not None:
        first = right is None or (left is not None and left["id"] <= right["id"])
        second = left is None or (right is not None and right["id"] <= left["id"])
        same = first and second and tuple(left or ()) == tuple(right or ())
        if first and left is not None:
            ours += [] if same else [(left["by"], str(left["entered_on"]))]
            left = next(mine, None)
        if second:
            more += not same
            right = next(theirs, None)
    return ours, more


def _entries(reader: Reader, columns: tuple[str, ...]) -> Iterator[Row]:
    for rows in rows_in_pages(reader, "entry", columns):
        yield from rows
