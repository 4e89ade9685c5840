"""The text for a phone: never more than ten lines of 38 characters, the worst first."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import houses
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Closeness, Facts, Firmness, House
from stockroom.planning.plan import plan
from stockroom.reports.files.phone import LINES, WIDTH, Phone, phone_of, phone_text
from stockroom.service.sheets import known_and_planned

ON = houses.day("01-12")


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


def test_ten_lines_of_38() -> None:
    assert (LINES, WIDTH) == (10, 38)


def test_every_booking_and_every_day_fits(college: tuple[Facts, Plan]) -> None:
    known, made = college
    for booking in known.bookings:
        for number in (booking.number, ""):
            fits(phone_of(known, made, booking.on, number))


def fits(phone: Phone, practice: bool = True) -> None:
    lines = phone_text(phone).splitlines()
    assert len(lines) <= 10
    assert all(0 < len(line) <= 38 for line in lines), lines
    assert ("PRACTICE" in phone_text(phone)) is practice
    assert any(line.startswith("Ready: ") for line in lines[:3])
    if phone.more or phone.to_do:
        assert re.fullmatch(r"and (\d+ to do(, \d+ more)?|\d+ more) on the sheet", lines[-1])


def test_what_is_left_out_is_what_is_to_do_and_not_told(college: tuple[Facts, Plan]) -> None:
    phone = phone_of(*college, date(2027, 3, 23))
    # of 13, the titration and the washing-up liquid are told
    assert phone.lines[1] == "Ready: NO, NOT YET: 13 to do  PRACTICE"
    assert (phone.lines[-1], phone.to_do) == ("and 11 to do, 3 more on the sheet", 11)


def test_what_is_missing_comes_before_what_is_to_do(college: tuple[Facts, Plan]) -> None:
    lines = phone_of(*college, ON, "K01").lines
    assert lines[:3] == (
        "Tue 12 Jan 09:15 K01 Flame tests",
        "Ready: NO, NOT YET: 1 to do  PRACTICE",
        "Missing: lithium chloride",
    )
    assert lines[-1] == "Other 5 ready"


def test_the_evening_says_who_must_be_there(college: tuple[Facts, Plan]) -> None:
    told = " ".join(phone_of(*college, date(2027, 2, 10)).lines)
    assert "Someone must be here from 18:00 to 20:40" in told
    assert "K16: mix from 18:00, destroyed by 20:40, ticked" in told


def test_an_unchecked_strength_is_told_first(college: tuple[Facts, Plan]) -> None:
    assert "Not checked: sodium thiosulfate" in phone_of(*college, date(2027, 3, 4), "K21").lines


def test_a_day_with_nothing() -> None:
    known = houses.house([houses.solid()])
    assert phone_of(known, plan(known), ON).lines == (
        "Tue 12 Jan: nothing booked",
        "Ready: nothing to do",
    )


@pytest.mark.parametrize("on", ["2027-02-13", "2027-02-17"])
def test_a_closed_day_says_so(college: tuple[Facts, Plan], on: str) -> None:
    day = date.fromisoformat(on)
    phone = phone_of(*college, day)
    assert phone.lines == (
        f"{day:%a} {day.day} Feb, closed: nothing booked",
        "Ready: nothing to do  PRACTICE",
    )


def test_a_class_on_a_closed_day_says_so_before_all_that_may_be_cut_off() -> None:
    recipe = replace(houses.recipe(), title="a long title " * 20)
    for count, said in ((1, "K01 a long title"), (2, "2 bookings")):
        known = houses.house(
            [houses.solid()],
            recipes=[recipe],
            bookings=[houses.booking(f"K0{n}", "01-16") for n in range(1, count + 1)],
        )
        phone = phone_of(known, plan(known), houses.day("01-16"))
        assert phone.lines[0].startswith("Sat 16 Jan, closed, 09:15")
        assert said in " ".join(phone.lines[:2])
        fits(phone, practice=False)
    # and an open one does not
    assert "closed" not in " ".join(phone_of(known, plan(known), ON).lines)


def test_all_ready_is_yes() -> None:
    line = houses.solution(1.0)
    found = (houses.found("01-04", 1.0),)
    known = houses.house(
        [line],
        recipes=[houses.recipe(houses.wants(line, 1000))],
        bookings=[houses.booking("K01", "01-12")],
        bottles=[houses.made_bottle("S01", line, houses.cm3(500), checks=found)],
    )
    phone = phone_of(known, plan(known), ON, "K01")
    assert (phone.ready, phone.lines[1:]) == (True, ("Ready: YES", "Strengths as card"))


def test_a_label_nobody_checked_is_not_passed_off_as_the_cards(
    college: tuple[Facts, Plan],
) -> None:
    evening = date(2027, 2, 10)
    assert "Strengths as card; 3 by label only" in phone_of(*college, evening, "K16").lines
    # the card asks for 90-100 vol: what there is of it is told
    told = phone_of(*college, evening, "K15").lines
    assert {"hydrogen peroxide 100 vol, label", "Others as card, expected"} <= set(told)


words = st.text(st.characters(exclude_categories=("Cs", "Cc")), max_size=200)


@given(
    title=words, name=words.filter(str.strip), never_kept=words, handling=words,
    room=words, count=st.integers(1, 9), needs=st.integers(1, 9), practice=st.booleans(),
    closeness=st.sampled_from(list(Closeness)), firmness=st.sampled_from(list(Firmness)),
    minute=st.integers(0, 1439), single=st.booleans(), held=st.integers(0, 900),
)  # fmt: skip
@settings(max_examples=40)
def test_whatever_the_facts_it_fits(
    title: str, name: str, never_kept: str, handling: str, count: int, needs: int, practice: bool,
    closeness: Closeness, firmness: Firmness, minute: int, single: bool, held: int, **more: Any,
) -> None:  # fmt: skip
    line = houses.solution(1.0, name=name)
    wanted = houses.wants(line, houses.cm3(100), closeness=closeness)
    told: dict[str, Any] = {"title": title, "never_kept": never_kept, "handling": handling}
    known = houses.house(
        [line],
        house=House(name=title, practice=practice),
        recipes=[replace(houses.recipe(*[wanted] * needs), **told)],
        bookings=[
            houses.booking(f"K{n:02}", "01-12", minute=minute, firmness=firmness, room=more["room"])
            for n in range(1, count + 1)
        ],
        bottles=[houses.made_bottle("S01", line, houses.cm3(held))] if held else [],
    )
    fits(phone_of(known, plan(known), ON, "K01" if single else ""), practice)
