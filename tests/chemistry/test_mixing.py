from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.densities import density_at
from stockroom.chemistry.making import molarity_of_liquid
from stockroom.chemistry.mixing import (
    Weighed,
    by_mass,
    by_mass_and_density,
    by_volume,
    mass_in,
    mean_strength,
    molar_of_neat,
    neat_volume,
    part_in,
    serial_strengths,
    total_factor,
    volume_holding,
    water_to_add,
)
from stockroom.errors import BadAmount, NotAllowed


# Mixing two: tutor pages and an Ansel-type exercise (WEB), a+b, exact.
@pytest.mark.parametrize(
    ("volume", "wanted", "first", "second", "parts"),
    [
        (260, 95, 35, 100, (20, 240)),
        (20, 70, 50, 100, (12, 8)),
        (1000, 3.5, 7, 2, (300, 700)),
        (1000, 25, 70, 0, (357.14, 642.86)),  # a pharmacy page rounds this to 360 and 640
    ],
)
def test_two_strengths_mix_to_a_third(
    volume: float, wanted: float, first: float, second: float, parts: tuple[float, float]
) -> None:
    assert by_volume(volume, wanted, first, second) == pytest.approx(parts, abs=0.005)
    assert by_mass(volume, wanted, first, second) == pytest.approx(parts, abs=0.005)


def test_three_strengths_have_a_mean() -> None:
    # alligation as taught: amount × strength over the amount; worked out here
    assert mean_strength([(200, 50), (300, 20), (500, 5)]) == pytest.approx(18.5)


def test_the_mean_of_a_solution_and_water_is_a_dilution() -> None:
    """OpenStax, example 3.22 check (a+b): 135 g of HCl in 775 g of water is 14.8 %."""
    assert mean_strength([(135, 100), (775, 0)]) == pytest.approx(14.835, abs=5e-4)


def test_all_of_a_solution_is_watered_down() -> None:
    """US Army MD0802 (b): 300 cm³ of 70 % to 40 % takes 225 cm³, volumes taken as additive."""
    assert water_to_add(300, 70, 40, unit="% v/v") == pytest.approx(225)


def test_three_halvings_are_one_in_eight() -> None:
    """US Army MD0837 6-4 (a+b)."""
    assert total_factor([2, 2, 2]) == 8
    assert serial_strengths(1.0, [2, 2, 2]) == (0.5, 0.25, 0.125)


def test_one_in_five_is_one_part_of_five_in_total() -> None:
    """US Army MD0837 6-4 (a+b): 40 cm³ of a 1:5 dilution holds 8 cm³ of the stock."""
    assert part_in(40, 5) == (8, 32)


def test_one_in_one_is_undiluted() -> None:
    assert part_in(100, 1) == (100, 0)


# Sums of % w/w, g/cm³ and volume: OpenStax (OSX) and US Army MD0837 (AM), a+b unless said.
@pytest.mark.parametrize(
    ("found", "printed", "within"),
    [
        pytest.param(mass_in(500, 37.2, 1.19), 221, 0.5, id="OSX 3.23"),
        pytest.param(volume_holding(125, 37.2, 1.19), 282, 0.5, id="OSX 3.23 check"),
        pytest.param(mass_in(1, 70.0, 1.42), 0.994, 1e-3, id="AM nitric, g/cm³"),
        pytest.param(mass_in(100, 70.0, 1.42), 99.4, 0.1, id="AM nitric, g in 100 cm³"),
        pytest.param(volume_holding(98.1, 95.0, 1.84), 56.1, 0.1, id="AM sulfuric"),
        pytest.param(volume_holding(50.0, 38.0, 1.19), 111, 0.5, id="AM hydrochloric"),
        pytest.param(mass_in(100, 26.0, 0.960), 24.96, 0.05, id="AM 8-4, b, as NH4OH"),
        pytest.param(
            750 * 4.00 / molarity_of_liquid(26.0, 0.960, 35.05), 421, 0.8, id="AM 8-3, b, as NH4OH"
        ),
        pytest.param(
            3 * 12.5 / 1000 * molarity_of_liquid(87.0, 1.70, 97.995), 0.566, 6e-4, id="AM 8-10, b"
        ),
    ],
)
def test_bottled_liquids_hold_what_the_books_say(
    found: float, printed: float, within: float
) -> None:
    assert found == pytest.approx(printed, abs=within)


