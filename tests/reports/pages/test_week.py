"""The page of a week as a value: every line of the sheet, what is late, and what can be pressed."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from datetime import date, timedelta
from typing import Any

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

from stockroom.measure.days import PrintedDate
from stockroom.planning.facts import Drawn, Facts, Placed
from stockroom.planning.plan import plan
from stockroom.reports.pages.parts import Act, Row
from stockroom.reports.pages.week import WeekPage, week_page
from stockroom.reports.pages.week_done import MOST, Entered
from stockroom.reports.paper.week import week_of

MONDAY = date(2027, 1, 25)
SALT = solid(packs=(pack(g(100), 5.00),))
WEAK = solution(0.1, rules=(keeps(30),))
STARCH = solution(0.5, "starch", rules=(keeps(3),))


def college(**more: Any) -> Facts:
    """One class on Wednesday that wants 100 cm³ of a solution, and 100 g of the salt for it."""
    usual: dict[str, Any] = {
        "as_at": MONDAY,
        "start": day("01-04"),
        "methods": [made_from(WEAK, SALT)],
        "recipes": [recipe(wants(WEAK, cm3(100)))],
        "bookings": [booking("K01", "01-27")],
        "bottles": [bought_bottle("B01", SALT, g(100))],
    }
    return house([SALT, WEAK, STARCH], **usual | more)


def seen(known: Facts, monday: date = MONDAY, entered: tuple[Entered, ...] = ()) -> WeekPage:
    return week_page(known, plan(known), monday, {}, entered)


def rows_of(page: WeekPage) -> Iterator[Row]:
    days = [*([page.today] if page.today else []), *page.days]
    parts = [*page.late, *(part for one in days for part in one.parts)]
    for row in [*(row for part in parts for row in part.rows), *page.also, *page.guesses]:
        yield row
        yield from row.rows


def acts_of(page: WeekPage, form: str) -> list[Act]:
    return [act for row in rows_of(page) for act in row.acts if act.form == form]


def test_every_job_of_the_sheet_is_a_line_of_the_page() -> None:
    known = college()
    sheet = week_of(known, plan(known), MONDAY, {})
    jobs = [job.what for rung in sheet.rungs for shelf in rung.shelves for job in shelf.jobs]
    assert jobs
    assert set(jobs) <= {row.what for row in rows_of(seen(known))}


def test_a_make_is_sent_with_its_sources_and_asks_where_it_is_put() -> None:
    (act,) = acts_of(seen(college()), "make")
    assert dict(act.known) == {"line": WEAK.key, "volume": "100 cm³", "sources": "B01"}
    assert (act.asked, act.buttons) == ((("place", ""),), (("", "Made"),))


def test_a_make_goes_where_the_last_bottle_of_it_stands() -> None:
    bottles = [
        replace(made_bottle("S09", WEAK, cm3(1)), place="D1"),
        replace(made_bottle("S10", WEAK, cm3(1)), place="D2"),
        bought_bottle("B01", SALT, g(100)),
    ]
    known = college(bottles=bottles)
    (act,) = acts_of(seen(known), "make")
    assert act.asked == (("place", "D2"),)


def test_a_make_whose_source_is_still_to_come_has_no_press() -> None:
    placed = Placed("P01", SALT.key, g(100), "100 g", 1, 500, day("01-20"), day("01-26"))
    (act,) = acts_of(seen(college(bottles=[], placed=(placed,))), "make")
    assert (act.buttons, act.other) == ((), "made otherwise")


def test_a_draw_is_of_the_bottle_the_amount_and_the_booking_of_the_plan() -> None:
    known = college(bottles=[made_bottle("S01", WEAK, cm3(500))])
    (act,) = acts_of(seen(known), "draw")
    assert dict(act.known) == {"bottle": "S01", "amount": "100 cm³", "booking": "K01"}


def test_what_is_drawn_is_told_and_the_rest_is_still_to_draw() -> None:
    drawn = Drawn("S01", WEAK.key, MONDAY, cm3(30), "K01")
    known = college(bottles=[made_bottle("S01", WEAK, cm3(500))], drawn=(drawn,))
    page = seen(known)
    assert [row.done for row in rows_of(page) if row.done] == [
        "drawn: 30\u00a0cm³ from S01 on Mon\u00a025\u00a0Jan"
    ]
    assert [dict(act.known)["amount"] for act in acts_of(page, "draw")] == ["70 cm³"]


def test_what_is_short_is_marked_with_its_reason_and_has_no_press() -> None:
    page = seen(college(bottles=[]))
    (short,) = page.short
    assert (short.mark, short.links) == ("short", (("why", "/why?ref=K01.1"),))
    assert acts_of(page, "draw") == []


def test_what_is_short_after_the_week_is_told_apart() -> None:
    page = seen(college(bottles=[], bookings=[booking("K02", "02-03")]))
    assert (page.short, page.later_count) == ((), 1)


def test_an_order_that_should_be_gone_is_late_and_can_be_sent() -> None:
    page = seen(college(bottles=[]))
    (late,) = page.late
    assert "late by" in "; ".join(late.rows[0].more)
    (act,) = acts_of(page, "order-planned")
    assert dict(act.known) == {"order": "O01", "meant": "salt, 1 × pack"}


def test_a_late_order_is_not_told_twice_on_its_page() -> None:
    page = seen(college(bottles=[]))
    assert [row for row in page.also if row.what.startswith("order")] == []


def test_a_delivery_that_is_overdue_is_late_and_can_arrive() -> None:
    placed = Placed("P01", SALT.key, g(100), "100 g", 1, 500, day("01-04"), day("01-20"))
    page = seen(college(bottles=[], placed=(placed,)))
    (act,) = acts_of(page, "arrive")
    assert dict(act.known) == {"order": "P01", "line": "salt"}
    assert any("overdue by 3 open days" in row.more for part in page.late for row in part.rows)


def test_a_class_nobody_wrote_a_draw_for_is_late_for_a_fortnight() -> None:
    for on, told in (("01-20", 1), ("01-05", 0)):
        page = seen(college(bookings=[booking("K01", on)]))
        assert sum(row.what == "K01" for part in page.late for row in part.rows) == told


def test_what_is_never_kept_is_late_until_it_is_ticked() -> None:
    sent = recipe(wants(WEAK, cm3(100)), never_kept="Destroy it within 30 min.")
    for by, told in (("", 1), ("T1", 0)):
        class_ = replace(booking("K01", "01-06"), destroyed_by=by)
        page = seen(college(recipes=[sent], bookings=[class_]))
        assert len(acts_of(page, "destroyed")) == told


def test_another_week_tells_nothing_late() -> None:
    page = seen(college(bottles=[]), MONDAY + timedelta(days=7))
    assert (page.late, page.today, page.is_this) == ((), None, False)
    assert any(row.what.startswith("order, before this week") for row in page.also)


def test_on_a_weekend_today_stands_above_the_coming_week() -> None:
    page = seen(college(as_at=day("01-23")))
    assert page.today is not None
    assert (page.today.name, page.today.told) == ("Today, Sat 23 Jan 2027", "Closed.")
    assert page.is_this


def test_a_quiet_today_stands_by_itself_and_the_quiet_days_after_it_too() -> None:
    page = seen(college(bookings=[]))
    assert page.today is not None
    names = [page.today.name, *(one.name.replace("\u00a0", " ") for one in page.days)]
    assert names[:3] == ["Today, Mon 25 Jan 2027", "Tue 26 Jan", "Wed 27 Jan"]


def test_a_printed_date_of_two_readings_has_a_press_for_each() -> None:
    printed = PrintedDate("04/05/27", (date(2027, 4, 5), date(2027, 5, 4)))
    known = college(bottles=[bought_bottle("B01", SALT, g(100), printed=printed)])
    (act,) = acts_of(seen(known), "printed")
    assert act.choice == "reading"
    assert [value for value, _ in act.buttons] == ["2027-04-05", "2027-05-04"]


def entered(number: int, **more: Any) -> Entered:
    usual: dict[str, Any] = {
        "entry": number,
        "bottle": "S01",
        "line": WEAK.key,
        "kind": "drawn",
        "change": -cm3(20),
        "unit_kind": "volume",
        "happened": MONDAY,
        "by": "T1",
    }
    return Entered(**usual | more)


def test_an_entry_of_today_says_what_by_whom_and_can_be_put_right() -> None:
    (row,) = seen(college(), entered=(entered(7, booking="K01"),)).done
    assert row.what == "S01 salt solution 0.1 mol/dm³: drawn 20 cm³"
    assert row.more == ("for K01", "by T1", "entry 7")
    assert [dict(act.known) for act in row.acts] == [{"entry": "7"}]


def test_an_entry_put_right_says_so_and_cannot_be_put_right_again() -> None:
    rows = seen(college(), entered=(entered(7, undone_by=8), entered(8, puts_right=7))).done
    assert [row.acts for row in rows] == [(), ()]
    assert "put right by entry 8" in rows[1].more


def test_of_very_many_entries_the_newest_are_listed_and_the_rest_counted() -> None:
    page = seen(college(), entered=tuple(entered(n) for n in range(1, MOST + 4)))
    assert (len(page.done), page.done_before) == (MOST, 3)
    assert f"entry {MOST + 3}" in page.done[0].more
