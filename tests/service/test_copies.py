"""Numbers on printed copies: one each, whoever prints at once, and only what is printed."""

from __future__ import annotations

import threading
from datetime import date
from pathlib import Path

from stockroom.service.copies import copy_before, number_copy

ON = date(2027, 1, 4)


def test_a_number_keeps_what_the_sheet_said(own: Path) -> None:
    first = number_copy(own, "strip", "a", {"x": "one"}, as_at=ON, by=" T1 ")
    found = copy_before(own, "strip", "a")
    assert found is not None
    assert (found.number, found.by, found.lines) == (first, "T1", {"x": "one"})
    assert number_copy(own, "week", "a", {}, as_at=ON) == f"{int(first) + 1:04d}"
    # another sheet's copy is none of this one's
    assert copy_before(own, "strip", "a") == found


def test_to_look_at_a_sheet_numbers_nothing(own: Path) -> None:
    assert copy_before(own, "strip", "a") is None
    assert copy_before(own, "strip", "a") is None
    assert number_copy(own, "strip", "a", {}, as_at=ON) == "0001"


def test_those_who_print_at_once_get_a_number_each(own: Path) -> None:
    start, numbers = threading.Barrier(4), []

    def print_one(name: str) -> None:
        start.wait()
        numbers.append(number_copy(own, "strip", name, {"x": name}, as_at=ON))

    printing = [threading.Thread(target=print_one, args=(f"s{n}",)) for n in range(4)]
    for each in printing:
        each.start()
    for each in printing:
        each.join()
    assert sorted(numbers) == ["0001", "0002", "0003", "0004"]
    kept = [copy_before(own, "strip", f"s{n}") for n in range(4)]
    assert sorted(each.number for each in kept if each) == sorted(numbers)
