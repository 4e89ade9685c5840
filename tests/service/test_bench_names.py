from __future__ import annotations

import shutil
from collections.abc import Iterator
from pathlib import Path

import pytest

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadInput, UnknownName
from stockroom.planning.facts import Form
from stockroom.service import bench_names, bench_tables
from stockroom.service.bench_names import Stuff, solid, solute
from stockroom.service.database import seeds_folder

CACHED = (
    bench_tables.substances,
    bench_tables.lines,
    bench_tables.other_names,
    bench_tables.formulas,
    bench_tables.names,
    bench_names._shipped_lines,
)


@pytest.fixture
def college_only(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[None]:
    """The program with the practice college's tables and no starter folder beside them."""
    shutil.copytree(seeds_folder() / "college", tmp_path / "college")
    for table in CACHED:
        table.cache_clear()
    monkeypatch.setattr(bench_tables, "_seeds", lambda: tmp_path)
    yield
    for table in CACHED:
        table.cache_clear()


@pytest.mark.usefixtures("college_only")
def test_without_the_starter_folder_the_college_answers() -> None:
    assert solute("hypo").substance == "sodium thiosulfate"
    with pytest.raises(UnknownName, match="zinc nitrate"):
        solute("zinc nitrate")


def test_the_starter_tables_are_found_by_any_name() -> None:
    assert solute("cerium(IV) sulfate").formula == solute("ceric sulfate").formula == "Ce(SO4)2"


@pytest.mark.parametrize(
    ("of", "dry", "hydrated"),
    [("CuSO4·5H2O", 159.61, 249.68), ("copper(II) sulfate pentahydrate", 159.61, 249.68)],
)
def test_a_hydrate_knows_its_mass_without_its_water(of: str, dry: float, hydrated: float) -> None:
    stuff = solute(of)
    assert stuff.dry_mass == pytest.approx(dry, abs=0.01)
    assert stuff.molar_mass == pytest.approx(hydrated, abs=0.01)
    assert stuff.substance == "copper(II) sulfate"


def test_a_formula_that_two_substances_share_names_neither() -> None:
    assert solute("C4H10O").name == "C4H10O"


def test_two_jars_of_one_form_need_no_asking() -> None:
    jars = [Stuff(name, "soda", Form.SOLID, 105.99) for name in ("lumps", "powder")]
    assert solid("soda", jars).name == "lumps"


def test_two_forms_on_ones_own_shelf_are_asked_about() -> None:
    jars = [
        Stuff("dry soda", "soda", Form.SOLID, 105.99),
        Stuff("soda crystals", "soda", Form.SOLID, 286.14),
    ]
    with pytest.raises(BadInput, match="dry soda or soda crystals"):
        solid("soda", jars)


def test_ones_own_jar_stands_before_what_others_keep() -> None:
    jar = Stuff("my thiosulfate", "sodium thiosulfate", Form.SOLID, 248.18)
    assert solid("hypo", [jar]) is jar


@pytest.mark.parametrize(
    ("of", "name"),
    [
        ("glacial acetic acid", "ethanoic acid, glacial"),
        ("copper sulphate pentahydrate", "copper(II) sulfate pentahydrate"),
        ("aluminium nitrate nonahydrate", "Al(NO3)3.9H2O"),
        ("(COOH)2·2H2O", "oxalic acid dihydrate"),
        ("CH3COOH", "ethanoic acid"),
        ("C6H12O6", "C6H12O6"),
    ],
)
def test_another_spelling_finds_the_same_thing(of: str, name: str) -> None:
    assert solute(of).name == name


@pytest.mark.parametrize("of", ["", "  "])
def test_nothing_is_no_name(of: str) -> None:
    with pytest.raises(BadInput, match="of what"):
        solute(of)


@pytest.mark.parametrize(
    ("of", "hint"),
    [
        ("kmno4", "KMnO4 is potassium permanganate"),
        ("B03", "Is B03 a bottle?"),
        ("s10a", "Is s10a a bottle?"),
    ],
)
def test_a_slip_is_answered_with_what_was_meant(of: str, hint: str) -> None:
    with pytest.raises(UnknownName) as caught:
        solid(of)
    assert hint in caught.value.hint


@pytest.mark.parametrize(
    "of", ["S8", "P4", "I2", "O2", "N2", "H2", "Cl2", "Br2", "F2", "O3", "B2H6"]
)
def test_the_molecules_of_an_element_are_no_bottles(of: str) -> None:
    assert solute(of).molar_mass == pytest.approx(molar_mass(of))


GLAUBER, DRY = 322.19, 142.04  # g/mol of sodium sulfate with its water and without: recomputed


def test_the_dry_form_of_what_is_bought_as_a_hydrate_can_be_asked_for() -> None:
    for of in ("zinc nitrate anhydrous", "anhydrous zinc nitrate", "Zn(NO3)2"):
        assert solid(of).molar_mass == pytest.approx(189.39, abs=0.01)  # recomputed


def test_a_number_in_front_of_a_formula_is_shown_its_place() -> None:
    with pytest.raises(UnknownName, match="begins with a number") as caught:
        solid("2PbCO3.Pb(OH)2")
    assert "Pb(OH)2.2PbCO3" in caught.value.hint


def test_ones_own_jar_of_the_hydrate_meant_is_taken() -> None:
    jars = [Stuff(f"jar {mass}", "sodium sulfate", Form.SOLID, mass) for mass in (DRY, GLAUBER)]
    assert solid("Glauber's salt", jars).given_mass == GLAUBER


def test_ones_own_line_of_a_trade_name_says_what_it_is() -> None:
    jar = Stuff("gypsum", "calcium sulfate", Form.SOLID, 136.14)
    assert solid("gypsum", [jar]) is solute("gypsum", [jar]) is jar


def test_a_strength_counts_the_hydrate_a_trade_name_means() -> None:
    assert solute("Epsom salts").is_hydrate
    assert not solute("magnesium sulfate").is_hydrate


@pytest.mark.parametrize("formula", [*bench_tables._HYDRATES, *bench_tables._BOUGHT_AS.values()])
def test_every_hydrate_in_the_tables_is_one_of_a_substance_held(formula: str) -> None:
    salt, _, water = formula.partition(".")
    assert salt in bench_tables.formulas() or salt == "NH4Al(SO4)2"
    assert molar_mass(formula) > molar_mass(salt)
    assert water.endswith("H2O")


@pytest.mark.parametrize(("substance", "formula"), bench_tables._BOUGHT_AS.items())
def test_every_usual_hydrate_is_of_the_substance_it_stands_by(substance: str, formula: str) -> None:
    assert bench_tables.formulas()[formula.partition(".")[0]] == substance


def test_ones_own_spelling_stands_before_ours() -> None:
    jar = Stuff("sodium thiosulphate", "sodium thiosulfate", Form.SOLID, 248.18)
    assert solid("sodium thiosulphate", [jar]) is jar
