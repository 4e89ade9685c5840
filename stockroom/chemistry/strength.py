"""One strength turned into another, with the figure that is missing named.

Every sum goes through mol/dm³ or g/dm³ of solute, so each unit needs one rule and not
one per pair.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.chemistry.figures import positive
from stockroom.chemistry.peroxide import vol_to_molar
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.formats import format_strength
from stockroom.measure.strengths import Strength, StrengthUnit

PER_MOLE = "mol/dm3"
PER_GRAM = "g/dm3"

BY_MASS = frozenset(
    {StrengthUnit.WW, StrengthUnit.PPM_MM, StrengthUnit.MOLAL, StrengthUnit.CHLORINE_WW}
)
"""Units that count a mass of solution or of water: a density brings them to a volume."""

# 34, 34.01 and 34.02 are all written for peroxide; its nearest neighbour is 2 away
_PEROXIDE = 34.01
_PEROXIDE_WITHIN = 0.1
_CM3_PER_DM3 = 1000.0
_NAOCL, _CHLORINE = 74.442, 70.906  # g/mol, NIST isotopic masses through molmass
# mol of Cl2 that a mole oxidises like, by g/mol: NaOCl and its pentahydrate, KOCl, HOCl,
# Ca(OCl)2, Cl2. KCl is 0.11 from the first, so the figure must fit more closely than that
_CHLORINE_PER_MOLE = (
    (_NAOCL, 1), (164.518, 1), (90.551, 1), (52.460, 1), (142.982, 2), (_CHLORINE, 1),
)  # fmt: skip
_BLEACH_WITHIN = 0.05

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
    dry_mass: float | None
    of: str
    shown: str

    def grams_per_mole(self) -> float:
        return self._known(self.molar_mass, "formula, or the molar mass,", "g/dm³")

    def dry_grams_per_mole(self) -> float:
        # water of crystallisation is water once it is dissolved, and molality counts it so
        mass = self.molar_mass if self.dry_mass is None else self.dry_mass
        return self._known(mass, "formula, or the molar mass,", "mol/kg")

    def grams_per_cm3(self) -> float:
        return self._known(self.density, "density on the label", "%")

    def pure_grams_per_cm3(self) -> float:
        return self._known(self.pure_density, "density of the pure liquid", "%")

    def _known(self, figure: float | None, name: str, wanted: str) -> float:
        if figure is None:
            raise MissingFigure(
                f"{self.shown}: I need the {name} to go between {wanted} and mol/dm³.",
                "Read it off the label or the supplier's data sheet.",
            )
        return positive(figure, name)


def canonical(
    strength: Strength,
    *,
    molar_mass: float | None,
    density: float | None = None,
    pure_density: float | None = None,
    dry_mass: float | None = None,
    of: str = "",
) -> Concentration:
    """A written strength as mol/dm³ where the molar mass is known, else as g/dm³.

    `molar_mass` in g/mol; `density` of the solution and `pure_density` of the liquid
    solute in g/cm³; `dry_mass` is the molar mass without its water of crystallisation,
    where it has any; `of` names the substance, in messages and for its normality.
    Without a molar mass a strength counted in moles is mol/dm³ all the same.
    Raises: MissingFigure when a density is wanted, and for "1 in 10" and "saturated",
    which are of something else; BadAmount for "vol" of anything but hydrogen peroxide,
    available chlorine of anything but bleach, and normality without its reaction.
    """
    shown = f'{of} "{strength.text}"'.strip()
    figures = _Figures(molar_mass, density, pure_density, dry_mass, of, shown)
    if strength.unit is StrengthUnit.MOLAL:
        return Concentration(_from_molal(strength.value, figures), PER_MOLE)
    moles = _moles_in_one(strength.unit, figures, strength.reaction, strength.gas_volume)
    if moles is not None:
        return Concentration(strength.value * moles, PER_MOLE)
    grams = strength.value * _grams_in_one(strength.unit, figures)
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
    dry_mass: float | None = None,
    reaction: str = "",
    gas_volume: float | None = None,
    of: str = "",
) -> float:
    """A concentration in another unit; `canonical` undone.

    Figures as in `canonical`; `density` is that of this very solution. `reaction` is what
    a normality is for, `gas_volume` the dm³/mol that vol is to be counted at.
    Raises: as `canonical`, and BadAmount when a per cent comes out above 100.
    """
    shown = f"{of} {format_strength(conc.value, conc.unit)}".strip()
    figures = _Figures(molar_mass, density, pure_density, dry_mass, of, shown)
    if unit == conc.unit:
        return conc.value
    if unit is StrengthUnit.MOLAL:
        return _to_molal(_moles(conc, figures), figures)
    moles = _moles_in_one(unit, figures, reaction, gas_volume)
    if moles is not None:
        return _moles(conc, figures) / moles
    value = _grams(conc, figures) / _grams_in_one(unit, figures)
    if unit in (StrengthUnit.WW, StrengthUnit.VV) and value > 100 * _ROUNDING:
        raise BadAmount(
            f"{shown} comes to {value:.4g} {unit}, which cannot be.",
            "Check the density.",
        )
    return value


def percent_by_mass(
    strength: Strength,
    *,
    molar_mass: float | None,
    dry_mass: float | None = None,
    of: str = "",
) -> float:
    """The % w/w that a strength counted by mass (one of `BY_MASS`) comes to.

    No density is wanted, as it cancels. Raises: as `canonical`.

    >>> sugar = Strength(1.0, StrengthUnit.MOLAL, "1 mol/kg")
    >>> round(percent_by_mass(sugar, molar_mass=342.3), 2)
    25.5
    """
    conc = canonical(strength, molar_mass=molar_mass, density=1.0, dry_mass=dry_mass, of=of)
    return express(conc, StrengthUnit.WW, molar_mass=molar_mass, density=1.0, of=of)


def hypochlorite_from_chlorine(available_chlorine: float) -> float:
    """% w/v of sodium hypochlorite for a bleach labelled by % w/v of available chlorine.

    One NaOCl oxidises as one Cl2 does, so the masses stand as 74.44 to 70.91.
    Source: molar masses as in `formula.py`.

    >>> round(hypochlorite_from_chlorine(5.00), 2)
    5.25
    """
    return available_chlorine * _NAOCL / _CHLORINE


def _moles_in_one(
    unit: StrengthUnit, figures: _Figures, reaction: str, gas_volume: float | None
) -> float | None:
    """How many mol/dm³ one of `unit` comes to; None for a unit counted by mass of solute."""
    if unit is StrengthUnit.MOLAR:
        return 1.0
    if unit is StrengthUnit.VOL:
        _only_peroxide(figures)
        return vol_to_molar(1.0, gas_volume)
    if unit is StrengthUnit.NORMAL:
        # loaded here: few strengths are normalities, and the table of reactions is long
        from stockroom.chemistry.normality import equivalents

        return 1 / equivalents(reaction, figures.of, shown=figures.shown).per_mole
    if unit is StrengthUnit.CHLORINE:
        return 10 / _CHLORINE / _chlorine_per_mole(figures)
    if unit is StrengthUnit.CHLORINE_WW:
        return figures.grams_per_cm3() * 10 / _CHLORINE / _chlorine_per_mole(figures)
    return None


def _grams_in_one(unit: StrengthUnit, figures: _Figures) -> float:
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
    raise MissingFigure(
        f'{figures.shown}: "{unit}" has no mol/dm³ of its own.',
        "Give the strength it comes to, in mol/dm3 or % w/v.",
    )


def _from_molal(molal: float, figures: _Figures) -> float:
    # 1 kg of water with its solute weighs 1000 + b·M g and takes up that over the density
    solution = _CM3_PER_DM3 + molal * figures.dry_grams_per_mole()
    return molal * _CM3_PER_DM3 * figures.grams_per_cm3() / solution


def _to_molal(molar: float, figures: _Figures) -> float:
    solute = molar * figures.dry_grams_per_mole()
    water = _CM3_PER_DM3 * figures.grams_per_cm3() - solute
    if water <= 0:
        raise BadAmount(
            f"{figures.shown}: {solute:.4g} g of solute leave no water in 1 dm³ of"
            f" {_CM3_PER_DM3 * figures.grams_per_cm3():.4g} g.",
            "Check the density.",
        )
    return molar * _CM3_PER_DM3 / water


def _only_peroxide(figures: _Figures) -> None:
    # without a molar mass nobody knows that it is peroxide
    if figures.molar_mass is None or abs(figures.molar_mass - _PEROXIDE) > _PEROXIDE_WITHIN:
        raise BadAmount(
            f"{figures.shown}: vol is a strength of hydrogen peroxide and of nothing else.",
            "Write it in mol/dm3 or a per cent.",
        )


def _chlorine_per_mole(figures: _Figures) -> int:
    for mass, chlorine in _CHLORINE_PER_MOLE:
        if figures.molar_mass and abs(figures.molar_mass - mass) <= _BLEACH_WITHIN:
            return chlorine
    raise BadAmount(
        f"{figures.shown}: available chlorine is a strength of bleach (hypochlorite).",
        "Write it in mol/dm3 or a per cent.",
    )


def _moles(conc: Concentration, figures: _Figures) -> float:
    return conc.value if conc.unit == PER_MOLE else conc.value / figures.grams_per_mole()


def _grams(conc: Concentration, figures: _Figures) -> float:
    return conc.value if conc.unit == PER_GRAM else conc.value * figures.grams_per_mole()
