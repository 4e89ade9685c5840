"""Corrections to the tables of the house, each kept beside what stood there before.

Only columns that no earlier entry leans on: what a level, a price or a name is
now changes no balance, no draw and no date of the past.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from sqlmodel import col, select

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.desk import Desk
from stockroom.store.faults import told_with_place
from stockroom.store.fields import Fields
from stockroom.store.layout import table_columns
from stockroom.store.likeness import plain, unknown
from stockroom.store.names import find_department, find_place
from stockroom.store.rows_house import temperature_of
from stockroom.store.rows_methods import lead_of, price_of
from stockroom.store.rows_orders import ask_days_of
from stockroom.store.tables import Line, Pack, RowChange

# each table of a store is its own class, and only its columns are of interest here
Row = Any


@dataclass(frozen=True, slots=True)
class Column:
    """One column that may be corrected: where it is kept, how it is read, how it is said."""

    attribute: str
    read: Callable[[Fields, Row], object]
    say: Callable[[Row, Any], str]

    def said(self, row: Row) -> str:
        """What stands there now, in words; "" when nothing does."""
        value = getattr(row, self.attribute)
        return "" if value in (None, "") else self.say(row, value)


@dataclass(frozen=True, slots=True)
class Changeable:
    """A table whose rows may be corrected: how a row is found and named, and its columns."""

    find: Callable[[Desk, str], Row]
    key: Callable[[Desk, Row], str]
    columns: dict[str, Column]


def change_row(desk: Desk, table: str, key: str, values: dict[str, str], why: str) -> list[str]:
    """Correct columns of one row; what was there before stays on record.

    Gives each change in words. Raises: UnknownName for a table, row or column;
    NotAllowed for a column that history leans on; BadInput without a reason, or
    when nothing would change; and what the columns' readers raise.
    """
    if not why.strip():
        raise BadInput(f"Why is {key} of {table} changed?", "One word is enough: --why …")
    rows = changeable(table)
    _check_columns(table, rows, values)
    # found by the same names as everywhere else, so no number has to be known
    row = rows.find(desk, key)
    named = rows.key(desk, row)
    fields = Fields(values)
    told = []
    for name in values:
        column = rows.columns[name]
        before = column.said(row)
        with told_with_place(table, fields):
            setattr(row, column.attribute, column.read(fields, row))
        desk.save(row)
        after = column.said(row)
        if before != after:
            record_change(desk, table, named, name, (before, after), why.strip())
            told.append(f"{named}: {name} {before or 'blank'} → {after or 'blank'}")
    if not told:
        raise BadInput(f"{named} of {table} is so already.", "Say what changes: COLUMN=VALUE.")
    return told


def changeable(table: str) -> Changeable:
    """A table whose rows may be corrected. Raises: NotAllowed for another; UnknownName for none."""
    if table in CHANGEABLE:
        return CHANGEABLE[table]
    # a table nobody knows is a slip; one of ours that is not here is closed on purpose
    table_columns(table)
    raise NotAllowed(
        f"Rows of {table} are not changed: earlier entries lean on them.",
        f"May be changed: {', '.join(CHANGEABLE)}.",
    )


def _check_columns(table: str, rows: Changeable, values: dict[str, str]) -> None:
    for name in values:
        if name in rows.columns:
            continue
        if name in table_columns(table):
            raise NotAllowed(
                f"{name} of {table} is not changed: earlier entries lean on it.",
                f"May be changed: {', '.join(rows.columns)}. Else add another row.",
            )
        raise unknown(f"column of {table}", name, rows.columns)


def record_change(
    desk: Desk, table: str, key: str, column: str, change: tuple[str, str], why: str
) -> None:
    """Keep one change of a row: what stood there, what stands there now, who, when and why."""
    row = RowChange(
        table_name=table,
        row_key=key,
        column_name=column,
        before=change[0],
        after=change[1],
        why=why,
        by=desk.by,
        entered_on=desk.today,
        entered_at=desk.at.isoformat(sep=" "),
    )
    desk.save(row)


def _text(column: str) -> Column:
    return Column(column, lambda fields, _: fields.text(column), lambda _, text: str(text))


def _number(_: Row, number: float) -> str:
    return f"{number:g}"


def _pounds(_: Row, pence: int) -> str:
    return f"£{pence // 100}.{pence % 100:02d}"


def _level(line: Row, micro: int) -> str:
    return format_amount(Amount(Kind(line.kind), micro))


def _find_pack(desk: Desk, text: str) -> Pack:
    packs = {
        _pack_key(desk, row): row for row in desk.session.exec(select(Pack).order_by(col(Pack.id)))
    }
    for key, row in packs.items():
        if plain(key) == plain(text):
            return row
    raise unknown("pack", text, packs)


def _pack_key(desk: Desk, pack: Pack) -> str:
    sold = f"{desk.session.get_one(Line, pack.line_id).key}, {pack.text}"
    return f"{sold}, {pack.supplier}" if pack.supplier else sold


_LEVEL = Column("level", lambda fields, line: fields.amount("level", Kind(line.kind)), _level)

CHANGEABLE: dict[str, Changeable] = {
    "places": Changeable(
        lambda desk, text: find_place(desk.session, text),
        lambda _, row: str(row.place),
        {
            "name": _text("name"),
            "temperature_c": Column(
                "temperature_c", lambda fields, _: temperature_of(fields, "temperature_c"), _number
            ),
            "meant_for": _text("meant_for"),
        },
    ),
    "departments": Changeable(
        lambda desk, text: find_department(desk.session, text),
        lambda _, row: str(row.department),
        {
            "name": _text("name"),
            "left_gbp": Column("left_pence", lambda fields, _: fields.pence("left_gbp"), _pounds),
        },
    ),
    "lines": Changeable(
        lambda desk, text: desk.line(text),
        lambda _, row: str(row.key),
        {
            "level_g": _LEVEL,
            "level_cm3": _LEVEL,
            "level_items": _LEVEL,
            "keep_note": _text("keep_note"),
            "ask_first": _text("ask_first"),
            "ask_days": Column("ask_days", lambda fields, _: ask_days_of(fields), _number),
        },
    ),
    "packs": Changeable(
        _find_pack,
        _pack_key,
        {
            "price_gbp": Column("pence", lambda fields, _: price_of(fields), _pounds),
            "lead_open_days": Column("lead", lambda fields, _: lead_of(fields), _number),
        },
    ),
}
"""The tables whose rows may be corrected, and of each the columns that nothing leans on."""
