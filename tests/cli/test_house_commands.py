"""demo, new, add: the store itself."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom


def test_the_demo_makes_a_store_and_prints_its_plan(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "practice.sqlite"
    result = stockroom("demo", store=store)
    assert result.code == 0
    assert result.out.splitlines()[0] == "PRACTICE"
    assert "Plan as at Mon 2027-01-04" in result.out
    assert f"next: stockroom --store {store} why K15" in result.err
    assert store.exists()


def test_the_demo_needs_no_store_named_and_reading_finds_it(stockroom: Stockroom) -> None:
    demo = stockroom("demo", "--json")
    assert demo.err == "next: stockroom why K15\n"
    assert demo.json == stockroom("plan", "--json").json


def test_a_second_demo_keeps_the_first_beside_it(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "practice.sqlite"
    stockroom("demo", store=store)
    assert stockroom("demo", store=store).code == 0
    assert (tmp_path / "practice.old.sqlite").exists()


def test_a_second_demo_says_where_the_first_is_kept(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "practice.sqlite"
    stockroom("demo", store=store)
    (tmp_path / "practice.old.sqlite").write_text("ours", encoding="utf-8")
    said = stockroom("demo", store=store).err
    assert f"kept as {tmp_path / 'practice.old-2.sqlite'}." in said
    assert (tmp_path / "practice.old.sqlite").read_text(encoding="utf-8") == "ours"


def test_the_demo_never_replaces_a_house_of_ones_own(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "house.sqlite"
    stockroom("new", store=store)
    before = store.read_bytes()
    result = stockroom("demo", store=store)
    assert result.code == 1
    assert store.read_bytes() == before


def test_a_new_store_is_empty_and_not_practice(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "house.sqlite"
    assert stockroom("new", store=store).code == 0
    data = stockroom("plan", "--json", store=store).json
    assert (data["needs"], data["practice"]) == ([], False)


def test_a_place_added_can_be_moved_to(stockroom: Stockroom, own: Path) -> None:
    added = stockroom("add", "places", "place=A5", "name=acids, lower", "--by", "T1", store=own)
    assert added.code == 0, added
    assert stockroom("move", "S01", "A5", "--by", "T1", store=own).code == 0


def test_the_columns_of_a_table_are_listed_one_a_line(stockroom: Stockroom) -> None:
    lines = stockroom("add", "--columns", "places").out.splitlines()
    assert {"place", "name", "temperature_c"} <= set(lines)
