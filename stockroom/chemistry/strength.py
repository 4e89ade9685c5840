"""One strength turned into another, with the figure that is missing named.

Every sum goes through g/dm³ of solute, so each unit needs one rule and not one per pair.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.chemistry.figures import positive
from stockroom.chemistry.peroxide import molar_to_vol, vol_to_molar
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.strengths import Strength, StrengthUnit

PER_MOLE = "mol/dm3"
PER_GRAM = "g/dm3"

# 34, 34.01 and 34.02 are all written for peroxide; its nearest neighbour is 2 away
_PEROXIDE = 34.01
_PEROXIDE_WITHIN = 0.1
_CM3_PER_DM3 = 1000.0
_NAOCL, _CHLORINE = 74.442, 70.906  # g/mol, NIST isotopic masses through molmass

# A rounded density may carry pure liquid a little past 100 %; more is a wrong figure.
_ROUNDING = 1.005


@dataclass(frozen=True, slots=True)
class Concentration:
    """A strength fit for sums: `value`, zero or more, in "mol/dm3" or in "g/dm3"."""

    value: float
    unit: str


@dataclass(frozen=True, slots=True)
class _Figures:
    """What is known about a solution; a figure may be missing until a sum asks for it."""

    molar_mass: float | None
    density: float | None
    pure_density: float | None
    shown: str

    def grams_per_mole(self) -> float:
        return self._known(self.molar_mass, "formula, or the molar mass,")

    def grams_per_cm3(self) -> float:
        return self._known(self.density, "density on the label")

    def pure_grams_per_cm3(self) -> float:
        return self._known(self.pure_density, "density of the pure liquid")

    def _known(self, figure: float | None, name: str) -> float:
        if figure is None:
            wanted = "g/dm³" if name.startswith("formula") else "%"
            raise MissingFigure(
                f"{self.shown}: I need the {name} to turn {wanted} into mol/dm³.",
                "Read it off the label or the supplier's data sheet.",
            )
        return positive(figure, name)


def canonical(
    strength: Strength,
    *,
    molar_mass: float | None,
    density: float | None = None,
    pure_density: float | None = None,
    of: str = "",
) -> Concentration:
    """A written strength as mol/dm³ where the molar mass is known, else as g/dm³.

    `molar_mass` in g/mol; `density` of the solution and `pure_density` of the liquid
    solute in g/cm³; `of` names the substance in messages. Without a molar mass a
    strength written in mol/dm³ stays as it is.
    Raises: MissingFigure when a density is wanted, and for "1 in 10" and "saturated",
    which no figure turns into a strength; BadAmount for "vol" of anything but
    hydrogen peroxide and for normality.
    """
    if strength.unit is StrengthUnit.MOLAR:
        return Concentration(strength.value, PER_MOLE)
    figures = _Figures(molar_mass, density, pure_density, f'{of} "{strength.text}"'.strip())
    if strength.unit is StrengthUnit.VOL:
        _only_peroxide(figures)
        return Concentration(vol_to_molar(strength.value), PER_MOLE)
    grams = strength.value * _grams_per_dm3(strength.unit, figures)
    if molar_mass is None:
        return Concentration(grams, PER_GRAM)
    return Concentration(grams / figures.grams_per_mole(), PER_MOLE)


def express(
    conc: Concentration,
    unit: StrengthUnit,
    *,
    molar_mass: float | None,
    density: float | None = None,
    pure_density: float | None = None,
    of: str = "",
) -> float:
    """A concentration in another unit; `canonical` undone.

    Figures as in `canonical`; `density` is that of this very solution.
    Raises: as `canonical`, and BadAmount when a per cent comes out above 100.
    """
    shown = f"{of} {conc.value:g} {conc.unit}".strip()
    figures = _Figures(molar_mass, density, pure_density, shown)
    if unit == conc.unit:
        return conc.value
    if unit is StrengthUnit.VOL:
        _only_peroxide(figures)
        return molar_to_vol(_moles(conc, figures))
    if unit is StrengthUnit.MOLAR:
        return _moles(conc, figures)
    value = _grams(conc, figures) / _grams_per_dm3(unit, figures)
    if unit in (StrengthUnit.WW, StrengthUnit.VV) and value > 100 * _ROUNDING:
        raise BadAmount(
            f"{shown} comes to {value:.4g} {unit}, which cannot be.",
            "Check the density.",
        )
    return value


def hypochlorite_from_chlorine(available_chlorine: float) -> float:
    """% w/v of sodium hypochlorite for a bleach labelled by % w/v of available chlorine.

    One NaOCl oxidises as one Cl2 does, so the masses stand as 74.44 to 70.91.
    Source: molar masses as in `formula.py`.

    >>> round(hypochlorite_from_chlorine(5.00), 2)
    5.25
    """
    return available_chlorine * _NAOCL / _CHLORINE


def _grams_per_dm3(unit: StrengthUnit, figures: _Figures) -> float:
    """How many g/dm³ one of `unit` comes to."""
    if unit is StrengthUnit.GRAMS:
        return 1.0
    if unit is StrengthUnit.WV:
        return 10.0
    if unit is StrengthUnit.PPM_MV:
        return 1e-3
    if unit is StrengthUnit.WW:
        return figures.grams_per_cm3() * _CM3_PER_DM3 / 100
    if unit is StrengthUnit.PPM_MM:
        return figures.grams_per_cm3() * _CM3_PER_DM3 / 1e6
    if unit is StrengthUnit.VV:
        return figures.pure_grams_per_cm3() * _CM3_PER_DM3 / 100
    if unit is StrengthUnit.NORMAL:
        raise BadAmount(f"{figures.shown}: normality needs its reaction.", "Write it in mol/dm3.")
    raise MissingFigure(
        f'{figures.shown}: "{unit}" has no mol/dm³ of its own.',
        "Give the strength it comes to, in mol/dm3 or % w/v.",
    )


def _only_peroxide(figures: _Figures) -> None:
    # without a molar mass nobody knows that it is peroxide
    if figures.molar_mass is None or abs(figures.molar_mass - _PEROXIDE) > _PEROXIDE_WITHIN:
        raise BadAmount(
            f"{figures.shown}: vol is a strength of hydrogen peroxide and of nothing else.",
            "Write it in mol/dm3 or a per cent.",
        )


def _moles(conc: Concentration, figures: _Figures) -> float:
    return conc.value if conc.unit == PER_MOLE else conc.value / figures.grams_per_mole()


def _grams(conc: Concentration, figures: _Figures) -> float:
    return conc.value if conc.unit == PER_GRAM else conc.value * figures.grams_per_mole()
