"""Dates as typed and as printed on bottles; times of the day.

A typed day has one reading or is refused; a printed date keeps every reading it has.
"""

from __future__ import annotations

import re
from calendar import monthrange
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.errors import BadDate
from stockroom.measure.reading import quote, tidy

MONTHS = (
    "January", "February", "March", "April", "May", "June",
    "July", "August", "September", "October", "November", "December",
)  # fmt: skip

# outside these a digit has been dropped or swapped
_EARLIEST_YEAR, _LATEST_YEAR = 1900, 2199
_SEP = r" ?[-/. ,] ?"
_MONTH = r"(?P<month>[A-Za-z]{3,9})\.?"
_DAY = r"(?P<day>[0-9]{1,2})(?:st|nd|rd|th)?"
_YEAR = r"(?P<year>[0-9]{4}|[0-9]{2})"
_YEAR_FIRST = re.compile(r"(?P<year>[0-9]{4})[-/.](?P<month>[0-9]{1,2})[-/.](?P<day>[0-9]{1,2})")
_YEAR_LAST = re.compile(rf"(?P<one>[0-9]{{1,2}}){_SEP}(?P<two>[0-9]{{1,2}}){_SEP}{_YEAR}")
_DAY_WORD = re.compile(rf"{_DAY}(?:{_SEP})?{_MONTH}(?:{_SEP})?{_YEAR}")
_WORD_DAY = re.compile(rf"{_MONTH} ?{_DAY},? ?(?P<year>[0-9]{{4}})")
# "Oct-26" is a month and a year: a bottle never prints a day of the month without its year
_MONTH_ONLY = (
    re.compile(r"(?P<year>[0-9]{4})[-/. ](?P<month>[0-9]{1,2})"),
    re.compile(r"(?P<month>[0-9]{1,2})[-/. ](?P<year>[0-9]{4})"),
    re.compile(rf"{_MONTH}(?:{_SEP})?{_YEAR}"),
    re.compile(rf"(?P<year>[0-9]{{4}}){_SEP}{_MONTH}"),
)
_MONTH_AND_SHORT_YEAR = re.compile(r"(?P<one>[0-9]{2})[-/.](?P<two>[0-9]{2})")
_EXPIRY_WORDS = re.compile(r"^(?:exp(?:iry|ires)?|use by|best before)\b[.: ]*", re.IGNORECASE)
_NO_DATE = {"", "none", "no date", "-", "–", "—", "n/a"}
# spreadsheets turn dates into day numbers when a column loses its format
_SPREADSHEET_DAYS = range(20_000, 80_000)
_SPREADSHEET_ORIGIN = date(1899, 12, 30)
# bounded, as thousands of digits are no number to Python either
_DIGITS = re.compile(r"[0-9]{1,9}")
_WHICH_DAY = "Which day is meant?"
_TIME = re.compile(r"(?P<hours>[0-9]{1,2})[:.](?P<minutes>[0-9]{2})")


@dataclass(frozen=True, slots=True)
class PrintedDate:
    """A date as printed on a bottle, and every day it can mean, earliest first."""

    text: str
    readings: tuple[date, ...]

    @property
    def day(self) -> date | None:
        """The last good day to plan on: the earliest reading."""
        return self.readings[0] if self.readings else None

    @property
    def ambiguous(self) -> bool:
        """Whether somebody must still say which reading is right."""
        return len(self.readings) > 1


def parse_day(text: str, *, where: str = "date", day_first: bool | None = None) -> date:
    """The one day a typed date means: ISO, "12 Jan 2027", "13/05/27", "13.05.2027".

    Two-digit years are 20xx; between dots the day comes first. `day_first` settles
    "04/05/27" where a house or a file has one order throughout; left None, a date
    with two readings is refused.
    Raises: BadDate naming both readings, or the day or month that does not exist.
    """
    shown = f"{where} {quote(text)}"
    readings = _full_readings(tidy(text), shown, day_first)
    if len(readings) == 1:
        return readings[0]
    if readings:
        first, second = (spell_day(day) for day in reversed(readings))
        raise BadDate(
            f"{shown}: {first} or {second}?",
            f'Write it with the month in letters, as "{first}", or as {readings[-1]}.',
        )
    if _month_readings(tidy(text), shown):
        raise BadDate(f"{shown}: which day of the month?", "Write it as 2027-03-09.")
    raise BadDate(f"{shown}: I cannot read it as a date.", _how_to_write(tidy(text)))


def parse_printed(
    text: str, *, where: str = "printed date", day_first: bool | None = None
) -> PrintedDate | None:
    """A date as printed: "03/2027" means through 31 March; "04/05/27" keeps both readings.

    Nothing, "none" or a dash gives None. A month without a day ends on its
    last day, included. `day_first` as in `parse_day`.
    Raises: BadDate for days and months that do not exist, and for words such as "old".
    Source: US Pharmacopeia on month-only expiry, as quoted in a pharmacy textbook.
    """
    plain = _EXPIRY_WORDS.sub("", tidy(text))
    if plain.lower() in _NO_DATE:
        return None
    shown = f"{where} {quote(text)}"
    try:
        readings = _full_readings(plain, shown, day_first) or _month_readings(plain, shown)
    except BadDate as error:
        # a typed day can be meant otherwise; a label must be looked at again
        asked = "What is printed on the bottle?" if error.hint == _WHICH_DAY else error.hint
        raise BadDate(error.message, asked) from None
    if readings:
        return PrintedDate(text.strip(), readings)
    if not re.search(r"[0-9]", plain) and _month_number(plain) is None:
        raise BadDate(
            f"{shown}: not a date.",
            "Leave the date empty and add a note; I will ask you to inspect it.",
        )
    raise BadDate(f"{shown}: I cannot read it as a date.", _how_to_write(plain))


