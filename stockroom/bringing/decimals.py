"""Decimal signs of a file: what the comma in "1,000" is, shown by the other numbers or asked."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

from stockroom.bringing.doubts import Doubts

COMMA, POINT = "comma", "point"

_NUMBER = re.compile(r"[0-9][0-9.,]*")
_COMMA_ONLY = re.compile(r"(?:0|[0-9]{4,}),[0-9]+|[0-9]+,(?:[0-9]{1,2}|[0-9]{4,})")
_POINT_ONLY = re.compile(r"(?:0|[0-9]{4,})\.[0-9]+|[0-9]+\.(?:[0-9]{1,2}|[0-9]{4,})")
_COMMA_EITHER = re.compile(r"[1-9][0-9]{0,2},[0-9]{3}")
_POINT_EITHER = re.compile(r"[1-9][0-9]{0,2}\.[0-9]{3}")
_GROUPS = re.compile(r"[1-9][0-9]{0,2}(?:(,)[0-9]{3}){2,}|[1-9][0-9]{0,2}(?:(\.)[0-9]{3}){2,}")


@dataclass(frozen=True, slots=True)
class Decimals:
    """How the numbers of a file are written: said by somebody, and shown by the file itself."""

    said: str = ""
    commas: tuple[int, ...] = ()
    points: tuple[int, ...] = ()

    @property
    def mixed(self) -> bool:
        """Whether both signs stand in numbers that can only be read one way."""
        return bool(self.commas and self.points)


def decimals_of(written: Iterable[tuple[int, str]], said: str) -> Decimals:
    """The rows whose numbers show a comma, or a point, to be a decimal sign: "7,8", "0.5".

    `written` is each row's number and one of its cells; "1,000" shows neither.
    """
    commas: dict[int, None] = {}
    points: dict[int, None] = {}
    for row, text in written:
        number = _NUMBER.search(text) if text else None
        if number and _COMMA_ONLY.fullmatch(number[0]):
            commas[row] = None
        elif number and _POINT_ONLY.fullmatch(number[0]):
            points[row] = None
    return Decimals(said, tuple(commas), tuple(points))


def plain_number(text: str, field: str, decimals: Decimals, doubts: Doubts) -> str | None:
    """The text with its number written with a point; None when it must be asked about."""
    found = _NUMBER.search(text)
    if not found or not re.search("[.,]", found[0]):
        return text
    number = found[0]
    groups = _GROUPS.fullmatch(number)
    if groups:
        plain = re.sub("[.,]", "", number)
    elif _COMMA_ONLY.fullmatch(number):
        if decimals.said == POINT:
            doubts.refuse(field, f'the comma in "{number}" parts no thousands')
            return None
        if decimals.mixed and not decimals.said:
            _query(number, field, decimals, doubts)
        plain = number.replace(",", ".")
    elif _either_way(number, decimals):
        if not decimals.said:
            _ask_which(number, field, decimals, doubts)
            return None
        mark = "," if decimals.said == COMMA else "."
        plain = number.replace("." if mark == "," else ",", "").replace(mark, ".")
    else:
        plain = number
    return text[: found.start()] + plain + text[found.end() :]


def _either_way(number: str, decimals: Decimals) -> bool:
    if _COMMA_EITHER.fullmatch(number):
        return True
    # a point is a decimal sign here, until the file shows that it writes commas
    comma_file = decimals.said == COMMA or (decimals.commas and not decimals.points)
    return bool(comma_file and _POINT_EITHER.fullmatch(number))


def _query(number: str, field: str, decimals: Decimals, doubts: Doubts) -> None:
    plain = number.replace(",", ".")
    shown = f"row {decimals.points[0]} writes its decimals with a point: two hands?"
    text = f"read as {plain}"
    doubts.careful(field, text, key="decimal", options=(COMMA, POINT), shown=shown)


def _ask_which(number: str, field: str, decimals: Decimals, doubts: Doubts) -> None:
    mark = "," if "," in number else "."
    whole, small = number.replace(mark, ""), f"{float(number.replace(mark, '.')):g}"
    text = "One thousand or one?" if whole == "1000" else f"{whole} or {small}?"
    comma = decimals.commas[:1]
    shown = f"row {comma[0]} writes a comma before decimals" if comma else ""
    options = (COMMA, POINT) if decimals.commas or mark == "." else (POINT, COMMA)
    doubts.ask(field, text, key="decimal", options=options, shown=shown)
