"""What the checks teach, told: how fast, how sure, how long it keeps, and what to type."""

from __future__ import annotations

import math
from datetime import date
from typing import Any

from stockroom.keeping.fits import Fit
from stockroom.keeping.pooling import LEVEL, Test
from stockroom.measure.formats import format_number, unit_mark
from stockroom.planning.amounts import say_strength
from stockroom.planning.learn import Lesson, Taught, fading_cells, in_short, life_cells
from stockroom.reports.sheet import PRACTICE, columns, foot, page, section, wrap
from stockroom.reports.words import TIED, counted, day, listed, rounded

_DAYS_PER_MONTH = 30.4375


def learn_text(found: Lesson, width: int, *, by: str = "", practice: bool = False) -> str:
    """The rate, its interval and the keeping time first; then the grounds and what to type."""
    answer = [_title(found), _loss(found), _keeps(found)]
    top = "\n".join([PRACTICE] * practice + [wrap(line, width) for line in answer])
    return page(
        [
            top,
            section("HOW IT WAS FOUND", [wrap(x, width, indent=2) for x in _grounds(found)]),
            section("BOTTLES", columns([_bottle(found, one) for one in found.bottles], width)),
            section("LEFT OUT", [f"  {one.subject}: {one.text}" for one in found.left_out]),
            # whole on its line, however long: it is there to be typed
            section("TO MAKE IT A RULE OF THE HOUSE", [f"  {x}" for x in commands(found, by)]),
            foot(width),
        ]
    )


def commands(found: Lesson, by: str = "") -> list[str]:
    """The commands that would make the rate, or the keeping time, the house's rule.

    None while the rate may be nothing at all. `by` is whose initials to put in.
    """
    if not found.rate.clear:
        return []
    life = life_cells(found)
    rows = [("fades", fading_cells(found)), *([("life", life)] if life else [])]
    return [_command(found, rule, cells, by or "INITIALS") for rule, cells in rows]


def learn_json(found: Lesson, *, by: str = "", practice: bool = False) -> dict[str, Any]:
    """The same as data: rates per day in the line's unit, losses in per cent, lives in days."""
    rate, pooled = found.rate, found.learnt.pooled
    return {
        "as_at": found.question.as_at.isoformat(),
        "practice": practice,
        "about": found.about,
        "item": found.line.key,
        "unit": found.line.unit,
        "order": found.learnt.order,
        "rate_per_day": {"value": rate.value, "low": rate.low, "high": rate.high},
        "percent_a_month": _monthly(found),
        "at_c": found.at_c,
        "counted_from": found.origin.value,
        "model": found.learnt.model,
        "slopes": _test_json(pooled.slopes) if pooled else None,
        "intercepts": _test_json(pooled.intercepts) if pooled else None,
        "needed": {"percent": rounded(100 * found.question.part, 6), "strength": found.lowest},
        "life_days": _finite(found.life),
        "decides": found.decides,
        "life_days_own_scatter": _finite(found.own_scatter[1]) if found.own_scatter else None,
        "other_lives": [
            {"percent": rounded(100 * part, 6), "life_days": _finite(life)}
            for part, life in found.other_lives
        ],
        "lines": [_line_json(name, fit) for name, fit in found.learnt.fits.items()],
        "bottles": [_bottle_json(one) for one in found.bottles],
        "left_out": [{"bottle": one.subject, "text": one.text} for one in found.left_out],
        "commands": commands(found, by),
    }


def _title(found: Lesson) -> str:
    series = found.learnt.series
    days = sorted(on for one in series for on in one.days)
    of = f" of {listed(one.bottle for one in series)}" if not found.question.number else ""
    what = found.line.key if not of else found.about
    number = f"{found.question.number} " if found.question.number else ""
    checks = counted(len(days), "check")
    return f"{number}{what}: {checks}{of}, {day(days[0])} to {day(days[-1])}"


def _monthly(found: Lesson) -> dict[str, float]:
    rate = found.rate
    rates = {"value": rate.value, "low": rate.low, "high": rate.high}
    return {name: rounded(found.monthly(each), 4) for name, each in rates.items()}


def _loss(found: Lesson) -> str:
    loss = _monthly(found)
    value, high = (format_number(loss[key], 2) for key in ("value", "high"))
    low = format_number(loss["low"], 2) if found.rate.clear else "none"
    words = f"It loses {value}{TIED}% a month{_at(found)}, {low} to {high} (95{TIED}% interval)"
    return words + ("." if found.rate.clear else ": too early to tell it from no loss at all.")


def _at(found: Lesson) -> str:
    """The °C the answer is for, where one is known: elsewhere it is another."""
    return "" if found.at_c is None else f" at {found.at_c:g}{TIED}°C"


