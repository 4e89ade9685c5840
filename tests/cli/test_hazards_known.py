"""`stockroom hazards` says how each limit is known and whose it is, and refuses what cannot be."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

NO_STORE = Path("nowhere.sqlite")
SHEET = ("--sheet", "Example Ltd, 2026-05-01", "--why", "new delivery", "--by", "T1")


def one_line(text: str) -> str:
    return " ".join(text.split())


@pytest.mark.parametrize(
    ("name", "strength", "line", "ending"),
    [
        ("NaOH", "2 mol/dm3", "H314: sodium hydroxide ≥ 5 % (seen)", "from limits seen in print."),
        (
            "KOH",
            "2 mol/dm3",
            "H314: potassium hydroxide ≥ 5 % (from memory)",
            "from limits of which some are from memory: check them against the regulation.",
        ),
        # a limit that was seen, by a rule that was not
        (
            "nitric acid",
            "3 % w/w",
            "H318: nitric acid ≥ 3 % (from memory)",
            "from limits of which some are from memory: check them against the regulation.",
        ),
        (
            "sucrose",
            "1 mol/dm3",
            "No statement follows from the limits held.",
            "from limits of which some are from memory: check them against the regulation.",
        ),
    ],
)
def test_each_deciding_line_has_its_mark_and_the_end_tells_the_truth(
    stockroom: Stockroom, name: str, strength: str, line: str, ending: str
) -> None:
    said = one_line(stockroom("hazards", name, strength, store=NO_STORE).out)
    assert line in said
    assert f"A starting point, worked out {ending} Local rules" in said


def test_each_source_is_cited_once_after_the_statements_it_stands_behind(
    stockroom: Stockroom,
) -> None:
    said = one_line(stockroom("hazards", "HCl", "12 % w/w", store=NO_STORE).out)
    sources = said.partition("SOURCES ")[2]
    assert sources.startswith("H315, H319, H335: CLP Annex VI limits of common acids")
    assert sources.count("teacher-training page") == 1


def test_as_data_each_statement_has_its_mark_and_its_source(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "nitric acid", "3 % w/w", "--json", store=NO_STORE).json
    assert {"statement": "H318", "how": "a", "source": "clp-teachers"} in said["known"]
    assert {"statement": "H318", "how": "c", "source": "clp-rules"} in said["known"]
    assert "H318: nitric acid ≥ 3 %" in said["deciding"]
    assert said["sources"]["clp-rules"].endswith("(from memory)")


def test_each_make_says_how_its_hazards_are_known(stockroom: Stockroom, practice: Path) -> None:
    makes = stockroom("fresh", "--json", store=practice).json["makes"]
    silver = next(
        m for m in makes if m["item"] == "silver nitrate" and m["strength"][:5] == "0.050"
    )
    marks = {each["how"] for each in silver["hazards"]["known"] if each["statement"] == "H410"}
    assert marks == {"c"}


def test_what_is_not_entered_rests_on_nothing(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "Benedict's reagent", store=NO_STORE).out
    assert "SOURCES" not in said
    assert "starting point" not in said


# -- in a store ---------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("source", "cited"),
    [
        ("bench", "the house's own row, Bench experience"),
        ("our sheet of May", "the house's own row, our sheet of May"),
    ],
)
def test_a_houses_own_row_says_so(stockroom: Stockroom, own: Path, source: str, cited: str) -> None:
    stockroom(
        "add", "hazards", "substance=sodium chloride", "hazard_class=Eye Irrit. 2", "h_code=H319",
        "basis=specific", "from_percent=10", f"source={source}", "--by", "T1", store=own,
    )  # fmt: skip
    asked = ("hazards", "sodium chloride", "20 % w/w")
    said = one_line(stockroom(*asked, store=own).out)
    assert "H319: sodium chloride ≥ 10 % (the house's own)" in said
    assert f"H319: {cited}" in said
    assert "of which some are the house's own." in said
    known = stockroom(*asked, "--json", store=own).json["known"]
    assert known == [{"statement": "H319", "how": "house", "source": source}]


def test_a_suppliers_text_says_whose_it_is(stockroom: Stockroom, own: Path) -> None:
    line = "sodium hydroxide 2.00 mol/dm3"
    stockroom("hazards", line, *SHEET, "--text", "H314", "--signal", "danger", store=own)
    said = stockroom("hazards", line, store=own).out
    assert "the supplier's sheet: Example Ltd, 2026-05-01" in said
    assert "starting point" not in said
    known = stockroom("hazards", line, "--json", store=own).json["known"]
    assert known == [{"statement": "H314", "how": "sheet", "source": "Example Ltd, 2026-05-01"}]


@pytest.mark.parametrize("name", ["THF", "ether", "isopropanol"])
def test_a_substance_entered_under_its_common_name_makes_peroxides_too(
    stockroom: Stockroom, own: Path, name: str
) -> None:
    substance, by = f"substance={name}", ("--by", "T1")
    stockroom("add", "substances", substance, *by, store=own)
    stockroom("add", "lines", f"item={name}", substance, "form=liquid", *by, store=own)
    said = stockroom("hazards", name, "--json", store=own).json
    assert any("peroxide-former of class B" in note for note in said["notes"])
    assert any("Makes peroxides" in caution for caution in said["cautions"])


# -- saturated, and more than can be ------------------------------------------------------


@pytest.mark.parametrize("asked", [("limewater",), ("calcium hydroxide", "saturated")])
def test_without_a_store_a_saturated_solution_is_as_strong_as_dissolves(
    stockroom: Stockroom, asked: tuple[str, ...]
) -> None:
    """0.173 g in 100 g of water at 20 °C (c)."""
    said = stockroom("hazards", *asked, "--json", store=NO_STORE).json
    assert said["contents"][0]["percent_ww"] == pytest.approx(0.173, abs=1e-3)
    assert said["statements"] == []


def test_a_saturated_hydrate_holds_as_much_as_the_salt_without_its_water(
    stockroom: Stockroom,
) -> None:
    """20.7 g of CuSO4 in 100 g of water at 20 °C (c): 17.1 % by mass, whatever was weighed."""
    forms = ("CuSO4", "CuSO4.5H2O")
    said = [stockroom("hazards", f, "saturated", "--json", store=NO_STORE).json for f in forms]
    inside = [each["contents"][0]["percent_ww"] for each in said]
    assert inside == pytest.approx([17.15, 17.15], abs=0.02)


@pytest.mark.parametrize(
    ("words", "quoted"),
    [
        # Perry's table ends at 50 % w/w, 763 g/dm³; pure ethanol 0.789 g/cm³ (OIML R 22)
        (("NaOH", "40 mol/dm3"), "1 600 g in 1 dm³"),
        (("NaOH", "1600 g/dm3"), "50 % w/w, the strongest held, has 763 g"),
        (("NaOH", "160 % w/v"), "160 % w/v"),
        (("ethanol", "20 mol/dm3"), "the pure liquid weighs 0.789 g/cm³"),
        (("potassium iodide", "20 mol/dm3"), "3 320 g in 1 dm³"),
    ],
)
def test_what_no_solution_can_be_is_refused_with_the_figure(
    stockroom: Stockroom, words: tuple[str, ...], quoted: str
) -> None:
    said = stockroom("hazards", *words, store=NO_STORE)
    assert (said.code, said.out) == (2, "")
    assert quoted in said.err


@pytest.mark.parametrize(
    ("words", "wanted"),
    [
        (("barium sulfate", "saturated"), "I need g in 100 g of water"),
        (("bromine water",), "how strong is it? It is kept at 0.2 mol/dm3 and 0.020 mol/dm3"),
        (("buffer pH 6.86",), "how strong is it?"),
    ],
)
def test_what_is_wanted_is_said(stockroom: Stockroom, words: tuple[str, ...], wanted: str) -> None:
    said = stockroom("hazards", *words, store=NO_STORE)
    assert (said.code, said.out) == (1, "")
    assert wanted in said.err


# saturated at 20 °C about 20 mol/dm³ (c); fuming hydrochloric acid 40 % w/w, 13 mol/dm³ (a);
# 98 % sulfuric acid 18.4 mol/dm³; saturated silver nitrate some 1500 g/dm³ (c)
@pytest.mark.parametrize(
    ("name", "strength"),
    [
        ("NaOH", "20 mol/dm3"), ("HCl", "13.1 mol/dm3"), ("H2SO4", "18.4 mol/dm3"),
        ("silver nitrate", "1500 g/dm3"), ("ethanol", "780 g/dm3"),
        ("hydrogen peroxide", "400 vol"), ("iodine", "0.05 mol/dm3"),
    ],
)  # fmt: skip
def test_the_strongest_there_are_get_an_answer(
    stockroom: Stockroom, name: str, strength: str
) -> None:
    assert stockroom("hazards", name, strength, store=NO_STORE).code == 0
