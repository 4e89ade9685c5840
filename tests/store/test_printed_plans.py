"""Kept plans in the store: appended, numbered, never altered; and what was entered since."""

from __future__ import annotations

import sqlite3
from collections.abc import Iterator
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.errors import UnknownName
from stockroom.planning.facts import Happened, HappenedKind
from stockroom.store.printed_plans import kept_under, last_kept, marks, next_number, usual_of
from stockroom.store.reading import reading
from stockroom.store.since import happened_since
from stockroom.store.snapshot import facts_from

if TYPE_CHECKING:
    from conftest import Stockroom

FIRST = date(2027, 1, 4)
NEW = (
    "INSERT INTO printed_plan (number, as_at, kept_at, by, cautious, digest, usual, marks,"
    " decisions) VALUES (?, ?, '', 'T1', 0, '', ?, '{}', '{}')"
)


@pytest.fixture
def raw(own: Path) -> Iterator[sqlite3.Connection]:
    connection = sqlite3.connect(own, isolation_level=None)
    connection.execute(NEW, ("0001", "2027-01-04", '{"x":["2027-01-12"]}'))
    connection.execute(NEW, ("0002", "2027-02-01", '{"x":["2027-02-02","2027-02-09"]}'))
    yield connection
    connection.close()


@pytest.mark.file
@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE printed_plan SET by = 'T9'",
        "DELETE FROM printed_plan WHERE id = 1",
        "INSERT OR REPLACE INTO printed_plan SELECT * FROM printed_plan WHERE id = 1",
        "INSERT OR REPLACE INTO printed_plan SELECT 9, number, as_at, kept_at, by, cautious,"
        " digest, usual, marks, decisions FROM printed_plan WHERE id = 1",
    ],
)
def test_a_kept_plan_refuses(raw: sqlite3.Connection, statement: str) -> None:
    with pytest.raises(sqlite3.IntegrityError, match=r"^KEPT A plan that was kept"):
        raw.execute(statement)


@pytest.mark.file
@pytest.mark.parametrize(
    ("day", "number"),
    [("2027-01-03", None), ("2027-01-31", "0001"), ("2027-02-01", "0002")],
)
def test_the_last_kept_is_the_last_known_by_that_day(
    raw: sqlite3.Connection, own: Path, day: str, number: str | None
) -> None:
    with reading(own) as reader:
        found = last_kept(reader, date.fromisoformat(day))
        assert (found.number if found else None) == number
        assert next_number(reader) == "0003"


@pytest.mark.file
def test_the_usual_days_are_of_the_plan_kept_last(raw: sqlite3.Connection, own: Path) -> None:
    with reading(own) as reader:
        assert usual_of(reader, date(2027, 1, 3)) == {}
        assert usual_of(reader, date(2027, 2, 1)) == {"x": (date(2027, 2, 2), date(2027, 2, 9))}


@pytest.mark.file
def test_the_planner_is_told_the_usual_days(raw: sqlite3.Connection, own: Path) -> None:
    with reading(own) as reader:
        known = facts_from(reader, date(2027, 1, 11))
    assert known.usual == {"x": (date(2027, 1, 12),)}


@pytest.mark.file
@pytest.mark.parametrize("typed", ["0002", "2", " 2 ", "#2"])
def test_a_number_may_be_typed_short(raw: sqlite3.Connection, own: Path, typed: str) -> None:
    with reading(own) as reader:
        assert kept_under(reader, typed).number == "0002"


@pytest.mark.file
def test_a_number_nobody_gave_names_the_nearest(raw: sqlite3.Connection, own: Path) -> None:
    with reading(own) as reader, pytest.raises(UnknownName, match="0020"):
        kept_under(reader, "0020")


def since(own: Path, before: dict[str, int], as_at: str) -> list[Happened]:
    with reading(own) as reader:
        return list(happened_since(reader, before, FIRST, date.fromisoformat(as_at)))


@pytest.fixture
def before(own: Path) -> dict[str, int]:
    """The marks of a store nothing was entered in yet."""
    with reading(own) as reader:
        return marks(reader)


def test_nothing_entered_is_nothing_happened(own: Path, before: dict[str, int]) -> None:
    assert since(own, before, "2027-03-26") == []


