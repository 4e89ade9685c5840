"""titrate: titres in, a strength out, with what it was counted by."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

IODATE = ("thiosulfate on iodate", "25.30", "25.35", "25.35")
PIPETTED = ("--standard", "25.00 cm3 of 0.01667 mol/dm3")
OXALATE = ("permanganate on oxalate", "25.91", "--standard", "0.1675 g")


def test_titres_come_to_a_strength_without_a_store(stockroom: Stockroom) -> None:
    said = stockroom("titrate", *IODATE, *PIPETTED)
    assert said.code == 0
    # worked out by hand: 0.0987
    assert said.out.startswith("thiosulfate found 0.0987 ± 0.000")
    assert "mean titre 25.33 cm³ of 25.30, 25.35, 25.35; they lie 0.05 cm³ apart" in said.out
    assert "6 mol thiosulfate for 1 mol iodate" in said.out
    assert "taken as exact" in said.out


def test_peroxide_is_shown_in_vol_and_per_cent_too(stockroom: Stockroom) -> None:
    # a pharmacopoeia's assay, recomputed: 19.78 vol, 6.004 % w/v; their doubt worked out apart,
    # class B glass (0.10, twice 0.04, 0.20 over √6; a fifth of each for filling) and 4 °C: 0.665 %
    words = ("titrate", "KMnO4 on peroxide", "35.30", "--titrant", "0.02 M", "--sample", "10 cm3")
    said = stockroom(*words, "--dilution", "10 cm3 to 100 cm3")
    assert "that is 19.78 ± 0.13 vol or 6.00 ± 0.04 % w/v; vol counted at 22.414 dm³" in said.said
    also = stockroom(*words, "--dilution", "10 cm3 to 100 cm3", "--json").json["also"]
    assert [each["unit"] for each in also] == ["vol", "% w/v"]
    assert also[0]["value"] == pytest.approx(19.78, abs=0.01)


def test_bleach_is_shown_in_available_chlorine_too(stockroom: Stockroom) -> None:
    # recomputed: 0.705 mol/dm³ of ClO⁻ is 0.705 × 7.0906 % w/v of chlorine
    words = ("titrate", "thiosulfate on bleach", "14.10", "--titrant", "0.1 M", "--sample")
    said = stockroom(*words, "25 cm3", "--dilution", "10 cm3 to 250 cm3", "--json").json
    assert said["also"][0]["unit"] == "% w/v available chlorine"
    assert said["also"][0]["value"] == pytest.approx(5.00, abs=0.01)


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (PIPETTED, "exact enough for an exact line (±0.5 %), if the iodate's strength is exact"),
        (("--standard", "0.0892 g"), "if the standard's assay is exact"),
        (
            (*PIPETTED, "--uncertainty", "0.00001 M"),
            "exact enough for an exact line (±0.5 %) Local",
        ),
        ((*PIPETTED, "--uncertainty", "0.001 M"), "not exact enough for an exact line (±0.5 %)"),
    ],
)
def test_exact_enough_is_said_with_its_if(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    assert told in stockroom("titrate", *IODATE, *words).said


def test_titres_that_repeat_badly_are_told_of(stockroom: Stockroom) -> None:
    bad = ("titrate", "thiosulfate on iodate", "25.30", "25.40", *PIPETTED)
    told = "repeatability 0.28 % (relative standard deviation): over the 0.2 %"
    assert told in stockroom(*bad).said
    assert "repeatability" not in stockroom("titrate", *IODATE, *PIPETTED).out


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
        (("NaOH on KHP", "20", "20.4", "--standard", "1 g"), "Not concordant (0.4 cm³)"),
        (("NaOH on KHP", "twenty", "--standard", "1 g"), "'twenty'"),
        (("NaOH on KHP", "--standard", "1 g"), "0 titres say nothing"),
        (("NaOH on KHP", "60", "--standard", "1 g"), "more than the 50 cm³ burette holds"),
        (("NaOH on KHP", "20", "--standard", "1 g", "--blank", "21"), "leaves nothing"),
        (("NaOH on KHP", "20", "--standard", "1 g", "--assay", "103"), "assay 103 %"),
        (("NaOH on KHP", "20", "--standard", "1 g", "--sample", "20 cm3"), "it holds one"),
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
        (("NaOH on KHP", "20", "--standard", "1 g", "--burette", "30"), "none of that size"),
        (("NaOH on KHP", "20", "--standard", "1 g", "--glass", "C"), "class 'C'"),
    ],
)
def test_what_cannot_be_worked_out_is_refused(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    result = stockroom("titrate", *words)
    assert result.code == 2
    assert told in result.err
    assert result.out == ""
