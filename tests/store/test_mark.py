"""The mark of a store: another after anything at all was saved, the same while nothing was."""

from __future__ import annotations

import os
import sqlite3
import subprocess
import sys
import threading
import time
from collections.abc import Callable, Iterator
from concurrent.futures import ThreadPoolExecutor
from contextlib import closing
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.measure.amounts import Amount
from stockroom.service import bookings, stock
from stockroom.service.backup import backup
from stockroom.service.plan import term_plan
from stockroom.service.restore import restore
from stockroom.settings import StoreAt
from stockroom.store import mark
from stockroom.store.mark import Marks

if TYPE_CHECKING:
    from conftest import Stockroom

TODAY = date(2027, 1, 4)
DRAW = "from pathlib import Path; from datetime import date\nimport sys\n" + (
    "from stockroom.service import stock; from stockroom.measure.amounts import Amount\n"
    "stock.draw(Path(sys.argv[1]), 'S13', Amount.cm3(1), on=None,"
    " today=date(2027, 1, 4), by='T1')\n"
)


@pytest.fixture
def marks() -> Iterator[Marks]:
    """Marks that let go as soon as nobody asks for a tenth of a second."""
    made = Marks(let_go_after=0.1)
    yield made
    made.close()


def draw(path: StoreAt) -> None:
    """An entry in the ledger."""
    stock.draw(path, "S13", Amount.cm3(1), on=None, today=TODAY, by="T1")


def shift(path: StoreAt) -> None:
    """A booking moved: no ledger knows of it."""
    bookings.shift(path, "K08", groups=11, today=TODAY, by="T1")


def by_hand(path: Path) -> None:
    """A row changed by a program that is none of ours."""
    with closing(sqlite3.connect(path)) as link, link:
        link.execute("UPDATE house SET value = 'Another name' WHERE setting = 'name'")


def in_another_process(path: Path) -> None:
    """An entry by a process of its own, over before this goes on."""
    subprocess.run([sys.executable, "-c", DRAW, str(path)], check=True)


def rested(marks: Marks, path: Path) -> None:
    """Wait until the store is let go of."""
    for _ in range(100):
        if not Path(f"{path}-shm").exists():
            return
        time.sleep(0.05)
    raise AssertionError(f"{path} is still held")


@pytest.mark.file
def test_asked_again_it_is_the_same(practice: Path, marks: Marks) -> None:
    first = marks.of(practice)
    term_plan(practice, as_at=TODAY)
    assert first is not None
    assert marks.of(practice) == first


@pytest.mark.parametrize("write", [draw, shift])
def test_whatever_is_saved_it_is_another(
    own: Path, marks: Marks, write: Callable[[StoreAt], None]
) -> None:
    first = marks.of(own)
    write(own)
    second = marks.of(own)
    assert None not in (first, second)
    assert first != second == marks.of(own)


@pytest.mark.file
@pytest.mark.parametrize("write", [by_hand, in_another_process])
def test_whoever_saves_it_is_another(
    own: Path, marks: Marks, write: Callable[[Path], None]
) -> None:
    first = marks.of(own)
    write(own)
    assert marks.of(own) != first


def test_a_cell_changed_by_command_makes_it_another(
    own: Path, marks: Marks, stockroom: Stockroom
) -> None:
    first = marks.of(own)
    words = ["change", "departments", "CH", "left_gbp=50", "--why", "order of May", "--by", "T1"]
    done = stockroom(*words, store=own)
    assert done.code == 0, done.err
    assert marks.of(own) != first


@pytest.mark.file
def test_let_go_of_it_is_still_the_same_where_nothing_was_saved(own: Path, marks: Marks) -> None:
    first = marks.of(own)
    rested(marks, own)
    assert marks.of(own) == first


