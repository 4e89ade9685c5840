"""The college loaded as a house of one's own: the same plan, whatever the order of the rows."""

from __future__ import annotations

import csv
import random
import shutil
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from stockroom.service.database import seeds_folder

if TYPE_CHECKING:
    from conftest import Stockroom

ENTERED = ("history.csv", "bottles.csv")
"""Rows that become entries keep their order: it is the order things happened in."""


@pytest.fixture
def tables(tmp_path: Path) -> Path:
    """A copy of the college's folder that says it is no practice house."""
    folder = Path(shutil.copytree(seeds_folder() / "college", tmp_path / "tables"))
    house = folder / "house.csv"
    text = house.read_text(encoding="utf-8")
    house.write_text(text.replace("practice,yes", "practice,no"), encoding="utf-8")
    return folder


def shuffled(table: Path, luck: random.Random) -> None:
    with table.open(encoding="utf-8", newline="") as read:
        heading, *rows = list(csv.reader(read))
    luck.shuffle(rows)
    with table.open("w", encoding="utf-8", newline="") as written:
        csv.writer(written).writerows([heading, *rows])


def plan_of(stockroom: Stockroom, store: Path) -> dict[str, Any]:
    answer = stockroom("plan", "--as-at", "2027-01-04", "--json", store=store).json
    answer.pop("practice")
    # a house of one's own is told of its backups, and a practice one is not
    answer.pop("backup")
    return dict(answer)


def test_the_same_tables_give_the_same_plan_and_no_practice(
    stockroom: Stockroom, tables: Path, practice: Path, tmp_path: Path
) -> None:
    own = tmp_path / "own-house.sqlite"
    made = stockroom("new", "--from", str(tables), store=own)
    assert made.code == 0, made.err
    assert "PRACTICE" not in stockroom("plan", "--as-at", "2027-01-04", store=own).out
    assert plan_of(stockroom, own) == plan_of(stockroom, practice)


@pytest.mark.parametrize("seed", [1, 2])
def test_shuffled_tables_give_the_same_plan(
    stockroom: Stockroom, tables: Path, practice: Path, tmp_path: Path, seed: int
) -> None:
    luck = random.Random(seed)
    for table in sorted(tables.glob("*.csv")):
        if table.name not in ENTERED:
            shuffled(table, luck)
    mixed = tmp_path / "mixed.sqlite"
    made = stockroom("new", "--from", str(tables), store=mixed)
    assert made.code == 0, made.err
    assert plan_of(stockroom, mixed) == plan_of(stockroom, practice)
