from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import (
    figures_like,
    format_amount,
    format_number,
    format_strength,
    unit_mark,
)


@pytest.mark.parametrize(
    ("amount", "text"),
    [
        (Amount.cm3(264), "264 cm³"),
        (Amount.cm3(49.5), "49.5 cm³"),
        (Amount.grams(0.176), "0.176 g"),
        (Amount.cm3(1350), "1 350 cm³"),
        (Amount.cm3(1_000_000), "1 000 000 cm³"),
        (Amount.grams(99.2736), "99.274 g"),
        (Amount.grams(0.123456), "0.1235 g"),
        (Amount.grams(0.000001), "0.000001 g"),
        (Amount.grams(0), "0 g"),
        (Amount.grams(-5.5), "-5.5 g"),
        (Amount.items(1), "1 item"),
        (Amount.items(3), "3 items"),
    ],
)
def test_an_amount_reads_as_on_a_label(amount: Amount, text: str) -> None:
    assert format_amount(amount) == text


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (13503.7, "13 504"),
        (1234567.0, "1 234 567"),
        (0.012345678, "0.01235"),
        (188.6792, "188.7"),
        (1e-9, "0.000000001"),
        (1e22, "10 000 000 000 000 000 000 000"),
        (99999.5, "100 000"),
        (0.99996, "1"),
        (-0.0, "0"),
        (-1350.2, "-1 350"),
    ],
)
def test_a_number_keeps_four_figures_and_all_its_whole_digits(number: float, text: str) -> None:
    assert format_number(number) == text


def test_fewer_figures_may_be_asked_for() -> None:
    assert format_number(30.3506, 2) == "30"


@pytest.mark.parametrize("number", [math.nan, math.inf])
def test_a_number_that_is_none_is_refused(number: float) -> None:
    with pytest.raises(BadAmount, match=str(number)):
        format_number(number)


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [
        (0.0987, "mol/dm3", "0.0987 mol/dm³"),
        (20, "vol", "20 vol"),
        (37.0, "% w/w", "37 % w/w"),
        (10, "1 in", "1 in 10"),
        (0, "saturated", "saturated"),
        (0.5, "mol/kg", "0.5 mol/kg"),
        (5.0, "% w/v available chlorine", "5 % w/v available chlorine"),
    ],
)
def test_a_strength_reads_as_on_a_label(value: float, unit: str, text: str) -> None:
    assert format_strength(value, unit) == text


def test_units_are_printed_with_the_raised_three() -> None:
    assert unit_mark("mol/dm3") == "mol/dm³"


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_no_number_is_ever_written_with_an_exponent(number: float) -> None:
    assert set(format_number(number)) <= set("-0123456789. ")


@given(st.floats(1e-6, 1e12))
def test_four_figures_are_within_half_a_thousandth(number: float) -> None:
    assert float(format_number(number).replace(" ", "")) == pytest.approx(number, rel=5.01e-4)


@given(st.integers(-(10**13), 10**13))
def test_an_amount_of_any_size_can_be_written(micro: int) -> None:
    assert format_amount(Amount(Kind.MASS, micro)).endswith(" g")


@pytest.mark.parametrize(
    ("number", "like", "text"),
    [
        ("0.046", "0.0500 mol/dm3", "0.0460"),
        ("0.04604", "0.0500 mol/dm3", "0.04604"),
        ("2", "2.00 mol/dm3", "2.00"),
        ("19", "20 vol", "19"),
        ("1 250", "saturated", "1 250"),
    ],
)
def test_a_strength_has_the_figures_of_its_label(number: str, like: str, text: str) -> None:
    assert figures_like(number, like) == text
