"""One bottle in the browser: everything of it is said, and what happened can be entered there."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from windows import Answer, Window


def forms(page: Answer, *, folded: bool) -> list[str]:
    """The forms that stand open on the page, or those folded away."""
    opened = r"<details class=\"act\" open>" if not folded else r"<details class=\"act\">"
    return re.findall(opened + r'.*?data-form="([\w-]+)"', page.html, re.DOTALL)


def said(page: Answer) -> str:
    """Its words, with no space left before a stop where a link ended."""
    return re.sub(r" ([,.:;])", r"\1", page.text)


def test_a_number_is_found_in_small_letters_and_large(onlooker: Window) -> None:
    for number in ("b01", "B01"):
        assert "B01 hydrogen peroxide 100 vol" in onlooker.get(f"/bottle/{number}").text


def test_an_unknown_number_is_404_with_the_nearest_three(onlooker: Window) -> None:
    page = onlooker.get("/bottle/S99")
    assert (page.status, 'No bottle "S99"' in page.text) == (404, True)
    assert len(re.findall(r"\b[BS]\d\d\b", page.text.partition("Nearest")[2])) == 3


@pytest.mark.parametrize("number", ["x" * 201, "%00", "S01%27%20OR%201", "..%2F..%2Fetc", "<b>"])
def test_what_is_no_number_finds_nothing(onlooker: Window, number: str) -> None:
    page = onlooker.get(f"/bottle/{number}")
    assert page.status in (400, 404, 422)
    assert "<b>" not in page.html


def test_the_three_strengths_stand_apart(onlooker: Window) -> None:
    text = onlooker.get("/bottle/B01").text
    told = text.partition("Its strength")[2].partition("The picture")[0]
    assert "label 100 vol" in told
    assert "found 91 vol on Tue 8 Dec 2026" in told
    assert "expected 90 vol, from what its last result was" in told


def test_its_days_are_told_and_a_printed_one_as_it_is_printed(onlooker: Window) -> None:
    text = onlooker.get("/bottle/B01").text
    assert "received 14 Sep 2026 opened 29 Sep 2026" in text
    assert 'printed on it "03/2027", read as 31 Mar 2027' in text
    assert "recheck by 8 Mar 2027" in text


def test_its_fade_is_a_picture_with_words_beside_it(onlooker: Window) -> None:
    page = onlooker.get("/bottle/B01")
    alt = re.search(
        r'<img class="picture" src="/picture/fade/B01.svg"[^>]* alt="([^"]*)"', page.html
    )
    assert alt
    assert "expected today 90\u00a0vol; TOO WEAK for K15" in alt[1]
    assert "The picture in words" in page.text


@pytest.mark.parametrize("number", ["B06", "S12", "B36"])
def test_where_nothing_fades_there_is_no_picture(onlooker: Window, number: str) -> None:
    assert "/picture/fade/" not in onlooker.get(f"/bottle/{number}").html


def test_who_it_is_promised_to_is_told_with_the_way_there(onlooker: Window) -> None:
    page = onlooker.get("/bottle/S02")
    assert "1 056 cm³ of it is promised" in page.text
    assert 'href="/day/K21"' in page.html
    assert 'href="/why?ref=K21.4"' in page.html


def test_what_cannot_be_counted_on_says_whom_it_matters_for(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 1, 25)).get("/bottle/S03")
    assert "it cannot be counted on; it matters for K08, K09" in said(page)


def test_its_hazards_are_those_of_its_strength(onlooker: Window) -> None:
    text = said(onlooker.get("/bottle/B14"))
    assert "Danger: corrosion, exclamation mark" in text
    assert "H314 Causes severe skin burns and eye damage" in text
    assert text.index("open the strong bottle in the fume cupboard") < text.index("Drawn Some")


def test_the_likely_events_stand_open_and_the_rest_is_folded(onlooker: Window) -> None:
    page = onlooker.get("/bottle/S13")
    assert forms(page, folded=False)[0] == "draw"
    assert {"spill", "move", "discard"} <= set(forms(page, folded=True))
    ids = re.findall(r'\bid="([^"]+)"', page.html)
    assert len(ids) == len(set(ids))


@pytest.mark.parametrize(
    ("number", "mark", "first"),
    [
        ("B28", "not-found", "turned-up"),
        ("B35", "no-date", "look"),
        ("S12", "no-date", "look"),
        ("B36", "set-aside", "name-unknown"),
        ("S03", "past", "look"),
    ],
)
def test_each_sort_of_bottle_offers_what_it_needs(
    onlooker: Window, number: str, mark: str, first: str
) -> None:
    page = onlooker.get(f"/bottle/{number}")
    assert f'<p class="stands"><span class="mark mark-{mark}">' in page.html
    assert forms(page, folded=False)[0] == first


def test_an_event_entered_there_leads_back_and_stands_in_the_story(window: Window) -> None:
    told = window.enter("draw", bottle="S13", amount="100 cm3", back="/bottle/S13")
    assert told.at.startswith("http://127.0.0.1/bottle/S13?said=")
    assert "Mon 4 Jan 2027 drawn -100 cm³ 30 cm³" in told.text


def test_an_entry_put_right_says_so_and_offers_it_no_more(window: Window) -> None:
    window.enter("draw", bottle="S13", amount="100 cm3")
    number = re.search(r'entry=(\d+)[^"]*" aria-label', window.get("/bottle/S13").html)
    assert number
    told = window.enter("put-right", entry=number[1], why="another bottle", back="/bottle/S13")
    assert f"{number[1]} put right by" in told.text
    assert f"put-right?entry={number[1]}&" not in told.html
    assert "130 of" in told.text


def test_a_bottle_that_is_gone_shows_its_story_and_nothing_to_enter(window: Window) -> None:
    window.enter("discard", bottle="S14", how="iron waste bottle", why="brown")
    page = window.get("/bottle/S14")
    assert "brown; iron waste bottle" in page.text
    assert 'class="mark mark-gone"' in page.html
    assert forms(page, folded=False) + forms(page, folded=True) == []
    assert "/paper/label" not in page.html


def test_a_spoiled_bottle_casts_its_doubt_on_what_was_made_from_it(window: Window) -> None:
    window.enter("spoil", bottle="B01", why="left open")
    assert "set aside: decided by: left open" in said(window.get("/bottle/B01"))
    assert "made from B01, since set aside (left open)" in said(window.get("/bottle/S19"))


def test_both_ends_of_a_decanting_name_each_other(window: Window) -> None:
    window.enter("decant", bottle="B14", amount="100 cm3")
    child = re.search(r'made from it:\s*<a href="/bottle/(\w+)"', window.get("/bottle/B14").html)
    assert child
    assert "Decanted from B14 hydrochloric acid" in window.get(f"/bottle/{child[1]}").text


def test_a_day_before_it_came_says_that_it_was_not_there_yet(onlooker: Window) -> None:
    page = onlooker.on(date(2020, 1, 6)).get("/bottle/S13")
    assert (page.status, "S13 was not there yet on 2020-01-06" in page.text) == (404, True)


def test_a_bottle_that_stands_wrongly_says_so_at_its_top(onlooker: Window) -> None:
    for number, danger in (("B04", "bleach beside acid"), ("S19", "ight cap"), ("S12", "acid")):
        told, _, _ = onlooker.get(f"/bottle/{number}").text.partition("On this page:")
        assert danger in told, number
