"""The shelf as at any moment in both senses: as it was, and as it was known to be."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks, stock
from stockroom.service.making import make_up
from stockroom.service.pouring import decant, mix
from stockroom.service.unknown import log_unknown, name_unknown
from stockroom.store.diary import diary_of
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts_from
from stockroom.store.snapshot_bottles import bottle_of, bottles_of, drawn_of
from stockroom.store.unnamed import NAMED

FRIDAY, MONDAY, TUESDAY = date(2027, 1, 8), date(2027, 1, 11), date(2027, 1, 12)


def seen(path: Path, number: str, as_at: date, known_on: date | None = None) -> Bottle | None:
    with reading(path) as reader:
        one = bottle_of(reader, number, as_at, known_on)
        every = {bottle.number: bottle for bottle in bottles_of(reader, as_at, known_on)}
    # the single bottle and the whole shelf must never tell two stories
    assert one is None or one.record.gone or every[number] == one
    return one


def held(path: Path, number: str, as_at: date, known_on: date | None = None) -> float:
    bottle = seen(path, number, as_at, known_on)
    assert bottle is not None
    return bottle.left / 1_000


def draw(path: Path, volume: float, on: date, entered: date) -> int:
    done = stock.draw(path, "S13", Amount.cm3(volume), on=on, today=entered, by="T1")
    return done.entry or 0


def test_fridays_draw_was_not_known_on_friday(own: Path) -> None:
    draw(own, 40, FRIDAY, MONDAY)
    assert held(own, "S13", FRIDAY) == 90
    assert held(own, "S13", FRIDAY, FRIDAY) == 130
    assert held(own, "S13", FRIDAY, MONDAY) == 90


def test_what_was_put_right_later_stood_until_then(own: Path) -> None:
    slip = draw(own, 40, FRIDAY, FRIDAY)
    stock.put_right(own, slip, "wrong bottle", on=None, today=TUESDAY, by="T2")
    assert held(own, "S13", FRIDAY) == held(own, "S13", MONDAY) == 130
    assert held(own, "S13", MONDAY, MONDAY) == 90
    assert held(own, "S13", MONDAY, TUESDAY) == 130


def test_a_look_entered_later_dates_nothing_before_it_was_known(own: Path) -> None:
    checks.look(own, "S03", passed=True, on=FRIDAY, today=MONDAY, by="T1")
    now, then = seen(own, "S03", FRIDAY), seen(own, "S03", FRIDAY, FRIDAY)
    assert now
    assert then
    assert len(now.record.checks) == len(then.record.checks) + 1


def test_a_bottle_entered_later_was_not_known_to_be_there(own: Path) -> None:
    done = decant(
        own, "B14", Amount.cm3(50), place=None, on=FRIDAY, today=MONDAY, by="T1"
    )  # fmt: skip
    assert seen(own, done.bottle, FRIDAY) is not None
    assert seen(own, done.bottle, FRIDAY, FRIDAY) is None
    assert held(own, "B14", FRIDAY, FRIDAY) == 1900


@pytest.mark.parametrize("known", [FRIDAY, MONDAY, TUESDAY])
def test_the_facts_of_a_day_are_those_that_were_told_on_it(own: Path, known: date) -> None:
    """What was told on a day is told again, whatever was entered since."""

    def told() -> Any:
        with reading(own) as reader:
            known_then = facts_from(reader, FRIDAY, known_on=known)
            return known_then.bottles, drawn_of(reader, FRIDAY, known)

    slip = draw(own, 10, FRIDAY, FRIDAY)
    if known >= MONDAY:
        stock.put_right(own, slip, "slip", on=None, today=MONDAY, by="T1")
    before = told()
    later = date(2027, 1, 13)
    draw(own, 7, FRIDAY, later)
    if known < MONDAY:
        stock.put_right(own, slip, "slip", on=None, today=later, by="T1")
    stock.count(own, "S13", Amount.cm3(50), on=FRIDAY, today=later, by="T1")
    assert told() == before


def test_the_diary_stops_at_what_was_entered(own: Path) -> None:
    slip = draw(own, 40, FRIDAY, FRIDAY)
    stock.put_right(own, slip, "wrong bottle", on=None, today=TUESDAY, by="T2")
    then, now = diary_of(own, "S13", MONDAY).entries, diary_of(own, "S13").entries
    assert (then[-1].entry, then[-1].undone_by, then[-1].left.number) == (slip, None, 90)
    assert (now[-1].puts_right, now[-1].left.number) == (slip, 130)


def test_what_was_named_later_had_no_name(own: Path) -> None:
    done = log_unknown(
        own, "white powder", Amount.grams(100), place="X1", on=FRIDAY, today=FRIDAY, by="T1"
    )
    name_unknown(
        own, done.bottle, "sodium chloride", evidence="label", on=None, today=TUESDAY, by="T1"
    )
    assert_named(own, done.bottle, FRIDAY, None, "sodium chloride", "unknown: white powder")
    assert_named(own, done.bottle, TUESDAY, MONDAY, "unknown", "unknown: white powder")
    assert_named(own, done.bottle, TUESDAY, TUESDAY, "sodium chloride", NAMED)
    # taken back later: it was known by that name all the same
    last = diary_of(own, done.bottle).entries[-1].entry
    stock.put_right(own, last, "no label", on=None, today=date(2027, 1, 14), by="T1")
    assert_named(own, done.bottle, TUESDAY, TUESDAY, "sodium chloride", NAMED)
    assert_named(own, done.bottle, TUESDAY, None, "unknown", "unknown: white powder")


def assert_named(
    path: Path, number: str, as_at: date, known_on: date | None, line: str, apart: str
) -> None:
    bottle = seen(path, number, as_at, known_on)
    assert bottle
    assert (bottle.line, bottle.record.set_aside) == (line, apart)


def test_what_was_lent_and_came_back_later_was_lent_until_then(own: Path) -> None:
    who: dict[str, Any] = {"by": "T1"}
    stock.lend(own, "S13", Amount.cm3(30), to="physics", on=FRIDAY, today=FRIDAY, **who)
    stock.lend_back(own, "S13", Amount.cm3(30), whom="", on=MONDAY, today=TUESDAY, **who)
    assert held(own, "S13", MONDAY) == held(own, "S13", MONDAY, TUESDAY) == 130
    assert held(own, "S13", MONDAY, MONDAY) == held(own, "S13", FRIDAY) == 100


def test_a_mixture_is_known_by_what_was_known_of_its_parts(own: Path) -> None:
    """Found of a part on Friday, written on Tuesday: until then the mixture knew the label."""
    fresh = make_up(own, "sodium thiosulfate 0.100 mol/dm3", Amount.cm3(500), sources=["S01"],
                    place="D1", on=FRIDAY, today=FRIDAY, by="T1").bottle  # fmt: skip
    done = mix(own, fresh, "S02", Amount.cm3(500), place=None, size=Amount.cm3(2000),
               on=MONDAY, today=MONDAY, by="T1")  # fmt: skip
    before = seen(own, done.bottle, MONDAY)
    strength = parse_strength("0.0900 mol/dm3")
    checks.found(own, fresh, strength, sure=True, on=FRIDAY, today=TUESDAY, by="T1")
    now, then = seen(own, done.bottle, MONDAY), seen(own, done.bottle, MONDAY, MONDAY)
    assert now
    assert then
    assert then == before
    assert now.record.blend != then.record.blend
