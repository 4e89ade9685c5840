"""A strength as somebody wrote it, and the spellings of its unit.

The sums that turn one unit into another need a molar mass or a density, and live
in `chemistry/strength.py`; words beside the unit are read in `strength_words.py`.
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
    MOLAL = "mol/kg"
    CHLORINE = "% w/v available chlorine"
    CHLORINE_WW = "% w/w available chlorine"
    PARTS = "1 in"
    SATURATED = "saturated"


@dataclass(frozen=True, slots=True)
class Strength:
    """A strength in the unit it was written in.

    `value` is in `unit`, zero or more; for "1 in 10" it is 10 and the unit PARTS;
    for "saturated" it is 0 and says nothing. `text` is what was written, stripped.
    What stood beside the unit: `reaction`, what a normality refers to, else empty;
    `gas_volume`, the dm³/mol that "vol" is counted at, and `celsius`, at which it is
    saturated, where stated; `part_of`, what "1 in 10" is one part of, where stated.
    `counted_as` is the formula of a part ("N", "NO3") that the number as written was of.
    """

    value: float
    unit: StrengthUnit
    text: str
    reaction: str = ""
    gas_volume: float | None = None
    celsius: float | None = None
    part_of: Strength | None = None
    counted_as: str = ""


_ONE = Decimal(1)
_THOUSAND = Decimal(1000)
_THOUSANDTH = Decimal("0.001")
_MILLIONTH = Decimal("0.000001")
_BILLIONTH = Decimal("0.000000001")

# tidied text has the Greek letter where a keyboard has the micro sign or a plain u
_PREFIXES = {
    "": _ONE,
    "m": _THOUSANDTH,
    "\u03bc": _MILLIONTH,
    "u": _MILLIONTH,
    "mc": _MILLIONTH,
    "n": _BILLIONTH,
}
# per how much of the solution, and what brings it to one dm³
_PER_VOLUME: dict[Decimal, tuple[str, ...]] = {
    _ONE: ("/dm3", "dm-3", "/l", "l-1"),
    _THOUSAND: ("/cm3", "cm-3", "/ml", "ml-1"),
    Decimal(10): ("/dl", "dl-1", "/100cm3", "/100ml"),
    _THOUSANDTH: ("/m3", "m-3"),
}
_PPM_PER_GRAM_IN = {"/kg": _THOUSAND, "kg-1": _THOUSAND, "/g": Decimal(1_000_000)}

Spelt = dict[str, tuple[StrengthUnit, Decimal]]


def _spellings() -> Spelt:
    table: Spelt = {"normal": (StrengthUnit.NORMAL, _ONE)}
    for prefix, scale in _PREFIXES.items():
        table[f"{prefix}M"] = table[f"{prefix}molar"] = (StrengthUnit.MOLAR, scale)
        table[f"{prefix}molal"] = (StrengthUnit.MOLAL, scale)
        table |= {f"{prefix}mol{per}": (StrengthUnit.MOLAL, scale) for per in ("/kg", "kg-1")}
        for to_dm3, pers in _PER_VOLUME.items():
            for per in pers:
                table[f"{prefix}mol{per}"] = (StrengthUnit.MOLAR, scale * to_dm3)
                table[f"{prefix}g{per}"] = (StrengthUnit.GRAMS, scale * to_dm3)
                table[f"{prefix}eq{per}"] = (StrengthUnit.NORMAL, scale * to_dm3)
        for per, ppm in _PPM_PER_GRAM_IN.items():
            table[f"{prefix}g{per}"] = (StrengthUnit.PPM_MM, scale * ppm)
    for to_dm3, pers in _PER_VOLUME.items():
        table |= {f"kg{per}": (StrengthUnit.GRAMS, _THOUSAND * to_dm3) for per in pers}
    # "mN" is millinormal and "n" nothing, so the case of this one counts
    table |= {"N": (StrengthUnit.NORMAL, _ONE), "mN": (StrengthUnit.NORMAL, _THOUSANDTH)}
    return table | _per_cents() | _parts_per()


def _per_cents() -> Spelt:
    table: Spelt = {"g/100g": (StrengthUnit.WW, _ONE), "%abv": (StrengthUnit.VV, _ONE)}
    # "mass" and "weight" are both said; the label and the textbook each have their own
    for unit, kinds in {
        StrengthUnit.WV: ("w/v", "m/v", "wt/vol"),
        StrengthUnit.WW: ("w/w", "m/m", "wt/wt", "wt", "bymass", "byweight", "mass"),
        StrengthUnit.VV: ("v/v", "vol/vol", "vol", "byvolume", "volume"),
    }.items():
        for kind in kinds:
            table[f"%{kind}"] = table[f"{kind}%"] = (unit, _ONE)
    # bleach is sold by its chlorine: 1 % trade is 10 g/dm³ of it available (common practice)
    return table | dict.fromkeys(("%trade", "trade%"), (StrengthUnit.CHLORINE, _ONE))


def _parts_per() -> Spelt:
    table: Spelt = dict.fromkeys(("vol", "vols", "volume", "volumes"), (StrengthUnit.VOL, _ONE))
    for parts, scale in {"ppm": _ONE, "ppb": _THOUSANDTH}.items():
        for kind in ("m/v", "w/v"):
            table[f"{parts}{kind}"] = (StrengthUnit.PPM_MV, scale)
        for kind in ("m/m", "w/w"):
            table[f"{parts}{kind}"] = (StrengthUnit.PPM_MM, scale)
    return table


_SPELLINGS = _spellings()

# Units that say something, but not enough to be a strength: the question to ask back.
_ASK: dict[str, tuple[str, str]] = {
    "": ("{number} of what?", 'Add the unit, as "{number} mol/dm3".'),
    "%": ("Which: g in 100 cm³ (% w/v), g in 100 g (% w/w), or cm³ in 100 cm³ (% v/v)?", ""),
    "ppm": ("Which: mg in 1 dm³ (ppm m/v) or mg in 1 kg (ppm m/m)?", ""),
    "ppb": ("Which: µg in 1 dm³ (ppb m/v) or µg in 1 kg (ppb m/m)?", ""),
    "ppt": ("parts per thousand or per million million?", "Write g/dm3, or ng/dm3."),
    "n": ("normality is written with a capital N.", 'Write "{number}" with N and the reaction.'),
    "m": (
        "molality or metres?",
        "For mol in 1 kg of water write mol/kg; for mol in 1 dm³ of solution write mol/dm3.",
    ),
    "mol": ("moles in how much?", 'Write "mol/dm3" after the number.'),
    "g": ("grams in how much?", 'Write "g/dm3" after the number.'),
    "eq": ("equivalents in how much?", 'Write "eq/dm3" and the reaction after the number.'),
}
_ASK |= {"mg": _ASK["g"], "mmol": _ASK["mol"], "meq": _ASK["eq"]}
_KINDS = {"%": ("w/v", "w/w", "v/v"), "ppm": ("m/v", "m/m"), "ppb": ("m/v", "m/m")}


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
    # the first word alone may be what needs asking about: "5 % of the label"
    for asked in (key, key.lower(), *unit_text.split()[:1]):
        if asked in _ASK:
            question, hint = _ASK[asked]
            hint = which_of(number, asked, _KINDS[asked]) if asked in _KINDS else hint
            raise BadAmount(
                f"{shown}: {question.format(number=number)}", hint.format(number=number)
            )
    raise BadAmount(
        f'{shown}: I do not know "{unit_text}" as a strength.',
        "Use mol/dm3, g/dm3, % w/v, % w/w, % v/v, vol, ppm m/v, mol/kg, N or 1 in 10.",
    )


def which_of(written: str, unit: str, kinds: tuple[str, ...]) -> str:
    """What to write instead, in full: the strength once with each of the kinds put in."""
    # "per cent" has no sign to put the kind behind
    pattern = re.compile(f"(?:{re.escape(unit)}|per ?cent)", re.IGNORECASE)
    *others, last = (f'"{pattern.sub(f"{unit} {kind}", written, count=1)}"' for kind in kinds)
    return f"Write {', '.join(others)} or {last}."


_IN_FULL = (
    (re.compile(r"per ?cent", re.IGNORECASE), "%"),
    (re.compile(r"\b(?:litre|liter)s?\b", re.IGNORECASE), "l"),
    (re.compile(r"equiv(?:alent)?s?\b", re.IGNORECASE), "eq"),
    (re.compile(r"\bmilli(?=mol|eq|g)", re.IGNORECASE), "m"),
    (re.compile(r"\bmicro(?=mol|eq|g)", re.IGNORECASE), "u"),
    (re.compile(r"\bmoles?\b", re.IGNORECASE), "mol"),
    (re.compile(r"\bgram(?:me)?s?\b", re.IGNORECASE), "g"),
    (re.compile(r"\bper\b", re.IGNORECASE), "/"),
    (re.compile(r"[\s.·⋅()^*]+"), ""),
)


def _key(unit_text: str) -> str:
    for words, short in _IN_FULL:
        unit_text = words.sub(short, unit_text)
    return unit_text
