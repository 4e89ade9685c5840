"""Changes since the copy before, by their causes: bookings first, what hangs on them counted."""

from __future__ import annotations

from datetime import date

from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.reports.paper.changes import Made, since_by_booking
from stockroom.reports.paper.head import since

TODAY = date(2027, 1, 4)
TUESDAY = date(2027, 1, 26)
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


# -- what is gone because it was done ----------------------------------------------------------


def came(before: dict[str, str], now: dict[str, str], *made: Made) -> tuple[str, ...]:
    """The changes told on the Tuesday."""
    return since_by_booking("0001", before, now, TUESDAY, made=made).changes


def test_makes_that_were_done_are_told_by_their_bottles_before_what_that_changed() -> None:
    before = {
        f"{DAY} booking K08": "8",
        f"{DAY} make starch": "1",
        f"{DAY} start lime": "2",
        f"{DAY} make acid": "3",
    }
    now = {f"{DAY} set out K08 starch": "of S25", f"{DAY} booking K08": "9"}
    done = (
        Made("S25", TUESDAY, "starch"),
        Made("S26", TUESDAY, "lime"),
        Made("S27", TUESDAY, "lime"),
    )
    assert came(before, now, *done) == (
        "9 (was: 8)",
        "made: S25 starch; S26 lime; S27 lime",
        "gone: 3",
        "new: of S25",
    )


def test_a_make_that_is_still_to_do_is_not_told_as_made() -> None:
    lines = {f"{DAY} make starch": "starch, 500 cm³"}
    less = {f"{DAY} make starch": "starch, 200 cm³"}
    some = Made("S25", TUESDAY, "starch")
    assert came(lines, less, some) == ("starch, 200 cm³ (was: starch, 500 cm³)",)


def test_another_line_another_day_and_a_finish_are_gone() -> None:
    before = {f"{NEXT} make starch": "tomorrow", f"{DAY} make starch 1 %": "stronger"}
    before |= {f"{DAY} finish starch": "finish", f"{DAY} tidy starch": "pour away"}
    told = came(before, {}, Made("S25", TUESDAY, "starch"))
    assert sorted(told) == [f"gone: {each}" for each in sorted(before.values())]


def test_of_two_on_one_day_it_is_the_one_of_its_bookings() -> None:
    before = {f"{DAY} make salt for K08": "first", f"{DAY} make salt for K09 and K10": "second"}
    assert came(before, {}, Made("S25", TUESDAY, "salt", ("K10",))) == (
        "made: S25 salt",
        "gone: first",
    )
    # nobody wrote whom it is for
    assert came(before, {}, Made("S25", TUESDAY, "salt")) == ("made: S25 salt",)


def test_a_bottle_that_was_there_when_the_copy_was_printed_did_not_come_of_its_lines() -> None:
    salt = Made("S25", TUESDAY, "salt")
    before = {f"{DAY} make salt": "a second lot", salt.key: ""}
    assert came(before, {salt.key: ""}, salt) == ("gone: a second lot",)
    assert came({}, {salt.key: ""}, salt) == ()
