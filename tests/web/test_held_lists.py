"""Lists held between two requests: whose they are, how long, how many, and on a full disc."""

from __future__ import annotations

import errno
import os
import tempfile
import time
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from lists_given import bottles, give, path_of
from old_spreadsheet import OLD
from windows import window_on

from stockroom.web import held_files

if TYPE_CHECKING:
    from windows import Window


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Lists of a test are held in a folder of its own."""
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    return tmp_path


def test_it_is_held_where_nobody_else_can_read(window: Window, folder: Path) -> None:
    give(window, OLD)
    held = next(folder.rglob("*.list"))
    assert held.stat().st_mode & 0o077 == 0
    assert held.parent.stat().st_mode & 0o077 == 0


def test_a_folder_open_to_others_holds_nothing(window: Window, folder: Path) -> None:
    give(window, OLD)
    next(folder.rglob("*.list")).parent.chmod(0o755)
    assert give(window, OLD).status == 503


def test_what_is_old_is_swept_and_what_is_many_makes_room(
    window: Window, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(held_files, "MOST_HELD", 3)
    first = path_of(give(window, OLD))
    old = time.time() - held_files.KEPT - 10
    os.utime(next(folder.rglob("*.list")), (old, old))
    for _ in range(4):
        last = path_of(give(window, "name,amount\npotassium iodide,5 g\n"))
    assert len(list(folder.rglob("*.list"))) == 3
    assert (window.get(first).status, window.get(last).status) == (404, 200)


def test_a_list_put_away_is_gone(window: Window, folder: Path) -> None:
    address = path_of(give(window, OLD))
    window.post(f"{address}/away")
    assert window.get(address).status == 404
    assert not list(folder.rglob("*.list"))


def test_one_who_gives_many_lists_takes_no_room_from_another(
    window: Window, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(held_files, "MOST_HELD", 1)
    other = window_on(window.house)
    first = path_of(give(other, OLD))
    for _ in range(2):
        give(window, OLD)
    assert (other.get(first).status, len(list(folder.rglob("*.list")))) == (200, 2)


def test_a_server_that_begins_or_ends_takes_away_what_is_old_and_nothing_else(
    window: Window, folder: Path
) -> None:
    old, young = path_of(give(window, OLD)), path_of(give(window, OLD))
    long_ago = time.time() - held_files.KEPT - 10
    first = min(folder.rglob("*.list"), key=lambda path: path.stat().st_mtime)
    os.utime(first, (long_ago, long_ago))
    with window_on(window.house).client:
        left = len(list(folder.rglob("*.list")))
    assert (left, window.get(old).status, window.get(young).status) == (1, 404, 200)


def test_a_server_begins_where_no_list_was_held_or_the_folder_is_open(
    window: Window, folder: Path
) -> None:
    held_files.sweep_lists()
    assert not list(folder.glob("stockroom-lists-*"))
    give(window, OLD)
    next(folder.rglob("*.list")).parent.chmod(0o755)
    held_files.sweep_lists()


def full(monkeypatch: pytest.MonkeyPatch) -> None:
    """From now on no file can be put in the place of another."""

    def replace(self: Path, target: Path) -> Path:
        raise OSError(errno.ENOSPC, "No space left on device")

    monkeypatch.setattr(Path, "replace", replace)


def test_on_a_full_disc_nothing_is_held_nothing_left_and_it_is_told(
    window: Window, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    full(monkeypatch)
    page = give(window, OLD)
    assert (page.status, "No space left on device" in page.text) == (503, True)
    assert not list(folder.rglob("*.new")) + list(folder.rglob("*.list"))


def test_rows_that_are_in_are_told_as_in_though_the_disc_is_full_by_then(
    window: Window, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    address, before = path_of(give(window, OLD)), len(bottles(own))
    with monkeypatch.context() as patched:
        full(patched)
        page = window.post(f"{address}/agree", by="T1")
    assert (page.status, "The rows are in the store" in page.text) == (503, True)
    assert len(bottles(own)) == before + 4