@pytest.mark.file
@pytest.mark.parametrize("write", [draw, by_hand, in_another_process])
def test_saved_while_nobody_held_it_open_it_is_another(
    own: Path, marks: Marks, write: Callable[[Path], None]
) -> None:
    first = marks.of(own)
    rested(marks, own)
    write(own)
    assert marks.of(own) != first


@pytest.mark.file
def test_after_a_saving_it_is_the_same_again_once_it_was_let_go_of(own: Path, marks: Marks) -> None:
    marks.of(own)
    draw(own)
    second = marks.of(own)
    rested(marks, own)
    assert marks.of(own) == second


@pytest.mark.file
def test_saved_unseen_before_it_is_let_go_of_it_is_another(own: Path, marks: Marks) -> None:
    first = marks.of(own)
    draw(own)
    # nobody asks in between: only the letting go can have noticed
    rested(marks, own)
    assert marks.of(own) != first


@pytest.mark.file
def test_let_go_of_the_file_has_everything_and_nothing_lies_beside_it(
    own: Path, marks: Marks
) -> None:
    marks.of(own)
    draw(own)
    rested(marks, own)
    assert [each.name for each in own.parent.glob("own.sqlite*")] == ["own.sqlite"]


@pytest.mark.file
def test_another_file_under_its_name_makes_it_another(
    own: Path, marks: Marks, tmp_path: Path, college_file: Path
) -> None:
    first = marks.of(own)
    other = tmp_path / "other.sqlite"
    other.write_bytes(college_file.read_bytes())
    os.replace(other, own)
    assert marks.of(own) != first


@pytest.mark.file
def test_a_backup_can_be_put_back_while_pages_are_asked_for(own: Path, tmp_path: Path) -> None:
    # never let go of by itself: only the restore makes it
    marks, over = Marks(let_go_after=60), threading.Event()
    backup(own, tmp_path / "copies", today=TODAY, by="T1")
    [copy] = (tmp_path / "copies").glob("*.sqlite")

    def ask() -> None:
        while not over.wait(0.01):
            marks.of(own)

    asking = threading.Thread(target=ask)
    asking.start()
    try:
        assert restore(own, copy, named=True, today=TODAY).text.startswith("Restored")
    finally:
        over.set()
        asking.join()
        marks.close()


@pytest.mark.file
@pytest.mark.parametrize("content", [None, b"", b"no store at all, and longer than a page" * 200])
def test_what_is_no_store_has_no_mark(tmp_path: Path, marks: Marks, content: bytes | None) -> None:
    path = tmp_path / "strange.sqlite"
    if content is not None:
        path.write_bytes(content)
    if content == b"":
        # an empty file is an empty store to the driver, and stays as it is
        assert marks.of(path) == marks.of(path)
    else:
        assert marks.of(path) is None


def test_many_threads_see_each_saving(own: Path, marks: Marks) -> None:
    seen: list[str | None] = []

    def look() -> None:
        seen.extend(marks.of(own) for _ in range(50))

    threads = [threading.Thread(target=look) for _ in range(8)]
    for each in threads:
        each.start()
    for _ in range(5):
        before = marks.of(own)
        draw(own)
        assert marks.of(own) != before
    for each in threads:
        each.join()
    assert len(seen) == 400
    assert None not in seen


def test_a_store_that_does_not_answer_keeps_nobody_from_another(
    marks: Marks, monkeypatch: pytest.MonkeyPatch
) -> None:
    answers = threading.Event()

    class Hung:
        def mark(self) -> str | None:
            return str(answers.wait(10))

        def rest(self) -> bool:
            return True

        close = rest

    class Quick(Hung):
        def mark(self) -> str | None:
            return "1"

    monkeypatch.setattr(mark, "_watch_on", lambda path: Hung() if path.name == "hung" else Quick())
    waiting = threading.Thread(target=marks.of, args=(Path("hung"),))
    waiting.start()
    try:
        asked = ThreadPoolExecutor().submit(marks.of, Path("quick"))
        assert asked.result(timeout=5) == "1"
    finally:
        answers.set()
        waiting.join()
