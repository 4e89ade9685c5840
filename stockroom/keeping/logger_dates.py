"""The times of a logger's table: one way of writing them throughout, found from all of them."""

from __future__ import annotations

import re
from collections.abc import Iterable
from datetime import datetime, time, timedelta, tzinfo

from stockroom.errors import BadDate
from stockroom.measure.days import parse_day, spell_day
from stockroom.measure.reading import quote, tidy

_MOMENT = re.compile(
    r"(?P<day>.*?)[ T,]+(?P<hours>[0-9]{1,2}):(?P<minutes>[0-9]{2})"
    r"(?::(?P<seconds>[0-9]{2})(?:[.,][0-9]+)?)?"
    r" ?(?P<half>[AaPp]\.?[Mm]\.?)?(?P<zone> ?Z| ?(?:GMT|UTC)?[+-][0-9]{2}:?[0-9]{2}| ?GMT| ?UTC)?"
)
_SLASHED = re.compile(r"(?P<one>[0-9]{1,2})[-/ ](?P<two>[0-9]{1,2})[-/ ](?:[0-9]{4}|[0-9]{2})")


class Stamps:
    """Reads the times of one file; which of day and month comes first is settled once for all.

    Raises: BadDate when nothing in the file settles it and nobody has said.
    """

    def __init__(self, written: Iterable[str], day_first: bool | None) -> None:
        self._days: dict[str, datetime] = {}
        self._zone: tzinfo | None = None
        self._first_row: int | None = None
        days = dict.fromkeys(filter(None, map(_day_part, written)))
        self._day_first = _settled(list(days)) if day_first is None else day_first

    def read(self, written: str, row: int) -> datetime:
        """The local time, to the second, of a text such as "22/01/2027 10:00:00".

        A file that says how far its clock is from UTC is read by the clock of its first row.
        Raises: BadDate naming the row.
        """
        match = _MOMENT.fullmatch(tidy(written))
        if match is None:
            raise BadDate(
                f"Row {row}: {quote(written)} is no date and time of day.",
                "Write it as 2027-01-22 10:00.",
            )
        moment = self._day(match["day"], row) + _clock(match, written, row)
        return self._by_one_clock(moment, match["zone"], written, row)

    def _day(self, text: str, row: int) -> datetime:
        if text not in self._days:
            day = parse_day(text, where=f"Row {row}:", day_first=self._day_first)
            self._days[text] = datetime.combine(day, time())
        return self._days[text]

    def _by_one_clock(self, moment: datetime, zone: str | None, written: str, row: int) -> datetime:
        offset = _offset(zone)
        if self._first_row is None:
            self._first_row, self._zone = row, offset
        if (offset is None) != (self._zone is None):
            raise BadDate(
                f"Row {row}: {quote(written)} and row {self._first_row} do not agree on whether"
                " the distance from UTC is given.",
                "Give it in all rows or in none.",
            )
        if offset is None or self._zone is None:
            return moment
        return moment.replace(tzinfo=offset).astimezone(self._zone).replace(tzinfo=None)


def _day_part(written: str) -> str:
    match = _MOMENT.fullmatch(tidy(written))
    return match["day"] if match else ""


def _clock(match: re.Match[str], written: str, row: int) -> timedelta:
    hours, minutes, seconds = (int(match[name] or 0) for name in ("hours", "minutes", "seconds"))
    half = (match["half"] or "")[:1].lower()
    right = 1 <= hours <= 12 if half else hours <= 23
    if not right or minutes > 59 or seconds > 60:
        raise BadDate(f"Row {row}: {quote(written)}: no such time of day.", "Write it as 09:15.")
    # twelve in the night is 0, twelve at noon 12
    hours = hours % 12 + (12 if half == "p" else 0) if half else hours
    return timedelta(hours=hours, minutes=minutes, seconds=seconds)


def _offset(zone: str | None) -> tzinfo | None:
    if not zone:
        return None
    digits = re.sub(r"[^0-9+-]", "", zone) or "+0000"
    return datetime.strptime(digits, "%z").tzinfo


def _settled(days: list[str]) -> bool | None:
    """Whether the day comes first in these dates; None where they say it by themselves.

    One date with a number above 12 settles a file. Raises: BadDate when none does,
    and when two contradict each other.
    """
    pairs = [(day, match) for day in days if (match := _SLASHED.fullmatch(day))]
    if not pairs:
        return None
    first = next((day for day, match in pairs if int(match["one"]) > 12), None)
    second = next((day for day, match in pairs if int(match["two"]) > 12), None)
    if first and second:
        raise BadDate(
            f"{quote(first)} begins with the day and {quote(second)} with the month.",
            "Two files put together? Export again with one way of writing dates.",
        )
    if first or second:
        return first is not None
    text = pairs[0][0]
    if all(match["one"] == match["two"] for _, match in pairs):
        return None
    ways = (spell_day(parse_day(text, day_first=order)) for order in (True, False))
    raise BadDate(
        f"{quote(text)}: {' or '.join(ways)}? Nothing in the file settles it.",
        "Add --day-first or --month-first.",
    )
