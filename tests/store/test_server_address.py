"""The address of a server is known from a file's name, and shown without what nobody may see."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.settings import Server, store_at

if TYPE_CHECKING:
    from conftest import Stockroom


@pytest.mark.parametrize(
    ("url", "shown"),
    [
        ("postgresql://a@h/x", "postgresql://a@h/x"),
        ("postgresql+psycopg://a:sesame@h:1/x", "postgresql+psycopg://a:***@h:1/x"),
        ("postgresql+psycopg://a:ses@me/x@h:1/x", "postgresql+psycopg://a:***@h:1/x"),
        (
            "postgresql://a@h/x?password=sesame&sslmode=on",
            "postgresql://a@h/x?password=***&sslmode=on",
        ),
        ("postgresql://a@/x?host=/run/s&user=b@c", "postgresql://a@/x?host=/run/s&user=b@c"),
    ],
)
def test_a_password_is_never_shown(url: str, shown: str) -> None:
    assert isinstance(store_at(url), Server)
    assert str(store_at(url)) == shown


@pytest.mark.parametrize("name", ["house.sqlite", "postgresql/house.sqlite", "postgresql"])
def test_anything_else_is_a_file(name: str) -> None:
    assert store_at(name) == Path(name)


def test_the_practice_store_is_never_made_on_a_server(stockroom: Stockroom, tmp_path: Path) -> None:
    refused = stockroom("demo", "--store", "postgresql+psycopg://a:sesame@h:1/x")
    assert refused.code == 2
    assert "The practice store is a file" in refused.err
    assert "sesame" not in refused.err
    assert list(tmp_path.iterdir()) == []
