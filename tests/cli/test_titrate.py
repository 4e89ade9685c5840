"""titrate: titres in, a strength out, and the bottle re-dated."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

IODATE = ("thiosulfate on iodate", "25.30", "25.35", "25.35")
PIPETTED = ("--standard", "25.00 cm3 of 0.01667 mol/dm3")
OXALATE = ("permanganate on oxalate", "25.91", "--standard", "0.1675 g")


def test_titres_come_to_a_strength_without_a_store(stockroom: Stockroom) -> None:
    said = stockroom("titrate", *IODATE, *PIPETTED)
    assert said.code == 0
    # the job, section 8: 0.0987
    assert said.out.startswith("thiosulfate found 0.0987 ± 0.000")
    assert "mean titre 25.33 cm³ of 25.30, 25.35, 25.35; they lie 0.05 cm³ apart" in said.out
    assert "6 mol thiosulfate for 1 mol iodate" in said.out
    assert "taken as exact" in said.out


def test_the_caution_and_the_house_line_stand_with_it(stockroom: Stockroom) -> None:
    said = stockroom("titrate", *OXALATE).out
    assert "! Warm to about 60 °C" in said
    assert "risk assessment come first" in said


def test_json_gives_the_number_its_unit_and_its_budget(stockroom: Stockroom) -> None:
    found = stockroom("titrate", *OXALATE, "--json").json
    assert found["value"] == pytest.approx(0.0193, abs=5e-5)
    assert found["unit"] == "mol/dm3"
    shares = [part["uncertainty"] for part in found["budget"]]
    assert sum(share**2 for share in shares) == pytest.approx(found["uncertainty"] ** 2, rel=0.02)


def test_a_result_re_dates_the_bottle(stockroom: Stockroom, own: Path) -> None:
    done = stockroom("titrate", *OXALATE, "--bottle", "S08", "--by", "T1", store=own)
    assert done.code == 0
    assert "S08 potassium permanganate 0.0200 mol/dm³ found 0.019298 mol/dm³" in done.out
    assert "Now sound, until 3 February 2027: found 2027-01-04 + 30 days" in done.out
    assert "Write a new label" in done.out


def test_its_uncertainty_goes_into_the_next_titration(stockroom: Stockroom, own: Path) -> None:
    iron = ("titrate", "KMnO4 on Fe2+", "24.10", "--titrant", "S08", "--sample", "25 cm3")
    before = stockroom(*iron, "--json", store=own).json
    stockroom("titrate", *OXALATE, "--bottle", "S08", "--by", "T1", store=own)
    after = stockroom(*iron, "--json", store=own).json
    assert "S08 strength" in {part["from"] for part in after["budget"]}
    assert after["uncertainty"] > before["uncertainty"]


def test_a_dilution_before_the_aliquot_counts(stockroom: Stockroom) -> None:
    # a tutor page forgets the tenfold dilution and prints 0.02655; recomputed
    said = stockroom(
        "titrate",
        "KMnO4 on peroxide",
        "21.24",
        "--titrant",
        "0.01 M",
        "--sample",
        "20 cm3",
        "--dilution",
        "25 cm3 to 250 cm3",
        "--json",
    ).json
    assert said["value"] == pytest.approx(0.2655, abs=1e-4)


def test_a_strength_may_be_found_by_hand_with_its_uncertainty(
    stockroom: Stockroom, own: Path
) -> None:
    done = stockroom(
        "found",
        "S08",
        "0.0193 mol/dm3",
        "--uncertainty",
        "0.00005 mol/dm3",
        "--by",
        "T1",
        store=own,
    )
    assert "found 0.0193 mol/dm³ (standard uncertainty 0.00005 mol/dm³)" in done.out


def test_without_a_reaction_all_are_listed(stockroom: Stockroom) -> None:
    said = stockroom("titrate").out
    assert "permanganate on iron(II)" in said
    assert "silver nitrate on chloride" in said
    assert len(stockroom("titrate", "--json").json["reactions"]) > 30


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("tea on milk", "20", "--standard", "1 g"), 'No titration "tea on milk"'),
        (("NaOH on HCl", "20"), "which strength is known? neither was said"),
        (
            ("NaOH on HCl", "20", "--titrant", "0.1 M", "--standard", "1 g"),
            "which strength is known? both was said",
        ),
        (("NaOH on HCl", "20", "--titrant", "0.1 M"), "How much hydrochloric acid"),
        (("NaOH on HCl", "20", "--standard", "25 cm3"), "how strong is it?"),
        (("NaOH on HCl", "20", "20.4", "--standard", "1 g"), "Not concordant (0.4 cm³)"),
        (("NaOH on HCl", "twenty", "--standard", "1 g"), "'twenty'"),
        (("NaOH on HCl", "--standard", "1 g"), "0 titres say nothing"),
        (("NaOH on HCl", "60", "--standard", "1 g"), "more than the 50 cm³ burette holds"),
        (("NaOH on HCl", "20", "--standard", "1 g", "--blank", "21"), "leaves nothing"),
        (("NaOH on HCl", "20", "--standard", "1 g", "--assay", "103"), "assay 103 %"),
        (("NaOH on HCl", "20", "--standard", "1 g", "--sample", "20 cm3"), "the flask holds one"),
        (
            ("NaOH on HCl", "20", "--titrant", "0.1 M", "--sample", "25 g"),
            "is not a volume above 0",
        ),
        (
            (
                "NaOH on HCl",
                "20",
                "--titrant",
                "0.1 M",
                "--sample",
                "25 cm3",
                "--dilution",
                "10 cm3",
            ),
            "from what to what?",
        ),
        (("NaOH on HCl", "20", "--standard", "1 g", "--burette", "30"), "none of that size"),
        (("NaOH on HCl", "20", "--standard", "1 g", "--glass", "C"), "class 'C'"),
    ],
)
def test_what_cannot_be_worked_out_is_refused(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    result = stockroom("titrate", *words)
    assert result.code == 2
    assert told in result.err
    assert result.out == ""


@pytest.mark.parametrize(
    ("bottle", "told", "code"),
    [
        ("S01", "S01 holds sodium thiosulfate, and the reaction is of permanganate", 2),
        ("S99", "S99", 2),
    ],
)
def test_a_result_for_the_wrong_bottle_is_refused(
    stockroom: Stockroom, own: Path, bottle: str, told: str, code: int
) -> None:
    result = stockroom("titrate", *OXALATE, "--bottle", bottle, "--by", "T1", store=own)
    assert (result.code, told in result.err) == (code, True), result.err


def test_a_result_far_from_the_label_is_asked_about(stockroom: Stockroom, own: Path) -> None:
    far = ("permanganate on oxalate", "25.91", "--standard", "0.2675 g")
    result = stockroom("titrate", *far, "--bottle", "S08", "--by", "T1", store=own)
    assert result.code == 1
    assert "Unusual" in result.err


@pytest.mark.parametrize("spread", ["0.02 mol/dm3", "0 mol/dm3"])
def test_an_uncertainty_that_cannot_be_is_refused(
    stockroom: Stockroom, own: Path, spread: str
) -> None:
    result = stockroom(
        "found", "S08", "0.0193 mol/dm3", "--uncertainty", spread, "--by", "T1", store=own
    )
    assert result.code == 2
    assert "cannot be" in result.err
