"""What a walk reads from the ledger: its own entries, and what keeps a count true."""

from __future__ import annotations

from stockroom.store.kinds import evening_note
from stockroom.store.line_names import spelt
from stockroom.store.walks import difference_by, left_after


def entry(
    number: int, day: str, change: int, kind: str = "drawn", note: str = ""
) -> dict[str, object]:
    return {"id": number, "happened_on": day, "change": change, "kind": kind, "note": note}


# 690 there, 640 counted on the 8th; 20 drawn on the 7th, written up on the 11th; 40 drawn since
COUNT = entry(2, "2027-01-08", -50, "counted", "Jan")
ENTRIES = [
    entry(1, "2027-01-04", 690, "arrived"),
    entry(3, "2027-01-07", -20),
    COUNT,
    entry(4, "2027-01-08", 20, "counted", evening_note(2)),
    entry(5, "2027-01-11", -40),
]


def test_what_was_counted_stays_what_was_counted() -> None:
    assert left_after(ENTRIES, COUNT) == 640  # type: ignore[arg-type]


def test_a_draw_written_up_late_is_no_longer_part_of_the_difference() -> None:
    assert difference_by(ENTRIES, COUNT) == -30  # type: ignore[arg-type]


def test_a_second_count_of_the_day_is_no_part_of_the_first() -> None:
    later = [*ENTRIES, entry(6, "2027-01-08", -5, "counted", "Jan")]
    assert left_after(later, COUNT) == 640  # type: ignore[arg-type]


def test_the_three_ways_of_writing_a_hydrate_are_one_name() -> None:
    ways = ("CuSO4.5H2O", "CuSO4*5H2O", "CuSO4·5H2O", "cuso4·5h2o")
    assert {spelt(way) for way in ways} == {"cuso4·5h2o"}
