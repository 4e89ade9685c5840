"""`bring-in`: shown first, written when agreed, all at once, and never twice."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from shlex import quote
from typing import TYPE_CHECKING, Any

import pytest
from old_spreadsheet import OLD, SETTLED, reader_of, rows_of, table
from test_light_reading import RUN, left_loaded

from stockroom.service.database import new_store, starter_folder
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts

if TYPE_CHECKING:
    from conftest import Result, Stockroom

SAID = [word for answer in SETTLED for word in ("--answer", answer)]
TODAY = date(2027, 1, 4)


@pytest.fixture
def old(tmp_path: Path) -> Path:
    path = tmp_path / "old.csv"
    path.write_text(OLD, encoding="utf-8")
    return path


def held(store: Path) -> tuple[int, ...]:
    """How many bottles and entries a store holds."""
    with reading(store) as reader:
        asked = ("SELECT count(*) FROM bottle", "SELECT count(*) FROM entry")
        return tuple(reader.ask(each)[0][0] for each in asked)


def agree(stockroom: Stockroom, store: Path, file: Path, *more: str) -> Result:
    return stockroom("bring-in", str(file), *SAID, *more, "--agree", "--by", "T1", store=store)


def list_of(tmp_path: Path, text: str) -> str:
    path = tmp_path / "list.csv"
    path.write_text(text, encoding="utf-8")
    return str(path)


# -- shown first ----------------------------------------------------------------------


@pytest.mark.file
def test_nothing_is_written_until_it_is_agreed(stockroom: Stockroom, own: Path, old: Path) -> None:
    before = own.read_bytes()
    result = stockroom("bring-in", str(old), *SAID, store=own)
    assert (result.code, own.read_bytes() == before) == (0, True)
    assert "Nothing is written yet; --agree would bring in 13 bottles." in result.out


def test_every_row_is_shown_with_its_column_value_and_reason(
    stockroom: Stockroom, practice: Path, old: Path
) -> None:
    result = stockroom("bring-in", str(old), store=practice)
    assert result.out.startswith("PRACTICE\n")
    assert "3 accepted, 8 accepted with a question, 3 refused" in result.out
    assert 'exp → printed: "03/2027", "Oct-26", "04/05/27"' in result.out
    assert 'exp "31/02/2028": February 2028 has 29 days.' in result.said
    assert 'amount "3/4": of how big a bottle?' in result.said
    assert "--answer dates=day-first or --answer dates=month-first" in result.said
    assert '--answer "3.strength=100 vol"' in result.said
    for number in range(1, 15):
        assert f"  row {number}, line {number + 1}: " in result.out
    assert f"next: stockroom --store {quote(str(practice))} bring-in" in result.err


def test_every_answer_shown_can_be_given(stockroom: Stockroom, practice: Path, old: Path) -> None:
    read = reader_of(practice)
    asked = stockroom("bring-in", str(old), "--json", store=practice).json["questions"]
    for question in asked:
        for option in question["options"]:
            left = {(each.key, each.text) for each in read(OLD, option).questions}
            assert (question["key"], question["text"]) not in left, option


def test_programs_get_every_row(stockroom: Stockroom, practice: Path, old: Path) -> None:
    data: dict[str, Any] = stockroom("bring-in", str(old), "--json", store=practice).json
    assert data["counts"] == {
        "accepted": 3, "asked": 8, "refused": 3, "held": 0, "left_out": 0
    }  # fmt: skip
    fourth = data["rows"][3]
    assert (fourth["item"], fourth["amount"], fourth["unit"]) == (
        "hydrogen peroxide 20 vol", 180, "cm3",
    )  # fmt: skip
    assert (fourth["opened"], fourth["printed"]) == ("2025-11-03", ["2026-10-31"])
    assert data["practice"] is True


@pytest.mark.file
def test_looking_loads_nothing_heavy(practice: Path, old: Path, tmp_path: Path) -> None:
    words = ("--store", str(practice), "bring-in", str(old))
    loaded, out = left_loaded(RUN, *words, folder=tmp_path)
    assert (loaded, "QUESTIONS" in out) == ([], True)


# -- agreed ---------------------------------------------------------------------------


def test_what_is_agreed_stands_on_the_shelf(stockroom: Stockroom, own: Path, old: Path) -> None:
    result = agree(stockroom, own, old)
    assert "Brought in 13 bottles: B46 to B57, S25." in result.said
    assert stockroom("verify", store=own).code == 0
    shelf = {bottle.number: bottle for bottle in facts(own, TODAY).bottles}
    first, missing, made = shelf["B46"], shelf["B57"], shelf["S25"]
    assert (first.line, first.left, first.place) == (
        "sodium thiosulfate pentahydrate", 640_000_000, "A2",
    )  # fmt: skip
    assert first.record.opened == date(2025, 9, 8)
    # nobody wrote when it came, and nothing is made up: the day it was opened dates it
    assert (first.record.received, first.record.undated) == (None, False)
    assert (missing.record.not_found, missing.place) == (True, "")
    assert (made.line, made.left, made.made_here) == (
        "potassium permanganate 0.0200 mol/dm3", 950_000, True,
    )  # fmt: skip


def test_brought_in_twice_it_is_there_once(stockroom: Stockroom, own: Path, old: Path) -> None:
    agree(stockroom, own, old)
    once = held(own)
    result = agree(stockroom, own, old)
    assert (result.code, held(own)) == (0, once)
    assert "13 here already" in result.out
    assert "Here already: B46 to B57, S25." in result.out


def test_turned_round_renamed_and_saved_otherwise_it_is_known_again(
    stockroom: Stockroom, own: Path, old: Path, tmp_path: Path
) -> None:
    agree(stockroom, own, old)
    once = held(own)
    rows = rows_of()
    turned = [each[::-1] for each in [rows[0], *rows[:0:-1]]]
    other = tmp_path / "stock final (2).csv"
    other.write_bytes(table(turned, ";", "\r\n").encode("utf-16"))
    result = stockroom("bring-in", str(other), "--agree", "--by", "T1", store=own)
    assert "13 here already" in result.out
    # the row that was left out is asked about anew
    assert (result.code, held(own)) == (1, once)


def test_rows_that_wait_come_in_later_and_the_others_stay_once(
    stockroom: Stockroom, own: Path, old: Path
) -> None:
    words = ("bring-in", str(old), "--agree", "--by", "T1")
    first = stockroom(*words, store=own)
    assert "Brought in 4 bottles: B46, S25, B47, B48." in first.said
    second = agree(stockroom, own, old)
    assert "Brought in 9 bottles" in second.said
    assert held(own)[0] == 75 + 13


def test_answers_may_stand_in_a_file(
    stockroom: Stockroom, own: Path, old: Path, tmp_path: Path
) -> None:
    path = tmp_path / "answers.txt"
    path.write_text("# settled with T1\n" + "\n".join(SETTLED), encoding="utf-8")
    result = stockroom(
        "bring-in", str(old), "--answers", str(path), "--agree", "--by", "T1", store=own
    )
    assert "Brought in 13 bottles" in result.said


def test_one_can_be_taken_back_and_its_row_brought_in_again(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    file = list_of(tmp_path, "name,amount,opened\nKI,5 g,13/05/2026\n")
    words = ("bring-in", file, "--agree", "--by", "T1")
    number = stockroom(*words, "--json", store=own).json["rows"][0]["bottles"][0]
    with reading(own) as reader:
        rows = reader.ask(
            "SELECT entry.id FROM entry JOIN bottle ON bottle.id = bottle_id"
            " WHERE number = ? ORDER BY entry.id DESC",
            number,
        )
    for row in rows:
        undone = stockroom("put-right", str(row[0]), "--why", "slip", "--by", "T1", store=own)
        assert undone.code == 0, undone.err
    again = stockroom(*words, store=own)
    assert "Brought in 1 bottle" in again.out


def test_what_was_thrown_away_since_is_not_brought_in_again(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    file = list_of(tmp_path, "name,amount\nKI,5 g\n")
    words = ("bring-in", file, "--agree", "--by", "T1")
    number = stockroom(*words, "--json", store=own).json["rows"][0]["bottles"][0]
    gone = stockroom("discard", number, "--how", "bin", "--why", "past", "--by", "T1", store=own)
    assert gone.code == 0, gone.err
    assert "1 here already" in stockroom(*words, store=own).out


def test_several_alike_get_numbers_of_their_own_and_count_down(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    file = list_of(tmp_path, "name,amount,size,received\nKI,2 x 100 g,250 g,2026-01-12\n")
    result = stockroom("bring-in", file, "--agree", "--by", "T1", store=own)
    assert "Brought in 2 bottles: B46, B47." in result.out
    shelf = {bottle.number: bottle for bottle in facts(own, TODAY).bottles}
    assert [(shelf[each].left, shelf[each].size) for each in ("B46", "B47")] == [
        (100_000_000, 250_000_000)
    ] * 2
    # before it was counted it held what it held when it came
    earlier = {bottle.number: bottle for bottle in facts(own, date(2026, 6, 1)).bottles}
    assert earlier["B46"].left == 250_000_000


# -- refused --------------------------------------------------------------------------


def test_a_column_not_understood_must_be_settled_first(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    file = list_of(tmp_path, "name,amount,supplier\nKI,5 g,Hobbs\n")
    before = held(own)
    words = ("bring-in", file, "--agree", "--by", "T1")
    result = stockroom(*words, store=own)
    assert (result.code, held(own)) == (1, before)
    assert 'Column "supplier" is not understood ("Hobbs"). Nothing was written.' in result.err
    kept = stockroom(*words, "--column", "supplier=note", store=own)
    assert kept.code == 0
    [bottle] = [each for each in facts(own, TODAY).bottles if each.number == "B46"]
    assert bottle.remark == "supplier: Hobbs"


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (["--agree"], 2, "Whose initials?"),
        (["--answer", "dates=maybe"], 2, 'dates is not answered by "maybe"'),
        (["--answer", "99.name=KI"], 2, "There is no row 99"),
        (["--column", "colour=note"], 2, 'no heading "colour"'),
        (["--sheet", "acids"], 2, "has one sheet only"),
        (["--answers", "none.txt"], 2, "There is no file none.txt"),
        (["--encoding", "klingon"], 2, "I know no such encoding"),
    ],
)
def test_what_is_typed_wrongly_is_told(
    stockroom: Stockroom, practice: Path, old: Path, words: list[str], code: int, said: str
) -> None:
    result = stockroom("bring-in", str(old), *words, store=practice)
    assert (result.code, said in result.err) == (code, True)


def test_a_file_that_is_not_there_or_no_list_is_told(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    assert "There is no file" in stockroom("bring-in", "gone.csv", store=practice).err
    other = tmp_path / "house.sqlite"
    other.write_bytes(b"SQLite format 3\x00" + bytes(80))
    result = stockroom("bring-in", str(other), store=practice)
    assert (result.code, "a database" in result.err) == (2, True)


def test_a_fault_halfway_leaves_the_store_as_it_was(
    stockroom: Stockroom, own: Path, old: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.errors import StoreTrouble
    from stockroom.service import bring_in_writing
    from stockroom.store import brought_in

    def cut_off(*given: Any) -> list[str]:
        brought_in.add_bottles(*given)
        raise StoreTrouble("The disc is full.")

    monkeypatch.setattr(bring_in_writing, "add_bottles", cut_off)
    before = held(own)
    assert agree(stockroom, own, old).code == 1
    assert held(own) == before


# -- a house of one's own -------------------------------------------------------------


def test_a_house_that_has_just_begun_says_what_it_lacks(
    stockroom: Stockroom, old: Path, tmp_path: Path
) -> None:
    store = tmp_path / "house.sqlite"
    new_store(store, tables=starter_folder())
    words = ("bring-in", str(old), *SAID, "--as-at", "2027-01-04", "--by", "T1")
    shown = stockroom(*words, store=store)
    # it has no places yet, and nothing is put nowhere without being asked
    assert 'no such place; to add it: stockroom add places place="A2"' in shown.said
    nowhere = [f"--answer={row}.place=none" for row in (1, 3, 5, 6, 7, 8, 11)]
    done = stockroom(*words, *nowhere, "--agree", store=store)
    assert "Brought in 13 bottles" in done.said
    lines = {bottle.line for bottle in facts(store, TODAY).bottles}
    assert {"sodium thiosulfate, anhydrous", "ammonia 35 % w/w", "DCPIP sodium salt"} < lines


def test_a_house_without_any_line_refuses_every_row(
    stockroom: Stockroom, old: Path, tmp_path: Path
) -> None:
    store = tmp_path / "empty.sqlite"
    new_store(store)
    result = stockroom("bring-in", str(old), "--json", store=store)
    assert result.json["counts"]["accepted"] == 0
    assert result.code == 0
