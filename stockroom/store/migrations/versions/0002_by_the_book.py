"""Strength, ageing and hazards: glassware, logged temperatures, limits, uncertainties.

Revision: 0002, from 0001. Every new column has a value for the rows already there.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

revision = "0002"
down_revision = "0001"

Column = sa.Column[Any]


def upgrade() -> None:
    """Add the tables, then the columns; no row that stands is altered in what it says."""
    _glassware()
    _readings()
    _hazards()
    _columns()
    op.execute(TYPED_BY_THE_HOUSE)
    for trigger in TRIGGERS:
        op.execute(trigger)


def downgrade() -> None:
    """Refused: strengths found since would lose their uncertainty."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _text(name: str, **options: Any) -> Column:
    return sa.Column(name, sa.String(), nullable=False, **options)


def _number(name: str) -> Column:
    return sa.Column(name, sa.Float(), nullable=True)


def _amount(name: str, *, known: bool = True) -> Column:
    return sa.Column(name, sa.BigInteger(), nullable=not known)


def _link(name: str, to: str) -> Column:
    return sa.Column(name, sa.Integer(), sa.ForeignKey(f"{to}.id"), nullable=False)


def _table(name: str, *columns: Any) -> None:
    op.create_table(name, sa.Column("id", sa.Integer(), primary_key=True), *columns)


def _glassware() -> None:
    _table(
        "glassware",
        _text("glass", unique=True),
        _text("kind"),
        _amount("size"),
        _text("glass_class"),
        _amount("step", known=False),
        _text("source"),
    )
    _table(
        "glassware_away",
        _link("glassware_id", "glassware"),
        sa.Column("starts_on", sa.Date(), nullable=False),
        sa.Column("ends_on", sa.Date(), nullable=False),
    )


def _readings() -> None:
    _table(
        "reading",
        _link("place_id", "place"),
        _text("at"),
        sa.Column("centi", sa.Integer(), nullable=False),
        sa.UniqueConstraint("place_id", "at"),
    )


def _hazards() -> None:
    _table(
        "hazard",
        _link("substance_id", "substance"),
        _text("hazard_class"),
        _text("h_code"),
        _number("from_percent"),
        _number("below_percent"),
        _text("basis"),
        _text("route"),
        _number("ate"),
        _number("m_factor"),
        _text("percent_of"),
        _text("how"),
        _text("source"),
    )
    _table(
        "hazard_text",
        _link("line_id", "line"),
        *[_text(name) for name in ("signal_word", "statements", "pictograms", "sheet", "why")],
        _text("by"),
        sa.Column("entered_on", sa.Date(), nullable=False),
        _text("entered_at"),
    )


def _columns() -> None:
    # rows that stand already need a value where none may be missing
    op.add_column("substance", _number("density"))
    op.add_column("substance", _text("note", server_default=""))
    op.add_column("keeping_rule", _number("ea_kj_mol"))
    op.add_column("keeping_rule", _text("named_law", server_default=""))
    for name, usual in (("house", "0"), ("in_use", "1")):
        flag: Column = sa.Column(name, sa.Boolean(), nullable=False, server_default=sa.text(usual))
        op.add_column("keeping_rule", flag)
    op.add_column("entry", _number("uncertainty"))
    op.add_column("entry", _number("peroxide_mg_kg"))


# before there was a starter house, whoever filled a store of their own typed its rules
TYPED_BY_THE_HOUSE = (
    "UPDATE keeping_rule SET house = TRUE WHERE NOT EXISTS"
    " (SELECT 1 FROM house WHERE setting = 'practice' AND value = 'yes')"
)


# KEPT marks texts of ours among the driver's own errors; the rest is shown to the user
def _kept(table: str, what: str, alike: str) -> tuple[str, ...]:
    def never(name: str, when: str, past: str, only: str = "") -> str:
        return (
            f"CREATE TRIGGER {table}_no_{name} BEFORE {when} ON {table}{only}"
            f" BEGIN SELECT RAISE(ABORT, 'KEPT {what} is never {past}.'); END"
        )

    # INSERT OR REPLACE would remove the old row without waking the DELETE trigger
    there = f" WHEN EXISTS (SELECT 1 FROM {table} WHERE {alike})"
    return (
        never("update", "UPDATE", "altered"),
        never("delete", "DELETE", "removed"),
        never("overwrite", "INSERT", "written over", there),
    )


TRIGGERS = (
    *_kept("hazard_text", "What a sheet said", "id = NEW.id"),
    *_kept(
        "reading",
        "What a logger read",
        "id = NEW.id OR (place_id = NEW.place_id AND at = NEW.at)",
    ),
)