def test_two_litres_of_four_per_cent_take_80_cm3_of_the_neat_acid() -> None:
    """Harvey, Modern Analytical Chemistry, example 2.9c (a+b), exact."""
    assert by_volume(2000, 4, 100, unit="% v/v")[0] == pytest.approx(80)


def test_a_neat_liquid_is_measured_by_its_density() -> None:
    """Worked out here: 0.100 mol of 74.12 g/mol at 0.8095 g/cm³ is 9.156 cm³."""
    found = neat_volume(1000, 0.100, density=0.8095, molar_mass=74.12)
    assert found == pytest.approx(7.412 / 0.8095, rel=1e-12)


def test_a_less_pure_liquid_takes_more() -> None:
    pure = neat_volume(100, 0.5, density=1.05, molar_mass=60.05)
    assert neat_volume(100, 0.5, density=1.05, molar_mass=60.05, assay=0.5) == pytest.approx(
        2 * pure
    )


def test_no_more_than_neat_can_be_had() -> None:
    with pytest.raises(NotAllowed, match="Cannot reach 18 mol/dm³"):
        neat_volume(100, 18, density=1.05, molar_mass=60.05)


def acid(percent: float) -> Weighed:
    return Weighed(percent, density_at("H2SO4", percent).value)


def test_strong_acid_and_water_come_to_less_than_their_volumes() -> None:
    """Worked out here from the tables: 1 dm³ of 50 % sulfuric acid from 98 % and water."""
    made = by_mass_and_density(1000, acid(50), acid(98), acid(0))
    assert made.first_g == pytest.approx(1395.2 * 50 / 98)
    assert made.second_cm3 == pytest.approx(1395.2 * 48 / 98 / 0.9982)
    assert made.lost_cm3 == pytest.approx(72.3, abs=0.2)


def test_dilute_solutions_hardly_lose_any() -> None:
    salt = [Weighed(p, density_at("NaCl", p).value) for p in (1, 2, 0)]
    assert abs(by_mass_and_density(1000, *salt).lost_cm3) < 0.3


@pytest.mark.parametrize(("wanted", "first", "second"), [(8, 7, 2), (1, 7, 2), (3, 2, 2)])
def test_nothing_outside_the_two_can_be_mixed(wanted: float, first: float, second: float) -> None:
    with pytest.raises(NotAllowed, match=f"Cannot reach {wanted:g} % w/v from 2 % w/v and"):
        by_volume(1000, wanted, first, second, unit="% w/v")


def test_two_alike_mix_to_themselves() -> None:
    assert by_volume(100, 2, 2, 2) == (100, 0)


def test_water_makes_nothing_stronger() -> None:
    with pytest.raises(NotAllowed, match="Cannot reach 80 % v/v"):
        water_to_add(300, 70, 80, unit="% v/v")


@pytest.mark.parametrize("figure", [-1.0, math.nan, math.inf])
def test_a_strength_below_nothing_is_refused(figure: float) -> None:
    for strengths in ((figure, 2, 1), (1, figure, 0), (1, 2, figure)):
        with pytest.raises(BadAmount, match="0 or more"):
            by_volume(100, *strengths)


@pytest.mark.parametrize("figure", [0.0, -1.0, math.nan, math.inf])
def test_an_amount_not_above_0_is_refused(figure: float) -> None:
    for refused in (by_volume, by_mass):
        with pytest.raises(BadAmount, match="above 0"):
            refused(figure, 1, 2)
    with pytest.raises(BadAmount, match="above 0"):
        mean_strength([(figure, 1)])


