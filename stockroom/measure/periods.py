"""Lives and intervals as calendar steps: "28 d", "6 months", "same day".

A month is a step of the calendar and not so many days, so no unit library is asked.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.errors import BadDate
from stockroom.measure.reading import quote, tidy

SAME_DAY = "same day"
UNITS = ("hours", "days", "weeks", "months", "years")

_PERIOD = re.compile(r"(?P<count>[+-]?[0-9]{1,20}) ?(?P<unit>[A-Za-z]+)\.?")
_SPELLINGS = {
    "h": "hours", "hr": "hours", "hrs": "hours", "hour": "hours",
    "d": "days", "day": "days",
    "w": "weeks", "wk": "weeks", "wks": "weeks", "week": "weeks",
    "mo": "months", "mth": "months", "mths": "months", "month": "months",
    "y": "years", "yr": "years", "yrs": "years", "year": "years",
}  # fmt: skip
_SPELLINGS |= {unit: unit for unit in UNITS}

# A hundred years of each: longer is a slip of the keyboard, and would leave the calendar.
_LONGEST = {"hours": 876_600, "days": 36_525, "weeks": 5_218, "months": 1_200, "years": 100}


@dataclass(frozen=True, slots=True)
class Period:
    """So many hours, days, weeks, months or years; `Period(0, "days")` is the same day."""

    count: int
    unit: str

    def __post_init__(self) -> None:
        if self.unit not in UNITS:
            raise BadDate(f'No period is counted in "{self.unit}".', f"Use {', '.join(UNITS)}.")
        if self.count < 0:
            raise BadDate(f"{self.count} {self.unit} is no life.", "Give 0 (same day) or more.")


def parse_period(text: str, *, where: str = "life") -> Period:
    """A life or an interval: "28 d", "6 months", "3 y", "48 h", "same day".

    Raises: BadDate for 0 or fewer, for fractions, for "m" (months or minutes?), and
    for more than a hundred years.
    """
    plain = tidy(text)
    shown = f"{where} {quote(text)}"
    if plain.lower() in {SAME_DAY, "same-day"}:
        return Period(0, "days")
    match = _PERIOD.fullmatch(plain)
    if match is None:
        raise BadDate(f"{shown}: not a period I can read.", 'Write "28 days" or "6 months".')
    count, unit = int(match["count"]), _unit(match["unit"], shown)
    if count <= 0:
        raise BadDate(
            f"{shown}: A life of {count} {unit} means never keep.", "Did you mean same day?"
        )
    if count > _LONGEST[unit]:
        raise BadDate(f"{shown}: longer than a hundred years.", "Leave it empty if it never ends.")
    return Period(count, unit)


def _unit(name: str, shown: str) -> str:
    unit = _SPELLINGS.get(name.lower())
    if name == "m":
        raise BadDate(f'{shown}: is "m" months or minutes?', 'Write "months" or "h".')
    if unit is None:
        raise BadDate(f'{shown}: "{name}" is no unit of time.', f"Use {', '.join(UNITS)}.")
    return unit


def add(day: date, period: Period, times: int = 1) -> date:
    """`day` moved on by a period, `times` over, always counted from `day` itself.

    31 January plus one month is 28 February; plus two is 31 March and not the 28th.
    Hours count as whole days, rounded down. `times` below zero goes back.
    Raises: BadDate when the calendar ends first.
    """
    count = period.count * times
    try:
        if period.unit in ("months", "years"):
            return _by_calendar(day, count if period.unit == "months" else 12 * count)
        return day + timedelta(days=_whole_days(count, period.unit))
    except (OverflowError, ValueError):
        raise BadDate(
            f"{day} and {format_period(period)} × {times} leave the calendar.", "Check the period."
        ) from None


def _by_calendar(day: date, months: int) -> date:
    # loaded here: lives in days, nearly all of them, never need it
    from dateutil.relativedelta import relativedelta

    return day + relativedelta(months=months)


def _whole_days(count: int, unit: str) -> int:
    if unit == "hours":
        # toward the origin either way: 36 h is one whole day on, or one whole day back
        return int(count / 24)
    return count * 7 if unit == "weeks" else count


def format_period(period: Period) -> str:
    """A period in words: "same day", "1 day", "28 days", "6 months"."""
    if period.count == 0:
        return SAME_DAY
    return f"{period.count} {period.unit.removesuffix('s') if period.count == 1 else period.unit}"
