"""The store as a whole: made, filled from tables, asked what day it stands on."""

from __future__ import annotations

import itertools
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom import clock
from stockroom.errors import BadInput, NotAllowed, StoreTrouble
from stockroom.service.answers import Done
from stockroom.settings import StoreAt
from stockroom.store import reading, sources

if TYPE_CHECKING:
    from stockroom.store.desk import Desk
    from stockroom.store.engine import Session

HOUSE = "house"
"""Who stands in the ledger for rows that came in with a folder of tables."""


def seeds_folder() -> Path:
    """Where the tables that travel with the program are: inside it, else beside it."""
    return sources.seeds_folder()


def make_practice(path: Path) -> Path | None:
    """Make the invented college at `path`; an earlier practice store there is renamed.

    Gives the earlier one's new place, None when there was none.
    Raises: StoreTrouble when what stands there is a house of one's own.
    """
    kept = _put_by(path) if path.exists() else None
    new_store(path, tables=seeds_folder() / "college")
    return kept


def _put_by(path: Path) -> Path:
    if not is_practice(path):
        raise StoreTrouble(
            f"{path} is a house of one's own, not a practice store; it was left alone.",
            "Give the practice store another place with --store PATH.",
        )
    try:
        # kept: somebody may have tried things in it worth looking at again
        kept = _free_place(path)
        # the journal goes along, and first: it may hold entries the file does not have yet
        for end in ("-wal", ""):
            if Path(f"{path}{end}").exists():
                Path(f"{path}{end}").replace(f"{kept}{end}")
        Path(f"{path}-shm").unlink(missing_ok=True)
    except OSError as error:
        raise StoreTrouble(
            f"{path} cannot be put by: {error.strerror}.", "Choose another --store PATH."
        ) from error
    return kept


def _free_place(path: Path) -> Path:
    """A name beside `path` that nothing has yet, held by an empty file."""
    later = (f".old-{count}.sqlite" for count in itertools.count(2))
    places = map(path.with_suffix, itertools.chain([".old.sqlite"], later))
    return next(place for place in places if _held(place))


def _held(place: Path) -> bool:
    # another store's journal would be read as this one's
    if Path(f"{place}-wal").exists():
        return False
    try:
        # made and not asked for: between the question and the move somebody may take it
        place.touch(exist_ok=False)
    except FileExistsError:
        return False
    return True


def starter_folder() -> Path:
    """The tables of the starter house: common substances and stock lines, and how they keep."""
    return seeds_folder() / "starter"


def new_store(path: StoreAt, *, tables: Path | None = None) -> Done:
    """Make a store at `path`, empty or from a folder: of tables as typed, or as handed out.

    Raises: StoreTrouble when something is there already, or what was handed out is damaged;
    BadInput listing the faults of the tables, and then no store is left behind.
    """
    from stockroom.service.hand_out import handed_back
    from stockroom.store.engine import create
    from stockroom.store.manifest import is_handed_out
    from stockroom.store.seeding import load_tables

    def fill(session: Session) -> None:
        if tables is not None:
            # what came with the program is a starter value until the house says otherwise
            ours = tables.resolve().parent == seeds_folder().resolve()
            load_tables(replace(_desk(session, HOUSE), starter=ours), tables)
            _check_methods(session)

    if tables is not None and is_handed_out(tables):
        return handed_back(path, tables)
    create(path, fill=fill)
    if tables == starter_folder():
        return _started(path)
    filled = f" from the tables in {tables}" if tables else ""
    following = "stockroom plan" if tables else "stockroom add lines item=… form=solid"
    return Done(f"Made {path}{filled}.", next=following, practice=is_practice(path))


def _started(path: StoreAt) -> Done:
    with reading.reading(path) as reader:
        counted = "SELECT (SELECT COUNT(*) FROM substance), (SELECT COUNT(*) FROM line)"
        substances, lines = reader.ask(counted)[0]
    return Done(
        f"Made {path} with the starter house: {substances} substances, {lines} stock lines.",
        next="stockroom add terms term=… from=… to=…",
        details=("No bottles yet. Every life is a starter value until the house says otherwise.",),
    )


