"""Bookings made bigger, dropped and taken back: only what changes is told."""

from __future__ import annotations

import sqlite3
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadInput, NotAllowed, StockroomError, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Firmness
from stockroom.service import bookings
from stockroom.service.making import make_up
from stockroom.service.plan import term_plan
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"today": TODAY, "by": "P1"}


def firmness(path: Path, number: str) -> Firmness:
    return next(one.firmness for one in facts(path, TODAY).bookings if one.number == number)


def changes(path: Path) -> list[tuple[str, str, str]]:
    with sqlite3.connect(path) as connection:
        found = connection.execute(
            "SELECT what, before, after FROM booking_change ORDER BY id"
        ).fetchall()
    connection.close()
    return found


def test_more_groups_show_the_extra_alone(own: Path) -> None:
    # scenario section 7, 01-18: 11 groups to 13, 1 936 cm³ to 2 288
    done = bookings.shift(own, "K06", groups=13, **WHO)
    assert any(detail.startswith("352 cm³ more of ") for detail in done.details)
    assert not any("1 936" in detail or "2 288" in detail for detail in done.details)


def test_fewer_groups_show_what_is_less(own: Path) -> None:
    done = bookings.shift(own, "K06", groups=9, **WHO)
    assert any(detail.startswith("352 cm³ less of ") for detail in done.details)


def test_another_time_wants_no_more_of_anything(own: Path) -> None:
    assert bookings.shift(own, "K06", time=600, **WHO).details == ()


def test_dropping_withdraws_the_makes_not_done(own: Path) -> None:
    whole = term_plan(own, as_at=TODAY)
    make = next(m for m in whole.makes if len(m.bookings) == 1)
    done = bookings.cancel(own, make.bookings[0], **WHO)
    assert any(make.line in detail and "Not made now" in detail for detail in done.details)
    lines = [m.line for m in term_plan(own, as_at=TODAY).makes if m.bookings == make.bookings]
    assert lines == []


def test_dropping_keeps_what_was_made_as_stock(own: Path) -> None:
    whole = term_plan(own, as_at=TODAY)
    line = "potassium permanganate 0.0200 mol/dm3"
    make = next(m for m in whole.makes if m.line == line)
    volume = Amount.cm3(make.volume / 1000)
    made = make_up(own, line, volume, sources=[], place=None, on=None, **WHO)
    done = bookings.cancel(own, make.bookings[0], **WHO)
    assert any(detail.startswith(f"Stays as stock: {made.bottle}, ") for detail in done.details)
    assert next(b.left for b in facts(own, TODAY).bottles if b.number == made.bottle)


@pytest.mark.file
def test_why_it_was_dropped_stays_on_record(own: Path) -> None:
    bookings.cancel(own, "K06", why="class on a trip", **WHO)
    assert changes(own) == [("firmness", "firm", "dropped (class on a trip)")]


@pytest.mark.file
@pytest.mark.parametrize("was", ["firm", "pencilled"])
def test_a_dropped_booking_is_taken_back_as_firm_as_it_was(own: Path, was: str) -> None:
    if was == "pencilled":
        bookings.shift(own, "K06", firmness=was, **WHO)
    before = facts(own, TODAY).bookings
    bookings.cancel(own, "K06", why="trip", **WHO)
    done = bookings.take_back(own, "K06", why="no trip", **WHO)
    assert done.text.startswith("K06 is back: R")
    assert firmness(own, "K06") == was
    assert facts(own, TODAY).bookings == before
    assert changes(own)[-1] == ("firmness", "dropped", f"{was} (no trip)")


@pytest.mark.parametrize(
    ("number", "why", "kind", "said"),
    [
        ("K06", "slip", NotAllowed, "K06 is not dropped: it is firm"),
        ("K06", " ", BadInput, "Why is K06 taken back"),
        ("K99", "slip", UnknownName, 'No booking "K99"'),
    ],
)
def test_what_cannot_be_taken_back_is_refused(
    own: Path, number: str, why: str, kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind, match=said):
        bookings.take_back(own, number, why=why, **WHO)


def test_dropped_twice_says_how_it_comes_back(own: Path) -> None:
    bookings.cancel(own, "K06", **WHO)
    with pytest.raises(NotAllowed, match="K06 is dropped already") as caught:
        bookings.cancel(own, "K06", **WHO)
    assert "stockroom cancel K06 --undo" in caught.value.hint
