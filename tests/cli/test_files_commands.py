"""`calendar`, `workbook` and `morning` at the command line: files, refusals, exit codes."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import icalendar
import openpyxl
import pytest

from stockroom.cli.paper import written_whole
from stockroom.errors import NotAllowed

if TYPE_CHECKING:
    from conftest import Stockroom


def test_a_calendar_written_again_is_the_same_and_then_says_what_changed(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    first, second, third = (tmp_path / f"{name}.ics" for name in ("a", "b", "c"))
    assert stockroom("calendar", str(first), store=own).code == 0
    again = stockroom("calendar", str(second), store=own)
    assert (again.code, "copy 0002" in again.out) == (0, True)
    assert first.read_bytes() == second.read_bytes()
    moved = stockroom("shift", "K13", "--on", "2027-02-09", "--by", "T1", store=own)
    assert moved.code == 0, moved.err
    told = stockroom("calendar", str(third), store=own)
    assert " new" not in told.out
    assert "withdrawn" not in told.out
    assert uids(third) == uids(first)


def uids(file: Path) -> set[str]:
    found = icalendar.Calendar.from_ical(file.read_bytes())
    return {str(event["uid"]) for event in found.walk("VEVENT")}


def test_to_look_at_the_calendar_writes_nothing(stockroom: Stockroom, practice: Path) -> None:
    told = stockroom("calendar", store=practice)
    assert told.out.startswith("PRACTICE\n")
    data = stockroom("calendar", "--json", store=practice).json
    assert {each["state"] for each in data["entries"]} == {"new"}


@pytest.mark.parametrize(("command", "ending"), [("calendar", ".ics"), ("workbook", ".xlsx")])
def test_a_name_or_folder_that_cannot_be_is_misuse(
    stockroom: Stockroom, own: Path, tmp_path: Path, command: str, ending: str
) -> None:
    wrong = stockroom(command, "term.doc", store=own)
    assert (wrong.code, wrong.out) == (2, "")
    assert f"term.doc: this is written as {ending}." in wrong.err
    nowhere = stockroom(command, str(tmp_path / "no" / f"term{ending}"), store=own)
    assert nowhere.code == 2
    assert "there is no folder" in nowhere.err
    # a file that could not be written took no number
    assert stockroom("calendar", str(tmp_path / "t.ics"), store=own).out.endswith("copy 0001\n")


def test_a_workbook_is_written_whole(stockroom: Stockroom, practice: Path, tmp_path: Path) -> None:
    told = stockroom("workbook", str(tmp_path / "term.xlsx"), "--json", store=practice).json
    assert told["practice"] is True
    assert told["rows"]["Bookings"] == 29
    assert [each.name for each in tmp_path.glob("*.xlsx")] == ["term.xlsx"]


def test_the_morning_says_by_its_code_whether_there_is_anything(
    stockroom: Stockroom, practice: Path, own: Path, tmp_path: Path
) -> None:
    busy = stockroom("morning", "--quiet-if-nothing", "--as-at", "2027-01-26", store=practice)
    assert busy.code == 1
    assert busy.out.splitlines()[1] == "PRACTICE"
    empty = tmp_path / "empty.sqlite"
    assert stockroom("new", store=empty).code == 0
    quiet = stockroom("morning", "--quiet-if-nothing", "--as-at", "2027-01-26", store=empty)
    assert (quiet.code, quiet.out) == (0, "")
    told = stockroom("morning", "--as-at", "2027-01-26", store=empty)
    assert told.code == 0
    assert told.out.startswith("Nothing due today, Tue 26 Jan 2027\n")


STRANGERS = {
    "x.xlsx": b"keep",
    "x.ics": b"BEGIN:VCALENDAR\r\nPRODID:-//somebody//EN\r\nEND:VCALENDAR\r\n",
    "x.csv": b"name,telephone\r\n",
    "x.pdf": b"%PDF-1.7 somebody's",
    "x.svg": b"keep",
    "x.png": b"keep",
}


@pytest.mark.parametrize("name", STRANGERS)
def test_a_strangers_file_is_never_written_over(tmp_path: Path, name: str) -> None:
    kept = tmp_path / name
    kept.write_bytes(STRANGERS[name])
    refused = pytest.raises(NotAllowed, match="is not a sheet of stockroom's")
    with refused, written_whole(kept) as write:
        write([b"item,packs\r\nsalt,1\r\n"])
    assert kept.read_bytes() == STRANGERS[name]
    assert list(tmp_path.iterdir()) == [kept]


def test_a_workbook_of_somebody_elses_is_left(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    kept = tmp_path / "x.xlsx"
    book = openpyxl.Workbook()
    book.properties.creator = "somebody"
    book.save(kept)
    before = kept.read_bytes()
    told = stockroom("workbook", str(kept), store=own)
    assert (told.code, told.out) == (1, "")
    assert "Name another file, or move it away." in " ".join(told.err.split())
    assert kept.read_bytes() == before


def test_our_own_files_are_replaced(stockroom: Stockroom, own: Path, tmp_path: Path) -> None:
    for words in (
        ("workbook", "t.xlsx"),
        ("workbook", "t.xlsx", "--paper", "letter"),
        ("calendar", "t.ics"),
        ("calendar", "t.ics"),
        ("strip", "--print", "s.pdf"),
        ("strip", "--print", "s.pdf"),
        ("buying", "--csv", "b.csv"),
        ("buying", "--csv", "b.csv"),
    ):
        told = stockroom(*words, store=own)
        assert told.code == 0, told.err
    first = openpyxl.load_workbook("t.xlsx").worksheets[0]
    assert first.page_setup.paperSize == 1


def test_a_file_that_cannot_be_written_is_said_so_of_any_kind(
    stockroom: Stockroom, own: Path
) -> None:
    told = stockroom("calendar", "/proc/x.ics", store=own)
    assert told.code == 1
    assert "Nothing was written" in told.err


def test_a_walk_is_not_begun_for_a_sheet_that_cannot_be(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    nowhere = str(tmp_path / "no" / "w.pdf")
    told = stockroom("walk", "Jan", "--places", "A2", "--by", "T1", "--print", nowhere, store=own)
    assert told.code == 2
    assert stockroom("walk", "--json", store=own).json["walks"] == []
