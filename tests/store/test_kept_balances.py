"""What is kept beside the ledger is its sum, however an entry came there."""

from __future__ import annotations

import random
import shutil
import sqlite3
from contextlib import closing
from datetime import date, datetime, timedelta
from pathlib import Path

import pytest
from alembic import command
from alembic.config import Config
from sqlalchemy import create_engine
from sqlmodel import select

from stockroom.errors import BadDate, BadInput, NotEnough
from stockroom.store.balances import balances
from stockroom.store.engine import MIGRATIONS, Session, held_open, writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, Stamp, append, left
from stockroom.store.ledger_bulk import append_many
from stockroom.store.names import find_bottle
from stockroom.store.reading import reading
from stockroom.store.tables import Bottle
from stockroom.store.verify import verify

pytestmark = pytest.mark.file

FIRST, LAST = date(2026, 12, 21), date(2027, 3, 26)
SUMS = "SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id ORDER BY bottle_id"
KEPT = "SELECT bottle_id, held FROM kept_balance ORDER BY bottle_id"
Told = tuple[str, Event, Stamp]


def stamp(day: date, by: str = "T1") -> Stamp:
    return Stamp(day, LAST, datetime(2027, 3, 26, 9, 0), by)


def ask(path: Path, question: str) -> list[tuple[int, ...]]:
    with closing(sqlite3.connect(path)) as raw:
        return raw.execute(question).fetchall()


def test_a_practice_store_keeps_what_its_entries_come_to(practice: Path) -> None:
    assert ask(practice, KEPT) == ask(practice, SUMS)


def test_an_older_store_is_given_its_balances(tmp_path: Path) -> None:
    path = tmp_path / "old.sqlite"
    config = Config()
    config.set_main_option("script_location", str(MIGRATIONS))
    opened = create_engine(f"sqlite:///{path}")
    with opened.begin() as connection:
        config.attributes["connection"] = connection
        command.upgrade(config, "0007")
    opened.dispose()
    with closing(sqlite3.connect(path)) as raw:
        raw.executescript(_ROWS)
    with reading(path) as reader:
        assert reader.pairs(KEPT) == {1: 470_000}
    assert verify(path).faults == ()


_ROWS = """
INSERT INTO line VALUES (1, 'starch 1 %', 'starch', NULL, 'solution', 'volume', 10.0, 'g/dm3',
 '1 %', '', NULL, 1.0, NULL, NULL, NULL, '', 0, '', '', 0, 0);
INSERT INTO bottle (id, number, line_id, size, made_on, printed_text, printed_readings, cap,
 remark, made_here, source) VALUES (1, 'S01', 1, 500000, '2027-01-04', '', '', '', '', 1, '');
INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,
 strength_text, reason, note, booking) VALUES
 (1, 'made', '2027-01-04', '2027-01-04', '', 'T1', 500000, '', '', '', ''),
 (1, 'drawn', '2027-01-05', '2027-01-05', '', 'T1', -30000, '', '', '', '');
"""


def test_a_raw_entry_is_kept_up_with_and_one_too_many_is_refused(own: Path) -> None:
    draw = (
        "INSERT {} INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
        " strength_text, reason, note, booking) VALUES ((SELECT id FROM bottle WHERE number ="
        " 'S13'), 'drawn', '2027-01-04', '2027-01-04', '', 'T1', {}, '', '', '', '')"
    )
    with closing(sqlite3.connect(own, isolation_level=None)) as raw:
        for how in ("", "OR REPLACE", "OR IGNORE"):
            raw.execute(draw.format(how, -10_000))
        for how in ("", "OR REPLACE"):
            with pytest.raises(sqlite3.IntegrityError, match=r"^NOTENOUGH "):
                raw.execute(draw.format(how, -100_001))
        raw.execute(draw.format("", -100_000))
    assert ask(own, KEPT) == ask(own, SUMS)


def test_a_balance_altered_by_hand_is_what_a_draw_is_judged_by_until_it_is_found(own: Path) -> None:
    with closing(sqlite3.connect(own)) as raw, raw:
        raw.execute("UPDATE kept_balance SET held = 0")
    with writing(own) as session:
        assert left(session, find_bottle(session, "S13")) == 0
    assert {fault.check for fault in verify(own).faults} == {"kept"}


