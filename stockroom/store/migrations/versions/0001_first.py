"""The first layout: what stands on the shelves, what is booked, and the ledger.

Revision: 0001, from nothing.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import Guard, put_up

revision = "0001"
down_revision = None

Column = sa.Column[Any]


def upgrade() -> None:
    """Build the tables, then the triggers that keep the ledger as it was written."""
    # parents before children: foreign keys are checked as the tables are made
    _house()
    _things()
    _lines()
    _recipes()
    _bookings()
    _changes()
    _bottles()
    _entries()
    put_up(*GUARDS)


def downgrade() -> None:
    """Refused: taking the ledger away would lose history."""
    raise NotImplementedError("The first layout is never taken back; restore a copy instead.")


def _text(name: str, **options: Any) -> Column:
    return sa.Column(name, sa.String(), nullable=False, **options)


def _whole(name: str, *, known: bool = True) -> Column:
    return sa.Column(name, sa.Integer(), nullable=not known)


# micrograms outgrow 32 bits at 2 kg, which matters in engines stricter than SQLite
def _amount(name: str, *, known: bool = True) -> Column:
    return sa.Column(name, sa.BigInteger(), nullable=not known)


def _number(name: str, *, known: bool = False) -> Column:
    return sa.Column(name, sa.Float(), nullable=not known)


def _flag(name: str, *, known: bool = True) -> Column:
    return sa.Column(name, sa.Boolean(), nullable=not known)


def _day(name: str, *, known: bool = True) -> Column:
    return sa.Column(name, sa.Date(), nullable=not known)


def _link(name: str, to: str, *, known: bool = True, **options: Any) -> Column:
    return sa.Column(name, sa.Integer(), sa.ForeignKey(f"{to}.id"), nullable=not known, **options)


def _table(name: str, *columns: Any) -> None:
    op.create_table(name, sa.Column("id", sa.Integer(), primary_key=True), *columns)


def _house() -> None:
    op.create_table(
        "house",
        sa.Column("setting", sa.String(), primary_key=True),
        _text("value"),
        _text("source"),
    )
    _table("term", _text("term", unique=True), _day("starts_on"), _day("ends_on"), _text("source"))
    _table("closure", _day("starts_on"), _day("ends_on"), _text("reason"), _text("source"))
    _table(
        "place",
        _text("place", unique=True),
        _text("name"),
        _number("temperature_c"),
        _text("meant_for"),
        _text("source"),
    )
    _table(
        "department",
        _text("department", unique=True),
        _text("name"),
        _whole("left_pence", known=False),
        _text("source"),
    )
    _table("balance", _text("balance", unique=True), _amount("step"), _text("source"))
    _table("balance_away", _link("balance_id", "balance"), _day("starts_on"), _day("ends_on"))
    _table("vessel", _text("vessel", unique=True), _amount("size"), _text("source"))


def _things() -> None:
    _table(
        "substance",
        _text("substance", unique=True),
        _text("formula"),
        _number("molar_mass"),
        _text("cas"),
        _text("storage_group"),
        _text("peroxide_former"),
        _text("source"),
    )
    _table(
        "other_name",
        _link("substance_id", "substance"),
        _text("name"),
        sa.UniqueConstraint("substance_id", "name"),
    )
    _table(
        "line",
        # the key is what rows of other tables are typed by, so it may stand once only
        _text("key", unique=True),
        _text("item"),
        _link("substance_id", "substance", known=False),
        _text("form"),
        _text("kind"),
        _number("strength"),
        _text("unit"),
        _text("strength_text"),
        _text("formula"),
        _number("molar_mass"),
        _number("assay", known=True),
        _number("density"),
        _amount("level", known=False),
        _amount("largest_batch", known=False),
        _text("never_kept"),
        _flag("vented_cap"),
        _text("keep_note"),
        _text("source"),
    )


def _lines() -> None:
    _table(
        "keeping_rule",
        _link("line_id", "line"),
        _text("rule"),
        _whole("lasts_count", known=False),
        _text("lasts_unit"),
        _text("counted_from"),
        _text("purpose"),
        _flag("safety"),
        _whole("decay_order", known=False),
        *[_number(name) for name in ("rate", "at_c", "factor_per_10c", "above", "upto")],
        _number("colder_than"),
        _number("warmer_than"),
        _text("source"),
    )
    _table(
        "method",
        _link("line_id", "line", unique=True),
        _whole("minutes"),
        _flag("minutes_guessed"),
        _whole("finish_minutes"),
        _number("stands_hours", known=True),
        _flag("titrated"),
        _amount("smallest_batch"),
        _text("steps"),
        _text("cautions"),
        _text("source"),
    )
    _table(
        "ingredient",
        _link("line_id", "line"),
        _link("ingredient_id", "line"),
        _whole("alternative"),
        _text("role"),
        _amount("per_dm3", known=False),
        _flag("only_if_held"),
        _text("source"),
    )
    _table(
        "pack",
        _link("line_id", "line"),
        _amount("size"),
        _text("text"),
        _whole("pence"),
        _whole("lead", known=False),
        _text("supplier"),
        _text("source"),
    )


def _recipes() -> None:
    texts = ("title", "never_kept", "waste", "handling", "assessment", "source")
    _table(
        "recipe",
        _text("recipe"),
        _whole("version"),
        *[_text(name) for name in texts],
        sa.UniqueConstraint("recipe", "version"),
    )
    _table(
        "requirement",
        _link("recipe_id", "recipe"),
        _whole("number"),
        _link("line_id", "line"),
        _number("lowest"),
        _number("highest"),
        _text("strength_text"),
        _amount("amount"),
        _text("per"),
        _text("closeness"),
        _flag("closeness_guessed"),
        _number("tolerance"),
        _flag("fresh"),
        _whole("freshest_days", known=False),
        _flag("spare"),
        _number("may_differ"),
        _whole("found_within_days", known=False),
        _text("note"),
        _text("source"),
        sa.UniqueConstraint("recipe_id", "number"),
    )
    recipe = _link("recipe_id", "recipe")
    _table("bar", recipe, _link("substance_id", "substance"), _text("reason"), _text("source"))
    _table(
        "swap",
        _link("recipe_id", "recipe"),
        _link("line_id", "line"),
        _link("instead_id", "line"),
        _number("factor"),
        _text("note"),
        _text("source"),
    )


def _bookings() -> None:
    _table(
        "booking",
        _text("number", unique=True),
        _link("recipe_id", "recipe"),
        _day("on_day"),
        _whole("minute"),
        _whole("groups"),
        _whole("spare"),
        _link("department_id", "department"),
        _text("firmness"),
        _text("room"),
        _text("source"),
    )
    _table(
        "booking_change",
        _link("booking_id", "booking"),
        _day("entered_on"),
        *[_text(name) for name in ("entered_at", "by", "what", "before", "after")],
    )


def _changes() -> None:
    told = ("table_name", "row_key", "column_name", "before", "after", "why", "by")
    _table("row_change", *[_text(name) for name in told], _day("entered_on"), _text("entered_at"))


def _bottles() -> None:
    _table(
        "bottle",
        _text("number", unique=True),
        _link("line_id", "line"),
        _amount("size"),
        _day("received_on", known=False),
        _day("made_on", known=False),
        *[_text(name) for name in ("printed_text", "printed_readings", "cap", "remark")],
        _flag("made_here"),
        _text("source"),
    )
    _table(
        "parent",
        _link("bottle_id", "bottle"),
        _link("parent_id", "bottle"),
        sa.UniqueConstraint("bottle_id", "parent_id"),
    )


def _entries() -> None:
    _table(
        "entry",
        _link("bottle_id", "bottle", index=True),
        _text("kind"),
        _day("happened_on"),
        _day("entered_on"),
        _text("entered_at"),
        _text("by"),
        _amount("change"),
        _number("strength"),
        _text("strength_text"),
        _flag("passed", known=False),
        _link("place_id", "place", known=False),
        _text("reason"),
        _text("note"),
        _text("booking"),
        # unique: the database itself allows one putting-right for each entry
        _link("puts_right", "entry", known=False, unique=True),
    )


# KEPT marks texts of ours among the driver's own errors; the rest is shown to the user
def _never(table: str, action: str, words: str) -> Guard:
    return Guard(f"{table}_no_{action.lower()}", table, action, f"KEPT {words}")


def _no_overwrite(table: str) -> Guard:
    # INSERT OR REPLACE would remove the old row without waking the DELETE trigger
    return Guard(
        f"{table}_no_overwrite",
        table,
        "INSERT",
        "KEPT A saved entry is never written over.",
        f"EXISTS (SELECT 1 FROM {table} WHERE id = NEW.id)",
    )


GUARDS = (
    _never("entry", "UPDATE", "A ledger entry is never altered."),
    _never("entry", "DELETE", "A ledger entry is never removed."),
    _never("booking_change", "UPDATE", "The record of a booking is never altered."),
    _never("booking_change", "DELETE", "The record of a booking is never removed."),
    _never("row_change", "UPDATE", "The record of a correction is never altered."),
    _never("row_change", "DELETE", "The record of a correction is never removed."),
    _never("bottle", "DELETE", "A bottle number is never used again."),
    _no_overwrite("entry"),
    _no_overwrite("booking_change"),
    _no_overwrite("row_change"),
    Guard(
        "entry_put_right_once",
        "entry",
        "INSERT",
        "KEPT An entry is put right once.",
        "EXISTS (SELECT 1 FROM entry WHERE puts_right = NEW.puts_right)",
    ),
    # two writers can never overdraw: the sum is taken inside the writer's own transaction
    Guard(
        "entry_not_below_nothing",
        "entry",
        "INSERT",
        "NOTENOUGH The bottle holds less than that.",
        "NEW.change < 0 AND NEW.change + (SELECT COALESCE(SUM(change), 0) FROM entry"
        " WHERE bottle_id = NEW.bottle_id) < 0",
    ),
)
