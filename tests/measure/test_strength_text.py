from __future__ import annotations

import pytest

from stockroom.errors import BadAmount
from stockroom.measure.parsing import parse_strength, parse_strength_range
from stockroom.measure.strengths import StrengthUnit

READ = [
    ("0.15 M", 0.15, StrengthUnit.MOLAR),
    ("2M", 2, StrengthUnit.MOLAR),
    ("2 molar", 2, StrengthUnit.MOLAR),
    ("0.1 mol/dm3", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol/dm³", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol dm-3", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol dm⁻³", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol·dm⁻³", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol/L", 0.1, StrengthUnit.MOLAR),
    ("0.1 mol/litre", 0.1, StrengthUnit.MOLAR),
    ("0,1 mol/l", 0.1, StrengthUnit.MOLAR),
    ("5 mM", 0.005, StrengthUnit.MOLAR),
    ("5 mmol/dm3", 0.005, StrengthUnit.MOLAR),
    ("200 µM", 0.0002, StrengthUnit.MOLAR),
    ("M/50", 0.02, StrengthUnit.MOLAR),
    ("20 vol", 20, StrengthUnit.VOL),
    ("20vol.", 20, StrengthUnit.VOL),
    ("20 volumes", 20, StrengthUnit.VOL),
    ("37 % w/w", 37, StrengthUnit.WW),
    ("37% m/m", 37, StrengthUnit.WW),
    ("1 % w/v", 1, StrengthUnit.WV),
    ("0.9 % (m/v)", 0.9, StrengthUnit.WV),
    ("96 % v/v", 96, StrengthUnit.VV),
    ("5 per cent w/v", 5, StrengthUnit.WV),
    ("100 % w/w", 100, StrengthUnit.WW),
    ("5 g/L", 5, StrengthUnit.GRAMS),
    ("5 g dm⁻³", 5, StrengthUnit.GRAMS),
    ("5 mg/L", 0.005, StrengthUnit.GRAMS),
    ("5 mg/cm3", 5, StrengthUnit.GRAMS),
    ("150 ppm m/v", 150, StrengthUnit.PPM_MV),
    ("9.6 ppm m/m", 9.6, StrengthUnit.PPM_MM),
    ("1 in 10", 10, StrengthUnit.PARTS),
    ("2 in 10", 5, StrengthUnit.PARTS),
    ("2 parts in 10", 5, StrengthUnit.PARTS),
    ("1 part in 5", 5, StrengthUnit.PARTS),
    ("saturated", 0, StrengthUnit.SATURATED),
    ("Sat.", 0, StrengthUnit.SATURATED),
    ("0 M", 0, StrengthUnit.MOLAR),
    ("0.5 millimolar", 0.0005, StrengthUnit.MOLAR),
    ("5 nM", 5e-9, StrengthUnit.MOLAR),
    ("3 mol/m3", 0.003, StrengthUnit.MOLAR),
    ("2 mmol/cm3", 2, StrengthUnit.MOLAR),
    ("0.1 moles per litre", 0.1, StrengthUnit.MOLAR),
    ("95 mg/dL", 0.95, StrengthUnit.GRAMS),
    ("99.4 g/100 cm3", 994, StrengthUnit.GRAMS),
    ("2 grams per litre", 2, StrengthUnit.GRAMS),
    ("2 kg/m3", 2, StrengthUnit.GRAMS),
    ("20 µg/mL", 0.02, StrengthUnit.GRAMS),
    ("37 % by mass", 37, StrengthUnit.WW),
    ("37 wt %", 37, StrengthUnit.WW),
    ("5 g/100 g", 5, StrengthUnit.WW),
    ("40 % vol", 40, StrengthUnit.VV),
    ("40 % by volume", 40, StrengthUnit.VV),
    ("150 ppm w/v", 150, StrengthUnit.PPM_MV),
    ("15 ppb m/v", 0.015, StrengthUnit.PPM_MV),
    ("9600 ppb m/m", 9.6, StrengthUnit.PPM_MM),
    ("9.6 mg/kg", 9.6, StrengthUnit.PPM_MM),
    ("2 g/kg", 2000, StrengthUnit.PPM_MM),
    ("0.5 mol/kg", 0.5, StrengthUnit.MOLAL),
    ("0.5 mol kg⁻¹", 0.5, StrengthUnit.MOLAL),
    ("500 mmol/kg", 0.5, StrengthUnit.MOLAL),
    ("2 molal", 2, StrengthUnit.MOLAL),
    ("0.1 N", 0.1, StrengthUnit.NORMAL),
    ("N/10", 0.1, StrengthUnit.NORMAL),
    ("2.00 Eq/L", 2, StrengthUnit.NORMAL),
    ("140 mEq/L", 0.14, StrengthUnit.NORMAL),
    ("3 milliequivalents per litre", 0.003, StrengthUnit.NORMAL),
    ("1:10", 10, StrengthUnit.PARTS),
    ("1+9", 10, StrengthUnit.PARTS),
    ("1 in 1000 w/v", 0.1, StrengthUnit.WV),
    ("1:1000 w/v", 0.1, StrengthUnit.WV),
    ("1 in 10 v/v", 10, StrengthUnit.VV),
    ("1 × 10⁻³ M", 0.001, StrengthUnit.MOLAR),
    ("2.5 x 10^-2 mol dm⁻³", 0.025, StrengthUnit.MOLAR),
    ("1x10-3 M", 0.001, StrengthUnit.MOLAR),
    ("6·10^(-2) M", 0.06, StrengthUnit.MOLAR),
    ("2 × 10³ ppm m/v", 2000, StrengthUnit.PPM_MV),
]


@pytest.mark.parametrize(("text", "value", "unit"), READ)
def test_a_strength_is_read_as_meant(text: str, value: float, unit: StrengthUnit) -> None:
    strength = parse_strength(text)
    assert strength.value == pytest.approx(value, rel=1e-12)
    assert strength.unit is unit


REFUSED = [
    ("5 %", "Which: g in 100 cm³ (% w/v), g in 100 g (% w/w), or cm³ in 100 cm³ (% v/v)?"),
    ("100 %", "Which:"),
    ("5 ppm", "ppm m/v"),
    ("5 ppb", "ppb m/v"),
    ("0.1 n", "capital N"),
    ("0.1 eq", "equivalents in how much?"),
    ("2 m", "molality or metres?"),
    ("2 mol", "moles in how much?"),
    ("2 g", "grams in how much?"),
    ("0.5", "0.5 of what?"),
    ("1:1", "parts of the whole, or parts to parts?"),
    ("2:5", 'Write "2 in 5" or "2+5"'),
    ("1 in 10 cows", 'cannot read "cows"'),
    ("N/0", "divides by 0"),
    ("M/50 for luck", "how strong?"),
    ("20 mol/kg water", "I do not know"),
    ("801 N", "nothing is stronger"),
    ("10 in 1", "more parts than the whole"),
    ("-1 M", "less than nothing"),
    ("M/0", "divides by 0"),
    ("101 % w/w", "nothing is stronger than 100 % w/w"),
    ("180 % w/v", "write it in g/dm3"),
    ("150 mol/dm3", "nothing is stronger"),
    ("1000 vol", "nothing is stronger"),
    ("1,000 ppm m/v", "One thousand or one?"),
    ("conc.", "how strong?"),
    ("", "how strong?"),
    ("5 MM", "I do not know"),
    (".1 M", 'Write "0.1 M"'),
    (",5 M", 'Write "0.5 M"'),
    ("½ M", 'Write it with a point, as "0.5 M"'),
    ("1/10 M", 'Write it with a point, as "0.1 M"'),
    ("0.1-0.2 M", "a range, and one figure is wanted"),
    ("0.1 M ± 0.01", "Leave out the ±"),
    ("1 to 10", 'Write "1 in 10" or "1+10"'),
    ("1 in 0", 'Write "1 in 10"'),
    ("N/0", 'Write "N/50"'),
    ("10 in 1", 'Write "1 in 10"'),
    ("180 % w/v", "more than 100 % w/v"),
    ("saturated at 20", 'Write "saturated at 20 °C"'),
]


@pytest.mark.parametrize(("text", "says"), REFUSED)
def test_a_doubtful_strength_is_refused_with_its_question(text: str, says: str) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_strength(text, where="nominal")
    assert says in str(caught.value)
    assert f'nominal "{text}"' in caught.value.message


@pytest.mark.parametrize(
    ("text", "hint"),
    [
        ("5 %", 'Write "5 % w/v", "5 % w/w" or "5 % v/v".'),
        ("5 per cent", 'Write "5 % w/v", "5 % w/w" or "5 % v/v".'),
        ("1000 ppm of it", 'Write "1000 ppm m/v of it" or "1000 ppm m/m of it".'),
        ("12 % available chlorine",
         'Write "12 % w/v available chlorine" or "12 % w/w available chlorine".'),
    ],
)  # fmt: skip
def test_the_question_which_shows_the_whole_strength_as_it_may_be_written(
    text: str, hint: str
) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_strength(text)
    assert caught.value.hint == hint


def test_a_strength_remembers_how_it_was_written() -> None:
    assert parse_strength("  0.1 mol dm⁻³ ").text == "0.1 mol dm⁻³"


@pytest.mark.parametrize("text", ["90-100 vol", "90–100 vol", "90 - 100 vol", "90 to 100 vol"])
def test_a_range_gives_both_ends(text: str) -> None:
    low, high = parse_strength_range(text)
    assert (low.value, high.value, high.text) == (90, 100, "100 vol")


@pytest.mark.parametrize("text", ["0.1 mol dm-3", "90 vol", "1 in 10"])
def test_a_single_strength_is_its_own_range(text: str) -> None:
    low, high = parse_strength_range(text)
    assert low == high == parse_strength(text)


def test_a_range_of_a_unit_with_a_minus_in_it_is_read() -> None:
    low, high = parse_strength_range("0.1-0.2 mol dm-3")
    assert (low.value, high.value) == (0.1, 0.2)


def test_a_range_that_runs_downwards_is_refused() -> None:
    with pytest.raises(BadAmount, match="90-100 vol"):
        parse_strength_range("100-90 vol")


def test_a_range_asks_where_as_a_single_strength_does() -> None:
    with pytest.raises(BadAmount, match='limits "5 %": Which'):
        parse_strength_range("5-10 %", where="limits")
