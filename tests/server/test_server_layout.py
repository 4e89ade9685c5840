"""The migrations build the same tables on a server, and bring an older store there up to date."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date
from typing import Any

import psycopg
import pytest
import server_stores
from alembic import command
from alembic.autogenerate import compare_metadata
from alembic.config import Config
from alembic.migration import MigrationContext
from sqlalchemy import create_engine
from sqlalchemy.pool import NullPool
from sqlmodel import SQLModel

from stockroom.errors import StoreTrouble
from stockroom.settings import Server
from stockroom.store import server_layout, tables
from stockroom.store.engine import MIGRATIONS, create, writing
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts
from stockroom.store.trouble import REVISIONS

pytestmark = pytest.mark.server

ROWS = """
INSERT INTO house VALUES ('name', 'Old House', '');
INSERT INTO place VALUES (1, 'A1', 'cupboard', 19.0, '', '');
INSERT INTO line VALUES (1, 'starch 1 %', 'starch', NULL, 'solution', 'volume', 10.0, 'g/dm3',
 '1 %', '', NULL, 1.0, NULL, NULL, NULL, '', false, '', '');
INSERT INTO keeping_rule VALUES (1, 1, 'life', 7, 'days', 'made', 'any', false,
 NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL, 'bench');
INSERT INTO bottle VALUES (1, 'S01', 1, 500000, NULL, '2027-01-04', '', '', '', '', true, '');
INSERT INTO entry VALUES (1, 1, 'made', '2027-01-04', '2027-01-04', '2027-01-04T09:00', 'T1',
 500000, NULL, '', NULL, 1, '', '', '', NULL);
"""


@pytest.fixture
def empty() -> Iterator[Server]:
    store = server_stores.make(f"layout_{server_stores.own_name()}")
    yield store
    server_stores.drop(store)


@pytest.fixture
def older(empty: Server) -> Server:
    """A store as the first layout had it, with one bottle in it."""
    config = Config()
    config.set_main_option("script_location", str(MIGRATIONS))
    engine = create_engine(empty.url, poolclass=NullPool)
    with engine.begin() as connection:
        config.attributes["connection"] = connection
        command.upgrade(config, "0001")
    with server_stores.raw(empty) as raw:
        raw.execute(ROWS)
    return empty


def one(store: Server, question: str) -> Any:
    with server_stores.raw(store) as raw:
        found = raw.execute(question).fetchone()
    return found[0] if found else None


def test_the_migrations_build_exactly_the_tables(empty: Server) -> None:
    assert tables.Entry.__tablename__ == "entry"
    create(empty)
    engine = create_engine(empty.url, poolclass=NullPool)
    with engine.connect() as connection:
        context = MigrationContext.configure(connection, opts={"compare_type": True})
        assert compare_metadata(context, SQLModel.metadata) == []


def test_reading_an_older_store_brings_it_up_and_loses_nothing(older: Server) -> None:
    known = facts(older, date(2027, 1, 5))
    assert [(bottle.number, bottle.left) for bottle in known.bottles] == [("S01", 500000)]
    assert len(known.lines["starch 1 %"].rules) == 1
    assert one(older, "SELECT version_num FROM alembic_version") == REVISIONS[-1]
    assert one(older, "SELECT held FROM kept_balance") == 500000
    with server_stores.raw(older) as raw, pytest.raises(psycopg.Error, match="never altered"):
        raw.execute("UPDATE entry SET change = 0")


def test_the_rows_as_they_were_are_put_by_in_the_database_itself(older: Server) -> None:
    with writing(older):
        pass
    schema = f"before_{REVISIONS[-1]}"
    assert one(older, f"SELECT change FROM {schema}.entry") == 500000
    assert one(older, f"SELECT version_num FROM {schema}.alembic_version") == "0001"
    # a second copy would never be put over the first
    with server_stores.raw(older) as raw:
        assert server_layout.put_by(raw) == f"{schema}_2"


def test_a_change_of_layout_that_fails_leaves_the_store_as_it_was(
    older: Server, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(connection: object) -> None:
        raise StoreTrouble("half way", "try again")

    monkeypatch.setattr(server_layout, "migrate", fail)
    with pytest.raises(StoreTrouble, match="half way"):
        facts(older, date(2027, 1, 5))
    assert one(older, "SELECT version_num FROM alembic_version") == "0001"
    assert one(older, "SELECT nspname FROM pg_namespace WHERE nspname LIKE 'before%'") is None


def test_a_store_that_cannot_be_filled_leaves_nothing(empty: Server) -> None:
    def fail(session: object) -> None:
        raise RuntimeError("half way")

    with pytest.raises(RuntimeError, match="half way"):
        create(empty, fill=fail)
    with pytest.raises(StoreTrouble, match="There is no store yet"), reading(empty):
        pass
    create(empty)
    with pytest.raises(StoreTrouble, match="is not empty"):
        create(empty)


def test_letters_that_a_database_cannot_keep_are_told() -> None:
    narrow = server_stores.named(f"narrow_{server_stores.own_name()}")
    named = narrow.url.split("@/")[1].split("?")[0]
    with server_stores.raw(server_stores.named("postgres")) as raw:
        raw.execute(
            f"CREATE DATABASE {named} TEMPLATE template0 ENCODING 'SQL_ASCII'"
            " LOCALE_PROVIDER libc LOCALE 'C'"
        )
    try:
        with pytest.raises(StoreTrouble, match="SQL_ASCII, which has no letter for"):
            create(narrow)
    finally:
        server_stores.drop(narrow)
