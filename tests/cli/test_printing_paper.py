"""Sheets to paper: which files and papers there are, what is refused, and what a number means."""

from __future__ import annotations

import errno
import io
import os
from collections.abc import Sequence
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading as read
import pytest

from stockroom.cli.paper import older_pages, page_names, written_whole
from stockroom.errors import BadInput, NotAllowed
from stockroom.reports.paper.head import head_for
from stockroom.reports.paper.strip import STRIP, Strip
from stockroom.reports.typesetting import typeset

if TYPE_CHECKING:
    from conftest import Stockroom

OURS = b"%PDF-1.7 /Author(stockroom) before"
A4, LETTER, A5 = (210.0, 297.0), (215.9, 279.4), (148.0, 210.0)


def sheet(title: str = "The term at a glance") -> Strip:
    return Strip(head_for("A school", title, date(2027, 1, 4)), ("Mon",), ())


def nothing_left(folder: Path) -> bool:
    """Whether no folder in use while printing was left behind."""
    return not list(folder.glob(".printing-*"))


@pytest.mark.file
def test_a_sheet_is_printed_and_told(own: Path, stockroom: Stockroom, tmp_path: Path) -> None:
    told = stockroom("strip", "--print", "strip.PDF", store=own)
    assert (told.code, told.out) == (0, "strip.PDF: The term at a glance, copy 0001\n")
    pdf = (tmp_path / "strip.PDF").read_bytes()
    assert read.sizes_mm(pdf) == [A4]
    assert "copy 0001" in read.words(pdf)
    again = stockroom("strip", "--print", "strip.PDF", "--paper", "letter", "--json", store=own)
    assert again.json["head"]["copy"] == "0002"
    assert again.json["head"]["since"] == {"number": "0001", "marked": [], "changes": []}
    assert again.json["files"] == ["strip.PDF"]
    assert read.sizes_mm((tmp_path / "strip.PDF").read_bytes()) == [LETTER]
    assert nothing_left(tmp_path)


@pytest.mark.file
@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["--print", "strip.docx"], "--print strip.docx: a sheet is written as .pdf, .svg or .png"),
        (["--print", ""], "Name it so: --print sheet.pdf"),
        (["--print", ".pdf"], "Name it so: --print pdf.pdf"),
        (["--print", "s.pdf", "--paper", "A3"], "--paper A3: this is not printed on that"),
        (["--print", "s.pdf", "--paper", "A5"], "Write A4 or Letter."),
        (["--paper", "A3"], "--paper A3"),
        (["--print", "no/such/s.pdf"], "there is no folder no/such"),
        (["--print", "folder.pdf"], "folder.pdf is a folder"),
    ],
)
def test_what_cannot_be_is_refused_and_takes_no_number(
    own: Path, stockroom: Stockroom, tmp_path: Path, words: list[str], said: str
) -> None:
    (tmp_path / "folder.pdf").mkdir()
    told = stockroom("strip", *words, store=own)
    assert told.code == 2
    assert said in " ".join(told.err.split())
    assert "copy 0001" in stockroom("strip", "--print", "s.pdf", store=own).out


