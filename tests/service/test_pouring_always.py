"""Laws of pouring: nothing is gained or lost by it, and nothing lives longer for it."""

from __future__ import annotations

import random
from datetime import date, timedelta
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import StockroomError
from stockroom.keeping.verdict import USABLE, Condition, Verdict, verdict
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks, pouring, stock
from stockroom.store.reading import reading
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of

TODAY = date(2027, 1, 11)
DAYS = tuple(TODAY + timedelta(days=30 * month) for month in range(0, 14, 2))
MANY = ("S02", "S05", "S13", "B01", "B02", "B14", "B27")


def shelf(path: Path, day: date = TODAY) -> dict[str, tuple[Bottle, Verdict]]:
    with reading(path) as reader:
        lines = lines_of(reader)
        return {
            one.number: (one, verdict(one.record, lines[one.line].rules, day))
            for one in bottles_of(reader, day)
        }


def solute(path: Path) -> dict[str, float]:
    """What there is of each line: its volume, and that times the strength expected."""
    held: dict[str, float] = {}
    for bottle, judged in shelf(path).values():
        strength = judged.strengths.expected
        held[bottle.line] = held.get(bottle.line, 0) + bottle.left
        if strength is not None:
            key = f"{bottle.line}, solute"
            held[key] = held.get(key, 0) + bottle.left * strength
    return held


def pour_about(path: Path, chance: random.Random, times: int = 8) -> int:
    """Decant from three bottles, then from one poured bottle into another, or two together."""
    who: dict[str, Any] = {"place": None, "on": None, "today": TODAY, "by": "T1"}
    poured, done = chance.sample(MANY, 3), 0
    lines = {number: shelf(path)[number][0].line for number in poured}
    for turn in range(times):
        one = poured[turn] if turn < 3 else chance.choice(poured)
        volume = Amount.cm3(chance.randrange(5, 30))
        other = chance.choice([each for each in poured if lines[each] == lines[one]])
        try:
            if other == one:
                number = pouring.decant(path, one, volume, **who).bottle
            else:
                big = Amount.cm3(9000)
                number = pouring.mix(path, one, other, volume, size=big, **who).bottle
        except StockroomError:
            continue
        poured.append(number)
        lines[number] = lines[one]
        done += 1
    return done


@pytest.mark.parametrize("seed", range(3))
def test_nothing_is_gained_or_lost(own: Path, seed: int) -> None:
    chance = random.Random(seed)
    strength = parse_strength("0.0970 mol/dm3")
    checks.found(own, "S02", strength, on=None, today=TODAY, by="T1")
    before = solute(own)
    assert pour_about(own, chance) >= 3
    after = solute(own)
    assert after == pytest.approx(before, rel=1e-9)


@pytest.mark.parametrize("seed", range(3))
def test_nothing_outlives_what_it_was_poured_from(own: Path, seed: int) -> None:
    pour_about(own, random.Random(10 + seed))
    compared = 0
    for day in DAYS:
        there = shelf(own, day)
        for bottle, judged in there.values():
            for source in bottle.lineage if judged.condition in USABLE else ():
                if source in there and there[source][0].line == bottle.line:
                    limit = there[source][1].usable_until or date.max
                    assert (judged.usable_until or date.max) <= limit, (bottle.number, source, day)
                    assert there[source][1].condition is not Condition.NO_DATE
                    compared += 1
    assert compared


@pytest.mark.parametrize("seed", range(2))
def test_nothing_undated_gets_a_date_by_being_poured(own: Path, seed: int) -> None:
    """Its children are without one as well, until somebody has looked at each."""
    chance = random.Random(20 + seed)
    who: dict[str, Any] = {"place": None, "on": None, "today": TODAY, "by": "T1"}
    arrived = stock.arrive(own, "potassium chloride", Amount.grams(500), printed="2029-01",
                           place="A2", on=None, today=TODAY, by="T1")  # fmt: skip
    undated = ["B35"]
    for _ in range(6):
        one = chance.choice(undated)
        some = Amount(Kind.MASS, shelf(own)[one][0].left // 2)
        done = pouring.decant(own, one, some, good_until=date(2028, 1, 1), **who)
        if chance.random() < 0.5:
            part = pouring.decant(own, arrived.bottle, Amount.grams(20), **who)
            pair = [part.bottle, done.bottle]
            chance.shuffle(pair)
            done = pouring.mix(own, pair[0], pair[1], size=Amount.grams(500), **who)
        undated.append(done.bottle)
    there = shelf(own)
    assert {there[one][1].condition for one in undated} == {Condition.NO_DATE}
    assert there[arrived.bottle][1].condition is Condition.SOUND
    checks.look(own, undated[-1], passed=True, on=None, today=TODAY, by="T1")
    there = shelf(own)
    assert there[undated[-1]][1].condition is Condition.SOUND
    assert there["B35"][1].condition is Condition.NO_DATE
