"""Days, amounts, strengths and marks, the way every sheet writes them."""

from __future__ import annotations

import math
import re
from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.days import MONTHS
from stockroom.measure.formats import format_amount
from stockroom.planning.decisions import Draw

# Not strftime: its names follow the machine's language, and a printed sheet must not.
WEEKDAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
"""The names of the days, Monday first, as every sheet has them."""

_DAYS = re.compile(r'"[^"]*"|\b(\d{4}-(?:0[1-9]|1[0-2])-(?:0[1-9]|[12]\d|3[01]))\b')

TIED = "\u00a0"
"""A space no line is broken at; `sheet.wrap` turns it back into a plain one."""

MARKS: dict[Condition, str] = {
    Condition.SOUND: "●",
    Condition.WATCH: "◕",
    Condition.WEAK: "○",
    Condition.PAST: "○",
    Condition.NO_DATE: "◌",
    Condition.SET_ASIDE: "▩",
    Condition.NOT_FOUND: "–",
    Condition.GONE: "×",
}
"""Shapes that tell themselves apart in black and white; the word always follows."""


def marked(condition: Condition) -> str:
    """The mark and the word of a condition: "● sound"."""
    return f"{MARKS[condition]}{TIED}{condition.value.replace(' ', TIED)}"


def day(when: date) -> str:
    """A day with its weekday, ISO, kept on one line: "Mon 2027-01-25"."""
    return f"{WEEKDAYS[when.weekday()]}{TIED}{when.isoformat()}"


def day_heading(when: date) -> str:
    """A day as a heading reads it: "Mon 25 Jan 2027"."""
    return f"{WEEKDAYS[when.weekday()]} {day_in_words(when)}"


def day_in_words(when: date) -> str:
    """A day with its month in letters: "10 Dec 2026". Of one reading, and short."""
    return f"{day_and_month(when)} {when.year}"


def day_and_month(when: date) -> str:
    """A day where the year is plain: "10 Dec"."""
    return f"{when.day} {MONTHS[when.month - 1][:3]}"


def weekday_and_day(when: date) -> str:
    """A day inside a sheet that says its year: "Tue 26 Jan", kept on one line."""
    return f"{WEEKDAYS[when.weekday()]} {day_and_month(when)}".replace(" ", TIED)


def days_in_words(text: str) -> str:
    """A sentence with its ISO days in words; what stands in quotes is left as somebody wrote it.

    >>> days_in_words('found Thu 2026-12-10 + 28 days; printed "2026-12-31"')
    'found Thu 10 Dec 2026 + 28 days; printed "2026-12-31"'
    """
    return _DAYS.sub(_spelt, text)


def _spelt(found: re.Match[str]) -> str:
    try:
        return day_in_words(date.fromisoformat(found[1])) if found[1] else found[0]
    except ValueError:
        # somebody's note may name 31 February
        return found[0]


def day_seen_from(when: date, seen_from: date) -> str:
    """A day as seen from another: "Tue 12 Jan", with the year where that is another."""
    if when.year != seen_from.year:
        return day_heading(when)
    return weekday_and_day(when).replace(TIED, " ")


def rounded(number: float, figures: int) -> float:
    """`number` to so many significant figures; no figure left of the point is lost."""
    if not number:
        return 0.0
    # 1 234 cm³ stays 1 234 with three figures asked for: a measured whole is not rounded off
    places = figures - 1 - math.floor(math.log10(abs(number)))
    return round(number, max(0, places))


def amount(micro: int, kind: Kind) -> str:
    """Micro-units as a person measures them: four figures and the unit, "27.5 cm³"."""
    shown = Amount(kind, round(rounded(micro / PER_UNIT[kind], 4) * PER_UNIT[kind]))
    return re.sub(r"\s", TIED, format_amount(shown))


def measured(micro: int, kind: Kind) -> str:
    """An amount to take, to what a person can read off: "6.61 cm³", "20.7 cm³", "432 cm³".

    Volumes below 10 cm³ have two decimals, below 100 cm³ one, from there none (common practice,
    no source); masses, and drops below 0.1 cm³ that would lose more than they may, are as
    `amount` has them.
    """
    cm3 = micro / PER_UNIT[kind]
    if kind is not Kind.VOLUME or cm3 < 0.1:
        return amount(micro, kind)
    # the size that counts is the one shown: 9.996 is 10.0
    places = 2 if round(cm3, 2) < 10 else 1 if round(cm3, 1) < 100 else 0
    return amount(round(round(cm3, places) * PER_UNIT[kind]), kind)


def raised(text: str) -> str:
    """Text with its cm3 and dm3 written as they are printed: cm³, dm³."""
    return re.sub(r"\b([cdm]m)3\b", r"\1³", text)


def named(item: str, strength: str) -> str:
    """An item with its strength: "sodium thiosulfate 0.200 mol/dm³"."""
    return raised(f"{item} {strength.replace(' ', TIED)}".strip())


def counted(number: int, noun: str) -> str:
    """A count with its noun: "1 guess", "3 guesses", "2 bookings"."""
    if number == 1:
        return f"1 {noun}"
    return f"{number} {noun}{'es' if noun.endswith(('s', 'h', 'x')) else 's'}"


def listed(names: Iterable[str]) -> str:
    """Names in a row: "K08, K09"."""
    return ", ".join(names)


def source(draw: Draw) -> str:
    """One source of a make or a need: "27.5 cm³ of S01", "5 g of starch, soluble (M03)"."""
    origin = draw.bottle or named(draw.item, "")
    made = f" ({draw.make})" if draw.make and not draw.bottle else ""
    return f"{amount(draw.amount, draw.kind)} of {origin}{made}"


def by_bottle(draws: Iterable[Draw]) -> list[Draw]:
    """The draws with each bottle once: what is entered already and the rest are one draw of it."""
    found: dict[str, Draw] = {}
    rest: list[Draw] = []
    for draw in draws:
        before = found.get(draw.bottle)
        if not draw.bottle:
            rest.append(draw)
        elif before is None:
            found[draw.bottle] = draw
        else:
            found[draw.bottle] = replace(before, amount=before.amount + draw.amount)
    return [*found.values(), *rest]


def money(pence: int) -> str:
    """Pence as pounds: "£14.50"."""
    return f"£{pence // 100}.{pence % 100:02d}"
