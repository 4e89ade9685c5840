"""A strength as somebody wrote it, and the spellings of its unit.

The sums that turn one unit into another need a molar mass or a density, and live
in `chemistry/strength.py`.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from stockroom.errors import BadAmount


class StrengthUnit(StrEnum):
    """The ways of stating a strength that the bench uses."""

    MOLAR = "mol/dm3"
    GRAMS = "g/dm3"
    WV = "% w/v"
    WW = "% w/w"
    VV = "% v/v"
    VOL = "vol"
    PPM_MV = "ppm m/v"
    PPM_MM = "ppm m/m"
    NORMAL = "N"
    PARTS = "1 in"
    SATURATED = "saturated"


@dataclass(frozen=True, slots=True)
class Strength:
    """A strength in the unit it was written in.

    `value` is in `unit`, zero or more; for "1 in 10" it is 10 and the unit PARTS;
    for "saturated" it is 0 and says nothing. `text` is what was written, stripped;
    `reaction` is the equation a normality refers to, else empty.
    """

    value: float
    unit: StrengthUnit
    text: str
    reaction: str = ""


_ONE = Decimal(1)
_THOUSANDTH = Decimal("0.001")
_MILLIONTH = Decimal("0.000001")

# tidied text has the Greek letter where a keyboard has the micro sign or a plain u
_MOLAR_PREFIXES = {"": _ONE, "m": _THOUSANDTH, "\u03bc": _MILLIONTH, "u": _MILLIONTH}
_PER_DM3 = ("/dm3", "dm-3", "/l", "l-1", "/litre", "/liter")
_PER_CM3 = ("/cm3", "cm-3", "/ml", "ml-1")


def _spellings() -> dict[str, tuple[StrengthUnit, Decimal]]:
    table: dict[str, tuple[StrengthUnit, Decimal]] = {
        "molar": (StrengthUnit.MOLAR, _ONE),
        "ppmm/v": (StrengthUnit.PPM_MV, _ONE),
        "ppmw/v": (StrengthUnit.PPM_MV, _ONE),
        "ppmm/m": (StrengthUnit.PPM_MM, _ONE),
        "ppmw/w": (StrengthUnit.PPM_MM, _ONE),
    }
    for prefix, scale in _MOLAR_PREFIXES.items():
        table[f"{prefix}M"] = (StrengthUnit.MOLAR, scale)
        for per in _PER_DM3:
            table[f"{prefix}mol{per}"] = (StrengthUnit.MOLAR, scale)
            table[f"{prefix}g{per}"] = (StrengthUnit.GRAMS, scale)
        for per in _PER_CM3:
            table[f"{prefix}g{per}"] = (StrengthUnit.GRAMS, scale * 1000)
    for word in ("vol", "vols", "volume", "volumes"):
        table[word] = (StrengthUnit.VOL, _ONE)
    # "mass" and "weight" are both said; the label and the textbook each have their own
    for unit, kinds in {
        StrengthUnit.WV: ("w/v", "m/v"),
        StrengthUnit.WW: ("w/w", "m/m"),
        StrengthUnit.VV: ("v/v",),
    }.items():
        for kind in kinds:
            table[f"%{kind}"] = table[f"{kind}%"] = (unit, _ONE)
    return table


_SPELLINGS = _spellings()

# Units that say something, but not enough to be a strength: the question to ask back.
_ASK: dict[str, tuple[str, str]] = {
    "": ("{number} of what?", 'Add the unit, as "{number} mol/dm3".'),
    "%": (
        "Which: g in 100 cm³ (% w/v), g in 100 g (% w/w), or cm³ in 100 cm³ (% v/v)?",
        "Write % w/v, % w/w or % v/v after the number.",
    ),
    "ppm": (
        "Which: mg in 1 dm³ (ppm m/v) or mg in 1 kg (ppm m/m)?",
        "Write ppm m/v or ppm m/m after the number.",
    ),
    "N": (
        "normality depends on the reaction it is used in.",
        "Divide by the equivalents per mole in that reaction and write mol/dm3.",
    ),
    "m": ("molality or metres?", "Write the strength of the solution in mol/dm3."),
    "mol": ("moles in how much?", 'Write "mol/dm3" after the number.'),
    "g": ("grams in how much?", 'Write "g/dm3" after the number.'),
}
_ASK |= {"normal": _ASK["N"], "n": _ASK["N"], "eq/l": _ASK["N"], "eq/dm3": _ASK["N"]}
_ASK["mg"] = _ASK["g"]


def unit_of(unit_text: str, *, number: str, shown: str) -> tuple[StrengthUnit, Decimal]:
    """The strength unit a spelling stands for, and what its number is multiplied by.

    `unit_text` is tidied; spaces, dots and brackets do not count, and of the case
    only M, m and N do. `number` and `shown` are quoted in the question asked back.
    Raises: BadAmount when the spelling is unknown, or known and not enough.
    """
    key = _key(unit_text)
    for spelt in (key, key.lower()):
        if spelt in _SPELLINGS:
            return _SPELLINGS[spelt]
    # the first word alone may be what needs asking about: "N for iron(II) to iron(III)"
    for asked in (key, key.lower(), *unit_text.split()[:1]):
        if asked in _ASK:
            question, hint = _ASK[asked]
            raise BadAmount(
                f"{shown}: {question.format(number=number)}", hint.format(number=number)
            )
    raise BadAmount(
        f'{shown}: I do not know "{unit_text}" as a strength.',
        "Use mol/dm3, g/dm3, % w/v, % w/w, % v/v, vol, ppm m/v or 1 in 10.",
    )


def _key(unit_text: str) -> str:
    words = re.sub(r"per ?cent", "%", unit_text, flags=re.IGNORECASE)
    words = re.sub(r"\b(?:litre|liter)s?\b", "l", words, flags=re.IGNORECASE)
    return re.sub(r"[\s.·⋅()^*]+", "", words)
