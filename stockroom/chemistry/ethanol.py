"""Ethanol and water at 20 °C: % by mass, % by volume, density, mol/dm³, and the water to add.

The volumes do not add: 729 cm³ of 96 % vol and 271 cm³ of water come to less than a litre.
Masses do add, so every sum here is done by mass and told in both.

Source of the densities: OIML R 22 (1973), in `densities/oiml.py`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from stockroom.chemistry.densities.oiml import NAMES, ethanol_density
from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount, NotAllowed

MOLAR_MASS = 46.0684
"""Ethanol, g/mol. Source: NIST isotopic masses, through molmass."""

_PURE, _WATER = 100.0, 0.0
_CM3_PER_DM3 = 1000.0
_HALVINGS = 60
_SAME = 1e-9


@dataclass(frozen=True, slots=True)
class WaterToAdd:
    """What a dilution takes: stock and water in cm³ and in g, for `total_cm3` at 20 °C.

    `lost_cm3` is by how much stock and water together exceed the volume they make.
    """

    stock_cm3: float
    stock_g: float
    water_cm3: float
    water_g: float
    total_cm3: float

    @property
    def lost_cm3(self) -> float:
        """The volume that goes when the two are mixed."""
        return self.stock_cm3 + self.water_cm3 - self.total_cm3


def is_ethanol(name: str) -> bool:
    """Is this ethanol, by its name or formula?"""
    return " ".join(name.split()).casefold() in NAMES


def vol_from_mass(percent_mass: float) -> float:
    """% by volume of an ethanol given in % by mass, at 20 °C, 0 to 100.

    Raises: BadAmount outside 0 to 100.
    Source: definition in OIML R 22 (1973): cm³ of pure ethanol in 100 cm³.

    >>> round(vol_from_mass(50), 2)
    57.89
    """
    return percent_mass * ethanol_density(percent_mass) / ethanol_density(_PURE)


def mass_from_vol(percent_vol: float) -> float:
    """% by mass of an ethanol given in % by volume, at 20 °C; `vol_from_mass` undone.

    Raises: BadAmount outside 0 to 100.

    >>> round(mass_from_vol(96), 2)
    93.84
    """
    _checked(percent_vol)
    # by halving: the density is a table's polynomial in % by mass, with no inverse
    weak, strong = _WATER, _PURE
    for _ in range(_HALVINGS):
        middle = (weak + strong) / 2
        weak, strong = (middle, strong) if vol_from_mass(middle) < percent_vol else (weak, middle)
    return strong if percent_vol else _WATER


def density_from_vol(percent_vol: float) -> float:
    """The g/cm³ at 20 °C of an ethanol of so many % by volume. Raises: BadAmount."""
    return ethanol_density(mass_from_vol(percent_vol))


def molar_from_vol(percent_vol: float) -> float:
    """The mol/dm³ at 20 °C of an ethanol of so many % by volume. Raises: BadAmount.

    >>> round(molar_from_vol(96), 2)
    16.45
    """
    return _checked(percent_vol) / 100 * _pure_molar()


def vol_from_molar(molar: float) -> float:
    """The % by volume at 20 °C of so many mol/dm³; `molar_from_vol` undone.

    Raises: BadAmount below 0, and above what pure ethanol holds.
    """
    found = 100 * molar / _pure_molar()
    if not 0 <= found <= _PURE * (1 + _SAME):
        raise BadAmount(
            f"ethanol {molar:g} mol/dm³: pure ethanol is {_pure_molar():.2f} mol/dm³.",
            "Check the strength.",
        )
    return min(found, _PURE)


def dilute(volume_cm3: float, wanted_vol: float, stock_vol: float) -> WaterToAdd:
    """The stock and the water for `volume_cm3` of `wanted_vol` from `stock_vol`, both % by volume.

    `volume_cm3` at 20 °C. The stock may be measured by volume, since its alcohol is kept
    however much the mixture shrinks; the water is what is wanting in mass.
    Raises: NotAllowed when the stock is weaker than what is wanted; BadAmount.
    Source: masses by OIML R 22.

    >>> made = dilute(1000, 70, 96)
    >>> round(made.stock_cm3, 2), round(made.water_cm3, 1)
    (729.17, 297.4)
    """
    positive(volume_cm3, "volume", "cm³")
    positive(_checked(wanted_vol), "strength", "% v/v")
    _checked(stock_vol)
    # a strength worked out twice may differ from itself in a float's last bits
    if wanted_vol > stock_vol * (1 + _SAME):
        raise NotAllowed(
            f"Cannot reach {wanted_vol:g} % v/v from {stock_vol:g} % v/v.",
            "Open a stronger bottle or lower the need.",
        )
    stock = volume_cm3 * min(wanted_vol / stock_vol, 1.0)
    grams = stock * density_from_vol(stock_vol)
    # the last bits may leave less than nothing when nothing is added
    water = max(volume_cm3 * density_from_vol(wanted_vol) - grams, 0.0)
    return WaterToAdd(stock, grams, water / ethanol_density(_WATER), water, volume_cm3)


def _pure_molar() -> float:
    return ethanol_density(_PURE) * _CM3_PER_DM3 / MOLAR_MASS


def _checked(percent: float) -> float:
    if math.isfinite(percent) and 0 <= percent <= _PURE:
        return percent
    raise BadAmount(f"ethanol {percent:g} % by volume: not from 0 to 100.", "Read it again.")
