"""Tables into a store: every fault is told with its place, and then nothing is saved."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import BadAmount, BadDate, BadInput, StockroomError, UnknownName
from stockroom.measure.amounts import Amount
from stockroom.planning.facts import Closeness, Facts
from stockroom.service.database import add_row, new_store, table_columns
from stockroom.service.house_rules import set_rule
from stockroom.store.layout import TABLES
from stockroom.store.snapshot import facts

SMALL = {
    "places": "place,name,temperature_c\nA2,solids,20\nF1,refrigerator,5\n",
    "departments": "department,name,left_gbp\nCH,chemistry,120.00\n",
    "substances": "substance,other_names,formula,cas\n"
    "sodium thiosulfate,hypo;thio,Na2S2O3,7772-98-7\n"
    "sulfuric acid,,H2SO4,\nsodium hypochlorite,,NaClO,\nstarch,,,\n",
    "lines": "item,strength,substance,form,formula,density_g_cm3,measured_in\n"
    "sodium thiosulfate pentahydrate,,sodium thiosulfate,solid,Na2S2O3·5H2O,,\n"
    "sodium thiosulfate,1.00 mol/dm3,sodium thiosulfate,solution,,,\n"
    "sulfuric acid,98 % w/w,sulfuric acid,liquid,,1.84,\n"
    "bleach,12 % w/v,sodium hypochlorite,solution,,,\n"
    '"bleach, diluted",1 in 10,sodium hypochlorite,solution,,,\n'
    "starch,0.5 % w/v,starch,solution,,,\n"
    "splints,,,sundry,,,items\n",
    "keeping": "line,rule,lasts,counted_from,order,rate,rate_of,rate_per\n"
    "hypo 1.00,life,180 d,made,,,,\n"
    "bleach 12 % w/v,fades,,received,2,0.0090,% w/v,month\n",
    "recipes": "recipe,version,title\nR1,1,Cross\n",
    "recipe_lines": "recipe,version,number,line,amount_cm3,per,closeness\n"
    "R1,1,1,sodium thiosulfate 1.00 mol/dm3,160,group,\n",
    "bookings": "booking,recipe,on,time,groups,department\nK1,R1,2027-01-19,09:15,12,CH\n",
    "bottles": "bottle,line,size_g,size_cm3,received,made,opened,place,left_g,left_cm3,left_on,"
    "parents\n"
    "B01,sodium thiosulfate pentahydrate,1000,,2026-09-01,,2026-09-08,A2,640,,2026-12-18,\n"
    "S01,hypo 1.00 mol/dm3,,1000,,2026-11-16,,F1,,900,2026-12-18,B01\n",
    "history": "number,happened,by,event,bottle,amount_g,amount_cm3,strength,reason,puts_right\n"
    "1,2026-12-01,T1,drawn,B01,500,,,,\n"
    "2,2026-12-02,T1,put right,B01,,,,meant 50,1\n"
    "3,2026-12-20,T1,drawn,B01,40,,,,\n"
    "4,2026-12-10,T1,found,S01,,,0.98 mol/dm3,,\n",
}  # fmt: skip


@pytest.fixture
def tables(tmp_path: Path) -> Path:
    folder = tmp_path / "tables"
    folder.mkdir()
    for name, text in SMALL.items():
        (folder / f"{name}.csv").write_text(text, encoding="utf-8")
    return folder


@pytest.fixture
def known(tables: Path, tmp_path: Path) -> Facts:
    new_store(tmp_path / "small.sqlite", tables=tables)
    return facts(tmp_path / "small.sqlite", date(2027, 1, 4))


def change(folder: Path, table: str, old: str, new: str) -> None:
    path = folder / f"{table}.csv"
    assert old in path.read_text(encoding="utf-8")
    path.write_text(path.read_text(encoding="utf-8").replace(old, new), encoding="utf-8")


def refused(folder: Path) -> str:
    """What is said of a folder that cannot be read; no store may be left behind."""
    store = folder.parent / "refused.sqlite"
    with pytest.raises(StockroomError) as caught:
        new_store(store, tables=folder)
    assert not store.exists()
    return str(caught.value)


# 98 % w/w at 1.84 g/cm³ is 18.4 mol/dm³; 12 % w/v NaOCl is 1.612. Worked out by hand, and
# worked out: 120 / 74.44
@pytest.mark.parametrize(
    ("key", "strength", "unit"),
    [("sulfuric acid 98 % w/w", 18.39, "mol/dm3"), ("bleach 12 % w/v", 1.612, "mol/dm3"),
     ("starch 0.5 % w/v", 5.0, "g/dm3")],
)  # fmt: skip
def test_strengths_are_kept_in_the_lines_own_unit(
    known: Facts, key: str, strength: float, unit: str
) -> None:
    assert known.lines[key].strength == pytest.approx(strength, rel=1e-3)
    assert known.lines[key].unit == unit


def test_a_strength_in_words_is_kept_as_text(known: Facts) -> None:
    line = known.lines["bleach, diluted 1 in 10"]
    assert (line.strength, line.strength_text) == (None, "1 in 10")


def test_the_molar_mass_is_of_what_is_in_the_container(known: Facts) -> None:
    # 248.18 and 158.11 g/mol. Source: reference molar_masses.csv
    assert known.lines["sodium thiosulfate pentahydrate"].molar_mass == pytest.approx(248.18, 1e-4)
    assert known.lines["sodium thiosulfate 1.00 mol/dm3"].molar_mass == pytest.approx(158.11, 1e-4)


def test_a_second_order_rate_is_turned_into_the_lines_unit_and_days(known: Facts) -> None:
    law = known.lines["bleach 12 % w/v"].rules[0].law
    assert law is not None
    # worked out: 12 % a third-month on is 1/(1/12 + 0.009*3) = 9.06 %, in either unit
    after = 1 / (1 / 1.61199 + law.rate * 3 * 30.4375)
    assert after / 1.61199 == pytest.approx(9.063 / 12, rel=1e-3)


def test_no_closeness_means_close_and_is_marked(known: Facts) -> None:
    need = known.recipes["R1", 1].requirements[0]
    assert (need.closeness, need.closeness_guessed) == (Closeness.CLOSE, True)
    assert (need.lowest, need.highest) == (1.0, 1.0)


def test_spare_is_ten_per_cent_unless_said(known: Facts) -> None:
    assert known.bookings[0].spare == 100


def test_what_is_left_is_what_was_seen_and_later_history_comes_off(known: Facts) -> None:
    left = {bottle.number: bottle.left for bottle in known.bottles}
    assert left == {"B01": Amount.grams(600).micro, "S01": Amount.cm3(900).micro}


def test_a_strength_from_history_is_a_check(known: Facts) -> None:
    checks = known.bottles[1].record.checks
    assert [(check.on, check.strength) for check in checks] == [(date(2026, 12, 10), 0.98)]


@pytest.mark.parametrize(
    ("table", "old", "new", "said"),
    [
        ("lines", "1.84", "", 'lines.csv row 4, strength "98 % w/w"'),
        ("lines", "12 % w/v", "12 %", 'lines.csv row 5: strength "12 %": Which:'),
        ("lines", "Na2S2O3·5H2O", "hypo", 'lines.csv row 2, formula "hypo": Formula "hypo"'),
        ("lines", "sundry", "sundries", 'row 8: form "sundries" is not known'),
        ("substances", "7772-98-7", "7772-98-6", "substances.csv row 2"),
        ("keeping", "180 d", "0 d", "A life of 0 d"),
        ("keeping", "hypo 1.00", "hipo 1.00", 'keeping.csv row 2, line "hipo 1.00": No stock line'),
        ("keeping", "2,0.0090", "3,0.0090", "order 3 is not a law"),
        ("recipe_lines", "group,", ",", "recipe_lines.csv row 2: per is blank"),
        ("recipe_lines", "160,group", ",group", "How much sodium thiosulfate"),
        ("bookings", "12,CH", "0,CH", "0 groups?"),
        ("bookings", "12,CH", "12,", "department is blank"),
        ("bookings", "2027-01-19", "2027-02-31", "February 2027 has 28 days"),
        ("bottles", ",F1,", ",F2,", 'bottles.csv row 3, place "F2": No place "F2". Nearest:'),
        ("bottles", "1000,,2026", ",1000,2026", "size_cm3 is filled, but this is measured in g"),
        ("bottles", "2026-09-08", "2026-08-08", "is before it arrived 2026-09-01"),
        ("bottles", "18,B01", "18,B07", 'parents "B07": No bottle "B07"'),
        ("bottles", "18,B01", "18,S01", "made from itself"),
        ("history", "drawn,B01,40", "drawn,B01,4000", "B01 holds 640 g; 4 000 g asked"),
        ("history", "2026-12-20", "2026-08-20", "is before B01 arrived 1 September 2026"),
        ("history", "meant 50,1", "meant 50,9", 'No earlier history row "9"'),
        ("history", "T1,found", ",found", "by is blank"),
        ("departments", "120.00", "-5", "less than nothing"),
    ],
)
def test_a_fault_is_told_with_its_place(
    tables: Path, table: str, old: str, new: str, said: str
) -> None:
    change(tables, table, old, new)
    assert said in refused(tables)


def test_all_faults_of_all_tables_are_told_at_once(tables: Path) -> None:
    change(tables, "places", "F1,refrigerator,5", "F1,refrigerator,cold")
    change(tables, "bookings", "12,CH", "0,CH")
    said = refused(tables)
    assert "2 faults" in said
    assert 'places.csv row 3: temperature_c "cold"' in said
    assert 'bookings.csv row 2, groups "0"' in said


def test_a_row_nobody_can_read_is_told_once(tables: Path) -> None:
    change(tables, "lines", "sodium thiosulfate,1.00 mol/dm3", "sodium thiosulfate,1.00 %")
    assert "no stock line" not in refused(tables).casefold().replace("hypo", "")


def test_ten_faults_are_listed_and_the_rest_counted(tables: Path) -> None:
    rows = "".join(f"V{n},0\n" for n in range(12))
    (tables / "vessels.csv").write_text(f"vessel,size_cm3\n{rows}", encoding="utf-8")
    said = refused(tables)
    assert said.count("vessels.csv row") == 10
    assert "and 2 more" in said


def test_an_unknown_column_shows_the_nearest(tables: Path) -> None:
    change(tables, "places", "temperature_c", "temp_c")
    assert 'No column of places "temp_c". Nearest: temperature_c' in refused(tables)


def test_an_unknown_table_shows_the_nearest(tables: Path) -> None:
    (tables / "bottels.csv").write_text("bottle\n", encoding="utf-8")
    assert 'No table "bottels". Nearest: bottles' in refused(tables)


def test_a_row_with_a_loose_comma_is_told(tables: Path) -> None:
    change(tables, "places", "refrigerator", "refrigerator, small")
    assert "row 3 has more cells than the heading of places.csv" in refused(tables)


def test_a_file_that_is_not_utf8_is_told(tables: Path) -> None:
    (tables / "places.csv").write_bytes("place,name\nA2,säure\n".encode("latin-1"))
    assert "places.csv: not UTF-8" in refused(tables)


def test_a_byte_order_mark_from_a_spreadsheet_is_no_fault(tables: Path, tmp_path: Path) -> None:
    change(tables, "places", "place,", "\ufeffplace,")
    new_store(tmp_path / "marked.sqlite", tables=tables)


def test_a_folder_without_tables_is_told(tmp_path: Path) -> None:
    (tmp_path / "bare").mkdir()
    assert "holds no CSV file" in refused(tmp_path / "bare")
    assert "is not a folder" in refused(tmp_path / "absent")


def test_two_terms_never_overlap(tables: Path) -> None:
    (tables / "terms.csv").write_text(
        "term,from,to\nspring,2027-01-04,2027-03-26\nsummer,2027-03-20,2027-07-01\n",
        encoding="utf-8",
    )
    assert "overlaps spring" in refused(tables)


@pytest.mark.parametrize(
    ("table", "values", "kind", "said"),
    [
        ("place", {}, UnknownName, 'No table "place". Nearest: places'),
        ("places", {"plaice": "A1"}, UnknownName, 'No column of places "plaice"'),
        ("places", {"place": "A2"}, BadInput, 'already a place "A2"'),
        ("places", {"place": ""}, BadInput, "place is blank"),
        ("closures", {"from": "2027-02-05", "to": "2027-02-01"}, BadDate, "runs backwards"),
        ("house", {"setting": "batch", "value": "1"}, UnknownName, "batch_step_cm3"),
        ("house", {"setting": "staffed_from", "value": "8"}, BadDate, "not a time of day"),
        ("packs", {"line": "B01", "size_g": "5"}, UnknownName, "No stock line"),
        ("packs", {"line": "borax", "size_g": "5", "price_gbp": "-1"}, UnknownName, "No stock"),
        (
            "lines",
            {"item": "x", "form": "solid", "assay_percent": "101"},
            BadAmount,
            "between 1 and 100",
        ),
        ("history", {"happened": "2027-01-04", "event": "made"}, BadInput, "bottles table"),
    ],
)
def test_a_single_row_is_held_to_the_same_rules(
    own: Path, table: str, values: dict[str, str], kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind) as caught:
        add_row(own, table, values, by="T1")
    assert said in str(caught.value)


def test_a_bottle_added_by_hand_stands_on_the_shelf(own: Path) -> None:
    values = {"bottle": "B60", "line": "potassium iodide", "size_g": "250", "place": "D1"}
    add_row(own, "bottles", values | {"received": "2027-01-04", "left_g": "200"}, by="T2")
    bottle = next(b for b in facts(own, date(2027, 1, 4)).bottles if b.number == "B60")
    assert (bottle.left, bottle.place) == (Amount.grams(200).micro, "D1")


def test_a_setting_given_again_takes_the_old_ones_place(own: Path) -> None:
    add_row(own, "house", {"setting": "margin_open_days", "value": "3"}, by="T1")
    assert facts(own, date(2027, 1, 4)).house.margin_days == 3


def test_every_table_of_the_college_is_one_we_read() -> None:
    from stockroom.service.database import seeds_folder

    files = {path.stem for path in (seeds_folder() / "college").glob("*.csv")}
    # the limits shipped with the program serve every house; a table of its own replaces them
    assert files == set(TABLES) - {"hazards"}
    assert table_columns("places") == ["place", "name", "temperature_c", "meant_for", "source"]


@pytest.mark.parametrize("table", ["lines", "substances", "places", "departments", "recipes"])
@pytest.mark.parametrize("state", ["is missing", "is empty"])
def test_a_table_without_rows_is_named_before_what_follows_from_it(
    tables: Path, table: str, state: str
) -> None:
    path = tables / f"{table}.csv"
    if state == "is missing":
        path.unlink()
    else:
        path.write_text(path.read_text(encoding="utf-8").splitlines()[0] + "\n", encoding="utf-8")
    first = refused(tables).splitlines()[1]
    assert first.startswith(f"  {table}.csv {state}: ")


def test_what_follows_from_a_table_without_rows_is_held_back(tables: Path) -> None:
    (tables / "lines.csv").unlink()
    said = refused(tables)
    assert "1 fault in the tables" in said
    assert "No stock line" not in said
    assert "5 rows of other tables name a stock line" in said


def test_what_follows_from_a_table_nobody_can_read_is_held_back(tables: Path) -> None:
    (tables / "lines.csv").write_bytes("item,form\nsäure,solid\n".encode("latin-1"))
    said = refused(tables)
    assert "1 fault in the tables" in said
    assert "lines.csv: not UTF-8" in said


@pytest.mark.parametrize(
    ("table", "values", "said"),
    [
        ("lines", {"item": "x", "form": "liquid", "density_g_cm3": "1200"}, "not in kg/m³?"),
        ("lines", {"item": "x", "form": "liquid", "density_g_cm3": "0.4"}, "between 0.5 and 20"),
        ("lines", {"item": "x", "form": "solid", "assay_percent": "0.97"}, "In per cent"),
        ("lines", {"item": "x", "form": "solid", "level_g": "-5"}, "less than nothing"),
        ("places", {"place": "Z1", "temperature_c": "-300"}, 'temperature_c "-300"'),
        ("places", {"place": "Z1", "temperature_c": "293"}, "not in kelvin?"),
        ("packs", {"line": "borax", "size_g": "1", "price_gbp": "-1"}, "less than nothing"),
        ("packs", {"line": "borax", "size_g": "1", "price_gbp": ""}, "0 if it is free"),
        (
            "packs",
            {"line": "borax", "size_g": "1", "price_gbp": "1", "lead_open_days": "401"},
            "between 0 and 400",
        ),
        (
            "bottles",
            {"bottle": "B99", "line": "borax", "size_g": "5", "left_g": "500"},
            "B99 holds 5 g when full; 500 g left?",
        ),
        ("substances", {"substance": "x", "formula": "C2H2O4.2H20"}, "Is the letter O meant"),
    ],
)
def test_a_figure_no_bench_knows_is_asked_about(
    own: Path, table: str, values: dict[str, str], said: str
) -> None:
    add_row(own, "lines", {"item": "borax", "form": "solid"}, by="T1")
    with pytest.raises(StockroomError) as caught:
        add_row(own, table, values, by="T1")
    assert said in str(caught.value)


def test_a_line_added_twice_is_told_by_its_item(own: Path) -> None:
    add_row(own, "lines", {"item": "borax", "form": "solid"}, by="T1")
    with pytest.raises(BadInput) as caught:
        add_row(own, "lines", {"item": "borax", "form": "solid"}, by="T1")
    assert caught.value.message == ('lines, item "borax": There is already a stock line "borax".')
    assert "stockroom change lines 'borax'" in caught.value.hint


def test_a_date_read_in_the_tables_settles_the_bottle(tables: Path, tmp_path: Path) -> None:
    path = tables / "bottles.csv"
    text = path.read_text(encoding="utf-8").replace("parents\n", "parents,printed\n")
    text = text.replace("2026-12-18,\n", "2026-12-18,,04/05/27\n").replace("B01\n", "B01,\n")
    path.write_text(text, encoding="utf-8")
    rows = (tables / "history.csv").read_text(encoding="utf-8")
    rows += "5,2026-12-21,T1,date read,B01,,,,2027-05-04,\n"
    (tables / "history.csv").write_text(rows, encoding="utf-8")
    new_store(tmp_path / "read.sqlite", tables=tables)
    bottle = facts(tmp_path / "read.sqlite", date(2027, 1, 4)).bottles[0]
    assert bottle.record.printed is not None
    assert bottle.record.printed.readings == (date(2027, 5, 4),)


@pytest.mark.parametrize("spread", ["0 mol/dm3", "0.5 mol/dm3"])
def test_an_uncertainty_in_the_tables_is_less_than_its_strength(own: Path, spread: str) -> None:
    cells = {"happened": "2027-01-03", "by": "T1", "event": "found", "bottle": "S02"}
    with pytest.raises(BadAmount, match=f'uncertainty "{spread}" on 0.099 mol/dm3 cannot be'):
        add_row(own, "history", cells | {"strength": "0.099 mol/dm3", "uncertainty": spread}, by="")


def test_a_test_in_the_tables_cannot_pass_what_its_number_condemns(own: Path) -> None:
    cells = {"happened": "2027-01-03", "by": "T1", "event": "tested", "bottle": "B29"}
    with pytest.raises(BadInput, match="B29 cannot have passed: 150 mg/kg, above 100"):
        add_row(own, "history", cells | {"passed": "yes", "peroxide_mg_kg": "150"}, by="")
    add_row(own, "history", cells | {"passed": "no", "peroxide_mg_kg": "150"}, by="")
    add_row(own, "history", cells | {"passed": "yes", "peroxide_mg_kg": "12"}, by="")


def test_a_solid_has_no_strength_in_the_tables_either(tables: Path) -> None:
    change(tables, "history", "found,S01", "found,B01")
    assert "has no strength to find" in refused(tables)


@pytest.mark.parametrize(
    ("cells", "told"),
    [
        ({"rule": "fades", "named_law": "bleaching"}, 'No named law "bleaching"'),
        (
            {"rule": "life", "lasts": "9 d", "ea_kj_mol": "60"},
            "ea_kj_mol 60 is of a law, and this rule gives a period",
        ),
        (
            {"rule": "life", "lasts": "9 d", "factor_per_10c": "2", "ea_kj_mol": "60"},
            "say the same thing twice",
        ),
        (
            {"rule": "fades", "order": "1", "rate": "0.1", "rate_per": "day", "ea_kj_mol": "60000"},
            "is not between 0 and 400",
        ),
        (
            {"rule": "fades", "order": "1", "rate": "0.1", "rate_per": "day", "ea_kj_mol": "60"},
            "ea_kj_mol 60: from how many °C",
        ),
        (
            {"rule": "life", "lasts": "9 d", "factor_per_10c": "2"},
            "factor_per_10c 2: from how many °C",
        ),
        (
            {"rule": "life", "lasts": "9 d", "factor_per_10c": "0", "at_c": "20"},
            "factor_per_10c 0 is not between",
        ),
        (
            {"rule": "fades", "order": "1", "rate": "0.1", "rate_per": "fortnight"},
            'rate_per "fortnight" is not a time',
        ),
        ({"rule": "fades", "order": "1", "rate_per": "day"}, "rate of order 1 is blank"),
        (
            {"rule": "fades", "named_law": "hypochlorite"},
            "is of bleach, and hydrogen peroxide 100 vol is none",
        ),
    ],
)
def test_a_rule_that_says_no_law_is_refused(own: Path, cells: dict[str, str], told: str) -> None:
    line = {"line": "hydrogen peroxide 100 vol"}
    with pytest.raises(StockroomError, match=told):
        add_row(own, "keeping", line | cells, by="T1")


def test_a_named_law_counts_in_mol_per_dm3_alone(own: Path) -> None:
    cells = {"line": "starch 0.5 % w/v", "rule": "fades", "named_law": "hypochlorite"}
    with pytest.raises(BadInput, match="counts in mol/dm3, and starch"):
        add_row(own, "keeping", cells, by="T1")


def test_a_named_law_takes_no_figures_beside_its_own(own: Path) -> None:
    cells = {"line": "sodium hypochlorite 12 % w/v", "rule": "fades", "named_law": "hypochlorite"}
    with pytest.raises(BadInput, match="leave rate, factor_per_10c out"):
        add_row(own, "keeping", cells | {"rate": "2", "factor_per_10c": "3"}, by="T1")


def kept(own: Path, line: str, rule: str, cells: dict[str, str], *, withdraw: bool = False) -> str:
    day = date(2027, 1, 4)
    return set_rule(own, line, rule, cells, withdraw=withdraw, why="x", today=day, by="T1").text


@pytest.mark.parametrize(
    ("line", "rule", "told"),
    [
        ("cyclohexene, unstabilised", "test or discard", "from opened, a safety date"),
        ("potassium iodide", "life", "life: 90 days from received"),
        ("sodium thiosulfate 0.100 mol/dm3", "life", "life: 90 days from made"),
    ],
)
def test_a_life_is_counted_from_a_day_the_bottle_has(
    own: Path, line: str, rule: str, told: str
) -> None:
    if rule == "test or discard":
        kept(own, line, rule, {}, withdraw=True)
    assert told in kept(own, line, rule, {"lasts": "90 d"})


def test_a_rate_of_one_order_is_no_rate_of_another(own: Path) -> None:
    with pytest.raises(BadInput, match=r"order 0: at what rate.*is one of order 1"):
        kept(own, "hydrogen peroxide 100 vol", "fades", {"order": "0"})


@pytest.mark.parametrize(
    ("cells", "told"),
    [
        ({"kind": "beaker", "size_cm3": "100"}, 'kind "beaker" is not known'),
        ({"kind": "flask"}, "size_cm3 of X is blank or 0"),
        ({"kind": "flask", "size_cm3": "100", "class": "C"}, "class 'C' is not A, AS or B"),
        ({"kind": "burette", "size_cm3": "50", "step_cm3": "50"}, "not below its size of 50 cm³"),
        ({"kind": "flask", "size_cm3": "100", "away_to": "2027-02-01"}, "away_from is blank"),
    ],
)
def test_glassware_that_says_nothing_is_refused(
    own: Path, cells: dict[str, str], told: str
) -> None:
    with pytest.raises(StockroomError, match=told):
        add_row(own, "glassware", {"glass": "X"} | cells, by="T1")


@pytest.mark.parametrize(
    ("cells", "told"),
    [
        ({"basis": "guess", "h_code": "H314", "hazard_class": "x"}, 'No basis "guess"'),
        ({"basis": "specific", "h_code": "314", "hazard_class": "x"}, 'h_code "314" is no hazard'),
        (
            {
                "basis": "specific",
                "h_code": "H314",
                "hazard_class": "x",
                "from_percent": "5",
                "below_percent": "2",
            },
            "holds nothing",
        ),
        ({"basis": "harmonised", "h_code": "H301"}, "hazard_class is blank"),
        ({"basis": "harmonised", "h_code": "H301", "hazard_class": "Nasty 1"}, "Nasty 1"),
        ({"basis": "harmonised", "h_code": "H301", "hazard_class": "Skin Corr. 1A"}, "is H314"),
    ],
)
def test_a_limit_that_says_nothing_is_refused(own: Path, cells: dict[str, str], told: str) -> None:
    with pytest.raises(StockroomError, match=told):
        add_row(own, "hazards", {"substance": "sodium hydroxide"} | cells, by="T1")


def test_a_density_no_such_solution_has_is_asked_about(own: Path) -> None:
    from stockroom.errors import BadAmount

    cells = {
        "item": "fuming acid",
        "strength": "37 % w/w",
        "substance": "hydrochloric acid",
        "form": "liquid",
    }
    with pytest.raises(BadAmount, match=r"37 % w/w weighs 1\.18.* not 1\.81"):
        add_row(own, "lines", cells | {"density_g_cm3": "1.81"}, by="T1")
    assert "fuming acid" in add_row(own, "lines", cells | {"density_g_cm3": "1.19"}, by="T1").text
