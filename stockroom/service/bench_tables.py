"""The tables that travel along, as a bench sum reads them: names, formulas, lines.

The practice college's come first, then the starter house's; a folder that is not
there is passed over. Nothing here is turned into a molar mass before it is asked for.
"""

from __future__ import annotations

import csv
from collections import Counter
from functools import lru_cache
from pathlib import Path

from stockroom.store.likeness import plain

Row = dict[str, str]
_FOLDERS = ("college", "starter")
_DENSITY = "density_g_cm3"


def spelt(formula: str) -> str:
    """A formula with its hydrate's dot as the tables write it."""
    return formula.strip().replace("·", ".").replace("*", ".").replace("•", ".")


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
