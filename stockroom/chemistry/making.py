"""Making-up sums: what to weigh and what to measure for so much solution.

A solution is made up *to* its volume, so no sum here adds volumes together.
"""

from __future__ import annotations

from stockroom.chemistry.figures import fraction, positive
from stockroom.errors import BadAmount, NotAllowed
from stockroom.measure.formats import format_strength

_CM3_PER_DM3 = 1000.0

# Two routes to the same strength differ in the last bits of a float, and that is no shortfall.
_SAME = 1e-9


def mass_for(volume_cm3: float, molar: float, *, molar_mass: float, assay: float = 1.0) -> float:
    """The g to weigh for `volume_cm3` of `molar` mol/dm³.

    `molar_mass` in g/mol is that of the form in the bottle, water of crystallisation
    and all; `assay` is the fraction of it that is the substance, above 0 and up to 1.
    Raises: BadAmount for a figure outside its range.

    >>> round(mass_for(2000, 0.200, molar_mass=248.184), 2)
    99.27
    """
    moles = positive(volume_cm3, "volume", "cm³") * positive(molar, "strength", "mol/dm³")
    return moles / _CM3_PER_DM3 / content_per_gram(molar_mass, assay)


def molar_from_mass(
    mass_g: float, volume_cm3: float, *, molar_mass: float, assay: float = 1.0
) -> float:
    """The mol/dm³ that `mass_g` made up to `volume_cm3` gives; `mass_for` undone."""
    moles = positive(mass_g, "mass", "g") * content_per_gram(molar_mass, assay)
    return moles * _CM3_PER_DM3 / positive(volume_cm3, "volume", "cm³")


def volume_from_mass(
    mass_g: float, molar: float, *, molar_mass: float, assay: float = 1.0
) -> float:
    """The cm³ of `molar` mol/dm³ that `mass_g` makes: all there is, made up to what it gives.

    Raises: BadAmount for a figure outside its range.

    >>> round(volume_from_mass(75.6, 0.839, molar_mass=60.052))
    1500
    """
    moles = positive(mass_g, "mass", "g") * content_per_gram(molar_mass, assay)
    return moles * _CM3_PER_DM3 / positive(molar, "strength", "mol/dm³")


def mass_in_form(mass_g: float, *, molar_mass: float, instead: float, assay: float = 1.0) -> float:
    """The g of another form that hold as much substance as `mass_g` of one.

    `molar_mass` is of the form the mass is for, `instead` of the form in the bottle,
    both in g/mol and for as many moles of the substance; `assay` is of the latter.
    Raises: BadAmount for a figure outside its range.

    >>> round(mass_in_form(10.0, molar_mass=159.6, instead=177.6), 2)
    11.13
    """
    moles = positive(mass_g, "mass", "g") / positive(molar_mass, "molar mass", "g/mol")
    return moles / content_per_gram(instead, assay)


def content_per_gram(molar_mass: float, assay: float = 1.0) -> float:
    """The mol of substance in one g of what the bottle holds."""
    return fraction(assay, "assay") / positive(molar_mass, "molar mass", "g/mol")


def volume_of_stock(
    volume_cm3: float, wanted: float, stock: float, *, unit: str = "mol/dm3"
) -> float:
    """The cm³ of `stock` to make up to `volume_cm3` of `wanted`, both in `unit`.

    Any unit of solute per volume does; % w/w and ppm m/m do not.
    Raises: NotAllowed when `wanted` is above `stock`; BadAmount for a figure not above 0.

    >>> round(volume_of_stock(1000, 0.200, 1.06), 1)
    188.7
    """
    positive(volume_cm3, "volume", "cm³")
    positive(wanted, "strength", unit)
    positive(stock, "stock strength", unit)
    if wanted > stock * (1 + _SAME):
        raise NotAllowed(
            f"Cannot reach {format_strength(wanted, unit)} from {format_strength(stock, unit)}.",
            "Open a stronger bottle or lower the need.",
        )
    # never more than the whole volume, whatever the last bits say
    return volume_cm3 * min(wanted / stock, 1.0)


def strength_after(volume_cm3: float, stock: float, total_cm3: float) -> float:
    """The strength of `volume_cm3` of `stock` once it fills `total_cm3`; in the unit of `stock`.

    A total below the volume is water lost: the strength rises.
    Raises: BadAmount for a figure not above 0.
    """
    # the solute stays; only the volume it fills changes
    solute = positive(volume_cm3, "volume", "cm³") * positive(stock, "stock strength")
    return solute / positive(total_cm3, "total volume", "cm³")


def molarity_of_liquid(percent_ww: float, density: float, molar_mass: float) -> float:
    """The mol/dm³ of a bottled liquid from its label: % w/w, g/cm³, g/mol.

    Raises: BadAmount for a figure not above 0, or above 100 %.

    >>> round(molarity_of_liquid(36, 1.18, 36.461), 2)
    11.65
    """
    if percent_ww > 100:
        raise BadAmount(f"{percent_ww:g} % w/w: more than the whole.", "Read the label again.")
    share = positive(percent_ww, "strength", "% w/w") / 100
    grams = share * positive(density, "density", "g/cm³") * _CM3_PER_DM3
    return grams / positive(molar_mass, "molar mass", "g/mol")
