"""Term's buying: what to order by when, recorded in one press, and never another thing instead."""

from __future__ import annotations

import re
from datetime import date
from html import unescape
from typing import TYPE_CHECKING, Any

from stockroom.service.plan import term_plan

if TYPE_CHECKING:
    from windows import Window

    from stockroom.planning.decisions import Coming, Order

DAY = date(2027, 1, 4)
BUSY = date(2027, 1, 25)


def orders(window: Window) -> tuple[Order, ...]:
    return term_plan(window.house.path, as_at=DAY).orders


def on_order(window: Window, day: date = DAY) -> tuple[Coming, ...]:
    return term_plan(window.house.path, as_at=day).on_order


def pressed(window: Window, one: Order, **more: str) -> Any:
    return window.enter("order-planned", order=one.id, meant=one.wanted, back="/buying", **more)


def test_each_order_says_when_what_for_whom_and_why(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/buying").text
    assert "5 orders, £80.00 in all; 2 late already." in text
    assert "order by Mon 18 Jan 2027 late by 5 open days ascorbic acid , 1 × 100 g, £9.60" in text
    assert "needed Wed 3 Feb 2027 for K12 , K14" in text
    assert "paid by CH £18.09, OU £6.81" in text
    assert "or run K14 without ascorbic acid" in text
    assert "100 g lasts 8.5 years at this rate" in text


def test_the_same_orders_stand_on_the_page_and_in_the_plan(onlooker: Window) -> None:
    shown = re.findall(r'<li id="(O\d+)">', onlooker.get("/buying").html)
    assert sorted(shown) == [one.id for one in orders(onlooker)]


def test_the_line_that_stock_falls_below_is_named_with_its_day(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/buying").text
    assert "Falls below the line on" in text
    assert "Thu 4 Mar 2027 sulfuric acid 2.00 mol/dm³ 875.4 cm³ 1 000 cm³ not this term" in text


def test_money_is_told_to_the_penny_and_what_is_over_in_words(onlooker: Window) -> None:
    text = onlooker.on(BUSY).get("/buying").text
    assert "BI biology £0.00 £26.80 £25.00 £1.80 over" in text
    assert "All £0.00 £80.00" in text


def test_a_press_records_the_order_and_puts_it_on_its_way(window: Window) -> None:
    first = orders(window)[0]
    told = pressed(window, first)
    assert told.status == 200
    assert f"Ordered P01 : {first.packs} × {first.pack} of {first.line}" in told.text
    assert [one.line for one in on_order(window)] == [first.line]
    assert "P01" in told.html.split('id="coming"')[1]


def test_every_button_carries_what_its_number_stands_for(onlooker: Window) -> None:
    page = onlooker.get("/buying").html
    sent = re.findall(
        r'name="order" value="(O\d+)">\s*<input[^>]*name="meant" value="([^"]*)"', page
    )
    assert {(number, unescape(meant)) for number, meant in sent} == {
        (one.id, one.wanted) for one in orders(onlooker)
    }


def test_a_number_that_moved_still_orders_what_was_pressed(window: Window) -> None:
    first, second = orders(window)[:2]
    pressed(window, first)
    told = pressed(window, second)
    assert f"It was {second.id} when it was shown, and {first.id} by now." in told.text
    assert {one.line for one in on_order(window)} == {first.line, second.line}


def test_pressed_on_two_pages_it_is_ordered_once(window: Window) -> None:
    first = orders(window)[0]
    pressed(window, first)
    again = pressed(window, first)
    assert again.status == 409
    assert "no longer to be ordered so" in again.text
    assert len(on_order(window)) == 1
    assert again.field("meant") == first.wanted


def test_a_kept_plans_number_does_not_take_the_place_of_what_was_pressed(window: Window) -> None:
    window.post("/changed/keep", by="T1")
    first, second = orders(window)[:2]
    pressed(window, first)
    # its number on the kept sheet is another's now, and the page showed the plan as it is
    now = orders(window)[0]
    assert (now.id, now.line) == (first.id, second.line)
    pressed(window, now)
    assert {one.line for one in on_order(window)} == {first.line, second.line}


def test_other_packs_than_were_shown_are_refused(window: Window) -> None:
    first = orders(window)[0]
    meant = f"{first.line}, 7 × {first.pack}"
    refused = window.enter("order-planned", order=first.id, meant=meant)
    assert (refused.status, on_order(window)) == (409, ())
    assert f"The plan now wants {first.wanted}" in refused.text


def test_once_initials_are_given_one_press_is_enough(window: Window) -> None:
    assert 'id="O01-by"' in window.get("/buying").html
    told = pressed(window, orders(window)[0])
    assert 'id="O01-by"' not in told.html


def test_what_is_on_its_way_can_arrive_be_put_off_or_cancelled(window: Window) -> None:
    pressed(window, orders(window)[0])
    told = window.enter(
        "order-put-off", order="P01", expected="2027-02-15", why="rail", back="/buying"
    )
    assert "expected Mon 15 Feb 2027" in told.text
    assert "/do/arrive?" in told.html
    window.enter("order-cancel", order="P01", why="sold out")
    assert "Nothing is on its way." in window.get("/buying").text


def test_what_is_overdue_says_by_how_much(window: Window) -> None:
    window.enter("order", line="potassium iodide", packs="1", size="250 g", expected="2027-01-18")
    text = window.on(BUSY).get("/buying").text
    assert "expected Mon 18 Jan 2027 5 open days overdue" in text


def test_looking_writes_nothing(onlooker: Window) -> None:
    before = onlooker.house.path.read_bytes()  # type: ignore[union-attr]
    onlooker.get("/buying")
    assert onlooker.house.path.read_bytes() == before  # type: ignore[union-attr]
