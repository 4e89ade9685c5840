"""Tables of plain text into a store: a whole folder of them, or one row.

Every fault of every file is found before anything is refused, and each says
file, row, column and value; then nothing at all is saved.
"""

from __future__ import annotations

import csv
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date
from functools import partial
from pathlib import Path
from typing import TypeVar

from stockroom.errors import BadInput, StockroomError
from stockroom.store import rows_bottles, rows_house, rows_lines, rows_recipes
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.likeness import plain, unknown
from stockroom.store.rows_bottles import Step

Value = TypeVar("Value")
Reader = Callable[[Desk, Fields], None]

_MOST_TOLD = 10
_SPILL = "cells beyond the heading"


@dataclass(frozen=True, slots=True)
class Table:
    """A table as typed: its columns, and what reads a row of it into the store."""

    columns: tuple[str, ...]
    read: Reader | None = None


def _table(columns: str, read: Reader | None = None) -> Table:
    return Table((*columns.split(), "source"), read)


# in the order they are read: each refers only to those above it
TABLES: dict[str, Table] = {
    "house": _table("setting value", rows_house.read_setting),
    "terms": _table("term from to", rows_house.read_term),
    "closures": _table("from to reason", rows_house.read_closure),
    "places": _table("place name temperature_c meant_for", rows_house.read_place),
    "departments": _table("department name left_gbp", rows_house.read_department),
    "balances": _table("balance step_g away_from away_to", rows_house.read_balance),
    "vessels": _table("vessel size_cm3", rows_house.read_vessel),
    "substances": _table(
        "substance other_names formula cas storage_group peroxide_former",
        rows_lines.read_substance,
    ),
    "lines": _table(
        "item strength substance form formula assay_percent density_g_cm3 level_g level_cm3"
        " level_items largest_batch_cm3 never_kept vented_cap keep_note measured_in",
        rows_lines.read_line,
    ),
    "keeping": _table(
        "line rule lasts counted_from purpose safety order rate rate_of rate_per at_c"
        " factor_per_10c stronger_than up_to_strength colder_than_c warmer_than_c",
        rows_lines.read_rule,
    ),
    "methods": _table(
        "line minutes finish_minutes stands_h titrated smallest_batch_cm3 steps cautions",
        rows_lines.read_method,
    ),
    "ingredients": _table(
        "line ingredient alternative role per_dm3_g per_dm3_cm3 per_dm3_items only_if_held",
        rows_lines.read_ingredient,
    ),
    "packs": _table(
        "line size_g size_cm3 size_items price_gbp lead_open_days supplier_ref",
        rows_lines.read_pack,
    ),
    "recipes": _table(
        "recipe version title never_kept waste handling assessment_ref", rows_recipes.read_recipe
    ),
    "recipe_lines": _table(
        "recipe version number line strength amount_cm3 amount_g amount_items per closeness"
        " tolerance_percent fresh freshest_days spare may_differ_percent found_within_days note",
        rows_recipes.read_requirement,
    ),
    "recipe_bars": _table("recipe version substance reason", rows_recipes.read_bar),
    "recipe_swaps": _table("recipe version line instead factor note", rows_recipes.read_swap),
    "bookings": _table(
        "booking recipe version on time groups spare_percent department firmness room",
        rows_recipes.read_booking,
    ),
    # the last two become ledger entries, written together in order of day
    "bottles": _table(
        "bottle line size_g size_cm3 size_items received made opened printed place left_g"
        " left_cm3 left_items left_on cap remark parents set_aside"
    ),
    "history": _table(
        "number happened entered by event bottle amount_g amount_cm3 amount_items strength"
        " passed place reason puts_right"
    ),
}


NAMED = ("substances", "lines", "places", "departments", "recipes", "bottles")
"""Tables whose rows others name."""


@dataclass(frozen=True, slots=True)
class TypedRow:
    """One row of a file: the table it is in, its row number there, and its cells."""

    table: str
    number: int
    fields: Fields