def invented(seed: int, entries: int) -> list[Told]:
    """A story of three bottles: draws, counts, late entries, and now and then a slip put right."""
    chance = random.Random(seed)
    kinds = [EntryKind.DRAWN, EntryKind.COUNTED, EntryKind.LOOKED, EntryKind.SPILLED]
    told: list[Told] = []
    for number in range(entries):
        kind = chance.choice(kinds)
        change = 0 if kind is EntryKind.LOOKED else -chance.randrange(1, 3_000)
        late = chance.randrange(4) == 0
        day = FIRST + timedelta(days=number // 4 - (chance.randrange(9) if late else 0))
        event = Event(kind, change=change, note=f"no. {number}", passed=True)
        told.append((chance.choice(["S13", "S08", "B06"]), event, stamp(max(day, FIRST))))
    return told


def with_bottles(session: Session, told: list[Told]) -> list[tuple[Bottle, Event, Stamp]]:
    return [(find_bottle(session, number), event, when) for number, event, when in told]


@pytest.mark.parametrize("seed", range(4))
def test_many_at_once_are_written_as_one_by_one(practice: Path, tmp_path: Path, seed: int) -> None:
    single, bulk = (Path(shutil.copy(practice, tmp_path / name)) for name in ("one", "many"))
    told = invented(seed, 60)
    with writing(single) as session:
        for bottle, event, when in with_bottles(session, told):
            append(session, bottle, event, when)
    with writing(bulk) as session:
        assert append_many(session, with_bottles(session, told)) == len(told)
    rows = "SELECT * FROM entry ORDER BY id"
    assert ask(single, rows) == ask(bulk, rows)
    assert ask(bulk, KEPT) == ask(bulk, SUMS)


@pytest.mark.parametrize(
    ("event", "when", "error"),
    [
        (Event(EntryKind.DRAWN, change=-(10**9)), stamp(LAST), NotEnough),
        (Event(EntryKind.DRAWN, change=-1), stamp(date(2001, 1, 1)), BadDate),
        (Event(EntryKind.LOOKED, passed=True), stamp(LAST, by=" "), BadInput),
    ],
)
def test_one_bad_entry_among_many_is_refused_in_its_own_words_and_none_is_kept(
    own: Path, event: Event, when: Stamp, error: type[Exception]
) -> None:
    before = ask(own, "SELECT COUNT(*) FROM entry")
    good = ("S13", Event(EntryKind.DRAWN, change=-1), stamp(LAST))
    with pytest.raises(error), writing(own) as session:
        append_many(session, with_bottles(session, [good, ("S13", event, when), good]))
    assert ask(own, "SELECT COUNT(*) FROM entry") == before


def test_draws_sent_together_are_held_against_each_other(own: Path) -> None:
    draws: list[Told] = [("S13", Event(EntryKind.DRAWN, change=-70_000), stamp(LAST))] * 2
    with pytest.raises(NotEnough, match="holds 60 cm³; 70 cm³ asked"), writing(own) as session:
        append_many(session, with_bottles(session, draws))


def test_the_whole_shelf_is_read_with_what_each_bottle_holds(practice: Path) -> None:
    with reading(practice) as reader:
        rows = {row["number"]: row["held"] for row in balances(reader)}
    assert rows["S13"] == 130_000
    assert len(rows) == len(ask(practice, KEPT))


def one_draw(path: Path, micro: int = 1) -> None:
    event = Event(EntryKind.DRAWN, change=-micro)
    with writing(path) as session:
        append(session, find_bottle(session, "S13"), event, stamp(LAST))


def test_a_store_held_open_saves_each_piece_and_is_closed_at_the_end(own: Path) -> None:
    with held_open(own):
        one_draw(own)
        # another connection sees it at once: it was saved, and not only held
        assert ask(own, KEPT) == ask(own, SUMS)
        one_draw(own)
        with pytest.raises(NotEnough):
            one_draw(own, 10**9)
        one_draw(own)
    assert [path.name for path in own.parent.iterdir()] == [own.name]
    assert len(ask(own, "SELECT id FROM entry WHERE entered_on = '2027-03-26'")) == 3


def test_another_file_put_in_the_place_of_one_held_open_is_the_one_written_to(
    own: Path, practice: Path
) -> None:
    with held_open(own):
        one_draw(own)
        # its side files go with it, as a restore does it
        for part in sorted(own.parent.iterdir()):
            part.rename(part.with_name(part.name.replace("own", "away")))
        shutil.copy(practice, own)
        one_draw(own)
    assert len(ask(own, "SELECT id FROM entry WHERE entered_on = '2027-03-26'")) == 1


def test_what_was_read_is_asked_again_once_something_is_written(own: Path) -> None:
    from stockroom.store.remembered import answers_in

    with writing(own) as session:
        answers_in(session)["how much"] = 1
        session.exec(select(Bottle)).all()
        assert answers_in(session) == {"how much": 1}
        bottle = find_bottle(session, "S13")
        append(session, bottle, Event(EntryKind.DRAWN, change=-1), stamp(LAST))
        assert answers_in(session) == {}
