from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount, Kind

MICRO = st.integers(-(10**12), 10**12)


def test_a_tenth_of_a_gram_ten_times_is_exactly_a_gram() -> None:
    total = Amount.grams(0)
    for _ in range(10):
        total += Amount.grams(0.1)
    assert total == Amount.grams(1)


@pytest.mark.parametrize(("grams", "micro"), [(0.0000005, 0), (0.0000015, 2), (0.0000025, 2)])
def test_ties_round_to_the_even_microgram(grams: float, micro: int) -> None:
    assert Amount.grams(grams).micro == micro


def test_each_maker_names_its_unit() -> None:
    made = [Amount.grams(1), Amount.cm3(1), Amount.items(1)]
    assert [amount.unit for amount in made] == ["g", "cm3", "items"]


def test_number_is_in_the_base_unit() -> None:
    assert Amount(Kind.VOLUME, 49_500).number == 49.5
    assert Amount(Kind.MASS, 176_000).number == 0.176


def test_mass_and_volume_do_not_add() -> None:
    with pytest.raises(BadAmount, match="5 g and 3 cm3"):
        Amount.grams(5) + Amount.cm3(3)


def test_mass_and_volume_do_not_subtract() -> None:
    with pytest.raises(BadAmount, match="do not add up"):
        Amount.grams(5) - Amount.cm3(3)


def test_mass_and_volume_have_no_order() -> None:
    with pytest.raises(BadAmount):
        assert Amount.grams(5) <= Amount.cm3(3)


def test_amounts_of_one_kind_are_ordered() -> None:
    assert Amount.cm3(1) < Amount.cm3(2) <= Amount.cm3(2) < Amount.cm3(3)


def test_truth_of_an_amount_is_refused_and_names_micro() -> None:
    with pytest.raises(TypeError, match=r"\.micro"):
        bool(Amount.grams(0))


@pytest.mark.parametrize("number", [float("nan"), float("inf"), float("-inf")])
def test_an_amount_is_finite(number: float) -> None:
    with pytest.raises(BadAmount, match=str(number)):
        Amount.cm3(number)


@given(MICRO, MICRO)
def test_what_is_added_can_be_taken_away(one: int, two: int) -> None:
    first, second = Amount(Kind.MASS, one), Amount(Kind.MASS, two)
    assert first + second - second == first


@given(MICRO)
def test_number_carries_every_millionth(micro: int) -> None:
    assert Amount.cm3(Amount(Kind.VOLUME, micro).number).micro == micro
