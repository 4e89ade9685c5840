"""The faults of a folder of tables: gathered, causes before consequences, told in one go."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path
from typing import TypeVar

from stockroom.errors import BadInput, StockroomError
from stockroom.store.fields import Fields
from stockroom.store.layout import NAMED
from stockroom.store.likeness import plain

Value = TypeVar("Value")

_MOST_TOLD = 10


@dataclass(frozen=True, slots=True)
class TypedRow:
    """One row of a file: the table it is in, its row number there, and its cells."""

    table: str
    number: int
    fields: Fields


@dataclass
class Faults:
    """Every fault found so far, each with its place.

    `broken` names the rows that could not be read; `unread` the tables that are
    missing, empty or not readable to their end, each with how many rows of other
    tables name something that would stand in it.
    """

    told: list[str] = field(default_factory=list)
    broken: set[str] = field(default_factory=set)
    unread: dict[str, int] = field(default_factory=dict)

    def attempt(self, row: TypedRow, read: Callable[[], Value]) -> Value | None:
        """What one step gives; None when it has a fault, which is kept instead of raised."""
        try:
            return read()
        except StockroomError as error:
            if not (self._follows_from_a_table(error) or self._follows_from_another(row)):
                self.told.append(f"{row.table}.csv row {row.number}{_placed(row.fields, error)}")
            if row.table in NAMED:
                self.broken |= {plain(name) for name in row.fields.names()}
            return None

    def _follows_from_another(self, row: TypedRow) -> bool:
        # a row nobody could read is told once, not again by each row that names it
        cells = [plain(cell) for cell in row.fields.cells()]
        begins = tuple(f"{name} " for name in self.broken)
        return any(cell in self.broken or cell.startswith(begins) for cell in cells)

    def _follows_from_a_table(self, error: StockroomError) -> bool:
        # thirty rows that name no stock line say less than the one file that holds none
        for table in self.unread:
            if error.message.startswith(f'No {NAMED.get(table, table)} "'):
                self.unread[table] += 1
                return True
        return False

    def name_causes(self, rows: Mapping[str, Sequence[TypedRow]]) -> None:
        """Put the tables that are missing or empty, and were wanted, before all other faults."""
        causes = [
            f"{table}.csv {'is empty' if table in rows else 'is missing'}:"
            f" {count} {'row' if count == 1 else 'rows'} of other tables"
            f" name{'s' if count == 1 else ''} a {NAMED[table]}."
            for table, count in self.unread.items()
            if count and not rows.get(table) and not self._told_of(table)
        ]
        self.told = causes + self.told

    def _told_of(self, table: str) -> bool:
        return any(told.startswith(f"{table}.csv:") for told in self.told)

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


@contextmanager
def told_with_place(table: str, fields: Fields) -> Iterator[None]:
    """Give an error raised inside the block its table, column and value. Raises: StockroomError."""
    try:
        yield
    except StockroomError as error:
        # the hint is told apart, so it must not stand in the message as well
        bare = type(error)(error.message)
        raise type(error)(f"{table}{_placed(fields, bare)}", error.hint) from error
