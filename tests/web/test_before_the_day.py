"""The page before the day says what the sheet says, and leads to where things are done."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window

OPEN_EVENING, OPEN_DAY = date(2027, 2, 10), date(2027, 3, 23)


def test_yes_or_no_is_the_first_thing_said(onlooker: Window) -> None:
    page = onlooker.get("/day/K15")
    main = page.html.split("<main", 1)[1]
    said = main.index("NO, NOT YET: ")
    assert said < main.index("Wed 10 Feb 2027") < main.index("To do") < main.index("by the clock")


def test_without_a_day_it_is_the_next_one_booked(onlooker: Window) -> None:
    assert "Tue 12 Jan 2027" in onlooker.get("/day").text
    assert "Wed 10 Feb 2027" in onlooker.on(OPEN_EVENING).get("/day").text


def test_a_booking_may_be_asked_for_by_its_number_or_its_day(onlooker: Window) -> None:
    assert "K15, Wed 10 Feb 2027" in onlooker.get("/day", of="k15").text
    assert "Wed 10 Feb 2027" in onlooker.get("/day", of="10 Feb 2027").text


def test_the_page_and_the_command_say_the_same(onlooker: Window, stockroom: Stockroom) -> None:
    told = stockroom("--as-at", "2027-03-15", "day", "K27", store=onlooker.house.path).said  # type: ignore[arg-type]
    page = onlooker.on(date(2027, 3, 15)).get("/day/K27").text
    for said in (
        "NOT BEFORE 13:00: mix for K27 Silver mirror, never kept",
        "Mix not more than 30 min before use.",
        "Destroy within 30 min of the end with excess sodium chloride",
        "Silver mirror (K27): no assessment reference entered",
    ):
        assert (said in told, said in page) == (True, True), said


def test_found_expected_and_label_are_never_mixed(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 3, 15)).get("/day/K28").html
    rows = page.split('class="strengths"')[1].split("</table>")[0].split("<tr>")[2:]
    told = [re.sub("<[^>]+>", "", row) for row in rows]
    assert [row for row in told if "expected: " not in row] == []
    assert "0.10 mol/dm³" in told[1]
    assert "by dilution of B01, 88 vol expected, M" in told[1]


def test_a_caution_stands_at_its_step(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 3, 15)).get("/day/K27").html
    step = page[page.index("NOT BEFORE 13:00") : page.index("START K27")]
    assert "Mix not more than 30 min before use." in step


def test_what_can_hurt_stands_right_after_the_yes_or_no(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 2, 9)).get("/day/2027-02-10").html
    first = page[page.index("Mind first") : page.index("To do")]
    for said in ("explosive on standing", "Someone must be here from 18:00 to 20:40", "B02 hydro"):
        assert said in first, said


def test_what_is_set_out_says_what_it_does_to_eyes_and_skin(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 2, 9)).get("/day/K15").html
    step = page[page.index("set out for K15") : page.index("START K15")]
    assert "B02 hydrogen peroxide: Danger: " in step
    assert "Causes serious eye damage (H318)" in step
    assert "H41" not in step


def test_two_classes_in_one_room_at_one_time_are_told_once(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 2, 9)).get("/day/2027-02-10").text
    assert page.count("at the same time as") == 1
    assert "HALL LAB has K16 (R10) at the same time as K15, 18:30 to 20:10" in page
    assert "HALL LAB has K15" in onlooker.on(date(2027, 2, 9)).get("/day/K16").text


def test_whoever_takes_one_class_is_told_who_stays_longest(onlooker: Window) -> None:
    assert "that day to 20:40 (K16)" in onlooker.on(date(2027, 2, 9)).get("/day/K15").text


def test_what_is_to_do_leads_to_its_form_and_its_reasons(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 1, 25)).get("/day/K07").html
    assert 'href="/do/make?line=glucose+1.0+%25+w%2Fv&amp;volume=88+cm3&amp;sources=B25' in page
    assert "&amp;back=%2Fday%2FK07" in page or "&amp;back=/day/K07" in page
    assert 'href="/why?ref=M01"' in page


def test_days_before_and_after_and_the_whole_day_are_one_click_away(onlooker: Window) -> None:
    page = onlooker.on(OPEN_DAY).get("/day/K27").html
    assert 'href="/day/2027-03-18"' in page
    assert 'href="/day/2027-03-23"' in page
    assert 'href="/paper/slip.pdf?ref=K27"' in page


def test_what_was_never_kept_can_be_ticked_on_its_day_only(onlooker: Window) -> None:
    ticked = "/do/destroyed?booking=K27"
    assert ticked not in onlooker.on(date(2027, 3, 22)).get("/day/K27").html
    assert ticked in onlooker.on(OPEN_DAY).get("/day/K27").html


def test_the_ten_lines_stand_on_it(onlooker: Window) -> None:
    page = onlooker.get("/day/K15").html
    lines = page.split('<pre class="phone">')[1].split("</pre>")[0].splitlines()
    assert 1 < len(lines) <= 10
    assert max(map(len, lines)) <= 38


def test_a_booking_is_shifted_from_its_page(window: Window) -> None:
    told = window.enter("shift", booking="K15", on="2027-02-11", back="/day/K15")
    assert told.at.startswith("http://127.0.0.1/day/K15")
    assert "K15, Thu 11 Feb 2027" in told.text


def test_a_booking_that_fell_out_says_so_and_comes_back(window: Window) -> None:
    dropped = window.enter("cancel", booking="K15", why="snow", back="/day/K15")
    assert "K15 dropped: not planned" in dropped.text
    assert "It takes place after all" in dropped.text
    again = window.enter("cancel-undo", booking="K15", why="thaw", back="/day/K15")
    assert "It falls out" in again.text


def test_a_day_with_nothing_booked_says_so(onlooker: Window) -> None:
    page = onlooker.get("/day/2027-01-09")
    assert page.status == 200
    assert "Nothing booked" in page.text
    assert 'href="/day/2027-01-12"' in page.html


@pytest.mark.parametrize(
    ("ref", "status", "said"),
    [
        ("K99", 404, "K99"),
        ("2027-02-31", 422, "2027-02-31"),
        ("nonsense", 404, "nonsense"),
        ("<b>", 404, "&lt;b&gt;"),
    ],
)
def test_what_is_no_day_and_no_booking_is_refused(
    onlooker: Window, ref: str, status: int, said: str
) -> None:
    page = onlooker.get(f"/day/{ref}")
    assert (page.status, said in page.html) == (status, True)


def test_a_reference_without_end_is_refused(onlooker: Window) -> None:
    assert onlooker.get(f"/day/{'K' * 300}").status == 422
