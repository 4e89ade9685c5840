"""How much dissolves: g of the anhydrous substance in 100 g of water, against temperature.

Read off between two rows in a straight line, refused outside them. Every row is from
memory of widely reprinted handbook tables, good to about 2 % (the slightly soluble
ones to 10 %), unless its source says otherwise: for a solution that matters, titrate
the clear liquid. A table stops where the solid changes its hydrate.
"""

from __future__ import annotations

from bisect import bisect_left
from dataclasses import dataclass

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import MissingFigure

MEMORY = "handbook tables of solubility, from memory"
_LOOK_UP = "Look it up, and give the strength in % w/w or mol/dm3."
# g/cm³. Source: density of water as in Kell, J. Chem. Eng. Data 20 (1975) 97, from memory
_WATER = ((0, 0.9998), (10, 0.9997), (20, 0.9982), (30, 0.9957), (40, 0.9922), (50, 0.9880),
          (60, 0.9832), (80, 0.9718), (100, 0.9584))  # fmt: skip
_SO_LITTLE = 1.0  # g in 100 g of water: the solution is within 1 % as dense as water
_NEAR_20 = 0.5


@dataclass(frozen=True, slots=True)
class Solubility:
    """What a saturated solution holds at `celsius`: `grams` in 100 g of water.

    `formula` is the anhydrous one that the grams are of, `source` whose figure it is,
    `density` the saturated solution's in g/cm³ where one is held, in words `density_of`.
    """

    grams: float
    celsius: float
    formula: str
    source: str
    density: float | None
    density_of: str = ""

    @property
    def good_to_percent(self) -> float:
        """How far the printed tables lie from one another, in per cent of the figure."""
        return 10.0 if self.grams < _SO_LITTLE else 2.0

    @property
    def percent_ww(self) -> float:
        """The % w/w of the anhydrous substance in the saturated solution."""
        return 100 * self.grams / (100 + self.grams)


@dataclass(frozen=True, slots=True)
class _Table:
    names: tuple[str, ...]
    formula: str
    rows: tuple[tuple[float, float], ...]
    density_20c: float | None = None


def _table(names: str, formula: str, rows: str, density_20c: float | None = None) -> _Table:
    """`rows` are "celsius grams" pairs, coldest first; the formula is a name too."""
    figures = [float(figure) for figure in rows.split()]
    pairs = tuple(zip(figures[::2], figures[1::2], strict=True))
    return _Table((*names.split(";"), formula.lower()), formula, pairs, density_20c)


# densities: worked out with the Pitzer model of PHREEQC, which gave the solubilities of
# these four at 20 °C within 1 % of the rows
_TABLES = (
    _table("calcium hydroxide;limewater;slaked lime", "Ca(OH)2",
           "0 0.189 10 0.182 20 0.173 30 0.160 40 0.141 60 0.121 80 0.094 100 0.076"),
    _table("barium hydroxide", "Ba(OH)2", "0 1.67 10 2.48 20 3.89 30 5.59 40 8.22 60 20.9"),
    _table("sodium chloride;common salt", "NaCl",
           "0 35.7 10 35.8 20 35.9 30 36.1 40 36.4 60 37.1 80 38.0 100 39.2", 1.200),
    _table("potassium chloride", "KCl",
           "0 28.0 10 31.2 20 34.2 30 37.2 40 40.1 60 45.8 80 51.3 100 56.3", 1.172),
    _table("potassium nitrate", "KNO3",
           "0 13.9 10 21.2 20 31.6 30 45.3 40 61.3 60 106 80 167 100 245"),
    _table("potassium sulfate", "K2SO4",
           "0 7.4 10 9.3 20 11.1 30 13.0 40 14.8 60 18.2 80 21.4 100 24.1"),
    _table("sodium sulfate", "Na2SO4", "0 4.9 10 9.1 20 19.5 30 40.8", 1.154),
    _table("magnesium sulfate", "MgSO4", "0 22.0 10 28.2 20 33.7 30 38.9 40 44.5", 1.283),
    _table("sodium carbonate;washing soda;soda ash", "Na2CO3", "0 7.0 10 12.5 20 21.5 30 39.7"),
    _table("sodium hydrogencarbonate;sodium bicarbonate", "NaHCO3",
           "0 7.0 10 8.1 20 9.6 30 11.1 40 12.7 60 16.0"),
    _table("ammonium chloride", "NH4Cl",
           "0 29.4 10 33.2 20 37.2 30 41.4 40 45.8 60 55.3 80 65.6 100 77.3"),
    _table("ammonium sulfate", "(NH4)2SO4",
           "0 70.6 10 73.0 20 75.4 30 78.0 40 81.0 60 88.0 80 95.3 100 103"),
    _table("copper(II) sulfate;copper sulfate", "CuSO4",
           "0 14.3 10 17.4 20 20.7 30 25.0 40 28.5 60 40.0 80 55.0 100 75.4"),
    _table("silver nitrate", "AgNO3", "0 122 10 167 20 216 30 265 40 311 60 440 80 585 100 733"),
    _table("lead(II) nitrate", "Pb(NO3)2",
           "0 37.5 10 46.2 20 54.3 30 63.4 40 72.1 60 91.6 80 111 100 133"),
    _table("potassium iodide", "KI",
           "0 128 10 136 20 144 30 153 40 162 60 176 80 192 100 206"),
    _table("potassium bromide", "KBr",
           "0 53.6 10 59.5 20 65.3 30 70.7 40 75.4 60 85.5 80 94.9 100 104"),
    _table("iodine", "I2", "0 0.014 10 0.020 20 0.029 30 0.039 40 0.052 60 0.100"),
    _table("potassium permanganate", "KMnO4", "0 2.83 10 4.31 20 6.34 30 9.03 40 12.6 60 22.1"),
    _table("potassium dichromate", "K2Cr2O7",
           "0 4.7 10 7.0 20 12.3 30 18.1 40 26.3 60 45.6 80 73.0"),
    _table("potassium iodate", "KIO3",
           "0 4.60 10 6.27 20 8.08 30 10.3 40 12.6 60 18.3 80 24.8 100 32.3"),
    _table("potassium bromate", "KBrO3",
           "0 3.09 10 4.72 20 6.91 30 9.64 40 13.1 60 22.7 80 34.1 100 49.9"),
    _table("potassium chlorate", "KClO3",
           "0 3.3 10 5.2 20 7.3 30 10.1 40 13.9 60 23.8 80 37.5 100 56.3"),
    _table("barium chloride", "BaCl2",
           "0 31.2 10 33.5 20 35.8 30 38.1 40 40.8 60 46.2 80 52.5 100 59.4"),
    _table("oxalic acid;ethanedioic acid;C2H2O4", "H2C2O4",
           "0 3.54 10 6.08 20 9.52 30 14.2 40 21.5 60 44.3"),
    _table("boric acid", "H3BO3", "0 2.67 10 3.73 20 5.04 30 6.72 40 8.72 60 14.8 80 23.6"),
    _table("benzoic acid;C7H6O2", "C7H6O2", "0 0.17 10 0.21 20 0.29 30 0.41 40 0.56 60 1.16"),
    _table("sucrose;cane sugar", "C12H22O11",
           "0 179 10 190 20 202 30 216 40 235 60 289 80 365 100 476"),
)  # fmt: skip


