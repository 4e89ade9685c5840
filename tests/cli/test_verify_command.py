"""The command that proves the store: what it says, and how it leaves."""

from __future__ import annotations

import sqlite3
from contextlib import closing
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom


def raw(path: Path, statement: str) -> None:
    with closing(sqlite3.connect(path)) as link, link:
        link.execute(statement)


def test_a_store_in_order_is_well_and_leaves_with_nought(
    practice: Path, stockroom: Stockroom
) -> None:
    told = stockroom("verify", store=practice)
    assert (told.code, told.err) == (0, "")
    assert told.said == "PRACTICE All is well: 75 bottles, 178 entries."


def test_a_store_out_of_order_is_told_with_what_to_do(own: Path, stockroom: Stockroom) -> None:
    raw(own, "UPDATE kept_balance SET held = 5 WHERE bottle_id = 1")
    told = stockroom("verify", "--quick", store=own)
    assert told.code == 1
    assert "Not in order: 1 finding: 75 bottles, 178 entries." in told.said
    assert "were not looked at (--quick)" in told.said
    assert "Kept balances" in told.said
    assert "stockroom verify --afresh" in told.said


def test_findings_are_data_too(own: Path, stockroom: Stockroom) -> None:
    raw(own, "DROP TRIGGER entry_no_update")
    told = stockroom("verify", "--json", store=own)
    assert told.code == 1
    assert (told.json["well"], told.json["practice"], told.json["entries"]) == (False, True, 178)
    (found,) = told.json["findings"]
    assert (found["check"], found["subject"], found["remark"]) == ("guards", "entry", False)
    assert found["mend"]


def test_what_is_only_worth_knowing_does_not_leave_with_one(
    own: Path, stockroom: Stockroom
) -> None:
    raw(own, "UPDATE bottle SET size = 1 WHERE number = 'S13'")
    told = stockroom("verify", store=own)
    assert told.code == 0
    assert told.said.startswith("PRACTICE All is well")
    assert "Fuller than full (worth knowing)" in told.said


def test_a_store_of_an_earlier_layout_is_not_brought_up_by_it(
    own: Path, stockroom: Stockroom
) -> None:
    raw(own, "UPDATE alembic_version SET version_num = '0007'")
    before = own.read_bytes()
    told = stockroom("verify", store=own)
    assert (told.code, own.read_bytes() == before) == (1, True)
    assert "earlier version (0007, now" in told.said


@pytest.mark.parametrize("version", ["9999", None])
def test_what_cannot_be_judged_is_refused(
    own: Path, stockroom: Stockroom, version: str | None
) -> None:
    if version:
        raw(own, f"UPDATE alembic_version SET version_num = '{version}'")
    else:
        own.write_text("something else")
    told = stockroom("verify", store=own)
    assert (told.code, told.out) == (1, "")
    assert ("newer stockroom" in told.err) is bool(version)
