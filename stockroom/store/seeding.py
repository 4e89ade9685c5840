"""Tables of plain text into a store: a whole folder of them, or one row.

Every fault of every file is found before anything is refused, and each says
file, row, column and value; then nothing at all is saved.
"""

from __future__ import annotations

import csv
from collections.abc import Iterator, Mapping
from datetime import date
from functools import partial
from pathlib import Path

from stockroom.errors import BadInput
from stockroom.store import rows_bottles
from stockroom.store.desk import Desk
from stockroom.store.faults import Faults, TypedRow, told_with_place
from stockroom.store.fields import Fields
from stockroom.store.layout import NAMED, TABLES, check_columns, table_columns
from stockroom.store.likeness import unknown
from stockroom.store.rows_bottles import Step

_SPILL = "cells beyond the heading"


def load_tables(desk: Desk, folder: Path) -> None:
    """Read every table of a folder into the store open on the desk.

    Files that are not there are empty tables; SOURCES.csv and README.md are not tables.

    Raises: BadInput listing the first ten faults with file, row, column and value.
    """
    faults = Faults()
    # read whole first, so that a broken file is told beside the others
    rows = {name: list(_rows(folder, name, faults)) for name in _files(folder)}
    faults.unread |= {name: 0 for name in NAMED if not rows.get(name)}
    for name, table in TABLES.items():
        for row in rows.get(name, ()):
            if table.read is not None:
                faults.attempt(row, partial(table.read, desk, row.fields))
    _tell_story(desk, rows.get("bottles", []), rows.get("history", []), faults)
    faults.name_causes(rows)
    faults.stop_if_any(folder)


def _tell_story(
    desk: Desk, bottles: list[TypedRow], history: list[TypedRow], faults: Faults
) -> None:
    seen = _first_seen(history)
    steps: list[tuple[Step, TypedRow]] = []
    for row in bottles:
        day = seen.get(row.fields.text("bottle"))
        told = faults.attempt(row, partial(rows_bottles.read_bottle, desk, row.fields, day))
        steps += [(step, row) for step in told or ()]
    # after all bottles: a parent may stand further down the file
    for row in bottles:
        faults.attempt(row, partial(rows_bottles.read_parents, desk, row.fields))
    for row in history:
        happened = faults.attempt(row, partial(rows_bottles.read_history, desk, row.fields))
        steps += [(happened, row)] if happened else []
    # sorting is stable, so within a day and a rank the order of the files holds
    for step, row in sorted(steps, key=lambda told: (told[0].on, told[0].rank)):
        faults.attempt(row, step.write)


def _first_seen(history: list[TypedRow]) -> dict[str, date]:
    seen: dict[str, date] = {}
    for row in history:
        try:
            happened = row.fields.need_day("happened")
        except BadInput:
            # told in its turn, when the row itself is read
            continue
        bottle = row.fields.text("bottle")
        seen[bottle] = min(happened, seen.get(bottle, happened))
    return seen


def _files(folder: Path) -> list[str]:
    if not folder.is_dir():
        raise BadInput(
            f"{folder} is not a folder of tables.", "Name the folder with the CSV files."
        )
    names = sorted(path.stem for path in folder.glob("*.csv") if path.stem != "SOURCES")
    if not names:
        raise BadInput(f"{folder} holds no CSV file.", f"Tables are: {', '.join(TABLES)}.")
    for name in names:
        if name not in TABLES:
            raise unknown("table", name, TABLES)
    return names


def _rows(folder: Path, name: str, faults: Faults) -> Iterator[TypedRow]:
    path = folder / f"{name}.csv"
    try:
        # spreadsheets put a byte-order mark in front of UTF-8; utf-8-sig takes it off
        text = path.read_text(encoding="utf-8-sig")
    except UnicodeDecodeError as error:
        faults.told.append(f"{name}.csv: not UTF-8 (byte {error.start}). Save it as CSV UTF-8.")
        faults.unread[name] = 0
        return
    reader = csv.DictReader(text.splitlines(keepends=True), restkey=_SPILL, strict=True)
    try:
        check_columns(name, reader.fieldnames or [])
        for cells in reader:
            yield TypedRow(name, reader.line_num, Fields(_cells(name, reader.line_num, cells)))
    except (BadInput, csv.Error) as error:
        faults.told.append(f"{name}.csv: {error}")
        faults.unread[name] = 0


def _cells(name: str, number: int, cells: Mapping[str, object]) -> dict[str, str]:
    more = _SPILL in cells
    if more or None in cells.values():
        raise BadInput(
            f"row {number} has {'more' if more else 'fewer'} cells than the heading of {name}.csv.",
            "Put text with a comma in it between double quotes.",
        )
    return {str(column): str(value) for column, value in cells.items()}


def add_row(desk: Desk, table: str, values: dict[str, str]) -> None:
    """Read one row into a table, as `load_tables` would.

    Raises: UnknownName for an unknown table or column, and what the row's reader raises,
    with the column and value it stood in.
    """
    table_columns(table)
    check_columns(table, values)
    fields = Fields(values)
    with told_with_place(table, fields):
        read = TABLES[table].read
        if read is not None:
            read(desk, fields)
        elif table == "bottles":
            steps = rows_bottles.read_bottle(desk, fields)
            rows_bottles.read_parents(desk, fields)
            for step in sorted(steps, key=lambda step: (step.on, step.rank)):
                step.write()
        else:
            rows_bottles.read_history(desk, fields).write()
