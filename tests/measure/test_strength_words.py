"""What stands beside the unit of a strength: reaction, gas volume, chlorine, temperature, parts."""

from __future__ import annotations

from contextlib import suppress

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount, StockroomError
from stockroom.measure.parsing import parse_strength, parse_strength_range
from stockroom.measure.strengths import StrengthUnit


@pytest.mark.parametrize(
    ("text", "reaction"),
    [
        ("0.1 N for acid-base", "acid-base"),
        ("0.1 N (KMnO4 to Mn2+)", "KMnO4 to Mn2+"),
        ("0.1 N(KMnO4 to Mn2+)", "KMnO4 to Mn2+"),
        ("0.1 N (KMnO4 to Mn(II))", "KMnO4 to Mn(II)"),
        ("0.1 N, 5 equivalents per mol", "5 equivalents per mol"),
        ("N/10, 5 equivalents per mol", "5 equivalents per mol"),
        ("N/10 for acid-base", "acid-base"),
        ("2.00 Eq/L for acid-base", "acid-base"),
        ("0.1 normal for iron(II) to iron(III)", "iron(II) to iron(III)"),
        ("0.1 N", ""),
    ],
)
def test_a_normality_keeps_its_reaction(text: str, reaction: str) -> None:
    strength = parse_strength(text)
    assert (strength.unit, strength.reaction) == (StrengthUnit.NORMAL, reaction)


@pytest.mark.parametrize(
    ("text", "gas"),
    [
        ("100 vol", None),
        ("100 vol at 24 dm3/mol", 24),
        ("100 vol at 24 dm³/mol", 24),
        ("100 vol (22.711 dm3/mol)", 22.711),
        ("100 volumes, 24 litres per mole", 24),
        ("100 vol at room temperature", 24),
    ],
)
def test_vol_keeps_the_gas_volume_it_was_counted_at(text: str, gas: float | None) -> None:
    strength = parse_strength(text)
    assert (strength.value, strength.unit, strength.gas_volume) == (100, StrengthUnit.VOL, gas)


@pytest.mark.parametrize("gas", ["2.24", "224", "0"])
def test_a_gas_volume_that_no_gas_has_is_refused(gas: str) -> None:
    with pytest.raises(BadAmount, match=f'"100 vol at {gas} dm3/mol": no gas takes up'):
        parse_strength(f"100 vol at {gas} dm3/mol")


@pytest.mark.parametrize(
    ("text", "value", "unit"),
    [
        ("5 % w/v available chlorine", 5, StrengthUnit.CHLORINE),
        ("5 % (w/v) av. Cl", 5, StrengthUnit.CHLORINE),
        ("5 % available chlorine w/v", 5, StrengthUnit.CHLORINE),
        ("50 g/dm3 available chlorine", 5, StrengthUnit.CHLORINE),
        ("50 g/L as Cl2", 5, StrengthUnit.CHLORINE),
        ("1000 mg/dm3 av. Cl", 0.1, StrengthUnit.CHLORINE),
        ("1000 ppm available chlorine", 0.1, StrengthUnit.CHLORINE),
        ("10 % w/w active chlorine", 10, StrengthUnit.CHLORINE_WW),
        ("1000 ppm m/m available chlorine", 0.1, StrengthUnit.CHLORINE_WW),
    ],
)
def test_available_chlorine_is_read_as_a_per_cent(
    text: str, value: float, unit: StrengthUnit
) -> None:
    strength = parse_strength(text)
    assert strength.value == pytest.approx(value, rel=1e-12)
    assert strength.unit is unit


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("5 % available chlorine", "Which: g in 100 cm³"),
        ("2 mol/dm3 available chlorine", "not counted in mol/dm3"),
        ("5 vol available chlorine", "not counted in vol"),
    ],
)
def test_doubtful_chlorine_is_asked_about(text: str, says: str) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_strength(text)
    assert says in str(caught.value)
    assert f'"{text}"' in caught.value.message


@pytest.mark.parametrize(
    ("text", "celsius"),
    [
        ("saturated at 20 °C", 20),
        ("saturated at 20°C", 20),
        ("saturated at 20 ℃", 20),
        ("sat. (25 C)", 25),
        ("saturated solution at 17.5 degrees C", 17.5),
        ("saturated, 0 °C", 0),
        ("saturated", None),
    ],
)
def test_saturated_keeps_its_temperature(text: str, celsius: float | None) -> None:
    strength = parse_strength(text)
    assert (strength.unit, strength.celsius) == (StrengthUnit.SATURATED, celsius)


@pytest.mark.parametrize("text", ["saturated at 293 °C", "saturated at -80 °C"])
def test_a_temperature_no_solution_has_is_refused(text: str) -> None:
    with pytest.raises(BadAmount, match="no solution in water"):
        parse_strength(text)


@pytest.mark.parametrize("text", ["saturated at 20", "saturated at noon"])
def test_words_after_saturated_that_are_no_temperature_are_refused(text: str) -> None:
    with pytest.raises(BadAmount, match="how strong"):
        parse_strength(text)


@pytest.mark.parametrize("text", ["1 in 10", "1:10", "1+9", "10 in 100", "1 part in 10 parts"])
def test_one_part_in_ten_is_of_the_whole(text: str) -> None:
    # "1:5" is one part in five in all: US Army course MD0837 (a); "1+9": ISO usage, from memory
    for written in (text, f"{text} of 36 % w/w"):
        assert parse_strength(written).value == pytest.approx(10)


def test_what_is_diluted_stands_after_of() -> None:
    stock = parse_strength("1 in 10 of 100 vol at 24 dm3/mol").part_of
    assert stock is not None
    assert (stock.value, stock.unit, stock.gas_volume) == (100, StrengthUnit.VOL, 24)


def test_what_is_diluted_must_be_a_strength() -> None:
    with pytest.raises(BadAmount, match="Which: g in 100"):
        parse_strength("1 in 10 of 36 %")


def test_a_range_keeps_the_words_on_both_ends() -> None:
    low, high = parse_strength_range("0.1-0.2 N for acid-base")
    assert (low.reaction, high.reaction, high.value) == ("acid-base", "acid-base", 0.2)


@given(st.text(max_size=40))
def test_any_text_is_read_or_refused_in_words(text: str) -> None:
    with suppress(StockroomError):
        assert parse_strength(text).text == text.strip()


@given(st.integers(1, 10**6))
def test_an_nth_normal_is_one_over_n(parts: int) -> None:
    assert parse_strength(f"N/{parts} for acid-base").value * parts == pytest.approx(1)
