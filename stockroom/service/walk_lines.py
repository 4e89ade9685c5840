"""One line of a count as somebody typed it: "B06 640 g", "B13 about half, A1", "B28 missing".

A bottle that is on no list begins with a plus: "+ brown powder, A2, 100 g".
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction

from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye, parse_drawn
from stockroom.measure.parsing import parse_amount
from stockroom.measure.reading import tidy


class Said(StrEnum):
    """What a line says of its bottle."""

    AMOUNT = "amount"
    PART = "part"
    """So much of what it holds when full, by eye."""
    SAME = "same"
    MISSING = "missing"
    HERE = "here"
    UNLISTED = "unlisted"


@dataclass(frozen=True, slots=True)
class Typed:
    """A line read: the bottle's number, or of one on no list what it looks like.

    `amount` is there for an amount and for what is on no list, `part` (0 to 1) for an
    estimate of a part. `place` is where it stands, "" where that is not said.
    """

    bottle: str
    said: Said
    amount: Amount | None = None
    part: Fraction = Fraction(0)
    about: bool = False
    place: str = ""
    again: bool = False
    sure: bool = False


_WORDS = {
    "same": Said.SAME,
    "as listed": Said.SAME,
    "=": Said.SAME,
    "missing": Said.MISSING,
    "not found": Said.MISSING,
    "lost": Said.MISSING,
    "here": Said.HERE,
    "seen": Said.HERE,
    "turned up": Said.HERE,
}
_HOW = (
    'Write B06 640 g, same, about half, missing or here; blank for not yet; "+" for one not listed.'
)
_NUMBERED = re.compile(r"[:;,]*(?P<number>[^\s:;,]*)[\s:;,]*")
_BLANK = re.compile(r"[._…\s]*")
# a comma alone may be a decimal one, so only a comma and a space parts off the place
_PLACE = re.compile(r"(?P<body>.*?)(?:,\s+|(?:^|\s)at\s+)(?P<place>[^,]+)")


def numbered(line: str) -> str:
    """The number a line begins with, whatever else it says; "" for a remark, and after a plus."""
    text = tidy(line)
    if _BLANK.fullmatch(text) or text.startswith(("#", "+")):
        return ""
    found = _NUMBERED.match(text)
    return found["number"] if found else ""


def read_typed(line: str) -> Typed | None:
    """A line of a count, None where it says nothing yet: blank, dots, or a remark after "#".

    Raises: BadInput and BadAmount quoting what cannot be read.
    """
    text = tidy(line)
    if _BLANK.fullmatch(text.lstrip("+")) or text.startswith("#"):
        return None
    if text.startswith("+"):
        return _unlisted(text[1:].strip())
    found = _NUMBERED.match(text)
    assert found is not None, text
    number, rest = found["number"], text[found.end() :]
    body, again, sure = _without_words(rest)
    body, place = _without_place(body)
    if _BLANK.fullmatch(body):
        return Typed(number, Said.HERE, place=place, again=again) if place else None
    said = _WORDS.get(body.lower())
    if said is not None:
        return Typed(number, said, place=place, again=again)
    return _amount(number, body, place, again=again, sure=sure)


def _without_words(rest: str) -> tuple[str, bool, bool]:
    """What is left without the words at its end that confirm: again, sure."""
    words, said = rest.split(" "), set()
    while words and words[-1].lower() in ("again", "sure"):
        said.add(words.pop().lower())
    return " ".join(words).rstrip(","), "again" in said, "sure" in said


def _without_place(body: str) -> tuple[str, str]:
    found = _PLACE.fullmatch(body)
    return (found["body"].strip(), found["place"].strip()) if found else (body, "")


def _amount(number: str, body: str, place: str, *, again: bool, sure: bool) -> Typed:
    bare = re.sub(r"\s+left$", "", body, flags=re.IGNORECASE)
    # "about half" is half a full bottle left: on a walk nothing else can be meant
    for words in (body, f"{bare} left", bare):
        found = _by_eye(words)
        if found is not None and found.left is not None:
            guess = found.left > 0
            return Typed(number, Said.PART, None, found.left, guess, place, again)
    if not any(character.isdigit() for character in bare):
        raise BadInput(f'{number} "{body}" is no amount.', _HOW)
    said = parse_drawn(bare)
    amount = said if isinstance(said, Amount) else said.drawn
    return Typed(
        number, Said.AMOUNT, amount, about=said is not amount, place=place, again=again, sure=sure
    )


def _by_eye(words: str) -> ByEye | None:
    if words.lower() in ("full left", "full"):
        return ByEye(words, left=Fraction(1))
    try:
        found = parse_drawn(words)
    except BadAmount:
        return None
    return None if isinstance(found, Amount) else found


def _unlisted(text: str) -> Typed:
    body, again, _ = _without_words(text)
    pieces = [piece.strip() for piece in re.split(r",\s+", body) if piece.strip()]
    amount = None
    if len(pieces) > 1 and pieces[-1][0].isdigit():
        amount = parse_amount(pieces.pop(), where="size")
    place = pieces.pop() if len(pieces) > 1 else ""
    if not pieces or pieces[0][0].isdigit():
        raise BadInput(f'"+ {text}": what does it look like?', "Write + brown powder, A2, 100 g.")
    return Typed(", ".join(pieces), Said.UNLISTED, amount, place=place, again=again)
