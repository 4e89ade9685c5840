"""The class slip: the right figure for the board, or none; and two to a side on paper."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import houses
import paper_reading
import pytest

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Closeness, Facts
from stockroom.planning.plan import plan
from stockroom.reports.paper.slip import NONE_TOLD, NOT_CHECKED, SLIP, Slips, line_words, slip_of
from stockroom.reports.typesetting import typeset
from stockroom.service.sheets import known_and_planned

ON = houses.day("01-12")
SALT = houses.solid()
STOCK = houses.solution(1.0)
WEAK = houses.solution(0.1)


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


def slips(*requirements: Any, bottles: tuple[Any, ...] = (), count: int = 1) -> Slips:
    known = houses.house(
        [SALT, STOCK, WEAK],
        methods=[houses.made_from(WEAK, STOCK)],
        recipes=[houses.recipe(*requirements)],
        bookings=[houses.booking(f"K{n:02}", "01-12", minute=540 + n) for n in range(1, count + 1)],
        bottles=bottles,
    )
    return slip_of(known, plan(known), ON)


def said(sheet: Slips) -> list[str]:
    return [line_words(line).replace("\xa0", " ") for slip in sheet.slips for line in slip.lines]


def stock(*found: tuple[str, float], line: Any = STOCK) -> Any:
    checks = tuple(houses.found(on, strength) for on, strength in found)
    return houses.made_bottle("S01", line, houses.cm3(900), on="2026-11-20", checks=checks)


def exact(line: Any, **more: Any) -> Any:
    told = {"closeness": Closeness.EXACT, "may_differ": 0.05, "found_within_days": 28, **more}
    return houses.wants(line, houses.cm3(100), **told)


def test_a_found_strength_with_its_day() -> None:
    sheet = slips(exact(STOCK), bottles=(stock(("2027-01-02", 0.965)),))
    assert said(sheet) == ["salt solution today: 0.965 mol/dm³, found 2 Jan 2027"]


@pytest.mark.parametrize(
    ("found", "words"),
    [
        ((), f"salt solution today: {NOT_CHECKED}"),
        # 28 days before 12 January is 15 December: the day before that is too long ago
        (
            (("2026-12-14", 0.965),),
            f"salt solution today: {NOT_CHECKED}, found 14 Dec 2026, too long before",
        ),
        ((("2026-12-15", 0.965),), "salt solution today: 0.965 mol/dm³, found 15 Dec 2026"),
    ],
)
def test_an_exact_line_unchecked_gets_no_figure(found: Any, words: str) -> None:
    # exact needs take a bottle that is to be titrated yet, so there is one to speak of
    assert said(slips(exact(STOCK), bottles=(stock(*found),))) == [words]


def test_a_dilution_says_of_what() -> None:
    sheet = slips(houses.wants(WEAK, houses.cm3(100)), bottles=(stock(("2027-01-02", 1.06)),))
    assert said(sheet) == ["salt solution today: 0.1 mol/dm³, by dilution of S01, found 2 Jan 2027"]


def test_what_nobody_found_is_expected() -> None:
    sheet = slips(houses.wants(WEAK, houses.cm3(100)), bottles=(stock(),))
    assert said(sheet) == ["salt solution today: 0.10 mol/dm³, expected"]
    sheet = slips(houses.wants(STOCK, houses.cm3(100)), bottles=(stock(),))
    assert said(sheet) == ["salt solution today: 1.0 mol/dm³, expected, by its label"]


def test_what_is_short_is_not_there() -> None:
    sheet = slips(houses.wants(STOCK, houses.cm3(2000)), bottles=(stock(),))
    assert said(sheet) == ["salt solution today: not there"]


@pytest.mark.parametrize("closeness", [Closeness.ROUGH, Closeness.PRESENT])
def test_where_strength_does_not_matter_none_is_told(closeness: Closeness) -> None:
    sheet = slips(houses.wants(STOCK, 1000, closeness=closeness), bottles=(stock(),))
    [slip] = sheet.slips
    assert (slip.lines, slip.said) == ((), NONE_TOLD)
    left = ("salt solution",) if closeness is Closeness.ROUGH else ()
    assert slip.left_out == left


def test_a_tolerance_of_its_own_is_told() -> None:
    wanted = houses.wants(STOCK, 1000, closeness=Closeness.ROUGH, tolerance=0.02)
    assert len(said(slips(wanted, bottles=(stock(),)))) == 1


def test_nothing_booked_says_so(college: tuple[Facts, Plan]) -> None:
    sheet = slip_of(*college, date(2027, 1, 5))
    assert "nothing booked" in SLIP.text(sheet, 80)
    [pdf] = typeset(SLIP.name, SLIP.data(sheet))
    assert "nothing booked" in paper_reading.words(pdf)
    assert "PRACTICE" in paper_reading.words(pdf)


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_two_to_a_side_and_the_same(college: tuple[Facts, Plan], paper: str) -> None:
    [pdf] = typeset(SLIP.name, SLIP.data(slip_of(*college, date(2027, 2, 2))), paper=paper)
    [height] = [tall for _, tall in paper_reading.sizes_mm(pdf)]
    seen = paper_reading.pieces(pdf)
    middle = height / paper_reading.POINTS_TO_MM / 2
    lower = [piece.text for piece in seen if piece.top < middle]
    upper = [piece.text for piece in seen if piece.bottom > middle]
    assert lower == upper
    assert "".join(upper).count("not checked") == 1
    assert paper_reading.overlapping(pdf) == []
    assert paper_reading.outside(pdf, margin=14) == []
    assert paper_reading.greys_only(pdf)


def test_the_figure_is_the_biggest_thing(college: tuple[Facts, Plan]) -> None:
    [pdf] = typeset(SLIP.name, SLIP.data(slip_of(*college, date(2027, 3, 23), "K28")))
    seen = paper_reading.pieces(pdf)
    tallest = max(piece.top - piece.bottom for piece in seen)
    figure = next(piece for piece in seen if piece.text.startswith("0.050"))
    assert figure.top - figure.bottom > 0.6 * tallest
    assert tallest == max(p.top - p.bottom for p in seen if "mol" in p.text or p.text[0].isdigit())


@pytest.mark.parametrize("lines", [1, 6, 16])
def test_long_names_and_many_lines_do_not_clip(lines: int) -> None:
    name = f"{'antidisestablishmentarianism' * 3} {'of a very long name indeed ' * 4}".strip()[:200]
    sheet = slips(exact(STOCK), bottles=(stock(("2027-01-02", 0.965)),))
    [slip] = sheet.slips
    [line] = slip.lines
    long = replace(line, name=name, how=f"by dilution of S01, {name}")
    many = replace(slip, title=name, room=name[:60], lines=(long,) * lines, left_out=(name,) * 3)
    [pdf] = typeset(SLIP.name, SLIP.data(replace(sheet, slips=(many,))))
    assert paper_reading.overlapping(pdf) == []
    assert paper_reading.outside(pdf, margin=14) == []
    told = re.sub(r"[\s\u200b-]", "", paper_reading.words(pdf))
    assert told.count("0.965mol/dm³") >= lines


def test_several_classes_have_a_side_each() -> None:
    sheet = slips(exact(STOCK), bottles=(stock(("2027-01-02", 0.965)),), count=3)
    [pdf] = typeset(SLIP.name, SLIP.data(sheet))
    assert len(paper_reading.page_words(pdf)) == 3
    assert set(SLIP.lines(sheet)) == {f"2027-01-12 K0{n}.1" for n in (1, 2, 3)}
