"""What changed since a plan was kept, and what would change if; each with its cause."""

from __future__ import annotations

from typing import Any

from stockroom.planning.changing.changes import About, Change, Comparison, What
from stockroom.planning.changing.kept import KeptPlan
from stockroom.reports.sheet import PRACTICE, columns, foot, page, section, wrap
from stockroom.reports.words import counted, day, money

_HEADINGS = {
    About.BOOKING: "BOOKINGS",
    About.NEED: "NEEDS",
    About.MAKE: "MAKES",
    About.ORDER: "ORDERS",
    About.CHECK: "CHECKS",
}
PAST = "Past, and nothing was entered for it"
"""The heading over what nobody can say was done."""


def changed_text(
    comparison: Comparison, width: int, *, against: str, by: str, house: str, practice: bool
) -> str:
    """The changes since a plan was kept: the count first, then by kind, then what was done.

    `against` is the kept plan's number, `by` who kept it. PRACTICE stands on the first line.
    """
    kept, now = comparison.before, comparison.after
    about = f"{house}: kept as at {day(kept.as_at)} by {by}, held against {day(now.as_at)}."
    first = since_kept(comparison, against)
    puzzling = _puzzling(comparison)
    following = (f"stockroom why {puzzling}",) if puzzling else ()
    return page(
        [
            _first(first, practice) + "\n" + wrap(about, width),
            *_sections(comparison, width),
            section("DONE", columns(rows_done(comparison), width)),
            section(PAST.upper(), columns(rows_past(comparison), width)),
            section("ALTOGETHER", columns(totals(comparison), width)) if comparison.open else "",
            foot(width, *following, "stockroom plan"),
        ]
    )


def what_if_text(
    comparison: Comparison, width: int, *, asked: tuple[str, ...], house: str, practice: bool
) -> str:
    """What would change: the count first, then by kind, then minutes and money."""
    first = if_so(comparison)
    about = f"{house}, as at {day(comparison.after.as_at)}, if {'; '.join(asked)}:"
    return page(
        [
            _first(first, practice) + "\n" + wrap(about, width),
            *_sections(comparison, width),
            section("ALTOGETHER", columns(totals(comparison), width)) if comparison.open else "",
            wrap("Nothing was written.", width),
            foot(width, "stockroom plan"),
        ]
    )


def _first(text: str, practice: bool) -> str:
    # the count comes first even in the practice college, as YES and NO do in `ready`
    return f"{text}   {PRACTICE}" if practice else text


def since_kept(comparison: Comparison, against: str) -> str:
    """How much changed since the plan of a number was kept: "3 changes since ...; 2 done"."""
    count = len(comparison.open)
    first = f"{counted(count, 'change')} since plan {against} was kept"
    if not count:
        first = f"nothing changed since plan {against}"
    kinds = ((_done_as(comparison, what), what) for what in (What.DONE, What.PAST))
    tail = [f"{len(each)} {what}" for each, what in kinds if each]
    return first + (f"; {', '.join(tail)}" if tail else "")


def if_so(comparison: Comparison) -> str:
    """How much would change: "7 changes if so"."""
    count = len(comparison.open)
    return f"{counted(count, 'change')} if so" if count else "nothing would change"


def headed(comparison: Comparison) -> list[tuple[str, list[tuple[str, str]]]]:
    """The changes under their headings, none of them empty: (number, what and why) each."""
    found = [
        (heading, _rows([change for change in comparison.open if change.about is about]))
        for about, heading in _HEADINGS.items()
    ]
    return [(heading, rows) for heading, rows in found if rows]


def rows_done(comparison: Comparison) -> list[tuple[str, str]]:
    """What was carried out since, (number, what) each."""
    return _rows(_done_as(comparison, What.DONE))


