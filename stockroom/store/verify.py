"""Prove a store: the ledger read once from its first entry, and everything else held against it.

Nothing is written, and nothing older is brought up to date. `verify_replay.py` reads the
ledger, `verify_rows.py` asks about bottles, parents and references, `verify_cells.py` about
single cells, `verify_file.py` about
the file and its triggers, `verify_server.py` about a server's.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Callable, Iterable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass

from stockroom.findings import Fault
from stockroom.settings import Server, StoreAt
from stockroom.store.reading import Reader, as_it_stands
from stockroom.store.trouble import REVISIONS
from stockroom.store.verify_cells import cells
from stockroom.store.verify_file import damaged, guards_gone, orphans, shape
from stockroom.store.verify_replay import Replay, replayed
from stockroom.store.verify_rows import CHECKS
from stockroom.store.verify_shelf import conditions


@dataclass(frozen=True, slots=True)
class Proved:
    """What was looked at and what was found; no faults and the store holds together."""

    bottles: int
    entries: int
    faults: tuple[Fault, ...]
    quick: bool = False
    practice: bool = False


def verify(path: StoreAt, *, quick: bool = False) -> Proved:
    """Every fault of the store at `path`; `quick` leaves out the engine's own look at the file.

    Raises: StoreTrouble when it is missing, no store at all, or too new to be judged.
    """
    with _standing(path) as (reader, revision):
        # what is not of this layout cannot be asked in its words
        found = [*_older(revision), *shape(reader)] if revision == REVISIONS[-1] else []
        faults = found or _older(revision)
        whole = not faults
        faults += _safely(lambda: guards_gone(reader)) if whole else []
        faults += _safely(lambda: _ledger(reader)) if whole else []
        faults += [] if quick else _safely(lambda: damaged(reader))
        return Proved(
            _count(reader, "bottle"),
            _count(reader, "entry"),
            tuple(faults),
            quick,
            _practice(reader),
        )


@contextmanager
def _standing(path: StoreAt) -> Iterator[tuple[Reader, str]]:
    if isinstance(path, Server):
        from stockroom.store import server

        # an address of a server is only ever opened in the newest layout
        with server.reading(path) as reader:
            yield reader, REVISIONS[-1]
        return
    with as_it_stands(path) as (reader, revision):
        yield reader, revision


def _older(revision: str) -> list[Fault]:
    if revision == REVISIONS[-1]:
        return []
    return [
        Fault(
            "store",
            f"in the layout of an earlier version ({revision}, now {REVISIONS[-1]})",
            "layout",
            "Any other command brings it up, after putting a copy beside it: stockroom past.",
        )
    ]


def _ledger(reader: Reader) -> list[Fault]:
    # nothing can be added up where a number is none
    if odd := cells(reader):
        return odd
    adrift = orphans(reader)
    story: Replay = replayed(reader)
    faults = [*adrift, *story.faults]
    for check in CHECKS:
        faults += check(reader, story)
    # the reading half leans on every row that is pointed to, and on every word
    if adrift or any(fault.check == "cells" for fault in faults):
        return faults
    known = {fault.subject for fault in faults}
    # of a bottle whose entries disagree already nothing new would be said
    return [*faults, *(one for one in conditions(reader, story) if one.subject not in known)]


def _safely(check: Callable[[], Iterable[Fault]]) -> list[Fault]:
    try:
        return list(check())
    # whatever is stumbled over is a finding: proving a broken store must not break itself
    except (sqlite3.DatabaseError, ArithmeticError, LookupError, TypeError, ValueError) as error:
        return [
            Fault(
                "store",
                f"cannot be read to its end: {error}",
                "damage",
                "Put the last good copy back: stockroom restore FILE.",
            )
        ]


def _count(reader: Reader, table: str) -> int:
    try:
        return int(reader.ask(f"SELECT COUNT(*) FROM {table}")[0][0])
    # missing or torn: that is a finding already
    except sqlite3.DatabaseError:
        return 0


def _practice(reader: Reader) -> bool:
    try:
        rows = reader.ask("SELECT value FROM house WHERE setting = 'practice'")
    except sqlite3.DatabaseError:
        return False
    return bool(rows) and rows[0][0] == "yes"
