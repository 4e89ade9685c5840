"""The page along the shelf as a value: what fits, in which order, and which page of it."""

from __future__ import annotations

import pytest
from houses import MONDAY, booking, cm3, house, keeps, made_bottle, recipe, solution, wants

from stockroom.errors import BadInput
from stockroom.findings import Danger, DangerKind, Finding
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Bottle, Place
from stockroom.planning.on_shelf import Shelf, on_shelf
from stockroom.planning.plan import plan
from stockroom.reports.pages.shelf import (
    NOT_SOUND,
    ROWS,
    Asked,
    Order,
    ShelfPage,
    nearest_in,
    nothing_found,
    order_of,
    shelf_page,
)
from stockroom.reports.words import TIED

IODINE = solution(0.1, "iodine", rules=(keeps(30),))
A1 = Place("A1", "acids cupboard")
OLD = made_bottle("S01", IODINE, cm3(100), "2026-11-02")
YOUNG = made_bottle("S02", IODINE, cm3(200), "2027-01-04")
MIDDLE = made_bottle("S03", IODINE, cm3(300), "2026-12-15")
BOTTLES = (OLD, YOUNG, MIDDLE)
EVERYTHING = Asked()


def shelf(*bottles: Bottle, **more: object) -> Shelf:
    rows = on_shelf(bottles, {IODINE.key: IODINE}, [A1], MONDAY)
    return Shelf("", MONDAY, rows, "a house", False, **more)  # type: ignore[arg-type]


def shown(asked: Asked = EVERYTHING, number: int = 1, plan: Plan | None = None) -> ShelfPage:
    return shelf_page(shelf(*BOTTLES), asked, [A1], None, plan, number)


def many(count: int, number: int) -> ShelfPage:
    bottles = [made_bottle(f"S{n:04d}", IODINE, cm3(1)) for n in range(1, count + 1)]
    return shelf_page(shelf(*bottles), Asked(), [A1], None, None, number)


def test_one_condition_leaves_the_others_out_and_says_of_how_many() -> None:
    page = shown(Asked(condition="past"))
    assert [row.number for row in page.rows] == ["S01"]
    assert page.about.startswith("All shelves: 1 of 3 bottles on ")


def test_not_sound_is_every_condition_that_wants_somebody() -> None:
    assert [row.number for row in shown(Asked(condition=NOT_SOUND)).rows] == ["S01"]


@pytest.mark.parametrize("word", ["gone", "rotten", "SOUND"])
def test_a_condition_that_is_none_is_refused_even_where_nothing_stands(word: str) -> None:
    with pytest.raises(BadInput, match=word):
        shelf_page(shelf(), Asked(condition=word), [], None, None)


def test_sorted_by_how_long_they_are_good_the_oldest_is_first() -> None:
    page = shown(Asked(order=Order.UNTIL))
    assert [row.number for row in page.rows] == ["S01", "S03", "S02"]


@pytest.mark.parametrize("word", ["by name", "Place", "' OR 1"])
def test_an_order_nobody_knows_is_refused(word: str) -> None:
    with pytest.raises(BadInput, match="place, until"):
        order_of(word)


@pytest.mark.parametrize(
    ("number", "first", "last"), [(1, 1, ROWS), (2, ROWS + 1, ROWS + 5), (99, ROWS + 1, ROWS + 5)]
)
def test_a_page_has_so_many_rows_and_past_the_last_is_the_last(
    number: int, first: int, last: int
) -> None:
    page = many(ROWS + 5, number)
    assert (page.first, page.last, page.of, page.pages) == (first, last, ROWS + 5, 2)
    assert page.rows[0].number == f"S{first:04d}"


def test_with_nothing_there_no_row_is_counted() -> None:
    page = many(0, 1)
    assert (page.first, page.last, page.of, page.pages, page.rows) == (0, 0, 0, 1, ())


def test_a_row_says_until_when_with_its_day_in_words() -> None:
    row = shown(Asked(condition="past")).rows[0]
    said = row.until.replace(TIED, " ")
    assert said == "good until Wed 2 Dec 2026, decided by: made 2 Nov 2026 + 30 days"
    assert row.left.replace(TIED, " ") == "100 of 100 cm³"


def test_a_bottle_tells_which_bookings_it_is_promised_to_and_which_miss_it() -> None:
    asked = recipe(wants(IODINE, cm3(150)))
    known = house([IODINE], recipes=[asked], bookings=[booking("K01", "01-28")], bottles=BOTTLES)
    rows = {row.number: row for row in shown(plan=plan(known)).rows}
    promised = [(use.thing, use.micro) for row in rows.values() for use in row.leaning.promised]
    assert promised == [("K01", cm3(150))]
    assert rows["S01"].leaning.things == ()


def test_what_can_hurt_stands_before_what_is_only_not_checked() -> None:
    danger = Danger("S02", "bleach beside acid", DangerKind.BESIDE)
    found = shelf(*BOTTLES, neighbours=(Finding("S01", "no rule"), danger))
    page = shelf_page(found, Asked(), [A1], A1, None)
    assert [(one.bottle, one.danger) for one in page.beside] == [("S02", True), ("S01", False)]


def test_an_address_keeps_what_was_asked_and_leaves_out_what_is_empty() -> None:
    asked = Asked("hypo", "A1", order=Order.UNTIL)
    assert asked.query() == {"what": "hypo", "place": "A1", "order": "until"}
    assert asked.query(order="", page=2) == {"what": "hypo", "place": "A1", "page": "2"}


def test_the_nearest_names_are_read_from_the_hint() -> None:
    assert nearest_in("Nearest: B06; B60; starch, soluble.") == ("B06", "B60", "starch, soluble")
    assert nearest_in("There is no place at all yet.") == ()


def test_nothing_found_keeps_what_was_typed() -> None:
    page = nothing_found(Asked("<b>"), [A1], 'No bottle "<b>".', ["B06"])
    assert (page.asked.what, page.rows, page.nearest) == ("<b>", (), ("B06",))
