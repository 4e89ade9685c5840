"""Hypochlorite by the published law: rate constants and half-lives, and where it is only a guess.

a = seen, b = worked out again from seen figures, c = from memory.
"""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount
from stockroom.keeping.hypochlorite import doubts, ionic_strength, rate_constant
from stockroom.keeping.laws import days_to_part, kinetics, strength_after, warmth
from stockroom.keeping.rules import Law

BLEACH = Law(2, 0.0, 25.0, named="hypochlorite")
GRAMS_OF_CHLORINE = 70.906


def molar(trade_percent: float) -> float:
    """mol/dm³ of a bleach of so many trade per cent: 10 g/dm³ of available chlorine each."""
    return 10 * trade_percent / GRAMS_OF_CHLORINE


@pytest.mark.parametrize(("salt", "k"), [(1, 1.43e-8), (3, 2.84e-8), (6, 7.95e-8)])
def test_rate_constants_at_25_degrees(salt: float, k: float) -> None:
    # Source: Adam and Gordon 1999, Inorg. Chem. 38:1299, abstract (a), evaluated (b)
    assert rate_constant(25, salt) == pytest.approx(k, rel=5e-3)


def test_ten_degrees_are_a_factor_of_3_9() -> None:
    # the same, evaluated (b); a supplier's note says about 3 for 12.5 % (a)
    assert rate_constant(35, 1) / rate_constant(25, 1) == pytest.approx(3.919, abs=5e-4)
    assert warmth(BLEACH, 35) == pytest.approx(3.919, abs=5e-4)


@pytest.mark.parametrize(
    ("celsius", "trade", "days"),
    [
        (25, 15, 124), (25, 12.5, 190), (25, 10, 302), (25, 5, 980),
        (15, 15, 534), (15, 12.5, 817), (15, 10, 1300), (15, 5, 4219),
    ],
)  # fmt: skip
def test_half_lives_by_strength_and_temperature(celsius: float, trade: float, days: float) -> None:
    # the same law with μ = 2 C + 0.05 as made, worked out (b)
    law = Law(2, 0.0, celsius, named="hypochlorite")
    assert days_to_part(molar(trade), 0.5, law) == pytest.approx(days, rel=0.01)


@pytest.mark.parametrize(
    ("trade", "celsius", "days"),
    # half-lives widely reprinted from bleach bulletins: from memory (c), good to a factor of 1.5
    [(10, 25, 220), (5, 25, 790), (5, 15, 5000)],
)
def test_reprinted_half_lives_are_of_the_same_order(
    trade: float, celsius: float, days: float
) -> None:
    law = Law(2, 0.0, celsius, named="hypochlorite")
    assert 1 / 1.5 < days_to_part(molar(trade), 0.5, law) / days < 1.5


def test_one_reprinted_half_life_does_not_fit_the_law() -> None:
    # 10 % at 15 °C is reprinted as 800 d (from memory), and the published law gives 1300 d: the
    # law is kept, and the row is not made to fit by a wider factor for all
    law = Law(2, 0.0, 15, named="hypochlorite")
    assert days_to_part(molar(10), 0.5, law) / 800 == pytest.approx(1300 / 800, rel=0.01)


def test_its_salt_stays_as_it_was_made() -> None:
    # 3 OCl⁻ → ClO₃⁻ + 2 Cl⁻ and 2 OCl⁻ → O₂ + 2 Cl⁻ keep the number of single charges, so an
    # old bleach fades faster than a fresh one made at the strength the old one has come to
    old = strength_after(1.0, BLEACH, 30, made_as=2.0)
    assert old < strength_after(1.0, BLEACH, 30)
    assert ionic_strength(2.0) == 4.05


@given(st.floats(0.1, 3.0), st.floats(0.0, 5000.0), st.floats(0.0, 5000.0))
def test_two_spans_of_time_are_their_sum(start: float, one: float, two: float) -> None:
    law = kinetics(BLEACH, start)
    through = strength_after(strength_after(start, law, one), law, two)
    assert through == pytest.approx(strength_after(start, law, one + two), rel=1e-9)


def test_inside_what_was_measured_there_is_no_doubt() -> None:
    assert doubts(1.7, 1.2, 19, 25) == ()


@pytest.mark.parametrize(
    ("made", "now", "cold", "warm", "words"),
    [
        (1.7, 1.2, 5, 20, "at 5 °C it is a guess: the law was fitted to 15 to 55 °C"),
        (1.7, 1.2, 20, 60, "at 60 °C it is a guess"),
        (0.05, 0.05, 20, 20, "made at 0.05 mol/dm³ it is a guess"),
        (1.0, 0.5, 20, 20, "down at 0.5 mol/dm³ it is a guess"),
        (0.4, 0.4, 20, 20, "of ionic strength 0.85 mol/dm³ it is a guess"),
        (None, 1.0, 20, 20, "how strong it was made is not known"),
    ],
)
def test_outside_it_is_a_guess_in_words(
    made: float | None, now: float, cold: float, warm: float, words: str
) -> None:
    assert any(told.startswith(words) for told in doubts(made, now, cold, warm))


def test_less_salt_than_none_is_refused() -> None:
    with pytest.raises(BadAmount, match="An ionic strength of -1 is below none"):
        rate_constant(25, -1)


def test_a_law_of_another_name_is_refused() -> None:
    with pytest.raises(BadAmount, match='No law is called "bromite"'):
        kinetics(Law(2, 0.0, named="bromite"), 1.0)