def test_more_than_all_of_it_is_refused() -> None:
    with pytest.raises(BadAmount, match="101 % w/w"):
        by_mass(100, 50, 101)


@pytest.mark.parametrize("parts", [0.5, 0.0, -3.0, math.nan])
def test_a_dilution_has_at_least_one_part(parts: float) -> None:
    with pytest.raises(BadAmount, match="1 in"):
        part_in(100, parts)
    with pytest.raises(BadAmount, match="1 in"):
        total_factor([2, parts])


def test_nothing_has_no_mean_and_no_factor() -> None:
    with pytest.raises(BadAmount, match="0 parts"):
        mean_strength([])
    with pytest.raises(BadAmount, match="0 steps"):
        total_factor([])


STRENGTHS = st.floats(0.01, 100)


@given(st.floats(1, 5000), STRENGTHS, st.floats(0, 100), st.floats(0, 1))
def test_the_parts_fill_the_whole_and_hold_its_solute(
    whole: float, first: float, second: float, share: float
) -> None:
    wanted = share * first + (1 - share) * second
    one, other = by_volume(whole, wanted, first, second)
    assert one + other == pytest.approx(whole)
    assert one * first + other * second == pytest.approx(whole * wanted, rel=1e-9)


@given(st.lists(st.tuples(st.floats(0.1, 1000), st.floats(0, 50)), min_size=1, max_size=6))
def test_a_mean_lies_between_the_weakest_and_the_strongest(
    parts: list[tuple[float, float]],
) -> None:
    strengths = [strength for _, strength in parts]
    assert min(strengths) - 1e-9 <= mean_strength(parts) <= max(strengths) + 1e-9


@given(st.floats(1, 5000), STRENGTHS, STRENGTHS, st.floats(0, 1))
def test_the_mean_of_what_was_mixed_is_what_was_wanted(
    whole: float, first: float, second: float, share: float
) -> None:
    wanted = share * first + (1 - share) * second
    one, other = by_mass(whole, wanted, first, second)
    poured = [(each, w) for each, w in ((one, first), (other, second)) if each > 0]
    assert mean_strength(poured) == pytest.approx(wanted, rel=1e-9)


@given(st.floats(0, 100), st.floats(0, 100), st.floats(0, 1))
def test_masses_add_whatever_the_volumes_do(one: float, other: float, share: float) -> None:
    wanted = share * one + (1 - share) * other
    made = by_mass_and_density(1000, acid(wanted), acid(one), acid(other))
    assert made.first_g + made.second_g == pytest.approx(1000 * acid(wanted).density)
    solute = made.first_g * one + made.second_g * other
    assert solute == pytest.approx(1000 * acid(wanted).density * wanted, rel=1e-9, abs=1e-6)


@given(st.floats(1, 5000), st.floats(1, 100), st.floats(0.1, 3))
def test_volume_and_mass_of_a_bottled_liquid_undo_one_another(
    volume: float, percent: float, dense: float
) -> None:
    assert volume_holding(mass_in(volume, percent, dense), percent, dense) == pytest.approx(volume)


@given(st.floats(0.01, 20), st.lists(st.floats(1, 100), min_size=1, max_size=5))
def test_a_row_of_dilutions_ends_at_the_stock_over_the_total_factor(
    stock: float, steps: list[float]
) -> None:
    assert serial_strengths(stock, steps)[-1] == pytest.approx(stock / total_factor(steps))


@given(st.floats(1, 5000), st.floats(1e-3, 1))
def test_a_neat_liquid_gives_its_molar_strength(volume: float, share: float) -> None:
    neat = molar_of_neat(0.79, 32.04)
    taken = neat_volume(volume, share * neat, density=0.79, molar_mass=32.04)
    assert taken == pytest.approx(share * volume)
