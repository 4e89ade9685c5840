"""A backup put back: never without keeping what stood there, and saying what was newer in it."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom import clock
from stockroom.errors import NotAllowed, StoreTrouble
from stockroom.measure.days import spell_day
from stockroom.service.answers import Done
from stockroom.service.backup import FOLDER
from stockroom.settings import Server, StoreAt

if TYPE_CHECKING:
    from stockroom.store.putting_back import Newer, PutBack


def restore(path: StoreAt, copy: Path, *, named: bool, today: date | None = None) -> Done:
    """Put a backup in the place of the store at `path`, which is kept under a dated name.

    `named` says that somebody typed where: only then may a practice store take the place of a
    house, or a house that of a practice store. An older layout is brought up when it is opened.
    Raises: NotAllowed for that; StoreTrouble for a backup that is missing, damaged, foreign or
    newer, and for a store that somebody has open: then everything is as it was.
    """
    from stockroom.store.backup import told_as
    from stockroom.store.putting_back import put_back

    if isinstance(path, Server):
        raise StoreTrouble(
            f"{path} is kept by a server, and a backup is put back there, with pg_restore.",
            "docs/growing.md tells how.",
        )
    if path.exists() and copy.exists() and path.samefile(copy):
        raise NotAllowed(f"{copy} is the store itself.", "Name a backup of it.")
    if not copy.exists():
        usual = path.parent / FOLDER
        raise StoreTrouble(f"No backup at {copy}.", f"They stand in {usual} unless told otherwise.")
    practice = _is_practice(copy)
    if not named:
        _check_alike(path, copy, practice=practice)
    with told_as("Not restored", path.parent, "The store is as it was."):
        done = put_back(path, copy, f"{path.stem}-replaced-{today or clock.today()}")
    return Done(
        f"Restored {path} from {copy}: {done.proof.entries} entries.",
        next="stockroom plan",
        practice=practice,
        details=tuple(_told(done)),
    )


def _check_alike(path: Path, copy: Path, *, practice: bool) -> None:
    try:
        stands = _is_practice(path) if path.exists() else False
    except StoreTrouble:
        # a broken store cannot say which it is, and is the first to need a backup
        stands = practice
    if stands != practice:
        what = "the practice college" if practice else "a house of one's own"
        raise NotAllowed(
            f"{copy} is {what}, and {path} is not.", f"To mean it, name it: --store {path}"
        )


def _is_practice(path: Path) -> bool:
    from stockroom.store.reading import as_it_stands

    with as_it_stands(path) as (reader, _):
        return bool(reader.ask("SELECT 1 FROM house WHERE setting = 'practice' AND value = 'yes'"))


def _told(done: PutBack) -> Iterator[str]:
    yield "The copy now in use was compared with the backup, table by table: nothing differs."
    yield from done.proof.oddities
    if done.journal is not None:
        yield (
            f"Beside it lay the journal of a store that was moved away, kept as {done.journal}."
            " It may hold the last entries of that store: put it back beside it, under its name."
        )
    if done.kept is None:
        return
    yield f"What stood there is kept as {done.kept}."
    if done.newer is None:
        yield "It is damaged, and was kept as it lay: what was newer in it cannot be told."
    else:
        yield from _told_newer(done.newer)


def _told_newer(newer: Newer) -> Iterator[str]:
    if newer.entries and newer.last is not None:
        yield (
            f"It has {_entries(newer.entries)} that the backup has not, by {', '.join(newer.by)},"
            f" the last entered {spell_day(newer.last)}: look there for what is to be entered"
            " again."
        )
    if newer.more:
        parted = "; the two went different ways" if newer.entries else ""
        yield f"The backup has {_entries(newer.more)} that it has not{parted}."
    if newer.tables:
        yield f"Other tables that differ: {', '.join(newer.tables)}."
    if not (newer.entries or newer.more or newer.tables):
        yield "Nothing in it was newer than the backup."


def _entries(number: int) -> str:
    return "1 entry" if number == 1 else f"{number} entries"
