"""Two bottles of one thing in one: a new number, as old as the older, in doubt with either."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, NotAllowed, NotEnough
from stockroom.keeping.verdict import Verdict, verdict
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import arriving, checks, making, pouring, stock
from stockroom.service.righting import put_right
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts
from stockroom.store.snapshot_bottles import bottle_of, bottles_of
from stockroom.store.snapshot_lines import lines_of

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}
THIO = "sodium thiosulfate 0.100 mol/dm3"


def seen(path: Path, number: str, day: date = TODAY) -> Bottle:
    with reading(path) as reader:
        found = bottle_of(reader, number, day)
    assert found is not None
    return found


def judged(path: Path, number: str, day: date = TODAY) -> Verdict:
    bottle = seen(path, number, day)
    with reading(path) as reader:
        return verdict(bottle.record, lines_of(reader)[bottle.line].rules, day)


def mix(path: Path, first: str, second: str, volume: float | None = None, **more: Any) -> Any:
    amount = None if volume is None else Amount.cm3(volume)
    return pouring.mix(path, first, second, amount, **({"place": None} | WHO | more))


@pytest.fixture
def fresh(own: Path) -> str:
    """A second bottle of thiosulfate 0.100, made today and found stronger than S02."""
    done = making.make_up(own, THIO, Amount.cm3(500), sources=["S01"], place="D1", **WHO)
    checks.found(own, done.bottle, parse_strength("0.1010 mol/dm3"), **WHO)
    return done.bottle


def test_all_of_the_first_and_so_much_of_the_second(own: Path, fresh: str) -> None:
    done = mix(own, "S02", fresh, 200)
    held = {number: seen(own, number).left for number in ("S02", fresh, done.bottle)}
    cm3 = Amount.cm3
    assert held == {"S02": 0, fresh: cm3(300).micro, done.bottle: cm3(1600).micro}
    assert seen(own, done.bottle).lineage[:2] == ("S02", fresh)
    assert "S02 is empty: stockroom discard S02." in done.details


def test_nothing_of_it_was_used(own: Path, fresh: str) -> None:
    before = facts(own, TODAY).drawn
    mix(own, "S02", fresh)
    assert facts(own, TODAY).drawn == before


def test_its_strength_is_by_shares_and_none_that_was_found(own: Path, fresh: str) -> None:
    number = mix(own, "S02", fresh, 200).bottle
    known = judged(own, number).strengths
    # (1400 × 0.0987 + 200 × 0.1010) / 1600, both as found
    parts = [judged(own, "S02").strengths.expected, judged(own, fresh).strengths.expected]
    assert None not in parts
    assert known.expected == pytest.approx((1400 * (parts[0] or 0) + 200 * (parts[1] or 0)) / 1600)
    assert known.expected == pytest.approx(0.09899, abs=0.00001)
    assert known.found is None
    assert seen(own, number).known_by == f"by mixing of S02 and {fresh}"


def test_it_is_as_old_as_the_older_whichever_is_poured_first(own: Path, fresh: str) -> None:
    number = mix(own, fresh, "S02", 300, size=Amount.cm3(1000)).bottle
    assert seen(own, number).record.made == date(2026, 12, 2)
    for day in (TODAY, date(2027, 2, 1), date(2027, 6, 1)):
        until = [judged(own, one, day).usable_until for one in ("S02", fresh)]
        earlier = min((one for one in until if one), default=date.max)
        assert (judged(own, number, day).usable_until or date.max) <= earlier


def test_a_strength_found_of_it_takes_the_place_of_the_one_worked_out(
    own: Path, fresh: str
) -> None:
    number = mix(own, "S02", fresh).bottle
    checks.found(own, number, parse_strength("0.0992 mol/dm3"), **WHO)
    assert judged(own, number).strengths.expected == pytest.approx(0.0992)


def test_doubt_known_of_a_part_before_is_doubt_of_the_whole(own: Path, fresh: str) -> None:
    number = mix(own, "S02", fresh).bottle
    late = date(2027, 1, 9)
    checks.spoil(own, "S02", "left open", on=late, today=TODAY, by="T2")
    assert seen(own, number).record.set_aside == "left open"
    checks.spoil(own, fresh, "iron", **WHO)
    assert seen(own, number).record.set_aside == "left open"


def test_a_slip_of_a_part_put_right_is_right_in_the_whole(own: Path, fresh: str) -> None:
    number = mix(own, "S02", fresh, 100).bottle
    before = judged(own, number)
    slip = checks.found(
        own, "S02", parse_strength("0.0900 mol/dm3"), on=date(2027, 1, 9), today=TODAY, by="T2"
    )
    assert judged(own, number).strengths.expected != before.strengths.expected
    put_right(own, slip.entry or 0, "misread", **WHO)
    assert judged(own, number) == before


def test_put_right_the_parts_hold_what_they_held(own: Path, fresh: str) -> None:
    before = facts(own, TODAY)
    done = mix(own, "S02", fresh)
    put_right(own, done.entry or 0, "did not", **WHO)
    assert facts(own, TODAY) == before


def test_two_lots_are_joined_and_told(own: Path) -> None:
    def came(lot: str) -> str:
        return arriving.arrive(
            own, "hexane", Amount.cm3(500), printed="none", place="F2",
            label=arriving.Label(lot=lot), **WHO,
        ).bottle  # fmt: skip

    first, second = came("A1"), came("B7")
    done = mix(own, first, second, size=Amount.cm3(1000))
    assert done.bottle.startswith("B")
    assert seen(own, done.bottle).lot == "A1 + B7"
    assert any("Two lots in one bottle (A1 + B7)" in line for line in done.details)
    # both were sealed, so both and the mixture count as opened today
    assert {seen(own, one).record.opened for one in (first, second, done.bottle)} == {TODAY}


def test_another_strength_is_refused_with_what_to_do(own: Path) -> None:
    with pytest.raises(NotAllowed, match="are two things: only bottles of one line") as caught:
        mix(own, "S02", "S01")
    assert "stockroom make" in caught.value.hint


def test_acid_into_alkali_is_refused_without_a_way(own: Path) -> None:
    with pytest.raises(NotAllowed) as caught:
        mix(own, "S05", "S06")
    assert caught.value.hint == "Keep them apart."


def test_a_bottle_with_itself_is_refused(own: Path) -> None:
    with pytest.raises(NotAllowed, match="S02 with itself"):
        mix(own, "S02", "s02")


def test_an_empty_one_is_refused(own: Path) -> None:
    with pytest.raises(NotEnough, match="S24f is empty"):
        mix(own, "S24f", "S24a")


def test_what_does_not_go_in_is_asked_for_a_larger_bottle(own: Path, fresh: str) -> None:
    with pytest.raises(BadAmount, match="does not go into 500 cm³") as caught:
        mix(own, fresh, "S02")
    assert "--into" in caught.value.hint


def test_a_bottle_drawn_from_later_was_not_empty_then(own: Path) -> None:
    then: dict[str, Any] = {"place": None, "on": date(2027, 1, 8), "today": TODAY, "by": "T1"}
    number = pouring.decant(own, "S02", Amount.cm3(500), **then).bottle
    stock.draw(own, "S02", Amount.cm3(5), **WHO)
    with pytest.raises(NotAllowed, match="S02 was there after 8 January 2027"):
        pouring.mix(own, number, "S02", None, size=Amount.cm3(2000), **then)


@pytest.mark.file
def test_a_bottle_topped_up_again_and_again_asks_once_for_each_pouring(own: Path) -> None:
    """Each mixture leads to all before it, and the way there is gone once."""
    number = "S02"
    asked: list[str] = []
    for _ in range(7):
        part = making.make_up(
            own, THIO, Amount.cm3(20), sources=["S01"], place="D1", sure=True, **WHO
        )
        number = mix(own, number, part.bottle, size=Amount.cm3(5000)).bottle
    with reading(own) as reader:
        reader.connection.set_trace_callback(asked.append)
        there = bottles_of(reader, TODAY)
        reader.connection.set_trace_callback(None)
    assert number in {one.number for one in there}
    shares = [each for each in asked if "-SUM(change)" in each and "'into " in each]
    assert len(shares) == 7
    assert all("bottle_id IN (" in each for each in shares)
    assert sum("FROM keeping_rule" in each for each in asked) == 1
