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
_DOT = re.compile(r" *[·•∙⋅*.] *|\s+(?=[0-9]{0,2}H2O$)")


def spelt(formula: str) -> str:
    """A formula as the tables write it: digits for subscripts, a plain dot before its water."""
    plain_digits = unicodedata.normalize("NFKC", formula).strip()
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
