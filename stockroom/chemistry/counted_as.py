"""Strengths counted as something in the substance: "ppm as N", "mg/dm3 as NO3", "as CaCO3".

Standards and water reports count the part that matters: 1000 mg/dm³ "as N" of potassium
nitrate holds 1000 mg of nitrogen, and 7218 mg of the salt. The two are tied by an element
that both have and water has not; nothing else about them needs to be alike.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount
from stockroom.measure.reading import tidy

_NAMES = {
    "nitrate": "NO3", "nitrite": "NO2", "nitrogen": "N", "ammonium": "NH4", "ammonia": "NH3",
    "sulfate": "SO4", "sulphate": "SO4", "sulfur": "S", "sulphur": "S", "sulfide": "S",
    "phosphate": "PO4", "phosphorus": "P", "carbonate": "CO3", "hydrogencarbonate": "HCO3",
    "calcium carbonate": "CaCO3", "chloride": "Cl", "bromide": "Br", "iodide": "I",
    "fluoride": "F", "iodate": "IO3", "thiosulfate": "S2O3", "permanganate": "MnO4",
    "chromate": "CrO4", "dichromate": "Cr2O7", "oxalate": "C2O4", "ethanoate": "C2H3O2",
    "acetate": "C2H3O2", "cyanide": "CN", "silicon": "Si", "silica": "SiO2", "boron": "B",
    "lithium": "Li", "sodium": "Na", "potassium": "K", "magnesium": "Mg", "calcium": "Ca",
    "strontium": "Sr", "barium": "Ba", "aluminium": "Al", "chromium": "Cr", "manganese": "Mn",
    "iron": "Fe", "cobalt": "Co", "nickel": "Ni", "copper": "Cu", "zinc": "Zn", "silver": "Ag",
    "cadmium": "Cd", "mercury": "Hg", "lead": "Pb", "tin": "Sn", "arsenic": "As",
}  # fmt: skip
"""What labels call a part in words, and its formula."""

# "NO3-" and "SO42-": a charge and a count cannot be told apart, so the ions are named whole
_IONS = {
    "NO3-": "NO3", "NO2-": "NO2", "SO42-": "SO4", "SO4--": "SO4", "PO43-": "PO4", "CO32-": "CO3",
    "HCO3-": "HCO3", "NH4+": "NH4", "CrO42-": "CrO4", "MnO4-": "MnO4", "IO3-": "IO3",
}  # fmt: skip
_CHARGED_ELEMENT = re.compile(r"([A-Z][a-z]?)[0-9]?[+-]{1,3}")
_ATOMS = re.compile(r"([A-Z][a-z]?)([0-9]*)")
_BRACKET = re.compile(r"[(\[]([^()\[\]]*)[)\]]([0-9]*)")
_AS = re.compile(
    r"(?P<strength>.*\S) \(?(?:counted as|as|of) (?P<part>calcium carbonate|[^\s()]+)\)?$",
    re.IGNORECASE,
)
# "nitrate-N" and "NO3-N" are nitrogen, whatever it stands in
_ION_AND_ELEMENT = re.compile(r"(?P<strength>.*\S) [A-Za-z0-9]+-(?P<part>N|P|S)$")
_LAST_WORD = re.compile(r"(?P<strength>.*\S) (?P<part>\S+)$")
_DOTS = re.compile(r" *[.*·•∙⋅] *")
_OF_WATER = frozenset({"H", "O"})


@dataclass(frozen=True, slots=True)
class Part:
    """What a strength is counted as: its formula, and the g of it in one mole of the substance."""

    formula: str
    grams_per_mole: float


def split(text: str) -> tuple[str, str] | None:
    """A strength and what it is counted as, in words: "5 g/dm3 as N" apart; None without it.

    >>> split("1000 ppm m/v as NO3"), split("10 mg/dm3 nitrate-N")
    (('1000 ppm m/v', 'NO3'), ('10 mg/dm3', 'N'))
    """
    plain = tidy(text)
    last = _LAST_WORD.fullmatch(plain)
    named = last if last and (last["part"].lower() in _NAMES or last["part"] in _IONS) else None
    found = _AS.fullmatch(plain) or _ION_AND_ELEMENT.fullmatch(plain) or named
    return (found["strength"], found["part"]) if found else None


def formula_named(words: str) -> str:
    """The formula that "nitrate", "NO3⁻", "N" or "calcium carbonate" stands for.

    Raises: BadAmount for what is neither a name held nor a formula.

    >>> formula_named("nitrate"), formula_named("SO₄²⁻"), formula_named("Pb2+")
    ('NO3', 'SO4', 'Pb')
    """
    plain = tidy(words)
    found = _NAMES.get(plain.lower()) or _IONS.get(plain)
    charged = _CHARGED_ELEMENT.fullmatch(plain)
    found = found or (charged[1] if charged else plain)
    molar_mass(found)
    return found


def part_of(substance: str, part: str, *, name: str = "") -> Part:
    """The part of that formula in a substance of the formula `substance`.

    A group that is written in it is counted; anything else goes by an element that both
    hold and water does not: of (NH4)2SO4, "N" is two and "SO4" one; of NaCl, "Cl2" is a
    half. `name` is quoted. Raises: BadAmount where they share none, or where two say
    different things.

    >>> round(part_of("KNO3", "N").grams_per_mole, 3)
    14.007
    >>> round(part_of("CaCl2.2H2O", "CaCO3").grams_per_mole, 2)
    100.09
    """
    grams = molar_mass(part)
    pieces, group = _pieces(substance), _opened(part)
    written = sum(times * _groups(piece, group) for times, piece in pieces)
    if written:
        return Part(part, written * grams)
    ratios = _ratios(pieces, _pieces(part))
    # the nitrogen of ammonium nitrate is of two kinds, and "as NH3" means one of them
    mixed = len(_ATOMS.findall(group)) > 1 and all(_written(pieces, ion) for ion in ("NH4", "NO"))
    if len(ratios) != 1 or mixed:
        said = f"{part} may be counted in two ways" if ratios else f"{part} is not in it"
        raise BadAmount(
            f"{name or substance} ({substance}): {said}.",
            "Count it as something it holds, or as the substance itself.",
        )
    return Part(part, ratios.pop() * grams)


def _ratios(pieces: list[tuple[int, str]], part: list[tuple[int, str]]) -> set[float]:
    """How many parts a mole holds, by each element that tells."""
    whole, wanted = _atoms(pieces), _atoms(part)
    # the carbon of a dye says nothing of its carbonate
    silent = _OF_WATER if _written(pieces, "CO3") else _OF_WATER | {"C"}
    telling = [each for each in wanted if len(wanted) == 1 or each not in silent]
    return {whole[each] / wanted[each] for each in telling if each in whole}


def _pieces(formula: str) -> list[tuple[int, str]]:
    """The salt and its water, each with how often it stands there and its brackets opened."""
    molar_mass(formula)  # refuses whatever the reading below would make nonsense of
    found = []
    for piece in _DOTS.split(tidy(formula)):
        number = re.match(r"[0-9]*", piece)
        digits = number[0] if number else ""
        found.append((int(digits or 1), _opened(piece[len(digits) :])))
    return found


def _atoms(pieces: list[tuple[int, str]]) -> dict[str, int]:
    found: dict[str, int] = {}
    for times, piece in pieces:
        for symbol, count in _ATOMS.findall(piece):
            found[symbol] = found.get(symbol, 0) + times * int(count or 1)
    return found


def _groups(piece: str, part: str) -> int:
    # "SO4" does not stand in "SO42", nor "C" in "Cl"
    return len(re.findall(rf"{re.escape(part)}(?![0-9a-z])", piece))


def _written(pieces: list[tuple[int, str]], start: str) -> bool:
    return any(start in piece for _, piece in pieces)


def _opened(piece: str) -> str:
    # the innermost brackets first: "(NH4)2" is NH4 written twice
    while _BRACKET.search(piece):
        piece = _BRACKET.sub(lambda found: found[1] * int(found[2] or 1), piece)
    return piece
