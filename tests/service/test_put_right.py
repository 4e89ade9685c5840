"""An entry put right stays to be seen, and every total is as if it had never happened."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadInput, NotAllowed, NotEnough, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.service import checks, making, stock
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T2"}


def number_of(path: Path, bottle: str, kind: str) -> int:
    return next(entry.entry for entry in diary(path, bottle) if entry.kind == kind)


def test_totals_are_as_if_it_never_happened(own: Path) -> None:
    before = facts(own, TODAY)
    slip = stock.draw(own, "B06", Amount.grams(500), **WHO)
    stock.put_right(own, slip.entry or 0, "meant 50 g", **WHO)
    assert facts(own, TODAY) == before
    assert [entry.kind for entry in diary(own, "B06")][-2:] == ["drawn", "put right"]


def test_the_opening_a_slip_implied_goes_with_it(own: Path) -> None:
    before = facts(own, TODAY)
    slip = stock.draw(own, "B02", Amount.cm3(5), **WHO)
    done = stock.put_right(own, slip.entry or 0, "wrong bottle", **WHO)
    assert len(done.details) == 1
    assert facts(own, TODAY) == before


def test_an_opening_another_draw_needs_stays(own: Path) -> None:
    slip = stock.draw(own, "B02", Amount.cm3(5), **WHO)
    stock.draw(own, "B02", Amount.cm3(6), **WHO)
    stock.put_right(own, slip.entry or 0, "wrong bottle", **WHO)
    opened = [bottle.record.opened for bottle in facts(own, TODAY).bottles]
    assert TODAY in opened


def test_a_make_takes_its_draws_with_it(own: Path) -> None:
    before = facts(own, TODAY)
    volume = Amount.cm3(1000)
    made = making.make_up(
        own, "sodium thiosulfate 0.200 mol/dm3", volume, sources=["S01"], place="D1", **WHO
    )
    stock.put_right(own, made.entry or 0, "never made", **WHO)
    assert facts(own, TODAY).bottles == before.bottles


def test_a_count_takes_what_kept_it_true_with_it(own: Path) -> None:
    counted = stock.count(own, "S13", Amount.cm3(100), **WHO)
    stock.draw(own, "S13", Amount.cm3(40), on=date(2027, 1, 5), today=TODAY, by="T1")
    stock.put_right(own, counted.entry or 0, "misread", **WHO)
    left = {bottle.number: bottle.left for bottle in facts(own, TODAY).bottles}
    assert left["S13"] == Amount.cm3(90).micro


def test_a_reversal_before_a_count_leaves_the_count_true(own: Path) -> None:
    slip = stock.draw(own, "S13", Amount.cm3(40), on=date(2027, 1, 5), today=TODAY, by="T1")
    stock.count(own, "S13", Amount.cm3(100), **WHO)
    stock.put_right(own, slip.entry or 0, "wrong bottle", **WHO)
    left = {bottle.number: bottle.left for bottle in facts(own, TODAY).bottles}
    assert left["S13"] == Amount.cm3(100).micro


def test_a_look_put_right_no_longer_counts(own: Path) -> None:
    before = facts(own, TODAY)
    look = checks.look(own, "S03", passed=True, **WHO)
    stock.put_right(own, look.entry or 0, "it was S02", **WHO)
    assert facts(own, TODAY) == before


def test_an_unknown_entry_is_refused(own: Path) -> None:
    with pytest.raises(UnknownName, match="No entry 99999"):
        stock.put_right(own, 99999, "slip", **WHO)
    for more in (2**63, 10**20):
        with pytest.raises(UnknownName, match=f"No entry {more}"):
            stock.put_right(own, more, "slip", **WHO)


def test_a_reason_is_wanted(own: Path) -> None:
    with pytest.raises(BadInput, match="Why is entry 1 wrong"):
        stock.put_right(own, 1, " ", **WHO)


def test_an_entry_is_put_right_once(own: Path) -> None:
    slip = next(entry for entry in diary(own, "B06") if entry.undone_by)
    with pytest.raises(NotAllowed, match=f"Entry {slip.entry} was put right by T2 on 17 Dec"):
        stock.put_right(own, slip.entry, "again", **WHO)


def test_a_putting_right_is_not_put_right(own: Path) -> None:
    with pytest.raises(NotAllowed, match="is a putting-right itself"):
        stock.put_right(own, number_of(own, "B06", "put right"), "no", **WHO)


def test_a_beginning_others_lean_on_lists_them_first(own: Path) -> None:
    with pytest.raises(NotAllowed, match=r"B10 has later entries: entry .* opened") as caught:
        stock.put_right(own, number_of(own, "B10", "arrived"), "never came", **WHO)
    assert "S08 potassium permanganate 0.0200 mol/dm3 made from it" in caught.value.message


def test_a_reversal_that_would_leave_less_than_nothing_is_refused(own: Path) -> None:
    counted = stock.count(own, "S13", Amount.cm3(200), **WHO)
    stock.draw(own, "S13", Amount.cm3(150), **WHO)
    with pytest.raises(NotEnough, match="S13 holds 50 cm³; 70 cm³ asked"):
        stock.put_right(own, counted.entry or 0, "misread", **WHO)


def test_a_make_does_not_take_with_it_what_only_reads_like_its_draw(own: Path) -> None:
    copper = "copper(II) sulfate 0.500 mol/dm3"
    made = making.make_up(own, copper, Amount.cm3(100), sources=["B19"], place="C1", **WHO)
    stock.spill(own, "B19", Amount.grams(2), note=f"into {made.bottle}", **WHO)
    stock.put_right(own, made.entry or 0, "never made", **WHO)
    left = {bottle.number: bottle.left for bottle in facts(own, TODAY).bottles}
    assert left["B19"] == Amount.grams(718).micro
