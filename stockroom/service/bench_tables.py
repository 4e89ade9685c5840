"""The tables that travel along, as a bench sum reads them: names, formulas, lines.

The practice college's come first, then the starter house's; a folder that is not
there is passed over. Nothing here is turned into a molar mass before it is asked for.
"""

from __future__ import annotations

import csv
import re
import unicodedata
from collections import Counter
from functools import lru_cache
from pathlib import Path

from stockroom.chemistry.formula import with_halves
from stockroom.store.likeness import plain

Row = dict[str, str]
_FOLDERS = ("college", "starter")
_DENSITY = "density_g_cm3"


# as chemists draw them; the tables have the formula in the order of the elements
_DRAWN = {
    "CH3COOH": "C2H4O2", "CH3CO2H": "C2H4O2", "HCOOH": "CH2O2", "HCO2H": "CH2O2",
    "CH3OH": "CH4O", "C2H5OH": "C2H6O", "CH3CH2OH": "C2H6O", "CH3COCH3": "C3H6O",
    "(CH3)2CO": "C3H6O", "H2C2O4": "C2H2O4", "(COOH)2": "C2H2O4", "(CO2H)2": "C2H2O4",
    "CH3COONa": "C2H3NaO2", "CH3CO2Na": "C2H3NaO2", "NaClO": "NaOCl", "CO(NH2)2": "CH4N2O",
}  # fmt: skip
# Names of the trade that mean one hydrate and no other form: from memory, as general
# chemistry has them. The substance's own name leaves the form open, and is not here.
_HYDRATES = {
    "NH4Fe(SO4)2.12H2O": ("iron alum", "ferric alum"),
    "KAl(SO4)2.12H2O": ("alum", "potash alum", "potassium alum"),
    "NH4Al(SO4)2.12H2O": ("ammonium alum", "ammonia alum"),
    "KCr(SO4)2.12H2O": ("chrome alum",),
    "Na2SO4.10H2O": ("Glauber's salt", "Glauber salt"),
    "CaSO4.2H2O": ("gypsum",),
    "CaSO4.0.5H2O": ("plaster of Paris", "bassanite"),
    "Na2B4O7.10H2O": ("borax",),
    "Na2CO3.10H2O": ("washing soda", "soda crystals", "sal soda"),
    "MgSO4.7H2O": ("Epsom salts", "Epsom salt"),
    "CuSO4.5H2O": ("blue vitriol", "bluestone"),
    "FeSO4.7H2O": ("green vitriol", "copperas"),
    "ZnSO4.7H2O": ("white vitriol",),
    "CoSO4.7H2O": ("rose vitriol", "red vitriol"),
    "(NH4)2Fe(SO4)2.6H2O": ("Mohr's salt", "Mohr salt"),
    "KNaC4H4O6.4H2O": ("Rochelle salt", "Rochelle salts", "Seignette salt", "Seignette's salt"),
    "Na2S2O3.5H2O": ("hypo",),
    "K4Fe(CN)6.3H2O": ("yellow prussiate of potash",),
    "C4H6O4Pb.3H2O": ("sugar of lead",),
    "Ca(NO3)2.4H2O": ("Norwegian saltpetre",),
}
# The hydrate that is usually bought, where no line that travels along is of it: from memory,
# as makers list them. Who names the substance alone is asked, since the label decides.
_BOUGHT_AS = {
    "aluminium chloride": "AlCl3.6H2O",
    "aluminium nitrate": "Al(NO3)3.9H2O",
    "aluminium sulfate": "Al2(SO4)3.16H2O",
    "ammonium iron(III) sulfate": "NH4Fe(SO4)2.12H2O",
    "calcium sulfate": "CaSO4.2H2O",
    "cerium(IV) sulfate": "Ce(SO4)2.4H2O",
    "chromium(III) chloride": "CrCl3.6H2O",
    "cobalt(II) nitrate": "Co(NO3)2.6H2O",
    "cobalt(II) sulfate": "CoSO4.7H2O",
    "copper(II) nitrate": "Cu(NO3)2.3H2O",
    "disodium hydrogenphosphate": "Na2HPO4.12H2O",
    "iron(II) chloride": "FeCl2.4H2O",
    "iron(III) sulfate": "Fe2(SO4)3.5H2O",
    "lead(II) ethanoate": "C4H6O4Pb.3H2O",
    "lithium hydroxide": "LiOH.H2O",
    "magnesium nitrate": "Mg(NO3)2.6H2O",
    "manganese(II) chloride": "MnCl2.4H2O",
    "nickel(II) chloride": "NiCl2.6H2O",
    "nickel(II) nitrate": "Ni(NO3)2.6H2O",
    "potassium oxalate": "K2C2O4.H2O",
    "sodium dichromate": "Na2Cr2O7.2H2O",
    "sodium dihydrogenphosphate": "NaH2PO4.2H2O",
    "sodium molybdate": "Na2MoO4.2H2O",
    "sodium nitroprusside": "Na2Fe(CN)5NO.2H2O",
    "sodium phosphate": "Na3PO4.12H2O",
    "sodium sulfate": "Na2SO4.10H2O",
    "sodium sulfide": "Na2S.9H2O",
    "zinc ethanoate": "C4H6O4Zn.2H2O",
    "zinc nitrate": "Zn(NO3)2.6H2O",
}
_DOT = re.compile(r" *[·•∙⋅*.] *|\s+(?=[0-9]{0,2}H2O$)")


