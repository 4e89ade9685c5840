"""What is handed out is the same wherever the store stands, and so is what it builds."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from conftest import Stockroom


def files_of(folder: Path) -> dict[str, bytes]:
    found = (path for path in folder.rglob("*") if path.is_file())
    return {str(path.relative_to(folder)): path.read_bytes() for path in found}


def test_a_store_handed_out_and_read_into_a_file_plans_the_same(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    assert stockroom("draw", "S05", "200 cm3", "--by", "T1", store=own).code == 0
    assert stockroom("hand-out", "first", store=own).code == 0
    file = tmp_path / "file.sqlite"
    made = stockroom("new", "--from", "first", store=file)
    assert "75 bottles, 179 entries" in made.out
    assert stockroom("hand-out", "second", store=file).code == 0
    assert files_of(tmp_path / "first") == files_of(tmp_path / "second")
    for words in (["plan", "--json"], ["diary", "S05"]):
        assert stockroom(*words, store=own).out == stockroom(*words, store=file).out
