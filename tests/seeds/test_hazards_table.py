"""The table of hazard limits holds together; every check of it is seen to catch its error."""

from __future__ import annotations

import csv
from collections import Counter
from collections.abc import Callable, Iterator
from itertools import pairwise
from pathlib import Path

import pytest
from limits_held import SEEDS

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import StockroomError
from stockroom.safety.acute import CODES, CONVERTED, LIMITS
from stockroom.safety.classes import CLASSES
from stockroom.safety.limits import Basis, Limit, Route
from stockroom.store.hazards import limit_from
from stockroom.store.likeness import plain

Row = dict[str, str]
Check = Callable[[list[Row]], list[str]]

COLUMNS = (
    "substance hazard_class h_code from_percent below_percent basis route ate m_factor"
    " percent_of how source"
).split()

# every row of the reference's table of specific limits: substance, code, from, below, mark.
# Marks as there: a = seen, c = from memory, and c where only one edge was seen
REFERENCE = """
hydrogen peroxide|H271|70||a
hydrogen peroxide|H272|50|70|a
hydrogen peroxide|H314|70||a
hydrogen peroxide|H314|50|70|a
hydrogen peroxide|H315|35|50|c
hydrogen peroxide|H318|8|50|c
hydrogen peroxide|H319|5|8|c
hydrogen peroxide|H335|35||c
sodium hydroxide|H314|5||a
sodium hydroxide|H314|2|5|a
sodium hydroxide|H315|0.5|2|a
sodium hydroxide|H319|0.5|2|a
potassium hydroxide|H314|5||c
potassium hydroxide|H314|2|5|c
potassium hydroxide|H315|0.5|2|c
potassium hydroxide|H319|0.5|2|c
hydrochloric acid|H314|25||a
hydrochloric acid|H315|10|25|a
hydrochloric acid|H319|10|25|a
hydrochloric acid|H335|10||a
nitric acid|H272|65||a
nitric acid|H314|20||a
nitric acid|H314|5|20|a
sulfuric acid|H314|15||a
sulfuric acid|H315|5|15|a
sulfuric acid|H319|5|15|a
ethanoic acid|H314|90||c
ethanoic acid|H314|25|90|a
ethanoic acid|H315|10|25|c
ethanoic acid|H319|10|25|c
methanoic acid|H314|90||c
methanoic acid|H314|10|90|a
methanoic acid|H315|2|10|c
methanoic acid|H319|2|10|c
phosphoric acid|H314|25||a
phosphoric acid|H315|10|25|a
phosphoric acid|H319|10|25|a
ammonia|H335|5||a
sodium hypochlorite|EUH031|5||a
formaldehyde|H314|25||a
formaldehyde|H315|5|25|c
formaldehyde|H319|5|25|c
formaldehyde|H335|5||c
formaldehyde|H317|0.2||c
phenol|H314|3||a
phenol|H315|1|3|a
phenol|H319|1|3|c
potassium dichromate|H335|5||c
potassium chromate|H317|0.5||c
lead(II) nitrate|H373|0.5||c
lead(II) nitrate|H361f|2.5||c
iron(II) sulfate|H315|25||c
""".strip().splitlines()


