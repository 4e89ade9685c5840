"""How a strength runs: label, found and expected, by which law, how warm it stood, until when.

What is not found is told to two figures; a day is the day the law gives.
"""

from __future__ import annotations

from datetime import date
from typing import Any

from stockroom.keeping.course import Course, Fading, Mark, Stood
from stockroom.keeping.rule_words import rule_in_words
from stockroom.measure.formats import format_number, unit_mark
from stockroom.reports.sheet import CAUTION, PRACTICE, columns, wrap
from stockroom.reports.words import TIED, day, raised

# a bottle of a common line has more bookings than anybody reads; --json has them all
_MOST_BOOKED = 4


def two(number: float) -> str:
    """A number that nobody found, to two figures: "124" becomes "120", never "1.2e2"."""
    return format_number(float(f"{number:.1e}"), 2) if number else "0"


class Scale:
    """Writes strengths of a line in its label's unit: `one` is how many that makes of one."""

    def __init__(self, unit: str, one: float) -> None:
        self.unit, self.one = unit_mark(unit), one

    def expected(self, strength: float) -> str:
        """A strength nobody found, to two figures."""
        return f"{two(strength * self.one)}{TIED}{self.unit}"

    def written(self, strength: float, figures: int = 4) -> str:
        """A strength from a label or a titration."""
        return f"{format_number(strength * self.one, figures)}{TIED}{self.unit}"


def fades_text(of: Fading, width: int) -> str:
    """The course of one bottle under its name, one thing a row."""
    found, scale = of.course, Scale(*of.shown)
    rows = [
        *_strengths(found, scale),
        ("law", _law(found, of.unit)),
        *([("figures", of.cited)] if of.cited else []),
        *_warmth(found),
        *_lives(found),
        *_marks(of, scale),
        *(("guess", doubt) for doubt in found.doubts),
    ]
    lines = [wrap(f"{of.bottle} {of.line}, as at {day(of.on)}", width), *columns(rows, width)]
    lines.append(wrap(CAUTION, width, hang=0))
    return "\n".join([PRACTICE, *lines] if of.practice else lines)


def _strengths(found: Course, scale: Scale) -> list[tuple[str, str]]:
    known = found.strengths
    rows = [("label", "none" if known.nominal is None else scale.written(known.nominal))]
    if known.found is not None and known.found_on is not None:
        doubt = ""
        if known.uncertainty is not None:
            doubt = f", standard uncertainty {scale.written(known.uncertainty, 2)}"
        rows.append(("found", f"{scale.written(known.found)} on {day(known.found_on)}{doubt}"))
    else:
        rows.append(("found", "never"))
    return [*rows, ("expected", _expected(found, scale))]


def _expected(found: Course, scale: Scale) -> str:
    known = found.strengths
    if known.expected is None:
        return "not known: no strength on its label, and none found"
    words = f"{scale.expected(known.expected)}, from what its {_basis(found)}"
    if known.lowest is not None and known.highest is not None:
        # a range of two figures would often be no range
        low, high = (scale.written(end, 3) for end in (known.lowest, known.highest))
        words += f"; {low} to {high} with about 95 % certainty"
    if known.nominal:
        words += f"; {two(100 * known.expected / known.nominal)} % of its label"
    return words


def _basis(found: Course) -> str:
    return "last result was" if found.strengths.basis == "found" else "label says"


def _law(found: Course, unit: str) -> str:
    if found.rule is None:
        return "no law of fading is entered for this line: its strength is taken to stay"
    words = rule_in_words(found.rule, unit) + ("; a rule of the house" * found.rule.house)
    if found.since is None:
        return f"{words}; not {found.rule.origin} yet, so as strong as its label"
    return f"{words}; counted from {day(found.since)}"


def _warmth(found: Course) -> list[tuple[str, str]]:
    rows = [("stood", _stay(stay)) for stay in found.stood] or [("stood", "no place written down")]
    if found.kinetic is not None:
        since = found.strengths.found_on or found.since
        words = f"mean kinetic temperature {found.kinetic:.1f} °C"
        rows.append(("", f"{words} since {since}" if since else words))
    return rows


