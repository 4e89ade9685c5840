"""Two plans held against each other: what differs, what is done, and why."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    pack,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.planning.changing.causes import compared
from stockroom.planning.changing.changes import About, Change, Comparison, What
from stockroom.planning.changing.kept import KeptMake, KeptPlan, KeptSource, kept_of, usual_days
from stockroom.planning.changing.kept_form import UNREADABLE, digest, read, written
from stockroom.planning.changing.pairing import paired_makes
from stockroom.planning.changing.what_if import booked, cancelled, shifted, with_groups, without
from stockroom.planning.facts import Facts, Happened, HappenedKind
from stockroom.planning.plan import plan

SALT = solid(packs=(pack(g(500), 7.0),))
WEAK = solution(0.1, rules=(keeps(7),))
ASKED = recipe(wants(WEAK, cm3(100)))
BOTTLE = bought_bottle("B01", SALT, g(100))


def facts(*bookings: Any, **more: Any) -> Facts:
    more = {"bottles": [BOTTLE], **more}
    return house([SALT, WEAK], methods=[made_from(WEAK, SALT)], recipes=[ASKED],
                 bookings=bookings, **more)  # fmt: skip


def kept(known: Facts) -> KeptPlan:
    return kept_of(known, plan(known))


def changes(before: Facts, after: Facts, *happened: Happened) -> Comparison:
    return compared(kept(before), kept(after), happened)


def of(comparison: Comparison, about: About) -> list[Change]:
    return [change for change in comparison.changes if change.about is about]


def one(comparison: Comparison, about: About) -> Change:
    (change,) = of(comparison, about)
    return change


TWO = facts(booking("K01", "01-12"), booking("K02", "02-02"))


def test_nothing_changed_is_no_change() -> None:
    assert changes(TWO, TWO).changes == ()


def test_more_groups_show_only_the_extra() -> None:
    per_group = replace(ASKED, requirements=(wants(WEAK, cm3(66), per="group"),))
    before = replace(
        facts(booking("K08", "01-26", groups=8), booking("K09", "03-02", groups=8)),
        recipes={("R01", 1): per_group},
    )
    told = changes(before, with_groups(before, "K08", 11))
    make = one(told, About.MAKE)
    assert (make.what, make.text) == ((What.AMOUNT,), "528 cm³ → 726 cm³")
    assert make.cause == "K08 8 → 11 groups"
    assert one(told, About.BOOKING).text == "8 → 11 groups"
    assert of(told, About.NEED) == []


def test_a_moved_class_moves_its_make() -> None:
    told = changes(TWO, shifted(TWO, "K02", on=day("02-09")))
    make = one(told, About.MAKE)
    assert make.what == (What.DAY,)
    assert make.text == "moved from 2027-02-01 to 2027-02-08"
    assert make.cause == "K02 moved 2027-02-02 → 2027-02-09"


def test_a_dropped_class_withdraws_its_make() -> None:
    told = changes(TWO, cancelled(TWO, "K01"))
    make = one(told, About.MAKE)
    assert (make.ref, make.now, make.what) == ("M01", "", (What.GONE,))
    assert make.cause == "K01 dropped; was 2027-01-12, 1 group"


def test_makes_are_known_by_what_they_serve_and_not_by_number() -> None:
    """K01 goes: M02 becomes M01, and that is no change."""
    told = changes(TWO, cancelled(TWO, "K01"))
    assert [change.ref for change in of(told, About.MAKE)] == ["M01"]


def test_a_class_more_adds_its_make() -> None:
    told = changes(TWO, booked(TWO, booking("K03", "03-02")))
    make = one(told, About.MAKE)
    assert (make.ref, make.now, make.what) == ("", "M03", (What.ADDED,))
    assert make.text == "100 cm³ on 2027-03-01 for K03 from B01, 10 min"


def test_a_bottle_that_is_gone_changes_the_sources() -> None:
    both = facts(booking("K01", "01-12"), bottles=[BOTTLE, bought_bottle("B02", SALT, g(100))])
    lost = Happened(HappenedKind.BOTTLE, "B01", "B01 not found", SALT.key, date(2027, 1, 5), "T1")
    make = one(changes(both, without(both, "B01"), lost), About.MAKE)
    assert (make.what, make.text) == ((What.SOURCES,), "from B01 → B02")
    assert make.cause == "B01 not found 2027-01-05 by T1"


def test_a_bottle_that_is_gone_is_bought_again() -> None:
    told = changes(TWO, without(TWO, "B01"))
    order = one(told, About.ORDER)
    assert (order.what, order.text[:9]) == ((What.ADDED,), "1 × pack ")
    assert {need.text for need in of(told, About.NEED)} >= {"make → buy"}


def test_what_was_made_since_is_done_and_not_gone() -> None:
    made = made_bottle("S01", WEAK, cm3(150), "01-11")
    later = replace(TWO, as_at=day("01-11"), bottles=(BOTTLE, made))
    entry = Happened(HappenedKind.MADE, "S01", "S01 150 cm³ made", WEAK.key, day("01-11"), "T1",
                     bookings=("K01",))  # fmt: skip
    told = changes(TWO, later, entry)
    make = one(told, About.MAKE)
    assert (make.what, make.done) == ((What.DONE,), True)
    assert "S01 150 cm³ made 2027-01-11 by T1" in make.text
    assert told.open == ()


def test_what_was_ordered_for_came_and_is_done() -> None:
    bare = facts(booking("K01", "02-09"), bottles=[])
    filled = facts(booking("K01", "02-09"), bottles=[bought_bottle("B02", SALT, g(500))])
    came = Happened(HappenedKind.ARRIVED, "B02", "B02 arrived", SALT.key, day("01-04"), "T1")
    assert one(changes(bare, filled, came), About.ORDER).what == (What.DONE,)
    assert one(changes(bare, filled), About.ORDER).what == (What.GONE,)


def test_a_day_gone_by_is_past_and_no_change() -> None:
    told = changes(TWO, replace(TWO, as_at=day("01-13")))
    assert told.open == ()
    assert {change.about for change in told.done} == {About.BOOKING, About.MAKE}


def test_time_alone_is_named_as_the_cause() -> None:
    """The make for K01 was to be on the 11th; on the 12th it is still not entered."""
    told = changes(TWO, replace(TWO, as_at=day("01-12")))
    make = one(told, About.MAKE)
    assert make.cause == "today is later: 2027-01-11 is past, and nothing was entered for it"


def test_a_change_nothing_explains_follows_from_the_nearest() -> None:
    before = kept(TWO)
    moved = tuple(replace(make, volume=make.volume * 2) for make in before.makes)
    first, second = compared(before, replace(before, makes=moved)).changes
    assert first.cause == "nothing entered since explains it: worked out anew"
    assert second.cause == first.cause
    lost = Happened(HappenedKind.BOTTLE, "S09", "S09 lost", WEAK.key)
    orphan = replace(before, makes=(*moved, _make("M09", "other", ["K77"])))
    told = {change.now: change.cause for change in compared(before, orphan, [lost]).changes}
    assert told["M09"] == f"follows from M01 {WEAK.key}"


def _make(number: str, line: str, bookings: list[str], on: str = "01-12", **more: Any) -> KeptMake:
    more = {"volume": cm3(100), "minutes": 20, "sources": (), **more}
    return KeptMake(number, line, line, "", on=day(on), ready=day(on), finish_on=None,
                    bookings=tuple(bookings), **more)  # fmt: skip


EMPTY = KeptPlan(day("01-04"), day("01-04"), day("03-26"), False)


def test_a_move_that_saves_minutes_says_so() -> None:
    was = replace(
        EMPTY, makes=(_make("M01", "x", ["K13"], "02-05"), _make("M02", "x", ["K11"], "02-01"))
    )
    now = replace(EMPTY, makes=(_make("M01", "x", ["K11", "K13"], "02-04"),))
    gone, moved = compared(was, now).changes
    assert gone.text.endswith("for K11; now in M01")
    assert "saves 20 min: one batch for K11 and K13" in moved.text


def test_a_move_that_saves_nothing_says_nothing_of_it() -> None:
    was = replace(EMPTY, makes=(_make("M01", "x", ["K11"], "02-05"),))
    now = replace(EMPTY, makes=(_make("M01", "x", ["K11"], "02-04"),))
    (moved,) = compared(was, now).changes
    assert moved.text == "moved from 2027-02-05 to 2027-02-04"


def test_less_to_make_is_no_saving_by_the_move() -> None:
    was = replace(EMPTY, makes=(_make("M01", "x", ["K11"]), _make("M02", "x", ["K12"], "02-01")))
    now = replace(EMPTY, makes=(_make("M01", "x", ["K11"], "01-11"),))
    assert not any("saves" in change.text for change in compared(was, now).changes)


def test_makes_pair_by_the_most_bookings_in_common() -> None:
    was = [_make("M01", "x", ["K01", "K02", "K03"]), _make("M02", "x", ["K04"])]
    now = [_make("M01", "x", ["K03"]), _make("M02", "x", ["K01", "K02", "K04"])]
    pairs = {(a.id if a else "", b.id if b else "") for a, b in paired_makes(was, now)}
    assert pairs == {("M01", "M02"), ("M02", ""), ("", "M01")}


def test_makes_of_other_lines_never_pair() -> None:
    pairs = paired_makes([_make("M01", "x", ["K01"])], [_make("M01", "y", ["K01"])])
    assert [(a is None, b is None) for a, b in pairs] == [(False, True), (True, False)]


@pytest.mark.parametrize("part", ["volume", "on", "bookings", "sources"])
def test_a_kept_plan_is_read_as_it_was_written(part: str) -> None:
    source = KeptSource("B01", "salt", 5, TWO.lines["salt"].kind)
    make = _make("M01", "größe", ["K01"], sources=(source,), **{})
    plan_now = replace(kept(TWO), makes=(make,))
    again = read(written(plan_now))
    assert again == plan_now
    assert getattr(again.makes[0], part) == getattr(make, part)


@pytest.mark.parametrize(
    ("was", "now"),
    [
        ('"volume":100000', '"volume":"100000"'),
        ('"id":"M01"', '"id":1'),
        ('"on":"2027-01-12"', '"on":"soon"'),
        ('"makes":[', '"makes":[5,'),
        ('"makes":', '"mades":'),
    ],
)
def test_another_text_is_no_kept_plan(was: str, now: str) -> None:
    """Found out when it is read, not where two amounts are compared."""
    text = written(kept(facts(booking("K01", "01-12", groups=2))))
    assert was in text
    with pytest.raises(UNREADABLE):
        read(text.replace(was, now, 1))


def test_the_digest_knows_what_was_decided_and_no_more() -> None:
    before = kept(TWO)
    assert digest(before) == digest(replace(before, as_at=day("01-05")))
    assert digest(before) != digest(kept(shifted(TWO, "K02", on=day("02-09"))))


def test_the_usual_days_are_those_of_the_makes() -> None:
    assert usual_days(kept(TWO)) == {WEAK.key: (day("01-11"), day("02-01"))}


def test_the_usual_days_move_no_make() -> None:
    """Kept once, a plan made with its own days as the usual ones is the same plan."""
    before = kept(TWO)
    assert kept(replace(TWO, usual=usual_days(before))) == before


def test_an_unrelated_event_moves_no_make() -> None:
    other = solid("other")
    known = replace(TWO, lines={**TWO.lines, "other": other}, usual=usual_days(kept(TWO)))
    more = replace(known, bottles=(*known.bottles, bought_bottle("B09", other, g(5))))
    assert compared(kept(known), kept(more)).changes == ()


def test_more_asked_for_is_not_blamed_for_what_went() -> None:
    """S03 fell out and K08 grew; the order that came is S03's, the order that went is not K08's."""
    both = facts(booking("K01", "01-12"), bottles=[])
    found = facts(booking("K01", "01-12", groups=2), bottles=[BOTTLE])
    came = Happened(HappenedKind.BOTTLE, "B01", "B01 turned up", SALT.key, day("01-04"), "T1",
                    sense=-1)  # fmt: skip
    assert one(changes(both, found, came), About.ORDER).cause == "B01 turned up 2027-01-04 by T1"
