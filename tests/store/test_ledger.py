"""Laws of the ledger: replaying it gives the balances, and what was counted stays counted."""

from __future__ import annotations

import shutil
import sqlite3
from dataclasses import replace
from datetime import date, datetime, timedelta
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from stockroom.errors import BadDate, BadInput, NotEnough
from stockroom.store.engine import writing
from stockroom.store.kinds import EntryKind, standing_on
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


@pytest.mark.file
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
    assert all(held(path, COUNTED + timedelta(days=days)) >= 0 for _, _, days in told)


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


def test_a_late_draw_may_not_leave_a_day_between_below_nothing(own: Path) -> None:
    """What a later count evens out was still not there on the days before it."""
    with writing(own) as session:
        bottle = find_bottle(session, "S13")
        append(session, bottle, drawn(100), stamp(date(2027, 1, 5)))
        count = Event(EntryKind.COUNTED, change=80_000)
        append(session, bottle, count, stamp(date(2027, 1, 8)))
    words = r"S13 held 30 cm³ on 5 January 2027; 40 cm³ asked of 4 January 2027\."
    with writing(own) as session, pytest.raises(NotEnough, match=words) as refused:
        append(session, find_bottle(session, "S13"), drawn(40), stamp(date(2027, 1, 4)))
    assert "--on 2027-01-05" in refused.value.hint
    with writing(own) as session:
        append(session, find_bottle(session, "S13"), drawn(30), stamp(date(2027, 1, 4)))
    assert [held(own, date(2027, 1, day)) for day in (3, 4, 5, 7, 8)] == [
        130, 100, 0, 0, 110,
    ]  # fmt: skip


def test_a_reversal_may_not_leave_a_day_between_below_nothing(own: Path) -> None:
    with writing(own) as session:
        bottle = find_bottle(session, "S13")
        more = Event(EntryKind.COUNTED, change=20_000)
        slip = append(session, bottle, more, stamp(date(2027, 1, 5)))
        append(session, bottle, drawn(140), stamp(date(2027, 1, 6)))
        append(session, bottle, replace(more, change=70_000), stamp(date(2027, 1, 8)))
        undo = Event(EntryKind.PUT_RIGHT, change=-20_000, puts_right=slip.id)
        with pytest.raises(NotEnough, match=r"held 10 cm³ on 6 January 2027; 20 cm³ asked of 5"):
            append(session, bottle, undo, stamp(date(2027, 1, 11)))


QUESTIONS = (
    "SELECT SUM(change) FROM entry WHERE bottle_id = 3 AND {}",
    "SELECT id FROM entry WHERE bottle_id = 3 AND kind = 'opened' AND {} ORDER BY happened_on",
    "SELECT id FROM entry WHERE kind <> 'drawn' AND {} AND bottle_id IN (3, 4)",
)


@pytest.mark.file
@pytest.mark.parametrize("question", QUESTIONS)
def test_a_question_about_one_bottle_reads_its_entries_alone(own: Path, question: str) -> None:
    for which in (standing_on(None), standing_on(date(2027, 1, 8))):
        with reading(own) as reader:
            steps = [row[3] for row in reader.ask("EXPLAIN QUERY PLAN " + question.format(which))]
        assert steps[0].startswith("SEARCH entry USING INDEX ix_entry_bottle_id"), steps
