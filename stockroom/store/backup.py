"""A copy of a store that is proved before it gets its name.

Taken by SQLite's own online backup in one read moment, so that others may write meanwhile;
then opened by itself and compared with its source, table by table.
"""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Iterator
from contextlib import closing, contextmanager, suppress
from dataclasses import dataclass
from itertools import count
from pathlib import Path

from stockroom.errors import StockroomError, StoreTrouble
from stockroom.store.content import Columns, Content, columns_there, contents, digest_of
from stockroom.store.parts import hold, removed_after
from stockroom.store.reading import Reader, as_it_stands
from stockroom.store.trouble import translated


@dataclass(frozen=True, slots=True)
class Proof:
    """What a copy was proved to hold: its layout, the content of each table, and what is odd."""

    layout: str
    contents: dict[str, Content]
    # what is not as it should be, and is copied all the same: a backup must never wait for it
    oddities: tuple[str, ...] = ()

    @property
    def digest(self) -> str:
        """One digest of every table."""
        return digest_of(self.contents)

    @property
    def rows(self) -> int:
        """The rows of all tables."""
        return sum(each.rows for each in self.contents.values())

    @property
    def entries(self) -> int:
        """The entries of the ledger."""
        return self.contents["entry"].rows


@contextmanager
def free_place(folder: Path, name: str) -> Iterator[tuple[Path, Path]]:
    """A file to write into, and the free name it may be given once it is whole.

    `name` is without its ending; a number is put behind it where it is taken. What was not
    renamed by the end of the block is removed. Raises: OSError.
    """
    folder.mkdir(parents=True, exist_ok=True)
    place, held = _held_place(folder, name)
    fresh = _part(place)
    with removed_after(fresh, held):
        yield fresh, place


def copy_proved(path: Path, fresh: Path) -> Proof:
    """Copy the store at `path` into the file `fresh`, prove the copy, and give the proof.

    Raises: StoreTrouble where the two differ or the source is no sound store; what the driver
    and the system raise where `fresh` cannot be written.
    """
    with as_it_stands(path) as (reader, layout):
        return prove_copy_of(reader, layout, fresh)


def prove_copy_of(reader: Reader, layout: str, fresh: Path) -> Proof:
    """The same for a store that is open already. Raises: as `copy_proved`."""
    columns = columns_there(reader)
    try:
        with closing(sqlite3.connect(fresh, isolation_level=None)) as new:
            # the reader's own connection: what is compared below is of the very same moment
            reader.connection.backup(new)
    except sqlite3.Error as error:
        # what is torn is the source; whatever else is wrong is so with the place of the copy
        if _name(error).startswith(("SQLITE_CORRUPT", "SQLITE_NOTADB")):
            raise
        raise of_folder(error, fresh.parent) from error
    source = Proof(layout, contents(reader, columns), oddities(reader))
    _prove(fresh, source, columns)
    settle(fresh)
    return source


def _prove(copy: Path, source: Proof, columns: Columns) -> None:
    """Pass when the copy is a sound store with exactly that content. Raises: StoreTrouble."""
    with alone(copy) as (reader, layout):
        # a fault of the source comes along with its pages, so it is found here as well
        check_sound(reader, "its copy")
        if layout != source.layout or columns_there(reader) != columns:
            raise StoreTrouble(f"The copy {copy} has another layout than its source.", _AGAIN)
        found = contents(reader, columns)
    other = [table for table, content in source.contents.items() if found[table] != content]
    if other:
        raise StoreTrouble(f"The copy {copy} differs in {', '.join(other)}.", _AGAIN)


_AGAIN = "It was not kept. Try again, in another folder."


@contextmanager
def alone(copy: Path) -> Iterator[tuple[Reader, str]]:
    """A finished copy that nobody writes to, opened without making side files."""
    # what was copied keeps the journal mode of its source, and would be given a journal here
    address = f"{copy.resolve().as_uri()}?immutable=1"
    with (
        translated(copy),
        closing(sqlite3.connect(address, uri=True, isolation_level=None)) as held,
    ):
        reader = Reader(held)
        yield reader, str(reader.ask("SELECT version_num FROM alembic_version")[0][0])