def spelt(formula: str) -> str:
    """A formula as the tables write it: digits for subscripts, a plain dot before its water."""
    plain_digits = unicodedata.normalize("NFKC", with_halves(formula)).strip()
    salt, dot, water = _DOT.sub(".", plain_digits).partition(".")
    return f"{_DRAWN.get(salt, salt)}{dot}{water}"


@lru_cache(maxsize=1)
def substances() -> dict[str, Row]:
    """Every substance by its plain name; a blank of the first folder is filled from the next."""
    found: dict[str, Row] = {}
    for row in _table("substances"):
        known = found.setdefault(plain(row["substance"]), {})
        known |= {column: text for column, text in row.items() if not known.get(column)}
    return found


@lru_cache(maxsize=1)
def lines() -> tuple[Row, ...]:
    """Every line of the folders, in order."""
    return tuple(_table("lines"))


@lru_cache(maxsize=1)
def other_names() -> dict[str, str]:
    """The substance that each plain name stands for, its own name included."""
    named: dict[str, str] = {}
    for row in substances().values():
        named[plain(row["substance"])] = row["substance"]
    for row in substances().values():
        for name in row["other_names"].split(";"):
            if name.strip():
                named.setdefault(plain(name), row["substance"])
    return named


@lru_cache(maxsize=1)
def formulas() -> dict[str, str]:
    """The substance of each formula that only one substance has."""
    rows = [row for row in substances().values() if row.get("formula")]
    times = Counter(row["formula"] for row in rows)
    # butan-1-ol and butan-2-ol share one: the formula alone names neither
    return {row["formula"]: row["substance"] for row in rows if times[row["formula"]] == 1}


def hydrate_meant(name: str) -> str:
    """The formula of the one hydrate that a name of the trade means; empty for any other name."""
    return _trade_names().get(plain(name.replace("\N{RIGHT SINGLE QUOTATION MARK}", "'")), "")


def bought_as(substance: str) -> str:
    """The formula of the hydrate that is usually bought of a substance; empty where none is."""
    return _BOUGHT_AS.get(substance, "")


@lru_cache(maxsize=1)
def _trade_names() -> dict[str, str]:
    return {plain(name): formula for formula, named in _HYDRATES.items() for name in named}


@lru_cache(maxsize=1)
def names() -> frozenset[str]:
    """Every plain name held: of substances, their other names, and lines."""
    return frozenset(other_names()) | {plain(row["item"]) for row in lines()}


def form_named(formula: str) -> str:
    """The pure solid of that very formula, by its line's name; empty where none says so."""
    rows = (row for row in lines() if row["form"] == "solid" and not row["assay_percent"])
    return next((row["item"] for row in rows if spelt(row["formula"]) == spelt(formula)), "")


def row_of(name: str) -> Row | None:
    """The substance's row, by its name or by one of its other names; None for a stranger."""
    held = substances()
    return held.get(plain(name)) or held.get(plain(other_names().get(plain(name), "")))


def density_in(row: Row | None) -> float | None:
    """The g/cm³ in a row of substances or lines, where it has one."""
    written = (row or {}).get(_DENSITY, "")
    return float(written) if written else None


def _table(name: str) -> list[Row]:
    found: list[Row] = []
    for folder in _FOLDERS:
        path = _seeds() / folder / f"{name}.csv"
        if path.is_file():
            with path.open(encoding="utf-8", newline="") as file:
                found += csv.DictReader(file)
    return found


def _seeds() -> Path:
    from stockroom.service.database import seeds_folder

    return seeds_folder()
