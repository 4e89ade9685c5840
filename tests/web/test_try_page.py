"""Trying without saving: the difference only, each refusal beside its field, nothing written."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING
from urllib.parse import urlencode

import pytest

if TYPE_CHECKING:
    from windows import Answer, Window

BUSY = date(2027, 1, 25)
Rows = list[tuple[str, str]]


def tried(window: Window, *fields: tuple[str, str]) -> Answer:
    return window.on(BUSY).get(f"/try?{urlencode(fields)}")


def wrong(page: Answer) -> list[str]:
    """The fields that were refused."""
    return re.findall(r'<input id="([^"]+)"[^>]*aria-invalid', page.html)


def test_only_the_difference_is_told_each_with_its_cause(onlooker: Window) -> None:
    told = tried(onlooker, ("groups", "K08"), ("number", "11"), ("without", "S03"))
    assert "7 changes if so" in told.text.lower()
    assert "if K08 8 → 11 groups; without S03" in told.text
    assert "hydrogen peroxide 0.100 mol/dm³: 528 cm³ → 726 cm³: K08 8 → 11 groups" in told.text
    assert "glucose" not in told.text
    assert told.field("without") == "S03"


def test_nothing_changing_is_said(onlooker: Window) -> None:
    told = tried(onlooker, ("without", "B20"))
    assert (told.status, "Nothing would change" in told.text) == (200, True)


def test_empty_it_only_asks(onlooker: Window) -> None:
    told = onlooker.get("/try")
    assert (told.status, "if so" in told.text, len(wrong(told))) == (200, False, 0)


def test_trying_writes_nothing(onlooker: Window) -> None:
    before = onlooker.house.path.read_bytes()  # type: ignore[union-attr]
    tried(onlooker, ("cancel", "K08"), ("book", "R01"), ("on", "2027-02-11"), ("for", "12"))
    assert onlooker.house.path.read_bytes() == before  # type: ignore[union-attr]


def test_what_was_tried_is_really_done_by_a_form_filled_in(onlooker: Window) -> None:
    told = tried(onlooker, ("groups", "K08"), ("number", "11"))
    (href,) = re.findall(r'href="(/do/shift[^"]*)"', told.html)
    form = onlooker.on(BUSY).get(href.replace("&amp;", "&"))
    assert (form.field("booking"), form.field("groups")) == ("K08", "11")


CASES: dict[str, tuple[Rows, str]] = {
    "no number": ([("groups", "K08"), ("number", "many")], "number-1"),
    "no groups": ([("groups", "K08")], "number-1"),
    "no booking": ([("number", "12")], "groups-1"),
    "too many": ([("groups", "K08"), ("number", "300")], "number-1"),
    "no such booking": ([("groups", "K99"), ("number", "12")], "groups-1"),
    "so already": ([("groups", "K08"), ("number", "8")], "groups-1"),
    "so already, and moved": (
        [("groups", "K08"), ("number", "8"), ("shift", "K08"), ("day", "2027-01-27")],
        "groups-1",
    ),
    "twice": ([("cancel", "K08"), ("cancel", "K08")], "cancel-2"),
    "no day": ([("shift", "K15")], "day-1"),
    "closed": ([("shift", "K15"), ("day", "2027-02-13"), ("time", "14:00")], "day-1"),
    "past": ([("shift", "K15"), ("day", "2027-01-05")], "day-1"),
    "not a day": ([("shift", "K15"), ("day", "soon")], "day-1"),
    "not a time": ([("shift", "K15"), ("time", "noonish")], "time-1"),
    "after the term": ([("shift", "K15"), ("day", "2027-06-03")], "day-1"),
    "no such recipe": ([("book", "R99"), ("on", "2027-02-11"), ("for", "12")], "book-1"),
    "no such payer": (
        [("book", "R01"), ("on", "2027-02-11"), ("for", "12"), ("dept", "XX")],
        "dept-1",
    ),
    "no such bottle": ([("without", "S99")], "without-1"),
    "not found as it is": ([("without", "B28")], "without-1"),
}


@pytest.mark.parametrize(("fields", "where"), CASES.values(), ids=CASES)
def test_a_refusal_stands_beside_its_field_and_what_was_typed_stays(
    onlooker: Window, fields: Rows, where: str
) -> None:
    refused = tried(onlooker, *fields)
    assert refused.status in (404, 409, 422)
    assert wrong(refused) == [where]
    assert all(f'value="{value}"' in refused.html for _, value in fields)
    assert not re.search(r"(?<!\w)--[a-z]", refused.text)


def test_the_second_row_is_blamed_and_not_the_first(onlooker: Window) -> None:
    rows = [("groups", "K08"), ("number", "11"), ("groups", "K09"), ("number", "x2")]
    assert wrong(tried(onlooker, *rows)) == ["number-2"]


def test_a_closed_day_may_be_kept(onlooker: Window) -> None:
    shift = [("shift", "K15"), ("day", "2027-02-13"), ("keep_closed", "yes")]
    told = tried(onlooker, *shift)
    assert told.status == 200
    assert "keep=yes" in told.html


def test_what_is_only_supposed_has_no_page(onlooker: Window) -> None:
    told = tried(onlooker, ("book", "R01"), ("on", "2027-02-11"), ("for", "12"))
    assert "new K30" in told.text
    assert "/day/K30" not in told.html


def test_on_the_safe_side_is_asked_alone(onlooker: Window) -> None:
    told = tried(onlooker, ("cautious", "yes"))
    assert "every strength at its lower 95 % limit" in told.text
    assert "if so" in told.text or "Nothing would change" in told.text


def test_more_rows_keep_what_was_typed(onlooker: Window) -> None:
    told = tried(onlooker, ("groups", "K08"), ("number", ""), ("rows", "6"))
    assert len(re.findall('name="groups"', told.html)) == 6
    assert told.field("groups") == "K08"


@pytest.mark.parametrize(
    "fields",
    [
        [("groups", "x" * 201)],
        [("groups", "K08")] * 21,
        [("rows", "9" * 11)],
        [("cautious", "y" * 11)],
    ],
)
def test_what_is_asked_has_bounds(onlooker: Window, fields: Rows) -> None:
    assert tried(onlooker, *fields).status == 422


@pytest.mark.parametrize("rows", ["many", "-3", "²", "0"])
def test_a_number_of_rows_nobody_can_read_is_the_usual(onlooker: Window, rows: str) -> None:
    told = tried(onlooker, ("rows", rows))
    assert (told.status, len(re.findall('name="groups"', told.html))) == (200, 3)


# -- since the plan was kept -------------------------------------------------------------------


def test_where_no_plan_was_kept_that_is_said_and_one_may_be(window: Window) -> None:
    assert "No plan was kept by 4 January 2027" in window.get("/changed").text
    told = window.post("/changed/keep", by="T1", back="/changed")
    assert "Plan 0001 is kept" in told.text
    assert "nothing changed since plan 0001" in told.text


def test_a_change_is_told_with_its_cause(window: Window) -> None:
    window.post("/changed/keep", by="T1")
    window.enter("cancel", booking="K10", why="trip")
    told = window.get("/changed").text
    assert "since plan 0001 was kept" in told
    assert "dropped; was 2027-01-29" in told


def test_sent_twice_it_is_kept_once(window: Window) -> None:
    for _ in range(2):
        assert "Plan 0001 is kept" in window.post("/changed/keep", by="T1", once="same").text


@pytest.mark.parametrize(
    ("by", "said"),
    [(" ", "Nobody's initials"), ("far too long", "no initials"), ("T\x071", "cannot be printed")],
)
def test_a_plan_without_initials_is_not_kept_and_the_page_says_so_beside_them(
    window: Window, by: str, said: str
) -> None:
    told = window.post("/changed/keep", by=by)
    assert (told.status, said in told.text) == (422, True)
    assert 'id="keep-by-wrong"' in told.html
    assert "No plan was kept" in window.get("/changed").text


def test_the_initials_a_plan_was_kept_by_are_not_cut_and_stay_for_the_visit(window: Window) -> None:
    refused = window.post("/changed/keep", by="far too long")
    assert refused.field("by") == "far too long"
    window.post("/changed/keep", by="8 signs!")
    assert "by 8 signs!" in window.get("/changed").text
    assert window.get("/do/draw").field("by") == "8 signs!"


def test_what_was_supposed_together_is_not_told_apart(onlooker: Window) -> None:
    page = onlooker.get("/try", groups="K08", number="20", without="B01").text
    assert "supposed together: K08 8 → 20 groups; without B01" in page
    assert "supposed together" not in onlooker.get("/try", without="B01").text
