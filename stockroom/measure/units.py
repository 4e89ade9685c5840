"""Units of mass and volume, settled here before pint can misread them.

The only file that imports pint. Its registry is built once, on first use.
"""

from __future__ import annotations

import re
from decimal import Decimal
from functools import lru_cache
from typing import TYPE_CHECKING, Any

from stockroom.errors import BadAmount
from stockroom.measure.amounts import PER_UNIT, Kind

if TYPE_CHECKING:
    import pint

# Building the registry costs a third of a second, and these are nearly all a bench
# ever writes. A test holds the table against pint.
EVERYDAY: dict[str, tuple[Kind, Decimal]] = {
    "g": (Kind.MASS, Decimal(1_000_000)),
    "mg": (Kind.MASS, Decimal(1_000)),
    "kg": (Kind.MASS, Decimal(1_000_000_000)),
    "cm3": (Kind.VOLUME, Decimal(1_000)),
    "mL": (Kind.VOLUME, Decimal(1_000)),
    "ml": (Kind.VOLUME, Decimal(1_000)),
    "dm3": (Kind.VOLUME, Decimal(1_000_000)),
    "L": (Kind.VOLUME, Decimal(1_000_000)),
    "l": (Kind.VOLUME, Decimal(1_000_000)),
}

_ITEMS = {"item", "items", "piece", "pieces"}

# Bench spellings pint has no name for; it knows "gram", "litre" and their prefixes.
_SPELLINGS = {"gm": "g", "gms": "g", "Kg": "kg", "KG": "kg", "kgs": "kg", "mls": "mL", "ltr": "L"}

_ONE_UNIT = re.compile(r"(?P<name>[A-Za-z\u03bc\u00b5]{1,20})(?:\s*(?:\^|\*\*)?(?P<power>3))?")

# pint also holds pounds, US pints and grains: "pint" has two sizes, so only metric passes.
_METRIC = re.compile(r"(centi|deci|milli|micro|nano|kilo)?(gram|liter|meter \*\* 3)|metric_ton")
_PART_FULL = re.compile(r"^[/\u2044]|bottle|full|half|empty")
_STRENGTH = re.compile(r"%|/ ?[A-Za-z]|^vols?$|-[13]$")
_CUBIC = re.compile(r"cubic_centimeter")

# What a unit may turn out to be instead, in words a chemist uses.
_OTHERWISE = {
    "[length]": "a length (or a molality), not an amount",
    "[temperature]": "a temperature, not an amount",
    "[time]": "a time, not an amount",
    "[substance]": "an amount of substance: weigh or measure it in g or cm³",
    "[substance] / [length] ** 3": "a strength, not an amount",
    "[mass] * [length] / [time] ** 2": "a force, or a strength given as normality, not an amount",
    "[length] ** 2": "an area, not an amount",
    "dimensionless": "a number, not an amount",
}


@lru_cache(maxsize=256)
def factor(unit_text: str) -> tuple[Kind, Decimal]:
    """The kind of a unit, and the micrograms, microlitres or items in one of it.

    `unit_text` is one tidied unit, such as "cm3", "µL" or "pieces"; case counts.
    Raises: BadAmount when it is no unit of mass, volume or items, with the reason.

    >>> factor("kg")
    (<Kind.MASS: 'mass'>, Decimal('1000000000'))
    """
    unit = _SPELLINGS.get(unit_text, unit_text)
    if unit in EVERYDAY:
        return EVERYDAY[unit]
    if unit.lower() in _ITEMS:
        return Kind.ITEMS, Decimal(1)
    _refuse_what_pint_misreads(unit)
    return _from_pint(unit_text, unit)


def _refuse_what_pint_misreads(unit: str) -> None:
    if _PART_FULL.search(unit):
        raise BadAmount(f'"{unit}" of how big a bottle?', "Say what is left, in g or cm³.")
    if _STRENGTH.search(unit):
        raise BadAmount(f'"{unit}" is a strength, not an amount.', "Give g, cm³ or items.")
    if unit.lower() in {"°c", "degc", "c"}:
        raise BadAmount(f'"{unit}" is a temperature, not an amount.', "Give g, cm³ or items.")


def _from_pint(unit_text: str, unit: str) -> tuple[Kind, Decimal]:
    # one bare name and perhaps a cube: pint evaluates sums, which no unit here needs
    match = _ONE_UNIT.fullmatch(unit)
    name = match["name"] + ("**3" if match["power"] else "") if match else ""
    parsed = _parse(name) if name else None
    if parsed is None:
        raise BadAmount(f'I do not know the unit "{unit_text}".', _nearest(unit))
    if _METRIC.fullmatch(str(parsed)) or _CUBIC.fullmatch(str(parsed)):
        mass = "[mass]" in parsed.dimensionality
        micro = _registry().Quantity(Decimal(1), parsed).to("g" if mass else "cm**3").magnitude
        kind = Kind.MASS if mass else Kind.VOLUME
        return kind, Decimal(micro) * PER_UNIT[kind]
    raise BadAmount(f'"{unit_text}" is {_what_else(parsed)}.', _nearest(unit))


def _what_else(parsed: pint.Unit) -> str:
    dimensions = str(parsed.dimensionality)
    if dimensions in {"[mass]", "[length] ** 3"}:
        name = str(parsed).replace("liter", "litre")
        return f"the {name}, which is no unit of this bench"
    return _OTHERWISE.get(dimensions, "neither a mass, a volume nor a number of items")


def _nearest(unit: str) -> str:
    for known in ("mg", "g", "kg", "mL", "L", "cm3", "dm3"):
        if unit.lower() == known.lower():
            return f"Do you mean {known}? Capitals count in units."
    return "Use g, mg, kg, cm³, dm³, mL, L or items."


def _parse(name: str) -> pint.Unit | None:
    from pint.errors import UndefinedUnitError

    try:
        return _registry().parse_units(name)
    except (UndefinedUnitError, ValueError):
        return None


@lru_cache(maxsize=1)
def _registry() -> pint.UnitRegistry[Any]:
    # pint costs 0.3 s to import and set up, so a page that reads no odd unit never pays
    import pint

    # Decimal throughout: a kilogram must come to 1 000 000 000 µg and not one less
    return pint.UnitRegistry(non_int_type=Decimal)
