"""A slip put right leaves every balance and every record as if it had never been entered.

Random stories are told to the service, entered late and out of order as they come. Then one
step is put right in one store, and left out altogether in another.
"""

from __future__ import annotations

import random
import shutil
from collections.abc import Callable
from datetime import date, timedelta
from pathlib import Path
from typing import Any

import pytest
from small_house import small_house

from stockroom.errors import StockroomError
from stockroom.keeping.record import Record
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.service import checks, pouring, stock
from stockroom.service.answers import Done
from stockroom.service.righting import put_right
from stockroom.service.unknown import log_unknown, name_unknown
from stockroom.store.diary import diary
from stockroom.store.reading import reading
from stockroom.store.snapshot_bottles import bottles_of

FIRST, TODAY = date(2027, 1, 5), date(2027, 1, 11)
WHO: dict[str, Any] = {"today": TODAY, "by": "T1"}
BOTTLES = ("S13", "B02", "S02")

NEW = ("decanted in", "mixed", "arrived")

Step = Callable[[Path], Done]
Picture = list[dict[str, tuple[int, str, Record]]]


def drawn(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.draw(path, bottle, Amount.cm3(volume), on=on, **WHO)


def counted(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.count(path, bottle, Amount.cm3(volume), on=on, **WHO)


def decanted(bottle: str, volume: int, on: date) -> Step:
    return lambda path: pouring.decant(path, bottle, Amount.cm3(volume), place="A3", on=on, **WHO)


def lent(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.lend(path, bottle, Amount.cm3(volume), to="physics", on=on, **WHO)


def moved(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.move(path, bottle, "F1" if volume % 2 else "D1", on=on, **WHO)


def found(bottle: str, volume: int, on: date) -> Step:
    strength = parse_strength(f"{0.0950 + volume / 10_000:.4f} mol/dm3")
    return lambda path: checks.found(path, bottle, strength, sure=True, on=on, **WHO)


def looked(bottle: str, volume: int, on: date) -> Step:
    return lambda path: checks.look(path, bottle, passed=volume % 3 > 0, on=on, **WHO)


def missed(bottle: str, volume: int, on: date) -> Step:
    if volume % 2:
        return lambda path: checks.turned_up(path, bottle, None, on=on, **WHO)
    return lambda path: checks.lost(path, bottle, on=on, **WHO)


def thrown(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.discard(path, bottle, how="waste", why="old", on=on, **WHO)


def opened(bottle: str, volume: int, on: date) -> Step:
    return lambda path: stock.open_bottle(path, bottle, on=on, **WHO)


def mixed(bottle: str, volume: int, on: date) -> Step:
    other, some = "S25" if volume % 2 else "B46", Amount.cm3(volume)
    more: dict[str, Any] = {"place": None, "size": Amount.cm3(5000), "on": on}
    return lambda path: pouring.mix(path, bottle, other, some, **more, **WHO)


def spilled(bottle: str, volume: int, on: date) -> Step:
    # as if it had left for another bottle: what is noted is no link
    note = "into S25" if volume % 2 else "dropped"
    return lambda path: stock.spill(path, bottle, Amount.cm3(volume), note=note, on=on, **WHO)


def came_back(bottle: str, volume: int, on: date) -> Step:
    some = Amount.cm3(volume // 3 or 1)
    return lambda path: stock.lend_back(path, bottle, some, whom="", on=on, **WHO)


def strange(bottle: str, volume: int, on: date) -> Step:
    if volume % 2:
        name = "sulfuric acid 1.00 mol/dm3"
        return lambda path: name_unknown(path, bottle, name, evidence="label", on=on, **WHO)
    some = Amount.cm3(volume)
    return lambda path: log_unknown(path, f"clear {volume}", some, place="X1", on=on, **WHO)


KINDS = (drawn, drawn, drawn, counted, counted, decanted, lent, moved, found, looked, missed,
         thrown, opened, mixed, spilled, came_back, strange)  # fmt: skip


def story(chance: random.Random) -> list[Step]:
    return [
        chance.choice(KINDS)(
            chance.choice((*BOTTLES, "B46", "S25")),
            chance.randrange(5, 60),
            FIRST + timedelta(days=chance.randrange(7)),
        )
        for _ in range(12)
    ]


def tell(path: Path, steps: list[Step]) -> list[tuple[int, Done]]:
    """Those that were accepted, by their place in the story."""
    done = []
    for place, step in enumerate(steps):
        try:
            done.append((place, step(path)))
        except StockroomError:
            continue
    return done


def picture(path: Path) -> Picture:
    days = [FIRST + timedelta(days=day) for day in range(-1, 8)]
    with reading(path) as reader:
        return [
            {one.number: (one.left, one.place, one.record) for one in bottles_of(reader, day)}
            for day in days
        ]


@pytest.fixture(scope="module")
def small(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A house with the bottles of the stories: each is told of again and again."""
    salts = ("calcium", "hydrogen", "lithium", "marble", "silver", "sodium thiosulfate")
    return small_house(tmp_path_factory.mktemp("small") / "small.sqlite", salts)


@pytest.mark.file
@pytest.mark.parametrize("seed", range(6))
def test_a_slip_put_right_was_never_entered(small: Path, tmp_path: Path, seed: int) -> None:
    chance = random.Random(seed)
    whole, compared = story(chance), 0
    told = Path(shutil.copy(small, tmp_path / "told.sqlite"))
    accepted = tell(told, whole)
    as_told = picture(told)
    for place, done in accepted:
        left_out = Path(shutil.copy(small, tmp_path / "without.sqlite"))
        mended = Path(shutil.copy(told, tmp_path / "mended.sqlite"))
        try:
            put_right(mended, done.entry or 0, "a slip", on=None, **WHO)
        except StockroomError:
            # others lean on it: they are listed, and nothing is changed
            assert picture(mended) == as_told
            continue
        rest = [whole[other] for other, _ in accepted if other != place]
        if len(tell(left_out, rest)) < len(rest):
            # without it another step would have been refused, and there is no such story
            continue
        if any(one.entry == done.entry and one.kind in NEW for one in diary(mended, done.bottle)):
            # a number is never used again, so the two stores number what follows apart
            continue
        compared += 1
        assert picture(mended) == picture(left_out), f"seed {seed}, step {place}: {done.text}"
    assert compared >= 2


def test_the_kept_balance_is_that_of_the_entries(own: Path) -> None:
    for _, done in tell(own, story(random.Random(99)))[::2]:
        try:
            put_right(own, done.entry or 0, "a slip", on=None, **WHO)
        except StockroomError:
            continue
    with reading(own) as reader:
        kept = reader.pairs("SELECT bottle_id, held FROM kept_balance")
        summed = reader.pairs("SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id")
        now = {one.number: one.left for one in bottles_of(reader, TODAY, gone=True)}
        numbers = reader.pairs("SELECT number, id FROM bottle")
    assert kept == summed
    assert now == {number: kept[numbers[number]] for number in now}
