"""Hydrogen peroxide by volume strength: cm³ of oxygen from one cm³ of solution.

2 H2O2 -> 2 H2O + O2, the gas at 0 °C and 1 atm. Some school guidance counts at room
temperature (24 dm³/mol), which gives figures 7 % lower; this house does not.
"""

from __future__ import annotations

import re

from stockroom.errors import BadAmount
from stockroom.measure.formats import format_number
from stockroom.measure.reading import NUMBER, quote, tidy

VM = 22.414
"""Molar volume of an ideal gas at 0 °C and 1 atm, dm³/mol. Source: CODATA (22.41397)."""

MOLAR_MASS = 34.0147
"""Hydrogen peroxide, g/mol. Source: NIST isotopic masses, through molmass."""

_OXYGEN_PER_PEROXIDE = 0.5
_AS_PRINTED = 'Write "vol", "% w/v" or "% w/w" after it, as printed on the bottle.'


def vol_to_molar(vol: float) -> float:
    """The mol/dm³ of a volume strength; 20 vol is 1.785 mol/dm³.

    Source: definition in the British and Indian Pharmacopoeias (gas at 0 °C, 1 atm).
    """
    return vol / (VM * _OXYGEN_PER_PEROXIDE)


def molar_to_vol(molar: float) -> float:
    """The volume strength of so many mol/dm³; 8.92 mol/dm³ is 100 vol."""
    return molar * VM * _OXYGEN_PER_PEROXIDE


def ask_vol(text: str, *, where: str = "strength") -> BadAmount:
    """The question to raise when peroxide is given as a bare per cent: "100 %" or "100".

    Labels mix vol with % w/v and % w/w, so the number alone settles nothing.
    """
    number = _leading_number(text)
    shown = f"{where} {quote(text)}"
    if number is None:
        return BadAmount(f"{shown}: how strong is the peroxide?", _AS_PRINTED)
    # two figures: the number on the label is itself only nominal
    per_cent = format_number(vol_to_molar(number) * MOLAR_MASS / 10, 2)
    meant = f"Do you mean {format_number(number)} vol (about {per_cent} % w/v)?"
    return BadAmount(f"{shown}: {meant}", _AS_PRINTED)


def _leading_number(text: str) -> float | None:
    match = re.match(NUMBER, tidy(text))
    try:
        return float(match[0].replace(" ", "").replace(",", ".")) if match else None
    except ValueError:
        return None
