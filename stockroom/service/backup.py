"""A backup: a dated copy of the store, proved before it counts, and noted in the store."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom import clock
from stockroom.errors import Refused, StoreTrouble
from stockroom.service.answers import Done
from stockroom.settings import Server, StoreAt

if TYPE_CHECKING:
    from stockroom.store.backup import Proof

FOLDER = "backups"
"""Beside the store, where no other folder is named."""

NOBODY = "backup"
"""Who made a backup that nobody signed: it may be made by the machine, every night."""


def backup(path: StoreAt, folder: Path | None, *, today: date, by: str) -> Done:
    """Copy the store into a folder under a dated name, prove the copy, and note it in the store.

    No copy is ever written over. Others may write to the store meanwhile.
    Raises: StoreTrouble, "Not backed up" and why: earlier copies are then as they were.
    """
    from stockroom.service.database import is_practice
    from stockroom.store.backup import copy_proved, free_place, settle, told_as

    if isinstance(path, Server):
        raise StoreTrouble(
            f"{path} is kept by a server, and is backed up there, with pg_dump.",
            "docs/growing.md tells how. stockroom hand-out works as with a file.",
        )
    place = folder or path.resolve().parent / FOLDER
    kept = "Nothing was left there, and earlier copies are as they were. Make room, or name another"
    with (
        told_as("Not backed up", place, f"{kept} folder."),
        free_place(place, f"{path.stem}-{today}") as (fresh, named),
    ):
        # an older store is brought up by this, after a copy of its own
        practice = is_practice(path)
        # whatever day is thought of as today, a house counts the age from when it was made
        noted = today if practice else clock.today()
        proof = copy_proved(path, fresh)
        fresh.rename(named)
        settle(named)
    return Done(
        f"Backed up to {named}.",
        practice=practice,
        details=(
            "Opened and compared with the store, table by table: nothing differs.",
            f"{proof.entries} entries; {proof.rows} rows in {len(proof.contents)} tables.",
            *proof.oddities,
            *_noted(path, named, proof, noted, by),
        ),
    )


def _noted(path: Path, named: Path, proof: Proof, today: date, by: str) -> tuple[str, ...]:
    """Note the backup in the store; a line where that cannot be done, which undoes nothing."""
    from stockroom.store.engine import writing
    from stockroom.store.tables import BackupMade

    try:
        with writing(path) as session:
            session.add(
                BackupMade(
                    place=str(named.resolve()),
                    entries=proof.entries,
                    digest=proof.digest,
                    entered_on=today,
                    entered_at=clock.now().isoformat(sep=" "),
                    by=by.strip() or NOBODY,
                )
            )
    except Refused as error:
        return (f"The backup is good, but the store could not note it: {error.message}",)
    return ()