def _stay(stay: Stood) -> str:
    own = "its own °C not known" if stay.temperature_c is None else f"{stay.temperature_c:g} °C"
    words = f"{stay.place} {stay.since} to {stay.until}"
    if not stay.logged_days:
        return f"{words} at {own}" if stay.temperature_c is not None else f"{words}, {own}"
    kinetic = f", mean kinetic {stay.kinetic:.1f} °C" if stay.kinetic is not None else ""
    whole = (stay.until - stay.since).days
    rest = "" if stay.logged_days >= whole else f", the rest at {own}"
    return f"{words}, logged {two(stay.logged_days)} of {whole} days{kinetic}{rest}"


def _lives(found: Course) -> list[tuple[str, str]]:
    if found.rule is None or found.strengths.expected is None:
        return []
    where = "" if found.here_c is None else f" at {found.here_c:g} °C"
    if found.t90 is None or found.half is None:
        return [("t90", f"never{where}")]
    return [
        ("t90", f"a tenth is gone in {two(found.t90)} days{where}, half in {two(found.half)} days")
    ]


def _marks(of: Fading, scale: Scale) -> list[tuple[str, str]]:
    found = of.course
    # what does not fade, or not yet, would only be said never to
    if found.since is None:
        return []
    plain = [mark for mark in found.marks if mark.by is None]
    booked = [mark for mark in found.marks if mark.by is not None]
    # those it fails first: they are what somebody must do something about
    booked.sort(key=lambda mark: (mark.in_time, mark.by))
    rows = [_mark(mark, scale, of.on) for mark in [*plain, *booked[:_MOST_BOOKED]]]
    if len(booked) > _MOST_BOOKED:
        rows.append(f"and {len(booked) - _MOST_BOOKED} bookings more")
    return [("falls" if at == 0 else "", row) for at, row in enumerate(rows)]


def _mark(mark: Mark, scale: Scale, today: date) -> str:
    when = f"on {day(mark.on)}" if mark.on else "never in a hundred years"
    when = "already" if mark.on and mark.on <= today else when
    if mark.by is None:
        named = mark.what if mark.what[0].isdigit() else scale.written(mark.strength)
        own = scale.written(mark.strength)
        same = raised(named).replace(TIED, " ") == own.replace(TIED, " ")
        return f"below {named}{'' if same else f' ({own})'} {when}"
    held = "strong enough" if mark.in_time else "TOO WEAK by then"
    need = f"{mark.what} on {day(mark.by)} wants {scale.written(mark.strength)}"
    return f"{need}: {held}, below it {when}"


def fades_json(of: Fading) -> dict[str, Any]:
    """The same as data: strengths in `unit`; `label_unit` is what the label counts in."""
    found, known = of.course, of.course.strengths
    return {
        "bottle": of.bottle,
        "item": of.line,
        "as_at": of.on.isoformat(),
        "unit": of.unit,
        "label_unit": {"unit": of.shown[0], "per_unit": of.shown[1]},
        "nominal": known.nominal,
        "found": known.found,
        "found_on": known.found_on and known.found_on.isoformat(),
        "uncertainty": known.uncertainty,
        "expected": known.expected,
        "lowest": known.lowest,
        "highest": known.highest,
        "basis": known.basis,
        "law": found.rule and rule_in_words(found.rule, of.unit),
        "law_source": of.cited,
        "counted_from": found.since and found.since.isoformat(),
        "stood": [_stay_json(stay) for stay in found.stood],
        "mkt": found.kinetic,
        "t90_days": found.t90,
        "half_life_days": found.half,
        "falls_below": [_mark_json(mark) for mark in found.marks],
        "guesses": list(found.doubts),
        "practice": of.practice,
    }


def _stay_json(stay: Stood) -> dict[str, Any]:
    return {
        "place": stay.place,
        "from": stay.since.isoformat(),
        "to": stay.until.isoformat(),
        "temperature_c": stay.temperature_c,
        "logged_days": stay.logged_days,
        "mkt": stay.kinetic,
    }


def _mark_json(mark: Mark) -> dict[str, Any]:
    return {
        "what": mark.what,
        "strength": mark.strength,
        "on": mark.on and mark.on.isoformat(),
        "wanted_on": mark.by and mark.by.isoformat(),
        "in_time": mark.in_time,
    }
