"""Typed text to an amount or a strength; everything doubtful is refused with a question."""

from __future__ import annotations

import re
from decimal import ROUND_HALF_EVEN, Decimal

from stockroom.errors import BadAmount
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.reading import NUMBER, quote, read_number, tidy
from stockroom.measure.strengths import Strength, StrengthUnit, unit_of

LARGEST = 1_000_000
"""1000 kg or 1000 dm³: a thousandfold slip is likelier than a teaching store holding more."""

_AMOUNT = re.compile(rf"(?P<number>{NUMBER}) ?(?P<unit>.*)")
_RANGE = re.compile(
    r"(?P<low>[0-9][0-9.,]*) ?(?:-|–|to) ?(?P<high>[0-9][0-9.,]*) ?(?P<unit>[^0-9., ].*)"
)
_FRACTION = re.compile(r"(?P<unit>[MN]) ?/ ?(?P<parts>[0-9][0-9 .,]*)")
_PARTS = re.compile(r"(?P<one>[0-9.]+) (?:parts? )?in (?P<total>[0-9][0-9 .,]*)", re.IGNORECASE)
_FRACTION_OF = re.compile(
    r"(?:(?P<whole>[0-9]+) )?(?P<over>[0-9]+) ?[/\u2044] ?(?P<under>[1-9][0-9]*) ?(?P<unit>\D.*)"
)
_RATIO = re.compile(r"[0-9.]+ ?: ?[0-9.]+")
_SATURATED = {"saturated", "sat", "sat.", "satd", "saturated solution"}

# Beyond these no solution goes, so a unit has slipped. % w/v can pass 100 (sulfuric
# acid does), but on a bench it nearly always means that the wrong per cent was typed.
_STRONGEST = {
    StrengthUnit.MOLAR: 100.0,
    StrengthUnit.GRAMS: 4000.0,
    StrengthUnit.WV: 100.0,
    StrengthUnit.WW: 100.0,
    StrengthUnit.VV: 100.0,
    StrengthUnit.VOL: 500.0,
    StrengthUnit.PPM_MV: 1e6,
    StrengthUnit.PPM_MM: 1e6,
}


def parse_amount(text: str, *, expect: Kind | None = None, where: str = "amount") -> Amount:
    """The amount somebody typed: "500 cm³", "0.5 L", "620mg", "1 350 cm3", "3 items".

    Zero is an amount. `expect` refuses the other kinds; `where` names the box or
    column in messages. Rounds half-even, once, to whole micro-units.
    Raises: BadAmount for a bare number, an unknown unit, a number with two
    readings ("1,000 g"), less than nothing, too little to hold, or over 1000 kg or dm³.
    """
    plain = tidy(text)
    match = _AMOUNT.fullmatch(plain)
    shown = f"{where} {quote(text)}"
    _refuse_fraction(plain, shown)
    if match is None:
        raise BadAmount(f"{shown}: how much?", 'Write a number and a unit, as "250 cm3".')
    number = read_number(match["number"], where=where, whole=text)
    if not match["unit"]:
        raise BadAmount(f"{shown}: {plain} of what?", f'Add the unit, as "{plain} cm3".')
    kind, micro = _factor(match["unit"], shown)
    if expect is not None and kind is not expect:
        raise BadAmount(f"{shown} is {_named(kind)}; {_named(expect)} is wanted.", _ask(expect))
    return Amount(kind, _whole(number * micro, kind, shown))


def _refuse_fraction(plain: str, shown: str) -> None:
    found = _FRACTION_OF.fullmatch(plain)
    if found is None:
        return
    unit = found["unit"]
    try:
        _factor(unit, shown)
    except BadAmount:
        # "½ full" says nothing until somebody says full of what
        raise BadAmount(
            f"{shown}: of how big a bottle?", "Say what is left, in g or cm³."
        ) from None
    value = int(found["whole"] or 0) + Decimal(found["over"]) / Decimal(found["under"])
    raise BadAmount(
        f"{shown}: a fraction.", f'Write it with a point, as "{float(value):.4g} {unit}".'
    )


def _factor(unit: str, shown: str) -> tuple[Kind, Decimal]:
    # imported here: a page that parses no amount never loads the unit tables
    from stockroom.measure.units import factor

    try:
        return factor(unit)
    except BadAmount as error:
        raise BadAmount(f"{shown}: {error.message}", error.hint) from None