@dataclass
class Faults:
    """Every fault found so far, each with its place; `broken` names what could not be read."""

    told: list[str] = field(default_factory=list)
    broken: set[str] = field(default_factory=set)

    def attempt(self, row: TypedRow, read: Callable[[], Value]) -> Value | None:
        """What one step gives; None when it has a fault, which is kept instead of raised."""
        try:
            return read()
        except StockroomError as error:
            if not self._follows_from_another(row):
                self.told.append(f"{row.table}.csv row {row.number}{_placed(row.fields, error)}")
            if row.table in NAMED:
                self.broken |= {plain(name) for name in row.fields.names()}
            return None

    def _follows_from_another(self, row: TypedRow) -> bool:
        # a row nobody could read is told once, not again by each row that names it
        cells = [plain(cell) for cell in row.fields.cells()]
        begins = tuple(f"{name} " for name in self.broken)
        return any(cell in self.broken or cell.startswith(begins) for cell in cells)

    def stop_if_any(self, folder: Path) -> None:
        """Raises: BadInput listing the first ten, when there are any."""
        if not self.told:
            return
        count = len(self.told)
        shown = "\n  ".join(self.told[:_MOST_TOLD])
        more = f"\n  and {count - _MOST_TOLD} more" if count > _MOST_TOLD else ""
        faults = "1 fault" if count == 1 else f"{count} faults"
        raise BadInput(
            f"{faults} in the tables of {folder}; nothing was saved.\n  {shown}{more}\n",
            "Mend the rows and try again.",
        )


def _placed(fields: Fields, error: StockroomError) -> str:
    """The column and value a fault stood in, then the fault; a column is not named twice."""
    column = fields.column
    if not column or error.message.startswith(column):
        return f": {error}"
    return f', {column} "{fields.text(column)}": {error}'


def load_tables(desk: Desk, folder: Path) -> None:
    """Read every table of a folder into the store open on the desk.

    Files that are not there are empty tables; SOURCES.csv and README.md are not tables.

    Raises: BadInput listing the first ten faults with file, row, column and value.
    """
    faults = Faults()
    # read whole first, so that a broken file is told beside the others
    rows = {name: list(_rows(folder, name, faults)) for name in _files(folder)}
    for name, table in TABLES.items():
        for row in rows.get(name, ()):
            if table.read is not None:
                faults.attempt(row, partial(table.read, desk, row.fields))
    _tell_story(desk, rows.get("bottles", []), rows.get("history", []), faults)
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
        return
    reader = csv.DictReader(text.splitlines(keepends=True), restkey=_SPILL, strict=True)
    try:
        _check_columns(name, reader.fieldnames or [])
        for cells in reader:
            yield TypedRow(name, reader.line_num, Fields(_cells(name, reader.line_num, cells)))
    except (BadInput, csv.Error) as error:
        faults.told.append(f"{name}.csv: {error}")


def _cells(name: str, number: int, cells: Mapping[str, object]) -> dict[str, str]:
    more = _SPILL in cells
    if more or None in cells.values():
        raise BadInput(
            f"row {number} has {'more' if more else 'fewer'} cells than the heading of {name}.csv.",
            "Put text with a comma in it between double quotes.",
        )
    return {str(column): str(value) for column, value in cells.items()}


def _check_columns(table: str, columns: Iterable[str]) -> None:
    for column in columns:
        if column not in TABLES[table].columns:
            raise unknown(f"column of {table}", column, TABLES[table].columns)


def table_columns(table: str) -> list[str]:
    """The columns a table has. Raises: UnknownName with the nearest three tables."""
    if table not in TABLES:
        raise unknown("table", table, TABLES)
    return list(TABLES[table].columns)


def add_row(desk: Desk, table: str, values: dict[str, str]) -> None:
    """Read one row into a table, as `load_tables` would.

    Raises: UnknownName for an unknown table or column, and what the row's reader raises,
    with the column and value it stood in.
    """
    table_columns(table)
    _check_columns(table, values)
    fields = Fields(values)
    try:
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
    except StockroomError as error:
        placed = type(error)(error.message)
        raise type(error)(f"{table}{_placed(fields, placed)}", error.hint) from error
