"""`stockroom handover`: a whole folder or none, and the plan in it can be typed by a stranger."""

from __future__ import annotations

import re
import shlex
from datetime import datetime
from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

FILES = {
    "start-here.pdf", "start-here.txt", "week.pdf", "strip.pdf", "buying.pdf", "buying.csv",
    "report.pdf",
}  # fmt: skip


def test_the_folder_is_written_whole_and_a_stranger_can_type_what_it_says(
    own: Path, tmp_path: Path, stockroom: Stockroom
) -> None:
    folder = tmp_path / "hand over"
    told = stockroom("handover", str(folder), store=own)
    assert told.code == 0, told.err
    assert {each.name for each in folder.iterdir()} == FILES
    assert all(name in told.out for name in FILES)
    text = (folder / "start-here.txt").read_text(encoding="utf-8")
    assert text.startswith("PRACTICE\n")
    numbers = []
    for name in sorted(each for each in FILES if each.endswith("pdf")):
        said = paper_reading.words((folder / name).read_bytes())
        assert "PRACTICE" in said
        numbers += re.findall(r"copy (\d{4})", said)[:1]
    assert len(set(numbers)) == 5
    on, typed = "", 0
    for line in text[: text.index("2  NEVER")].splitlines():
        if found := re.search(r"[MTWF][a-z]{2} (\d+ \w{3} \d{4})$", line):
            on = datetime.strptime(found[1], "%d %b %Y").date().isoformat()
        if on and "$ stockroom" in line:
            words = shlex.split(line.replace("XX", "T9").replace("PLACE", "C1"))[2:]
            # what is only looked at is tested where it belongs
            if words[0] in ("order", "make", "look"):
                typed += 1
                ran = stockroom(*words, "--as-at", on, store=own)
                assert ran.code == 0, (words, ran.err)
    assert typed > 8


def test_a_folder_that_holds_something_is_left_alone(
    own: Path, tmp_path: Path, stockroom: Stockroom
) -> None:
    folder = tmp_path / "full"
    folder.mkdir()
    (folder / "mine.txt").write_text("mine", encoding="utf-8")
    told = stockroom("handover", str(folder), store=own)
    assert told.code == 2
    assert "not empty" in told.err
    assert [each.name for each in folder.iterdir()] == ["mine.txt"]


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("no/such/folder/new",), "there is no folder"),
        (("new", "--paper", "A9"), "A9"),
    ],
)
def test_bad_input_writes_nothing(
    words: tuple[str, ...], said: str, own: Path, tmp_path: Path, stockroom: Stockroom
) -> None:
    before = set(tmp_path.iterdir())
    told = stockroom("handover", str(tmp_path / words[0]), *words[1:], store=own)
    assert (told.code, said in told.err) == (2, True)
    assert set(tmp_path.iterdir()) == before


def test_a_failure_half_way_leaves_no_folder(
    own: Path, tmp_path: Path, stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(*_: object, **__: object) -> bytes:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("stockroom.reports.files.csv_out.buying_csv", full)
    before = set(tmp_path.iterdir())
    told = stockroom("handover", str(tmp_path / "new"), store=own)
    assert told.code == 1
    assert "No space left" in told.err
    # three sheets had their numbers by then: nobody is to look for those papers
    assert "Copies 0001 to 0003 were numbered and not written." in told.err
    assert set(tmp_path.iterdir()) == before
