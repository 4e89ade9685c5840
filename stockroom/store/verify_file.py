"""What an engine knows of a store: its tables, its triggers, what points nowhere, its pages.

Here for a file of SQLite; `verify_server.py` asks a server the same four things.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Iterable, Iterator

from stockroom.findings import Fault
from stockroom.store.columns import COLUMNS
from stockroom.store.guard_marks import GUARDS, mark
from stockroom.store.reading import Reader
from stockroom.store.verify_replay import MOST, few

RESTORE = "Put the last good copy back: stockroom restore FILE."

Trigger = tuple[str, str, str]
"""The name of a trigger, its table, and its text."""


def on_file(reader: Reader) -> bool:
    """Whether the reader is on a file of SQLite, and not on a server."""
    return isinstance(reader.connection, sqlite3.Connection)


def shape(reader: Reader) -> list[Fault]:
    """Tables and columns that are not there."""
    if not on_file(reader):
        from stockroom.store import verify_server

        held = verify_server.columns(reader)
    else:
        held = {
            table: {row[0] for row in reader.ask("SELECT name FROM pragma_table_info(?)", table)}
            for table in COLUMNS
        }
    return list(_missing(held))


def _missing(held: dict[str, set[str]]) -> Iterator[Fault]:
    for table, names in COLUMNS.items():
        if not held.get(table):
            yield Fault(table, "table is not there", "layout", RESTORE)
            continue
        for name in names:
            if name not in held[table]:
                yield Fault(table, f"has no column {name}", "layout", RESTORE)


def guards_gone(reader: Reader) -> list[Fault]:
    """Triggers that are missing, worded otherwise, or of nobody's here."""
    if on_file(reader):
        found: Iterable[Trigger] = (
            (row[0], row[1], row[2])
            for row in reader.ask(
                "SELECT name, tbl_name, sql FROM sqlite_master WHERE type = ?", "trigger"
            )
        )
        return list(_unlike(found, 0))
    from stockroom.store import verify_server

    return list(_unlike(verify_server.triggers(reader), 1))


def _unlike(found: Iterable[Trigger], engine: int) -> Iterator[Fault]:
    held = {name: (table, mark(text)) for name, table, text in found}
    # some are there for one engine alone, and have no mark for the other
    wanted = {name: (table, marks[engine]) for name, (table, *marks) in GUARDS.items()}
    wanted = {name: each for name, each in sorted(wanted.items()) if each[1]}
    for name, (table, words) in wanted.items():
        if name not in held:
            text = f"has lost the trigger {name}, which keeps it as it was written"
            yield Fault(table, text, "guards", _REBUILT)
        elif held[name] != (table, words):
            yield Fault(table, f"has a trigger {name} of other words", "guards", _REBUILT)
    for name in sorted(held.keys() - wanted.keys()):
        text = f"has a trigger {name} that this program did not make"
        yield Fault(held[name][0], text, "guards", _REBUILT)


_REBUILT = (
    "Somebody opened the store with another program. Look at the other findings first, then:"
    " stockroom hand-out DIR, and new --from DIR makes one whose triggers are right."
)


def orphans(reader: Reader) -> list[Fault]:
    """Rows that point to a row that is not there."""
    faults = [
        Fault(table, f"row {number} points to a {parent} that is not there", "orphans", RESTORE)
        for table, number, parent in _adrift(reader)
    ]
    return few(faults, "orphans")


def _adrift(reader: Reader) -> Iterator[tuple[str, int, str]]:
    if not on_file(reader):
        from stockroom.store import verify_server

        yield from verify_server.adrift(reader)
        return
    for row in reader.ask("PRAGMA foreign_key_check"):
        yield str(row[0]), int(row[1]), str(row[2])


def damaged(reader: Reader) -> list[Fault]:
    """What SQLite finds torn in its own file; a server looks after its files itself."""
    if not on_file(reader):
        return []
    rows = [str(row[0]) for row in reader.ask(f"PRAGMA integrity_check({MOST})")]
    return [Fault("store", said, "damage", RESTORE) for said in rows if said != "ok"]
