"""What is set beside a line is in the line's own unit, and alternatives ask for one amount."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import BadAmount, BadInput, StockroomError
from stockroom.service.database import add_row, new_store
from stockroom.store.snapshot import facts


@pytest.fixture
def house(tmp_path: Path) -> Path:
    """Starch has no formula and is counted in g/dm³; salt has one and is counted in mol/dm³."""
    path = tmp_path / "ours.sqlite"
    new_store(path)
    add(path, "substances", substance="starch")
    add(path, "substances", substance="salt", formula="NaCl")
    add(path, "lines", item="starch", substance="starch", form="solution", strength="0.5 % w/v")
    add(path, "lines", item="salt", substance="salt", form="solution", strength="1 mol/dm3")
    add(path, "lines", item="brine", substance="salt", form="solution", strength="saturated")
    for item in ("salt, fine", "salt, coarse"):
        add(path, "lines", item=item, substance="salt", form="solid")
    add(path, "recipes", recipe="R1", title="Starch and salt")
    add(path, "bottles", bottle="S01", line="starch 0.5 % w/v", size_cm3="500", made="2027-01-04")
    return path


def add(path: Path, table: str, **row: str) -> None:
    add_row(path, table, row, by="T1")


STARCH = {"line": "starch 0.5 % w/v"}
NEED = {**STARCH, "recipe": "R1", "amount_cm3": "10", "per": "group"}
RULE = {**STARCH, "rule": "life", "lasts": "7 d"}
FADES = {**STARCH, "rule": "fades", "order": "0", "rate": "0.01", "rate_per": "day"}
FOUND = {"happened": "2027-01-05", "event": "found", "bottle": "S01", "by": "T1"}


@pytest.mark.parametrize(
    ("table", "row"),
    [
        ("recipe_lines", {**NEED, "strength": "0.1 mol/dm3"}),
        ("recipe_lines", {**NEED, "strength": "0.1-0.2 mol/dm3"}),
        ("keeping", {**RULE, "stronger_than": "0.1 mol/dm3"}),
        ("keeping", {**RULE, "up_to_strength": "0.1 mol/dm3"}),
        ("keeping", {**FADES, "rate_of": "mol/dm3"}),
        ("history", {**FOUND, "strength": "0.1 mol/dm3"}),
    ],
)
def test_a_strength_in_another_unit_than_the_lines_is_refused(
    house: Path, table: str, row: dict[str, str]
) -> None:
    with pytest.raises(BadAmount) as caught:
        add(house, table, **row)
    assert "mol/dm3" in caught.value.message
    assert "cannot be set beside starch 0.5 % w/v" in caught.value.message
    assert "counted in g/dm³" in caught.value.message


@pytest.mark.parametrize(
    ("table", "row"),
    [
        ("recipe_lines", {**NEED, "strength": "1 in 10"}),
        ("keeping", {**RULE, "stronger_than": "saturated"}),
        ("keeping", {**FADES, "rate_of": "% v/v"}),
        ("history", {**FOUND, "strength": "saturated"}),
    ],
)
def test_words_are_no_strength_beside_a_line_that_has_a_number(
    house: Path, table: str, row: dict[str, str]
) -> None:
    with pytest.raises(BadAmount, match="cannot be set beside starch"):
        add(house, table, **row)


def test_another_way_of_writing_the_lines_unit_is_read(house: Path) -> None:
    add(house, "recipe_lines", **NEED, strength="0.4-0.6 % w/v")
    add(house, "keeping", **RULE, stronger_than="1000 ppm m/v")
    known = facts(house, date(2027, 1, 4))
    (need,) = known.recipes["R1", 1].requirements
    assert [need.lowest, need.highest] == pytest.approx([4.0, 6.0])
    assert known.lines["starch 0.5 % w/v"].rules[0].above == pytest.approx(1.0)


def test_a_line_told_in_words_is_asked_for_in_words(house: Path) -> None:
    row = {**NEED, "line": "brine saturated", "strength": "saturated"}
    add(house, "recipe_lines", **row)
    (need,) = facts(house, date(2027, 1, 4)).recipes["R1", 1].requirements
    assert (need.lowest, need.strength_text) == (None, "saturated")


SOLVENT = {**STARCH, "role": "solvent"}
FIRST = {**SOLVENT, "ingredient": "salt, fine", "per_dm3_g": "30"}


@pytest.mark.parametrize(
    ("row", "said"),
    [
        (
            {**SOLVENT, "ingredient": "salt 1 mol/dm3", "per_dm3_cm3": "500"},
            "30 g of salt, fine per dm³ or 500 cm³ of salt 1 mol/dm3 per dm³",
        ),
        # the same number of another kind is another amount
        (
            {**SOLVENT, "ingredient": "salt 1 mol/dm3", "per_dm3_cm3": "30000"},
            "30 g of salt, fine per dm³ or 30 000 cm³ of salt 1 mol/dm3 per dm³",
        ),
        (
            {**SOLVENT, "ingredient": "salt, coarse", "per_dm3_g": "31"},
            "30 g of salt, fine per dm³ or 31 g of salt, coarse per dm³",
        ),
    ],
)
def test_alternatives_that_ask_for_different_amounts_are_refused(
    house: Path, row: dict[str, str], said: str
) -> None:
    add(house, "ingredients", **FIRST)
    with pytest.raises(BadInput) as caught:
        add(house, "ingredients", **row, alternative="2")
    assert said in caught.value.message


def test_an_amount_beside_one_worked_out_is_refused(house: Path) -> None:
    add(house, "ingredients", line="salt 1 mol/dm3", ingredient="salt, fine")
    row = {"line": "salt 1 mol/dm3", "ingredient": "salt, coarse", "per_dm3_g": "58"}
    with pytest.raises(BadInput, match="salt, fine as its strength asks or 58 g of salt, coarse"):
        add(house, "ingredients", **row)


def test_different_alternatives_in_a_folder_make_no_store(tmp_path: Path) -> None:
    tables = tmp_path / "tables"
    tables.mkdir()
    lines = "item,form\nsalt,solid\nsugar,solid\nmix,solid\n"
    rows = "line,ingredient,alternative,role,per_dm3_g\nmix,salt,1,a,30\nmix,sugar,2,a,40\n"
    (tables / "lines.csv").write_text(lines, encoding="utf-8")
    (tables / "ingredients.csv").write_text(rows, encoding="utf-8")
    with pytest.raises(StockroomError, match="30 g of salt per dm³ or 40 g of sugar per dm³"):
        new_store(tmp_path / "mixed.sqlite", tables=tables)


def test_alternatives_of_one_amount_stand_side_by_side(house: Path) -> None:
    add(house, "ingredients", **FIRST)
    row = {**SOLVENT, "ingredient": "salt, coarse", "per_dm3_g": "30", "alternative": "2"}
    add(house, "ingredients", **row)
    (part,) = facts(house, date(2027, 1, 4)).methods["starch 0.5 % w/v"].ingredients
    assert (part.lines, part.per_dm3) == (("salt, fine", "salt, coarse"), 30_000_000)


def test_two_roles_of_one_line_ask_for_what_each_needs(house: Path) -> None:
    add(house, "ingredients", **FIRST)
    add(house, "ingredients", **{**FIRST, "role": "buffer", "per_dm3_g": "5"})
    assert len(facts(house, date(2027, 1, 4)).methods["starch 0.5 % w/v"].ingredients) == 2


@pytest.mark.parametrize(
    ("number", "dates", "made_here"),
    [
        ("S77", {"received": "2027-01-04"}, False),
        ("S77", {}, True),
        ("s77", {}, True),
        ("S77", {"made": "2027-01-04"}, True),
        ("B77", {"made": "2027-01-04"}, True),
        ("B77", {}, False),
    ],
)
def test_what_came_in_a_jar_was_not_made_here_whatever_its_number(
    house: Path, number: str, dates: dict[str, str], made_here: bool
) -> None:
    add(house, "bottles", bottle=number, line="starch 0.5 % w/v", size_cm3="100", **dates)
    bottle = next(b for b in facts(house, date(2099, 1, 4)).bottles if b.number == number)
    assert bottle.made_here is made_here
