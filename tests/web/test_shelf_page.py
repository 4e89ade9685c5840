"""Along the shelf in the browser: what is found, what is kept in the form, what is refused."""

from __future__ import annotations

import re
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from windows import Answer, Window


def numbers(page: Answer) -> list[str]:
    """The bottles of the table, in its order."""
    return re.findall(r'<th scope="row"[^>]*><a href="/bottle/(\w+)"', page.html)


def said(page: Answer) -> str:
    """Its words, with no space left before a stop where a link ended."""
    return re.sub(r" ([,.:;])", r"\1", page.text)


def test_without_a_filter_every_bottle_is_listed_and_counted(onlooker: Window) -> None:
    page = onlooker.get("/shelf")
    assert page.status == 200
    assert f"All shelves: {len(numbers(page))} bottles on Mon 4 Jan 2027" in page.text


def test_any_name_of_a_thing_finds_it(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what="hypo")
    assert {"B06", "S01", "S02"} <= set(numbers(page))
    assert "hydrochloric" not in page.text


def test_a_place_tells_first_what_must_not_stand_together(onlooker: Window) -> None:
    page = onlooker.get("/shelf", place="a1")
    assert "B04: stands beside B13, B14, B15 in A1" in said(page)
    assert page.text.index("chlorine if they meet") < page.text.index("610 of 1 000 cm³")
    assert '<option value="A1" selected>' in page.html
    assert "/paper/walk.pdf?places=A1" in page.html


def test_a_filter_hides_no_warning_of_a_bottle_it_shows(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what="B04", place="A1")
    assert numbers(page) == ["B04"]
    assert "B04: stands beside B13, B14, B15 in A1" in said(page)
    by_name = onlooker.get("/shelf", what="B13")
    assert "B04: stands beside B13, B14, B15 in A1" in said(by_name)


def test_name_place_and_condition_together_leave_only_what_fits_all(onlooker: Window) -> None:
    everywhere = numbers(onlooker.get("/shelf", what="hydrogen peroxide", condition="past"))
    there = onlooker.get("/shelf", what="hydrogen peroxide", place="A3", condition="past")
    assert numbers(there) == ["B03"]
    assert len(everywhere) > 1
    assert there.field("what") == "hydrogen peroxide"
    assert "hydrogen peroxide in A3: 1 of 3 bottles" in said(there)


def test_a_condition_stands_as_its_mark_and_its_word(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what="B28")
    assert 'class="mark mark-not-found"' in page.html
    assert "not found when last looked for" in page.text


def test_promised_bottles_link_to_who_they_are_promised_to(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what="S02")
    assert 'href="/day/K21"' in page.html


def test_each_bottle_can_be_drawn_from_and_counted_at_once(onlooker: Window) -> None:
    page = onlooker.get("/shelf", place="A2")
    assert "/do/count?bottle=B06&amp;back=%2Fshelf%3Fplace%3DA2" in page.html
    assert "/do/draw?bottle=B06&amp;back=" in page.html
    # nobody draws from what cannot be found
    assert "/do/draw?bottle=B28" not in page.html
    assert "/do/turned-up?bottle=B28" in page.html


def test_sorted_by_how_long_they_are_good_the_longest_past_is_first(onlooker: Window) -> None:
    page = onlooker.get("/shelf", order="until", condition="past")
    assert numbers(page)[0] == "B03"
    assert "sort by place" in page.text


def test_an_unknown_name_is_404_with_the_nearest_as_links(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what="sodium thiosulphat 7")
    assert page.status == 404
    assert page.field("what") == "sodium thiosulphat 7"
    nearest = re.search(r'<a href="(/shelf\?what=[^"]+)">', page.html)
    assert nearest
    assert onlooker.get(nearest[1]).status == 200


def test_a_filter_that_nothing_fits_is_no_error_and_shows_the_way_out(onlooker: Window) -> None:
    page = onlooker.get("/shelf", place="A1", condition="weak")
    assert (page.status, numbers(page)) == (200, [])
    assert "No bottle fits. Without the condition there are 4: show them." in said(page)


def test_what_is_typed_is_shown_as_text_and_never_as_markup(onlooker: Window) -> None:
    page = onlooker.get("/shelf", what='"><script>alert(1)</script>')
    assert "<script>alert" not in page.html
    assert page.field("what") == '"><script>alert(1)</script>'


@pytest.mark.parametrize(
    ("query", "status", "told"),
    [
        ({"condition": "rotten"}, 422, "rotten"),
        ({"order": "price"}, 422, "price"),
        ({"on": "the day before"}, 422, "the day before"),
        ({"place": "Z9"}, 404, "Z9"),
        ({"what": "x" * 201}, 422, "200"),
        ({"page": "0"}, 422, "page"),
        ({"page": "two"}, 422, "page"),
        ({"what": "\x00"}, 400, ""),
    ],
)
def test_what_cannot_be_read_is_refused_in_words(
    onlooker: Window, query: dict[str, str], status: int, told: str
) -> None:
    page = onlooker.get("/shelf", **query)
    assert page.status == status
    assert told in page.text


def test_a_page_past_the_last_is_the_last(onlooker: Window) -> None:
    assert "B01" in numbers(onlooker.get("/shelf", page="99999"))


def test_another_day_is_a_forecast_or_as_it_was_known(onlooker: Window) -> None:
    ahead = onlooker.get("/shelf", what="S09", on="2027-03-01")
    assert "a forecast: if nothing happens until then" in ahead.text
    before = onlooker.get("/shelf", what="S09", on="2026-12-20", known_on="2026-12-20")
    assert "as it was known on Sun 20 Dec 2026" in before.text
    assert "Promised to" not in before.text


def test_looked_at_from_another_day_the_shelf_is_that_day_s(onlooker: Window) -> None:
    past = {"what": "S02", "condition": "watch"}
    assert numbers(onlooker.get("/shelf", **past)) == []
    assert numbers(onlooker.on(date(2027, 1, 25)).get("/shelf", **past)) == ["S02"]


def test_a_name_nobody_knows_still_offers_every_place_from_one_call(
    onlooker: Window, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.service import shelf_planned

    read, places = list[object](), shelf_planned.places

    def counted(path: Path) -> object:
        read.append(path)
        return places(path)

    monkeypatch.setattr(shelf_planned, "places", counted)
    page = onlooker.get("/shelf", what="no such thing at all").html
    assert ('<option value="A1"' in page, len(read)) == (True, 1)