def _keeps(found: Lesson) -> str:
    percent = format_number(100 * found.question.part, 3)
    needed = say_strength(found.line, found.lowest)
    if found.life <= 0:
        return f"It keeps no time at {percent}{TIED}%: the limit starts below {needed}."
    whose = f"; {found.decides}, which falls below it first, decides" if _differ(found) else ""
    if math.isinf(found.life):
        return f"It never falls below {percent}{TIED}% of its label ({needed})."
    return (
        f"Keep it {_days(found.life)}{_at(found)} for {percent}{TIED}% of its label ({needed}): so "
        f"long its mean is above that, 95{TIED}% sure{whose}."
    )


def _other(part: float, life: float) -> str:
    percent = f"{format_number(100 * part, 3)}{TIED}%"
    return f"{percent} for {_days(life)}" if life > 0 else f"{percent}: the limit starts below"


def _days(life: float) -> str:
    if math.isinf(life):
        return "for ever"
    whole = math.floor(life)
    weeks = f" ({format_number(whole / 7, 2)} weeks)" if 14 <= whole < 84 else ""
    months = f" ({format_number(whole / _DAYS_PER_MONTH, 2)} months)" if whole >= 84 else ""
    return f"{counted(whole, 'day')}{weeks or months}"


def _differ(found: Lesson) -> bool:
    return len(set(found.learnt.fits.values())) > 1


def _grounds(found: Lesson) -> list[str]:
    learnt, rate = found.learnt, found.rate
    per = {1: "a day", 0: f"{unit_mark(found.line.unit)} a day"}
    unit = per.get(learnt.order, f"per {unit_mark(found.line.unit)} and day")
    value, high = (format_number(x, 3) for x in (rate.value, rate.high))
    # a rate below nothing would be a gain, and is told as the loss above is
    low = format_number(rate.low, 3) if rate.clear else "none"
    since = found.question.since or found.origin
    told = [
        f"order {learnt.order}, {value} {unit}{_at(found)}, {low} to {high}; days from {since}",
        "; ".join(_other(part, life) for part, life in found.other_lives),
    ]
    return [*told, *_tests(found), *_doubts(found)]


def _tests(found: Lesson) -> list[str]:
    pooled = found.learnt.pooled
    if pooled is None or pooled.slopes is None or pooled.intercepts is None:
        return []
    told = [
        f"{pooled.model}: slopes {_test(pooled.slopes)}, starts {_test(pooled.intercepts)} "
        f"(alike from p {LEVEL:g} up, as in ICH Q1E)"
    ]
    if found.own_scatter:
        bottle, life = found.own_scatter
        told.append(
            f"to the tenth, {_tenths(found.life)} with one scatter for all; with each bottle's own "
            f"{_tenths(life)}, and {bottle} decides"
        )
    return told


def _tenths(life: float) -> str:
    return f"{life:.1f} days" if math.isfinite(life) else "for ever"


def _test(test: Test) -> str:
    chance = f"p {test.p:.3f}" if test.p >= 0.001 else "p below 0.001"
    return f"F {test.f:.3f} with {test.df1} and {test.df2}, {chance}"


def _doubts(found: Lesson) -> list[str]:
    told = []
    if found.checked_to < found.life < math.inf:
        told.append(
            f"nothing was checked older than {counted(math.floor(found.checked_to), 'day')}"
            f"{_at(found) if found.by_law else ''}: titrate again before the keeping time is over"
        )
    if found.at_c is None:
        told.append("where it stood was not of one known temperature: the rate is for what it was")
    return told


def _bottle(found: Lesson, one: Taught) -> tuple[str, str]:
    expected, least = (say_strength(found.line, x) for x in (one.expected, one.at_least))
    needed = say_strength(found.line, found.lowest)
    below = f"below {needed} from {day(one.below_on)}" if one.below_on else f"not below {needed}"
    return one.bottle, (
        f"{counted(one.checks, 'check')}, the last {day(one.last)}; expected {expected} on "
        f"{day(found.question.as_at)}, at least {least}; {below}"
    )


def _command(found: Lesson, rule: str, cells: dict[str, str], by: str) -> str:
    typed = " ".join(f"{column}={_quoted(cell)}" for column, cell in cells.items())
    why = in_short(found)
    return f'stockroom rule "{found.line.key}" {rule} {typed} --why "{why}" --by {by}'


def _quoted(cell: str) -> str:
    return f'"{cell}"' if " " in cell else cell


def _finite(life: float) -> float | None:
    # not rounded: it is to be compared with other people's figures
    return life if math.isfinite(life) else None


def _test_json(test: Test | None) -> dict[str, float] | None:
    if test is None:
        return None
    return {"f": test.f, "df1": test.df1, "df2": test.df2, "p": test.p, "f_nested": test.nested}


def _line_json(name: str, fit: Fit) -> dict[str, Any]:
    return {"bottle": name, "start": fit.start, "slope": fit.slope, "scatter": fit.scatter,
            "df": fit.df}  # fmt: skip


def _bottle_json(one: Taught) -> dict[str, Any]:
    return {
        "bottle": one.bottle,
        "checks": one.checks,
        "last": one.last.isoformat(),
        "expected": one.expected,
        "at_least": one.at_least,
        "below_on": _iso(one.below_on),
    }


def _iso(when: date | None) -> str | None:
    return when.isoformat() if when else None
