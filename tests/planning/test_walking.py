"""Shelf order, what a walk has still to meet, and its totals."""

from __future__ import annotations

from datetime import date

from stockroom.keeping.record import Record
from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Bottle
from stockroom.planning.on_shelf import in_shelf_order
from stockroom.planning.walking import Met, Total, Visit, Walk, along, totals

DAY = date(2027, 1, 4)


def stands(number: str, place: str) -> Bottle:
    return Bottle(number, "salt", 1, 1, Record(), place)


def visit(bottle: str, line: str, difference: int, how: Met = Met.COUNTED) -> Visit:
    return Visit(bottle, line, Kind.MASS, how, 10, difference, False, "T1", DAY, 1)


def test_shelf_order_is_the_houses_places_and_then_numbers_as_people_read_them() -> None:
    row = [
        stands("B100", "A2"),
        stands("B9", ""),
        stands("B5b", "A2"),
        stands("B05a", "A1"),
        stands("B99", "A2"),
        stands("B1", "Z1"),
    ]
    ordered = [bottle.number for bottle in in_shelf_order(row, ["A2", "A1"])]
    # a place the house no longer lists comes after its own, and no place at all last
    assert ordered == ["B5b", "B99", "B100", "B05a", "B1", "B9"]


def test_a_walk_goes_along_its_places_and_meets_a_bottle_once() -> None:
    row = [stands("B1", "A1"), stands("B2", "A2"), stands("B3", ""), stands("B4", "A1")]
    every, one = Walk("Jan", (), DAY, "T1"), Walk("Jan", ("A1",), DAY, "T1")
    assert [bottle.number for bottle in along(every, row, ["B4"])] == ["B1", "B2", "B3"]
    assert [bottle.number for bottle in along(one, row, ["B4"])] == ["B1"]


def test_totals_keep_what_was_less_apart_from_what_was_more() -> None:
    met = [
        visit("B3", "salt", -5),
        visit("B4", "salt", 2),
        visit("B5", "sand", 0),
        visit("B6", "alum", -1),
        visit("B7", "sugar", 0, Met.MISSING),
    ]
    assert totals(met) == (Total("alum", Kind.MASS, 1, 0), Total("salt", Kind.MASS, 5, 2))
