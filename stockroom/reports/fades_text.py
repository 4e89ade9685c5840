"""How a strength runs: label, found and expected, by which law, how warm it stood, until when.

What is not found is told to two figures; a day is the day the law gives.
"""

from __future__ import annotations

from datetime import date
from typing import Any

from stockroom.keeping.course import Course, Fading, Mark, Stood
from stockroom.keeping.laws import response_of
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

    def expected(self, strength: float, start: float | None = None) -> str:
        """A strength nobody found, to two figures.

        To more where two would read stronger than the `start` it has come from.
        """
        rounded = float(f"{strength * self.one:.1e}")
        if start is None or rounded <= start * self.one:
            return f"{two(strength * self.one)}{TIED}{self.unit}"
        over = float(f"{strength * self.one:.2e}") > start * self.one
        return self.written(strength, 4 if over else 3)

    def written(self, strength: float, figures: int = 4) -> str:
        """A strength from a label or a titration."""
        return f"{format_number(strength * self.one, figures)}{TIED}{self.unit}"


def fades_text(of: Fading, width: int) -> str:
    """The course of one bottle under its name, one thing a row."""
    rows = [*strength_rows(of), *course_rows(of)]
    lines = [wrap(f"{of.bottle} {of.line}, as at {day(of.on)}", width), *columns(rows, width)]
    lines.append(wrap(CAUTION, width, hang=0))
    return "\n".join([PRACTICE, *lines] if of.practice else lines)


def strength_rows(of: Fading) -> list[tuple[str, str]]:
    """The three strengths, never mixed: label, found, expected, each with what is said of it."""
    return _strengths(of, Scale(*of.shown))


def course_rows(of: Fading) -> list[tuple[str, str]]:
    """Its law, how warm it stood, how fast it goes, until when; "" goes on from the row above."""
    found, scale = of.course, Scale(*of.shown)
    return [
        *_law(of),
        *([("figures", of.cited)] if of.cited else []),
        *_warmth(found),
        *_lives(found),
        *_marks(of, scale),
        *(("guess", doubt) for doubt in found.doubts),
    ]


def _strengths(of: Fading, scale: Scale) -> list[tuple[str, str]]:
    found = of.course
    known = found.strengths
    rows = [("label", "none" if known.nominal is None else _label(of, known.nominal, scale))]
    if known.found is not None and known.found_on is not None:
        doubt = ""
        if known.uncertainty is not None:
            doubt = f", standard uncertainty {scale.written(known.uncertainty, 2)}"
        rows.append(("found", f"{scale.written(known.found)} on {day(known.found_on)}{doubt}"))
    else:
        rows.append(("found", "never"))
    return [*rows, ("expected", _expected(found, scale))]


def _label(of: Fading, nominal: float, scale: Scale) -> str:
    own = scale.written(nominal)
    if not of.label:
        return own
    text = raised(of.label)
    # a label in % w/w is counted in another unit from here on
    return text if text.endswith(scale.unit) else f"{text} ({own})"


def _expected(found: Course, scale: Scale) -> str:
    known = found.strengths
    if known.expected is None:
        return "not known: no strength on its label, and none found"
    start = known.nominal if known.found is None else known.found
    words = f"{scale.expected(known.expected, start)}, from what its {_basis(found)}"
    if known.lowest is not None and known.highest is not None:
        # a range of two figures would often be no range
        low, high = (scale.written(end, 3) for end in (known.lowest, known.highest))
        words += f"; {low} to {high} with about 95 % certainty"
    if known.nominal:
        words += f"; {two(100 * known.expected / known.nominal)} % of its label"
    return words


def _basis(found: Course) -> str:
    return "last result was" if found.strengths.basis == "found" else "label says"


def _law(of: Fading) -> list[tuple[str, str]]:
    found = of.course
    if found.rule is None:
        # what has no strength has none to keep
        stays = "no law of fading is entered for this line: its strength is taken to stay"
        return [("law", stays)] if found.strengths.expected is not None else []
    words = rule_in_words(found.rule, of.unit, of.shown)
    words += "; a rule of the house" * found.rule.house
    if found.since is None:
        return [("law", f"{words}; not {found.rule.origin} yet, so as strong as its label")]
    return [("law", f"{words}; counted from {day(found.since)}")]


def _own_c(found: Course) -> float | None:
    """The °C its law counts from; None where it leaves warmth out of account."""
    law = found.rule.law if found.rule else None
    response = response_of(law) if law else None
    return response.at_c if response else None


def _warmth(found: Course) -> list[tuple[str, str]]:
    own = _own_c(found)
    rows = [("stood", _stay(stay, own)) for stay in found.stood]
    rows = rows or [("stood", "no place written down")]
    if found.kinetic is not None:
        since = found.strengths.found_on or found.since
        words = f"mean kinetic temperature {found.kinetic:.1f} °C"
        rows.append(("", f"{words} since {since}" if since else words))
    return rows


def _stay(stay: Stood, counted_c: float | None) -> str:
    counted = "" if counted_c is None else f", counted at {counted_c:g}{TIED}°C"
    own = f"with its own °C not known{counted}"
    if stay.temperature_c is not None:
        own = f"at {stay.temperature_c:g}{TIED}°C"
    words = f"{stay.place} {stay.since} to {stay.until}"
    if not stay.logged_days:
        return f"{words} {own}"
    kinetic = f", mean kinetic {stay.kinetic:.1f}{TIED}°C" if stay.kinetic is not None else ""
    whole = (stay.until - stay.since).days
    rest = "" if stay.logged_days >= whole else f", the rest {own}"
    days, hours = stay.logged_days, two(24 * stay.logged_days)
    logged = two(days) if days >= 1 else f"{hours}{TIED}h"
    return f"{words}, logged {logged} of {whole} days{kinetic}{rest}"


def _lives(found: Course) -> list[tuple[str, str]]:
    if found.rule is None or found.strengths.expected is None:
        return []
    plain = _own_c(found) is None
    where = "" if plain or found.here_c is None else f" at {found.here_c:g} °C"
    if found.t90 is None or found.half is None:
        return [("t90", f"never{where}")]
    times = f"a tenth is gone in {two(found.t90)} days{where}, half in {two(found.half)} days"
    # of order 1 it takes as long from any strength
    law = found.rule.law
    of_label = law is not None and law.order != 1 and found.strengths.nominal
    warmth = "warmth is left out of account: the law names no factor per 10 °C"
    return [("t90", times + ", from its label" * bool(of_label)), *[("", warmth)] * plain]


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
        named, own = mark.what, scale.written(mark.strength)
        same = _alike(named) == _alike(own)
        return f"below {named}{'' if same else f' ({own})'} {when}"
    held = "strong enough" if mark.in_time else "TOO WEAK by then"
    need = f"{mark.what} on {day(mark.by)} wants {scale.written(mark.strength)}"
    return f"{need}: {held}, below it {when}"


def _alike(text: str) -> str:
    """A strength without what may be written in two ways: "97.0 vol" and "97 vol"."""
    number, _, unit = raised(text).replace(TIED, " ").partition(" ")
    return f"{float(number):g} {unit}" if number.replace(".", "", 1).isdigit() else text


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