def rows_past(comparison: Comparison) -> list[tuple[str, str]]:
    """One row a kind: what is past needs no telling line by line."""
    rows = []
    for about, heading in _HEADINGS.items():
        alike = [change for change in _done_as(comparison, What.PAST) if change.about is about]
        told = [c.ref if about is About.BOOKING else f"{c.ref} {c.item}" for c in alike]
        rows += [(heading.lower(), "; ".join(told))] if told else []
    return rows


def _sections(comparison: Comparison, width: int) -> list[str]:
    return [section(heading, columns(rows, width)) for heading, rows in headed(comparison)]


def _done_as(comparison: Comparison, what: What) -> list[Change]:
    return [change for change in comparison.done if what in change.what]


def _rows(changes: list[Change]) -> list[tuple[str, str]]:
    return [(_number(change), _told(change)) for change in changes]


def _number(change: Change) -> str:
    """The number on the printed copy, and the one it has now where that is another."""
    if not change.ref:
        return f"new {change.now}"
    if change.now in ("", change.ref):
        return change.ref
    return f"{change.ref} (now {change.now})"


def _told(change: Change) -> str:
    # "gone" and "added" are said outright: the words behind them tell what it was or is
    marks = [mark for mark in ("gone", "added") if mark in change.what]
    text = ", ".join([*marks, change.text])
    cause = "" if change.done else f": {change.cause}"
    return f"{change.item}: {text}{cause}"


def totals(comparison: Comparison) -> list[tuple[str, str]]:
    """Minutes, money and what cannot be had: before and after, or once where it is the same."""
    was, now = comparison.before, comparison.after
    short_was, short_now = _shorts(was, now)
    return [
        ("hands-on", _from_to(f"{was.minutes} min", f"{now.minutes} min")),
        ("orders", _from_to(money(was.pence), money(now.pence))),
        ("cannot be had", _from_to(counted(short_was, "need"), counted(short_now, "need"))),
    ]


def _from_to(old: str, new: str) -> str:
    return new if old == new else f"{old} → {new}"


def _shorts(was: KeptPlan, now: KeptPlan) -> tuple[int, int]:
    return sum(bool(need.short) for need in was.needs), sum(bool(n.short) for n in now.needs)


def _puzzling(comparison: Comparison) -> str:
    """The reference most worth asking about: one that is still in the plan; "" for none."""
    there = (change.now for change in comparison.open if What.GONE not in change.what)
    return next((number for number in there if number), "")


def changed_json(
    comparison: Comparison, *, against: str, by: str, practice: bool
) -> dict[str, Any]:
    """The same as data: `count` leaves out what is done; days are ISO text, money pounds."""
    kept = comparison.before
    return {
        "as_at": comparison.after.as_at.isoformat(),
        "practice": practice,
        "plan": against,
        "kept": {"as_at": kept.as_at.isoformat(), "by": by, "cautious": kept.cautious},
    } | _changes_json(comparison)


def what_if_json(
    comparison: Comparison, *, asked: tuple[str, ...], practice: bool
) -> dict[str, Any]:
    """What would change, as data; `if` is what was asked, in words."""
    return {
        "as_at": comparison.after.as_at.isoformat(),
        "practice": practice,
        "if": list(asked),
    } | _changes_json(comparison)


def _changes_json(comparison: Comparison) -> dict[str, Any]:
    was, now = comparison.before, comparison.after
    short_was, short_now = _shorts(was, now)
    return {
        "count": len(comparison.open),
        "changes": [_change(change) for change in comparison.open],
        "done": [_change(change) for change in comparison.done],
        "minutes": {"before": was.minutes, "after": now.minutes},
        "cost": {"before": was.pence / 100, "after": now.pence / 100},
        "short": {"before": short_was, "after": short_now},
    }


def _change(change: Change) -> dict[str, Any]:
    return {
        "about": change.about.value,
        "ref": change.ref or None,
        "now": change.now or None,
        "item": change.item,
        "what": [what.value for what in change.what],
        "text": change.text,
        "cause": change.cause,
    }
