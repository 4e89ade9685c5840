"""The density of a solution of so many % w/w, the % w/w of so many mol/dm³, and whose figure."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from stockroom.chemistry.densities import oiml
from stockroom.chemistry.densities.tables import Row, Table, table_of
from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.formats import format_number

_GRAMS_PER_PERCENT = 10.0  # g/dm³ for 1 % w/w at 1 g/cm³
_ROUNDED = 5e-4  # the strongest row, printed to four figures, may come back a little above itself
_HALVINGS = 60  # brings 100 % w/w down to the last bit of a float
_READ_IT = "Read it off the bottle."


@dataclass(frozen=True, slots=True)
class Density:
    """A density read from a table: `value` in g/cm³ at `temperature_c`.

    `low` and `high` are the % w/w the table runs between. `source` names it in words;
    `how` is "a" for a printed row that was seen, "b" for one worked out from such rows
    or a seen formula, "c" where a row from memory took part.
    """

    value: float
    low: float
    high: float
    temperature_c: float
    source: str
    how: str


def covers(substance: str) -> bool:
    """Is there a table for this substance, by its name or formula?

    >>> covers("sulfuric acid"), covers("HNO3"), covers("sucrose")
    (True, True, False)
    """
    return _is_ethanol(substance) or table_of(substance) is not None


def density_at(substance: str, percent_ww: float) -> Density:
    """The density of an aqueous solution of `percent_ww` % w/w, at 20 °C (peroxide at 18 °C).

    0 is water. Per cents are of the substance without its water: ammonia as NH3.
    Raises: MissingFigure for a substance without a table and outside its range, naming
    both; BadAmount for a per cent that is none.

    >>> density_at("HCl", 36).value
    1.1791
    """
    if not (math.isfinite(percent_ww) and 0 <= percent_ww <= 100):
        raise BadAmount(
            f"{substance} {percent_ww:g} % w/w: it must be from 0 to 100.", "Read the label again."
        )
    if _is_ethanol(substance):
        return Density(oiml.ethanol_density(percent_ww), 0.0, 100.0, 20.0, oiml.SOURCE, "b")
    table = _table(substance)
    low, high = table.percents[0], table.percents[-1]
    if percent_ww > high:
        raise MissingFigure(
            f"{substance} {percent_ww:g} % w/w: the density is held only up to {high:g} % w/w"
            f" ({table.rows[-1].source}).",
            _READ_IT,
        )
    around = _rows_around(table, percent_ww)
    value = table.density(percent_ww)
    return Density(value, low, high, table.temperature_c, _sources(around), _how(around))


def percent_ww_for(
    substance: str,
    *,
    molar: float | None = None,
    grams_per_dm3: float | None = None,
    molar_mass: float | None = None,
) -> float:
    """The % w/w of a solution of so many mol/dm³ or g/dm³; `density_at` undone.

    One of the two is given, 0 or more; `molar_mass` in g/mol goes with `molar`.
    Raises: MissingFigure for a substance without a table, and above what its strongest
    row holds; BadAmount for a strength below 0.

    >>> round(percent_ww_for("HCl", molar=11.64, molar_mass=36.458), 1)
    36.0
    """
    wanted = _grams(substance, molar, grams_per_dm3, molar_mass)
    density, high = _curve(substance)
    most = _GRAMS_PER_PERCENT * high * density(high)
    if wanted > most * (1 + _ROUNDED):
        raise MissingFigure(
            f"{substance} {format_number(wanted)} g/dm³: {high:g} % w/w, the most its density"
            f" is held for, has {format_number(most)} ({density_at(substance, high).source}).",
            _READ_IT,
        )
    weak, strong = 0.0, high
    # g/dm³ rises with % w/w in every table, though density itself does not
    for _ in range(_HALVINGS):
        middle = (weak + strong) / 2
        if _GRAMS_PER_PERCENT * middle * density(middle) < wanted:
            weak = middle
        else:
            strong = middle
    return strong


def in_words(found: Density) -> str:
    """A density with its temperature and source, as a bench sum prints it."""
    memory = ", from memory" if found.how == "c" else ""
    return f"density {found.value:.4f} g/cm³ at {found.temperature_c:g} °C ({found.source}{memory})"


def _grams(
    substance: str, molar: float | None, grams: float | None, molar_mass: float | None
) -> float:
    if (molar is None) == (grams is None):
        raise BadAmount(f"{substance}: molar {molar}, grams {grams}.", "Give one of the two.")
    if molar is not None:
        if molar_mass is None:
            raise MissingFigure(
                f"{substance} {molar:g} mol/dm³: I need the molar mass to turn it into % w/w.",
                "Give the formula.",
            )
        grams = molar * positive(molar_mass, "molar mass", "g/mol")
    if grams is None or not (math.isfinite(grams) and grams >= 0):
        raise BadAmount(f"{substance} {grams} g/dm³: it must be 0 or more.", "Check the strength.")
    return grams


def _curve(substance: str) -> tuple[Callable[[float], float], float]:
    """The g/cm³ for a % w/w, and the most % w/w it may be asked for."""
    if _is_ethanol(substance):
        return oiml.ethanol_density, 100.0
    table = _table(substance)
    return table.density, table.percents[-1]


def _is_ethanol(substance: str) -> bool:
    return " ".join(substance.split()).casefold() in oiml.NAMES


def _table(substance: str) -> Table:
    table = table_of(substance)
    if table is None:
        raise MissingFigure(f"{substance!r}: no density table is held for it.", _READ_IT)
    return table


def _rows_around(table: Table, percent: float) -> list[Row]:
    below = max(row.percent for row in table.rows if row.percent <= percent)
    above = min(row.percent for row in table.rows if row.percent >= percent)
    return [row for row in table.rows if row.percent in (below, above)]


def _sources(rows: list[Row]) -> str:
    # water, the row at 0 %, is in every table and is no source of it
    named = dict.fromkeys(row.source for row in rows if row.percent)
    return " and ".join(named) or rows[0].source


def _how(rows: list[Row]) -> str:
    if any(row.how == "c" for row in rows):
        return "c"
    return "a" if len(rows) == 1 else "b"
