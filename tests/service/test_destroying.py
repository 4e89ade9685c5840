"""What is never kept is ticked once it is destroyed: by whom, on the sheets, and taken back."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.errors import BadDate, BadInput, NotAllowed, UnknownName
from stockroom.service.destroying import destroyed, not_destroyed
from stockroom.service.plan import term_plan

if TYPE_CHECKING:
    from conftest import Stockroom


def day_of(store: Path, booking: str) -> date:
    plan = term_plan(store, as_at=date(2027, 1, 4))
    return next(each.on for each in plan.watch if each.booking == booking)


def ticked(store: Path, booking: str, on: date) -> str:
    plan = term_plan(store, as_at=on)
    return next(each.ticked_by for each in plan.watch if each.booking == booking)


def test_a_tick_is_told_with_the_initials_of_whoever_destroyed_it(own: Path) -> None:
    on = day_of(own, "K16")
    assert ticked(own, "K16", on) == ""
    done = destroyed(own, "K16", today=on, by="T2")
    assert "ticked by T2" in done.text
    assert ticked(own, "K16", on) == "T2"
    assert not [
        n for n in term_plan(own, as_at=on).notes if "destroy by" in n.text and n.subject == "K16"
    ]


def test_a_tick_taken_back_stands_on_record_with_its_reason(own: Path) -> None:
    on = day_of(own, "K16")
    destroyed(own, "K16", today=on, by="T2")
    with pytest.raises(BadInput, match="K16"):
        not_destroyed(own, "K16", why=" ", today=on, by="T2")
    not_destroyed(own, "K16", why="the other flask", today=on, by="T1")
    assert ticked(own, "K16", on) == ""
    assert "T1" in destroyed(own, "K16", today=on, by="T1").text


def test_nothing_is_ticked_twice_or_before_its_day(own: Path) -> None:
    on = day_of(own, "K16")
    with pytest.raises(BadDate, match="K16"):
        destroyed(own, "K16", today=date(2027, 1, 4), by="T1")
    destroyed(own, "K16", today=on, by="T1")
    with pytest.raises(NotAllowed, match="already, by T1"):
        destroyed(own, "K16", today=on, by="T2")


def test_only_what_is_never_kept_is_ticked(own: Path) -> None:
    with pytest.raises(NotAllowed, match="K01"):
        destroyed(own, "K01", today=date(2027, 1, 12), by="T1")
    with pytest.raises(UnknownName, match="K99"):
        destroyed(own, "K99", today=date(2027, 1, 12), by="T1")
    with pytest.raises(NotAllowed, match="K16"):
        not_destroyed(own, "K16", why="a slip", today=date(2027, 2, 11), by="T1")


def test_the_week_sheet_tells_who_ticked_it(stockroom: Stockroom, own: Path) -> None:
    on = day_of(own, "K16").isoformat()
    done = stockroom("destroyed", "K16", "--as-at", on, "--by", "T2", store=own)
    assert (done.code, "ticked by T2" in done.said) == (0, True)
    assert "ticked by T2" in stockroom("week", on, "--as-at", on, store=own).said
    back = stockroom("destroyed", "K16", "--undo", "--as-at", on, "--by", "T2", store=own)
    assert (back.code, "K16" in back.err) == (2, True)
