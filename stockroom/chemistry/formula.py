"""Formulas: their molar mass, and the check digit of a CAS registry number."""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache

from stockroom.errors import BadAmount
from stockroom.measure.reading import quote

# the hydrate's dot, as labels, keyboards and copied pages have it
_DOTS = re.compile(r" *[.*·•∙⋅] *")
# half molecules of water: NFKC takes "½" apart into 1, a fraction slash and 2
_HALVES = re.compile(
    r" *[.*·•∙⋅] *(?:(?P<whole>[0-9]{1,2})[.,]5|(?P<before>[1-9]?)1[/⁄]2) *H2O *$"  # noqa: RUF001
)
_PART = re.compile(r"(?P<times>[1-9][0-9]{0,2})? ?(?P<units>[^0-9].*)")
_SPELT = re.compile(r"(?:[A-Z][a-z]?(?:[1-9][0-9]{0,3})?|[(\[]|[)\]](?:[1-9][0-9]{0,3})?)*")
_PAIR = re.compile(r"\([^()\[\]]*\)|\[[^()\[\]]*\]")
_SYMBOL = re.compile(r"[A-Z][a-z]?")
_LONGEST = 200
_CAS = re.compile(r"[1-9][0-9]{1,6}-[0-9]{2}-[0-9]")

# Isotopes have no place on a bottle here, and "D" is far likelier a slip than deuterium.
_NOT_ELEMENTS = {"D", "T"}


# a plan asks for the same few dozen formulas thousands of times
@lru_cache(maxsize=1024)
def molar_mass(formula: str) -> float:
    """The molar mass of a formula in g/mol, at the usual isotope mixture.

    Hydrates may be written CuSO4·5H2O, CuSO4*5H2O or CuSO4.5H2O: a number after
    the dot multiplies what follows. Subscripts are read as digits. Of water alone there may
    be a half more: CaSO4·½H2O, CaSO4.0.5H2O, CaSO4.1/2H2O.
    Raises: BadAmount, quoting it, for anything but element symbols, counts and
    brackets: names, charges, isotopes, "EtOH", and a number in front ("2H2O").
    Source: NIST isotopic masses and abundances, through molmass.

    >>> round(molar_mass("CuSO4·5H2O"), 2)
    249.68
    """
    if len(formula) > _LONGEST:
        raise BadAmount(f"Formula {quote(formula)}: too long.", _HOW_TO_WRITE)
    rest, waters = _halves_off(unicodedata.normalize("NFKC", formula))
    parts = _DOTS.sub(".", rest).strip().split(".")
    water = waters * _mass("H2O", formula) if waters else 0.0
    return water + sum(_mass_of_part(part, n, formula) for n, part in enumerate(parts))


def with_halves(formula: str) -> str:
    """The formula with a half molecule of water written one way: CaSO4.1/2H2O as CaSO4.0.5H2O.

    Every other formula is left as it is.

    >>> with_halves("CaSO4·½H2O")
    'CaSO4.0.5H2O'
    """
    rest, waters = _halves_off(unicodedata.normalize("NFKC", formula))
    return f"{rest}.{waters:g}H2O" if waters else formula


def _halves_off(plain: str) -> tuple[str, float]:
    """What stands before so many and a half of water, and how many; 0 where there is no half."""
    found = _HALVES.search(plain)
    if found is None or not found.start():
        return plain, 0.0
    return plain[: found.start()], int(found["whole"] or found["before"] or 0) + 0.5


def _mass_of_part(part: str, place: int, formula: str) -> float:
    match = _PART.fullmatch(part)
    if match is None:
        raise BadAmount(f'Formula "{formula}": {_what_is_missing(part)}.', _HOW_TO_WRITE)
    if match["times"] and not place:
        # molmass would read "2H2O" as heavy water
        raise BadAmount(f'Formula "{formula}" begins with a number.', _number_last(formula))
    if match["units"] == "H20":
        # twenty hydrogens and nothing else: on a label this is always water
        raise BadAmount(
            f'Formula "{formula}": H20 with a zero? Is the letter O meant?',
            "Write water as H2O.",
        )
    _check_spelling(match["units"], formula)
    return int(match["times"] or 1) * _mass(match["units"], formula)


_HOW_TO_WRITE = "Write it as on the label, such as CuSO4.5H2O or CaSO4.0.5H2O."


def _number_last(formula: str) -> str:
    first, *others = (part for part in _DOTS.sub(".", formula.strip()).split("."))
    if not others or any(part.endswith("H2O") for part in others):
        # twice a hemihydrate would weigh twice as much in a mole
        return "A number comes only after a dot; write half a water as CaSO4.0.5H2O."
    return f"A number comes only after a dot: write {'.'.join((*others, first))}."


def _what_is_missing(part: str) -> str:
    return f'"{part}" has no element in it' if part else "nothing there, or nothing beside a dot"


def _check_spelling(units: str, formula: str) -> None:
    """Refuse what molmass would take for a group, an isotope, a charge or a peptide."""
    match = _SPELT.match(units)
    end = match.end() if match else 0
    if end < len(units):
        raise BadAmount(f'Formula "{formula}": I cannot read "{units[end]}".', _HOW_TO_WRITE)
    for symbol in _SYMBOL.findall(units):
        if symbol in _NOT_ELEMENTS or symbol not in _element_symbols():
            raise BadAmount(f'Formula "{formula}": "{symbol}" is no element.', _HOW_TO_WRITE)
    _check_brackets(units, formula)


def _check_brackets(units: str, formula: str) -> None:
    # molmass lets "[Fe(CN]6)" through; taking pairs out from the inside finds the crossing
    left, before = units, ""
    while left != before:
        left, before = _PAIR.sub("", left), left
    if re.search(r"[()\[\]]", left) or "()" in units or "[]" in units:
        raise BadAmount(f'Formula "{formula}": the brackets do not pair.', _HOW_TO_WRITE)


@lru_cache(maxsize=1)
def _element_symbols() -> frozenset[str]:
    from molmass import ELEMENTS

    return frozenset(element.symbol for element in ELEMENTS)


def _mass(units: str, formula: str) -> float:
    # loaded here: no page that only reads the store works out a formula
    from molmass import Formula, FormulaError

    try:
        # all its clever readings off: groups, peptides, fractions and sums in a formula
        found = Formula(
            units, parse_groups=False, parse_oligos=False, parse_fractions=False,
            parse_arithmetic=False, allow_empty=False,
        )  # fmt: skip
        return float(found.mass)
    except FormulaError as error:
        first_line = str(error).splitlines()[0]
        raise BadAmount(f'Formula "{formula}": {first_line}.', _HOW_TO_WRITE) from None


def check_cas(number: str) -> None:
    """Pass silently when a CAS registry number has the right shape and check digit.

    Two to seven digits, two, one; no leading zero. The last digit is the sum of the
    others, each times its place counted from the right, modulo 10.
    Raises: BadAmount quoting the number.
    Source: CAS, "Check digit verification".

    >>> check_cas("107-07-3")
    """
    if _CAS.fullmatch(number) is None:
        raise BadAmount(
            f'"{number}" is not a CAS registry number.', "It looks like 7722-84-1: three blocks."
        )
    digits = number.replace("-", "")
    body, check = digits[:-1], int(digits[-1])
    total = sum(place * int(digit) for place, digit in enumerate(reversed(body), start=1))
    if total % 10 != check:
        raise BadAmount(
            f'CAS number "{number}": the last digit should be {total % 10}.',
            "Compare it with the label.",
        )
