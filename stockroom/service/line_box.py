"""What one line typed at the top of a page means: where to go, or what was drawn."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, reading

_NUMBER = re.compile(r"[BSKR]\d+[a-z]{0,2}", re.IGNORECASE)
_PLANNED = re.compile(r"[MOP]\d+|K\d+[a-z]{0,2}\.\d+", re.IGNORECASE)
_BOOKING = re.compile(r"K\d+[a-z]{0,2}", re.IGNORECASE)
_DAY = re.compile(r"\d{4}-\d{2}-\d{2}")
_KINDS = {"B": "bottle", "S": "bottle", "K": "booking", "R": "recipe"}
_LAST = re.compile(
    r"(?:(?P<amount>(?!for\s).*?)\s+)?(?P<for>for\s+)?(?P<booking>\S+)", re.IGNORECASE
)


@dataclass(frozen=True, slots=True)
class Meant:
    """What was meant. `kind` is bottle, booking, recipe, planned, day, draw or words.

    `value` is the number, the day or the words; of a draw the bottle, with the `amount` and
    the `booking` it is for as they were typed.
    """

    kind: str
    value: str
    amount: str = ""
    booking: str = ""


def meant_by(path: StoreAt, text: str) -> Meant:
    """What a line typed means; what is no number is words to look for along the shelf.

    A number with more behind it is a draw from that bottle. Raises: UnknownName with the
    nearest three for a number alone that nobody gave; StoreTrouble.
    """
    first, _, rest = " ".join(text.split()).partition(" ")
    if not rest and _DAY.fullmatch(first):
        return Meant("day", first)
    with reading(path) as reader:
        for kind, numbers in _numbers(reader):
            number = numbers.get(plain(first))
            if number is not None and not rest:
                return Meant(kind, number)
            if number is not None and kind == "bottle":
                return _drawn(number, rest, dict(_numbers(reader))["booking"])
        if not rest and _PLANNED.fullmatch(first):
            return Meant("planned", first.upper())
        kind = _KINDS.get(first[:1].upper(), "")
        if _NUMBER.fullmatch(first) and not rest:
            raise unknown(kind, first, dict(_numbers(reader))[kind].values())
        if _NUMBER.fullmatch(first) and kind == "bottle":
            # refused beside its field, where it can be mended
            return _drawn(first.upper(), rest, dict(_numbers(reader))["booking"])
    return Meant("words", text.strip())


def _numbers(reader: Reader) -> Iterable[tuple[str, Mapping[str, str]]]:
    for kind, asked in _ASKED.items():
        yield kind, {plain(str(row[0])): str(row[0]) for row in reader.ask(asked)}


_ASKED = {
    "bottle": "SELECT number FROM bottle ORDER BY number",
    "booking": "SELECT number FROM booking ORDER BY number",
    "recipe": "SELECT DISTINCT recipe FROM recipe ORDER BY recipe",
}


def _drawn(bottle: str, rest: str, bookings: Mapping[str, str]) -> Meant:
    """ "100 cm3 for K16": the last word is the booking where it is one, or where "for" says so.

    What looks like a booking and is none is refused by its name, and not read as a unit.
    """
    found = _LAST.fullmatch(rest)
    if found is not None and (found["for"] or plain(found["booking"]) in bookings):
        return Meant("draw", bottle, found["amount"] or "", found["booking"])
    if found is not None and found["amount"] and _BOOKING.fullmatch(found["booking"]):
        return Meant("draw", bottle, found["amount"], found["booking"])
    return Meant("draw", bottle, rest)