def add_row(
    path: StoreAt,
    table: str,
    values: dict[str, str],
    *,
    by: str,
    why: str = "",
    today: date | None = None,
) -> Done:
    """Add one row to a table, its cells given by column name.

    With a reason, it stays on record who added it, when and why; a setting of the house
    with what it was before. Raises: UnknownName for a table or column that is not there;
    BadInput naming the column.
    """
    from stockroom.store import seeding
    from stockroom.store.engine import reader_in, writing
    from stockroom.store.snapshot import calendar_of

    with writing(path) as session:
        desk = _desk(session, by)
        desk = replace(desk, today=today or desk.today)
        before = _setting(reader_in(session), table, values)
        seeding.add_row(desk, table, values)
        if table in _MAKES_METHODS:
            _check_methods(session)
        if table == "house":
            # one new hour beside the usual other one can run backwards, and stop every plan
            calendar_of(reader_in(session))
        if why.strip():
            _note_added(desk, table, values, before, why.strip())
    # the first cell names the row in every table, so it is enough to tell it by
    first = next(iter(values.values()), "")
    return Done(f"Added to {table}: {first}.", practice=is_practice(path))


def _setting(reader: reading.Reader, table: str, values: dict[str, str]) -> str:
    """What a setting of the house is now; "" for none, and for a row of another table."""
    if table != "house":
        return ""
    rows = reader.rows("house", "WHERE setting = ?", values.get("setting", "").strip())
    return str(rows[0]["value"]) if rows else ""


def _note_added(desk: Desk, table: str, values: dict[str, str], before: str, why: str) -> None:
    from stockroom.store.changing import record_change

    first, *rest = ((column, cell.strip()) for column, cell in values.items() if cell.strip())
    said = ", ".join(f"{column} {cell}" for column, cell in rest)
    column, after = ("value", values.get("value", "")) if table == "house" else ("added", said)
    record_change(desk, table, first[1], column, (before, after.strip() or first[1]), why)


def change_row(
    path: StoreAt, table: str, key: str, values: dict[str, str], *, why: str, today: date, by: str
) -> Done:
    """Correct a row of a table, its new cells given by column name; the old ones stay on record.

    Raises: UnknownName for a table, row or column that is not there; NotAllowed for a
    column that earlier entries lean on; BadInput without a reason or initials.
    """
    from stockroom.service.work import initials
    from stockroom.store.changing import change_row as change
    from stockroom.store.engine import writing

    with writing(path) as session:
        desk = replace(_desk(session, initials(by)), today=today)
        changes = change(desk, table, key, values, why)
    return Done(f"Changed {'; '.join(changes)}.", next="stockroom plan", practice=is_practice(path))


# a method without ingredients can close a circle too: they follow from the strengths
_MAKES_METHODS = ("methods", "ingredients")


def _check_methods(session: Session) -> None:
    """Pass when no method goes round in a circle. Raises: BadInput naming the chain."""
    from stockroom.planning.derive import with_derived
    from stockroom.planning.order_of_lines import settling_order
    from stockroom.store.engine import reader_in
    from stockroom.store.snapshot import facts_from

    try:
        settling_order(with_derived(facts_from(reader_in(session), clock.today())))
    except NotAllowed as error:
        # every later question would fail on it, so it is never saved
        raise BadInput(f"{error.message} Nothing was saved.", error.hint) from error


def table_columns(table: str) -> list[str]:
    """The columns of a table as typed. Raises: UnknownName with the nearest three."""
    from stockroom.store import layout

    return layout.table_columns(table)


def column_words(table: str) -> dict[str, tuple[str, ...]]:
    """The words each column takes that takes only a few, for one table."""
    from stockroom.store import layout

    return layout.column_words(table)


def changeable_columns(table: str) -> tuple[str, ...]:
    """The columns of a table that may be corrected, because no earlier entry leans on them.

    Raises: NotAllowed for a table none of whose rows are; UnknownName for no table.
    """
    from stockroom.store.changing import changeable

    return tuple(changeable(table).columns)


def is_practice(path: StoreAt) -> bool:
    """Whether the store is the invented college. Raises: StoreTrouble."""
    return reading.house_value(path, "practice") == "yes"


def day_for(path: StoreAt, given: date | None) -> date:
    """The day to answer for: the one given, else the practice day, else today."""
    return given or reading.practice_day(path) or clock.today()


def _desk(session: Session, by: str) -> Desk:
    from stockroom.store.desk import Desk

    return Desk(session, by=by, today=clock.today(), at=clock.now())
