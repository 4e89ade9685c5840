"""Hydrogen peroxide by volume strength: cm³ of oxygen from one cm³ of solution.

2 H2O2 -> 2 H2O + O2. The pharmacopoeias measure the gas at 0 °C and 1 atm, and so
does this house unless told otherwise; some school guidance counts at room
temperature, which makes the same bottle 7 % stronger by its label.
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

# Source: CODATA for both molar volumes at 0 °C; 24 as school guidance rounds it, consistent
# with a UK school safety sheet on peroxide (2018)
_CONDITIONS = ((22.414, "0 °C, 1 atm"), (22.711, "0 °C, 1 bar"), (24.0, "room temperature"))
_ROUNDED = 0.02

_OXYGEN_PER_PEROXIDE = 0.5
_AS_PRINTED = 'Write "vol", "% w/v" or "% w/w" after it, as printed on the bottle.'


def vol_to_molar(vol: float, gas_volume: float | None = None) -> float:
    """The mol/dm³ of a volume strength; 20 vol is 1.785 mol/dm³.

    `gas_volume` in dm³/mol is that of the oxygen, 22.414 (0 °C, 1 atm) unless given.
    Source: definition in the British and Indian Pharmacopoeias (gas at 0 °C, 1 atm).
    """
    return vol / ((gas_volume or VM) * _OXYGEN_PER_PEROXIDE)


def molar_to_vol(molar: float, gas_volume: float | None = None) -> float:
    """The volume strength of so many mol/dm³; 8.92 mol/dm³ is 100 vol. `vol_to_molar` undone."""
    return molar * (gas_volume or VM) * _OXYGEN_PER_PEROXIDE


def convention(gas_volume: float | None = None) -> str:
    """The convention "vol" was counted by, as printed under every sum that used it.

    >>> convention(24)
    'vol counted at 24 dm³ of oxygen a mole (room temperature)'
    """
    gas = gas_volume or VM
    said = next((f" ({at})" for near, at in _CONDITIONS if abs(gas - near) <= _ROUNDED), "")
    return f"vol counted at {format_number(gas, 5)} dm³ of oxygen a mole{said}"


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
