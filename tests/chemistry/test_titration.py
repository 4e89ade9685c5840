from __future__ import annotations

import pytest

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.titration import (
    factor,
    found_by_titre,
    mean_titre,
    repeatability_of,
)
from stockroom.errors import BadAmount

# mol of the standard, titre in cm³, mol of titrant per mol of standard, found mol/dm³, tolerance.
# Equations: British and Indian Pharmacopoeias, and OpenStax, Chemistry 2e.
TITRES = [
    # recomputed: 25.00 cm³ of 0.01667 mol/dm³ iodate on thiosulfate
    (25.00 * 0.01667 / 1000, 25.33, 6, 0.0987, 5e-5),
    # recomputed: 0.1675 g of sodium oxalate on permanganate
    (0.1675 / molar_mass("Na2C2O4"), 25.91, 0.4, 0.0193, 5e-5),
    # EURACHEM/CITAC QUAM:2012, example A2: hydroxide on hydrogen phthalate
    (0.3888 / 204.2212, 18.64, 1, 0.10214, 1e-5),
    # tutor pages: carbonate on acid, twice; iodate on thiosulfate
    (0.3023 / 105.99, 37.5, 2, 0.1521, 1e-4),
    (0.3542 / 106, 30.23, 2, 0.2211, 1e-4),
    (0.1668 / 214.00, 22.11, 6, 0.212, 5e-4),
]


@pytest.mark.parametrize(("moles", "titre", "ratio", "found", "within"), TITRES)
def test_a_titre_gives_the_worked_strength(
    moles: float, titre: float, ratio: float, found: float, within: float
) -> None:
    assert found_by_titre(moles, titre, ratio=ratio) == pytest.approx(found, abs=within)


def test_acid_against_alkali_comes_out_as_printed() -> None:
    # OpenStax, Chemistry 2e, example 4.14: 35.23 cm³ of 0.250 mol/dm³ NaOH in 50.00 cm³ of HCl
    assert found_by_titre(35.23e-3 * 0.250, 50.00, ratio=1) == pytest.approx(0.176, abs=5e-4)


def test_the_factor_is_found_over_nominal() -> None:
    # recomputed from the oxalate check above
    assert factor(0.0193, 0.0200) == pytest.approx(0.965)


def test_concordant_titres_give_their_mean() -> None:
    assert mean_titre([25.30, 25.40, 25.35]) == pytest.approx(25.35)


def test_titres_0_4_apart_are_not_concordant() -> None:
    with pytest.raises(BadAmount, match=r"Not concordant \(0\.4 cm³\)"):
        mean_titre([25.0, 25.4])


@pytest.mark.parametrize(
    ("titres", "hint"),
    [
        ([25.30, 25.70, 25.35],
         "25.30, 25.35 agree: leave out 25.70, add another, or keep as rough: --within 0.4."),
        ([25.0, 25.4], "Add another, or keep as rough: --within 0.4."),
        # either end might be the one to leave out
        ([25.3, 25.4, 25.5], "Add another, or keep as rough: --within 0.2."),
        ([25.1, 25.5, 25.9], "Add another, or keep as rough: --within 0.8."),
    ],
)  # fmt: skip
def test_titres_that_disagree_are_told_what_to_do(titres: list[float], hint: str) -> None:
    with pytest.raises(BadAmount) as refused:
        mean_titre(titres)
    assert refused.value.hint == hint


def test_what_is_said_to_be_rough_enough_is() -> None:
    # 0.123 apart: a hint rounded down would be refused again
    with pytest.raises(BadAmount, match="Not concordant") as refused:
        mean_titre([25.0, 25.123])
    assert "--within 0.13" in refused.value.hint
    assert mean_titre([25.0, 25.123], within_cm3=0.13) == pytest.approx(25.0615)


def test_repeatability_is_the_relative_standard_deviation() -> None:
    # by hand: 25.30 and 25.40 have a standard deviation of 0.0707, 0.279 % of 25.35
    assert repeatability_of([25.30, 25.40]) == pytest.approx(0.00279, abs=1e-5)
    assert repeatability_of([25.3]) is None


@pytest.mark.parametrize("titres", [[], [0.0], [25.0, -1.0], [float("nan")]])
def test_titres_that_say_nothing_are_refused(titres: list[float]) -> None:
    with pytest.raises(BadAmount):
        mean_titre(titres)


@pytest.mark.parametrize("figure", [0.0, -1.0])
def test_a_figure_not_above_0_is_refused(figure: float) -> None:
    with pytest.raises(BadAmount, match="above 0"):
        found_by_titre(figure, 25, ratio=1)
