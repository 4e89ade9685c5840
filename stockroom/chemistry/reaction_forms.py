"""What may stand for what a reaction names: Mohr's salt for iron(II), copper foil for copper(II).

A reaction is written with one salt, and counts its ion alike in any other, with or
without water of crystallisation. Each form here is one that is dissolved and titrated as
it stands, common practice, no source; the moles in it follow from its formula.
"""

from __future__ import annotations

import re

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount
from stockroom.measure.reading import tidy

# beside the formula in the equation; a number in front is the mol in one mole of it
_FORMS = {
    "permanganate": "NaMnO4",
    "oxalate": "H2C2O4 K2C2O4 (NH4)2C2O4 KHC2O4 NaHC2O4 2:KHC2O4H2C2O4",
    "iron(II)": "(NH4)2Fe(SO4)2 C2H10FeN2O8S2 FeCl2 Fe",
    "nitrite": "KNO2",
    "dichromate": "Na2Cr2O7 (NH4)2Cr2O7",
    "cerium(IV)": "(NH4)2Ce(NO3)6 (NH4)4Ce(SO4)4",
    "DCPIP": "C12H6Cl2NNaO2",
    "iodate": "NaIO3 2:KH(IO3)2",
    "bromate": "NaBrO3",
    "thiosulfate": "K2S2O3 (NH4)2S2O3",
    "tin(II)": "Sn",
    "sulfite": "K2SO3",
    "hydrogensulfite": "KHSO3",
    "metabisulfite": "K2S2O5",
    "persulfate": "Na2S2O8 (NH4)2S2O8",
    "iron(III)": "Fe(NO3)3 NH4Fe(SO4)2 KFe(SO4)2 2:Fe2(SO4)3",
    "hypochlorite": "KOCl 2:Ca(OCl)2",
    "copper(II)": "CuCl2 Cu(NO3)2 Cu(C2H3O2)2 CuO Cu",
    "chloride": "KCl NH4Cl LiCl 2:CaCl2 2:MgCl2 2:SrCl2 2:BaCl2",
    "bromide": "NaBr NH4Br LiBr",
    "iodide": "NaI NH4I",
    "thiocyanate": "NaSCN NH4SCN",
    "silver nitrate": "Ag",
    "EDTA": "C10H16N2O8",
    "calcium": "CaCO3 Ca(NO3)2 CaSO4 CaO Ca(OH)2",
    "magnesium": "MgCl2 Mg(NO3)2 MgCO3 MgO Mg",
    "zinc": "ZnCl2 Zn(NO3)2 Zn(C2H3O2)2 ZnO Zn",
    # as crystallographers write it, the decahydrate's eight molecules of water beside it
    "borax": "Na2B4O5(OH)4",
    "ammonia": "NH4OH",
}
_DOTS = re.compile(r" *[.*·•∙⋅] *")
_WATER = re.compile(r"[0-9]* ?H2O")
_FORMULA = re.compile(r"[A-Z(\[][A-Za-z0-9()\[\].]*")
# two formulas of one composition differ by the last bits of a float, others by far more
_ALIKE = 1e-4


def moles_in(formula: str, named: str, named_formula: str) -> float | None:
    """The mol of what a reaction calls `named` in one mole of the formula; None: it is none.

    `named_formula` is how the equation writes it. Water of crystallisation does not count.

    >>> moles_in("CuSO4.5H2O", "copper(II)", "CuSO4")
    1.0
    >>> moles_in("NaCl", "copper(II)", "CuSO4") is None
    True
    """
    mass = _dry_mass(formula)
    if mass is None:
        return None
    for form in (named_formula, *_FORMS.get(named, "").split()):
        count, _, counted = form.rpartition(":")
        if abs(molar_mass(counted) - mass) < _ALIKE:
            return float(count or 1)
    return None


def without_water(formula: str) -> str:
    """A formula without its water of crystallisation: "Na2CO3" of "Na2CO3·10H2O"."""
    salt, *parts = _DOTS.split(tidy(formula))
    return ".".join([salt, *(part for part in parts if not _WATER.fullmatch(part))])


def _dry_mass(formula: str) -> float | None:
    """The g/mol without water of crystallisation; None for what is no formula."""
    dry = without_water(formula)
    if not _FORMULA.fullmatch(dry):
        return None
    try:
        return molar_mass(dry)
    except BadAmount:
        return None
