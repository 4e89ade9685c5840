"""Amounts in a column somebody filled by hand: units, halves of bottles, several in a row."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache

from stockroom.bringing.decimals import Decimals, plain_number
from stockroom.bringing.doubts import Doubts, in_one
from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount, Kind, over_full
from stockroom.measure.formats import format_amount
from stockroom.measure.parsing import parse_amount
from stockroom.measure.reading import tidy

EACH, IN_ALL = "each", "in-all"

MOST_ALIKE = 100
"""As many bottles as one row may stand for; more is a slip of a column. Our choice."""

_SEVERAL = re.compile(r"(?P<count>[0-9]{1,3}) ?[x×*] ?(?P<each>.*[0-9].*)", re.IGNORECASE)
_WHOLE = re.compile(r"[0-9]{1,9}")
_PART = re.compile(
    r"(?P<over>[0-9]{1,9}) ?[/\u2044] ?(?P<under>[1-9][0-9]{0,8})"
    r"(?: ?(?:full|of )?\b.*)?|(?P<word>half|full|empty|unopened|new)\b.*",
    re.IGNORECASE,
)
_ABOUT = re.compile(r"(?:about|approx(?:imately)?|ca|c)\b\.? ?|[~≈] ?", re.IGNORECASE)
_OWN_UNIT = re.compile(r"(?<=[0-9 ])[^0-9.,\s/\u2044+-]+[0-9]?$")
_MADE_A_DATE = re.compile(
    r"[0-9]{4}-[0-9]{2}(?:-[0-9]{2})?|[0-9]{1,2}/[0-9]{1,2}/(?:[0-9]{4}|[0-9]{2})"
)
_CONTAINERS = re.compile(
    r"(?:bottles?|btls?|jars?|tubs?|pots?|tins?|packs?|packets?|containers?|winchesters?)\.?",
    re.IGNORECASE,
)
# spellings of a list that the reader of amounts would ask about; capitals count to it
_UNITS = {
    "ml": "mL", "mls": "mL", "cc": "cm3", "ccm": "cm3", "cm^3": "cm3", "dm^3": "dm3",
    "l": "L", "lt": "L", "ltr": "L", "ltrs": "L", "litre": "L", "litres": "L", "liter": "L",
    "liters": "L", "millilitre": "mL", "millilitres": "mL", "g": "g", "gr": "g", "gm": "g",
    "gms": "g", "gram": "g", "grams": "g", "gramme": "g", "grammes": "g", "kg": "kg", "kgs": "kg",
    "kilo": "kg", "kilos": "kg", "mgs": "mg", "cm3": "cm3", "dm3": "dm3", "ea": "items",
    "each": "items", "no": "items", "pcs": "items", "pc": "items", "units": "items",
}  # fmt: skip
UNIT_OPTIONS = {Kind.MASS: ("g", "kg"), Kind.VOLUME: ("cm3", "dm3"), Kind.ITEMS: ("items",)}


@dataclass(frozen=True, slots=True)
class Held:
    """What a row says is there: `left` in each of `count` bottles that hold `size` when full.

    `kind` is known from a unit; None where none was written. `about` is an estimate by eye.
    """

    left: Amount | None = None
    size: Amount | None = None
    count: int = 1
    kind: Kind | None = None
    about: bool = False


def read_held(
    cells: dict[str, str], decimals: Decimals, doubts: Doubts, several_are: str = ""
) -> Held:
    """What a row says is there; a part of a bottle is taken of the size beside it.

    An amount without any unit is left to the caller, who knows the line. `several_are` is
    what was said of an amount beside a count: "each", "in-all", or "" where it must be asked.
    """
    count = _count(cells.get("count", ""), doubts)
    unit = _unit(cells.get("unit", ""))
    size = _amount(cells.get("size", ""), unit, "size", decimals, doubts)
    if _MADE_A_DATE.fullmatch(cells.get("amount", "")):
        doubts.refuse("amount", "a date: did the spreadsheet program make one of 3/4 or of 1-2?")
        return Held(kind=_kind_of(unit) or _kind(size), size=size, count=count)
    about = _ABOUT.match(cells.get("amount", ""))
    written = cells.get("amount", "")[about.end() if about else 0 :]
    several = _SEVERAL.fullmatch(tidy(written))
    if several:
        count, written = int(several["count"]) * count, several["each"]
    elif _CONTAINERS.fullmatch(unit) and _WHOLE.fullmatch(written) and size is not None:
        # "3 bottles" of the size beside it
        return _counted(Held(size, size, int(written) * count, size.kind), doubts)
    if size is not None and (not written or _PART.fullmatch(tidy(f"{written} {unit}".strip()))):
        return _counted(_part_of(written, size, count, doubts), doubts)
    if not written:
        return Held(kind=_kind_of(unit) or _kind(size), size=size, count=count)
    held = _measured(Held(None, size, count, about=bool(about)), cells, written, decimals, doubts)
    if count > 1 and (not several or int(several["count"]) != count):
        held = _shared(held, several_are, doubts)
    return _counted(held, doubts)


def _kind(size: Amount | None) -> Kind | None:
    return size.kind if size is not None else None


def _measured(
    held: Held, cells: dict[str, str], written: str, decimals: Decimals, doubts: Doubts
) -> Held:
    """With the amount in words that are no part of a bottle, its kind known from any unit."""
    size, unit = held.size, _unit(cells.get("unit", ""))
    own = _OWN_UNIT.search(tidy(written))
    lent = None if own or unit else _lent(written, cells.get("size", ""), size, decimals)
    if lent is not None:
        doubts.note("unit", f"taken as {format_amount(lent)}, by the size beside it")
    left = lent if lent is not None else _amount(written, unit, "amount", decimals, doubts)
    # a number that must be asked about still has its unit, which tells a solid from a solution
    kind = _kind(left) or _kind_of(_unit(own[0]) if own else unit) or _kind(size)
    if left is not None and size is not None and left.kind is not size.kind:
        doubts.refuse("size", f"a {size.kind}, and what is left is a {left.kind}")
        size = None
    return replace(held, left=left, size=size, kind=kind)


def _lent(
    written: str, size_written: str, size: Amount | None, decimals: Decimals
) -> Amount | None:
    """A bare number in the unit of the size beside it, where the bottle holds as much."""
    if size is None:
        return None
    own = _OWN_UNIT.search(tidy(size_written))
    # 1.5 beside "2.5 L" is in litres, and 560 beside "1 kg" can only be grams
    for unit in (_unit(own[0]) if own else size.unit, size.unit):
        # tried on the side: what is doubtful of the number is told where it is read for good
        left = _amount(written, unit, "amount", decimals, Doubts(0, {}))
        if left is not None and not over_full(size.micro, left.micro):
            return left
    return None


def _shared(held: Held, several_are: str, doubts: Doubts) -> Held:
    """What each of several bottles holds, where an amount and a count stand side by side."""
    if held.left is None or held.left == held.size or not 1 < held.count <= MOST_ALIKE:
        return held
    if not several_are:
        amount, count = format_amount(held.left), held.count
        text = f"{count} bottles: {amount} in each, or {amount} in all?"
        doubts.ask("count", text, key="several", options=(EACH, IN_ALL))
    if several_are != IN_ALL:
        return held
    each = Amount(held.left.kind, round(held.left.micro / held.count))
    return replace(held, left=each, about=True)


def _part_of(written: str, size: Amount, count: int, doubts: Doubts) -> Held:
    found = _PART.fullmatch(tidy(written)) if written else None
    part = Fraction(1)
    if found and found["over"]:
        part = Fraction(int(found["over"]), int(found["under"]))
    elif found and found["word"].lower() in ("half", "empty"):
        part = Fraction(1, 2) if found["word"].lower() == "half" else Fraction(0)
    if part > 1:
        text = "more than a whole bottle: is it several, or did the spreadsheet make it of a date?"
        doubts.refuse("amount", text)
        return Held(None, size, count, size.kind)
    left = Amount(size.kind, round(size.micro * part))
    return Held(left, size, count, size.kind, about=part != 1)


def _counted(held: Held, doubts: Doubts) -> Held:
    if held.left is not None and held.left.micro == 0:
        doubts.refuse("amount", "nothing is in it")
    if not 1 <= held.count <= MOST_ALIKE:
        doubts.refuse("count", f"{held.count} bottles in one row? 1 to {MOST_ALIKE}")
    full = held.size.micro if held.size is not None else 0
    if held.left is not None and over_full(int(full), held.left.micro):
        doubts.refuse("amount", "more than the bottle holds")
    return held


def _count(text: str, doubts: Doubts) -> int:
    plain = _CONTAINERS.sub("", tidy(text)).strip()
    if not plain:
        return 1
    if _WHOLE.fullmatch(plain.removesuffix(".0")):
        return int(plain.removesuffix(".0"))
    doubts.refuse("count", "not a whole number of bottles")
    return 1


def _unit(text: str) -> str:
    plain = tidy(text).rstrip(".")
    return _UNITS.get(plain.casefold(), plain) if plain not in ("Mg", "M") else plain


@lru_cache(maxsize=256)
def _kind_of(unit: str) -> Kind | None:
    try:
        return parse_amount(f"1 {unit}").kind if unit else None
    except BadAmount:
        return None


def _amount(
    written: str, unit: str, field: str, decimals: Decimals, doubts: Doubts
) -> Amount | None:
    """The amount in a cell, the unit beside it lent where it has none of its own."""
    if not written:
        return None
    plain = plain_number(tidy(written), field, decimals, doubts)
    if plain is None:
        return None
    own = re.search(r"[^0-9.,\s+-].*$", plain)
    try:
        if own and not re.match(r"[/\u2044]|[eE][-+0-9]", own[0]):
            return _parsed(f"{plain[: own.start()].strip()} {_unit(own[0])}")
        if not unit:
            # asked about where the line is known: it says which units fit
            _parsed(f"{plain} g")
            return None
        return _parsed(f"{plain} {unit}")
    except BadAmount as error:
        doubts.refuse(field, _said(error))
        return None


@lru_cache(maxsize=8192)
def _parsed(text: str) -> Amount:
    return parse_amount(text)


def _said(error: BadAmount) -> str:
    # the value is shown beside it already
    _, _, reason = error.message.rpartition('": ')
    return in_one(reason, error.hint)
