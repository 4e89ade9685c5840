"""Typed text to an amount or a strength; everything doubtful is refused with a question."""

from __future__ import annotations

import re
from dataclasses import replace
from decimal import ROUND_HALF_EVEN, Decimal

from stockroom.errors import BadAmount
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.reading import NUMBER, quote, read_number, refuse_bare_point, tidy
from stockroom.measure.strength_words import beside_unit, fraction_of, saturated_of, share_of
from stockroom.measure.strengths import Strength, StrengthUnit

LARGEST = 1_000_000
"""1000 kg or 1000 dm³: a thousandfold slip is likelier than a teaching store holding more."""

_AMOUNT = re.compile(rf"(?P<number>{NUMBER}) ?(?P<unit>.*)")
_RANGE = re.compile(
    r"(?P<low>[0-9][0-9.,]*) ?(?:-|–|to) ?(?P<high>[0-9][0-9.,]*) ?(?P<unit>[^0-9., ].*)"
)
_FRACTION_OF = re.compile(
    r"(?:(?P<whole>[0-9]+) )?(?P<over>[0-9]+) ?[/\u2044] ?(?P<under>[1-9][0-9]*) ?(?P<unit>\D.*)"
)

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
    # eight equivalents per mol is the most any reaction here has
    StrengthUnit.NORMAL: 800.0,
    StrengthUnit.MOLAL: 1000.0,
    StrengthUnit.CHLORINE: 100.0,
    StrengthUnit.CHLORINE_WW: 100.0,
}
_ABOVE = {StrengthUnit.WV: "Check the unit; if it is meant, write it in g/dm3."}
_COLDEST, _HOTTEST = -50.0, 200.0
# no pressure or temperature of a room or a pharmacopoeia gives less or more
_LEAST_GAS, _MOST_GAS = 22.0, 25.0


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
    refuse_bare_point(plain, shown)
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
    raise _a_fraction(found, shown)


def _a_fraction(found: re.Match[str], shown: str) -> BadAmount:
    value = int(found["whole"] or 0) + Decimal(found["over"]) / Decimal(found["under"])
    return BadAmount(
        f"{shown}: a fraction.", f'Write it with a point, as "{float(value):.4g} {found["unit"]}".'
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

    "1 in 10", "1:10" and "1+9" are one part in ten parts of the whole, of what stands
    after "of". "saturated" carries the value 0, which means nothing by itself. A
    normality may stand without its reaction: no sum takes it so. Text kept as written.
    Raises: BadAmount for a bare "%" or "ppm" (which kind?), "1:1" (two readings), "m",
    less than nothing, and stronger than any solution.
    """
    plain = tidy(text)
    shown = f"{where} {quote(text)}"
    found = _worded(plain, text.strip(), where, shown)
    if found is not None:
        return _checked(found, shown)
    _refuse_two_figures(plain, shown)
    refuse_bare_point(plain, shown)
    match = _AMOUNT.fullmatch(plain)
    if match is None:
        raise BadAmount(f"{shown}: how strong?", _how_to_write(plain))
    number = read_number(match["number"], where=where, whole=text)
    return _checked(beside_unit(number, match["unit"], text.strip(), shown), shown)


def _refuse_two_figures(plain: str, shown: str) -> None:
    """Pass when one figure is written. Raises: BadAmount for a fraction, a range and a ±."""
    fraction = _FRACTION_OF.fullmatch(plain)
    if fraction:
        raise _a_fraction(fraction, shown)
    if _RANGE.fullmatch(plain):
        raise BadAmount(f"{shown}: a range, and one figure is wanted.", "Write the one meant.")
    if "±" in plain:
        raise BadAmount(f"{shown}: one figure is wanted.", "Leave out the ± and what follows it.")


def _how_to_write(plain: str) -> str:
    warm = re.fullmatch(r"(sat[a-z.]*.*?) ?(-?[0-9.]+)", plain, re.IGNORECASE)
    if warm:
        return f'Write "{warm[1]} {warm[2]} °C".'
    return 'Write a number and a unit, as "0.1 mol/dm3".'


def _worded(plain: str, written: str, where: str, shown: str) -> Strength | None:
    share = share_of(plain, written, where, shown)
    if share is None:
        return saturated_of(plain, written) or fraction_of(plain, written, where)
    part, stock = share
    # "1 in 10 of 36 % w/w" holds a strength of its own, which is read as any other
    return replace(part, part_of=parse_strength(stock, where=where)) if stock else part


def _checked(strength: Strength, shown: str) -> Strength:
    unit = strength.unit
    most = _STRONGEST.get(unit)
    if most is not None and strength.value > most:
        raise BadAmount(
            f"{shown}: {'more' if unit in _ABOVE else 'nothing is stronger'} than {most:g} {unit}.",
            _ABOVE.get(unit, "Check the figure and its unit."),
        )
    if strength.celsius is not None and not _COLDEST <= strength.celsius <= _HOTTEST:
        raise BadAmount(f"{shown}: no solution in water at that temperature.", "Give it in °C.")
    gas_volume(strength.gas_volume, shown)
    return strength


def gas_volume(dm3_per_mol: float | None, shown: str) -> float | None:
    """The molar volume that "vol" is counted at, in dm³/mol: 22 to 25, or None where not said.

    Raises: BadAmount outside them, quoting `shown`.
    """
    if dm3_per_mol is not None and not _LEAST_GAS <= dm3_per_mol <= _MOST_GAS:
        raise BadAmount(
            f"{shown}: no gas takes up {dm3_per_mol:g} dm³ a mole on a bench.",
            "Give 22.414 (0 °C, 1 atm), 22.711 (0 °C, 1 bar) or 24 dm3/mol (room temperature).",
        )
    return dm3_per_mol


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
