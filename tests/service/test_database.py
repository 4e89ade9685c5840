"""Making a store: never over another, never half, and a practice store never over a house."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom import clock
from stockroom.errors import StoreTrouble
from stockroom.service import database
from stockroom.store.snapshot import facts


def test_a_new_store_is_empty_and_can_be_planned(tmp_path: Path) -> None:
    path = tmp_path / "house" / "ours.sqlite"
    done = database.new_store(path)
    known = facts(path, date(2027, 1, 4))
    assert done.text.startswith(f"Made {path}")
    assert (known.bottles, known.lines, known.house.practice) == ((), {}, False)


def test_a_new_store_never_replaces_a_file(tmp_path: Path) -> None:
    (tmp_path / "ours.sqlite").write_text("precious", encoding="utf-8")
    with pytest.raises(StoreTrouble, match=r"already something at .*ours\.sqlite"):
        database.new_store(tmp_path / "ours.sqlite")
    assert (tmp_path / "ours.sqlite").read_text(encoding="utf-8") == "precious"


def test_an_earlier_practice_store_is_put_by(own: Path) -> None:
    database.add_row(own, "places", {"place": "Z1"}, by="T1")
    database.make_practice(own)
    put_by = own.with_suffix(".old.sqlite")
    assert "Z1" in {place.name for place in facts(put_by, date(2027, 1, 4)).places}
    assert "Z1" not in {place.name for place in facts(own, date(2027, 1, 4)).places}


def test_a_house_of_ones_own_is_never_made_a_practice_store(tmp_path: Path) -> None:
    path = tmp_path / "ours.sqlite"
    database.new_store(path)
    with pytest.raises(StoreTrouble, match="is a house of one's own"):
        database.make_practice(path)
    assert not database.is_practice(path)


def test_the_day_is_the_one_given_else_the_practice_day_else_today(
    practice: Path, tmp_path: Path
) -> None:
    database.new_store(tmp_path / "ours.sqlite")
    assert database.day_for(practice, date(2027, 2, 10)) == date(2027, 2, 10)
    assert database.day_for(practice, None) == date(2027, 1, 4)
    assert database.day_for(tmp_path / "ours.sqlite", None) == clock.today()


def test_two_practice_stores_hold_the_same_facts(practice: Path, tmp_path: Path) -> None:
    again = tmp_path / "again.sqlite"
    database.make_practice(again)
    assert facts(again, date(2027, 1, 4)) == facts(practice, date(2027, 1, 4))
