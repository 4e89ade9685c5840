from __future__ import annotations

import pytest

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.titration import factor, found_by_titre, mean_titre
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


@pytest.mark.parametrize("titres", [[], [0.0], [25.0, -1.0], [float("nan")]])
def test_titres_that_say_nothing_are_refused(titres: list[float]) -> None:
    with pytest.raises(BadAmount):
        mean_titre(titres)


@pytest.mark.parametrize("figure", [0.0, -1.0])
def test_a_figure_not_above_0_is_refused(figure: float) -> None:
    with pytest.raises(BadAmount, match="above 0"):
        found_by_titre(figure, 25, ratio=1)
