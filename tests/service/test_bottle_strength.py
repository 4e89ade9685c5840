"""What a bottle should hold: one answer for every sum and titration that starts from it."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import MissingFigure, NotAllowed, UnknownName
from stockroom.service.bench_held import from_bottle
from stockroom.service.bottle_strength import bottle_among, standing, strength_on, substance_in
from stockroom.store.snapshot import facts

DAY = date(2027, 1, 26)


def test_a_sum_and_a_titration_count_a_bottle_alike(practice: Path) -> None:
    known = facts(practice, DAY)
    bottle = bottle_among(known, "b01")
    held = from_bottle(bottle, known.lines[bottle.line], DAY)
    found, is_practice = strength_on(practice, "B01", DAY)
    assert is_practice
    assert held.found is not None
    assert (held.found.value, held.note) == (found.expected, found.note)


def test_a_bottle_past_its_safety_date_has_no_strength_to_tell(practice: Path) -> None:
    on = date(2027, 5, 1)
    known = facts(practice, on)
    bottle = bottle_among(known, "B29")
    with pytest.raises(NotAllowed, match="past its safety date"):
        standing(bottle, known.lines[bottle.line], on)


def test_a_solid_has_no_strength_to_go_by(practice: Path) -> None:
    with pytest.raises(MissingFigure, match="B06 has no strength"):
        strength_on(practice, "B06", DAY)


def test_a_bottle_nobody_has_is_answered_with_the_nearest(practice: Path) -> None:
    with pytest.raises(UnknownName) as caught:
        strength_on(practice, "B99", DAY)
    assert "Nearest: B" in caught.value.hint
    with pytest.raises(UnknownName, match="B99"):
        substance_in(practice, "B99")


@pytest.mark.parametrize("number", ["S08", "s08", " S08 "])
def test_a_number_is_read_in_capitals_or_not(practice: Path, number: str) -> None:
    assert substance_in(practice, number) == "potassium permanganate"
