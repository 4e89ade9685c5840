"""The tables of the invented college hold together, and every check here is seen to fail.

`faults` reads no store: it looks at the CSV rows alone and names table, row, column and value.
"""

from __future__ import annotations

import copy
import csv
import re
from collections import Counter
from collections.abc import Iterator
from datetime import date
from pathlib import Path

import pytest

from stockroom.chemistry.formula import check_cas, molar_mass
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.measure.days import parse_printed
from stockroom.measure.parsing import parse_strength, parse_strength_range
from stockroom.measure.periods import add, parse_period
from stockroom.planning.facts import Closeness, Firmness, Form, Per

Row = dict[str, str]
Tables = dict[str, list[Row]]

SEEDS = Path(__file__).parents[2] / "seeds_data"

REFERENCES = {
    "substances": "lines.substance recipe_bars.substance",
    "lines": "keeping.line methods.line ingredients.ingredient packs.line former_use.line"
    " bottles.line recipe_lines.line recipe_swaps.line recipe_swaps.instead",
    "methods": "ingredients.line",
    "recipes": "recipe_lines.recipe recipe_bars.recipe recipe_swaps.recipe bookings.recipe",
    "departments": "bookings.department",
    "places": "bottles.place history.place",
    "bottles": "bottles.parents history.bottle",
    "history": "history.puts_right",
}
TARGETS = {column: table for table, columns in REFERENCES.items() for column in columns.split()}
KEYS = {
    "substances": "substance",
    "methods": "line",
    "recipes": "recipe",
    "departments": "department",
    "places": "place",
    "bottles": "bottle",
    "history": "number",
    "bookings": "booking",
}
# "opened" may also be "yes": opened, and nobody wrote the day
DAYS = {"from", "to", "on", "received", "made", "left_on", "happened", "entered"}
EVENTS = set("opened drawn counted found looked tested moved lost spilled discarded".split())
GROUPS = set("acid alkali oxidiser hypochlorite peroxide flammable general".split())
CHOICES: dict[tuple[str, str], set[str]] = {
    ("lines", "form"): set(Form),
    ("keeping", "rule"): set(RuleKind),
    ("keeping", "counted_from"): {"", *Origin},
    ("keeping", "purpose"): {"", *Purpose},
    ("recipe_lines", "closeness"): set(Closeness),
    ("recipe_lines", "per"): set(Per),
    ("bookings", "firmness"): set(Firmness),
    ("history", "event"): EVENTS | {"turned up", "set aside", "put right"},
    ("substances", "storage_group"): {"", *GROUPS},
}
# how many of a row's amount columns are filled in: exactly one
ONE_OF = {
    "recipe_lines": ("amount_g", "amount_cm3", "amount_items"),
    "bottles": ("size_g", "size_cm3", "size_items"),
    "packs": ("size_g", "size_cm3", "size_items"),
}
SIZED = ("_g", "_cm3", "_items", "_percent", "_days", "_gbp", "minutes", "groups", "factor", "rate")
MAY_BE_NOUGHT = ("left_g", "left_cm3", "left_items")


def read(path: Path) -> list[Row]:
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def key_of(table: str, row: Row) -> str:
    """A row's name as other tables write it: a line's is its item with the strength."""
    if table == "lines":
        return f"{row['item']} {row['strength']}".strip()
    return row[KEYS[table]]


def faults(tables: Tables, sources: set[str]) -> list[str]:
    """Everything wrong with the rows, each as "table row column: value"."""
    found = []
    for table, rows in tables.items():
        for number, row in enumerate(rows, start=2):
            wrong = [*row_faults(table, row, sources), *reference_faults(table, row, tables)]
            found += [f"{table} row {number} {fault}" for fault in wrong]
    return found + key_faults(tables)


def row_faults(table: str, row: Row, sources: set[str]) -> Iterator[str]:
    if row["source"] not in sources:
        yield f"source: {row['source']!r}"
    for column, value in row.items():
        if value != value.strip():
            yield f"{column}: {value!r} has spaces round it"
        if value and column.endswith(SIZED) and not is_amount(column, value):
            yield f"{column}: {value!r} is no amount"
        if value and column in DAYS and not is_day(value):
            yield f"{column}: {value!r} is no day"
        if value not in CHOICES.get((table, column), {value}):
            yield f"{column}: {value!r} is not offered"
    if table in ONE_OF and sum(bool(row[column]) for column in ONE_OF[table]) != 1:
        yield f"amount: {[row[column] for column in ONE_OF[table]]!r} is not one"


