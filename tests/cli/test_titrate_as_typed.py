"""`titrate`: figures as a bench writes them, and what was typed in vain."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

IODATE = ("thiosulfate on iodate", "25.30", "25.35")
PIPETTED = ("--standard", "25.00 cm3 of 0.01667 mol/dm3")
PEROXIDE = ("permanganate on hydrogen peroxide", "22.40", "22.45", "--titrant", "0.0200 M")


def test_a_decimal_comma_is_read(stockroom: Stockroom) -> None:
    words = ("titrate", "thiosulfate on iodate", "25,30", "25,35 cm3", *PIPETTED)
    assert stockroom(*words).out == stockroom("titrate", *IODATE, *PIPETTED).out


def test_a_sample_diluted_twice_counts_both(stockroom: Stockroom) -> None:
    """Worked out here: 0.02 × 22.425 × 2.5 / 25, times 25 and times 10."""
    words = ("titrate", *PEROXIDE, "--sample", "25 cm3", "--json")
    steps = ("--dilution", "10 cm3 to 250 cm3", "--dilution", "25 cm3 to 250 cm3")
    assert stockroom(*words, *steps).json["value"] == pytest.approx(11.2125, rel=1e-4)


@pytest.mark.parametrize(("titres", "mean"), [("22.40 22.45", "22.43"), ("25.30 25.35", "25.33")])
def test_a_mean_on_the_half_is_rounded_up(stockroom: Stockroom, titres: str, mean: str) -> None:
    out = stockroom("titrate", "NaOH on HCl", *titres.split(), "--standard", "25 cm3 of 0.1 M").out
    assert f"mean titre {mean} cm³" in out


def test_a_standard_made_up_may_be_said_at_once(stockroom: Stockroom) -> None:
    at_once = ("--standard", "25 cm3 of 0.892 g of potassium iodate in 250 cm3")
    apart = ("--standard", "0.892 g of potassium iodate in 250 cm3", "--sample", "25 cm3")
    found = stockroom("titrate", *IODATE, *at_once, "--json").json
    assert found["value"] == stockroom("titrate", *IODATE, *apart, "--json").json["value"]
    # 0.892 g / 214.00 g/mol × 25 / 250 × 6 / 25.325 cm³
    assert found["value"] == pytest.approx(0.09875, rel=1e-3)


def test_the_limits_of_an_assay_count(stockroom: Stockroom) -> None:
    words = ("titrate", "permanganate on oxalate", "25.91", "--standard", "0.1675 g", "--json")
    found = stockroom(*words, "--assay", "99.5 ± 0.5").json
    # rectangular: 0.5 / √3 per cent of 0.01920
    shares = {part["from"]: part["uncertainty"] for part in found["budget"]}
    assert shares["assay: label"] == pytest.approx(0.0192 * 0.005 / 0.995 / 3**0.5, rel=0.01)
    assert any("assay 99.5 ± 0.5 %" in detail for detail in found["details"])


def test_an_uncertainty_may_be_a_share(stockroom: Stockroom) -> None:
    words = ("titrate", *IODATE, *PIPETTED, "--uncertainty")
    share = stockroom(*words, "0.12 %", "--json").json
    plain = stockroom(*words, "0.000020004 mol/dm3", "--json").json
    assert share["uncertainty"] == plain["uncertainty"]


def test_a_blank_of_nothing_is_a_blank(stockroom: Stockroom) -> None:
    assert stockroom("titrate", *IODATE, *PIPETTED, "--blank", "0").code == 0


def test_what_is_written_to_a_bottle_keeps_to_the_width(stockroom: Stockroom, own: Path) -> None:
    words = ("permanganate on oxalate", "25.91", "--standard", "0.1675 g", "--bottle", "S08")
    out = stockroom("titrate", *words, "--by", "T1", store=own).out
    assert max(len(line) for line in out.splitlines()) <= 100
    assert re.search(r"\n  ! Warm to about 60 °C", out)
    assert "Local rules" in out


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("25.30,25.35", *PIPETTED), "Write them apart: 25.30 25.35."),
        (("-5", *PIPETTED), "titre '-5' is not a number above 0"),
        (("nan", *PIPETTED), "Write it as 25.35."),
        (("25.3", "--standard", "0.01667 M"), 'Write "25.00 cm3 of 0.01667 M"'),
        (("25.3", "--standard", "892 g"), "nothing is that strong"),
        (("25.3", *PIPETTED, "--blank", "-0.1"), "is not a number from 0 up"),
        (("25.3", *PIPETTED, "--sure"), "--sure: nothing is written to a bottle"),
        (("25.3", *PIPETTED, "--on", "2027-01-05"), "--on 2027-01-05: nothing is written"),
        (("25.3", "--standard", "0.0892 g", "--assay", "0.999"), "Write a per cent, as 99.9."),
        (("25.30", "25.35", "26.80", *PIPETTED), "25.30, 25.35 agree: leave out 26.80"),
    ],
)
def test_a_slip_is_answered_with_what_to_write(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    result = stockroom("titrate", "thiosulfate on iodate", *words)
    assert (result.code, result.out) == (2, "")
    assert told in result.err