def test_an_entry_names_its_bottle_its_day_and_its_hand(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    stockroom("look", "S03", "--good", "--by", "T1", "--as-at", "2027-01-11", store=own)
    (look,) = since(own, before, "2027-01-11")
    assert (look.kind, look.subject) == (HappenedKind.CHECKED, "S03")
    assert look.words == "S03 looked at 2027-01-11 by T1, good"
    assert since(own, before, "2027-01-10") == []


def test_a_slip_put_right_since_never_was(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    stockroom("draw", "S13", "10 cm3", "--by", "T1", "--as-at", "2027-01-11", store=own)
    number = since(own, before, "2027-01-11")[0]
    assert (number.kind, number.sense) == (HappenedKind.TAKEN, 1)
    stockroom("put-right", "179", "--why", "slip", "--by", "T1", "--as-at", "2027-01-11", store=own)
    assert since(own, before, "2027-01-11") == []


def test_an_earlier_entry_put_right_is_told(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    told = stockroom("draw", "S13", "10 cm3", "--by", "T1", "--as-at", "2027-01-05", store=own)
    entry = told.out.rsplit("Entry ", 1)[1].split(".")[0]
    with reading(own) as reader:
        known = marks(reader)
    stockroom("put-right", entry, "--why", "slip", "--by", "T2", "--as-at", "2027-01-06", store=own)
    with reading(own) as reader:
        (righted,) = happened_since(reader, known, date(2027, 1, 5), date(2027, 1, 6))
    assert righted.words == f"S13 entry {entry} put right 2027-01-06 by T2, slip"


SLIP = ("draw", "S13", "10 cm3")


def test_a_slip_the_kept_plan_did_not_know_of_is_no_cause(own: Path, stockroom: Stockroom) -> None:
    """Entered before the plan was kept, for a later day, and put right since."""
    told = stockroom(*SLIP, "--by", "T1", "--as-at", "2027-01-20", store=own)
    entry = told.out.rsplit("Entry ", 1)[1].split(".")[0]
    with reading(own) as reader:
        known = marks(reader)
    stockroom("put-right", entry, "--why", "slip", "--by", "T1", "--as-at", "2027-01-20", store=own)
    assert since(own, known, "2027-01-11") == []
    assert since(own, known, "2027-01-20") == []


def test_a_slip_put_right_on_a_later_day_is_gone_from_every_day(
    own: Path, stockroom: Stockroom
) -> None:
    """As the snapshot has it: so the putting right is the cause, whatever its day."""
    told = stockroom(*SLIP, "--by", "T1", "--as-at", "2027-01-04", store=own)
    entry = told.out.rsplit("Entry ", 1)[1].split(".")[0]
    with reading(own) as reader:
        known = marks(reader)
    before = bottle_left(own, "S13")
    stockroom("put-right", entry, "--why", "slip", "--by", "T1", "--as-at", "2027-01-20", store=own)
    assert bottle_left(own, "S13") == before + 10_000
    assert [each.subject for each in since(own, known, "2027-01-11")] == ["S13"]


def bottle_left(own: Path, number: str) -> int:
    with reading(own) as reader:
        known = facts_from(reader, date(2027, 1, 11))
    return next(bottle.left for bottle in known.bottles if bottle.number == number)


LITHIUM = ("order", "lithium chloride", "2", "100 g", "--price", "14.50", "--expected")


def test_an_order_counts_from_its_day_whenever_it_was_entered(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    stockroom(*LITHIUM, "2027-02-01", "--by", "T1", "--as-at", "2027-01-20", store=own)
    with reading(own) as reader:
        known = marks(reader)
    for marked in (before, known):
        assert since(own, marked, "2027-01-19") == []
        (placed,) = since(own, marked, "2027-01-20")
        assert placed.kind is HappenedKind.ORDERED
        assert placed.words == "P01 2 × 100 g ordered 2027-01-20 by T1"


def test_what_came_of_an_order_counts_from_its_day_too(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    stockroom(*LITHIUM, "2027-02-01", "--by", "T1", "--as-at", "2027-01-04", store=own)
    with reading(own) as reader:
        ordered = marks(reader)
    give_up = ("order", "--cancel", "P01", "--why", "sold out", "--by", "T2")
    stockroom(*give_up, "--as-at", "2027-01-20", store=own)
    with reading(own) as reader:
        known = marks(reader)
    for marked in (ordered, known):
        assert since(own, marked, "2027-01-19") == []
        (given_up,) = since(own, marked, "2027-01-20")
        assert given_up.words.startswith("P01 cancelled 2027-01-20 by T2")
    assert len(since(own, before, "2027-01-20")) == 2


def test_an_entry_known_already_counts_from_its_day(own: Path, stockroom: Stockroom) -> None:
    """Entered before the plan was kept, for a day after the one it was kept for."""
    stockroom("spill", "B18", "2 g", "--why", "x", "--by", "T1", "--as-at", "2027-01-20", store=own)
    with reading(own) as reader:
        known = marks(reader)
    assert [each.subject for each in since(own, known, "2027-01-20")] == ["B18"]
    assert since(own, known, "2027-01-19") == []


def test_a_booking_a_rule_a_price_and_a_closure_are_told(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    hand = ("--by", "T1", "--as-at", "2027-01-11")
    starch = "starch 0.5 % w/v"
    stockroom("shift", "K08", "--groups", "11", *hand, store=own)
    stockroom("rule", starch, "life", "lasts=2 d", "--why", "smells", *hand, store=own)
    stockroom("change", "lines", "lithium chloride", "level_g=20", "--why", "more", *hand,
              store=own)  # fmt: skip
    stockroom("add", "closures", "from=2027-03-10", "to=2027-03-10", "reason=snow", store=own)
    told = since(own, before, "2027-01-11")
    kinds = {each.kind for each in told}
    assert {HappenedKind.BOOKING, HappenedKind.LINE, HappenedKind.HOUSE} <= kinds
    assert "K08 groups 8 → 11 (2027-01-11 by T1)" in [each.words for each in told]
    assert {starch, "lithium chloride"} <= {each.line for each in told}
    assert "closed days added" in [each.words for each in told]


def test_a_booking_is_of_every_day_once_it_is_changed(
    own: Path, before: dict[str, int], stockroom: Stockroom
) -> None:
    """The plan has no bookings of a day gone by: who changed one is told, whatever the day."""
    words = ("shift", "K08", "--groups", "11", "--by", "T1", "--as-at", "2027-01-20")
    stockroom(*words, store=own)
    told = [each.words for each in since(own, before, "2027-01-11")]
    assert told == ["K08 groups 8 → 11 (2027-01-20 by T1)"]


DAY = ("--as-at", "2027-01-11")


def damage(own: Path, **damaged: str) -> None:
    """A plan 0001 kept on the first day, with this in its row."""
    connection = sqlite3.connect(own, isolation_level=None)
    connection.execute(
        "INSERT INTO printed_plan (number, as_at, kept_at, by, cautious, digest, usual, marks,"
        " decisions) VALUES ('0001', '2027-01-04', '', 'T1', 0, '', :usual, :marks, :decisions)",
        {"usual": "{}", "marks": "{}", "decisions": "{}"} | damaged,
    )
    connection.close()


@pytest.mark.file
@pytest.mark.parametrize(
    "damaged",
    [
        {"decisions": "{"},
        {"decisions": "[]"},
        {"usual": "{"},
        {"usual": "[]"},
        {"usual": '{"starch 0.5 % w/v": 5}'},
        {"usual": '{"starch 0.5 % w/v": ["soon"]}'},
        {"marks": "nothing"},
        {"marks": '{"entry": []}'},
    ],
    ids=str,
)
def test_a_kept_plan_that_cannot_be_read_stops_no_plan(
    own: Path, stockroom: Stockroom, damaged: dict[str, str]
) -> None:
    before = stockroom("plan", *DAY, "--json", store=own).json
    damage(own, **damaged)
    shown = stockroom("plan", *DAY, "--json", store=own)
    assert (shown.code, shown.err) == (0, "")
    assert shown.json == before | {"kept_unread": "0001"}
    refused = stockroom("changed", *DAY, store=own)
    assert (refused.code, "Plan 0001" in refused.err) == (1, True)
    assert "cannot be read" in refused.err


@pytest.mark.file
def test_each_sheet_says_that_it_cannot_and_one_kept_anew_ends_it(
    own: Path, stockroom: Stockroom
) -> None:
    damage(own, usual="{")
    sheets: list[list[str]] = [["plan"], ["fresh"], ["buying"], ["plan", "--to", "2027-01-29"]]
    for words in sheets:
        shown = stockroom(*words, *DAY, store=own)
        assert (shown.code, shown.err) == (0, "")
        assert shown.said.count("plan 0001, kept last, cannot be read") == 1
    assert stockroom("usage", *DAY, store=own).code == 0
    assert "Plan 0002, kept" in stockroom("plan", "--keep", "--by", "T1", *DAY, store=own).out
    assert "cannot be read" not in stockroom("plan", *DAY, store=own).said


@pytest.mark.file
def test_a_kept_plan_that_cannot_be_read_is_said_to_be(
    raw: sqlite3.Connection, own: Path, stockroom: Stockroom
) -> None:
    asked = stockroom("changed", "1", "--as-at", "2027-01-11", store=own)
    assert asked.code == 1
    assert "Plan 0001" in asked.err
    assert "cannot be read" in asked.err
