"""The migrations build exactly the tables, and the reading half names exactly their columns."""

from __future__ import annotations

import sqlite3
from pathlib import Path

import pytest
from alembic.autogenerate import compare_metadata
from alembic.migration import MigrationContext
from alembic.script import ScriptDirectory
from sqlalchemy import create_engine
from sqlmodel import Session, SQLModel

from stockroom.errors import StoreTrouble
from stockroom.store import columns, tables
from stockroom.store.engine import MIGRATIONS, create
from stockroom.store.trouble import REVISIONS


@pytest.fixture
def empty(tmp_path: Path) -> Path:
    path = tmp_path / "empty.sqlite"
    create(path)
    return path


def test_the_migrations_build_exactly_the_tables(empty: Path) -> None:
    engine = create_engine(f"sqlite:///{empty}")
    with engine.connect() as connection:
        context = MigrationContext.configure(connection, opts={"compare_type": True})
        assert compare_metadata(context, SQLModel.metadata) == []
    engine.dispose()


def test_a_column_missing_from_the_migrations_would_be_noticed(empty: Path) -> None:
    with sqlite3.connect(empty) as connection:
        connection.execute("ALTER TABLE vessel DROP COLUMN source")
    engine = create_engine(f"sqlite:///{empty}")
    with engine.connect() as opened:
        context = MigrationContext.configure(opened)
        assert compare_metadata(context, SQLModel.metadata) != []
    engine.dispose()


def test_the_reading_half_names_every_table_and_column() -> None:
    assert tables.Entry.__tablename__ == "entry"
    written = {
        table.name: {column.name for column in table.columns}
        for table in SQLModel.metadata.tables.values()
    }
    assert {table: set(names) for table, names in columns.COLUMNS.items()} == written


def test_every_migration_is_known_by_number() -> None:
    script = ScriptDirectory(str(MIGRATIONS))
    assert tuple(step.revision for step in script.walk_revisions())[::-1] == REVISIONS


def test_an_entry_belongs_to_a_bottle_that_is_there(empty: Path) -> None:
    from sqlalchemy.exc import IntegrityError

    from stockroom.store.engine import writing

    def orphan(session: Session) -> None:
        session.add(tables.Parent(bottle_id=1, parent_id=2))
        session.flush()

    with writing(empty) as session, pytest.raises(IntegrityError, match="FOREIGN KEY"):
        orphan(session)


def test_a_store_is_never_made_over_another(empty: Path) -> None:
    with pytest.raises(StoreTrouble, match="already something"):
        create(empty)


def test_a_store_that_cannot_be_filled_leaves_no_file(tmp_path: Path) -> None:
    def fail(session: Session) -> None:
        raise RuntimeError("half way")

    with pytest.raises(RuntimeError, match="half way"):
        create(tmp_path / "half.sqlite", fill=fail)
    assert list(tmp_path.iterdir()) == []


def test_a_folder_with_a_per_cent_sign_can_hold_a_store(tmp_path: Path) -> None:
    path = tmp_path / "50 % full?#" / "store.sqlite"
    create(path)
    assert path.exists()
