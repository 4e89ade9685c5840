"""Dates in a column somebody filled by hand: what order they are in, and day numbers."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date, timedelta
from functools import lru_cache

from stockroom.bringing.doubts import Doubts, in_one
from stockroom.errors import BadDate
from stockroom.measure.days import PrintedDate, parse_day, parse_printed, spell_day
from stockroom.measure.reading import tidy

DAY_FIRST, MONTH_FIRST = "day-first", "month-first"
EPOCHS = {1900: date(1899, 12, 30), 1904: date(1904, 1, 1)}
"""Day 0 of the two ways spreadsheets count days.

Source: ECMA-376 part 1, 18.17.4.1, from memory.
"""

_SLASHED = re.compile(r"(?P<one>[0-9]{1,2})[-/ ](?P<two>[0-9]{1,2})[-/ ](?:[0-9]{4}|[0-9]{2})")
# 20000 is 3 October 1954 by the older count and 79999 is 10 January 2119: our choice, so that
# a year such as 2027 is no day number
_NUMBERED = re.compile(r"[2-7][0-9]{4}(?:\.[0-9]+)?")
_MONTH_ONLY = "which day of the month"
_SAYS_NOTHING = {"", "-", "–", "—", "n/a", "na", "none", "no date", "?", "unknown"}


@dataclass(frozen=True, slots=True)
class DateOrder:
    """What is known of the dates of a file: said by somebody, and shown by the file itself.

    `shown_day` and `shown_month` are rows whose dates can only begin with the day, or only
    with the month. `epoch` is said or stands in the workbook.
    """

    said: bool | None = None
    shown_day: tuple[int, ...] = ()
    shown_month: tuple[int, ...] = ()
    epoch: int | None = None

    @property
    def options(self) -> tuple[str, str]:
        """The two answers, the one the file itself shows first."""
        if self.shown_month and not self.shown_day:
            return MONTH_FIRST, DAY_FIRST
        return DAY_FIRST, MONTH_FIRST

    @property
    def shown(self) -> str:
        """What the other rows show of it, in words."""
        day, month = self.shown_day, self.shown_month
        if day and month:
            return f"row {day[0]} begins with the day and row {month[0]} with the month: two hands?"
        if not (day or month):
            return "nothing in the file settles it"
        return f"{_rows(day or month)} can only begin with the {'day' if day else 'month'}"


def _rows(rows: tuple[int, ...]) -> str:
    more = " and others" if len(rows) > 3 else ""
    return f"row{'s' if len(rows) > 1 else ''} {', '.join(map(str, rows[:3]))}{more}"


def date_order(
    written: Iterable[tuple[int, str]], said: bool | None, epoch: int | None
) -> DateOrder:
    """What the dates of a file show of their order: only 13 to 31 in one place tells.

    `written` is each row's number and one of its date cells; both ways may be shown at once.
    """
    day: dict[int, None] = {}
    month: dict[int, None] = {}
    for row, text in written:
        found = _SLASHED.fullmatch(tidy(text)) if text else None
        if found and int(found["one"]) > 12 >= int(found["two"]):
            day[row] = None
        elif found and int(found["two"]) > 12 >= int(found["one"]):
            month[row] = None
    return DateOrder(said, tuple(day), tuple(month), epoch)


def says_nothing(text: str) -> bool:
    """True for a blank date cell, and for "n/a", "none", a dash or a question mark."""
    return tidy(text).casefold() in _SAYS_NOTHING


def read_day(
    text: str, field: str, order: DateOrder, doubts: Doubts, *, today: date
) -> date | None:
    """The day something happened, None when it cannot be had; the doubts are added."""
    days = _numbered(text, order, doubts, field, today)
    if days is None:
        days = _typed_days(text, field, order, doubts)
    if not days:
        return None
    # what is still to come cannot have happened, so the other reading is the one meant
    past = tuple(day for day in days if day <= today)
    if not past:
        doubts.refuse(field, f"{_or(days)} is still to come: today is {spell_day(today)}")
        return None
    if len(past) > 1:
        _ask_which(past, field, order, doubts, numbered=_is_number(text))
        return None
    return past[0]


def read_printed(text: str, order: DateOrder, doubts: Doubts, *, today: date) -> PrintedDate | None:
    """The date printed on a bottle with every reading it has; None when there is none."""
    if says_nothing(text):
        return None
    days = _numbered(text, order, doubts, "printed", None)
    if days is not None:
        printed: PrintedDate | None = PrintedDate(text.strip(), days)
    else:
        try:
            printed = _printed(text, order.said)
        except BadDate as error:
            doubts.refuse("printed", _said(error))
            return None
    if printed is None:
        return None
    if printed.ambiguous:
        _ask_printed(printed, order, doubts)
    elif printed.readings[0] < today:
        doubts.note("printed", f"past: it was good until {spell_day(printed.readings[0])}")
    return printed


@lru_cache(maxsize=4096)
def _printed(text: str, day_first: bool | None) -> PrintedDate | None:
    found = parse_printed(text)
    if found is None or not found.ambiguous or day_first is None:
        return found
    # the answer settles what has two readings, and turns round nothing that has one
    return parse_printed(text, day_first=day_first)


def _ask_printed(printed: PrintedDate, order: DateOrder, doubts: Doubts) -> None:
    if _is_number(printed.text):
        _ask_which(printed.readings, "printed", order, doubts, numbered=True, careful=True)
        return
    if _SLASHED.fullmatch(tidy(printed.text)):
        _ask_which(printed.readings, "printed", order, doubts, careful=True)
        return
    # "11/12" is a month and a year, whichever way round
    text = f"{_or(printed.readings)}; planned on the earlier"
    options = tuple(f"{day:%Y-%m}" for day in printed.readings)
    doubts.careful("printed", text, options=options)


def _typed_days(text: str, field: str, order: DateOrder, doubts: Doubts) -> tuple[date, ...]:
    try:
        return _days(text, order.said)
    except BadDate as error:
        if _MONTH_ONLY in error.message:
            first = _first_of_month(text)
            doubts.ask(
                field,
                "which day of the month? The first is the careful one",
                options=(first,) if first else (),
            )
        else:
            doubts.refuse(field, _said(error))
        return ()


@lru_cache(maxsize=8192)
def _days(text: str, day_first: bool | None) -> tuple[date, ...]:
    try:
        return (parse_day(text),)
    except BadDate:
        if not _SLASHED.fullmatch(tidy(text)):
            raise
    # the reading with the day first stands first, as in the answers
    found: dict[date, None] = {}
    for order in (True, False) if day_first is None else (day_first,):
        try:
            found.setdefault(parse_day(text, day_first=order))
        except BadDate:
            continue
    if not found:
        # said once more for its words
        return (parse_day(text),)
    return tuple(found)


def _first_of_month(text: str) -> str:
    try:
        printed = parse_printed(text)
    except BadDate:
        return ""
    return printed.readings[0].replace(day=1).isoformat() if printed else ""


def _is_number(text: str) -> bool:
    return _NUMBERED.fullmatch(tidy(text)) is not None


def _numbered(
    text: str, order: DateOrder, doubts: Doubts, field: str, today: date | None
) -> tuple[date, ...] | None:
    """The days a spreadsheet's day number can be; None for any other text."""
    if not _is_number(text):
        return None
    number = timedelta(days=int(float(tidy(text))))
    epochs = [order.epoch] if order.epoch else list(EPOCHS)
    days = tuple(sorted(EPOCHS[epoch] + number for epoch in epochs))
    likely = tuple(day for day in days if today is None or day <= today) or days
    if len(likely) == 1:
        doubts.note(field, f"a spreadsheet's day number: {spell_day(likely[0])}")
    return likely


def _ask_which(
    days: tuple[date, ...],
    field: str,
    order: DateOrder,
    doubts: Doubts,
    *,
    numbered: bool = False,
    careful: bool = False,
) -> None:
    ask = doubts.careful if careful else doubts.ask
    meanwhile = "; planned on the earlier" if careful else ""
    if numbered:
        text = f"a spreadsheet's day number: {_or(days)}, by which count{meanwhile}?"
        ask(field, text, key="epoch", options=("1900", "1904"))
        return
    text = f"{_or(days)}{meanwhile}"
    ask(field, text, key="dates", options=order.options, shown=order.shown)


def _or(days: tuple[date, ...]) -> str:
    return " or ".join(spell_day(day) for day in days)


def _said(error: BadDate) -> str:
    # the value is shown beside it already
    _, _, reason = error.message.rpartition('": ')
    return in_one(reason, error.hint)