@pytest.mark.file
def test_a_file_that_may_only_be_read_is_left(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    kept = tmp_path / "s.pdf"
    kept.write_text("mine")
    kept.chmod(0o444)
    told = stockroom("strip", "--print", "s.pdf", store=own)
    assert told.code == 1
    assert "s.pdf may only be read" in told.err
    assert kept.read_text() == "mine"
    assert nothing_left(tmp_path)


@pytest.mark.parametrize("name", [f"{'long' * 70}.pdf", "nul\0.pdf"])
def test_a_name_no_file_can_have_is_refused_before_a_number_is_taken(
    tmp_path: Path, name: str
) -> None:
    with pytest.raises((NotAllowed, BadInput)), written_whole(tmp_path / name):
        pytest.fail("the block began")
    assert list(tmp_path.iterdir()) == []


def test_a_device_is_no_file(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.pdf")
    with pytest.raises(BadInput, match="no file"), written_whole(tmp_path / "pipe.pdf"):
        pytest.fail("the block began")


def test_a_hideous_name_that_can_be_is_written(tmp_path: Path) -> None:
    name = "a 'quoted' \"one\" * über\n-1.png"
    with written_whole(tmp_path / name) as write:
        names = write([b"one", b"two"])
    assert [Path(each).read_bytes() for each in names] == [b"one", b"two"]


def test_where_a_name_leads_elsewhere_that_file_is_written(tmp_path: Path) -> None:
    (tmp_path / "real.pdf").write_bytes(OURS)
    (tmp_path / "link.pdf").symlink_to("real.pdf")
    with written_whole(tmp_path / "link.pdf") as write:
        write([b"after"])
    assert (tmp_path / "real.pdf").read_bytes() == b"after"
    assert (tmp_path / "link.pdf").is_symlink()


@pytest.mark.file
def test_a_disc_that_fills_up_says_which_number_was_not_written(
    own: Path, stockroom: Stockroom, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "s.pdf").write_bytes(OURS)

    def full(path: Path, data: bytes) -> int:
        raise OSError(errno.ENOSPC, "No space left on device", str(path))

    with monkeypatch.context() as patch:
        patch.setattr(Path, "write_bytes", full)
        told = stockroom("strip", "--print", "s.pdf", store=own)
    assert told.code == 1
    assert "Copy 0001 was numbered and not written: No space left on device." in told.err
    assert (tmp_path / "s.pdf").read_bytes() == OURS
    assert nothing_left(tmp_path)
    assert "copy 0002" in stockroom("strip", "--print", "s.pdf", store=own).out


@pytest.mark.file
@pytest.mark.skipif(os.geteuid() == 0, reason="the superuser may write everywhere")
def test_a_folder_that_may_not_be_written_takes_no_number(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    shut = tmp_path / "shut"
    shut.mkdir()
    shut.chmod(0o555)
    told = stockroom("strip", "--print", "shut/s.pdf", store=own)
    shut.chmod(0o755)
    assert told.code == 1
    assert "Nothing was written" in told.err


def test_a_store_that_cannot_be_written_says_how_to_read_it(
    practice: Path, stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.errors import StoreTrouble
    from stockroom.service import copies

    def shut(*words: object, **more: object) -> str:
        raise StoreTrouble("The store may only be read.", "Ask its owner.")

    monkeypatch.setattr(copies, "number_copy", shut)
    told = stockroom("strip", "--print", "s.pdf", store=practice)
    assert told.code == 1
    said = " ".join(told.err.split())
    assert "No copy can be numbered, so nothing was printed. The store may only be read." in said
    assert "leave --print off. Ask its owner." in said
    assert not Path("s.pdf").exists()


def test_pages_of_an_earlier_print_are_left_and_told(tmp_path: Path) -> None:
    target = tmp_path / "s.png"
    assert [each.name for each in page_names(target, 2)] == ["s-1.png", "s-2.png"]
    for name in ("s.png", "s-1.png", "s-2.png", "s-3.png", "s-4.png", "s-9.png"):
        (tmp_path / name).touch()
    older = [Path(each).name for each in older_pages(target, 2)]
    assert older == ["s.png", "s-3.png", "s-4.png", "s-9.png"]
    alone = [Path(each).name for each in older_pages(target, 1)]
    assert alone == ["s-1.png", "s-2.png", "s-3.png", "s-4.png", "s-9.png"]
    assert older_pages(tmp_path / "s.pdf", 1) == []


@pytest.mark.file
def test_a_walk_is_printed_in_the_pocket_and_its_pages_told(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    words = ["walk", "Jan", "--places", "A2", "--by", "T1"]
    told = stockroom(*words, "--print", "w.pdf", "--paper", "A5", store=own)
    assert told.out == 'w.pdf: Walk "Jan", copy 0001\n'
    pdf = (tmp_path / "w.pdf").read_bytes()
    assert set(read.sizes_mm(pdf)) == {A5}
    assert "sodium thiosulfate, ANHYDROUS" in read.words(pdf)
    (tmp_path / "w-9.png").touch()
    pages = stockroom("walk", "Jan", "--print", "w.png", "--paper", "A5", store=own)
    assert pages.said.startswith("w-1.png, w-2.png: ")
    assert "left as they were, of an earlier print: w-9.png" in pages.said


@pytest.mark.file
@pytest.mark.parametrize(
    ("words", "code"),
    [
        (["walk", "Feb", "--places", "A2", "--by", "T1", "--print", "w.docx"], 2),
        (["walk", "Feb", "--places", "A2", "--by", "T1", "--print", "w.pdf", "--paper", "x"], 2),
        (["walk", "--print", "w.pdf"], 2),
        (["walk", "Feb", "--end", "--print", "w.pdf"], 2),
    ],
)
def test_a_walk_that_cannot_be_printed_is_not_started(
    own: Path, stockroom: Stockroom, words: list[str], code: int
) -> None:
    assert stockroom(*words, store=own).code == code
    assert "No walk was started yet" in stockroom("walk", store=own).out


@pytest.mark.file
def test_a_walk_that_is_ended_is_not_printed(own: Path, stockroom: Stockroom) -> None:
    stockroom("walk", "Jan", "--places", "A2", "--by", "T1", store=own)
    stockroom("walk", "Jan", "--end", "--by", "T1", store=own)
    told = stockroom("walk", "Jan", "--print", "w.pdf", store=own)
    assert told.code == 1
    assert 'nothing to count on the walk "Jan"' in told.err


def fonts(pdf: bytes) -> set[str]:
    from pypdf import PdfReader

    found = set()
    for page in PdfReader(io.BytesIO(pdf)).pages:
        for each in page["/Resources"]["/Font"].values():  # type: ignore[index]
            found.add(str(each.get_object()["/BaseFont"]).lstrip("/").split("+")[-1])
    return found


MARKS: Sequence[str] = ("A school ● ◕ ○ ◌ ▩ – ×", "mol/dm³ ½ → − °C µg", "日本 кириллица ε")


@pytest.mark.parametrize("title", MARKS)
def test_only_fonts_that_travel_along_are_used(title: str) -> None:
    ours = ("SourceSansPro", "DejaVuSansMono", "NewCM", "NewComputerModern", "LibertinusSerif")
    found = fonts(typeset("strip", STRIP.data(sheet(title)))[0])
    assert found
    assert {name for name in found if not name.startswith(ours)} == set()
    assert any(name.startswith("SourceSansPro") for name in found)


def test_the_same_data_give_the_same_file() -> None:
    data = STRIP.data(sheet())
    one, other = typeset("strip", data)[0], typeset("strip", data)[0]
    assert one == other
    dated = typeset("strip", data, on=date(2027, 1, 4))[0]
    assert dated == typeset("strip", data, on=date(2027, 1, 4))[0] != one


def test_a_file_carries_a_date_only_where_one_is_given() -> None:
    from pypdf import PdfReader

    def made(pdf: bytes) -> object:
        told = PdfReader(io.BytesIO(pdf)).metadata
        return told.get("/CreationDate") if told else None

    data = STRIP.data(sheet())
    assert made(typeset("strip", data)[0]) is None
    assert str(made(typeset("strip", data, on=date(2027, 1, 4))[0])).startswith("D:20270104")
