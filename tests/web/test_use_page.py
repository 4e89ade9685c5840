"""Use over the term: planned beside drawn, filtered by any name or by who pays."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.service.use import term_use

if TYPE_CHECKING:
    from pathlib import Path

    from windows import Window

BUSY = date(2027, 1, 25)


def test_totals_are_those_of_the_plan_with_the_year_before_beside(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/use").text
    assert "Mon 4 Jan 2027 to Fri 26 Mar 2027, as at Mon 25 Jan 2027" in text
    assert "potassium iodide 84.46 g – 61 g" in text
    assert "hydrogen peroxide 0.100 mol/dm³ 1 596 cm³ 156 cm³" in text
    assert "4 differences from the year before, the biggest first (as written down)" in text


def test_what_was_really_drawn_stands_beside(window: Window) -> None:
    window.enter("draw", bottle="B01", amount="20 cm3")
    window.enter("spill", bottle="B06", amount="3 g", note="knocked")
    text = window.get("/use").text
    assert "hydrogen peroxide 100 vol 317.9 cm³ – 20 cm³" in text
    assert "Gone, and no part of what is used" in text
    assert "spilled 1 3 g sodium thiosulfate pentahydrate 3 g ( B06 )" in text


def test_any_name_of_a_thing_finds_it(onlooker: Window) -> None:
    told = onlooker.get("/use", what="hypo")
    heads = re.findall(r'<tr><th scope="row">([^<]*)', told.html)
    assert heads
    assert all("thiosulfate" in head for head in heads)
    assert 'value="hypo"' in told.html


def test_a_name_nobody_has_offers_the_nearest(onlooker: Window) -> None:
    told = onlooker.get("/use", what="potasium iodid")
    assert (told.status, "Nothing here is called" in told.text) == (200, True)
    assert "what=potassium+iodide" in told.html or "what=potassium%20iodide" in told.html


def test_one_department_is_told_its_own_bookings_alone(onlooker: Window) -> None:
    told = onlooker.get("/use", dept="biology")
    assert "amylase, bacterial" in told.text
    assert "silver nitrate" not in told.text
    assert "K08" not in told.html
    assert re.search(r'<option value="BI" selected>', told.html)


@pytest.mark.parametrize("query", [{"dept": "XX"}, {"term": "summer 1999"}])
def test_a_department_or_term_that_is_not_there_is_not_found(
    onlooker: Window, query: dict[str, str]
) -> None:
    refused = onlooker.get("/use", **query)
    assert refused.status == 404
    assert next(iter(query.values())) in refused.text


def test_what_is_typed_is_never_markup_and_never_endless(onlooker: Window) -> None:
    assert "<b>x</b>" not in onlooker.get("/use", what="<b>x</b>").html
    assert onlooker.get("/use", what="x" * 201).status == 422


def test_every_bar_stands_inside_its_picture(onlooker: Window) -> None:
    page = onlooker.get("/use").html
    rects = re.findall(r'<rect x="([\d.]+)" y="[\d.]+" width="([\d.]+)"', page)
    assert len(rects) > 50
    assert all(float(x) + float(width) <= 203 for x, width in rects)


def test_a_term_and_a_formula_are_found_as_they_are_spelt(practice: Path) -> None:
    told = term_use(practice, as_at=BUSY, term="Spring 2027", what="KI")
    assert told.term == "spring 2027"
    assert told.lines
    assert all("potassium iodide" in key for key in told.lines)
