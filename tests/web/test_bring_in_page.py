"""Bringing in a list through the pages: the same as `stockroom bring-in`, and nothing trusted."""

from __future__ import annotations

import io
import tempfile
import zipfile
from pathlib import Path
from typing import TYPE_CHECKING

import openpyxl
import pytest
from lists_given import bottles, give, path_of
from old_spreadsheet import OLD, SETTLED, reader_of
from windows import window_on

from stockroom.web import held_files

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Lists of a test are held in a folder of its own."""
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    return tmp_path


def workbook(rows: list[list[object]]) -> bytes:
    book, out = openpyxl.Workbook(), io.BytesIO()
    for row in rows:
        book.worksheets[0].append(row)
    book.save(out)
    return out.getvalue()


# -- the old spreadsheet, from end to end ----------------------------------------------


def test_every_row_is_shown_first_and_nothing_is_written(window: Window) -> None:
    before = bottles(window.house.path)
    page = give(window, OLD)
    assert page.status == 200
    assert "3 refused, 8 accepted with a question, 3 accepted" in page.text
    for row in range(1, 15):
        assert f"{row} line {row + 1}" in page.text
    assert bottles(window.house.path) == before


def test_every_question_is_asked_with_its_answers(window: Window, practice: Path) -> None:
    page = give(window, OLD)
    questions = reader_of(practice)(OLD).questions
    assert len(questions) == 14
    for question in questions:
        for option in question.options:
            assert f'value="{question.key}={option}"' in page.html


@pytest.mark.file
def test_agreed_through_the_pages_it_is_what_the_command_brings_in(
    window: Window, stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    page = give(window, OLD)
    page = window.post(path_of(page), lines="\n".join(SETTLED))
    assert "Bring in 13 bottles" in page.text
    page = window.post(f"{path_of(page)}/agree", by="T1")
    assert "Brought in 13 bottles" in page.text
    other = tmp_path / "other.sqlite"
    other.write_bytes(practice.read_bytes())
    (tmp_path / "old.csv").write_text(OLD)
    said = [word for answer in SETTLED for word in ("--answer", answer)]
    stockroom("bring-in", str(tmp_path / "old.csv"), *said, "--agree", "--by", "T1", store=other)
    assert bottles(window.house.path) == bottles(other)


def test_answers_are_taken_one_after_the_other(window: Window) -> None:
    page = give(window, OLD)
    page = window.post(path_of(page), **{"chosen.dates": "dates=day-first"})
    assert "dates=day-first</textarea>" in page.html
    page = window.post(path_of(page), lines="dates=day-first", **{"typed.7.amount": "560 cm3"})
    assert "dates=day-first\n7.amount=560 cm3</textarea>" in page.html
    page = window.post(path_of(page), lines="7.amount=560 cm3")
    assert 'name="chosen.dates"' in page.html


def test_what_is_settled_goes_in_and_the_rest_is_told(window: Window) -> None:
    page = window.post(f"{path_of(give(window, OLD))}/agree", by="T1")
    assert "Brought in 4 bottles" in page.text
    assert "What still waits stands below, with why." in page.text
    assert "Here already: 4 rows" in page.text


def test_agreed_twice_adds_nothing_twice(window: Window) -> None:
    address = path_of(give(window, OLD))
    window.post(f"{address}/agree", by="T1")
    before = bottles(window.house.path)
    assert "Brought in 4 bottles" in window.post(f"{address}/agree", by="T1").text
    assert bottles(window.house.path) == before


def test_the_same_list_given_again_is_here_already(window: Window) -> None:
    window.post(f"{path_of(give(window, OLD))}/agree", by="T1")
    assert "Here already: 4 rows" in give(window, OLD, "another name.csv").text


def test_a_column_nobody_understands_is_named_by_choosing(window: Window) -> None:
    page = give(window, "name,amount,zzz\npotassium iodide,5 g,blue\n")
    assert "1 column must be named first" in page.text
    refused = window.post(f"{path_of(page)}/agree", by="T1")
    assert (refused.status, "not understood" in refused.text) == (409, True)
    page = window.post(path_of(page), **{"column.1": "zzz=note"})
    assert "note, as said" in page.text
    assert "Bring in 1 bottle" in page.text


# -- what is refused --------------------------------------------------------------------


@pytest.mark.parametrize(
    ("answer", "told"),
    [
        ({"chosen.dates": "dates=sideways"}, "sideways"),
        ({"typed.nonsense": "5"}, "nonsense"),
        ({"lines": "99.amount=5 g"}, "There is no row 99"),
        ({"column.1": "name=colour"}, "colour"),
        ({"sheet": "second"}, "one sheet only"),
        ({"encoding": "klingon"}, "klingon"),
    ],
)
def test_an_answer_that_is_none_is_told_and_not_kept(
    window: Window, answer: dict[str, str], told: str
) -> None:
    address = path_of(give(window, OLD))
    refused = window.post(address, **answer)
    assert (refused.status, told in refused.text) == (422, True)
    assert window.get(address).status == 200


def test_without_initials_nothing_is_written(window: Window) -> None:
    before = bottles(window.house.path)
    refused = window.post(f"{path_of(give(window, OLD))}/agree", by="")
    assert refused.status == 422
    assert bottles(window.house.path) == before


@pytest.mark.parametrize(
    ("data", "name", "told"),
    [
        (b"", "nothing.csv", "No list was given"),
        (b"   ", "blank.csv", "is empty"),
        (b"%PDF-1.4 ...", "list.pdf", "a PDF"),
        (b"\xd0\xcf\x11\xe0old", "old.xls", "an old workbook"),
        (b"PK\x03\x04 and no more", "broken.xlsx", "begins as a workbook"),
        (b"\x01\x02\x03", "odd.csv", "no table of text"),
        (b"colour,shape\nred,round\n", "shapes.csv", "No column of names"),
    ],
)
def test_what_is_no_list_is_refused_in_words(
    window: Window, data: bytes, name: str, told: str
) -> None:
    refused = give(window, data, name)
    assert (refused.status, told in refused.text) == (422, True)


def test_a_workbook_that_unpacks_to_very_much_is_refused_unopened(window: Window) -> None:
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as packed:
        packed.writestr("xl/workbook.xml", "<workbook/>")
        packed.writestr("xl/worksheets/sheet1.xml", b" " * (held_files.MOST_UNPACKED + 1))
    refused = give(window, out.getvalue(), "bomb.xlsx")
    assert (refused.status, "unpacks to more" in refused.text) == (422, True)


def test_a_list_of_ten_megabytes_is_turned_away(window: Window, folder: Path) -> None:
    assert give(window, b"name,amount\n" + b"x,1 g\n" * 1_700_000).status == 413
    assert not list(folder.rglob("*.list"))


def test_a_formula_is_text_and_never_worked_out(window: Window) -> None:
    page = give(window, 'name,amount,note\npotassium iodide,5 g,"=HYPERLINK(""x"")"\n')
    assert "Bring in 1 bottle" in page.text
    book = workbook([["name", "amount"], ["potassium iodide", "=2+3"]])
    refused = give(window, book, "sums.xlsx")
    assert (refused.status, 'cell B2 holds "=2+3" and no value' in refused.text) == (422, True)


def test_a_workbook_is_read_and_its_macros_are_not(window: Window) -> None:
    book = io.BytesIO(workbook([["name", "amount"], ["potassium iodide", "5 g"]]))
    with zipfile.ZipFile(book, "a") as packed:
        packed.writestr("xl/vbaProject.bin", b"Sub AutoOpen() : End Sub")
    assert "Bring in 1 bottle" in give(window, book.getvalue(), "macros.xlsm").text


def test_a_list_s_name_is_neither_a_path_nor_markup(window: Window, folder: Path) -> None:
    name = "../../../etc/<script>alert(1)</script>\x07.csv"
    page = give(window, "name,amount\npotassium iodide,5 g\n", name)
    assert "<script>alert" not in page.html
    assert page.status == 200
    held = [each for each in folder.rglob("*") if each.suffix in (".list", ".said")]
    assert len(held) == 2
    assert all(each.parent.parent == folder for each in held)


# -- how it is held -------------------------------------------------------------------


def test_a_list_is_held_for_its_own_visit_alone(window: Window) -> None:
    address = path_of(give(window, OLD))
    assert window.get(address).status == 200
    assert window_on(window.house).get(address).status == 404


@pytest.mark.parametrize("token", ["x", "..%2F..%2Fetc%2Fpasswd", "%F0%9F%92%A5"])
def test_a_token_of_nothing_leads_nowhere(onlooker: Window, token: str) -> None:
    assert onlooker.get(f"/bring-in/{token}").status == 404
