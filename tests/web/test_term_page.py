"""The term as a page: each day in words, lives as bars that say the same, and parts of it."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from windows import Window

BUSY = date(2027, 1, 25)


def test_every_booking_of_the_term_leads_to_its_page(onlooker: Window) -> None:
    page = onlooker.get("/term")
    assert page.status == 200
    wanted = {f"K{number:02}" for number in range(1, 30)}
    assert wanted <= set(re.findall(r'href="/day/(K\d\d)"', page.html))


def test_every_make_leads_to_its_reasons(onlooker: Window) -> None:
    page = onlooker.get("/term")
    assert len(set(re.findall(r'href="/why\?ref=(M\d\d)"', page.html))) == 51


def test_each_week_can_be_jumped_to(onlooker: Window) -> None:
    html = onlooker.on(BUSY).get("/term").html
    jumps = set(re.findall(r'href="#(week-[\d-]+)"', html))
    assert len(jumps) == 12
    assert all(f'id="{one}"' in html for one in jumps)


def test_closed_days_say_why_and_weekends_are_shown(onlooker: Window) -> None:
    text = onlooker.get("/term").text
    assert "Mon 15 Feb Closed: mid-term week." in text
    assert "Weekend." in text


def test_what_is_short_stands_first_and_at_its_class(onlooker: Window) -> None:
    page = onlooker.on(BUSY).get("/term")
    assert "29 bookings in 12 weeks, 41 makes still to do, 2 short." in page.text
    assert page.html.count('href="/why?ref=K12.2"') == 2


def test_the_bars_say_in_words_what_they_show(onlooker: Window) -> None:
    html = onlooker.on(BUSY).get("/term").html
    assert "M05 made Mon 25 Jan, good until Mon 1 Feb" in html.replace("\u00a0", " ")
    assert html.count("<svg width=") > 40


def test_one_department_shows_its_classes_and_what_serves_them(onlooker: Window) -> None:
    page = onlooker.on(BUSY).get("/term", department="OU")
    assert set(re.findall(r'href="/day/(K\d\d)"', page.html)) >= {"K15", "K16"}
    assert "K08" not in page.text.split("Day by day", 2)[2].split("for")[0]


def test_one_item_shows_where_it_is_made_and_used(onlooker: Window) -> None:
    days = onlooker.on(BUSY).get("/term", item="starch").text.split("Day by day")[-1]
    assert "make starch 0.5 % w/v" in days
    assert "make glucose" not in days
    assert "Flame tests" not in days


@pytest.mark.parametrize("asked", ["department", "recipe", "item"])
def test_a_part_that_is_not_there_is_refused_with_what_there_is(
    onlooker: Window, asked: str
) -> None:
    refused = onlooker.get("/term", **{asked: "<b>nothing</b>"})
    assert refused.status == 404
    assert "The term has " in refused.text
    assert "<b>nothing" not in refused.html


def test_more_than_a_name_is_refused(onlooker: Window) -> None:
    assert onlooker.get("/term", item="x" * 201).status == 422


def test_no_id_stands_twice(onlooker: Window) -> None:
    ids = re.findall(r'\bid="([^"]*)"', onlooker.on(BUSY).get("/term").html)
    assert len(ids) == len(set(ids))
