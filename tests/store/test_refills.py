"""Which bottles were topped up, by what was counted in them."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from stockroom.store.reading import reading
from stockroom.store.refills import refills_of

if TYPE_CHECKING:
    from conftest import Stockroom

LAST = date(2027, 1, 4)


def tell(store: Path, stockroom: Stockroom, *words: str, on: str) -> None:
    done = stockroom(*words, "--on", on, "--by", "T1", store=store)
    assert done.code == 0, done.err


def refilled(store: Path, as_at: date = LAST) -> dict[str, date]:
    with reading(store) as reader:
        return refills_of(reader, as_at)


def test_a_count_far_above_the_entries_is_a_top_up(own: Path, stockroom: Stockroom) -> None:
    tell(own, stockroom, "count", "B01", "500 cm3", on="2026-12-30")
    assert refilled(own)["B01"] == date(2026, 12, 30)


def test_the_last_of_several_counts(own: Path, stockroom: Stockroom) -> None:
    tell(own, stockroom, "count", "B01", "500 cm3", on="2026-12-28")
    tell(own, stockroom, "draw", "B01", "200 cm3", on="2026-12-29")
    tell(own, stockroom, "count", "B01", "500 cm3", on="2026-12-30")
    assert refilled(own)["B01"] == date(2026, 12, 30)


def test_a_top_up_still_to_come_is_not_known(own: Path, stockroom: Stockroom) -> None:
    tell(own, stockroom, "count", "B01", "500 cm3", on="2026-12-30")
    assert "B01" not in refilled(own, date(2026, 12, 29))


def test_a_little_more_is_how_well_anybody_counts(own: Path, stockroom: Stockroom) -> None:
    tell(own, stockroom, "count", "B01", "430 cm3", on="2026-12-30")
    assert "B01" not in refilled(own)


def test_a_draw_entered_late_tops_nothing_up(own: Path, stockroom: Stockroom) -> None:
    # the count found 100 less; then the draw that took it was entered, and evened it out
    tell(own, stockroom, "count", "B01", "320 cm3", on="2026-12-30")
    tell(own, stockroom, "draw", "B01", "100 cm3", on="2026-12-29")
    assert "B01" not in refilled(own)


def test_a_count_put_right_never_happened(own: Path, stockroom: Stockroom) -> None:
    tell(own, stockroom, "count", "B01", "500 cm3", on="2026-12-30")
    with reading(own) as reader:
        (row,) = reader.ask("SELECT MAX(id) FROM entry")
    done = stockroom("put-right", str(row[0]), "--why", "wrong bottle", "--by", "T1", store=own)
    assert done.code == 0, done.err
    assert "B01" not in refilled(own)