def reference_faults(table: str, row: Row, tables: Tables) -> Iterator[str]:
    for column in row:
        target = TARGETS.get(f"{table}.{column}")
        known = {key_of(target, other) for other in tables[target]} if target else set()
        # only parents are lists; a name may hold a comma but never a semicolon
        names = [name for name in row[column].split(";") if name] if target else []
        yield from (f"{column}: {name!r} is unknown" for name in names if name not in known)


def key_faults(tables: Tables) -> list[str]:
    counts = {
        table: Counter(key_of(table, row) for row in tables[table]) for table in (*KEYS, "lines")
    }
    return [
        f"{table}: {key!r} stands {times} times"
        for table, count in counts.items()
        for key, times in count.items()
        if times > 1
    ]


def is_amount(column: str, value: str) -> bool:
    """True for plain decimals only: no sign, no exponent, no comma."""
    plain = re.fullmatch(r"[0-9]+(\.[0-9]+)?", value)
    return bool(plain) and (float(value) > 0 or column in MAY_BE_NOUGHT)


def is_day(value: str) -> bool:
    try:
        return date.fromisoformat(value).isoformat() == value
    except ValueError:
        return False


@pytest.fixture(scope="module")
def tables() -> Tables:
    return {path.stem: read(path) for path in sorted((SEEDS / "college").glob("*.csv"))}


@pytest.fixture(scope="module")
def sources() -> set[str]:
    return {row["key"] for row in read(SEEDS / "SOURCES.csv")}


def one(rows: list[Row], **wanted: str) -> Row:
    (row,) = [row for row in rows if wanted.items() <= row.items()]
    return row


def test_the_tables_have_no_faults(tables: Tables, sources: set[str]) -> None:
    assert len(tables) == 22
    assert faults(tables, sources) == []


@pytest.mark.parametrize(
    ("table", "column", "value", "told"),
    [
        ("packs", "source", "hearsay", "packs row 2 source: 'hearsay'"),
        ("bottles", "line", "hydrogen peroxide 99 vol", "is unknown"),
        ("bottles", "parents", "B06;B99", "'B99' is unknown"),
        ("recipe_bars", "substance", "salts of iron", "'salts of iron' is unknown"),
        ("recipe_lines", "amount_cm3", "-80", "'-80' is no amount"),
        ("recipe_lines", "amount_cm3", "0", "'0' is no amount"),
        ("recipe_lines", "amount_g", "5", "is not one"),
        ("recipe_lines", "per", "", "'' is not offered"),
        ("bookings", "on", "2027-02-30", "'2027-02-30' is no day"),
        ("keeping", "rule", "keeps well", "'keeps well' is not offered"),
        ("places", "name", "acids cupboard ", "has spaces round it"),
        ("bottles", "bottle", "B02", "'B02' stands 2 times"),
    ],
)
def test_a_planted_fault_is_told(
    tables: Tables, sources: set[str], table: str, column: str, value: str, told: str
) -> None:
    spoilt = copy.deepcopy(tables)
    spoilt[table][0][column] = value
    assert any(told in fault for fault in faults(spoilt, sources))


def test_sources_say_how_each_was_come_by() -> None:
    hows = {
        "seen",
        "worked out",
        "from memory",
        "partly from memory",
        "common practice, no source",
        "invented",
    }
    assert {row["how"] for row in read(SEEDS / "SOURCES.csv")} == hows


def test_no_other_name_means_two_substances(tables: Tables) -> None:
    rows = tables["substances"]
    names = [n for row in rows for n in [row["substance"], *row["other_names"].split(";")] if n]
    assert [name for name, times in Counter(map(str.lower, names)).items() if times > 1] == []


def test_every_strength_formula_and_life_can_be_read(tables: Tables) -> None:
    for row in tables["lines"] + tables["history"]:
        assert not row["strength"] or parse_strength(row["strength"])
    for row in tables["substances"] + tables["lines"]:
        assert not row["formula"] or molar_mass(row["formula"]) > 0
    for row in tables["keeping"]:
        assert not row["lasts"] or parse_period(row["lasts"])
    assert parse_strength_range(one(tables["recipe_lines"], recipe="R02", number="1")["strength"])


