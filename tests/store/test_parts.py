"""Two that make a store at one place at once: one does, the other is told; both stay whole."""

from __future__ import annotations

from pathlib import Path

import pytest

from stockroom.errors import StoreTrouble
from stockroom.service.verify import verify
from stockroom.store.engine import Session, create
from stockroom.store.parts import part_of, publish

pytestmark = pytest.mark.file


def test_of_two_that_make_a_store_at_one_place_the_second_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "own.sqlite"

    def other(_: Session) -> None:
        create(path)

    with pytest.raises(StoreTrouble, match="already something at"):
        create(path, other)
    assert verify(path).faults == ()
    assert [each.name for each in tmp_path.iterdir()] == ["own.sqlite"]


def test_what_was_left_behind_is_cleared_and_what_is_being_written_is_not(tmp_path: Path) -> None:
    path = tmp_path / "own.sqlite"
    (tmp_path / "own.sqlite.part").write_text("half", encoding="utf-8")
    (tmp_path / "own.sqlite.part-wal").write_text("half", encoding="utf-8")
    with part_of(path) as first:
        assert (first.name, first.read_bytes()) == ("own.sqlite.part", b"")
        with part_of(path) as second:
            assert second.name == "own.sqlite.part-2"
        assert first.exists()
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("linked", [True, False])
def test_a_name_that_is_taken_is_never_taken_over(
    tmp_path: Path, linked: bool, monkeypatch: pytest.MonkeyPatch
) -> None:
    def never(*_: object) -> None:
        raise PermissionError(1, "Operation not permitted")

    if not linked:
        monkeypatch.setattr("os.link", never)
    path = tmp_path / "own.sqlite"
    with part_of(path) as part:
        part.write_text("first", encoding="utf-8")
        publish(part, path)
    with part_of(path) as part:
        part.write_text("second", encoding="utf-8")
        with pytest.raises(FileExistsError):
            publish(part, path)
    assert path.read_text(encoding="utf-8") == "first"
    assert [each.name for each in tmp_path.iterdir()] == ["own.sqlite"]
