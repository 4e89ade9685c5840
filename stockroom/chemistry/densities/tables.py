"""Which rows serve which substance, under which names, put together once."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from stockroom.chemistry.densities import crc, kuester_thiel, perry
from stockroom.chemistry.densities.between import slopes, value_at

WATER_20C = 0.99820
"""g/cm³. Source: OIML R 22 formula at 0 % (seen)."""

WATER_18C = 0.99860
"""g/cm³. Source: OIML R 22 formula at 0 % and 18 °C."""


@dataclass(frozen=True, slots=True)
class Row:
    """One row: % w/w, g/cm³, its source, and how it was come by.

    `how` is "a" for a row that was seen and "c" for one from memory.
    """

    percent: float
    density: float
    source: str
    how: str


@dataclass(frozen=True, slots=True)
class Table:
    """The rows of one substance at one temperature, by rising % w/w, and their slopes."""

    substance: str
    temperature_c: float
    rows: tuple[Row, ...]
    percents: tuple[float, ...]
    densities: tuple[float, ...]
    slopes: tuple[float, ...]

    def density(self, percent: float) -> float:
        """The g/cm³ at a % w/w inside the table."""
        return value_at(percent, self.percents, self.densities, self.slopes)


@dataclass(frozen=True, slots=True)
class _Parts:
    names: tuple[str, ...]
    parts: tuple[tuple[str, str], ...]
    temperature_c: float = 20.0
    water: float = WATER_20C


# the first name is the substance's own; formulas are as they stand in the seeds
_SUBSTANCES = (
    _Parts(
        ("hydrochloric acid", "HCl", "hydrogen chloride"),
        ((crc.SOURCE, crc.HYDROCHLORIC_ACID),),
    ),
    _Parts(
        ("sulfuric acid", "H2SO4", "sulphuric acid"),
        ((crc.SOURCE, crc.SULFURIC_ACID), (perry.SOURCE, perry.SULFURIC_ACID)),
    ),
    _Parts(
        ("nitric acid", "HNO3"),
        ((crc.SOURCE, crc.NITRIC_ACID), (perry.SOURCE, perry.NITRIC_ACID)),
    ),
    _Parts(
        ("phosphoric acid", "H3PO4", "orthophosphoric acid", "phosphoric(V) acid"),
        ((crc.SOURCE, crc.PHOSPHORIC_ACID), (perry.SOURCE, perry.PHOSPHORIC_ACID)),
    ),
    _Parts(
        ("sodium hydroxide", "NaOH", "caustic soda"),
        ((crc.SOURCE, crc.SODIUM_HYDROXIDE), (perry.SOURCE, perry.SODIUM_HYDROXIDE)),
    ),
    _Parts(
        ("potassium hydroxide", "KOH", "caustic potash"),
        ((kuester_thiel.SOURCE, kuester_thiel.POTASSIUM_HYDROXIDE),),
    ),
    # "ammonium hydroxide" is left out: its per cents are of NH4OH on some labels
    _Parts(
        ("ammonia", "NH3", "ammonia solution"),
        ((crc.SOURCE, crc.AMMONIA), (kuester_thiel.SOURCE, kuester_thiel.AMMONIA)),
    ),
    _Parts(
        ("sodium chloride", "NaCl", "common salt"),
        ((crc.SOURCE, crc.SODIUM_CHLORIDE),),
    ),
    _Parts(
        ("ethanoic acid", "acetic acid", "C2H4O2", "CH3COOH", "CH3CO2H"),
        ((perry.SOURCE, perry.ACETIC_ACID),),
    ),
    _Parts(
        ("hydrogen peroxide", "H2O2"),
        ((perry.SOURCE, perry.HYDROGEN_PEROXIDE_18C),),
        18.0,
        WATER_18C,
    ),
)


def table_of(substance: str) -> Table | None:
    """The table of a substance by its name or formula, in any case; None where none is held."""
    found = _by_name().get(_plain(substance))
    return None if found is None else _table(found)


def substances() -> tuple[str, ...]:
    """The substances that have a table, in the order of this file."""
    return tuple(each.names[0] for each in _SUBSTANCES)


@lru_cache(maxsize=1)
def _by_name() -> dict[str, int]:
    return {_plain(name): n for n, each in enumerate(_SUBSTANCES) for name in each.names}


@lru_cache(maxsize=len(_SUBSTANCES))
def _table(number: int) -> Table:
    given = _SUBSTANCES[number]
    water = Row(0.0, given.water, "water", "a")
    rows = [row for source, text in given.parts for row in _rows(source, text)]
    rows = sorted([water, *rows], key=lambda row: row.percent)
    percents = tuple(row.percent for row in rows)
    densities = tuple(row.density for row in rows)
    rises = slopes(percents, densities)
    return Table(given.names[0], given.temperature_c, tuple(rows), percents, densities, rises)


def _rows(source: str, text: str) -> list[Row]:
    figures = text.split()
    pairs = zip(figures[::2], figures[1::2], strict=True)
    return [
        Row(float(percent), float(density.rstrip("a")), source, "a" if density[-1] == "a" else "c")
        for percent, density in pairs
    ]


def _plain(name: str) -> str:
    return " ".join(name.split()).casefold()
