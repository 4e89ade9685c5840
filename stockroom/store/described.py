"""The tables in words, for whoever opens a handed-out folder without this program."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from inspect import cleandoc
from textwrap import wrap

from sqlalchemy import Table
from sqlmodel import SQLModel

from stockroom.store import tables
from stockroom.store.columns import KEPT_BESIDE
from stockroom.store.content import Content
from stockroom.store.described_columns import ANYWHERE, IN_TABLE

KINDS = {
    "AutoString": "text",
    "Integer": "whole",
    "BigInteger": "whole",
    "Float": "number",
    "Date": "day",
    "Boolean": "flag",
}
"""The kind of a column by the type it has in the tables."""

WIDE = 100
"""The longest line of README.txt. Our choice."""

_INTRODUCTION = """\
EVERYTHING OF A PREP ROOM, HANDED OUT

house.txt       the house, its shelves, recipes, bookings and ledger, to read as they are
tables/         every table in full, as CSV: see below
manifest.json   the tables in order, how many rows each has, and a digest of each

Nothing here needs the program that wrote it. With it, this builds the same store again:

    stockroom new --from THIS FOLDER

All files are UTF-8. The tables are CSV by RFC 4180: a comma between cells, double quotes round a
cell that needs them, the names of the columns first. A spreadsheet may take a text for a formula or
a number for a date: have it take every column as text. The kinds of column:

    text      as it was typed; blank where nothing was
    whole     a whole number, in full; blank where it is not known
    number    a decimal fraction, in full; blank where it is not known
    day       year-month-day; blank where it is not known
    flag      1 for yes, 0 for no; blank where it is not known

What a bottle holds is the sum of the changes of its entries. An entry that puts another right
cancels it: both are kept. A line's strengths are in the unit its row of line names. 1 g is
1 000 000 µg, and 1 cm3 is 1 000 µL.
"""


def tables_in_order() -> list[Table]:
    """The tables that are handed on, each after those it points to."""
    assert tables.Entry.__tablename__ == "entry"
    return [table for table in SQLModel.metadata.sorted_tables if table.name not in KEPT_BESIDE]


def kinds_of(table: Table) -> dict[str, str]:
    """The kind of each column of a table, by its name."""
    return {column.name: KINDS[type(column.type).__name__] for column in table.columns}


def folder_readme(found: Mapping[str, Content]) -> str:
    """What stands in README.txt of a handed-out folder: each file, column and unit."""
    about = {str(each.__tablename__): cleandoc(each.__doc__ or "") for each in _classes()}
    parts = [_INTRODUCTION]
    for table in tables_in_order():
        rows = found[table.name].rows
        told = [f"tables/{table.name}.csv, {rows} row{'' if rows == 1 else 's'}"]
        told += _wrapped("    ", " ".join(about[table.name].split()))
        parts.append("\n".join([*told, *_columns(table)]) + "\n")
    return "\n".join(parts)


def meaning(table: Table, column: str) -> str:
    """What a column holds, its unit in the words. Raises: KeyError for one nobody described."""
    own = IN_TABLE.get(table.name, {})
    if column in own:
        return own[column]
    for pointer in table.columns[column].foreign_keys:
        return f"id of a row of {pointer.column.table.name}"
    return ANYWHERE[column]


def _columns(table: Table) -> Iterator[str]:
    kinds = kinds_of(table)
    wide = max(len(name) for name in kinds)
    for name, kind in kinds.items():
        yield from _wrapped(f"      {name:{wide}}  {kind:6}  ", meaning(table, name))


def _wrapped(front: str, text: str) -> list[str]:
    return wrap(text, WIDE, initial_indent=front, subsequent_indent=" " * len(front))


def _classes() -> list[type[SQLModel]]:
    return [getattr(tables, name) for name in tables.__all__]
