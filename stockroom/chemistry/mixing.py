"""Mixing and diluting: two strengths to a third, water to add, serial steps, neat liquids.

Three ways of counting, each told apart by its name. `by_volume` takes volumes as additive,
which is near enough for dilute solutions stated per volume; `by_mass` is exact for % w/w;
`by_mass_and_density` is exact too and tells the volumes, which then shrink (or grow).

"1 in 5" is one part in five parts in total, everywhere.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from stockroom.chemistry.figures import fraction, positive
from stockroom.errors import BadAmount, NotAllowed
from stockroom.measure.formats import format_strength

_SAME = 1e-9
_CM3_PER_DM3 = 1000.0
_WW = "% w/w"


@dataclass(frozen=True, slots=True)
class Weighed:
    """A solution by its % w/w and its g/cm³; water is (0, 0.9982) at 20 °C."""

    percent_ww: float
    density: float


@dataclass(frozen=True, slots=True)
class Mixed:
    """Two parts in g and in cm³ that come to `total_cm3`.

    `lost_cm3` is by how much the two volumes exceed it: below 0 where the mixture swells.
    """

    first_g: float
    second_g: float
    first_cm3: float
    second_cm3: float
    total_cm3: float

    @property
    def lost_cm3(self) -> float:
        """The volume that goes when the two are mixed."""
        return self.first_cm3 + self.second_cm3 - self.total_cm3


def by_volume(
    volume_cm3: float, wanted: float, first: float, second: float = 0.0, *, unit: str = "mol/dm3"
) -> tuple[float, float]:
    """The cm³ of `first` and of `second` that mix to `volume_cm3` of `wanted`, all in `unit`.

    A unit of solute per volume; volumes are taken as additive, and 0 is water.
    Raises: NotAllowed when `wanted` does not lie between the two; BadAmount.

    >>> by_volume(1000, 3.5, 7, 2, unit="% w/v")
    (300.0, 700.0)
    """
    share = _share(wanted, first, second, unit)
    whole = positive(volume_cm3, "volume", "cm³")
    return whole * share, whole * (1 - share)


def by_mass(mass_g: float, wanted: float, first: float, second: float = 0.0) -> tuple[float, float]:
    """The g of `first` and of `second` that mix to `mass_g` of `wanted`, all in % w/w.

    Exact, since masses add. Raises: as `by_volume`; BadAmount above 100 %.
    """
    share = _share(_percent(wanted), _percent(first), _percent(second), _WW)
    whole = positive(mass_g, "mass", "g")
    return whole * share, whole * (1 - share)


def by_mass_and_density(
    volume_cm3: float, wanted: Weighed, first: Weighed, second: Weighed
) -> Mixed:
    """The g and cm³ of two solutions that come to `volume_cm3` of a third.

    The three densities at one temperature; with them nothing is taken as additive.
    Raises: as `by_mass`; BadAmount for a density not above 0.
    """
    whole = positive(volume_cm3, "volume", "cm³") * positive(wanted.density, "density", "g/cm³")
    one, other = by_mass(whole, wanted.percent_ww, first.percent_ww, second.percent_ww)
    return Mixed(
        one,
        other,
        one / positive(first.density, "density", "g/cm³"),
        other / positive(second.density, "density", "g/cm³"),
        volume_cm3,
    )


def mean_strength(parts: Sequence[tuple[float, float]]) -> float:
    """The strength of several amounts poured together: (amount, strength) each.

    Amounts in g with strengths in % w/w give the exact one; in cm³ with strengths per
    volume, that of volumes taken as additive. Water is a part of strength 0.
    Raises: BadAmount without parts, for an amount not above 0 or a strength below 0.

    >>> mean_strength([(200, 50), (300, 20), (500, 5)])
    18.5
    """
    if not parts:
        raise BadAmount(f"{len(parts)} parts have no strength.", "Give at least one.")
    solute = sum(positive(amount, "amount") * _from_0(strength) for amount, strength in parts)
    return solute / sum(amount for amount, _ in parts)


def water_to_add(volume_cm3: float, stock: float, wanted: float, *, unit: str = "mol/dm3") -> float:
    """The cm³ of water that bring all of `volume_cm3` of `stock` down to `wanted`.

    Any unit of solute per volume; volumes are taken as additive, so for ethanol see
    `ethanol.py`. Raises: NotAllowed when `wanted` is the stronger; BadAmount.

    >>> water_to_add(300, 70, 40, unit="% v/v")
    225.0
    """
    positive(wanted, "strength", unit)
    _share(wanted, stock, 0.0, unit)
    return positive(volume_cm3, "volume", "cm³") * max(stock / wanted - 1, 0.0)


def part_in(total_cm3: float, parts: float) -> tuple[float, float]:
    """The cm³ to take and the cm³ of water for a dilution of 1 in `parts`, one in the total.

    Raises: BadAmount for fewer than 1 part, and for a volume not above 0.

    >>> part_in(40, 5)
    (8.0, 32.0)
    """
    if not (math.isfinite(parts) and parts >= 1):
        raise BadAmount(
            f"1 in {parts:g}: one part of fewer than one.", '"1 in 5" is one part in five in total.'
        )
    part = positive(total_cm3, "volume", "cm³") / parts
    return part, total_cm3 - part


def total_factor(steps: Sequence[float]) -> float:
    """How many times weaker a row of "1 in N" dilutions makes a solution: the product.

    Raises: BadAmount without steps, or for a step below 1.

    >>> total_factor([2, 2, 2])
    8.0
    """
    if not steps:
        raise BadAmount(f"{len(steps)} steps dilute nothing.", "Give at least one.")
    for step in steps:
        part_in(1.0, step)
    return float(math.prod(steps))


def serial_strengths(stock: float, steps: Sequence[float]) -> tuple[float, ...]:
    """The strength after each of a row of "1 in N" dilutions, in the unit of `stock`.

    Raises: as `total_factor`.
    """
    total_factor(steps)
    strengths = [positive(stock, "stock strength")]
    for step in steps:
        strengths.append(strengths[-1] / step)
    return tuple(strengths[1:])


def molar_of_neat(density: float, molar_mass: float, assay: float = 1.0) -> float:
    """The mol/dm³ of a neat liquid from its g/cm³ and g/mol; `assay` is a fraction.

    Raises: BadAmount for a figure outside its range.
    """
    grams = positive(density, "density", "g/cm³") * _CM3_PER_DM3 * fraction(assay, "assay")
    return grams / positive(molar_mass, "molar mass", "g/mol")


def neat_volume(
    volume_cm3: float, molar: float, *, density: float, molar_mass: float, assay: float = 1.0
) -> float:
    """The cm³ of a neat liquid to make up to `volume_cm3` of `molar` mol/dm³.

    Raises: NotAllowed above what the neat liquid itself holds; BadAmount.

    >>> round(neat_volume(1000, 0.100, density=0.8095, molar_mass=74.12), 2)
    9.16
    """
    neat = molar_of_neat(density, molar_mass, assay)
    return by_volume(volume_cm3, positive(molar, "strength", "mol/dm³"), neat)[0]


def mass_in(volume_cm3: float, percent_ww: float, density: float) -> float:
    """The g of solute in so many cm³ of a bottled liquid, from its % w/w and g/cm³.

    Raises: BadAmount for a figure not above 0, or above 100 %.

    >>> round(mass_in(500, 37.2, 1.19), 1)
    221.3
    """
    liquid = positive(volume_cm3, "volume", "cm³") * positive(density, "density", "g/cm³")
    return liquid * positive(_percent(percent_ww), "strength", _WW) / 100


def volume_holding(mass_g: float, percent_ww: float, density: float) -> float:
    """The cm³ of a bottled liquid that hold `mass_g` of solute; `mass_in` undone.

    >>> round(volume_holding(98.1, 95.0, 1.84), 1)
    56.1
    """
    return positive(mass_g, "mass", "g") / mass_in(1.0, percent_ww, density)


def _share(wanted: float, first: float, second: float, unit: str) -> float:
    """Which fraction of the mixture the first is."""
    low, high = sorted((_from_0(first, unit), _from_0(second, unit)))
    # two routes to one strength differ in the last bits of a float
    slack = _SAME * high
    if not low - slack <= _from_0(wanted, unit) <= high + slack:
        ends = f"{format_strength(low, unit)} and {format_strength(high, unit)}"
        raise NotAllowed(
            f"Cannot reach {format_strength(wanted, unit)} from {ends}: it must lie between.",
            "Mixing makes nothing stronger than the stronger, nor weaker than the weaker.",
        )
    # two equal strengths mix to themselves in any proportion: all of the first, and no 0 / 0
    if high - low <= slack:
        return 1.0
    return min(max((wanted - second) / (first - second), 0.0), 1.0)


def _from_0(strength: float, unit: str = "") -> float:
    if math.isfinite(strength) and strength >= 0:
        return strength
    shown = f"{strength:g} {unit}".strip()
    raise BadAmount(f"strength {shown}: it must be 0 or more.", "Check the strength.")


def _percent(percent_ww: float) -> float:
    if percent_ww > 100:
        raise BadAmount(f"{percent_ww:g} % w/w: more than the whole.", "Read the label again.")
    return percent_ww
