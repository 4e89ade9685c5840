"""Any entry can be put right; what could not be without it is listed first."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadInput, NotAllowed, NotEnough
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_strength
from stockroom.service import checks, making, pouring, stock
from stockroom.service.plan import term_plan
from stockroom.service.righting import entry_number, put_right
from stockroom.store.diary import diary
from stockroom.store.reading import reading
from stockroom.store.snapshot import facts
from stockroom.store.snapshot_bottles import bottle_of

FRIDAY, TODAY = date(2027, 1, 8), date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def undo(path: Path, entry: int | None, why: str = "a slip") -> Any:
    return put_right(path, entry or 0, why, on=None, today=TODAY, by="T2")


def opened(path: Path, number: str) -> date | None:
    with reading(path) as reader:
        found = bottle_of(reader, number, TODAY)
    assert found is not None
    return found.record.opened


def last(path: Path, number: str, kind: str) -> int:
    return next(one.entry for one in reversed(diary(path, number)) if one.kind == kind)


def test_an_opening_is_counted_from_the_next_draw_when_the_first_was_a_slip(own: Path) -> None:
    slip = stock.draw(own, "B02", Amount.cm3(5), on=FRIDAY, today=TODAY, by="T1")
    kept = stock.draw(own, "B02", Amount.cm3(6), **WHO)
    assert opened(own, "B02") == FRIDAY
    done = undo(own, slip.entry)
    assert opened(own, "B02") == TODAY
    assert any("was drawn from all the same: opened 11 January" in x for x in done.details)
    undo(own, kept.entry)
    assert opened(own, "B02") is None


def test_an_opening_put_right_leaves_what_the_draws_imply(own: Path) -> None:
    wrong = stock.open_bottle(own, "B02", on=FRIDAY, today=TODAY, by="T1")
    stock.draw(own, "B02", Amount.cm3(5), **WHO)
    undo(own, wrong.entry)
    assert opened(own, "B02") == TODAY
    # and the right day can still be given, since nobody wrote this one
    stock.open_bottle(own, "B02", on=date(2027, 1, 9), today=TODAY, by="T1")
    assert opened(own, "B02") == date(2027, 1, 9)


def test_the_opening_of_a_source_goes_with_its_make(own: Path) -> None:
    before = facts(own, TODAY).bottles
    done = making.make_up(
        own, "sodium chloride 0.500 mol/dm3", Amount.cm3(100), sources=["B40"],
        place=None, **WHO,
    )  # fmt: skip
    assert opened(own, "B40") == TODAY
    assert len(undo(own, done.entry).details) == 2
    assert facts(own, TODAY).bottles == before


def test_what_was_missed_and_turned_up_is_undone_from_the_end(own: Path) -> None:
    missed = checks.lost(own, "S13", on=FRIDAY, today=TODAY, by="T1")
    back = checks.turned_up(own, "S13", "D1", **WHO)
    used = checks.look(own, "S13", passed=True, **WHO)
    with pytest.raises(NotAllowed, match=f"S13 has later entries: entry {back.entry} turned up"):
        undo(own, missed.entry)
    with pytest.raises(NotAllowed, match=f"entry {used.entry} looked"):
        undo(own, back.entry)
    for entry in (used.entry, back.entry, missed.entry):
        undo(own, entry)


def test_a_loan_that_came_back_is_undone_from_the_end(own: Path) -> None:
    lent = stock.lend(own, "B32", Amount.grams(10), to="physics", **WHO)
    back = stock.lend_back(own, "B32", Amount.grams(4), whom="physics", **WHO)
    with pytest.raises(NotAllowed, match=f"entry {back.entry} lent"):
        undo(own, lent.entry)
    undo(own, back.entry)
    undo(own, lent.entry)


def test_what_was_taken_since_is_listed_when_too_little_would_be_left(own: Path) -> None:
    counted = stock.count(own, "S13", Amount.cm3(200), **WHO)
    drawn = stock.draw(own, "S13", Amount.cm3(150), **WHO)
    with pytest.raises(NotEnough, match=f"Taken since: entry {drawn.entry} drawn 2027-01-11"):
        undo(own, counted.entry)


def test_what_only_kept_a_count_true_is_no_slip_of_its_own(own: Path) -> None:
    counted = stock.count(own, "S13", Amount.cm3(100), **WHO)
    stock.draw(own, "S13", Amount.cm3(5), on=FRIDAY, today=TODAY, by="T1")
    evened = last(own, "S13", "counted")
    with pytest.raises(NotAllowed, match=f"only keeps the count of entry {counted.entry}"):
        undo(own, evened)


def test_makes_by_a_strength_that_was_a_slip_are_told(own: Path) -> None:
    wrong = checks.found(own, "S01", parse_strength("0.95 mol/dm3"), **WHO)
    made = making.make_up(
        own, "sodium thiosulfate 0.200 mol/dm3", Amount.cm3(500), sources=["S01"], place="D1", **WHO
    )
    done = undo(own, wrong.entry)
    assert any(made.bottle in line and "made by that strength" in line for line in done.details)


def test_a_draw_before_a_bottle_was_thrown_away_can_be_written_later(own: Path) -> None:
    thrown = stock.discard(own, "S13", how="silver residues", why="old", **WHO)
    late = stock.draw(own, "S13", Amount.cm3(30), on=FRIDAY, today=TODAY, by="T1")
    with reading(own) as reader:
        then, now = (bottle_of(reader, "S13", day) for day in (FRIDAY, TODAY))
    assert then is not None
    assert now is not None
    assert (then.left, now.left, now.record.gone) == (Amount.cm3(100).micro, 0, True)
    undo(own, thrown.entry)
    undo(own, late.entry)
    assert {one.number: one.left for one in facts(own, TODAY).bottles}["S13"] == 130_000


def test_a_late_draw_is_held_against_what_was_there_that_day(own: Path) -> None:
    stock.count(own, "S13", Amount.cm3(200), **WHO)
    with pytest.raises(NotEnough, match="S13 held 130 cm³ on 8 January 2027; 150 cm³ asked"):
        stock.draw(own, "S13", Amount.cm3(150), on=FRIDAY, today=TODAY, by="T1")


@pytest.mark.parametrize(
    ("typed", "said"),
    [("K05", "K05 is a booking: stockroom shift K05"), ("p01", "P01 is an order"),
     ("S05", "stockroom diary S05"), ("spring walk", '"spring walk" is no number'),
     ("-3", "is no number"), ("", "is no number")],
)  # fmt: skip
def test_other_numbers_are_told_where_theirs_is_put_right(typed: str, said: str) -> None:
    with pytest.raises(BadInput, match=said) as caught:
        entry_number(typed)
    assert "stockroom diary" in str(caught.value)


def test_the_number_is_read_with_spaces_round_it() -> None:
    assert entry_number(" 123 ") == 123


def test_the_plan_after_a_slip_put_right_is_the_plan_before(own: Path) -> None:
    before = term_plan(own, as_at=TODAY)
    slip = pouring.decant(own, "S05", Amount.cm3(1000), place=None, **WHO)
    undo(own, slip.entry)
    assert term_plan(own, as_at=TODAY) == before
