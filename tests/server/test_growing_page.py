"""docs/growing.md is done as it says, command by command, on a real server."""

from __future__ import annotations

import os
import re
import shlex
import shutil
import subprocess
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path
from typing import TYPE_CHECKING
from urllib.parse import parse_qs, urlsplit

import psycopg
import pytest
import server_stores
from real_server import USER, programs

from stockroom.settings import Server

if TYPE_CHECKING:
    from conftest import Result, Stockroom

pytestmark = pytest.mark.server

PAGE = Path(__file__).parents[2] / "docs" / "growing.md"
DATABASES = ("stockroom", "tried")


def commands() -> list[list[str]]:
    text = PAGE.read_text(encoding="utf-8")
    blocks = re.findall(r"^```sh\n(.*?)^```", text, flags=re.MULTILINE | re.DOTALL)
    return [shlex.split(line) for block in blocks for line in block.splitlines()]


def named(name: str) -> Server:
    return server_stores.named(f"{name}_{server_stores.own_name()}")


@pytest.fixture
def databases() -> Iterator[None]:
    yield
    for name in DATABASES:
        with suppress(psycopg.errors.InvalidCatalogName):
            server_stores.drop(named(name))


def here(word: str) -> str:
    """A word of the page, with this server and names of this run in the place of the page's."""
    for name in DATABASES:
        word = word.replace(f"postgresql+psycopg://prep@server/{name}", named(name).url)
        word = re.sub(rf"^(--dbname=)?{name}$", rf"\1{name}_{server_stores.own_name()}", word)
    return word


def of_the_server(words: list[str]) -> str:
    """Run a program that comes with the server; what it said wrong."""
    asked = parse_qs(urlsplit(server_stores.ADDRESS).query)
    env = {"PGHOST": asked["host"][0], "PGPORT": asked["port"][0], "PGUSER": USER}
    program = str(programs() / words[0])
    done = subprocess.run(
        [program, *words[1:]],
        env={**os.environ, **env},
        capture_output=True,
        text=True,
        check=False,
    )
    return done.stderr


def test_the_page_is_done_as_it_says(
    databases: None,
    college_file: Path,
    stockroom: Stockroom,
    monkeypatch: pytest.MonkeyPatch,
    tmp_path: Path,
) -> None:
    shutil.copy(college_file, tmp_path / "prep-room.sqlite")
    monkeypatch.setenv("STOCKROOM_BY", "T1")
    told: list[Result] = []
    for program, *words in commands():
        words = [here(word) for word in words]
        if program == "stockroom":
            told.append(stockroom(*words))
            assert told[-1].code == 0, (words, told[-1].err)
        elif program == "export":
            monkeypatch.setenv(*words[0].split("=", 1))
        elif program != "pip":
            assert of_the_server([program, *words]) == ""
    _, moved, plan, verified = told
    assert "Compared, and the same" in moved.said
    assert "Quillmere College" in plan.said
    assert "all is well" in verified.said.lower()