_HELPED = {
    "iodine": "dissolve it first in a little water with about twice its mass of potassium iodide",
    "i2": "dissolve it first in a little water with about twice its mass of potassium iodide",
}
"""What brings into solution what water alone does not. Common practice, no source."""


def helped_by(*names: str) -> str:
    """How a substance is brought into solution that water alone does not take; else empty.

    >>> helped_by("iodine")
    'dissolve it first in a little water with about twice its mass of potassium iodide'
    """
    return next((_HELPED[name.casefold()] for name in names if name.casefold() in _HELPED), "")


def solubility(celsius: float, *names: str) -> Solubility:
    """What dissolves of a substance at a temperature, by any of its names or its formula.

    Raises: MissingFigure naming what to look up: a substance nobody holds, or a
    temperature outside its rows, with the range.

    >>> round(solubility(25, "potassium nitrate").grams, 2)
    38.45
    """
    table = _held(names)
    if table is None:
        raise MissingFigure(
            f"How much {names[0]} dissolves at {celsius:g} °C is not held: I need g in 100 g of"
            " water.",
            _LOOK_UP,
        )
    coldest, hottest = table.rows[0][0], table.rows[-1][0]
    if not coldest <= celsius <= hottest:
        raise MissingFigure(
            f"{names[0]} at {celsius:g} °C: its solubility is held from {coldest:g} to"
            f" {hottest:g} °C ({MEMORY}).",
            _LOOK_UP,
        )
    grams = _between(table.rows, celsius)
    density, whose = _density(table, grams, celsius)
    return Solubility(grams, celsius, table.formula, MEMORY, density, whose)


def molar_at_saturation(found: Solubility, density: float) -> float:
    """The mol/dm³ of a saturated solution of that density in g/cm³.

    >>> round(molar_at_saturation(solubility(20, "limewater"), 0.998), 3)
    0.023
    """
    return 10 * found.percent_ww * density / molar_mass(found.formula)


def substances() -> tuple[str, ...]:
    """The substances whose solubility is held, each by its first name."""
    return tuple(table.names[0] for table in _TABLES)


def _held(names: tuple[str, ...]) -> _Table | None:
    asked = {" ".join(name.split()).casefold() for name in names if name}
    return next(
        (table for table in _TABLES if asked & {name.casefold() for name in table.names}), None
    )


def _density(table: _Table, grams: float, celsius: float) -> tuple[float | None, str]:
    if grams < _SO_LITTLE:
        return _between(_WATER, celsius), "that of water, which so little does not change"
    if table.density_20c is None or abs(celsius - 20) > _NEAR_20:
        return None, ""
    return table.density_20c, "of the saturated solution, by the Pitzer model"


def _between(rows: tuple[tuple[float, float], ...], celsius: float) -> float:
    above = bisect_left([at for at, _ in rows], celsius)
    if rows[above][0] == celsius:
        return rows[above][1]
    (cold, less), (warm, more) = rows[above - 1], rows[above]
    return less + (more - less) * (celsius - cold) / (warm - cold)