def spell_day(day: date) -> str:
    """A day with its month in letters, so that it has one reading: "4 May 2027"."""
    return f"{day.day} {MONTHS[day.month - 1]} {day.year}"


def parse_time(text: str, *, where: str = "time") -> int:
    """Minutes after midnight of a time on the 24-hour clock: "09:15" gives 555.

    Raises: BadDate for anything but hours 0-23 and minutes 00-59.
    """
    match = _TIME.fullmatch(tidy(text))
    if match is None or int(match["hours"]) > 23 or int(match["minutes"]) > 59:
        raise BadDate(f"{where} {quote(text)}: not a time of day.", 'Write it as "09:15".')
    return int(match["hours"]) * 60 + int(match["minutes"])


def format_time(minutes: int) -> str:
    """Minutes after midnight as "09:15".

    Raises: BadDate below 0 or at 1440 and beyond.
    """
    if not 0 <= minutes < 1440:
        raise BadDate(f"{minutes} minutes after midnight is another day.", "Give 0 to 1439.")
    return f"{minutes // 60:02d}:{minutes % 60:02d}"


def _full_readings(plain: str, shown: str, day_first: bool | None) -> tuple[date, ...]:
    numbers = _YEAR_LAST.fullmatch(plain)
    if numbers:
        return _either_order(numbers, shown, day_first)
    for form in (_YEAR_FIRST, _DAY_WORD, _WORD_DAY):
        match = form.fullmatch(plain)
        if match:
            month = _month_number(match["month"])
            if month is None:
                return ()
            return (_day(_year(match["year"], shown), month, int(match["day"]), shown),)
    return ()


def _either_order(numbers: re.Match[str], shown: str, day_first: bool | None) -> tuple[date, ...]:
    year = _year(numbers["year"], shown)
    if "." in numbers[0] and day_first is None:
        # dots are the continental way of writing dates, and there the day comes first
        day_first = True
    one, two = int(numbers["one"]), int(numbers["two"])
    orders = {None: ((one, two), (two, one)), True: ((one, two),), False: ((two, one),)}[day_first]
    days = {date(year, month, day) for day, month in orders if _exists(year, month, day)}
    if days:
        return tuple(sorted(days))
    # neither reading exists: complain about the one whose month does
    day, month = next((order for order in orders if 1 <= order[1] <= 12), orders[0])
    return (_day(year, month, day, shown),)


def _month_readings(plain: str, shown: str) -> tuple[date, ...]:
    for form in _MONTH_ONLY:
        match = form.fullmatch(plain)
        if match:
            month = _month_number(match["month"])
            if month is None:
                return ()
            return (_last_of_month(_year(match["year"], shown), month, shown),)
    short = _MONTH_AND_SHORT_YEAR.fullmatch(plain)
    return _short_readings(int(short["one"]), int(short["two"])) if short else ()


def _short_readings(one: int, two: int) -> tuple[date, ...]:
    # "03/27" can only be March 2027; "11/12" is November 2012 or December 2011
    pairs = {(2000 + two, one), (2000 + one, two)}
    months = {pair for pair in pairs if 1 <= pair[1] <= 12}
    return tuple(sorted(date(year, month, _length(year, month)) for year, month in months))


def _last_of_month(year: int, month: int, shown: str) -> date:
    _day(year, month, 1, shown)
    return date(year, month, _length(year, month))


def _day(year: int, month: int, day: int, shown: str) -> date:
    if _exists(year, month, day):
        return date(year, month, day)
    if not 1 <= month <= 12:
        raise BadDate(
            f"{shown}: there is no month {month}.",
            "Write the date as 2027-03-09, or a printed month as 2027-03.",
        )
    length = f"{MONTHS[month - 1]} {year} has {_length(year, month)} days."
    raise BadDate(f"{shown}: {length}", _WHICH_DAY)


def _exists(year: int, month: int, day: int) -> bool:
    return 1 <= month <= 12 and 1 <= day <= _length(year, month)


def _length(year: int, month: int) -> int:
    return monthrange(year, month)[1]


def _year(digits: str, shown: str) -> int:
    year = int(digits) + (2000 if len(digits) == 2 else 0)
    if not _EARLIEST_YEAR <= year <= _LATEST_YEAR:
        raise BadDate(f"{shown}: the year {digits}?", "Write all four digits.")
    return year


def _month_number(name: str) -> int | None:
    if _DIGITS.fullmatch(name):
        return int(name)
    wanted = name.lower().rstrip(".")
    wanted = "sep" if wanted == "sept" else wanted
    for number, month in enumerate(MONTHS, start=1):
        if wanted in (month.lower(), month[:3].lower()):
            return number
    return None


def _how_to_write(plain: str) -> str:
    if _month_number(plain) is not None and not _DIGITS.fullmatch(plain):
        return f"{plain} of which year? Write {plain} 2027."
    if _DIGITS.fullmatch(plain) and int(plain) in _SPREADSHEET_DAYS:
        meant = spell_day(_SPREADSHEET_ORIGIN + timedelta(days=int(plain)))
        return f"A spreadsheet's day number? That would be {meant}: write it out."
    return "Write it as 2027-03-09 or 9 Mar 2027."
