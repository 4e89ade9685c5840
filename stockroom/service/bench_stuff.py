"""One form of a substance as a bench sum sees it: its masses, its assay and its densities."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.chemistry.formula import molar_mass
from stockroom.planning.facts import Form
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_tables import spelt


@dataclass(frozen=True, slots=True)
class Stuff:
    """One form of a substance: g/mol, assay as a fraction, g/cm³; None where not known.

    `strength_text` is the label's strength, which the density belongs to; `given_mass`
    is the molar mass where somebody said it, else `formula` gives it when asked;
    `liquid_density` is that of the pure liquid, where one's own table says.
    """

    name: str
    substance: str
    form: Form | None
    given_mass: float | None
    assay: float = 1.0
    density: float | None = None
    strength_text: str = ""
    storage_group: str = ""
    formula: str = ""
    liquid_density: float | None = None

    @property
    def molar_mass(self) -> float | None:
        """g/mol of this form, its water of crystallisation and all; None where not known.

        Raises: BadAmount for a formula that cannot be read.
        """
        if self.given_mass is not None or not self.formula:
            return self.given_mass
        # worked out now: a sum that needs none never loads the formula library
        return molar_mass(self.formula)

    @property
    def dry_mass(self) -> float | None:
        """g/mol without the water of crystallisation; None where not known."""
        if self.is_hydrate:
            return molar_mass(spelt(self.formula).partition(".")[0])
        formula = (shipped.row_of(self.substance) or {}).get("formula", "")
        # a house's line holds the mass of its own form, which may be a hydrate
        return molar_mass(formula) if formula and not self.formula else self.molar_mass

    @property
    def is_hydrate(self) -> bool:
        """Does its formula hold water of crystallisation?"""
        return "." in spelt(self.formula) and self.formula.endswith("H2O")

    @property
    def pure_density(self) -> float | None:
        """g/cm³ of the pure liquid, where the tables of substances or its own line say."""
        if self.liquid_density is not None:
            return self.liquid_density
        if self.form is Form.LIQUID and self.density and not self.strength_text:
            return self.density
        return shipped.density_in(shipped.row_of(self.substance))

    @property
    def names(self) -> tuple[str, ...]:
        """What it may be called in the tables of chemistry: name, substance, formula."""
        formula = self.formula or (shipped.row_of(self.substance) or {}).get("formula", "")
        return tuple(dict.fromkeys(each for each in (self.name, self.substance, formula) if each))