def check_sound(reader: Reader, what: str) -> None:
    """Pass when every page is sound and no row points nowhere. Raises: StoreTrouble."""
    said = [str(row[0]) for row in reader.ask("PRAGMA integrity_check(3)")]
    if said != ["ok"]:
        raise StoreTrouble(f"{what} is damaged: {'; '.join(said)}.", _LAST_GOOD)
    if reader.ask("PRAGMA foreign_key_check"):
        raise StoreTrouble(f"{what} is damaged: rows point to rows that are not there.", _LAST_GOOD)


def oddities(reader: Reader) -> tuple[str, ...]:
    """What `stockroom verify` will find in the balances of a store, in whatever layout, in words.

    The ledger is what counts, and it is whole: so none of this stops a backup.
    """
    sums = reader.pairs("SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id")
    numbers = reader.pairs("SELECT id, number FROM bottle ORDER BY id")
    said = []
    below = [numbers[bottle] for bottle in numbers if sums.get(bottle, 0) < 0]
    if below:
        said.append(f"By their entries {_named(below)} less than nothing: stockroom count.")
    if reader.ask("SELECT 1 FROM sqlite_master WHERE name = 'kept_balance'"):
        kept = reader.pairs("SELECT bottle_id, held FROM kept_balance")
        off = [numbers[one] for one in numbers if kept.get(one, 0) != sums.get(one, 0)]
        if off:
            said.append(
                f"What is kept beside the entries of {', '.join(off[:MOST_NAMED])}"
                f"{' and more' if len(off) > MOST_NAMED else ''} is not what they come to:"
                " stockroom verify --afresh."
            )
    return tuple(said)


MOST_NAMED = 5
"""Bottles named in one line; of more it is said that there are. Our choice."""


def _named(numbers: list[str]) -> str:
    more = " and more" if len(numbers) > MOST_NAMED else ""
    return f"{', '.join(numbers[:MOST_NAMED])}{more} {'hold' if numbers[1:] else 'holds'}"


_LAST_GOOD = "Use the last good copy instead: stockroom restore FILE."


def settle(path: Path) -> None:
    """See that a file and its name are on the disc."""
    for each in (path, path.parent):
        # a folder cannot be opened like this everywhere; then the system sees to it by itself
        with suppress(OSError):
            opened = os.open(each, os.O_RDONLY)
            try:
                os.fsync(opened)
            finally:
                os.close(opened)


def of_folder(error: sqlite3.Error, folder: Path) -> StoreTrouble:
    """What the driver says of a file it could not write, as trouble of the folder it is in."""
    if _name(error) == "SQLITE_FULL":
        return StoreTrouble(f"The disc that holds {folder} is full.", _ELSEWHERE)
    return StoreTrouble(f"{folder} cannot be written ({error}).", _ELSEWHERE)


_ELSEWHERE = "Make room, or name another folder."


def _name(error: sqlite3.Error) -> str:
    return str(getattr(error, "sqlite_errorname", ""))


@contextmanager
def told_as(what: str, folder: Path, hint: str) -> Iterator[None]:
    """Whatever fails in the block as StoreTrouble that begins with `what`: "Not backed up"."""
    try:
        yield
    except StockroomError as error:
        raise StoreTrouble(f"{what}: {error.message}", error.hint) from error
    except sqlite3.Error as error:
        # the source's own errors come as ours, so this one is of the folder
        told = of_folder(error, folder)
        raise StoreTrouble(f"{what}: {told.message}", hint) from error
    except OSError as error:
        said = f"{folder} cannot be written ({error.strerror or error})."
        raise StoreTrouble(f"{what}: {said}", hint) from error


def _held_place(folder: Path, name: str) -> tuple[Path, int]:
    for number in count(1):
        place = folder / f"{name}{'' if number == 1 else f'-{number}'}.sqlite"
        # made and not asked for: another backup may be looking for a name right now
        held = hold(_part(place))
        if held is None:
            continue
        if not place.exists():
            return place, held
        with removed_after(_part(place), held):
            pass
    raise AssertionError("numbers do not end")


def _part(place: Path) -> Path:
    return Path(f"{place}.part")
