"""This week as a page: today first, each line with its press, and what was pressed is entered."""

from __future__ import annotations

import html
import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from windows import Answer, Window

BUSY = date(2027, 1, 25)
OPEN_EVENING = date(2027, 2, 10)


def presses(page: Answer, form: str) -> list[dict[str, str]]:
    """What each form of that name on the page would send, its buttons left out."""
    found = re.findall(rf'(?s)<form class="pressing" action="/do/{form}".*?</form>', page.html)
    return [dict(_field(tag) for tag in re.findall(r"<input[^>]*>", one)) for one in found]


def _field(tag: str) -> tuple[str, str]:
    name, value = re.search(r'name="([^"]*)"', tag), re.search(r'value="([^"]*)"', tag)
    assert name
    return name[1], html.unescape(value[1]) if value else ""


def known_by_initials(window: Window, day: date = BUSY) -> Window:
    """The window of somebody who has given initials, by a draw of another bottle."""
    seen = window.on(day)
    seen.enter("draw", bottle="S11", amount="1 cm3")
    return seen


def test_today_stands_above_the_days_that_follow(onlooker: Window) -> None:
    page = onlooker.on(BUSY).get("/week")
    assert page.status == 200
    places = [page.text.index(words) for words in ("Today, Mon 25 Jan 2027", "Thu 28 Jan 35 min")]
    assert places == sorted(places)


