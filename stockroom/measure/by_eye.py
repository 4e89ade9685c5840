"""What somebody judged by eye: "about a third left", "half full", "about 100 cm3"."""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction

from stockroom.errors import BadAmount
from stockroom.measure.amounts import Amount
from stockroom.measure.parsing import parse_amount
from stockroom.measure.reading import quote, tidy

NEARLY_EMPTY = Fraction(1, 20)
"""What "nearly empty" counts as: a twentieth of the bottle's size. Our choice."""

_PARTS = {"half": 2, "third": 3, "quarter": 4, "fifth": 5, "tenth": 10}
_MANY = {"a": 1, "an": 1, "one": 1, "two": 2, "three": 3, "four": 4, "nine": 9}
_PLAIN = {
    "empty": Fraction(0),
    "nothing left": Fraction(0),
    "nearly empty": NEARLY_EMPTY,
    "almost empty": NEARLY_EMPTY,
}
_ABOUT = re.compile(r"(?:about|roughly|nearly|almost|some|~) ?(?P<rest>.+)")
_LEFT = re.compile(r"(?P<part>.+?)(?: of it)?(?: is)?(?: left| full)")
_WORDED = re.compile(rf"(?:(?P<many>{'|'.join(_MANY)})[ -])?(?P<part>{'|'.join(_PARTS)})s?")
_FIGURES = re.compile(r"(?P<over>[0-9]{1,3}) ?[/\u2044] ?(?P<under>[1-9][0-9]{0,2})")
_PER_CENT = re.compile(r"(?P<over>[0-9]{1,3}) ?(?:%|per ?cent)")


@dataclass(frozen=True, slots=True)
class ByEye:
    """An estimate as it was `text`: what is `left`, as a part of the size (0 to 1), or `drawn`."""

    text: str
    left: Fraction | None = None
    drawn: Amount | None = None


def parse_drawn(text: str) -> Amount | ByEye:
    """How much was drawn: an amount, an amount judged by eye, or what is left by eye.

    "100 cm3" is measured, "about 100 cm3" is not. "A third left", "about half full", "2/3
    left", "30 % left", "nearly empty" (a twentieth) and "empty" say what is LEFT, of the size.
    Raises: BadAmount for more than the whole, and as `parse_amount`.

    >>> parse_drawn("about a third left").left
    Fraction(1, 3)
    >>> parse_drawn("100 cm3") == Amount.cm3(100)
    True
    """
    plain = tidy(text).casefold()
    about = _ABOUT.fullmatch(plain)
    left = _PLAIN.get(plain, _part_left(about["rest"] if about else plain))
    if left is not None:
        if left > 1:
            raise BadAmount(f"{quote(text)} is more than the whole.", 'Write it as "half left".')
        return ByEye(text.strip(), left=left)
    if about is None:
        return parse_amount(text)
    # the unit as typed: a capital tells mega from milli
    rest = tidy(text)[-len(about["rest"]) :]
    return ByEye(text.strip(), drawn=parse_amount(rest))


def _part_left(plain: str) -> Fraction | None:
    said = _LEFT.fullmatch(plain)
    if said is None:
        return None
    worded = _WORDED.fullmatch(said["part"])
    if worded is not None:
        return Fraction(_MANY[worded["many"] or "a"], _PARTS[worded["part"]])
    figures, per_cent = _FIGURES.fullmatch(said["part"]), _PER_CENT.fullmatch(said["part"])
    if figures is not None:
        return Fraction(int(figures["over"]), int(figures["under"]))
    return Fraction(int(per_cent["over"]), 100) if per_cent else None
