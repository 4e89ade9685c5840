"""Strength, ageing and hazards: glassware, logged temperatures, limits, uncertainties.

Revision: 0002, from 0001. Every new column has a value for the rows already there.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import kept, put_up

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
    put_up(
        *kept("hazard_text", "What a sheet said"),
        *kept(
            "reading",
            "What a logger read",
            "id = NEW.id OR (place_id = NEW.place_id AND at = NEW.at)",
        ),
    )


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
    for name, usual in (("house", sa.false()), ("in_use", sa.true())):
        flag: Column = sa.Column(name, sa.Boolean(), nullable=False, server_default=usual)
        op.add_column("keeping_rule", flag)
    op.add_column("entry", _number("uncertainty"))
    op.add_column("entry", _number("peroxide_mg_kg"))


# before there was a starter house, whoever filled a store of their own typed its rules
TYPED_BY_THE_HOUSE = (
    "UPDATE keeping_rule SET house = TRUE WHERE NOT EXISTS"
    " (SELECT 1 FROM house WHERE setting = 'practice' AND value = 'yes')"
)
