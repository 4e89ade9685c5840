"""Each fault is planted by itself, as another program could, and exactly that one is found."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable
from contextlib import closing
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.errors import StoreTrouble
from stockroom.planning.facts import Bottle
from stockroom.store.reading import Reader
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.verify import Proved, verify

if TYPE_CHECKING:
    from conftest import Stockroom

NEW = (
    "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by, change,"
    " strength_text, reason, note, booking, puts_right) SELECT id, '{kind}', '{day}', '2027-01-04',"
    " '2099-01-01', 'T1', {change}, '', '', '{note}', '', {right} FROM bottle WHERE number = '{of}'"
)
SUMS = (
    "INSERT OR REPLACE INTO kept_balance SELECT bottle_id, SUM(change) FROM entry GROUP BY 1",
    "DELETE FROM kept_balance WHERE bottle_id NOT IN (SELECT bottle_id FROM entry)",
)


def new(
    of: str,
    kind: str,
    change: int,
    *,
    day: str = "2027-01-04",
    note: str = "",
    right: str = "NULL",
) -> str:
    return NEW.format(of=of, kind=kind, change=change, day=day, note=note, right=right)


def plant(path: Path, *statements: str, sums: bool = True) -> None:
    """Edit a store with its triggers out of the way, and put them back as they were."""
    with closing(sqlite3.connect(path, isolation_level=None)) as raw:
        kept = raw.execute("SELECT name, sql FROM sqlite_master WHERE type = 'trigger'").fetchall()
        for name, _ in kept:
            raw.execute(f"DROP TRIGGER {name}")
        for statement in (*statements, *(SUMS if sums else ())):
            raw.execute(statement)
        for _, words in kept:
            raw.execute(words)


def checks(found: Proved) -> set[str]:
    return {fault.check for fault in found.faults}


def test_a_store_nobody_touched_is_well(practice: Path) -> None:
    found = verify(practice)
    assert found.faults == ()
    assert (found.bottles, found.practice, found.quick) == (75, True, False)


OF = "(SELECT id FROM bottle WHERE number = '{}')"
S13, S08 = OF.format("S13"), OF.format("S08")
OPENED = "(SELECT MIN(id) FROM entry WHERE kind = 'opened' AND note = '')"
PLANTED = {
    "an entry altered": ("kept", "come to", ["UPDATE entry SET change = change + 5 WHERE id = 1"]),
    "a balance altered": ("kept", "kept as", ["UPDATE kept_balance SET held = 7"]),
    "a balance removed": (
        "kept",
        "kept as nothing",
        [f"DELETE FROM kept_balance WHERE bottle_id = {S13}"],
    ),
}


@pytest.mark.file
@pytest.mark.parametrize("name", PLANTED)
def test_a_kept_balance_that_is_not_the_sum_is_found(own: Path, name: str) -> None:
    check, words, statements = PLANTED[name]
    plant(own, *statements, sums=False)
    found = verify(own)
    assert checks(found) == {check}
    assert words in found.faults[0].text
    assert "verify --afresh" in found.faults[0].mend


LEDGER: dict[str, tuple[str, str, list[str]]] = {
    "below nothing": ("balance", "after entry", [new("S13", "drawn", -(10**9))]),
    "and back again": (
        "balance",
        "after entry",
        [new("S13", "drawn", -(10**9)), new("S13", "counted", 10**9)],
    ),
    "entered before it happened": (
        "days",
        "after it was entered",
        [new("S13", "drawn", -1, day="2027-01-05")],
    ),
    "before it was there": (
        "days",
        "before it was there",
        [new("S13", "drawn", -1, day="2020-01-01")],
    ),
    "opened before it came": (
        "days",
        "before it was there",
        [f"UPDATE entry SET happened_on = '2001-01-01' WHERE id = {OPENED}"],
    ),
    "never there": (
        "days",
        "never arrived",
        [f"UPDATE entry SET kind = 'counted' WHERE bottle_id = {S13} AND kind = 'made'"],
    ),
    "there twice": ("days", "came to be twice", [new("S13", "made", 0)]),
    "not cancelled": (
        "put right",
        "does not cancel",
        [new("S13", "drawn", -5), new("S13", "put right", 4, right="(SELECT MAX(id) FROM entry)")],
    ),
    "thrown away, not empty": ("balance", "thrown away", [new("S13", "discarded", 0)]),
    "its own parent": (
        "parents",
        "made from itself",
        [f"INSERT INTO parent (bottle_id, parent_id) VALUES ({S13}, {S13})"],
    ),
    "made in a circle": (
        "parents",
        "by way of S08, S13",
        [
            f"DELETE FROM parent WHERE bottle_id IN ({S13}, {S08})",
            f"INSERT INTO parent (bottle_id, parent_id) VALUES ({S13}, {S08}), ({S08}, {S13})",
            "UPDATE entry SET happened_on = '2026-09-01' WHERE kind = 'made'"
            f" AND bottle_id IN ({S13}, {S08})",
        ],
    ),
    "younger than its child": (
        "parents",
        "which came on",
        [
            "UPDATE entry SET happened_on = '2001-01-01' WHERE kind = 'made'"
            " AND bottle_id = (SELECT bottle_id FROM parent LIMIT 1)"
        ],
    ),
    "a draw into a stranger": (
        "parents",
        "does not know it",
        [new("B06", "drawn", -1, note="into S13")],
    ),
    "for no booking": (
        "references",
        "no booking",
        ["UPDATE entry SET booking = 'K01;K99' WHERE id = 9"],
    ),
    "points nowhere": (
        "orphans",
        "points to a place",
        ["UPDATE entry SET place_id = 999 WHERE id = 1"],
    ),
}


BOTTLE = (
    "INSERT OR IGNORE INTO bottle (number, line_id, size, printed_text, printed_readings, cap,"
    " remark, made_here, source, lot) SELECT 'S99', line_id, size, '', '', '', '', 1, '', ''"
    f" FROM bottle WHERE id = {S13}"
)
LEDGER |= {
    "a bottle nobody entered": ("entries", "nothing was ever entered", [BOTTLE]),
    "a parent that gave nothing": (
        "parents",
        "made from S13, which gave nothing for it",
        [
            BOTTLE,
            f"INSERT INTO parent (bottle_id, parent_id) SELECT id, {S13} FROM bottle"
            " WHERE number = 'S99'",
            new("S99", "made", 5),
        ],
    ),
    "an entry taken away": (
        "gaps",
        "entry 177 is not there",
        ["DELETE FROM entry WHERE id = 177"],
    ),
    "a text for an amount": ("cells", "holds in change", ["UPDATE entry SET change = 'x'"]),
    "a fraction for an amount": (
        "cells",
        "id 5 holds in change",
        ["UPDATE entry SET change = change + 0.5 WHERE id = 5"],
    ),
    "bytes for a text": (
        "cells",
        "id 1 holds in remark",
        ["UPDATE bottle SET remark = x'61ff' WHERE id = 1"],
    ),
    "a kind of amount nobody knows": (
        "cells",
        "of the kind 'heaps'",
        ["UPDATE line SET kind = 'heaps' WHERE id = 1"],
    ),
    "a kind of entry nobody knows": (
        "cells",
        "of the kind 'wished'",
        [new("S13", "wished", 0)],
    ),
    "nobody's entry": ("cells", "says nobody", ["UPDATE entry SET by = ' ' WHERE id = 5"]),
    "a day that is none": (
        "cells",
        "'2026-13-45', which is no day",
        ["UPDATE entry SET entered_on = '2026-13-45' WHERE id = 5"],
    ),
    "a number for a day": (
        "cells",
        "holds in received_on",
        ["UPDATE bottle SET received_on = 5 WHERE id = 1"],
    ),
}


@pytest.mark.file
@pytest.mark.parametrize("name", LEDGER)
def test_a_fault_of_the_ledger_is_found_and_no_other(own: Path, name: str) -> None:
    check, words, statements = LEDGER[name]
    plant(own, *statements)
    found = verify(own)
    assert checks(found) == {check}, found.faults
    assert any(words in fault.text for fault in found.faults)
    assert all(fault.mend for fault in found.faults)


@pytest.mark.file
def test_a_text_for_a_kept_balance_is_found_and_mended(own: Path, stockroom: Stockroom) -> None:
    plant(own, "UPDATE kept_balance SET held = 'lots' WHERE bottle_id = 1", sums=False)
    (fault,) = verify(own).faults
    assert (fault.subject, fault.check) == ("kept_balance", "cells")
    assert "verify --afresh" in fault.mend
    assert stockroom("verify", "--afresh", "--by", "T1", store=own).code == 0
    assert verify(own).faults == ()


# what was planted, and the command its mend tells
MENDS = {
    "below nothing": "count S13 20cm3",
    "entered before it happened": "put-right {last} --why slip",
    "before it was there": "put-right {last} --why slip",
    "not cancelled": "count S13 20cm3",
    "thrown away, not empty": "put-right {last} --why slip",
    "for no booking": "put-right 9 --why slip",
    "a balance kept": "verify --afresh",
}


@pytest.mark.file
@pytest.mark.parametrize("name", MENDS)
def test_what_verify_says_mends_it(name: str, own: Path, stockroom: Stockroom) -> None:
    plant(own, *(LEDGER[name][2] if name in LEDGER else ()))
    if name not in LEDGER:
        plant(own, "UPDATE kept_balance SET held = 7 WHERE bottle_id = 2", sums=False)
    found = verify(own)
    assert not all(fault.remark for fault in found.faults)
    words = MENDS[name].format(last=found.entries).split()
    assert any(f"stockroom {words[0]}" in fault.mend for fault in found.faults)
    done = stockroom(*words, "--by", "T1", store=own)
    assert done.code == 0, done.err
    assert all(fault.remark for fault in verify(own).faults), verify(own).faults


@pytest.mark.file
def test_guards_are_right_again_in_a_store_read_back(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    with closing(sqlite3.connect(own)) as raw:
        raw.execute("DROP TRIGGER entry_no_update")
    (fault,) = verify(own).faults
    assert "hand-out" in fault.mend
    assert stockroom("hand-out", str(tmp_path / "out"), store=own).code == 0
    again = tmp_path / "again.sqlite"
    assert stockroom("new", "--from", str(tmp_path / "out"), store=again).code == 0
    assert verify(again).faults == ()


def test_keeping_afresh_changes_nothing_where_all_is_well(own: Path, stockroom: Stockroom) -> None:
    told = stockroom("verify", "--afresh", "--by", "T1", store=own)
    assert (told.code, "nothing was changed" in told.said) == (0, True)
    assert stockroom("verify", "--afresh", "--by", "", store=own).code == 2


@pytest.mark.file
def test_a_decant_that_got_another_amount_is_found(own: Path) -> None:
    plant(
        own,
        "INSERT INTO bottle (number, line_id, size, printed_text, printed_readings, cap, remark,"
        " made_here, source, decanted_from) SELECT 'S99', line_id, size, '', '', '', '', 1, '',"
        " id FROM bottle WHERE number = 'S13'",
        f"INSERT INTO parent (bottle_id, parent_id) SELECT id, {S13} FROM bottle"
        " WHERE number = 'S99'",
        new("S13", "decanted", -1000, note="into S99"),
        new("S99", "decanted in", 900),
    )
    found = verify(own)
    assert checks(found) == {"parents"}
    assert found.faults[0].text == "got 0.9 cm³ from S13, which gave 1 cm³"


@pytest.mark.file
def test_an_order_that_came_as_something_else_is_found(own: Path) -> None:
    columns = (
        "number, line_id, size, pack, packs, pence, supplier, ordered_on, expected_on, entered_on"
    )
    plant(
        own,
        f"INSERT INTO placed ({columns}, entered_at, by, note) SELECT 'P77', line_id, 1, '', 1, 0,"
        " '', '2027-01-04', '2027-01-08', '2027-01-04', '', 'T1', '' FROM bottle"
        " WHERE number = 'B06'",
        "INSERT INTO placed_came (placed_id, entry_id)"
        " SELECT placed.id, entry.id FROM placed, entry"
        f" WHERE entry.bottle_id = {S13} AND entry.kind = 'made' AND placed.number = 'P77'",
    )
    found = verify(own)
    assert (checks(found), found.faults[0].subject) == ({"references"}, "P77")


@pytest.mark.file
@pytest.mark.parametrize(
    ("statement", "words"),
    [
        ("DROP TRIGGER entry_no_update", "has lost the trigger entry_no_update"),
        (
            "CREATE TRIGGER mine AFTER INSERT ON entry BEGIN DELETE FROM swap; END",
            "has a trigger mine that",
        ),
    ],
)
def test_a_trigger_lost_or_added_is_found(own: Path, statement: str, words: str) -> None:
    with closing(sqlite3.connect(own)) as raw:
        raw.execute(statement)
    found = verify(own)
    assert (checks(found), len(found.faults)) == ({"guards"}, 1)
    assert (found.faults[0].subject, found.faults[0].text[: len(words)]) == ("entry", words)


@pytest.mark.file
def test_a_trigger_of_other_words_is_found(own: Path) -> None:
    with closing(sqlite3.connect(own)) as raw:
        raw.executescript(
            "DROP TRIGGER entry_no_delete; CREATE TRIGGER entry_no_delete BEFORE DELETE ON entry"
            " WHEN OLD.by <> 'me' BEGIN SELECT RAISE(ABORT, 'KEPT no'); END"
        )
    found = verify(own)
    assert [fault.text for fault in found.faults] == [
        "has a trigger entry_no_delete of other words"
    ]


@pytest.mark.file
def test_what_is_only_worth_knowing_leaves_the_store_in_order(own: Path) -> None:
    plant(own, new("S13", "counted", 10**9), new("S13", "counted", 1), new("B06", "drawn", -1))
    plant(own, "UPDATE entry SET entered_at = '1999-01-01' WHERE id = (SELECT MAX(id) FROM entry)")
    found = verify(own)
    assert checks(found) == {"full", "clock"}
    assert all(fault.remark for fault in found.faults)


@pytest.mark.file
@pytest.mark.parametrize(
    ("statement", "subject"),
    [
        ("DROP TABLE kept_balance", "kept_balance"),
        ("ALTER TABLE vessel DROP COLUMN source", "vessel"),
    ],
)
def test_a_table_or_column_that_is_gone_is_found(own: Path, statement: str, subject: str) -> None:
    plant(own, sums=False)
    with closing(sqlite3.connect(own)) as raw:
        raw.execute("DROP TRIGGER entry_keeps_balance")
        raw.execute("DROP TRIGGER entry_not_below_nothing")
        raw.execute(statement)
    found = verify(own)
    assert {(fault.check, fault.subject) for fault in found.faults} == {("layout", subject)}


@pytest.mark.file
def test_a_page_torn_out_is_found_but_not_quickly(own: Path) -> None:
    with closing(sqlite3.connect(own)) as raw:
        size = raw.execute("PRAGMA page_size").fetchone()[0]
        named = "SELECT rootpage FROM sqlite_master WHERE name = 'sqlite_autoindex_glassware_1'"
        page = raw.execute(named).fetchone()[0]
    with own.open("r+b") as file:
        file.seek((page - 1) * size)
        file.write(bytes(size))
    assert checks(verify(own)) == {"damage"}
    assert verify(own, quick=True).faults == ()


def test_a_shelf_read_otherwise_than_the_entries_say_is_found(
    practice: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def otherwise(reader: Reader, day: date, *, gone: bool) -> tuple[Bottle, ...]:
        first, second, *rest = bottles_of(reader, day, gone=gone)
        lost = replace(second, record=replace(second.record, not_found=True, gone=True))
        return replace(first, left=first.left + 1), lost, *rest

    monkeypatch.setattr("stockroom.store.verify_shelf.bottles_of", otherwise)
    found = verify(practice)
    assert (checks(found), len(found.faults)) == ({"shelf"}, 3)


@pytest.mark.file
def test_many_faults_of_one_kind_are_counted_and_not_all_told(own: Path) -> None:
    plant(own, "UPDATE kept_balance SET held = held + 1", sums=False)
    found = verify(own)
    assert len(found.faults) == 21
    assert found.faults[-1].text.endswith("more like these")


@pytest.mark.file
def test_proving_writes_nothing(own: Path) -> None:
    plant(own, *[each for _, _, some in LEDGER.values() for each in some[:1]], sums=False)
    before = own.read_bytes()
    assert verify(own).faults
    assert own.read_bytes() == before
    assert [path.name for path in own.parent.iterdir()] == [own.name]


@pytest.mark.parametrize(
    "say", [lambda path: path.write_text("no store"), lambda path: path.mkdir()]
)
def test_what_is_no_store_is_refused(tmp_path: Path, say: Callable[[Path], object]) -> None:
    say(tmp_path / "other")
    with pytest.raises(StoreTrouble):
        verify(tmp_path / "other")
