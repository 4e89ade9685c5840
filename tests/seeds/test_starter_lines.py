"""The stock lines of the starter house hold together, and every check is seen to fail."""

from __future__ import annotations

import copy

import pytest
from line_tables import DATED, SEEDS, TABLES, House, Tables, faults, key_of, read


@pytest.fixture(scope="module")
def tables() -> Tables:
    return {name: read(SEEDS / "starter" / f"{name}.csv") for name in TABLES}


@pytest.fixture(scope="module")
def sources() -> set[str]:
    return {row["key"] for row in read(SEEDS / "SOURCES.csv")}


def test_the_lines_have_no_faults(tables: Tables, sources: set[str]) -> None:
    assert faults(tables, sources) == []


def test_far_more_lines_are_made_than_a_small_house_needs(tables: Tables) -> None:
    assert len(tables["methods"]) >= 100
    assert {rule["rule"] for rule in tables["keeping"]} == {
        *DATED, "same day", "fades", "never kept"
    }  # fmt: skip


BASE, ACID = "sodium hydroxide 2.00 mol/dm3", "sulfuric acid 2.00 mol/dm3"
PURPLE, WEAK = "potassium permanganate 0.0200 mol/dm3", "hydrochloric acid 0.100 mol/dm3"


@pytest.mark.parametrize(
    ("table", "row", "column", "value", "told"),
    [
        ("keeping", ACID, "source", "hearsay", "source 'hearsay'"),
        ("ingredients", ACID, "ingredient", "sulfuric acid 99 % w/w", "no line 'sulfuric acid 99"),
        ("lines", ACID, "substance", "vitriol", "no substance 'vitriol'"),
        ("lines", ACID, "keep_note", "Grandlab™ cabinet", "keep_note 'Grandlab™"),
        ("lines", ACID, "keep_note", "", "nothing says how to store it"),
        ("methods", ACID, "minutes", "0", "'0' minutes"),
        ("methods", ACID, "steps", "", "without steps"),
        ("methods", ACID, "line", BASE, "a line stands twice"),
        ("methods", ACID, "cautions", "Gloves", "no caution says 'into water'"),
        ("methods", BASE, "cautions", "", "no caution says 'in portions'"),
        ("methods", "hydrogen peroxide 10 vol", "cautions", "Gloves", "says 'vented'"),
        ("methods", "bleach, diluted 1 in 10", "cautions", "Vented cap", "says 'chlorine'"),
        ("methods", "ethanol 70 % v/v", "cautions", "Gloves", "says 'flame'"),
        ("methods", "silver nitrate 0.100 mol/dm3", "cautions", "Collect", "says 'oxidiser'"),
        ("methods", "silver nitrate 0.0500 mol/dm3", "cautions", "Gloves", "not collected"),
        ("lines", "hydrogen peroxide 10 vol", "vented_cap", "no", "no vented cap"),
        ("keeping", ACID, "lasts", "0 d", "lasts '0 d'"),
        ("keeping", "sodium hypochlorite 12 % w/v", "rule", "fades", "rate ''"),
        ("keeping", "ammoniacal silver", "lasts", "1 d", "ammoniacal silver: never kept"),
        ("lines", "ammoniacal silver", "never_kept", "", "ammoniacal silver: never kept"),
        ("keeping", BASE, "stronger_than", "0.9 mol/dm3", "sodium hydroxide: bands"),
        ("keeping", BASE, "stronger_than", "1.1 mol/dm3", "sodium hydroxide: bands"),
        ("keeping", BASE, "up_to_strength", "1.5 mol/dm3", f"{BASE}: outside its band"),
        ("keeping", PURPLE, "rule", "life", "nothing tells it from another"),
        ("lines", "sulfuric acid 98 % w/w", "density_g_cm3", "1.48", "14.79 mol/dm³"),
        ("lines", "copper(II) sulfate pentahydrate", "formula", "CuSO5.5H2O", "is no hydrate"),
        ("ingredients", BASE, "per_dm3_g", "80", "80 of sodium hydroxide pellets is typed"),
        ("ingredients", "soap solution", "per_dm3_g", "", "how much soap flakes?"),
        ("ingredients", WEAK, "ingredient", "hydrochloric acid 0.0100 mol/dm3", "cannot be made"),
    ],
)  # fmt: skip
def test_a_planted_fault_is_told(
    tables: Tables, sources: set[str], table: str, row: str, column: str, value: str, told: str
) -> None:
    spoilt = copy.deepcopy(tables)
    named = key_of if table == "lines" else lambda found: found["line"]
    found = next(one for one in spoilt[table] if named(one) == row)
    assert found[column] != value
    found[column] = value
    assert any(told in fault for fault in faults(spoilt, sources))


@pytest.mark.parametrize("table", ["keeping", "methods", "ingredients"])
def test_a_missing_row_is_told(tables: Tables, sources: set[str], table: str) -> None:
    spoilt = {**tables, table: [row for row in tables[table] if row["line"] != ACID]}
    assert any(ACID in fault for fault in faults(spoilt, sources))


def test_the_college_means_the_same_by_the_same_name(tables: Tables, sources: set[str]) -> None:
    college = House({name: read(SEEDS / "college" / f"{name}.csv") for name in TABLES}, sources)
    starter = House(tables, sources)
    both = college.lines.keys() & starter.lines.keys()
    assert len(both) > 50
    for key in both:
        ours, theirs = starter.lines[key], college.lines[key]
        assert [ours[c] for c in ("substance", "form", "formula")] == [
            theirs[c] for c in ("substance", "form", "formula")
        ]
        assert starter.formula(ours) == college.formula(theirs), key
