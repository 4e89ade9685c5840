"""What is decanted keeps lot, strength and dates; it may say less on its label, never more."""

from __future__ import annotations

import contextlib
import sqlite3
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadAmount, BadDate, BrokenPlan, NotAllowed, NotEnough
from stockroom.keeping.verdict import Verdict, verdict
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle
from stockroom.service import checks, pouring, stock
from stockroom.service.plan import term_plan
from stockroom.service.righting import put_right
from stockroom.store.diary import diary
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts
from stockroom.store.snapshot_bottles import bottle_of
from stockroom.store.snapshot_lines import lines_of

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def seen(path: Path, number: str, day: date = TODAY) -> Bottle:
    with reading(path) as reader:
        found = bottle_of(reader, number, day)
    assert found is not None
    return found


def judged(path: Path, number: str, day: date = TODAY) -> Verdict:
    bottle = seen(path, number, day)
    with reading(path) as reader:
        return verdict(bottle.record, lines_of(reader)[bottle.line].rules, day)


def decant(path: Path, bottle: str = "B14", volume: float = 250, **more: Any) -> Any:
    usual: dict[str, Any] = {"place": None}
    return pouring.decant(path, bottle, Amount.cm3(volume), **(usual | WHO | more))


def test_there_are_two_bottles_and_nothing_was_used(own: Path) -> None:
    drawn = facts(own, TODAY).drawn
    done = decant(own, place="A1")
    assert (done.bottle, seen(own, "B46").left) == ("B46", Amount.cm3(250).micro)
    assert seen(own, "B14").left == Amount.cm3(1650).micro
    assert facts(own, TODAY).drawn == drawn


def test_it_is_numbered_as_its_source_was(own: Path) -> None:
    assert decant(own, "S02").bottle == "S25"


@pytest.mark.parametrize("number", ["B14", "S02", "S05", "B01", "B27", "B29"])
def test_everything_known_of_the_source_is_known_of_it(own: Path, number: str) -> None:
    done = decant(own, number, 20)
    source, poured = seen(own, number), seen(own, done.bottle)
    assert poured.line == source.line
    assert poured.record.opened == source.record.opened
    assert poured.record.checks == source.record.checks
    assert (poured.record.made, poured.record.received) == (
        source.record.made,
        source.record.received,
    )
    assert judged(own, done.bottle).strengths == judged(own, number).strengths
    assert judged(own, done.bottle).usable_until == judged(own, number).usable_until


def test_a_sealed_bottle_is_opened_by_it_and_both_count_from_that_day(own: Path) -> None:
    done = decant(own, "B02", 50)
    assert "B02 was sealed: opened 11 January 2027." in done.details
    assert seen(own, "B02").record.opened == seen(own, done.bottle).record.opened == TODAY
    drawn = stock.draw(own, done.bottle, Amount.cm3(5), **WHO)
    assert not any("sealed" in line for line in drawn.details)


def test_what_is_learnt_of_one_later_says_nothing_of_the_other(own: Path) -> None:
    number = decant(own, "S02").bottle
    checks.found(own, "S02", parse_strength("0.0979 mol/dm3"), **WHO)
    assert judged(own, number).strengths.found == pytest.approx(0.0987)
    checks.look(own, number, passed=False, **WHO)
    assert (seen(own, "S02").record.set_aside, seen(own, number).record.set_aside) == (
        "",
        "did not pass when looked at",
    )


def test_a_slip_of_the_source_put_right_is_right_on_both(own: Path) -> None:
    slip = checks.found(own, "S02", parse_strength("0.0900 mol/dm3"), **WHO)
    number = decant(own, "S02").bottle
    assert judged(own, number).strengths.found == pytest.approx(0.0900)
    put_right(own, slip.entry or 0, "misread", **WHO)
    assert judged(own, number).strengths == judged(own, "S02").strengths
    assert judged(own, number).strengths.found == pytest.approx(0.0987)


def test_what_was_known_before_and_is_written_later_counts_for_both(own: Path) -> None:
    number = decant(own, "S02").bottle
    late = date(2027, 1, 8)
    checks.found(own, "S02", parse_strength("0.0985 mol/dm3"), on=late, today=TODAY, by="T2")
    assert judged(own, number).strengths.found == pytest.approx(0.0985)


def test_a_longer_date_is_refused_with_the_one_it_cannot_outlast(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"cannot outlast the bottle it came from \(31 August"):
        decant(own, "B02", 50, good_until=date(2029, 1, 1))
    assert "B46" not in {bottle.number for bottle in facts(own, TODAY).bottles}


def test_a_shorter_date_is_kept_and_decides(own: Path) -> None:
    done = decant(own, "B02", 50, good_until=date(2027, 1, 20))
    after = judged(own, done.bottle)
    assert after.good_until == date(2027, 1, 20)
    assert after.decided_by == "good until 2027-01-20 written on it when it was decanted"
    assert judged(own, done.bottle, date(2027, 1, 21)).condition == "past"


