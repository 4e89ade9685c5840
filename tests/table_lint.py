"""What is looked for in a table of substances; each fault names its row and quotes the value.

Every check reads rows alone and hands back a list, so that a whole table is mended in one
sitting. The tests feed each of them a planted error, to see that it can fail.
"""

from __future__ import annotations

import csv
import re
from collections import Counter
from collections.abc import Callable, Iterator
from pathlib import Path

from stockroom.chemistry.formula import check_cas, molar_mass
from stockroom.errors import StockroomError
from stockroom.store.likeness import plain

Row = dict[str, str]
Check = Callable[[list[Row]], list[str]]

COLUMNS = (
    "substance other_names formula cas storage_group peroxide_former density_g_cm3 note source"
).split()
GROUPS = frozenset(
    {"acid", "alkali", "cyanide", "flammable", "gas", "general", "hypochlorite", "metal powder"}
    | {"organic acid", "oxidiser", "oxidising acid", "peroxide", "sulfide", "thiocyanate"}
    | {"toxic", "water-reactive"}
)
CLASSES = frozenset({"", "A", "B", "C", "D"})
MASS_WITHIN = 2e-4
"""Two sound sets of atomic weights differ by up to 78 ppm (HCl), relative."""
DENSITY_WITHIN = 0.01
"""Correlations held in libraries differ by up to 0.5 % for these liquids, and memory by 1 %."""
# pentane and bromine are the lightest and the heaviest liquid of a teaching shelf, mercury left out
LIGHTEST, HEAVIEST = 0.6, 3.2

MEMORY, PARTLY = "from memory", "partly from memory"
# a key of this list says that the number is confirmed; any other says that there is none to confirm
CONFIRMED = frozenset(
    {"names", "density-liquid", "density-memory", "density-ethanol", "density-sulfuric"}
    | {"peroxide-class", "peroxide-class-memory"}
)


def read_rows(path: Path) -> list[Row]:
    """The rows of a table as text. Raises: csv.Error for quoting that does not close."""
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def column_faults(rows: list[Row]) -> list[str]:
    """Columns as agreed, no spaces round a value, rows in the order of the alphabet."""
    wrong = [str(list(row)) for row in rows if list(row) != COLUMNS]
    wrong += [f"{value!r} has spaces round it" for row in rows for value in _spaced(row)]
    names = [row["substance"].casefold() for row in rows]
    pairs = zip(names, sorted(names), strict=True)
    return wrong + [f"{name!r} is out of order" for name, due in pairs if name != due][:1]


def _spaced(row: Row) -> Iterator[str]:
    # in a note a semicolon is followed by a space, in a list of names it is not
    values = [*row.values(), *row["other_names"].split(";")]
    yield from (value for value in values if value != " ".join(value.split()))


def cas_faults(rows: list[Row]) -> list[str]:
    """Check digits, and no number given to two substances."""
    found = []
    for row in rows:
        try:
            if row["cas"]:
                check_cas(row["cas"])
        except StockroomError as error:
            found.append(f"{row['substance']}: {error.message}")
    return found + _twice(row["cas"] for row in rows if row["cas"])


def formula_faults(rows: list[Row]) -> list[str]:
    """Formulas that cannot be read, carry water, or have another mass in a second library."""
    found = []
    for row in rows:
        formula = row["formula"]
        try:
            ours = molar_mass(formula) if formula else 0.0
        except StockroomError as error:
            found.append(f"{row['substance']}: {error.message}")
            continue
        if formula and abs(ours / second_mass(formula) - 1) > MASS_WITHIN:
            found.append(f"{row['substance']}: {formula} {ours:g} is not {second_mass(formula):g}")
        # the water of a hydrate belongs to the stock line: it does not stay with what dissolves
        if re.search(r"[.·*]", formula):
            found.append(f"{row['substance']}: {formula} carries its water")
    return found


def second_mass(formula: str) -> float:
    """g/mol by periodictable, whose weights are the IUPAC/CIAAW abridged ones."""
    import periodictable

    return float(periodictable.formula(formula).mass)


