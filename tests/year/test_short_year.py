"""Two weeks of the simulated year: every fault, every check, and the same seed the same ledger."""

from __future__ import annotations

import random
import shutil
from datetime import date
from pathlib import Path

import pytest
from simulated_year import Broken, Year
from small_house import small_house
from year_model import Fact, Model

from stockroom.measure.amounts import Amount
from stockroom.service import stock

pytestmark = pytest.mark.file
DAY = date(2027, 1, 4)


@pytest.fixture(scope="module")
def small(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Enough to work with for two weeks; the whole college is lived in by `run.py`."""
    return small_house(tmp_path_factory.mktemp("small") / "small.sqlite")


def lived(small: Path, folder: Path, seed: int, days: int) -> tuple[Year, str]:
    folder.mkdir()
    path = Path(shutil.copy(small, folder / "store.sqlite"))
    year = Year(path, folder, seed, days, calm=30)
    return year, year.run()


def test_two_weeks_hold_and_replay_bit_for_bit(small: Path, tmp_path: Path) -> None:
    first, digest = lived(small, tmp_path / "first", 7, 15)
    again, same = lived(small, tmp_path / "again", 7, 15)
    assert (again.step, again.outcomes, same) == (first.step, first.outcomes, digest)
    assert first.step > 40
    assert lived(small, tmp_path / "other", 8, 1)[1] != digest
    # an accident of each kind was among them, and most of the work was done all the same
    assert {what.split(":")[0] for what in first.outcomes} >= {
        f"fault {name}" for name in ("none", "killed", "locked", "disc full", "sent twice")
    }
    assert first.outcomes["fault none: done"] > first.step / 3


def test_what_is_written_behind_the_years_back_breaks_it(small: Path, tmp_path: Path) -> None:
    own = Path(shutil.copy(small, tmp_path / "own.sqlite"))
    year = Year(own, tmp_path, 7, days=0)
    year.run()
    stock.draw(own, "S13", Amount.cm3(1), on=None, today=DAY, by="T9")
    with pytest.raises(Broken, match="no longer as it was"):
        year.look_through(DAY, random.Random(1))


@pytest.mark.parametrize(
    ("facts", "held"),
    [
        ([Fact(1, "B1", date(2027, 1, 1), 100)], 100),
        # a draw written down late, before the count that saw it gone
        (
            [
                Fact(1, "B1", date(2027, 1, 1), 100),
                Fact(2, "B1", date(2027, 1, 5), counted=60),
                Fact(3, "B1", date(2027, 1, 4), -30),
            ],
            60,
        ),
        (
            [
                Fact(1, "B1", date(2027, 1, 1), 100),
                Fact(2, "B1", date(2027, 1, 5), counted=60),
                Fact(3, "B1", date(2027, 1, 5), -10),
            ],
            50,
        ),
    ],
)
def test_the_model_counts_as_a_person_would(facts: list[Fact], held: int) -> None:
    model = Model()
    for fact in facts:
        model.add(fact)
    assert model.held("B1") == held


def test_what_was_put_right_never_happened() -> None:
    model = Model()
    model.add(Fact(1, "B1", date(2027, 1, 1), 100))
    model.add(Fact(2, "B1", date(2027, 1, 5), counted=60))
    model.never(2)
    assert model.held("B1") == 100
    assert model.held("B1", date(2026, 12, 31)) == 0