def _whole(micro: Decimal, kind: Kind, shown: str) -> int:
    if micro > LARGEST * PER_UNIT[kind]:
        raise BadAmount(f"{shown}: more than 1000 kg or 1000 dm³.", "Check the unit.")
    whole = int(micro.to_integral_value(ROUND_HALF_EVEN))
    if kind is Kind.ITEMS and micro != whole:
        raise BadAmount(f"{shown}: items do not come in parts.", "Give a whole number.")
    if micro and not whole:
        raise BadAmount(f"{shown}: less than a microgram or microlitre.", "Check the unit.")
    return whole


def _named(kind: Kind) -> str:
    return "a number of items" if kind is Kind.ITEMS else f"a {kind}"


def _ask(kind: Kind) -> str:
    units = {Kind.MASS: "g, mg or kg", Kind.VOLUME: "cm³, mL, dm³ or L", Kind.ITEMS: "items"}
    return f"Give it in {units[kind]}."


def parse_strength(text: str, *, where: str = "strength") -> Strength:
    """The strength somebody wrote: "0.15 M", "20 vol", "37 % w/w", "M/50", "1 in 10".

    "1 in 10" is one part in ten parts of the whole. "saturated" carries the value
    0, which means nothing by itself. The text is kept as written.
    Raises: BadAmount for a bare "%" or "ppm" (which kind?), "1:10" (two readings),
    normality, molality, less than nothing, and stronger than any solution.
    """
    plain = tidy(text)
    shown = f"{where} {quote(text)}"
    found = _worded(plain, text.strip(), where, shown)
    if found is not None:
        return found
    match = _AMOUNT.fullmatch(plain)
    if match is None:
        raise BadAmount(f"{shown}: how strong?", 'Write a number and a unit, as "0.1 mol/dm3".')
    number = read_number(match["number"], where=where, whole=text)
    unit, scale = unit_of(match["unit"], number=plain, shown=shown)
    return _checked(Strength(float(number * scale), unit, text.strip()), shown)


def _worded(plain: str, written: str, where: str, shown: str) -> Strength | None:
    if plain.lower() in _SATURATED:
        return Strength(0.0, StrengthUnit.SATURATED, written)
    if _RATIO.fullmatch(plain):
        raise BadAmount(
            f"{shown}: 1 in 10 or 1 to 10?", 'Write "1 in 10" for one part in ten of the whole.'
        )
    fraction = _FRACTION.fullmatch(plain)
    if fraction:
        unit, _ = unit_of(fraction["unit"], number=plain, shown=shown)
        parts = _positive(fraction["parts"], where, written)
        return _checked(Strength(float(1 / parts), unit, written), shown)
    share = _PARTS.fullmatch(plain)
    return _share(share, written, where, shown) if share else None


def _share(share: re.Match[str], written: str, where: str, shown: str) -> Strength:
    one, total = (_positive(share[part], where, written) for part in ("one", "total"))
    if total < one:
        raise BadAmount(f"{shown}: more parts than the whole.", 'Write it as "1 in 10".')
    return Strength(float(total / one), StrengthUnit.PARTS, written)


def _positive(number: str, where: str, written: str) -> Decimal:
    value = read_number(number, where=where, whole=written)
    if not value:
        raise BadAmount(f"{where} {quote(written)}: nothing divides by 0.", 'Write "M/50".')
    return value


def _checked(strength: Strength, shown: str) -> Strength:
    most = _STRONGEST.get(strength.unit)
    if most is not None and strength.value > most:
        raise BadAmount(
            f"{shown}: nothing is stronger than {most:g} {strength.unit}.",
            "Check the unit; above 100 % w/v, write it in g/dm3.",
        )
    return strength


def parse_strength_range(text: str, *, where: str = "strength") -> tuple[Strength, Strength]:
    """The weakest and strongest of a range such as "90-100 vol"; one value gives itself twice.

    Raises: BadAmount as `parse_strength`, and when the range runs downwards.
    """
    match = _RANGE.fullmatch(tidy(text))
    if match is None:
        single = parse_strength(text, where=where)
        return single, single
    low, high = (
        parse_strength(f"{match[end]} {match['unit']}", where=where) for end in ("low", "high")
    )
    if high.value < low.value:
        raise BadAmount(
            f"{where} {quote(text)}: the range runs downwards.",
            f'Write "{match["high"]}-{match["low"]} {match["unit"]}".',
        )
    return low, high