def test_a_decant_of_a_decant_keeps_the_shorter_date(own: Path) -> None:
    first = decant(own, "B02", 100, good_until=date(2027, 1, 20)).bottle
    second = decant(own, first, 50).bottle
    assert judged(own, second).good_until == date(2027, 1, 20)
    assert seen(own, second).lineage == (first, "B02")


def test_a_date_that_is_over_is_refused(own: Path) -> None:
    with pytest.raises(BadDate, match="is over on 11 January 2027 already"):
        decant(own, good_until=date(2027, 1, 10))


def test_more_than_there_is_is_refused_whole(own: Path) -> None:
    with pytest.raises(NotEnough, match="B14 holds 1 900 cm³; 2 000 cm³ asked"):
        decant(own, "B14", 2000)
    assert seen(own, "B14").left == Amount.cm3(1900).micro


def test_it_must_go_into_what_it_is_poured_into(own: Path) -> None:
    with pytest.raises(BadAmount, match="250 cm³ does not go into 100 cm³"):
        decant(own, size=Amount.cm3(100))
    assert seen(own, decant(own, size=Amount.cm3(500)).bottle).size == Amount.cm3(500).micro


def test_before_the_bottle_was_made_is_refused_with_the_day(own: Path) -> None:
    with pytest.raises(BadDate, match="before S02 was made"):
        decant(own, "S02", 50, on=date(2026, 11, 30))


def test_what_is_set_aside_is_not_decanted(own: Path) -> None:
    checks.spoil(own, "S05", "yellow tinge", **WHO)
    with pytest.raises(NotAllowed, match="S05 is set aside: yellow tinge"):
        decant(own, "S05", 100)


@pytest.mark.file
def test_what_is_never_kept_is_not_decanted(own: Path) -> None:
    # no bottle of such a line may stand there, so a line that has one is made one
    line = seen(own, "S05").line
    with contextlib.closing(sqlite3.connect(own)) as link, link:
        link.execute("UPDATE line SET never_kept = 'gives off gas' WHERE key = ?", (line,))
    with pytest.raises(NotAllowed, match=r"hydrochloric acid 2\.00 mol/dm3 is never kept"):
        decant(own, "S05", 100)


def test_a_spoiled_source_lists_what_was_poured_from_it(own: Path) -> None:
    number = decant(own, "S05", 100).bottle
    done = checks.spoil(own, "S05", "iron", **WHO)
    assert f"Poured from it: {number} hydrochloric acid 2.00 mol/dm³." in [
        line.replace("dm3", "dm³") for line in done.details
    ]


def test_a_printed_date_is_read_on_the_source_for_both(own: Path) -> None:
    number = decant(own, "B01", 20).bottle
    with pytest.raises(NotAllowed, match=f"{number} was poured from B01"):
        checks.printed(own, number, date(2027, 3, 31), **WHO)


def test_it_is_in_no_picture_of_a_day_before(own: Path) -> None:
    decant(own)
    numbers = {bottle.number for bottle in facts(own, date(2027, 1, 10)).bottles}
    assert "B46" not in numbers
    assert seen(own, "B14", date(2027, 1, 10)).left == Amount.cm3(1900).micro


def test_both_halves_are_put_right_together_whichever_is_named(own: Path) -> None:
    before = facts(own, TODAY)
    for kind, number in (("decanted", "B02"), ("decanted in", None)):
        done = decant(own, "B02", 50)
        entry = next(e.entry for e in reversed(diary(own, number or done.bottle)) if e.kind == kind)
        told = put_right(own, entry, "wrong bottle", **WHO)
        assert len(told.details) == 2
        assert facts(own, TODAY) == before


def test_a_decant_that_was_drawn_from_is_listed_first(own: Path) -> None:
    done = decant(own)
    slip = stock.draw(own, done.bottle, Amount.cm3(5), **WHO)
    with pytest.raises(NotAllowed, match=f"B46 has later entries: entry {slip.entry} drawn"):
        put_right(own, done.entry or 0, "wrong bottle", **WHO)


def test_the_plan_counts_on_both_and_is_replayed(own: Path) -> None:
    decant(own, "S05", 2300)
    try:
        plan = term_plan(own, as_at=TODAY)
    except BrokenPlan as broken:
        pytest.fail(str(broken))
    used = {draw.bottle for need in plan.needs for draw in need.draws}
    used |= {draw.bottle for make in plan.makes for draw in make.sources}
    assert {"S05", "S25"} <= used


def test_what_was_found_before_it_was_poured_teaches_once(own: Path) -> None:
    number = decant(own, "S02").bottle
    assert seen(own, number).inherited == len(seen(own, "S02").record.checks) > 0
    assert seen(own, "S02").inherited == 0
