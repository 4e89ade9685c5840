"""What can be wrong with the tables of stock lines, read as CSV rows and without a store.

    faults(tables, sources)   everything wrong, each naming the line or row and the value
    House                     the tables side by side, each line found by its key

`seeds/test_starter_lines.py` runs it on the starter house and plants a fault for every check.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Callable, Iterator
from pathlib import Path

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.making import molarity_of_liquid
from stockroom.chemistry.strength import canonical
from stockroom.errors import StockroomError
from stockroom.measure.parsing import parse_strength
from stockroom.measure.periods import parse_period

Row = dict[str, str]
Tables = dict[str, list[Row]]

SEEDS = Path(__file__).parents[1] / "seeds_data"
TABLES = ("substances", "lines", "keeping", "methods", "ingredients")
DATED = {"life", "recheck", "look", "test or discard"}
BAND = ("stronger_than", "up_to_strength")
# what tells two rules of a line apart, for a house that puts its own in the place of one
WHICH = ("line", "rule", "purpose", *BAND, "colder_than_c", "warmer_than_c")
HAZARDOUS = set(
    "acid;oxidising acid;organic acid;alkali;oxidiser;peroxide;hypochlorite;flammable;toxic"
    ";thiocyanate".split(";")
)
COLLECTED = re.compile(
    r"^(copper|silver|barium|lead|cobalt|nickel|chromium|manganese)\b|permanganate|chromate"
)
# an advertisement has no place in a table of one's own: signs, addresses and firms
ADVERTISED = re.compile(r"[®™©]|https?:|www\.|\b(?:Ltd|Inc|GmbH|plc)\b")
STATED = re.compile(r"about ([0-9.]+) mol/dm³")
WATER = molar_mass("H2O")


def read(path: Path) -> list[Row]:
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def key_of(line: Row) -> str:
    return f"{line['item']} {line['strength']}".strip()


class House:
    """The tables side by side, each line found by its key."""

    def __init__(self, tables: Tables, sources: set[str]) -> None:
        self.tables, self.sources = tables, sources
        self.substances = {row["substance"]: row for row in tables["substances"]}
        self.lines = {key_of(row): row for row in tables["lines"]}
        self.methods = {row["line"]: row for row in tables["methods"]}
        self.rules: dict[str, list[Row]] = {}
        self.made_from: dict[str, list[Row]] = {}
        for rule in tables["keeping"]:
            self.rules.setdefault(rule["line"], []).append(rule)
        for row in tables["ingredients"]:
            self.made_from.setdefault(row["line"], []).append(row)

    def group(self, key: str) -> str:
        return self.substances.get(self.lines[key]["substance"], {}).get("storage_group", "")

    def formula(self, line: Row) -> str:
        return self.substances.get(line["substance"], {}).get("formula", "")

    def strength(self, line: Row, written: str) -> float | None:
        """A strength of the line as a number, in mol/dm³ or g/dm³; None where words say it."""
        formula, density = self.formula(line), line["density_g_cm3"]
        try:
            return canonical(
                parse_strength(written),
                molar_mass=molar_mass(formula) if formula else None,
                density=float(density) if density else None,
            ).value
        except StockroomError:
            return None


def faults(tables: Tables, sources: set[str]) -> list[str]:
    """Everything wrong with the tables of stock lines; `sources` are the keys there are."""
    house = House(tables, sources)
    return [fault for check in CHECKS for fault in check(house)]


def references(house: House) -> Iterator[str]:
    for table, rows in house.tables.items():
        for number, row in enumerate(rows, start=2):
            where = f"{table} row {number}"
            if row["source"] not in house.sources:
                yield f"{where}: source {row['source']!r}"
            for column, value in row.items():
                if value != value.strip() or ADVERTISED.search(value):
                    yield f"{where}: {column} {value!r}"
                if column in ("line", "ingredient") and value not in house.lines:
                    yield f"{where}: no line {value!r}"
            if table == "lines" and row["substance"] not in {"", *house.substances}:
                yield f"{where}: no substance {row['substance']!r}"
    for table, found in (("lines", house.lines), ("methods", house.methods)):
        if len(found) < len(house.tables[table]):
            yield f"{table}: a line stands twice"


def completeness(house: House) -> Iterator[str]:
    for key, line in house.lines.items():
        rules = house.rules.get(key, [])
        if not rules:
            yield f"{key}: no keeping rule"
        if not line["keep_note"]:
            yield f"{key}: nothing says how to store it"
        bought = any(rule["counted_from"] in ("received", "opened") for rule in rules)
        had = bought or key in house.methods or line["never_kept"]
        if line["form"] == "solution" and not had:
            yield f"{key}: neither made nor bought"
    for key, method in house.methods.items():
        if not method["steps"] or key not in house.made_from:
            yield f"{key}: a method without steps or ingredients"
        if not float(method["minutes"] or 0) > 0:
            yield f"{key}: {method['minutes']!r} minutes"


def lives(house: House) -> Iterator[str]:
    told: set[tuple[str, ...]] = set()
    for rule in house.tables["keeping"]:
        name = f"{rule['line']}, {rule['rule']}"
        which = tuple(rule[column] for column in WHICH)
        if which in told:
            yield f"{name}: nothing tells it from another rule"
        told.add(which)
        if rule["rule"] in DATED and not lasts(rule["lasts"]):
            yield f"{name}: lasts {rule['lasts']!r}"
        if rule["rule"] == "fades" and not (rule["named_law"] or float(rule["rate"] or 0) > 0):
            yield f"{name}: rate {rule['rate']!r}"


def lasts(written: str) -> bool:
    try:
        return parse_period(written).count > 0
    except StockroomError:
        return False


def never_kept(house: House) -> Iterator[str]:
    for key, line in house.lines.items():
        kinds = [rule["rule"] for rule in house.rules.get(key, [])]
        if not line["never_kept"] and "never kept" not in kinds:
            continue
        lives = any(rule["lasts"] for rule in house.rules.get(key, []))
        if not line["never_kept"] or kinds != ["never kept"] or lives or key in house.methods:
            yield f"{key}: never kept, or not?"


def bands(house: House) -> Iterator[str]:
    """The bands of one item, over all its lines, part the strengths from nothing upwards."""
    families: dict[str, list[Row]] = {}
    for line in (line for line in house.lines.values() if line["form"] != "solid"):
        families.setdefault(line["item"], []).append(line)
    for item, lines in families.items():
        found = set()
        for line in lines:
            for rule in house.rules.get(key_of(line), []):
                low, high = (house.strength(line, rule[bound]) for bound in BAND)
                found.add((low or 0.0, high or float("inf")))
                own = house.strength(line, line["strength"]) if low or high else None
                if own is not None and not (low or 0) < own <= (high or float("inf")):
                    yield f"{key_of(line)}: outside its band {low} to {high}"
        edges = sorted(found)
        ends = [0.0, *(high for _, high in edges)]
        starts = [*(low for low, _ in edges), float("inf")]
        if edges and ends != starts:
            yield f"{item}: bands {edges} overlap or leave a gap"


def strengths(house: House) -> Iterator[str]:
    for line in house.lines.values():
        formula, note = house.formula(line), STATED.search(line["keep_note"])
        if line["form"] == "liquid" and "% w/w" in line["strength"]:
            percent = float(line["strength"].split()[0])
            density, mass = float(line["density_g_cm3"] or 1), molar_mass(formula)
            comes_to = molarity_of_liquid(percent, density, mass)
            if not note or abs(float(note[1]) / comes_to - 1) > 0.01:
                yield f"{key_of(line)}: {comes_to:.2f} mol/dm³ by its density"
        if line["form"] == "solid" and line["formula"] and formula:
            more = molar_mass(line["formula"]) - molar_mass(formula)
            waters = round(more / WATER)
            salt = "HCl" in line["formula"]
            if not salt and (waters < 0 or abs(more - waters * WATER) > 0.01):
                yield f"{key_of(line)}: {line['formula']} is no hydrate of {formula}"


def dilutions(house: House) -> Iterator[str]:
    for row in house.tables["ingredients"]:
        if not {row["line"], row["ingredient"]} <= house.lines.keys():
            continue
        product, source = house.lines[row["line"]], house.lines[row["ingredient"]]
        strong = house.strength(source, source["strength"]) if source["strength"] else None
        made = house.strength(product, product["strength"]) if product["strength"] else None
        typed = row["per_dm3_g"] or row["per_dm3_cm3"]
        alike = product["substance"] == source["substance"] != ""
        if row["role"] == "solute" and alike and made and strong and strong <= made:
            yield f"{row['line']}: cannot be made from {row['ingredient']}"
        derived = made and (strong or source["form"] == "solid")
        if row["role"] == "solute" and alike and derived and typed:
            yield f"{row['line']}: {typed} of {row['ingredient']} is typed, not worked out"
        if not typed and not (row["role"] == "solute" and derived):
            yield f"{row['line']}: how much {row['ingredient']}?"


def cautions(house: House) -> Iterator[str]:
    for key, method in house.methods.items():
        said, line = method["cautions"].lower(), house.lines.get(key)
        if line is None:
            continue
        names = [row["ingredient"] for row in house.made_from.get(key, [])]
        for word in {need(house, name) for name in [key, *names] if name in house.lines} - {""}:
            if not re.search(word, said):
                yield f"{key}: no caution says {word!r}"
        if house.group(key) in HAZARDOUS and not said:
            yield f"{key}: no caution"
        if COLLECTED.search(line["substance"]) and "collect" not in said:
            yield f"{key}: residues not collected"
        gassy = house.group(key) in ("peroxide", "hypochlorite")
        if gassy and line["vented_cap"] != "yes":
            yield f"{key}: no vented cap"


def need(house: House, key: str) -> str:
    """What must be said beside the step that handles this line; "" for nothing of its own."""
    line, group = house.lines[key], house.group(key)
    if line["form"] == "liquid" and group in ("acid", "oxidising acid"):
        return "into water"
    if "pellets" in key:
        return "in portions"
    if group == "alkali" and line["form"] != "solution":
        return "eye protection"
    if group == "oxidiser" and line["form"] == "solid":
        return "oxidiser"
    if "flammable" in line["keep_note"] or (group == "flammable" and line["form"] == "liquid"):
        return "flame"
    return {"peroxide": "vented", "hypochlorite": "chlorine"}.get(group, "")


CHECKS: tuple[Callable[[House], Iterator[str]], ...] = (
    references, completeness, lives, never_kept, bands, strengths, dilutions, cautions
)  # fmt: skip
