"""What is said by eye: a part of the bottle that is left, or about how much was drawn."""

from __future__ import annotations

from fractions import Fraction

import pytest

from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye, parse_drawn


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("about a third left", Fraction(1, 3)),
        ("a third left", Fraction(1, 3)),
        ("1/3 left", Fraction(1, 3)),
        ("Half left", Fraction(1, 2)),
        ("half full", Fraction(1, 2)),
        ("½ left", Fraction(1, 2)),
        ("about ¾ full", Fraction(3, 4)),
        ("two-thirds of it left", Fraction(2, 3)),
        ("a quarter is left", Fraction(1, 4)),
        ("30 % left", Fraction(3, 10)),
        ("nearly empty", Fraction(1, 20)),
        ("empty", Fraction(0)),
        ("1/1 left", Fraction(1)),
    ],
)
def test_a_part_left_is_of_the_whole_bottle(text: str, part: Fraction) -> None:
    assert parse_drawn(text) == ByEye(text, left=part)


@pytest.mark.parametrize("text", ["about 100 cm3", "~100cm³", "roughly 100 mL"])
def test_about_an_amount_is_an_estimate_of_what_was_drawn(text: str) -> None:
    assert parse_drawn(text) == ByEye(text, drawn=Amount.cm3(100))


@pytest.mark.parametrize("text", ["100 cm3", "20 g", "3 items"])
def test_an_amount_alone_is_measured(text: str) -> None:
    assert isinstance(parse_drawn(text), Amount)


def test_a_capital_letter_is_kept_beside_about() -> None:
    assert parse_drawn("about 2 L") == ByEye("about 2 L", drawn=Amount.cm3(2000))


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("4/3 left", "more than the whole"),
        ("150 % left", "more than the whole"),
        ("a third", "how much"),
        ("½ full of it", "how big a bottle"),
        ("about lots", "how much"),
        ("about", "how much"),
        ("1/0 left", "1/0 left"),
        ("about -5 cm3", "less than nothing"),
    ],
)
def test_what_says_nothing_is_refused(text: str, said: str) -> None:
    with pytest.raises(BadAmount, match=said):
        parse_drawn(text)
