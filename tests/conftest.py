"""What every test may ask for: the practice store, a copy to write in, and the command line.

    practice    the store of the invented college, built once and only read
    own         a copy of it, for one test to write in
    term        its plan for the term, as at 2027-01-04
    stockroom   runs a command in this process and gives back what it printed
    window      the pages of a store of one's own, without a browser
    onlooker    the same on the practice college itself, for tests that save nothing
    room        a store of one's own that is shared with the room, and who comes in there
    quick_hash  passphrases are hashed in no time
    chromium    a real browser, for the tests in tests/browser

A typed test names the last one with `if TYPE_CHECKING: from conftest import Stockroom`.
The stores are files, and typed so; with STOCKROOM_TEST_SERVER they stand on a real server,
and only tests that open them are run: see `server_stores.py`.
"""

from __future__ import annotations

import contextlib
import gc
import hashlib
import io
import json
import shutil
import sys
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any, Protocol

import pytest
import server_stores
from hypothesis import settings

# a worker holds a great many objects that stay, and looking through them again and again takes
# about a fourteenth of all its time
gc.set_threshold(100_000, 50, 100)

if TYPE_CHECKING:
    from doors import Room
    from playwright.sync_api import Browser
    from windows import Window

    from stockroom.planning.decisions import Plan

# a busy machine is slow now and then, and no test here is about time
settings.register_profile("stockroom", deadline=None)
settings.load_profile("stockroom")


def pytest_collection_modifyitems(config: pytest.Config, items: list[pytest.Item]) -> None:
    left_out = [item for item in items if not server_stores.fits(item)]
    config.hook.pytest_deselected(items=left_out)
    items[:] = [item for item in items if server_stores.fits(item)]


@dataclass(frozen=True)
class Result:
    """What one command left behind: its exit code and what it wrote on each stream."""

    code: int
    out: str
    err: str

    @property
    def said(self) -> str:
        """Standard output with its line breaks undone, for a sentence that may wrap."""
        return " ".join(self.out.split())

    @property
    def json(self) -> Any:
        """Standard output read as JSON. Raises ValueError, quoting it, where it is not."""
        try:
            return json.loads(self.out)
        except ValueError as trouble:
            said = f"exit {self.code}, out {self.out[:300]!r}, err {self.err[:300]!r}"
            raise ValueError(f"not JSON: {said}") from trouble


class Stockroom(Protocol):
    """`stockroom("plan", "--json", store=own)`: one command line, in this process.

    `store` is put in front as `--store`; `typed` is what stands on standard input.
    """

    def __call__(self, *words: str, store: Path | None = None, typed: str = "") -> Result: ...


@pytest.fixture(scope="session")
def college_file(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Path]:
    """The path of the practice store in a file, built once. Ask for `practice`."""
    from stockroom.service.database import make_practice

    path = tmp_path_factory.mktemp("practice") / "practice.sqlite"
    make_practice(path)
    before = _digest(path)
    yield path
    assert _digest(path) == before, "a test wrote in the shared practice store: let it take `own`"


@pytest.fixture(scope="session")
def practice(college_file: Path) -> Iterator[Path]:
    """The path of the practice store, built once. Only for reading: writers take `own`."""
    if not server_stores.ADDRESS:
        yield college_file
        return
    from stockroom.store.server_moving import move

    store: Any = server_stores.make(f"practice_{server_stores.own_name()}")
    move(college_file, store, lambda file, copy: None)
    # the server itself refuses a test that writes in it
    server_stores.shut(store)
    yield store
    server_stores.drop(store)


@pytest.fixture
def own(practice: Path, tmp_path: Path) -> Iterator[Path]:
    """The path of a copy of the practice store that this test alone may change."""
    if not isinstance(practice, Path):
        copy: Any = server_stores.make(f"own_{server_stores.own_name()}", like=practice)
        yield copy
        server_stores.drop(copy)
        return
    yield Path(shutil.copy(practice, tmp_path / "own.sqlite"))


@pytest.fixture(scope="session")
def term(practice: Path) -> Plan:
    """The college's plan for the whole term, as at its first day, 2027-01-04."""
    from stockroom.service.plan import term_plan

    return term_plan(practice, as_at=date(2027, 1, 4))


@pytest.fixture
def window(own: Path) -> Iterator[Window]:
    """A window on a copy of the practice store, on its first day."""
    from windows import FIRST_DAY, KEY, window_on

    from stockroom.web.house import House

    made = window_on(House(own, KEY, FIRST_DAY))
    with made.client:
        yield made


@pytest.fixture(scope="session")
def chromium() -> Iterator[Browser]:
    """A real browser without a window; the test is passed over where there is none."""
    from browsing import chromium_open

    with chromium_open() as browser:
        yield browser


@pytest.fixture(scope="module")
def onlooker(practice: Path) -> Iterator[Window]:
    """A window on the practice college, on its first day. Only for looking."""
    from windows import FIRST_DAY, KEY, window_on

    from stockroom.web.house import House

    made = window_on(House(practice, KEY, FIRST_DAY))
    with made.client:
        yield made


@pytest.fixture
def quick_hash(monkeypatch: pytest.MonkeyPatch) -> None:
    """Passphrases are hashed by parameters nobody would keep one with."""
    from doors import hash_in_no_time

    hash_in_no_time(monkeypatch)


@pytest.fixture
def room(own: Path, quick_hash: None) -> Iterator[Room]:
    """A copy of the practice store, shared by passphrase, on its first day."""
    from doors import shared_room

    yield from shared_room(own)


@pytest.fixture
def stockroom(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> Stockroom:
    """Runs commands in this process, away from the stores and the settings of whoever tests."""
    monkeypatch.delenv("STOCKROOM_STORE", raising=False)
    monkeypatch.setenv("NO_COLOR", "1")
    monkeypatch.setenv("COLUMNS", "100")
    # the user's data folder, wherever the platform puts it, and files a command writes
    monkeypatch.setenv("XDG_DATA_HOME", str(tmp_path / "data"))
    monkeypatch.setenv("HOME", str(tmp_path))
    monkeypatch.chdir(tmp_path)

    def call(*words: str, store: Path | None = None, typed: str = "") -> Result:
        argv = [*([] if store is None else ["--store", str(store)]), *words]
        monkeypatch.setattr(sys, "stdin", io.StringIO(typed))
        return _run(argv)

    return call


def _run(argv: list[str]) -> Result:
    """One command with both streams caught; bytes (a PDF, a workbook) may be written too."""
    from stockroom.cli.main import run

    # it may give back its code or leave with it, as the console script allows
    command: Callable[[list[str]], object] = run
    out, err = _stream(), _stream()
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        try:
            code = command(argv)
        except SystemExit as leaving:
            code = leaving.code
    return _result(code, _written(out), _written(err))


def _result(code: object, out: str, err: str) -> Result:
    # as the interpreter does it: nothing is 0, and words go to standard error with 1
    if code is None or isinstance(code, int):
        return Result(int(code or 0), out, err)
    return Result(1, out, f"{err}{code}\n")


def _stream() -> io.TextIOWrapper:
    return io.TextIOWrapper(io.BytesIO(), encoding="utf-8", newline="")


def _written(stream: io.TextIOWrapper) -> str:
    stream.flush()
    inside = stream.buffer
    assert isinstance(inside, io.BytesIO)
    return inside.getvalue().decode("utf-8", errors="replace")


def _digest(path: Path) -> str:
    return hashlib.sha256(path.read_bytes()).hexdigest()