def atoms(formula: str) -> dict[str, int]:
    """How many of each element a formula has, by periodictable."""
    import periodictable

    counts = periodictable.formula(formula).atoms.items()
    return {element.symbol: round(count) for element, count in counts}


def names_of(row: Row) -> list[str]:
    """The name and the other names of a row."""
    return [name for name in (row["substance"], *row["other_names"].split(";")) if name]


def name_faults(rows: list[Row]) -> list[str]:
    """Names and other names that stand twice, in one row or in two, as the store compares them."""
    empty = [f"no name: {row!r}" for row in rows if not row["substance"]]
    return empty + _twice(plain(name) for row in rows for name in names_of(row))


def _twice(values: Iterator[str]) -> list[str]:
    return [f"{value!r} stands {n} times" for value, n in Counter(values).items() if n > 1]


def word_faults(rows: list[Row]) -> list[str]:
    """Storage groups and classes of peroxide-former that nobody knows; a group left out."""
    found = []
    for row in rows:
        name, group, former = row["substance"], row["storage_group"], row["peroxide_former"]
        # nobody can say where a bottle belongs that nobody can name
        if group not in GROUPS and (name, group) != ("unknown", ""):
            found.append(f"{name}: storage group {group!r}")
        if former not in CLASSES:
            found.append(f"{name}: class {former!r}")
    return found


def density_faults(rows: list[Row]) -> list[str]:
    """Densities that are no plain number, or lie outside what a liquid here can have."""
    found = []
    for row in rows:
        text = row["density_g_cm3"]
        plain_number = re.fullmatch(r"[0-9]\.[0-9]{2,3}", text)
        if text and not (plain_number and LIGHTEST <= float(text) <= HEAVIEST):
            found.append(f"{row['substance']}: density {text!r}")
    return found


def second_density(cas: str) -> float | None:
    """g/cm³ of the pure liquid at 20 °C by the correlations held in chemicals, None without one.

    Source: VDI Heat Atlas (PPDS), else Perry's Handbook, 8th ed. (DIPPR 105); their equations
    as documented in chemicals 1.5.2, `volume` module.
    """
    from chemicals import MW, volume

    vdi, perry = volume.rho_data_VDI_PPDS_2, volume.rho_data_Perry_8E_105_l
    kelvin = 293.15
    if cas in vdi.index:
        row = vdi.loc[cas]
        left = 1 - kelvin / row.Tc
        sides = (
            row.A * left**0.35 + row.B * left ** (2 / 3) + row.C * left + row.D * left ** (4 / 3)
        )
        return float(row.rhoc + sides) / 1000
    if cas not in perry.index:
        return None
    row = perry.loc[cas]
    molar = row.C1 / row.C2 ** (1 + (1 - kelvin / row.C3) ** row.C4)
    return float(molar * MW(cas)) / 1e6


def second_density_faults(rows: list[Row]) -> list[str]:
    """Densities more than 1 % from a correlation; those said to be worked out, more than 0.06 %."""
    found = []
    for row in rows:
        text = row["density_g_cm3"]
        other = second_density(row["cas"]) if text else None
        # half a unit in the third place is 0.08 % of the lightest
        worked = row["source"] in ("density-liquid", "peroxide-class")
        within = 0.0009 if worked else DENSITY_WITHIN
        if other is not None and abs(float(text) / other - 1) > within:
            found.append(f"{row['substance']}: density {text} where chemicals has {other:.3f}")
        if other is None and text and worked:
            found.append(f"{row['substance']}: density {text} cannot be worked out")
    return found


def state_faults(rows: list[Row]) -> list[str]:
    """Densities given to what chemicals holds to be solid or gas at 20 °C."""
    from chemicals import Tb, Tm

    found = []
    for row in (row for row in rows if row["density_g_cm3"]):
        melts, boils = Tm(row["cas"]), Tb(row["cas"])
        if not (melts and boils and melts < 293.15 < boils):
            found.append(f"{row['substance']}: a density, but it melts at {melts} K")
    return found


