from __future__ import annotations

import random

import pytest

from stockroom.errors import BadInput, UnknownName
from stockroom.lots.netting import Item, Release, releases

# a textbook exercise with a worked answer page (seen): A is 1 B, 2 C and 1 D; C is 2 D and 3 E
TEXTBOOK = [
    Item("A", lead=1, on_hand=20, parts={"B": 1, "C": 2, "D": 1}),
    Item("B", lead=1, receipts={1: 10}),
    Item("C", lead=1, on_hand=10, receipts={1: 50}, parts={"D": 2, "E": 3}, at_least=50),
    Item("D", lead=2, on_hand=20, multiple=100),
    Item("E", lead=2, on_hand=10, multiple=50),
]


def starts(rows: list[Release]) -> list[tuple[float, int]]:
    return [(each.amount, each.start) for each in rows]


def test_the_textbook_exercise_comes_out_as_its_answer_page() -> None:
    found = releases(TEXTBOOK, {"A": {2: 30, 5: 30, 8: 40}})
    assert {name: starts(rows) for name, rows in found.items()} == {
        "A": [(10, 1), (30, 4), (40, 7)],
        "B": [(30, 3), (40, 6)],
        "C": [(50, 3), (50, 6)],
        "D": [(100, 1), (100, 2), (100, 4)],
        "E": [(150, 1), (150, 4)],
    }
    assert not any(each.late for rows in found.values() for each in rows)


def test_the_order_of_the_items_does_not_matter() -> None:
    needs = {"A": {2: 30, 5: 30, 8: 40}}
    there = releases(TEXTBOOK, needs)
    back = releases(TEXTBOOK[::-1], needs)
    assert list(back) == ["E", "D", "C", "B", "A"]
    assert there == {name: back[name] for name in there}


def test_a_release_due_before_the_first_period_is_late_and_not_dropped() -> None:
    items = [Item("top", lead=2, parts={"part": 2}), Item("part", lead=3)]
    found = releases(items, {"top": {2: 5}})
    assert found["top"] == [Release("top", 5, start=1, due=2, late=1)]
    # its part is needed when the late work starts
    assert found["part"] == [Release("part", 10, start=1, due=1, late=3)]


def test_receipts_and_what_a_lot_leaves_over_are_used_first() -> None:
    item = Item("one", on_hand=3, receipts={2: 4}, at_least=10, multiple=4)
    found = releases([item], {"one": {1: 3, 2: 5, 3: 11, 4: 1}})
    assert starts(found["one"]) == [(12, 2), (12, 4)]


def test_needs_from_outside_and_from_above_add_up() -> None:
    items = [Item("a", parts={"b": 1}), Item("b")]
    found = releases(items, {"a": {3: 2}, "b": {3: 5, 4: 1}})
    assert starts(found["b"]) == [(7, 3), (1, 4)]


def test_nothing_needed_nothing_started() -> None:
    assert releases([Item("a", on_hand=1)], {}) == {"a": []}


def test_lot_for_lot_on_random_bills_gives_every_need_and_no_more() -> None:
    chance = random.Random(4)
    for _ in range(100):
        count = chance.randint(1, 6)
        names = [f"n{each}" for each in range(count)]
        items = [
            Item(name, lead=chance.randint(0, 2), on_hand=chance.randint(0, 20), parts={
                other: chance.randint(1, 3) for other in names[n + 1 :] if chance.random() < 0.5
            })
            for n, name in enumerate(names)
        ]  # fmt: skip
        needs = {name: {chance.randint(1, 9): chance.randint(1, 30)} for name in names}
        found = releases(items, needs)
        for item in items:
            above = sum(
                each.amount * other.parts.get(item.name, 0)
                for other in items
                for each in found[other.name]
            )
            wanted = sum(needs[item.name].values()) + above
            made = sum(each.amount for each in found[item.name])
            assert made == max(0, wanted - item.on_hand)


def test_unknown_names_circles_and_periods_before_the_first_are_told() -> None:
    with pytest.raises(UnknownName, match="'a': there is no item 'x'"):
        releases([Item("a", parts={"x": 1})], {})
    with pytest.raises(UnknownName, match="needs: there is no item 'y'"):
        releases([Item("a")], {"y": {1: 1}})
    with pytest.raises(BadInput, match="goes into"):
        releases([Item("a", parts={"b": 1}), Item("b", parts={"a": 1})], {"a": {1: 1}})
    with pytest.raises(BadInput, match="'a' has period 0"):
        releases([Item("a")], {"a": {0: 1}})
    with pytest.raises(BadInput, match="'a' is given twice"):
        releases([Item("a"), Item("a")], {})