def test_what_is_late_comes_before_the_work_of_the_day(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/week").text
    assert text.index("late by 6 open days") < text.index("Looks count as well as dates")
    assert "K06 nothing is entered as drawn for them" in text


def test_the_page_says_what_the_sheet_says(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/week").text
    assert "4 bookings, 12 makes, 1 check." in text
    assert "from 26.4 cm³ of S01 sodium thiosulfate 1.00 mol/dm³ in D1" in text
    assert "Acid into water, slowly and stirring, never the reverse" in text


def test_a_make_is_pressed_as_it_is_planned(window: Window) -> None:
    seen = known_by_initials(window)
    made = next(one for one in presses(seen.get("/week"), "make") if "thiosulfate" in one["line"])
    assert (made["sources"], made["by"], made["back"]) == ("S01", "T1", "/week")
    told = seen.post("/do/make", **made | {"place": "D1"})
    assert told.at.endswith(f"/week?said={made['once']}")
    later = presses(told, "make")
    assert all("thiosulfate" not in one["line"] for one in later)


def test_a_draw_is_pressed_and_then_told_as_drawn(window: Window) -> None:
    seen = known_by_initials(window)
    first = presses(seen.get("/week"), "draw")[0]
    assert (first["bottle"], first["booking"]) == ("S11", "K07")
    told = seen.post("/do/draw", **first)
    assert "drawn: 264 cm³ from S11" in told.text
    assert all(one["bottle"] != "S11" for one in presses(told, "draw"))


def test_what_was_entered_today_is_listed_with_the_way_to_put_it_right(window: Window) -> None:
    seen = known_by_initials(window)
    page = seen.get("/week")
    assert "S11 Benedict's reagent: drawn 1 cm³ by T1; entry" in page.text
    entry = re.search(r"/do/put-right\?entry=(\d+)&amp;back=", page.html)
    assert entry
    told = seen.enter("put-right", entry=entry[1], why="slip")
    assert "put right by entry" in told.text


def test_a_look_has_a_press_for_good_and_one_for_not_good(window: Window) -> None:
    seen = known_by_initials(window)
    page = seen.get("/week")
    (look,) = presses(page, "look")
    assert 'name="passed" value="bad" aria-label="Not good: look at S03' in page.html
    told = seen.post("/do/look", **look | {"passed": "good"})
    assert presses(told, "look") == []


def test_a_titration_asks_for_the_strength_found(window: Window) -> None:
    page = known_by_initials(window).get("/week", of="2027-02-12")
    assert {"bottle", "strength"} <= presses(page, "found")[0].keys()


def test_an_order_sent_is_no_longer_asked_for_and_can_be_cancelled(window: Window) -> None:
    seen = known_by_initials(window)
    order = presses(seen.get("/week"), "order-planned")[0]
    told = seen.post("/do/order-planned", **order)
    assert "late by 6 open days" not in told.text
    assert "/do/order-cancel?order=P01" in told.html


def test_a_page_left_open_orders_what_it_showed_though_numbers_moved(window: Window) -> None:
    seen = known_by_initials(window)
    first, second = presses(seen.get("/week"), "order-planned")[:2]
    seen.post("/do/order-planned", **first)
    told = seen.post("/do/order-planned", **second)
    assert "order P02 , ascorbic acid" in told.text


def test_what_came_late_is_asked_for_where_it_arrives(window: Window) -> None:
    seen = known_by_initials(window)
    seen.post("/do/order-planned", **presses(seen.get("/week"), "order-planned")[0])
    page = window.on(date(2027, 2, 16)).get("/week")
    assert "/do/arrive?order=P01&amp;line=ammonium" in page.html
    assert "overdue by" in page.text


def test_a_printed_date_with_two_readings_has_a_press_for_each(window: Window) -> None:
    page = known_by_initials(window).get("/week")
    assert 'name="reading" value="2027-05-04"' in page.html
    assert 'name="reading" value="2027-04-05"' in page.html


def test_what_is_never_kept_is_ticked_on_its_day(window: Window) -> None:
    seen = known_by_initials(window, OPEN_EVENING)
    page = seen.get("/week")
    assert "Tick it only once nothing of it stands" in page.text
    told = seen.post("/do/destroyed", **presses(page, "destroyed")[0])
    assert "K16 Silver mirror: destroyed, ticked by T1" in told.text
    assert "/do/destroyed-undo?booking=K16" in told.html


def test_what_is_never_kept_has_no_tick_before_its_day(window: Window) -> None:
    page = known_by_initials(window).get("/week", of="2027-02-10")
    assert "destroy what is left of K16 Silver mirror" in page.text
    assert presses(page, "destroyed") == []


def test_a_tick_that_is_missing_is_late_in_the_weeks_after(onlooker: Window) -> None:
    text = onlooker.on(date(2027, 3, 3)).get("/week").text
    assert "destroy what is left of K16 Silver mirror not ticked since Wed 10 Feb" in text


def test_without_initials_a_press_opens_the_form_filled_in(onlooker: Window) -> None:
    page = onlooker.on(BUSY).get("/week")
    first = presses(page, "make")[0]
    assert "form_token" not in first
    form = onlooker.on(BUSY).get("/do/make", **first)
    assert form.field("volume") == "88 cm³"
    assert "Initials" in form.text


def test_what_cannot_be_had_stands_first_with_its_reasons(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 2, 2)).get("/week")
    assert page.text.index("Cannot be done as it stands") < page.text.index("Today, Tue 2 Feb")
    assert 'href="/why?ref=K11.1"' in page.html


def test_another_week_has_no_today_and_keeps_its_address(onlooker: Window) -> None:
    page = onlooker.on(BUSY).get("/week", of="2027-03-01")
    assert "Week 9: 1 to 5 March 2027" in page.text
    assert "Today, " not in page.text
    assert 'href="/week?of=2027-02-22"' in page.html


def test_on_a_saturday_the_coming_week_is_shown_and_today_above_it(onlooker: Window) -> None:
    text = onlooker.on(date(2027, 1, 30)).get("/week").text
    assert "Week 5: 1 to 5 February 2027" in text
    assert "Today, Sat 30 Jan 2027" in text


@pytest.mark.parametrize("of", ["31/02/2027", "next week", "x" * 41, "2027-13-01"])
def test_a_day_nobody_can_read_is_refused(onlooker: Window, of: str) -> None:
    assert onlooker.get("/week", of=of).status == 422


def test_looking_at_a_week_or_the_term_writes_nothing(window: Window, own: Path) -> None:
    before = own.read_bytes()
    window.on(BUSY).get("/week")
    window.on(BUSY).get("/term")
    assert own.read_bytes() == before


def test_no_id_stands_twice(window: Window) -> None:
    ids = re.findall(r'\bid="([^"]*)"', known_by_initials(window).get("/week").html)
    assert len(ids) == len(set(ids))
