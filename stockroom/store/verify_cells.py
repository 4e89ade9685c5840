"""Cells of another sort than their column holds: asked first, since no sum holds with them.

A server refuses them by itself; a file of SQLite takes any cell from any program.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from stockroom.findings import Fault
from stockroom.measure.amounts import Kind
from stockroom.store.columns import COLUMNS
from stockroom.store.reading import Reader
from stockroom.store.verify_file import RESTORE, on_file
from stockroom.store.verify_replay import AFRESH, MOST, few

# an empty text stands behind every number in the order of SQLite, and an empty blob behind every
# text: comparing costs a tenth of asking for the type of each cell
_ODD = {
    "VARCHAR": "{0} >= x''",
    "TEXT": "{0} >= x''",
    "DATE": "{0} < '' OR {0} >= x'' OR date({0}) <> {0} OR date({0}) IS NULL AND {0} <> ''",
    "INTEGER": "{0} >= ''",
    "BIGINT": "{0} >= '' OR {0} <> CAST({0} AS INTEGER)",
    "BOOLEAN": "{0} NOT IN (0, 1)",
    "FLOAT": "{0} >= ''",
}
_DAYS_OF_ENTRIES = "{0} < '' OR {0} >= x''"
"""Whether it is a day at all, and the kind one of ours, is seen where the ledger is read."""


def cells(reader: Reader) -> list[Fault]:
    """Cells nobody can read, and words the program does not know, by table and row."""
    found = [*_strange(reader), *_unknown(reader)]
    return few(found, "cells")


def _strange(reader: Reader) -> Iterator[Fault]:
    if not on_file(reader):
        return
    for table in COLUMNS:
        kinds = reader.pairs("SELECT name, type FROM pragma_table_info(?) ORDER BY cid", table)
        odd = {name: _odd(table, name, str(kind)) for name, kind in kinds.items()}
        asked = {name: f"({words})" for name, words in odd.items() if words}
        # names out of the file's own book, and not typed by a person
        key, which = COLUMNS[table][0], " OR ".join(asked.values())
        told = ", ".join(f"COALESCE({words}, 0)" for words in asked.values())
        rows = reader.ask(f'SELECT "{key}", {told} FROM {table} WHERE {which} LIMIT {MOST + 1}')
        for row in rows:
            names = [name for name, bad in zip(asked, tuple(row)[1:], strict=True) if bad]
            text = f"{key} {row[0]!r} holds in {', '.join(names)} what is not of its column"
            yield Fault(table, text, "cells", AFRESH if table == "kept_balance" else RESTORE)


def _odd(table: str, name: str, kind: str) -> str:
    sort = kind.split("(")[0].upper()
    words = _DAYS_OF_ENTRIES if (table, sort) == ("entry", "DATE") else _ODD.get(sort, "")
    return words.format(f'"{name}"')


def _unknown(reader: Reader) -> Iterator[Fault]:
    yield from _words(reader, "line", "kind", Kind)
    # a space stands before every letter and digit: only such a row is looked at twice
    for row in reader.ask(f"SELECT id FROM entry WHERE \"by\" < '!' AND TRIM(\"by\") = '' {_FEW}"):
        yield Fault("entry", f"entry {row[0]} says nobody entered it", "cells", RESTORE)


def _words(reader: Reader, table: str, column: str, known: Iterable[str]) -> Iterator[Fault]:
    words = [str(word) for word in known]
    marks = ", ".join("?" * len(words))
    asked = f"SELECT id, {column} FROM {table} WHERE {column} NOT IN ({marks}) {_FEW}"
    for row in reader.ask(asked, *words):
        text = f"{table} {row[0]} is of the {column} {row[1]!r}, which nobody knows here"
        yield Fault(table, text, "cells", RESTORE)


_FEW = f"ORDER BY id LIMIT {MOST + 1}"
