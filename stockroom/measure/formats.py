"""Amounts, numbers and strengths as a person reads them: never an exponent, never a lost digit."""

from __future__ import annotations

import math
import re
from decimal import ROUND_HALF_EVEN, Decimal

from stockroom.errors import BadAmount
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.strengths import StrengthUnit

# four figures: one more than a burette or a top-pan balance can give
_FIGURES = 4
_PLACES = 3


def format_amount(amount: Amount) -> str:
    """An amount with its unit: "1 350 cm³", "49.5 cm³", "0.176 g", "1 item".

    From 1 up: three decimals (a milligram, a microlitre), zeros trimmed, thousands
    set apart. Below 1: four significant figures. Reading the text back and writing
    it again gives the same text; for the result of a sum, `format_number` is shorter.
    """
    exact = Decimal(amount.micro) / PER_UNIT[amount.kind]
    exact = _to_places(exact, _PLACES) if abs(exact) >= 1 else _to_figures(exact, _FIGURES)
    unit = "item" if amount.kind is Kind.ITEMS and exact == 1 else amount.unit
    return f"{_plain(exact)} {unit_mark(unit)}"


def format_about(amount: Amount) -> str:
    """An amount judged by eye: "about 167 cm³", no more than three figures after "about"."""
    # whole things are counted even by eye
    unit = "item" if amount.kind is Kind.ITEMS and amount.micro == 1 else amount.unit
    return f"about {format_number(amount.number, _FIGURES - 1)} {unit_mark(unit)}"


def format_number(number: float, figures: int = _FIGURES) -> str:
    """A number to so many significant figures, keeping every digit before the point.

    Zeros after the point are trimmed, thousands set apart, exponents never used.
    Raises: BadAmount when it is not finite.

    >>> format_number(13503.7), format_number(0.012345678)
    ('13 504', '0.01235')
    """
    if not math.isfinite(number):
        raise BadAmount(f"{number} cannot be written as a number.", "Check the figures it is from.")
    return _plain(_to_figures(Decimal(repr(float(number))), figures))


def format_strength(value: float, unit: str) -> str:
    """A strength to four figures with its unit: "0.0987 mol/dm³", "20 vol", "1 in 10".

    `unit` is a `StrengthUnit` or its text; "saturated" is written without the value.
    """
    if unit == StrengthUnit.SATURATED:
        return str(unit)
    if unit == StrengthUnit.PARTS:
        return f"{unit} {format_number(value)}"
    return f"{format_number(value)} {unit_mark(unit)}"


def figures_like(number: str, like: str) -> str:
    """A number as written, with zeros at its end to as many figures as `like` begins with.

    >>> figures_like("0.046", "0.0500 mol/dm3"), figures_like("19", "20 vol")
    ('0.0460', '19')
    """
    plain = _NUMBER.match(like)
    # only behind a point: a zero before it would be another number
    if plain is None or "." not in plain[0] or not _NUMBER.fullmatch(number):
        return number
    lacking = _significant(plain[0]) - _significant(number)
    if lacking <= 0:
        return number
    return f"{number}{'' if '.' in number else '.'}{'0' * lacking}"


_NUMBER = re.compile(r"\d[\d ]*(?:\.\d+)?")


def _significant(number: str) -> int:
    return len(number.replace(".", "").replace(" ", "").lstrip("0"))


def unit_mark(unit: str) -> str:
    """A unit as printed: "cm3" becomes "cm³"; `mol/dm3` becomes `mol/dm³`."""
    return str(unit).replace("m3", "m³")


def _to_figures(number: Decimal, figures: int) -> Decimal:
    # adjusted() is the power of ten of the first digit; whole numbers keep all theirs
    return _to_places(number, max(figures - 1 - number.adjusted(), 0)) if number else number


def _to_places(number: Decimal, places: int) -> Decimal:
    # rounding a long whole number to 0 places would overflow the 28 digits decimals work in
    return round(number, places) if places else number.to_integral_value(ROUND_HALF_EVEN)


def _plain(number: Decimal) -> str:
    text = f"{number:f}"
    whole, _, rest = text.partition(".")
    sign, digits = ("-", whole[1:]) if whole.startswith("-") else ("", whole)
    # a plain space, as the parser reads it back and every terminal shows it
    grouped = f"{int(digits):,}".replace(",", " ")
    rest = rest.rstrip("0")
    written = f"{grouped}.{rest}" if rest else grouped
    return written if written == "0" else sign + written
