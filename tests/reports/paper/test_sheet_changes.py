"""Changes since the copy before, by their causes: bookings first, what hangs on them counted."""

from __future__ import annotations

from datetime import date

from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.reports.paper.changes import since_by_booking
from stockroom.reports.paper.head import since

TODAY = date(2027, 1, 4)
DAY, NEXT = "2027-01-26", "2027-01-27"

KEYS = st.sampled_from(
    [f"{DAY} booking K08", f"{NEXT} booking K08", f"{DAY} set out K08 salt", f"{DAY} waste K08",
     f"{DAY} booking K09", f"{NEXT} set out K09 salt", f"{DAY} make salt", "order salt",
     f"{DAY} make salt for K08, K09", "2027-01-01 booking K01"]
)  # fmt: skip
LINES = st.dictionaries(KEYS, st.sampled_from(["one thing", "another"]), max_size=8).map(
    # a booking stands on one day of a sheet
    lambda lines: {
        k: v for k, v in lines.items() if k[:10] != NEXT or f"{DAY}{k[10:]}" not in lines
    }
)


@settings(max_examples=60)
@given(LINES, LINES)
def test_marks_are_those_of_every_sheet_and_nothing_is_told_twice(
    before: dict[str, str], now: dict[str, str]
) -> None:
    told, plain = since_by_booking("1", before, now, TODAY), since("1", before, now, TODAY)
    assert told.marked == plain.marked
    assert bool(told.changes) == bool(plain.changes)
    with_it = sum(
        int(each.split("; ")[-1].split()[0]) for each in told.changes if " with it" in each
    )
    moved = sum(each.startswith("moved: ") for each in told.changes)
    # a booking that moved is gone from one day and new on another, and one line
    assert len(told.changes) + with_it + moved == len(plain.changes)


def test_a_booking_that_moved_comes_first_and_its_lines_with_it() -> None:
    before = {f"{DAY} make salt": "1 g", f"{DAY} booking K08": "Tue K08"}
    before |= {f"{DAY} set out K08 {n}": f"thing {n}" for n in range(5)}
    now = {f"{DAY} make salt": "2 g", f"{NEXT} booking K08": "Wed K08"}
    now |= {f"{NEXT} set out K08 {n}": f"thing {n}" for n in range(5)}
    told = since_by_booking("0001", before, now, TODAY)
    assert told.changes == ("moved: Wed K08 (was: Tue K08); 10 lines with it", "2 g (was: 1 g)")
    assert len(told.marked) == 7


def test_what_is_gone_comes_before_makes_and_these_before_what_is_set_out() -> None:
    before = {f"{DAY} tidy salt": "pour it away", f"{DAY} booking K08": "8 groups"}
    now = {f"{DAY} set out K08 salt": "5 g", f"{DAY} make salt": "5 g", f"{DAY} booking K08": "9"}
    told = since_by_booking("0001", before, now, TODAY).changes
    assert told == ("9 (was: 8 groups)", "gone: pour it away", "new: 5 g", "new: 5 g")


def test_a_dropped_booking_that_is_still_named_takes_its_lines_with_it() -> None:
    before = {f"{DAY} K28": "K28", f"{DAY} K28 set out": "set out", f"{DAY} K28.1": "0.1 mol/dm³"}
    told = since_by_booking("0001", before, {f"{DAY} K28": "K28: dropped"}, TODAY).changes
    assert told == ("K28: dropped (was: K28); 2 lines with it",)


def test_a_bottle_no_longer_taken_is_told_with_its_cause() -> None:
    key = f"{DAY} set out K08 salt"
    passed = {key: ("S05: set aside", "S06: too weak")}
    before, now = {key: "5 g, from S05 in A1"}, {key: "5 g, from B14 in A1"}
    told = since_by_booking("0001", before, now, TODAY, passed).changes
    assert told == ("5 g, from B14 in A1 (was: 5 g, from S05 in A1); S05: set aside",)
    # of a line that is new nothing was taken before
    assert since_by_booking("0001", {}, now, TODAY, passed).changes == ("new: 5 g, from B14 in A1",)
