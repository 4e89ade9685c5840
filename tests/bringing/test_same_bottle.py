"""A row comes back: as it was, otherwise written, or with something changed."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from old_spreadsheet import Read, reader_of
from openpyxl import Workbook

from stockroom.bringing.here import UNOPENED, Here, Standing, standing_by_key
from stockroom.bringing.known import KnownLine
from stockroom.bringing.row import Incoming
from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.store.reading import reading

if TYPE_CHECKING:
    from conftest import Result, Stockroom

LIST = "name,amount,unit,opened,where,note\nKI,90,g,08/09/2025,A2,ours\nLiCl,40,g,,A2,\n"
OPEN = ["--answer", "dates=day-first", "--answer", "names=yes"]


def bottles(store: Path) -> int:
    with reading(store) as reader:
        return int(reader.ask("SELECT count(*) FROM bottle")[0][0])


def brought(stockroom: Stockroom, store: Path, file: Path, *more: str) -> Result:
    words = (*OPEN, *more, "--agree", "--by", "T1")
    return stockroom("bring-in", str(file), *words, store=store)


@pytest.fixture
def listed(stockroom: Stockroom, own: Path, tmp_path: Path) -> Path:
    path = tmp_path / "list.csv"
    path.write_text(LIST, encoding="utf-8")
    assert "Brought in 2 bottles" in brought(stockroom, own, path).out
    return path


@pytest.mark.parametrize(
    ("old", "new"), [("90,g", "70,g"), ("ours", "ours; checked"), ("40,g", "38,g")]
)
def test_a_row_with_something_changed_is_asked_about_and_not_written(
    stockroom: Stockroom, own: Path, listed: Path, old: str, new: str
) -> None:
    once = bottles(own)
    listed.write_text(LIST.replace(old, new), encoding="utf-8")
    asked = brought(stockroom, own, listed)
    assert (asked.code, bottles(own)) == (1, once)
    assert "waits for changed" in asked.said
    assert "1 here already" in asked.out
    left = brought(stockroom, own, listed, "--answer", "changed=leave-out")
    assert (left.code, bottles(own)) == (0, once)
    second = brought(stockroom, own, listed, "--answer", "changed=second")
    assert (second.code, bottles(own)) == (0, once + 1)


def test_a_new_row_like_one_that_still_stands_in_the_list_is_new(
    stockroom: Stockroom, own: Path, listed: Path
) -> None:
    once = bottles(own)
    listed.write_text(f"{LIST}LiCl,250,g,,A2,\n", encoding="utf-8")
    assert (brought(stockroom, own, listed).code, bottles(own)) == (0, once + 1)


def test_opened_here_since_it_is_the_same_bottle_still(
    stockroom: Stockroom, own: Path, listed: Path
) -> None:
    assert stockroom("open", "B47", "--by", "T1", store=own).code == 0
    once = bottles(own)
    listed.write_text(LIST.replace("40,g", "35,g"), encoding="utf-8")
    assert (brought(stockroom, own, listed).code, bottles(own)) == (1, once)


def test_a_workbook_of_real_dates_is_the_list_of_texts_again(
    stockroom: Stockroom, own: Path, listed: Path, tmp_path: Path
) -> None:
    once = bottles(own)
    made = Workbook()
    sheet = made.active
    assert sheet is not None
    sheet.append(["name", "amount", "unit", "opened", "where", "note"])
    sheet.append(["KI", 90, "g", date(2025, 9, 8), "A2", "ours"])
    sheet.append(["LiCl", 40, "g", None, "A2", None])
    path = tmp_path / "list.xlsx"
    made.save(path)
    again = brought(stockroom, own, path)
    assert (again.code, bottles(own)) == (0, once)
    assert "2 here already" in again.out


def test_a_row_is_sooner_a_bottle_of_a_list_than_one_of_no_list() -> None:
    bottle = Standing("B01", "KI", frozenset({"A2"}), 0, frozenset({UNOPENED}), None)
    of_list = replace(bottle, number="B46", listed=True)
    here = Here(standing=standing_by_key([bottle, of_list]))
    said = Incoming(KnownLine("KI", "KI", "solid", Kind.MASS), Amount.grams(5), place="A2")
    found = [here.like(said, claimed) for claimed in ((), ("B46",), ("B46", "B01"))]
    assert [each and each.number for each in found] == ["B46", "B01", None]


# -- marks ----------------------------------------------------------------------------


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


def test_a_day_opened_is_no_day_received(read: Read) -> None:
    head = "name,amount,opened,received\n"
    one = read(f"{head}KI,5 g,2026-03-01,2026-02-01\n").rows[0].mark
    other = read(f"{head}KI,5 g,2026-02-01,2026-03-01\n").rows[0].mark
    turned = read("received,opened,amount,name\n2026-02-01,2026-03-01,5 g,KI\n").rows[0].mark
    assert one == turned != other


def test_a_column_kept_or_left_out_is_the_same_row(read: Read) -> None:
    text = "name,amount,seller\nKI,5 g,Hobbs\n"
    marks = {read(text, columns=[f"seller={as_}"]).rows[0].mark for as_ in ("note", "leave-out")}
    assert len(marks) == 1


# -- answers --------------------------------------------------------------------------


def test_an_answer_may_quote_its_cell(read: Read) -> None:
    answer = '1.name("Silver nit.")=silver nitrate'
    assert read("name,amount\nSilver nit.,5 g\n", answer).rows[0].goes_in
    shifted = "name,amount\nhypo anhyd,1 g\nSilver nit.,5 g\n"
    with pytest.raises(BadInput, match='name of row 1 says "hypo anhyd"') as refused:
        read(shifted, answer)
    assert "Row 2 says so now" in refused.value.hint


def test_an_answer_to_a_cell_that_asks_nothing_is_refused(read: Read) -> None:
    text = "name,amount\nKI,5 g\nSilver nit.,5 g\n"
    with pytest.raises(BadInput, match="row 1 asks nothing of it") as refused:
        read(text, "1.name=silver nitrate")
    assert refused.value.hint.startswith("2.name is asked")
    # quoted, it is that cell and no other that is put right
    put_right = read(text, '1.name("KI")=sodium chloride').rows[0].incoming
    assert put_right is not None
    assert put_right.line is not None
    assert put_right.line.key == "sodium chloride"


def test_one_unit_answers_for_rows_that_say_the_same(read: Read) -> None:
    text = "name,amount\nKI,approx 200\nNaCl,300\nKI,approx 200\n"
    found = read(text, "1.unit=g", "3=second")
    assert [each.goes_in for each in found.rows] == [True, False, True]


# -- told -----------------------------------------------------------------------------


def listing(tmp_path: Path, text: str) -> str:
    path = tmp_path / "l.csv"
    path.write_text(text, encoding="utf-8")
    return str(path)


def test_what_the_list_called_it_stands_beside_the_line(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    text = "name,amount,a,b\nKI,5 g,x,y\nMystery white powder,6 g,x,y\n"
    result = stockroom("bring-in", listing(tmp_path, text), store=practice)
    assert 'potassium iodide from "KI"' in result.said
    assert "2 columns must be named first" in result.said
    assert "stockroom unknown" in result.said
    assert "--answer 2=leave-out" in result.said
    assert result.err.rstrip().endswith("--column a=note")


def test_a_name_nobody_knows_is_never_the_next_thing_to_type(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    file = listing(tmp_path, "name,amount\nMystery white powder,6 g\n")
    result = stockroom("bring-in", file, store=practice)
    assert result.err.startswith("next: stockroom")
    assert "unknown" in result.err
    assert "--answer" not in result.err


def test_many_questions_of_a_kind_are_told_in_few_lines(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    file = listing(tmp_path, "name,amount\n" + "".join(f"KI,{at}\n" for at in range(1, 400)))
    shown = stockroom("bring-in", file, store=practice).out
    questions = shown.partition("QUESTIONS")[2].partition("\n\n")[0]
    assert "and 396 more like it" in questions
    assert len(questions.splitlines()) < 20


def test_columns_may_be_named_in_the_file_of_answers(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    file, answers = listing(tmp_path, "name,amount,seller\nKI,5 g,Hobbs\n"), tmp_path / "a.txt"
    answers.write_text("column seller=note\n", encoding="utf-8")
    result = brought(stockroom, own, Path(file), "--answers", str(answers))
    assert "Brought in 1 bottle" in result.out


def test_a_folder_or_a_device_is_told_for_what_it_is(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    assert "is a folder" in stockroom("bring-in", str(tmp_path), store=practice).err
    assert "a device or a pipe" in stockroom("bring-in", "/dev/null", store=practice).err
