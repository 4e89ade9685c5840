from __future__ import annotations

from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sample_plan import cubic, grams

from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Draw
from stockroom.reports import words


def plain(text: str) -> str:
    return text.replace(words.TIED, " ")


def test_a_day_in_a_table_is_iso_with_its_weekday() -> None:
    assert plain(words.day(date(2027, 1, 25))) == "Mon 2027-01-25"


def test_a_day_as_a_heading_spells_its_month() -> None:
    assert words.day_heading(date(2027, 1, 25)) == "Mon 25 Jan 2027"


@pytest.mark.parametrize(
    ("micro", "kind", "shown"),
    [
        (cubic(6.6123), Kind.VOLUME, "6.612 cm³"),
        (cubic(27.5), Kind.VOLUME, "27.5 cm³"),
        (cubic(4048.4), Kind.VOLUME, "4 048 cm³"),
        (grams(0.1764999), Kind.MASS, "0.1765 g"),
        (0, Kind.MASS, "0 g"),
    ],
)
def test_amounts_are_printed_to_four_figures(micro: int, kind: Kind, shown: str) -> None:
    assert plain(words.amount(micro, kind)) == shown


@given(st.integers(1, 10**12))
def test_rounding_never_loses_a_whole_one(micro: int) -> None:
    assert abs(words.rounded(micro / 1e6, 4) - micro / 1e6) <= max(0.5, micro / 1e6 * 5e-4)


def test_the_word_follows_every_mark() -> None:
    for condition in Condition:
        mark, _, word = plain(words.marked(condition)).partition(" ")
        assert len(mark) == 1
        assert word == condition.value


def test_marks_tell_sound_watch_past_aside_and_lost_apart() -> None:
    told_apart = [Condition.SOUND, Condition.WATCH, Condition.PAST, Condition.SET_ASIDE]
    assert len({words.MARKS[each] for each in [*told_apart, Condition.NOT_FOUND]}) == 5


def test_units_are_printed_raised_and_other_threes_left_alone() -> None:
    assert words.raised("0.1 mol/dm3 in 30 cm3 of K03.3") == "0.1 mol/dm³ in 30 cm³ of K03.3"


def test_a_source_names_its_bottle_or_its_make() -> None:
    assert plain(words.source(Draw(cubic(27.5), Kind.VOLUME, bottle="S01"))) == "27.5 cm³ of S01"
    made = Draw(cubic(2), Kind.VOLUME, item="starch 1.0 % w/v", make="M03")
    assert plain(words.source(made)) == "2 cm³ of starch 1.0 % w/v (M03)"


@pytest.mark.parametrize(
    ("number", "noun", "shown"),
    [(1, "guess", "1 guess"), (0, "guess", "0 guesses"), (3, "open day", "3 open days")],
)
def test_counts_agree_with_their_noun(number: int, noun: str, shown: str) -> None:
    assert words.counted(number, noun) == shown


def test_money_is_pounds_and_two_figures_of_pence() -> None:
    assert words.money(1405) == "£14.05"


def test_two_draws_from_one_bottle_are_told_as_one() -> None:
    taken = (("S13", 20), ("S13", 28), ("S14", 1))
    row = [Draw(much, Kind.VOLUME, bottle) for bottle, much in taken]
    assert [(draw.bottle, draw.amount) for draw in words.by_bottle(row)] == [
        ("S13", 48),
        ("S14", 1),
    ]
    still_to_come = [Draw(1, Kind.VOLUME), Draw(2, Kind.VOLUME)]
    assert words.by_bottle(still_to_come) == still_to_come
