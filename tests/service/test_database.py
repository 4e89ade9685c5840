"""Making a store: never over another, never half, and a practice store never over a house."""

from __future__ import annotations

import sqlite3
from datetime import date
from pathlib import Path

import pytest

from stockroom import clock
from stockroom.errors import BadInput, StoreTrouble, UnknownName
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


@pytest.mark.file
def test_an_earlier_practice_store_is_put_by(own: Path) -> None:
    database.add_row(own, "places", {"place": "Z1"}, by="T1")
    database.make_practice(own)
    put_by = own.with_suffix(".old.sqlite")
    assert "Z1" in {place.name for place in facts(put_by, date(2027, 1, 4)).places}
    assert "Z1" not in {place.name for place in facts(own, date(2027, 1, 4)).places}


@pytest.mark.file
def test_a_house_that_has_the_name_of_an_earlier_practice_store_is_left_alone(own: Path) -> None:
    ours = own.with_suffix(".old.sqlite")
    database.new_store(ours)
    before = ours.read_bytes()
    kept = database.make_practice(own)
    assert ours.read_bytes() == before
    assert kept == own.with_name("own.old-2.sqlite")
    assert database.is_practice(own.with_name("own.old-2.sqlite"))


@pytest.mark.file
def test_each_earlier_practice_store_is_kept(own: Path) -> None:
    for place in ("Z1", "Z2", "Z3"):
        database.add_row(own, "places", {"place": place}, by="T1")
        database.make_practice(own)
    kept = [own.with_name(f"own.old{end}.sqlite") for end in ("", "-2", "-3")]
    placed = [{one.name for one in facts(path, date(2027, 1, 4)).places} for path in kept]
    assert [sorted(each & {"Z1", "Z2", "Z3"}) for each in placed] == [["Z1"], ["Z2"], ["Z3"]]


@pytest.mark.file
def test_a_name_whose_journal_is_another_stores_is_not_taken(own: Path) -> None:
    journal = own.with_name("own.old.sqlite-wal")
    journal.write_bytes(b"somebody's entries")
    assert database.make_practice(own) == own.with_name("own.old-2.sqlite")
    assert journal.read_bytes() == b"somebody's entries"


@pytest.mark.file
def test_entries_still_in_the_journal_go_along(own: Path) -> None:
    with sqlite3.connect(own) as held:
        held.execute("SELECT 1 FROM house").fetchall()
        # another program has it open, so what is added now stays in the journal
        database.add_row(own, "places", {"place": "Z1"}, by="T1")
        assert own.with_name("own.sqlite-wal").stat().st_size > 0
        kept = database.make_practice(own)
    held.close()
    assert kept is not None
    assert "Z1" in {place.name for place in facts(kept, date(2027, 1, 4)).places}
    assert "Z1" not in {place.name for place in facts(own, date(2027, 1, 4)).places}


def test_a_first_practice_store_puts_nothing_by(tmp_path: Path) -> None:
    assert database.make_practice(tmp_path / "first.sqlite") is None
    assert sorted(path.name for path in tmp_path.iterdir()) == ["first.sqlite"]


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


@pytest.fixture
def house(tmp_path: Path) -> Path:
    path = tmp_path / "ours.sqlite"
    database.new_store(path)
    for item in ("alpha", "beta", "gamma"):
        database.add_row(path, "lines", {"item": item, "form": "solid"}, by="T1")
    return path


def from_(path: Path, line: str, source: str) -> None:
    row = {"line": line, "ingredient": source}
    database.add_row(path, "ingredients", row, by="T1")


def test_methods_that_go_round_in_a_circle_are_refused(house: Path) -> None:
    from_(house, "alpha", "beta")
    from_(house, "beta", "gamma")
    with pytest.raises(BadInput, match="alpha from beta from gamma from alpha"):
        from_(house, "gamma", "alpha")
    methods = facts(house, date(2027, 1, 4)).methods
    assert sorted(methods) == ["alpha", "beta"]


def test_a_method_that_follows_from_the_strengths_can_close_a_circle(house: Path) -> None:
    salt = {"item": "salt", "substance": "salt", "form": "solution"}
    database.add_row(house, "substances", {"substance": "salt", "formula": "NaCl"}, by="T1")
    for strength in ("0.1 mol/dm3", "1 mol/dm3"):
        database.add_row(house, "lines", salt | {"strength": strength}, by="T1")
    from_(house, "salt 1 mol/dm3", "salt 0.1 mol/dm3")
    # nothing but the stronger one is there to make the weaker from
    with pytest.raises(BadInput, match=r"Made from itself: salt 0\.1"):
        database.add_row(house, "methods", {"line": "salt 0.1 mol/dm3"}, by="T1")


def test_tables_with_a_circle_make_no_store(tmp_path: Path) -> None:
    tables = tmp_path / "tables"
    tables.mkdir()
    (tables / "lines.csv").write_text("item,form\nalpha,solid\nbeta,solid\n", encoding="utf-8")
    rows = "line,ingredient\nalpha,beta\nbeta,alpha\n"
    (tables / "ingredients.csv").write_text(rows, encoding="utf-8")
    with pytest.raises(BadInput, match="alpha from beta from alpha"):
        database.new_store(tmp_path / "round.sqlite", tables=tables)
    assert not (tmp_path / "round.sqlite").exists()


def test_an_ingredient_that_is_no_line_is_refused(house: Path) -> None:
    with pytest.raises(UnknownName, match='No stock line "unobtainium"'):
        from_(house, "alpha", "unobtainium")
