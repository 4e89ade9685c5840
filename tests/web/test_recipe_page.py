"""Recipes as pages: found by any word, and one with all that is to be known of it."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from windows import Window


def test_every_recipe_is_listed_with_its_next_booking(onlooker: Window) -> None:
    page = onlooker.get("/recipe")
    assert page.status == 200
    assert '<a href="/recipe/R01">R01 Iodine clock' in page.html
    assert 'href="/day/K01">K01, Tue 12 Jan 2027' in page.html


@pytest.mark.parametrize("what", ["foam", "R02", "PEROXIDE foam", "catalysed perox"])
def test_any_words_of_title_code_or_line_find_it(onlooker: Window, what: str) -> None:
    page = onlooker.get("/recipe", what=what)
    assert "R02 Catalysed peroxide foam" in page.text
    assert "R03" not in page.text


def test_what_nothing_holds_finds_nothing_and_says_what_to_try(onlooker: Window) -> None:
    page = onlooker.get("/recipe", what="<b>unicorn</b>")
    assert (page.status, "0 of 1" in page.text) == (200, True)
    assert "Try one word" in page.text
    assert "<b>unicorn" not in page.html


def test_a_recipe_shows_lines_bars_swaps_waste_and_what_covers_it(onlooker: Window) -> None:
    page = onlooker.get("/recipe/R01").text
    assert "potassium iodide 0.100 mol/dm³ 80 cm³ per group close: within 5 %" in page
    assert "made the same morning" in page
    assert "iron(II) sulfate : iron and copper salts speed the clock" in page
    assert "sodium iodide in place of potassium iodide" in page
    assert "Decolourise iodine with thiosulfate." in page
    assert "no assessment reference entered" in page


def test_why_a_mixture_is_never_kept_stands_at_the_bench_and_at_clearing_away(
    onlooker: Window,
) -> None:
    page = onlooker.get("/recipe/R10").html
    bench, after = page[page.index('id="bench"') :].split('id="after"')
    for part in (bench, after.split('id="ahead"')[0]):
        assert "explosive on standing" in part
    assert "two thirds" not in after


def test_its_next_bookings_say_whether_all_is_ready(onlooker: Window) -> None:
    page = onlooker.get("/recipe/R01")
    assert "/day/K" in page.html
    assert "not yet:" in page.text


def test_bookings_that_are_over_are_not_ahead(onlooker: Window) -> None:
    page = onlooker.on(date(2027, 3, 26)).get("/recipe/R12")
    assert "None booked up to" in page.text
    assert "/day/K01" not in page.html


def test_a_code_in_small_letters_is_the_same_recipe(onlooker: Window) -> None:
    assert "R01 Iodine clock" in onlooker.get("/recipe/r01").text


@pytest.mark.parametrize("path", ["/recipe/R99", "/recipe/%3Cscript%3E", "/recipe/R01?version=7"])
def test_what_is_not_there_is_a_404_in_our_words(onlooker: Window, path: str) -> None:
    page = onlooker.get(path)
    assert (page.status, "<script>" in page.html) == (404, False)
    assert page.text.count("No ")


@pytest.mark.parametrize(
    "path", ["/recipe/R01?version=0", "/recipe/R01?version=x", f"/recipe?what={'x' * 201}"]
)
def test_what_cannot_be_asked_is_refused(onlooker: Window, path: str) -> None:
    assert onlooker.get(path).status == 422
