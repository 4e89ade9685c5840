"""titrate --bottle: what was found, in the bottle's own unit, and the bottle re-dated."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

OXALATE = ("permanganate on oxalate", "25.91", "--standard", "0.1675 g")


def test_a_result_re_dates_the_bottle(stockroom: Stockroom, own: Path) -> None:
    done = stockroom("titrate", *OXALATE, "--bottle", "S08", "--by", "T1", store=own)
    assert done.code == 0
    assert "S08 potassium permanganate 0.0200 mol/dm³ found 0.019298 mol/dm³" in done.out
    assert "Now sound, until 3 February 2027: found 2027-01-04 + 30 days" in done.out
    assert "Write a new label" in done.out
    assert "factor 0.965: found over the 0.0200 mol/dm³ of the label" in done.out


def test_the_factor_is_in_the_json(stockroom: Stockroom, own: Path) -> None:
    found = stockroom(
        "titrate", *OXALATE, "--bottle", "S08", "--by", "T1", "--json", store=own
    ).json
    # worked out by hand: factor 0.965
    assert found["factor"] == pytest.approx(0.965, abs=5e-4)
    assert found["bottle"] == "S08"
    assert found["in_bottle"]["unit"] == "mol/dm3"
    assert found["value"] == pytest.approx(0.0193, abs=5e-5)


def test_a_factor_outside_the_pharmacopoeias_limits_is_told(
    stockroom: Stockroom, own: Path
) -> None:
    strong = ("permanganate on oxalate", "21.91", "--standard", "0.1675 g")
    said = stockroom("titrate", *strong, "--bottle", "S08", "--by", "T1", store=own)
    assert "factor 1.141" in said.out
    assert "outside the 0.90 to 1.10 that the British Pharmacopoeia allows" in said.said


PEROXIDE = ("KMnO4 on peroxide", "--titrant", "0.02 M", "--dilution", "10 cm3 to 500 cm3")


def test_a_peroxide_bottle_is_told_in_its_own_unit(stockroom: Stockroom, own: Path) -> None:
    words = ("titrate", *PEROXIDE, "36.30", "--sample", "10 cm3", "--bottle", "B01", "--by", "T1")
    # recomputed: 0.02 × 2.5 × 36.30 / 10 × 50 is 9.075 mol/dm³, by 11.207 101.70 vol
    said = stockroom(*words, store=own)
    assert "B01 hydrogen peroxide 100 vol found 101.7" in said.out
    assert "101.7 vol is 9.075 mol/dm³" in said.out
    assert "factor 1.017" in said.out
    # what is far off in one unit is compared in that unit
    far = stockroom(*words[:6], "16.30", *words[7:], store=own)
    assert far.code == 1
    assert "Unusual: 45.669 vol against 100 vol." in far.err


def test_a_titration_of_an_unopened_bottle_is_asked_about(stockroom: Stockroom, own: Path) -> None:
    words = ("titrate", *PEROXIDE, "36.30", "--sample", "10 cm3", "--bottle", "B02", "--by", "T1")
    refused = stockroom(*words, store=own)
    assert refused.code == 1
    assert "B02 hydrogen peroxide 100 vol was never opened" in refused.err
    assert "stockroom open B02" in refused.err
    assert stockroom(*words, "--sure", store=own).code == 0


def test_a_bleach_bottle_is_told_in_its_own_unit(stockroom: Stockroom, own: Path) -> None:
    words = ("thiosulfate on bleach", "29.00", "--titrant", "0.1 M", "--sample", "25 cm3")
    more = ("--dilution", "10 cm3 to 250 cm3", "--bottle", "B04", "--by", "T1", "--json")
    found = stockroom("titrate", *words, *more, store=own).json
    # recomputed: 1.45 mol/dm³ of 74.442 g/mol is 10.79 % w/v, against 12
    assert found["in_bottle"]["unit"] == "% w/v"
    assert found["in_bottle"]["value"] == pytest.approx(10.79, abs=0.01)
    assert found["factor"] == pytest.approx(10.794 / 12, abs=1e-3)


def test_a_known_strengths_uncertainty_is_stored_with_the_result(
    stockroom: Stockroom, own: Path
) -> None:
    bottle = ("thiosulfate on iodate", "25.91", "--standard", "25.00 cm3 of 0.167 mol/dm3")
    doubt = ("--uncertainty", "0.002 mol/dm3", "--bottle", "S01", "--by", "T1", "--json")
    found = stockroom("titrate", *bottle, *doubt, store=own).json
    # 1.2 % of 0.967 from the iodate alone
    assert found["in_bottle"]["uncertainty"] == pytest.approx(0.012, abs=0.001)
    iodine = ("titrate", "thiosulfate on iodine", "25.00", "--titrant", "S01", "--sample", "25 cm3")
    again = stockroom(*iodine, "--json", store=own).json
    assert "S01 strength" in {part["from"] for part in again["budget"]}


def test_its_uncertainty_goes_into_the_next_titration(stockroom: Stockroom, own: Path) -> None:
    iron = ("titrate", "KMnO4 on Fe2+", "24.10", "--titrant", "S08", "--sample", "25 cm3")
    before = stockroom(*iron, "--json", store=own).json
    stockroom("titrate", *OXALATE, "--bottle", "S08", "--by", "T1", store=own)
    after = stockroom(*iron, "--json", store=own).json
    assert "S08 strength" in {part["from"] for part in after["budget"]}
    assert after["uncertainty"] > before["uncertainty"]


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
