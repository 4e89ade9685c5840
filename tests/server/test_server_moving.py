"""A store moved from its file to a server is the same store, or nothing is moved."""

from __future__ import annotations

import shlex
import shutil
from collections.abc import Iterator
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
import server_stores
from sqlmodel import Session

from stockroom.errors import StoreTrouble
from stockroom.measure.amounts import Amount
from stockroom.service import database, moving_house, stock
from stockroom.settings import Server
from stockroom.store import server_moving
from stockroom.store.content import contents, handed_on
from stockroom.store.engine import reader_in, writing
from stockroom.store.reading import reading

if TYPE_CHECKING:
    from conftest import Stockroom

pytestmark = pytest.mark.server

DAY = date(2027, 1, 4)
ODD = 'a "quoted", cell; \\. \\N\r\nand a second line\n\\.\n=1+1 · ³ °'


@pytest.fixture
def empty() -> Iterator[Server]:
    store = server_stores.make(f"house_{server_stores.own_name()}")
    yield store
    server_stores.drop(store)


@pytest.fixture
def file(college_file: Path, tmp_path: Path) -> Path:
    return Path(shutil.copy(college_file, tmp_path / "house.sqlite"))


def tables_of(store: Path | Server) -> list[str]:
    if isinstance(store, Path):
        return []
    with server_stores.raw(store) as raw:
        asked = "SELECT relname FROM pg_class WHERE relkind = 'r' AND relnamespace = 2200"
        return [str(row[0]) for row in raw.execute(asked)]


# every command that says something about a term, each word of it
ASKED = [
    "plan --json",
    "plan",
    "fresh --json",
    "past --on 2027-02-10 --json",
    "usage --json",
    "buying --json",
    "ready K15 --json",
    "why K15.1 --json",
    "diary S13 --json",
    "on-order --json",
    "hazards S06 --json",
    "plan --cautious --json --as-at 2027-02-22",
]


@pytest.mark.parametrize("words", ASKED)
def test_the_answers_are_those_of_the_file_to_the_letter(
    words: str, practice: Server, college_file: Path, stockroom: Stockroom
) -> None:
    on_server, on_file = (
        stockroom(*words.split(), store=each)  # type: ignore[arg-type]
        for each in (practice, college_file)
    )
    assert on_server == on_file
    assert len(on_file.out) > 20


def test_a_move_tells_what_was_compared(empty: Server, file: Path, stockroom: Stockroom) -> None:
    before = file.read_bytes()
    moved = stockroom("move-house", empty.url, store=file)
    assert (moved.code, moved.err.strip()) == (
        0,
        f"next: stockroom --store {shlex.quote(str(empty))} plan",
    )
    assert f"Moved {file} to {empty}" in moved.said
    assert "Compared, and the same: every table row by row" in moved.said
    assert file.read_bytes() == before
    drawn = stockroom("draw", "S13", "30 cm3", "--by", "T1", store=empty)  # type: ignore[arg-type]
    assert drawn.code == 0, drawn.err
    again = stockroom("move-house", empty.url, store=file)
    assert again.code == 1
    assert "is not empty" in again.err


def test_any_text_comes_over_and_numbers_go_on_from_the_last(empty: Server, file: Path) -> None:
    said = database.add_row(file, "places", {"place": "Z9", "name": ODD, "meant_for": ""}, by="T1")
    assert said.text
    stock.draw(file, "S13", Amount.cm3(30), on=None, today=DAY, by="T1")
    moving_house.move_house(file, empty.url, as_at=DAY)
    with reading(file) as ours, reading(empty) as theirs:
        assert contents(ours, handed_on()) == contents(theirs, handed_on())
        last = ours.ask("SELECT MAX(id) FROM entry")[0][0]
    done = stock.draw(empty, "S13", Amount.cm3(1), on=None, today=DAY, by="T1")
    assert done.entry == last + 1


def test_a_copy_that_differs_is_not_left_there(
    empty: Server, file: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    copied = server_moving._copy

    def slip(source: object, session: Session, table: object) -> None:
        copied(source, session, table)  # type: ignore[arg-type]
        if getattr(table, "name", "") == "bottle":
            session.connection().exec_driver_sql("UPDATE bottle SET size = size + 1 WHERE id = 1")

    monkeypatch.setattr(server_moving, "_copy", slip)
    with pytest.raises(StoreTrouble, match="differs in bottle; nothing was moved"):
        moving_house.move_house(file, empty.url, as_at=DAY)
    assert tables_of(empty) == []


def test_a_balance_that_does_not_follow_from_the_ledger_is_noticed(
    empty: Server, file: Path
) -> None:
    with writing(file) as session:
        session.connection().exec_driver_sql("UPDATE kept_balance SET held = 1 WHERE bottle_id = 1")
    with pytest.raises(StoreTrouble, match="differs in kept_balance; nothing was moved"):
        moving_house.move_house(file, empty.url, as_at=DAY)
    assert tables_of(empty) == []


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (["move-house", "elsewhere.sqlite"], 2, "is not the address of a server"),
        (["move-house", "postgresql+psycopg://x@127.0.0.1:1/y"], 1, "No server answers"),
    ],
)
def test_a_move_that_cannot_be_is_refused(
    words: list[str], code: int, said: str, file: Path, stockroom: Stockroom
) -> None:
    refused = stockroom(*words, store=file)
    assert refused.code == code
    assert said in refused.err


def test_from_a_server_the_way_is_handing_out(
    practice: Server, empty: Server, stockroom: Stockroom
) -> None:
    refused = stockroom("move-house", empty.url, store=practice)  # type: ignore[arg-type]
    assert refused.code == 2
    assert "hand-out" in refused.err


def test_handed_out_from_a_server_it_is_the_same_store_in_a_file(
    practice: Server, college_file: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    handed = stockroom("hand-out", str(tmp_path / "out"), store=practice)  # type: ignore[arg-type]
    assert handed.code == 0, handed.err
    back = tmp_path / "back.sqlite"
    assert stockroom("new", "--from", str(tmp_path / "out"), store=back).code == 0
    with reading(back) as ours, reading(college_file) as theirs:
        assert contents(ours, handed_on()) == contents(theirs, handed_on())


def test_verify_proves_a_server_and_sees_a_guard_that_was_put_away(
    own: Server, stockroom: Stockroom
) -> None:
    assert stockroom("verify", store=own).code == 0  # type: ignore[arg-type]
    with server_stores.raw(own) as raw:
        raw.execute("ALTER TABLE entry DISABLE TRIGGER entry_no_update")
        raw.execute("UPDATE entry SET change = change + 1 WHERE id = 1")
    found = stockroom("verify", store=own)  # type: ignore[arg-type]
    assert found.code == 1
    assert "entry_no_update" in found.said
    assert "2 findings" in found.said


def test_a_store_made_on_the_server_itself_is_that_of_the_file(
    empty: Server, college_file: Path
) -> None:
    database.new_store(empty, tables=database.seeds_folder() / "college")
    with writing(empty) as session, reading(college_file) as file:
        ours, theirs = contents(file, handed_on()), contents(reader_in(session), handed_on())
    # the moments of entry are the clock's
    differing = {table for table, content in ours.items() if theirs[table] != content}
    assert differing <= {"entry", "row_change", "booking_change"}
    assert {t: c.rows for t, c in ours.items()} == {t: c.rows for t, c in theirs.items()}


def test_the_practice_store_is_a_file(empty: Server, stockroom: Stockroom) -> None:
    refused = stockroom("demo", store=empty)  # type: ignore[arg-type]
    assert refused.code == 2
    assert "The practice store is a file" in refused.err
    assert tables_of(empty) == []
