"""`stockroom hazards`: at the highest strength it could be, with the limit, and the sheet first."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.safety.cautions import HOUSE_LINE

if TYPE_CHECKING:
    from conftest import Stockroom

NO_STORE = Path("nowhere.sqlite")
NAOH = "sodium hydroxide 2.00 mol/dm3"
SHEET = ("--sheet", "Example Ltd, 2026-05-01", "--why", "new delivery", "--by", "T1")


# a usual case: 0.40 and 0.55 mol/dm³ print different text; bands as in the reference, F1 (a)
@pytest.mark.parametrize(
    ("name", "strength", "statements", "signal"),
    [
        ("sodium hydroxide", "0.40 mol/dm3", "H315 H319", "Warning"),
        ("sodium hydroxide", "0.55 mol/dm3", "H314", "Danger"),
        ("NaOH", "0.1 M", "", ""),
        ("hydrogen peroxide", "20 vol", "H319", "Warning"),
        ("hydrogen peroxide", "100 vol", "H272 H302 H318", "Danger"),
        ("bleach", "5 % w/w available chlorine", "H314 H400 H411 EUH031", "Danger"),
        ("ammonia", "2.87 mol/dm3", "H314 H335", "Danger"),
        ("acetic acid", "1.75 mol/dm3", "H315 H319", "Warning"),
        ("ethanol", "96 % v/v", "H225 H319", "Danger"),
        ("sucrose", "1 mol/dm3", "", ""),
    ],
)
def test_hazards_follow_the_strength(
    stockroom: Stockroom, name: str, strength: str, statements: str, signal: str
) -> None:
    said = stockroom("hazards", name, strength, "--json", store=NO_STORE).json
    assert " ".join(said["statements"] + said["supplemental"]) == statements
    assert (said["signal_word"], said["basis"]) == (signal, "worked out")


# mol/dm³ at the edge, worked out in the reference from % w/w and densities (b, ±0.5 %)
@pytest.mark.parametrize(
    ("name", "molar", "code"),
    [
        ("sodium hydroxide", 0.510, "H314"), ("sodium hydroxide", 0.125, "H315"),
        ("hydrochloric acid", 7.71, "H314"), ("hydrochloric acid", 2.87, "H315"),
        ("nitric acid", 0.81, "H314"), ("sulfuric acid", 1.69, "H314"),
        ("sulfuric acid", 0.53, "H315"), ("ethanoic acid", 1.69, "H315"),
        ("ethanoic acid", 4.30, "H314"), ("phosphoric acid", 1.07, "H315"),
        ("phosphoric acid", 2.92, "H314"), ("ammonia", 2.87, "H335"),
        ("hydrogen peroxide", 1.49, "H319"), ("hydrogen peroxide", 2.42, "H318"),
    ],
)  # fmt: skip
def test_a_band_begins_where_the_reference_has_it_in_moles(
    stockroom: Stockroom, name: str, molar: float, code: str
) -> None:
    at = [stockroom("hazards", name, f"{molar * part} mol/dm3", "--json", store=NO_STORE).json
          for part in (1.005, 0.93)]  # fmt: skip
    assert [code in each["statements"] for each in at] == [True, False]


def test_the_limit_is_named_and_local_rules_come_first(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "sodium hydroxide", "2 mol/dm3", store=NO_STORE)
    assert "H314: sodium hydroxide ≥ 5 %" in said.out
    assert " ".join(said.out.split()).endswith(HOUSE_LINE)


def test_per_cent_by_volume_is_taken_as_by_mass_and_said(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "silver nitrate", "1.7 % w/v", "--json", store=NO_STORE).json
    assert said["contents"][0]["percent_ww"] == 1.7
    assert any("% w/v taken as % w/w" in note for note in said["notes"])


def test_a_lighter_liquid_is_taken_on_the_safer_side_and_said(stockroom: Stockroom) -> None:
    # 10 g in 100 cm³ of something as light as pure propanone (0.791) would be 12.6 % by mass
    said = stockroom("hazards", "propanone", "10 % w/v", "--json", store=NO_STORE).json
    assert said["contents"][0]["percent_ww"] == pytest.approx(12.6, abs=0.1)
    assert any("approximate" in note for note in said["notes"])


@pytest.mark.parametrize("form", ["CuSO4.5H2O", "copper(II) sulfate pentahydrate", "CuSO4"])
def test_a_limit_on_the_hydrate_counts_the_hydrate(stockroom: Stockroom, form: str) -> None:
    """0.1 mol/dm³ is 24.97 g/dm³ of CuSO4·5H2O: 2.497 %, just under the 2.5 % of H411 (c)."""
    said = stockroom("hazards", form, "0.1 mol/dm3", "--json", store=NO_STORE).json
    assert said["statements"] == ["H319", "H400", "H411"]
    assert any("just under its limit of 2.5 %" in text for text in said["deciding"])


def test_name_and_strength_may_stand_in_one_text(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "NaOH 0.55 mol/dm3", "--json", store=NO_STORE).json
    assert said["statements"] == ["H314"]


def test_what_is_not_entered_says_so_and_guesses_nothing(stockroom: Stockroom) -> None:
    said = stockroom("hazards", "Benedict's reagent", store=NO_STORE)
    assert (said.code, "Hazard text not entered: look it up." in said.out) == (0, True)
    data = stockroom("hazards", "Benedict's reagent", "--json", store=NO_STORE).json
    assert (data["basis"], data["statements"]) == ("not entered: look it up", [])


# -- in a store -------------------------------------------------------------------------


def test_a_bottle_is_found_by_its_number(stockroom: Stockroom, practice: Path) -> None:
    said = stockroom("hazards", "S07", "--json", store=practice).json
    assert (said["bottle"], said["line"]) == ("S07", "sodium hydroxide 0.400 mol/dm3")
    assert (said["statements"], said["practice"]) == (["H315", "H319"], True)


def test_a_bottle_found_stronger_counts_with_twice_its_uncertainty(
    stockroom: Stockroom, own: Path
) -> None:
    """0.47 + 2 × 0.02 = 0.51 mol/dm³, 2.0 % by mass: corrosive, where the label is not."""
    found = ("found", "S07", "0.47 mol/dm3", "--uncertainty", "0.02 mol/dm3", "--by", "T1")
    assert stockroom(*found, store=own).code == 0
    said = stockroom("hazards", "S07", "--json", store=own).json
    assert said["statements"] == ["H314"]
    assert "with twice its uncertainty 0.51 mol/dm³" in said["strength"]


def test_a_bottle_found_weaker_keeps_the_hazards_of_its_label(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("found", "S06", "1.60 mol/dm3", "--by", "T1", store=own)
    said = stockroom("hazards", "S06", "--json", store=own).json
    assert said["strength"] == "label, 2.00 mol/dm3"


def test_a_mixture_counts_everything_its_method_states(
    stockroom: Stockroom, practice: Path
) -> None:
    """Iron(II) made up in 0.500 mol/dm³ sulfuric acid: 4.9 % of acid, together an irritant."""
    said = stockroom("hazards", "ammonium iron(II) sulfate 0.100 mol/dm3", "--json", store=practice)
    inside = {part["substance"]: part["percent_ww"] for part in said.json["contents"]}
    assert inside["sulfuric acid"] == pytest.approx(4.9, abs=0.01)
    assert said.json["statements"] == ["H315", "H319"]


def test_one_part_in_ten_is_a_tenth_of_what_it_is_made_from(
    stockroom: Stockroom, practice: Path
) -> None:
    said = stockroom("hazards", "bleach, diluted 1 in 10", "--json", store=practice).json
    assert said["contents"][0]["percent_ww"] == pytest.approx(0.45)


def test_limewater_is_as_strong_as_dissolves(stockroom: Stockroom, practice: Path) -> None:
    """0.17 % at 20 °C (c): no class by its limits, but its pH is asked about."""
    said = stockroom("hazards", "S12", "--json", store=practice).json
    assert said["statements"] == []
    assert any("pH" in note for note in said["notes"])


def test_a_sheet_takes_the_place_of_what_is_worked_out(stockroom: Stockroom, own: Path) -> None:
    kept = stockroom(
        "hazards", NAOH, *SHEET, "--text", "H290, H314 burns", "--signal", "danger", store=own
    )
    assert kept.code == 0
    said = stockroom("hazards", "S06", "--json", store=own).json
    assert (said["basis"], said["statements"]) == ("supplier's sheet", ["H290", "H314"])
    assert (said["signal_word"], said["pictograms"]) == ("Danger", ["GHS05"])
    assert (said["sheet"]["by"], said["sheet"]["why"]) == ("T1", "new delivery")


def test_an_older_sheet_is_kept_and_a_missing_statement_is_told(
    stockroom: Stockroom, own: Path
) -> None:
    for text, signal in (("H314", "danger"), ("H315 H319", "warning")):
        stockroom("hazards", NAOH, *SHEET, "--text", text, "--signal", signal, store=own)
    said = stockroom("hazards", NAOH, "--json", store=own).json
    assert [sheet["text"] for sheet in said["older_sheets"]] == ["H314"]
    assert any("not in the sheet's text: H314" in note for note in said["notes"])


def test_a_sheet_of_another_strength_is_not_used(stockroom: Stockroom, own: Path) -> None:
    stockroom("hazards", NAOH, *SHEET, "--text", "H314", "--signal", "danger", store=own)
    said = stockroom("hazards", "sodium hydroxide", "0.4 mol/dm3", "--json", store=own).json
    assert said["basis"] == "worked out"


def test_a_houses_own_limit_takes_the_place_of_the_shipped(stockroom: Stockroom, own: Path) -> None:
    stockroom(
        "add", "hazards", "substance=sodium chloride", "hazard_class=Eye Irrit. 2", "h_code=H319",
        "basis=specific", "from_percent=10", "source=bench", "--by", "T1", store=own,
    )  # fmt: skip
    said = stockroom("hazards", "sodium chloride", "20 % w/w", "--json", store=own).json
    assert said["deciding"] == ["H319: sodium chloride ≥ 10 %"]


def test_each_make_carries_the_hazards_its_label_will_want(
    stockroom: Stockroom, practice: Path
) -> None:
    makes = stockroom("fresh", "--json", store=practice).json["makes"]
    acid = next(m for m in makes if m["item"] == "silver nitrate" and m["strength"][:5] == "0.050")
    assert acid["hazards"]["statements"] == ["H410"]
    assert acid["hazards"]["first"] == HOUSE_LINE


@pytest.mark.parametrize(
    ("words", "quoted"),
    [
        (("unobtainium",), "unobtainium"),
        ((" ",), "' '"),
        (("sodium hydroxide", "5 %"), "5 %"),
        (("sodium hydroxide", "150 % w/w"), "150"),
        (("sodium hydroxide", "-1 mol/dm3"), "-1"),
        (("sodium hydroxide", "strong"), "strong"),
        (("hydrogen peroxide", "6"), "6 vol"),
        (("B99",), "B99"),
        (("S06", "--text", "burns", "--sheet", "x", "--signal", "danger", "--why", "y"), "burns"),
        (("S06", "--text", "H999", "--sheet", "x", "--signal", "danger", "--why", "y"), "H999"),
        (("S06", "--text", "H314", "--signal", "danger", "--why", "y"), "sodium hydroxide"),
        (("S06", "--text", "H314", "--sheet", "x", "--signal", "loud", "--why", "y"), "loud"),
        (("S06", "--text", "H314", "--sheet", "x", "--signal", "danger"), "sodium hydroxide"),
        (("S06", "--sheet", "x"), "S06"),
        (
            ("nothing", "--text", "H314", "--sheet", "x", "--signal", "none", "--why", "y"),
            "nothing",
        ),
    ],
)
def test_what_cannot_be_read_is_quoted_and_nothing_is_kept(
    stockroom: Stockroom, own: Path, words: tuple[str, ...], quoted: str
) -> None:
    said = stockroom("hazards", *words, "--by", "T1", store=own)
    assert (said.code, said.out) == (2, "")
    assert quoted in said.err
    assert stockroom("hazards", "S06", "--json", store=own).json["sheet"] is None