def test_every_registry_number_has_a_good_check_digit(tables: Tables) -> None:
    for number in (row["cas"] for row in tables["substances"] if row["cas"]):
        check_cas(number)


def test_one_printed_date_has_two_readings(tables: Tables) -> None:
    printed = {row["bottle"]: parse_printed(row["printed"]) for row in tables["bottles"]}
    assert [bottle for bottle, day in printed.items() if day and day.ambiguous] == ["B21"]


def test_only_two_recipes_bar_what_they_also_use(tables: Tables) -> None:
    """These bars speak of a part played (a swap, an acidifier), not of the recipe's own line."""
    substance = {key_of("lines", row): row["substance"] for row in tables["lines"]}
    used = {(row["recipe"], substance[row["line"]]) for row in tables["recipe_lines"]}
    both = {(row["recipe"], row["substance"]) for row in tables["recipe_bars"]} & used
    assert both == {("R12", "sodium chloride"), ("R14", "hydrochloric acid")}


def test_everything_a_recipe_asks_for_is_made_bought_or_fetched(tables: Tables) -> None:
    made = {row["line"] for row in tables["methods"]}
    held = {row["line"] for row in tables["bottles"]}
    fetched = {row["item"] for row in tables["lines"] if row["form"] == Form.SUNDRY}
    assert {row["line"] for row in tables["recipe_lines"]} <= made | held | fetched


# cm³ over the term: groups × amount × (1 + spare), added by hand from the bookings
TERM_NEEDS = {
    "ammonium iron(II) sulfate 0.100 mol/dm3": 3696,
    "hydrochloric acid 1.00 mol/dm3": 1199,
    "hydrogen peroxide 100 vol": 300,
    "potassium iodide 0.100 mol/dm3": 2128,
    "potassium permanganate 0.0200 mol/dm3": 4620,
    "sodium thiosulfate 0.200 mol/dm3": 4048,
    "sodium thiosulfate 0.500 mol/dm3": 250,
    "sulfuric acid 1.00 mol/dm3": 3437.25,
    "sulfuric acid 98 % w/w": 15.675,
}


@pytest.mark.parametrize("line", TERM_NEEDS)
def test_the_recipes_and_bookings_come_to_the_sums_by_hand(tables: Tables, line: str) -> None:
    total = sum(
        need_cm3(wanted, booking)
        for wanted in tables["recipe_lines"]
        for booking in tables["bookings"]
        if wanted["line"] == line and wanted["recipe"] == booking["recipe"]
    )
    assert total == pytest.approx(TERM_NEEDS[line], abs=1e-9)


def need_cm3(wanted: Row, booking: Row) -> float:
    many = 1 if wanted["per"] in (Per.CLASS, Per.ROOM) else int(booking["groups"])
    spare = 0.0 if wanted["spare"] == "no" else float(booking["spare_percent"]) / 100
    return float(wanted["amount_cm3"]) * many * (1 + spare)


@pytest.mark.parametrize(
    ("bottle", "rule", "good_until"),
    [
        ("S01", "life", "2027-05-15"),
        ("S03", "look", "2027-01-03"),
        ("S07", "life", "2027-01-31"),
        ("S09", "life", "2026-12-21"),
        ("S19", "life", "2026-12-14"),
    ],
)
def test_a_life_ends_on_the_day_counted_by_hand(
    tables: Tables, bottle: str, rule: str, good_until: str
) -> None:
    held = one(tables["bottles"], bottle=bottle)
    life = one(tables["keeping"], line=held["line"], rule=rule)
    last = add(date.fromisoformat(held["made"]), parse_period(life["lasts"]))
    assert last.isoformat() == good_until


@pytest.mark.parametrize(("bottle", "unit", "left"), [("B06", "g", 640), ("S05", "cm3", 2600)])
def test_count_and_later_history_leave_what_stands_on_the_shelf(
    tables: Tables, bottle: str, unit: str, left: float
) -> None:
    counted = one(tables["bottles"], bottle=bottle)
    events = [row for row in tables["history"] if row["bottle"] == bottle]
    undone = {row["puts_right"] for row in events}
    drawn = [row for row in events if row["event"] == "drawn" and row["number"] not in undone]
    assert all(row["happened"] > counted["left_on"] for row in events)
    taken = sum(float(row[f"amount_{unit}"]) for row in drawn)
    assert float(counted[f"left_{unit}"]) - taken == left