@pytest.fixture
def rows() -> list[Row]:
    with (SEEDS / "hazards.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def table(name: str) -> list[Row]:
    path = SEEDS / name
    if not path.is_file():
        return []
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def column_faults(rows: list[Row]) -> list[str]:
    """Columns as agreed, and the substances in the order of the alphabet."""
    wrong = [str(list(row)) for row in rows if list(row) != COLUMNS]
    names = [row["substance"].casefold() for row in rows]
    pairs = zip(names, sorted(names), strict=True)
    return wrong + [f"{name!r} is out of order" for name, due in pairs if name != due][:1]


def row_faults(rows: list[Row]) -> list[str]:
    """Rows that cannot be read: a class, a statement, a basis or a route nobody knows."""
    found = []
    for row in rows:
        try:
            limit_from(row)
        except StockroomError as error:
            found.append(f"{row['substance']}: {error.message}")
    return found


def source_faults(rows: list[Row]) -> list[str]:
    """Keys that are not in the list of sources, and memory that claims to have been seen."""
    hows = {row["key"]: row["how"] for row in table("SOURCES.csv")}
    found = [f"{r['substance']}: no key {r['source']!r}" for r in rows if r["source"] not in hows]
    return found + [
        f"{row['substance']} {row['h_code']}: {row['how']!r} from {row['source']!r}"
        for row in rows
        if row["how"] not in ("a", "b", "c")
        or (row["how"] == "a" and hows.get(row["source"]) != "seen")
    ]


def name_faults(rows: list[Row]) -> list[str]:
    """Substances that no shipped table of substances knows."""
    known = {plain(row["substance"]) for row in table("college/substances.csv")}
    known |= {plain(row["substance"]) for row in table("starter/substances.csv")}
    return sorted({row["substance"] for row in rows if plain(row["substance"]) not in known})


def band_faults(rows: list[Row]) -> list[str]:
    """Specific limits without a lower edge, bands turned round, and bands that overlap."""
    return [
        f"{each.h_code}: from {each.from_percent} below {each.below_percent}"
        for each in map(limit_from, rows)
        if (each.basis is Basis.SPECIFIC and not each.from_percent)
        or (each.basis in (Basis.HARMONISED, Basis.NONE) and each.from_percent)
        or not 0 <= (each.from_percent or 0) < (each.below_percent or 100.1) <= 100.1
    ] + list(_overlaps(rows))


def _overlaps(rows: list[Row]) -> Iterator[str]:
    bands: dict[tuple[str, str], list[tuple[float, float]]] = {}
    for row in rows:
        if row["basis"] == "specific" and row["from_percent"]:
            band = float(row["from_percent"]), float(row["below_percent"] or 100)
            bands.setdefault((row["substance"], limit_from(row).ladder), []).append(band)
    for (substance, ladder), row_of in bands.items():
        ordered = sorted(row_of)
        for (_, end), (start, _) in pairwise(ordered):
            if start < end:
                yield f"{substance} on {ladder}: {start:g} % lies inside the band before it"


def acute_faults(rows: list[Row]) -> list[str]:
    """Poisons without a route, with a code of another category, or an estimate outside theirs."""
    found = []
    for row in rows:
        if row["hazard_class"].startswith("Acute Tox."):
            found += [f"{row['substance']}: {fault}" for fault in _poison(limit_from(row))]
    return found


def _poison(limit: Limit) -> Iterator[str]:
    category = int(limit.hazard_class[-1])
    if limit.route is None:
        yield f"{limit.h_code} has no route"
        return
    if CODES[limit.way_in][category - 1] != limit.h_code:
        yield f"{limit.h_code} is not category {category} {limit.way_in}"
    low = ([0.0, *LIMITS[limit.route]])[category - 1]
    if limit.ate is not None and not low < limit.ate <= LIMITS[limit.route][category - 1]:
        yield f"an estimate of {limit.ate:g} is not category {category}"


def factor_faults(rows: list[Row]) -> list[str]:
    """Factors on anything but category 1 of water life, or that are no power of ten."""
    return [
        f"{row['substance']}: factor {row['m_factor']} on {row['hazard_class']}"
        for row in rows
        if row["m_factor"]
        and (
            row["hazard_class"] not in ("Aquatic Acute 1", "Aquatic Chronic 1")
            or row["m_factor"].strip("0") not in ("1",)
        )
    ]


def twice_faults(rows: list[Row]) -> list[str]:
    """The same thing said twice, and "not classified" beside a class."""
    keys = Counter(
        (r["substance"], r["hazard_class"], r["h_code"], r["route"], r["from_percent"])
        for r in rows
    )
    found = [str(key) for key, times in keys.items() if times > 1]
    bases: dict[str, set[str]] = {}
    for row in rows:
        bases.setdefault(row["substance"], set()).add(row["basis"])
    return found + [name for name, held in bases.items() if "none" in held and len(held) > 1]


def counted_faults(rows: list[Row]) -> list[str]:
    """Ways of counting that are neither available chlorine nor a formula."""
    found = []
    for row in rows:
        if row["percent_of"] in ("", "available chlorine"):
            continue
        try:
            molar_mass(row["percent_of"])
        except StockroomError:
            found.append(f"{row['substance']}: {row['percent_of']!r}")
    return found


CHECKS: dict[str, Check] = {
    each.__name__: each
    for each in (
        column_faults, row_faults, source_faults, name_faults, band_faults, acute_faults,
        factor_faults, twice_faults, counted_faults,
    )
}  # fmt: skip


@pytest.mark.parametrize("check", CHECKS.values(), ids=CHECKS)
def test_the_table_passes_every_check(check: Check, rows: list[Row]) -> None:
    assert check(rows) == []


# the check that catches it, a row it is planted in (substance and code), and the error
PLANTED = [
    ("column_faults", "sodium hydroxide", "H315", {"substance": "aardvark"}),
    ("row_faults", "sodium hydroxide", "H315", {"h_code": "H399"}),
    ("row_faults", "sodium hydroxide", "H315", {"h_code": "H319"}),
    ("row_faults", "sodium hydroxide", "H315", {"hazard_class": "Skin Irrit. 3"}),
    ("row_faults", "sodium hydroxide", "H315", {"from_percent": "half"}),
    ("source_faults", "sodium hydroxide", "H315", {"source": "hearsay"}),
    ("source_faults", "potassium hydroxide", "H315", {"how": "a"}),
    ("source_faults", "potassium hydroxide", "H315", {"how": "d"}),
    ("name_faults", "sodium hydroxide", "H315", {"substance": "sodium hydroxid"}),
    ("band_faults", "sodium hydroxide", "H315", {"from_percent": ""}),
    ("band_faults", "sodium hydroxide", "H315", {"from_percent": "3"}),
    ("band_faults", "sodium hydroxide", "H315", {"below_percent": "4"}),
    ("acute_faults", "phenol", "H301", {"route": ""}),
    ("row_faults", "phenol", "H301", {"route": "dermal"}),
    ("row_faults", "phenol", "H301", {"h_code": "H302"}),
    ("acute_faults", "phenol", "H301", {"ate": "1200"}),
    ("factor_faults", "silver nitrate", "H410", {"m_factor": "25"}),
    ("factor_faults", "silver nitrate", "H314", {"m_factor": "10"}),
    (
        "twice_faults",
        "sodium hydroxide",
        "H319",
        {"hazard_class": "Skin Irrit. 2", "h_code": "H315"},
    ),
    ("counted_faults", "copper(II) sulfate", "H318", {"percent_of": "CuSO4.5Hx"}),
]


@pytest.mark.parametrize(("check", "substance", "code", "error"), PLANTED)
def test_a_planted_error_is_caught(
    check: str, substance: str, code: str, error: Row, rows: list[Row]
) -> None:
    found = next(r for r in rows if (r["substance"], r["h_code"]) == (substance, code))
    found |= error
    assert CHECKS[check](rows)


@pytest.mark.parametrize("line", REFERENCE)
def test_the_reference_limits_are_held_with_their_marks(line: str, rows: list[Row]) -> None:
    substance, code, low, below, how = line.split("|")
    held = {
        (r["h_code"], r["from_percent"], r["below_percent"], r["how"])
        for r in rows
        if r["substance"] == substance
    }
    assert (code, low, below, how) in held


def test_most_of_what_a_teaching_laboratory_holds_is_entered(rows: list[Row]) -> None:
    entered = {row["substance"] for row in rows}
    starter = [row["substance"] for row in table("starter/substances.csv")]
    assert sum(name in entered for name in starter) > 0.85 * len(starter)


def test_a_converted_estimate_lies_in_its_own_category() -> None:
    """But for category 2, whose estimate is the limit of category 1: F2 nos. 9 and 10 (c)."""
    for route, estimates in CONVERTED.items():
        for category, estimate in enumerate(estimates, start=1):
            assert estimate <= LIMITS[Route(route)][category - 1]
    assert set(CONVERTED) == set(LIMITS)


def test_every_class_is_on_a_ladder() -> None:
    assert all(each.ladder for each in CLASSES.values())


def test_the_table_is_text_that_a_spreadsheet_can_read() -> None:
    raw = Path(SEEDS / "hazards.csv").read_bytes()
    assert b"\r" not in raw
    assert not raw.startswith(b"\xef\xbb\xbf")
