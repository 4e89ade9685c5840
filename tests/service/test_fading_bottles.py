"""A bottle's course: what it holds today, by which law and source, and until when it will do."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import StockroomError, UnknownName
from stockroom.measure.parsing import parse_strength
from stockroom.service import checks
from stockroom.service.fades import fading

TODAY = date(2027, 1, 4)


def test_peroxide_is_told_in_its_labels_unit(practice: Path) -> None:
    found = fading(practice, "b01", as_at=TODAY)
    assert (found.bottle, found.line) == ("B01", "hydrogen peroxide 100 vol")
    assert found.shown[0] == "vol"
    assert found.shown[1] == pytest.approx(11.207)
    # found 91 vol on 2026-12-08 and 1 % a month: 27 days on, worked out
    expected = found.course.strengths.expected
    assert expected is not None
    assert expected * found.shown[1] == pytest.approx(90.2, abs=0.05)


def test_the_law_says_where_its_figures_come_from(practice: Path) -> None:
    assert fading(practice, "B01", as_at=TODAY).cited.startswith("Bench experience")


@pytest.mark.parametrize("below", ["80 vol", "7.138 mol/dm3", "24.28 % w/v"])
def test_a_strength_in_any_unit_is_dated(practice: Path, below: str) -> None:
    # ln(91/80) / (0.01/30.4375) = 392 days from 2026-12-08, so below on 2028-01-05
    first = fading(practice, "B01", as_at=TODAY, below=(below,)).course.marks[0]
    assert first.on is not None
    assert abs((first.on - date(2028, 1, 5)).days) <= 2


def test_bookings_that_take_it_are_held_against_their_day(practice: Path) -> None:
    marks = {mark.what: mark for mark in fading(practice, "B01", as_at=TODAY).course.marks}
    # K15 wants 90 vol on 2027-02-10, and B01 is at 89.1 then: scenario section 7
    assert marks["K15"].by == date(2027, 2, 10)
    assert not marks["K15"].in_time


def test_a_sealed_bottle_is_as_strong_as_its_label(practice: Path) -> None:
    found = fading(practice, "B02", as_at=TODAY).course
    assert found.since is None
    assert found.strengths.expected == found.strengths.nominal


def test_a_found_uncertainty_gives_a_range(own: Path) -> None:
    strength, spread = parse_strength("90 vol"), parse_strength("0.3 vol")
    checks.found(own, "B01", strength, spread=spread, on=None, today=TODAY, by="T1")
    found = fading(own, "B01", as_at=TODAY)
    known = found.course.strengths
    assert known.lowest is not None
    assert known.highest is not None
    ends = [end * found.shown[1] for end in (known.lowest, known.highest)]
    # two standard uncertainties to each side: the GUM
    assert ends == pytest.approx([89.4, 90.6])


@pytest.mark.parametrize(
    ("number", "below", "words"),
    [
        ("B99", (), 'No bottle "B99"'),
        ("B06", (), "B06 sodium thiosulfate pentahydrate is no solution"),
        ("B01", ("80 g",), '--below "80 g"'),
        ("B01", ("saturated",), '"saturated"'),
        ("B01", ("0 vol",), "is nothing"),
        ("B01", ("20 %",), "Which"),
    ],
)
def test_what_cannot_be_told_is_refused(
    practice: Path, number: str, below: tuple[str, ...], words: str
) -> None:
    with pytest.raises(StockroomError, match=words):
        fading(practice, number, as_at=TODAY, below=below)


def test_before_it_was_there_nothing_can_be_told(practice: Path) -> None:
    with pytest.raises(UnknownName, match="B01 was not there yet on 2020-01-01"):
        fading(practice, "B01", as_at=date(2020, 1, 1))
