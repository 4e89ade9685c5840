"""What happens at the shelf is saved whole, or refused with the reason."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import (
    BadAmount,
    BadDate,
    BadInput,
    NotAllowed,
    NotEnough,
    StockroomError,
    UnknownName,
)
from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import parse_drawn
from stockroom.planning.facts import Bottle
from stockroom.service import stock
from stockroom.service.walk_entering import start
from stockroom.store.diary import diary
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"on": None, "today": TODAY, "by": "T1"}


def seen(path: Path, number: str, day: date = TODAY) -> Bottle:
    return next(bottle for bottle in facts(path, day).bottles if bottle.number == number)


def arrive(path: Path, **changed: Any) -> Any:
    usual: dict[str, Any] = {
        "line": "lithium chloride",
        "size": Amount.grams(100),
        "printed": "03/2029",
    }
    usual |= {"printed": "03/2029", "place": "A2"}
    return stock.arrive(path, **(usual | WHO | changed))


def test_what_arrives_gets_a_new_number_and_its_dates(own: Path) -> None:
    done = arrive(own)
    bottle = seen(own, done.bottle)
    assert done.bottle == "B46"
    assert done.practice
    assert (bottle.left, bottle.place, bottle.record.received) == (100_000_000, "A2", TODAY)
    assert bottle.record.printed is not None
    assert bottle.record.printed.day == date(2029, 3, 31)


def test_several_alike_get_a_number_each(own: Path) -> None:
    assert arrive(own, count=3).text.startswith("B46, B47, B48: lithium chloride, 100 g each")


def test_a_number_is_never_used_again(own: Path) -> None:
    first = arrive(own)
    stock.put_right(own, first.entry, "never came", **WHO)
    assert "B46" not in {bottle.number for bottle in facts(own, TODAY).bottles}
    assert arrive(own).bottle == "B47"


def test_a_bottle_may_come_opened(own: Path) -> None:
    assert seen(own, arrive(own, opened=TODAY).bottle).record.opened == TODAY


@pytest.mark.parametrize(
    ("changed", "kind", "said"),
    [
        ({"printed": None}, BadInput, "none printed"),
        ({"printed": "31/02/27"}, BadDate, "February 2027 has 28 days"),
        ({"line": "lithum chloride"}, UnknownName, 'No stock line "lithum chloride"'),
        ({"place": "A9"}, UnknownName, 'No place "A9"'),
        ({"line": "potassium chloride", "size": Amount.items(1)}, BadAmount, "1 item is not"),
        ({"size": Amount.grams(0)}, BadAmount, "0 g of lithium chloride"),
        ({"count": 0}, BadInput, "0 bottles"),
        ({"by": ""}, BadInput, "Whose initials"),
        ({"on": date(2027, 2, 1)}, BadDate, "1 February 2027 is still to come"),
        ({"opened": date(2027, 1, 3)}, BadDate, "Opened 3 January 2027 is before it arrived"),
        ({"opened": date(2027, 2, 3)}, BadDate, "Opened 3 February 2027 is still to come"),
    ],
)
def test_an_arrival_that_cannot_be_is_refused(
    own: Path, changed: dict[str, Any], kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind, match=said):
        arrive(own, **changed)
    assert len(facts(own, TODAY).bottles) == 75


def test_opening_starts_the_life_once_opened(own: Path) -> None:
    done = stock.open_bottle(own, "B02", **WHO)
    # 100 vol peroxide is rechecked 90 days after opening: scenario section 5, house rule
    assert "recheck by 11 April 2027" in done.text
    assert seen(own, "B02").record.opened == TODAY


def test_the_first_opening_is_kept(own: Path) -> None:
    with pytest.raises(NotAllowed, match="B01 was opened on 29 September 2026"):
        stock.open_bottle(own, "B01", **WHO)


def test_a_draw_comes_off_and_is_said(own: Path) -> None:
    done = stock.draw(own, "s13", Amount.cm3(100), booking="k16", **WHO)
    assert done.text.startswith("Drew 100 cm³ from S13 silver nitrate 0.100 mol/dm3; 30 cm³ left.")
    assert seen(own, "S13").left == Amount.cm3(30).micro
    assert diary(own, "S13")[-1].booking == "K16"


def test_the_second_of_two_draws_hears_who_drew_first(own: Path) -> None:
    stock.draw(own, "S13", Amount.cm3(100), **WHO)
    said = r"S13 holds 30 cm³; 100 cm³ asked\. T1 drew 100 cm³ today\."
    with pytest.raises(NotEnough, match=said):
        stock.draw(own, "S13", Amount.cm3(100), on=None, today=TODAY, by="T2")


def test_a_draw_from_a_sealed_bottle_opens_it(own: Path) -> None:
    done = stock.draw(own, "B02", Amount.cm3(180), **WHO)
    assert done.details == ("B02 was sealed: opened 11 January 2027.",)
    assert seen(own, "B02").record.opened == TODAY


def test_a_draw_dated_before_the_opening_says_so(own: Path) -> None:
    opened = stock.open_bottle(own, "B02", **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T1"}
    done = stock.draw(own, "B02", Amount.cm3(10), **friday)
    assert done.details[0] == (
        "B02 drawn before it was opened on 11 January 2027: put the opening right"
        f" (entry {opened.entry}), or the draw (entry {done.entry})."
    )


def test_a_draw_before_the_one_that_opened_it_opened_it_earlier(own: Path) -> None:
    stock.draw(own, "B02", Amount.cm3(10), **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T1"}
    done = stock.draw(own, "B02", Amount.cm3(20), **friday)
    assert done.details == ("B02 was opened earlier than written: 8 January 2027.",)
    assert seen(own, "B02").record.opened == date(2027, 1, 8)


def test_a_draw_before_a_count_says_that_the_count_takes_it_in(own: Path) -> None:
    counted = stock.count(own, "B06", Amount.grams(600), **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T1"}
    done = stock.draw(own, "B06", Amount.grams(5), **friday)
    told = f"The count of 11 January 2027 (entry {counted.entry}) takes it in: what is left stays"
    assert done.details[0].startswith(told)
    assert not stock.draw(own, "B06", Amount.grams(5), **WHO).details


def test_several_bottles_give_the_numbers_of_all_their_entries(own: Path) -> None:
    more: dict[str, Any] = {"printed": "03/2029", "place": "A2", "opened": TODAY} | WHO
    done = stock.arrive(own, "sodium chloride", Amount.grams(500), count=3, **more)
    first = done.entry or 0
    assert done.text.endswith(f"Entries {first}\u2013{first + 5}.")
    assert [row.kind for row in diary(own, "B48")] == ["arrived", "opened"]


def test_what_is_gone_is_said_to_be_gone_before_how_is_asked(own: Path) -> None:
    stock.discard(own, "S14", how="iron waste", why="past", **WHO)
    with pytest.raises(NotAllowed, match="S14 is gone"):
        stock.discard(own, "S14", how="", why="", **WHO)


def test_what_was_judged_by_eye_is_refused_and_thrown_away_as_about(own: Path) -> None:
    stock.draw(own, "B12", parse_drawn("a third left"), **WHO)
    with pytest.raises(NotEnough, match="B12 holds about 167 g; 400 g asked"):
        stock.draw(own, "B12", Amount.grams(400), **WHO)
    done = stock.discard(own, "B12", how="iron waste", why="past", **WHO)
    assert "B12 iron(II) sulfate heptahydrate, about 167 g: iron waste" in done.text


def test_the_opening_can_be_put_right_as_told(own: Path) -> None:
    opened = stock.open_bottle(own, "B02", **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T1"}
    stock.draw(own, "B02", Amount.cm3(10), **friday)
    stock.put_right(own, opened.entry or 0, "opened on Friday", **WHO)
    stock.open_bottle(own, "B02", **friday)
    assert seen(own, "B02").record.opened == date(2027, 1, 8)


@pytest.mark.parametrize("day", [date(2027, 1, 11), date(2027, 1, 12)])
def test_a_draw_on_the_day_of_the_opening_or_later_is_not_asked_about(own: Path, day: date) -> None:
    stock.open_bottle(own, "B02", **WHO)
    done = stock.draw(own, "B02", Amount.cm3(10), on=day, today=date(2027, 1, 12), by="T1")
    assert not any("before it was opened" in detail for detail in done.details)


def limewater(path: Path) -> str:
    return make_up(path, "limewater saturated", Amount.cm3(500), sources=[], place=None, **WHO)


def make_up(path: Path, *args: Any, **more: Any) -> str:
    from stockroom.service import making

    return making.make_up(path, *args, **more).bottle


def test_a_draw_from_what_still_stands_is_noted(own: Path) -> None:
    # limewater stands 24 h: scenario section 4
    number = limewater(own)
    done = stock.draw(own, number, Amount.cm3(10), **WHO)
    assert done.details == ("still standing until 12 January 2027: noted",)
    assert diary(own, number)[-1].said == "still standing until 12 January 2027"


def test_a_draw_from_what_has_stood_is_not_noted(own: Path) -> None:
    number = limewater(own)
    tomorrow: dict[str, Any] = {"on": None, "today": date(2027, 1, 12), "by": "T1"}
    assert stock.draw(own, number, Amount.cm3(10), **tomorrow).details == ()
    assert diary(own, number)[-1].said == ""


@pytest.mark.parametrize(("hours", "noted"), [("11", False), ("13", True)])
def test_standing_under_half_a_day_does_not_count(own: Path, hours: str, noted: bool) -> None:
    from stockroom.service.database import add_row

    line = "sodium chloride 2 mol/dm3"
    brine = {"item": "sodium chloride", "substance": "sodium chloride", "form": "solution"}
    add_row(own, "lines", {**brine, "strength": "2 mol/dm3"}, by="T1")
    add_row(own, "methods", {"line": line, "stands_h": hours}, by="T1")
    number = make_up(own, line, Amount.cm3(100), sources=["B40"], place=None, **WHO)
    assert bool(stock.draw(own, number, Amount.cm3(10), **WHO).details) is noted


def test_a_draw_from_a_bottle_gone_past_says_so(own: Path) -> None:
    done = stock.draw(own, "S09", Amount.cm3(10), **WHO)
    assert done.details[0].startswith("S09 is past")


@pytest.mark.parametrize(
    ("bottle", "amount", "booking", "kind", "said"),
    [
        ("S13", Amount.grams(1), None, BadAmount, "measured by volume, and 1 g is not"),
        ("S13", Amount.cm3(0), None, BadAmount, "0 cm³"),
        ("S99", Amount.cm3(1), None, UnknownName, 'No bottle "S99"'),
        ("S13", Amount.cm3(1), "K99", UnknownName, 'No booking "K99"'),
        ("B28", Amount.grams(1), None, NotAllowed, "So it is found"),
        ("B36", Amount.grams(1), None, NotAllowed, "B36 is set aside: unknown, label gone"),
        ("B14", Amount.cm3(1), "K11", NotAllowed, "K11 is R03, .* bars hydrochloric acid: "),
    ],
)
def test_a_draw_that_must_not_be_is_refused(
    own: Path, bottle: str, amount: Amount, booking: str | None,
    kind: type[StockroomError], said: str,
) -> None:  # fmt: skip
    with pytest.raises(kind, match=said):
        stock.draw(own, bottle, amount, booking=booking, **WHO)


def test_a_draw_before_the_bottle_was_there_is_refused(own: Path) -> None:
    with pytest.raises(BadDate, match="is before S13 was made 21 September 2026"):
        stock.draw(own, "S13", Amount.cm3(1), on=date(2026, 9, 1), today=TODAY, by="T1")


def test_fridays_draw_entered_on_monday_keeps_both_days(own: Path) -> None:
    stock.draw(own, "S05", Amount.cm3(50), on=date(2027, 1, 8), today=TODAY, by="T1")
    entry = diary(own, "S05")[-1]
    assert (entry.happened, entry.entered) == (date(2027, 1, 8), TODAY)
    assert seen(own, "S05", date(2027, 1, 8)).left == Amount.cm3(2550).micro


def test_what_was_spilled_or_lent_is_not_consumption(own: Path) -> None:
    before = facts(own, TODAY).drawn
    stock.spill(own, "B18", Amount.grams(2), **WHO)
    done = stock.lend(own, "B18", Amount.grams(1), to="BI", **WHO)
    assert "Lent 1 g of B18 silver nitrate to BI; 4.8 g left." in done.text
    assert facts(own, TODAY).drawn == before


def test_a_loan_to_nobody_is_refused(own: Path) -> None:
    with pytest.raises(BadInput, match="lent to whom"):
        stock.lend(own, "B18", Amount.grams(1), to=" ", **WHO)


def test_a_count_writes_the_difference(own: Path) -> None:
    with pytest.raises(UnknownName, match='No walk "Jan-A2"'):
        stock.count(own, "B06", Amount.grams(600), walk="Jan-A2", **WHO)
    start(own, "Jan-A2", **WHO)
    done = stock.count(own, "B06", Amount.grams(600), walk="Jan-A2", **WHO)
    assert "40 g less than entered" in done.text
    assert diary(own, "B06")[-1].said == "Jan-A2"
    assert seen(own, "B06").left == Amount.grams(600).micro


def test_a_count_that_agrees_is_still_an_entry(own: Path) -> None:
    before = len(diary(own, "B06"))
    assert "as entered" in stock.count(own, "B06", Amount.grams(640), **WHO).text
    assert len(diary(own, "B06")) == before + 1


def test_a_count_in_another_unit_is_refused(own: Path) -> None:
    with pytest.raises(BadAmount, match="600 cm³"):
        stock.count(own, "B06", Amount.cm3(600), **WHO)


def test_a_move_to_an_unknown_place_offers_the_nearest(own: Path) -> None:
    with pytest.raises(UnknownName, match='No place "F11"') as caught:
        stock.move(own, "S01", "F11", **WHO)
    assert "F1" in caught.value.hint


@pytest.mark.parametrize(("how", "why", "said"), [("", "past", "How was"), ("sink", "", "Why was")])
def test_discarding_wants_both_how_and_why(own: Path, how: str, why: str, said: str) -> None:
    with pytest.raises(BadInput, match=f"{said} S14 discarded"):
        stock.discard(own, "S14", how=how, why=why, **WHO)


def test_a_bottle_is_not_discarded_before_it_was_drawn_from(own: Path) -> None:
    drawn = stock.draw(own, "S05", Amount.cm3(50), **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T2"}
    said = rf"S05 was there after 8 January 2027: entry {drawn.entry}, drawn 11 January 2027 by T1"
    with pytest.raises(NotAllowed, match=said):
        stock.discard(own, "S05", how="acid waste", why="past", **friday)
    assert not seen(own, "S05").record.gone


def test_a_bottle_is_discarded_on_the_day_it_was_drawn_from(own: Path) -> None:
    stock.draw(own, "S05", Amount.cm3(50), **WHO)
    stock.discard(own, "S05", how="acid waste", why="past", **WHO)
    assert "S05" not in {bottle.number for bottle in facts(own, TODAY).bottles}


def test_a_later_draw_put_right_is_no_reason_against_a_discard(own: Path) -> None:
    drawn = stock.draw(own, "S05", Amount.cm3(50), **WHO)
    stock.put_right(own, drawn.entry or 0, "another bottle", **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T2"}
    stock.discard(own, "S05", how="acid waste", why="past", **friday)
    assert "S05" not in {bottle.number for bottle in facts(own, TODAY).bottles}


def test_what_was_missed_later_may_have_been_thrown_away(own: Path) -> None:
    from stockroom.service import checks

    checks.lost(own, "S05", **WHO)
    friday: dict[str, Any] = {"on": date(2027, 1, 8), "today": TODAY, "by": "T2"}
    stock.discard(own, "S05", how="acid waste", why="past", **friday)
    assert "S05" not in {bottle.number for bottle in facts(own, TODAY).bottles}


def test_what_is_gone_takes_no_more_entries(own: Path) -> None:
    stock.discard(own, "S14", how="iron waste", why="past", **WHO)
    moves: list[Callable[[], object]] = [
        lambda: stock.draw(own, "S14", Amount.cm3(1), **WHO),
        lambda: stock.move(own, "S14", "A2", **WHO),
        lambda: stock.discard(own, "S14", how="sink", why="again", **WHO),
    ]
    for again in moves:
        with pytest.raises(NotAllowed, match="S14 is gone: 11 January 2027, T1, past"):
            again()


def test_a_printed_date_with_two_readings_says_how_it_is_settled(own: Path) -> None:
    done = arrive(own, printed="04/05/27")
    assert done.details == (
        'Printed "04/05/27" can be 5 April 2027 or 4 May 2027: planned on the earlier. To settle'
        " it: stockroom printed B46 2027-05-04, or 2027-04-05.",
    )


def test_a_printed_date_past_already_says_so(own: Path) -> None:
    assert arrive(own, printed="02/2020").details == (
        'Printed "02/2020" is past: good until 29 February 2020.',
    )


def test_words_for_a_printed_date_are_sent_to_the_note(own: Path) -> None:
    with pytest.raises(BadDate) as caught:
        arrive(own, printed="best before Easter")
    assert '(--printed none --note "best before Easter")' in caught.value.hint


def test_more_than_the_bottle_holds_is_asked_about(own: Path) -> None:
    with pytest.raises(NotAllowed, match="B06 holds 1 000 g when full; 9 999 g counted"):
        stock.count(own, "B06", Amount.grams(9999), **WHO)
    stock.count(own, "B06", Amount.grams(1040), **WHO)
    stock.count(own, "B06", Amount.grams(9999), sure=True, **WHO)
    assert seen(own, "B06").left == Amount.grams(9999).micro


def test_an_earlier_draw_entered_today_is_told_with_its_day(own: Path) -> None:
    stock.draw(own, "S13", Amount.cm3(100), on=date(2027, 1, 8), today=TODAY, by="TT")
    with pytest.raises(NotEnough, match="TT drew 100 cm³ on 8 January 2027, entered today"):
        stock.draw(own, "S13", Amount.cm3(100), **WHO)


def test_a_bottle_that_turned_up_is_not_drawn_from_before_a_look(own: Path) -> None:
    from stockroom.service import checks

    checks.turned_up(own, "B28", "A2", **WHO)
    with pytest.raises(NotAllowed, match="B28 is set aside: turned up: needs a look"):
        stock.draw(own, "B28", Amount.grams(1), **WHO)


def test_a_draw_for_a_booking_is_told_to_the_planner_with_it(own: Path) -> None:
    stock.draw(own, "S13", Amount.cm3(10), booking="k16", **WHO)
    assert [one.booking for one in facts(own, TODAY).drawn if one.bottle == "S13"][-1] == "K16"