def registry_faults(rows: list[Row]) -> list[str]:
    """Numbers said to be confirmed that chemicals does not hold, or holds for other atoms."""
    from chemicals import MW, search_chemical

    found = []
    for row in (row for row in rows if row["source"] in CONFIRMED):
        try:
            held, mass = search_chemical(row["cas"]), MW(row["cas"])
        except ValueError:
            found.append(f"{row['substance']}: {row['cas']!r} is not in chemicals")
            continue
        same_mass = abs(mass / molar_mass(row["formula"]) - 1) <= MASS_WITHIN
        if not same_mass or atoms(held.formula) != atoms(row["formula"]):
            found.append(f"{row['substance']}: {row['cas']} is {held.formula} in chemicals")
    return found


def isomer_faults(rows: list[Row], known: dict[str, str]) -> list[str]:
    """Confirmed numbers that no name of the row leads to: an isomer's would pass for mass.

    `known` has, by substance, the name chemicals itself gives to that number.
    """
    from chemicals import CAS_from_any, search_chemical

    found = []
    for row in (row for row in rows if row["source"] in CONFIRMED):
        if row["cas"] in {_number_of(CAS_from_any, name) for name in names_of(row)}:
            continue
        called = str(search_chemical(row["cas"]).common_name)
        if known.get(row["substance"]) != called:
            found.append(f"{row['substance']}: {row['cas']} is {called!r} in chemicals")
    return found


def _number_of(look: Callable[[str], str], name: str) -> str:
    try:
        return look(name)
    except ValueError:
        return ""


def source_faults(rows: list[Row], sources: list[Row]) -> list[str]:
    """Keys that are missing, memory promoted, and figures a row's own key says nothing of."""
    known = {source["key"]: source for source in sources}
    found = []
    for row in rows:
        if row["source"] not in known:
            found.append(f"{row['substance']}: source {row['source']!r}")
        found += [f"{row['substance']}: {fault}" for fault in _unsaid(row)]
    used = [known[key] for key in sorted({row["source"] for row in rows} & set(known))]
    for source in used:
        if "from memory" in source["citation"].casefold() and source["how"] not in (MEMORY, PARTLY):
            found.append(f"{source['key']}: from memory, yet {source['how']!r}")
    return found


def _unsaid(row: Row) -> Iterator[str]:
    key = row["source"]
    numbered = key in CONFIRMED or key == "number-memory"
    if bool(row["cas"]) != numbered:
        yield f"number {row['cas']!r} under {key!r}"
    if bool(row["peroxide_former"]) != key.startswith("peroxide-class"):
        yield f"class {row['peroxide_former']!r} under {key!r}"
    dense = key.startswith("density-")
    # a peroxide-former may be a solid, as potassium is
    if bool(row["density_g_cm3"]) != dense and not key.startswith("peroxide-class"):
        yield f"density {row['density_g_cm3']!r} under {key!r}"
    if row["cas"] and not row["formula"]:
        yield f"number {row['cas']!r} without a formula"


def contradictions(rows: list[Row], other: list[Row]) -> list[str]:
    """Where `rows` leave out or contradict what `other`, an older table, already says."""
    here = {row["substance"]: row for row in rows}
    found = [f"{row['substance']} is left out" for row in other if row["substance"] not in here]
    for old in other:
        new = here.get(old["substance"], old)
        fixed = ("formula", "storage_group", "peroxide_former")
        found += [f"{old['substance']}: {c} {new[c]!r}" for c in fixed if new[c] != old[c]]
        # a number may be filled in, never changed
        if old["cas"] not in ("", new["cas"]):
            found.append(f"{old['substance']}: cas {new['cas']!r}")
        lost = set(names_of(old)) - set(names_of(new))
        found += [f"{old['substance']}: name {name!r} is lost" for name in sorted(lost)]
    return found


CHECKS: tuple[Check, ...] = (
    column_faults,
    cas_faults,
    formula_faults,
    name_faults,
    word_faults,
    density_faults,
    second_density_faults,
    state_faults,
    registry_faults,
)
