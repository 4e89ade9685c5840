"""How a typed strength fades by a typed law: the law as it stands, its times, and its days."""

from __future__ import annotations

import math
from collections.abc import Callable
from datetime import date
from typing import Any

from stockroom.keeping import hypochlorite
from stockroom.keeping.typed_law import DAYS_PER, FadingSum
from stockroom.measure.formats import format_number, unit_mark
from stockroom.reports.fades_text import two
from stockroom.reports.sheet import wrap
from stockroom.reports.words import day, raised

_ORDERS = {0: "zero order", 1: "first order", 2: "second order"}
# a rate counted in these says nothing of moments: times are then told in days
_LONG = ("week", "month", "year")
# as with a bottle, what lasts longer is not counted
_CENTURY = 36525


def fades_sum_text(found: FadingSum, width: int) -> str:
    """The times on the first line; then the law, the strengths asked about, and the doubts."""
    lines = [
        f"{found.strength.text}: {_gone(found)}{_at(found)}",
        *(f"  {line}" for line in _details(found)),
    ]
    return "\n".join(
        wrap(raised(line.strip()), width, indent=2 if line[0] == " " else 0) for line in lines
    )


def _gone(found: FadingSum) -> str:
    if math.isinf(found.t90):
        return "it never fades"
    return f"a tenth is gone in {_span(found, found.t90)}, half in {_span(found, found.half)}"


def _details(found: FadingSum) -> list[str]:
    lines = [_law(found)]
    if found.energy is not None and found.factor is not None:
        lines.append(
            f"Ea {format_number(found.energy)} kJ/mol is a factor of"
            f" {format_number(found.factor)} per 10 °C there"
        )
    if found.after is not None:
        days, left = found.after
        unit = unit_mark(str(found.strength.unit))
        lines.append(f"after {_exactly(found, days)}: {two(left)} {unit} left")
    if found.below is not None:
        asked, days, first = found.below
        lines.append(f"below {asked} {_when(found, days, first)}")
    lines += [f"source: {hypochlorite.SOURCE}"] * bool(found.law.named)
    return [*lines, *(f"! {doubt}" for doubt in found.doubts)]


def _when(found: FadingSum, days: float, first: date | None) -> str:
    if days == 0:
        return "already"
    if math.isinf(days):
        return "never"
    # a reaction over in a day is not dated
    dated = f": from {day(first)} if it starts today" if first and days >= 1 else ""
    return f"after {_span(found, days)}{dated}"


def _law(found: FadingSum) -> str:
    of = unit_mark(found.rate_of)
    per = {0: f"{of} per {found.per}", 1: f"per {found.per}", 2: f"per {of} and {found.per}"}
    name = f"the {found.law.named} law, " if found.law.named else ""
    words = (
        f"{name}{_ORDERS[found.order]}: {format_number(found.rate)} {per[found.order]}{_at(found)}"
    )
    if not found.law.named and found.times != 1.0:
        words += f", {format_number(found.times)} times as fast as at {found.law.at_c:g} °C"
    return words


def _at(found: FadingSum) -> str:
    return "" if found.here_c is None else f" at {found.here_c:g} °C"


def _span(found: FadingSum, days: float) -> str:
    return _told(found, days, two)


def _exactly(found: FadingSum, days: float) -> str:
    return _told(found, days, format_number)


def _told(found: FadingSum, days: float, say: Callable[[float], str]) -> str:
    if days > _CENTURY:
        return "more than a hundred years"
    if 0 < days < DAYS_PER["second"]:
        return "less than a second"
    unit = "day" if found.per in _LONG else found.per
    told = say(days / DAYS_PER[unit])
    return f"{told} {unit}{'' if told == '1' else 's'}"


def fades_sum_json(found: FadingSum) -> dict[str, Any]:
    """The same as numbers, to six figures; times in days, null for never."""
    after, below = found.after, found.below
    return {
        "strength": found.strength.value,
        "unit": str(found.strength.unit),
        "order": found.order,
        "rate": _six(found.rate),
        "rate_of": found.rate_of,
        "rate_per": found.per,
        "temperature_c": found.here_c,
        "times_as_fast": _six(found.times),
        "ea_kj_mol": _six(found.energy),
        "factor_per_10c": _six(found.factor),
        "t90_days": _six(found.t90),
        "half_life_days": _six(found.half),
        "after": after and {"days": _six(after[0]), "strength": _six(after[1])},
        "falls_below": below
        and {
            "strength": below[0],
            "days": _six(below[1]),
            "on": below[2] and below[2].isoformat(),
        },
        "guesses": list(found.doubts),
        "practice": False,
    }


def _six(number: float | None) -> float | None:
    # JSON knows no infinity, and never is better said by nothing
    return None if number is None or math.isinf(number) else float(f"{number:.6g}")
