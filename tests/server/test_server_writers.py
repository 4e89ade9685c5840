"""Several people write on one server at once: all of it saved or refused, none of it lost.

That two programs of 500 draws each lose nothing, and that the second of two draws of 100 from 130
is told what is left, is tried by `service/test_two_writers.py`, here as on a file.
"""

from __future__ import annotations

import os
import signal
import subprocess
import sys
from datetime import date, datetime

import pytest
import server_stores
from sqlalchemy import insert

from stockroom.errors import NotEnough, StockroomError, StoreTrouble
from stockroom.measure.amounts import Amount
from stockroom.service import stock
from stockroom.settings import Server
from stockroom.store import names, server_writing
from stockroom.store.diary import diary
from stockroom.store.engine import writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, Stamp, row_of
from stockroom.store.ledger_bulk import append_many
from stockroom.store.snapshot import facts
from stockroom.store.tables import Entry

pytestmark = pytest.mark.server

TODAY = date(2027, 1, 4)

# it says that it is inside the work, and never comes to an end
HANGING = """
import sys, time
from datetime import date
from stockroom.measure.amounts import Amount
from stockroom.service import work
from stockroom.settings import store_at
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event
with work.working(store_at(sys.argv[1]), on=None, today=date(2027, 1, 4), by="T1") as at_it:
    at_it.write(at_it.bottle("S13"), Event(EntryKind.DRAWN, change=-100_000))
    print("drawn", flush=True)
    time.sleep(600)
"""


def draw(store: Server, cubic: float, by: str) -> str:
    """What somebody is told who draws from S13."""
    try:
        done = stock.draw(store, "S13", Amount.cm3(cubic), on=None, today=TODAY, by=by)
    except StockroomError as refusal:
        return refusal.message
    return done.text


def left(store: Server, number: str) -> int:
    return next(b.left for b in facts(store, TODAY).bottles if b.number == number)


def test_a_writer_that_is_killed_leaves_nothing_half_and_lets_the_next_one_in(own: Server) -> None:
    before = left(own, "S13"), len(diary(own, "S13"))
    hanging = subprocess.Popen(
        [sys.executable, "-c", HANGING, own.url], stdout=subprocess.PIPE, text=True
    )
    assert hanging.stdout is not None
    assert hanging.stdout.readline() == "drawn\n"
    hanging.send_signal(signal.SIGKILL)
    assert hanging.wait() == -signal.SIGKILL
    hanging.stdout.close()
    assert (left(own, "S13"), len(diary(own, "S13"))) == before
    assert draw(own, 30, "T2").startswith("Drew 30 cm³ from S13")


def test_who_waits_too_long_is_told_and_nothing_is_saved(
    own: Server, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(server_writing, "BUSY_SECONDS", 0.05)
    with writing(own):
        said = draw(own, 30, "T2")
    assert said.startswith("Busy: somebody else is writing")
    assert said.endswith("nothing was saved.")
    assert draw(own, 30, "T1").startswith("Drew 30 cm³")


def test_a_row_somebody_holds_past_this_program_is_waited_for_no_longer(
    own: Server, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(server_writing, "BUSY_SECONDS", 0.05)
    with server_stores.raw(own) as raw:
        raw.execute("BEGIN")
        raw.execute("UPDATE kept_balance SET held = held")
        assert draw(own, 30, "T1").startswith("Busy: somebody else is writing")
        raw.execute("ROLLBACK")
    assert draw(own, 30, "T1").startswith("Drew 30 cm³")


def test_reading_goes_on_while_somebody_writes(own: Server) -> None:
    with writing(own) as session:
        session.connection().exec_driver_sql("UPDATE booking SET groups = 199")
        assert {booking.groups for booking in facts(own, TODAY).bookings} != {199}


def test_a_connection_cut_in_the_middle_saves_nothing_and_is_told(own: Server) -> None:
    before = len(diary(own, "S13"))

    def cut() -> None:
        with writing(own) as session:
            names.find_bottle(session, "S13")
            with server_stores.raw(own) as other:
                other.execute(
                    "SELECT pg_terminate_backend(pid, 5000) FROM pg_stat_activity"
                    " WHERE datname = current_database() AND pid <> pg_backend_pid()"
                )
            names.find_bottle(session, "S13")

    with pytest.raises(StoreTrouble, match="went away; nothing was saved"):
        cut()
    assert len(diary(own, "S13")) == before


def test_many_entries_at_once_are_judged_by_the_server_one_after_the_other(own: Server) -> None:
    stamp = Stamp(TODAY, TODAY, datetime(2027, 1, 4, 9, 0), "T1")
    draws = [Event(EntryKind.DRAWN, change=-70)] * 1500
    with writing(own) as session:
        bottle = names.find_bottle(session, "S13")
        number = int(bottle.id or 0)
        assert append_many(session, ((bottle, event, stamp) for event in draws)) == 1500
    assert left(own, "S13") == 130_000 - 1500 * 70
    # past its own arithmetic too, as when two bring in at once
    row = row_of(number, Event(EntryKind.DRAWN, change=-20_000), stamp, TODAY)

    def together() -> None:
        with writing(own) as session:
            session.connection().execute(insert(Entry), [row, row])

    with pytest.raises(NotEnough):
        together()
    assert left(own, "S13") == 130_000 - 1500 * 70


def test_the_lock_is_of_one_store_alone(own: Server, practice: Server) -> None:
    other = server_stores.make(f"other_{os.getpid()}", like=practice)
    try:
        with writing(own):
            assert draw(other, 30, "T1").startswith("Drew 30 cm³")
    finally:
        server_stores.drop(other)
