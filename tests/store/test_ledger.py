"""Laws of the ledger: replaying it gives the balances, and what was counted stays counted."""

from __future__ import annotations

import shutil
import sqlite3
from datetime import date, datetime, timedelta
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from stockroom.errors import BadDate, BadInput, NotEnough
from stockroom.store.engine import writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import (
    Event,
    Stamp,
    append,
    left,
    next_booking_number,
    next_bottle_number,
)
from stockroom.store.names import find_bottle
from stockroom.store.reading import reading
from stockroom.store.snapshot_bottles import bottle_of

MADE = date(2026, 9, 21)
"""The day S13 was made; it held 130 cm³ when counted on 2026-12-18."""

COUNTED = date(2026, 12, 18)
LATER = date(2027, 3, 26)


def stamp(day: date, by: str = "T1") -> Stamp:
    return Stamp(day, LATER, datetime(2027, 3, 26, 9, 0), by)


def drawn(cubic: int) -> Event:
    return Event(EntryKind.DRAWN, change=-1_000 * cubic)


def held(path: Path, day: date) -> int:
    with reading(path) as reader:
        bottle = bottle_of(reader, "S13", day)
    assert bottle is not None
    return bottle.left // 1_000


steps = st.lists(
    st.tuples(
        st.sampled_from(
            [EntryKind.DRAWN, EntryKind.SPILLED, EntryKind.COUNTED, EntryKind.PUT_RIGHT]
        ),
        st.integers(0, 60),
        st.integers(0, 90),
    ),
    max_size=12,
)


def play(path: Path, told: list[tuple[EntryKind, int, int]]) -> None:
    """Write a random story of S13, leaving out what the ledger refuses."""
    for kind, cubic, days in told:
        with writing(path) as session:
            bottle = find_bottle(session, "S13")
            event = Event(kind, change=-1_000 * cubic)
            if kind is EntryKind.PUT_RIGHT:
                wrong = session.connection().exec_driver_sql(
                    "SELECT id, change FROM entry WHERE bottle_id = ? AND kind = 'drawn' AND id NOT"
                    " IN (SELECT puts_right FROM entry WHERE puts_right > 0)",
                    (bottle.id,),
                ).first()  # fmt: skip
                if wrong is None:
                    continue
                event = Event(kind, change=-wrong[1], puts_right=wrong[0])
            if kind is EntryKind.COUNTED:
                event = Event(kind, change=1_000 * cubic - left(session, bottle))
            try:
                append(session, bottle, event, stamp(COUNTED + timedelta(days=days)))
            except NotEnough:
                continue


@settings(max_examples=25, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(told=steps)
def test_replaying_the_ledger_gives_every_balance(
    practice: Path, tmp_path: Path, told: list[tuple[EntryKind, int, int]]
) -> None:
    path = Path(shutil.copy(practice, tmp_path / "story.sqlite"))
    play(path, told)
    with sqlite3.connect(path) as connection:
        rows = connection.execute(
            "SELECT change FROM entry JOIN bottle ON bottle.id = bottle_id"
            " WHERE number = 'S13' ORDER BY entry.id"
        ).fetchall()
    connection.close()
    running = 0
    for (change,) in rows:
        running += change
        assert running >= 0
    assert held(path, LATER) == running // 1_000


def test_a_draw_from_before_a_count_leaves_the_count_true(own: Path) -> None:
    with writing(own) as session:
        append(session, find_bottle(session, "S13"), drawn(40), stamp(date(2026, 12, 1)))
    assert held(own, date(2026, 11, 30)) - held(own, date(2026, 12, 1)) == 40
    assert held(own, COUNTED) == 130


def test_a_draw_on_the_day_of_the_count_comes_after_it(own: Path) -> None:
    with writing(own) as session:
        append(session, find_bottle(session, "S13"), drawn(40), stamp(COUNTED))
    assert held(own, COUNTED) == 90


def test_nothing_happens_to_a_bottle_before_it_is_made(own: Path) -> None:
    day = MADE - timedelta(days=1)
    said = "Drawn 20 September 2026 is before S13 was made 21 September 2026"
    with writing(own) as session:
        bottle = find_bottle(session, "S13")
        with pytest.raises(BadDate, match=said):
            append(session, bottle, drawn(1), stamp(day))


def test_an_entry_without_initials_is_refused(own: Path) -> None:
    with writing(own) as session:
        bottle = find_bottle(session, "S13")
        with pytest.raises(BadInput, match="Whose initials"):
            append(session, bottle, drawn(1), stamp(LATER, by=" "))


def test_more_than_there_is_names_both_amounts(own: Path) -> None:
    with writing(own) as session:
        bottle = find_bottle(session, "S13")
        with pytest.raises(NotEnough, match="S13 holds 130 cm³; 131 cm³ asked"):
            append(session, bottle, drawn(131), stamp(LATER))


def test_numbers_run_on_past_those_with_letters(own: Path) -> None:
    with writing(own) as session:
        assert next_bottle_number(session, made_here=True) == "S25"
        assert next_bottle_number(session, made_here=False) == "B46"
        assert next_booking_number(session) == "K30"
