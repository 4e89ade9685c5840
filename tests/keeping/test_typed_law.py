"""A law typed in gives the published times, whatever units its figures come in."""

from __future__ import annotations

import math
from datetime import date

import pytest

from stockroom.errors import BadAmount, BadInput
from stockroom.keeping.typed_law import FadingSum, Typed, days_of, fading_sum, law_typed

TODAY = date(2027, 1, 4)


def fades(text: str, typed: Typed, below: str = "", after: str = "") -> FadingSum:
    return fading_sum(text, typed, below=below, after=after, today=TODAY)


@pytest.mark.parametrize(
    ("rate", "per", "below", "days", "within"),
    [
        # Source: OpenStax Chemistry 2e (CC BY), example 12.6 (a): printed 1.7e2 s, 174.9 s (b)
        (9.2e-3, "s", "0.200 M", 174.9 / 86_400, 0.1 / 86_400),
        # the same, check your learning (a): printed 16.7 d, 16.69 d (b)
        (0.138, "day", "0.100 M", 16.69, 0.05),
        # the same, example 12.7 (a): hydrogen peroxide at 40 °C halves in 6.00 h (b)
        (0.11552, "hours", "0.500 M", 0.25, 1e-3),
    ],
)
def test_first_order_takes_the_published_times(
    rate: float, per: str, below: str, days: float, within: float
) -> None:
    found = fades("1.000 M", Typed(1, rate, per), below)
    assert found.below is not None
    assert found.below[1] == pytest.approx(days, abs=within)


def test_first_order_leaves_the_published_strength() -> None:
    # OpenStax 12.7 (a): 0.125 M after 18 h
    found = fades("1.000 M", Typed(1, 0.11552, "h"), after="18 h")
    assert found.after == pytest.approx((0.75, 0.125), rel=1e-3)


@pytest.mark.parametrize(
    ("typed", "t90"),
    [
        # t90 of first order ln(10/9)/k and second 1/(9 k C₀) (a), for 0.01 a day (b)
        (Typed(1, 0.01), 10.5361),
        (Typed(2, 0.01), 11.1111),
        (Typed(0, 0.01), 10.0),
    ],
)
def test_t90_of_a_hundredth_a_day(typed: Typed, t90: float) -> None:
    assert fades("1 M", typed).t90 == pytest.approx(t90, abs=1e-4)


def test_t95_of_a_hundredth_a_day() -> None:
    # 5.1293 d, worked out again (b)
    found = fades("1 M", Typed(1, 0.01), "0.95 M")
    assert found.below is not None
    assert found.below[1] == pytest.approx(5.1293, abs=1e-4)
    assert found.below[2] == date(2027, 1, 10)


def test_strong_bleach_is_at_its_tabled_strength_after_three_months() -> None:
    # 0.0090 per %·month fitted to a table that has 9.28 % at 21 °C (a), 9.3 % (b)
    found = fades("12.5 % w/v", Typed(2, 0.0090, "month", 20, factor=3.5), after="3 months")
    assert found.after is not None
    assert found.after[1] == pytest.approx(9.3, abs=0.05)


def test_a_warmer_place_and_its_energy_are_worked_out() -> None:
    found = fades("1 M", Typed(1, 0.01, at_c=20, to_c=30, factor=2.0))
    assert [found.times, found.rate] == pytest.approx([2.0, 0.02])
    # Ea for a factor of 2 from 20 to 30 °C: 51.22 kJ/mol, worked out again (b)
    assert found.energy == pytest.approx(51.22, abs=0.01)


def test_an_energy_is_told_as_a_factor() -> None:
    # 83.144 kJ/mol is 3.081 from 20 to 30 °C, worked out again (b)
    found = fades("1 M", Typed(1, 0.01, at_c=20, energy=83.144))
    assert found.factor == pytest.approx(3.081, abs=1e-3)


@pytest.mark.parametrize(
    "text", ["2.1155 mol/dm3", "15 % w/v available chlorine", "150 g/l available chlorine"]
)
def test_the_hypochlorite_law_takes_its_strength_in_any_unit(text: str) -> None:
    # 15 % trade halves in 124 d at 25 °C: Adam and Gordon 1999, worked out (b)
    found = fades(text, Typed(at_c=25, named="hypochlorite"))
    assert found.half == pytest.approx(124, rel=0.01)


def test_the_hypochlorite_rate_is_in_moles() -> None:
    # μ = 2 × 1.475 + 0.05 = 3: k₂ = 2.84e-8 (b)
    found = fades("1.475 M", Typed(at_c=25, per="second", named="hypochlorite"))
    assert found.rate_of == "mol/dm3"
    assert found.rate == pytest.approx(2.84e-8, rel=5e-3)


def test_what_never_fades_never_falls() -> None:
    found = fades("1 M", Typed(1, 0.0), "0.5 M")
    assert found.below is not None
    assert found.below[1:] == (math.inf, None)


@pytest.mark.parametrize(
    ("typed", "words"),
    [
        (Typed(rate=0.1), "A law wants its --order"),
        (Typed(order=1), "A law wants its --rate"),
        (Typed(1, 0.1, "fortnight"), '"fortnight" is no unit of time'),
        (Typed(1, 0.1, factor=2.0), "At how many °C is the rate"),
        (Typed(1, 0.1, at_c=20, to_c=30), "The rate at 20 °C says nothing of 30 °C"),
        (Typed(1, 0.1, at_c=20, energy=50, factor=2), "say the same thing twice"),
        (Typed(1, -0.1), "would gain strength"),
        (Typed(4, 0.1), "No decay law of order 4"),
        (Typed(named="hypochlorite"), "At how many °C does it stand"),
        (Typed(2, at_c=20, named="hypochlorite"), "leave --order out"),
        (Typed(at_c=20, named="bromite"), 'No law is called "bromite"'),
    ],
)
def test_what_makes_no_law_is_refused(typed: Typed, words: str) -> None:
    with pytest.raises((BadInput, BadAmount), match=words):
        law_typed(typed)


@pytest.mark.parametrize(("text", "days"), [("90 d", 90), ("6 hours", 0.25), ("1 month", 30.4375)])
def test_a_length_of_time_is_read(text: str, days: float) -> None:
    assert days_of(text, "--after") == pytest.approx(days)


@pytest.mark.parametrize("text", ["soon", "90", "3 moons"])
def test_no_length_of_time_is_refused(text: str) -> None:
    with pytest.raises(BadInput, match=r"no length of time|no unit of time"):
        days_of(text, "--after")


def test_another_unit_is_no_strength_to_fall_below() -> None:
    with pytest.raises(BadAmount, match='"1 M" cannot be set beside "12 % w/v"'):
        fades("12 % w/v", Typed(1, 0.01), "1 M")


def test_nothing_does_not_fade() -> None:
    with pytest.raises(BadAmount, match='strength "0 M" is nothing'):
        fades("0 M", Typed(1, 0.01))
