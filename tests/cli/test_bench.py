from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

PEROXIDE = ("--of", "hydrogen peroxide")
PENTAHYDRATE = ("--of", "sodium thiosulfate pentahydrate")
ANHYDROUS = ("--of", "sodium thiosulfate, anhydrous")

# Source of every value: the-job section 8, "Numbers to test against" (worked out there)
SUMS = [
    (("strength", "20 vol", *PEROXIDE, "--to", "mol/dm3"), 1.785),
    (("strength", "20 vol", *PEROXIDE, "--to", "% w/v"), 6.07),
    (("strength", "91 vol", *PEROXIDE, "--to", "mol/dm3"), 8.12),
    (("strength", "36 % w/w", "--of", "HCl", "--to", "M", "--density", "1.18"), 11.65),
    (("strength", "98 % w/w", "--of", "sulfuric acid", "--to", "mol/dm3"), 18.4),
    (("dilute", "500 cm3", "0.100 mol/dm3", "--from", "91 vol", *PEROXIDE), 6.16),
    (("dilute", "500 cm3", "0.100 mol/dm3", "--from", "100 vol"), 5.60),
    (("dilute", "2.00 L", "2.00 M", "--from", "36 % w/w", "--of", "hydrochloric acid"), 343),
    (("dilute", "5.00 L", "2.00 M", "--from", "98 % w/w", "--of", "sulfuric acid"), 544),
    (("dilute", "1000 cm3", "0.200 M", "--from", "1.06 M"), 188.7),
    (("weigh", "2.00 L", "0.200 mol/dm3", *PENTAHYDRATE), 99.27),
    (("weigh", "2.00 L", "0.200 mol/dm3", *ANHYDROUS), 63.24),
    (("weigh", "1.00 L", "0.500 M", "--of", "CuSO4.5H2O"), 124.8),
    (("weigh", "500 cm3", "0.500 M", "--of", "Na2CO3·10H2O"), 71.5),
    (("weigh", "1.00 L", "0.400 M", "--of", "NaOH", "--assay", "97"), 16.5),
]


@pytest.mark.parametrize(("words", "value"), SUMS)
def test_bench_sums_agree_with_the_trade_side(
    stockroom: Stockroom, words: tuple[str, ...], value: float
) -> None:
    assert stockroom(*words, "--json").json["value"] == pytest.approx(value, rel=2e-3)


def test_the_answer_stands_on_the_first_line(stockroom: Stockroom) -> None:
    first = stockroom("strength", "100 vol", *PEROXIDE, "--to", "mol/dm3").out.splitlines()[0]
    assert first == "100 vol hydrogen peroxide is 8.923 mol/dm³"


def test_the_assay_of_the_house_line_is_used_and_said(stockroom: Stockroom) -> None:
    out = stockroom("weigh", "1 L", "0.400 M", "--of", "sodium hydroxide").out
    assert "16.49 g of sodium hydroxide pellets" in out
    assert "assay 97 %" in out


def test_a_salt_on_the_shelf_in_two_forms_is_asked_about(stockroom: Stockroom) -> None:
    result = stockroom("weigh", "1 L", "0.1 M", "--of", "hypo")
    assert result.code == 2
    assert "'hypo': which form is in the bottle?" in result.err


def test_too_little_to_weigh_brings_two_offers(stockroom: Stockroom) -> None:
    # 0.176 g at 2 % on a 0.01 g balance: the-job, capability 35
    small = ("weigh", "176 cm3", "0.1 % w/v", "--of", "ascorbic acid", "--step", "0.01")
    out = stockroom(*small, "--closeness", "2").out
    assert "either 0.5 g made up to 500 cm³" in out
    assert "or 0.5 g made up to 50 cm³, and 17.6 cm³ of that to 176 cm³" in out


def test_enough_to_weigh_brings_no_offer(stockroom: Stockroom) -> None:
    # 0.352 g at 10 % on the same: the-job section 8
    fair = ("weigh", "352 cm3", "0.1 % w/v", "--of", "ascorbic acid", "--step", "0.01")
    assert "±2.8 %" in stockroom(*fair, "--closeness", "10").out


def test_strong_acid_is_diluted_with_its_caution(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "1 M", "--from", "98 % w/w", "--of", "sulfuric acid")
    assert "! Acid into water" in stockroom(*words).out


def test_a_stronger_need_than_the_stock_is_refused_in_its_own_unit(stockroom: Stockroom) -> None:
    result = stockroom("dilute", "500 cm3", "90 vol", "--from", "89.1 vol")
    assert result.code == 1
    assert "Cannot reach 90 vol from 89.1 vol." in result.err


def test_a_bottle_counts_at_what_it_is_expected_to_hold(
    stockroom: Stockroom, practice: Path
) -> None:
    # B01, found 91 vol on 2026-12-08, 1 % a month: 89.5 vol on 2027-01-26; scenario T09
    words = ("dilute", "528 cm3", "0.100 mol/dm3", "--from", "B01", "--as-at", "2027-01-26")
    data = stockroom(*words, "--json", store=practice).json
    assert data["value"] == pytest.approx(6.61, abs=0.01)
    assert data["practice"] is True


def test_a_number_nobody_has_is_answered_with_the_nearest(
    stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom("dilute", "1 L", "0.1 M", "--from", "B99", store=practice)
    assert result.code == 2
    assert "'B99'" in result.err


def test_a_comma_in_a_name_may_be_left_out(stockroom: Stockroom) -> None:
    """T24: a litre of 1.00 thiosulfate takes 158.1 g of the anhydrous form, however it is named."""
    for name in ("sodium thiosulfate, anhydrous", "Sodium thiosulfate anhydrous"):
        assert "158.1" in stockroom("weigh", "1 L", "1.00 mol/dm3", "--of", name).out
