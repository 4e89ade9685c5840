"""What the morning note says of the shelf: what stands wrong, what waits, what was not entered."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass
from datetime import timedelta

from stockroom.findings import Danger, DangerKind
from stockroom.keeping.verdict import Condition, verdict
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.standing import past_safety_date, standing_there, where_things_stand
from stockroom.reports.words import listed, raised
from stockroom.safety.neighbours import told_once

FORTNIGHT = timedelta(days=14)
"""How far ahead a class makes a check urgent, how far back an entry is asked for. Our choice."""


@dataclass(frozen=True, slots=True)
class Due:
    """One thing: what it is, what goes with it, and the cautions of its step."""

    what: str
    more: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()


def at_the_shelf(known: Facts) -> list[Due]:
    """Tight caps where gas is made, wrong neighbours, and what is past its safety date.

    Due every day until it is mended: what can hurt does not become less by being told once.
    """
    return [danger_due(known, each) for each in dangers(known)]


def dangers(known: Facts, past: Collection[str] | None = None) -> list[Danger]:
    """What stands wrong or past its safety date; the cap and the date before neighbours.

    `past` are the bottles a plan tells as not sound: no other can be past its safety date.
    """
    stand = where_things_stand(known.bottles, known.lines, known.places)
    # a group without a rule is for the office to settle, not for the shelf
    wrong = [each for each in told_once(stand) if isinstance(each, Danger)]
    # the cap and the safety date first: they can hurt whoever does nothing
    return sorted([*_past(known, past), *wrong], key=lambda each: each.kind is DangerKind.BESIDE)


def danger_due(known: Facts, danger: Danger) -> Due:
    """One danger with the bottle it is about."""
    line = next(bottle.line for bottle in known.bottles if bottle.number == danger.subject)
    return Due(f"{danger.subject} {raised(known.lines[line].item)}", (raised(danger.text),))


def _past(known: Facts, past: Collection[str] | None) -> list[Danger]:
    found = []
    for bottle in standing_there(known.bottles):
        if past is not None and bottle.number not in past:
            continue
        judged = verdict(bottle.record, known.lines[bottle.line].rules, known.as_at)
        if judged.warning:
            found.append(past_safety_date(bottle.number, judged))
    return found


def leaned_on_late(plan: Plan) -> set[str]:
    """The bottles whose check is overdue and which a class within a fortnight leans on."""
    overdue = {each.bottle for each in plan.past if each.condition is Condition.WATCH}
    soon = {need.booking.number for need in plan.needs if need.booking.on <= plan.as_at + FORTNIGHT}
    return {
        check.subject
        for check in plan.checks
        if check.subject in overdue and check.not_before <= plan.as_at and soon & {*check.bookings}
    }


def not_written(known: Facts) -> list[Due]:
    """The firm classes of this term, of the last fortnight, for which no draw was entered."""
    entered = {each.booking for each in known.drawn}
    first = max(known.start, known.as_at - FORTNIGHT)
    missed = [
        booking.number
        for booking in sorted(known.bookings, key=lambda one: (one.on, one.minute, one.number))
        if booking.firmness is Firmness.FIRM
        and first <= booking.on < known.as_at
        and booking.number not in entered
        and known.recipes[booking.recipe, booking.version].requirements
    ]
    what = "nothing is entered as drawn for it" if len(missed) == 1 else ""
    what = what or "nothing is entered as drawn for them"
    return [Due(listed(missed), (what,))] if missed else []
