"""What somebody must answer, each with what to type; and what the plan only estimates."""

from __future__ import annotations

from stockroom.keeping.verdict import Condition
from stockroom.planning.decisions import PastBottle, Plan
from stockroom.planning.facts import Facts
from stockroom.reports.files.handover_danger import UNKNOWN
from stockroom.reports.files.handover_parts import WHO, Job, Part, Point, together
from stockroom.reports.words import amount, named, raised

_OPEN = (Condition.NO_DATE, Condition.SET_ASIDE, Condition.NOT_FOUND)


def open_questions(known: Facts, plan: Plan) -> Part:
    """What nobody has settled: short, on order, undated, unknown, not found, two readings."""
    points = [
        Point(
            f"{one.ref} {named(one.item, one.strength)}",
            (raised(f"{amount(one.amount, one.kind)} short: {one.reason}"),),
            (Job("What is done about it?", (f"stockroom why {one.ref}", "stockroom buying")),),
        )
        for one in plan.short
    ]
    points += [
        Point(
            f"{one.number} {one.item}",
            (f"{amount(one.amount, one.kind)} to come, expected {one.expected}",),
            (Job("Has it come? When will it?", ("stockroom on-order",)),),
        )
        for one in plan.on_order
    ]
    points += [
        Point(
            raised(f"{one.bottle} {one.item}"),
            (raised(f"{one.condition.value}: {one.decided_by}"),),
            (_asked(one),),
        )
        for one in plan.past
        if one.condition in _OPEN
    ]
    points += _two_readings(known)
    intro = "Ask whoever is leaving, while they are still here." if points else "Nothing is open."
    return Part("Open questions", intro, together(points))


def _asked(one: PastBottle) -> Job:
    if one.condition is Condition.NOT_FOUND:
        return Job("Where is it? If it turns up:", (f"stockroom turned-up {one.bottle} {WHO}",))
    if one.item == UNKNOWN:
        proved = f'stockroom unknown {one.bottle} --is "LINE" --evidence "TEXT" {WHO}'
        return Job("What is it? When it is proved, and not before:", (proved,))
    looks = tuple(f"stockroom look {one.bottle} --{said} {WHO}" for said in ("good", "bad"))
    return Job("Is it good? Look, and type one of the two:", looks)


def _two_readings(known: Facts) -> list[Point]:
    return [
        Point(
            raised(f"{each.number} {each.line}"),
            (f'its date is printed "{printed.text}": planned on the earlier reading',),
            (
                Job(
                    "Which day is meant? Type one of these:",
                    tuple(
                        f"stockroom printed {each.number} {day} {WHO}" for day in printed.readings
                    ),
                ),
            ),
        )
        for each in known.bottles
        if (printed := each.record.printed) and printed.ambiguous and not each.record.gone
    ]


def leans_on(plan: Plan) -> Part:
    """Estimates the plan stands on: nobody has to answer them, but they are not found."""
    points = [
        Point(one.subject, (raised(one.text),))
        for one in plan.guesses
        if not one.text.startswith('printed "')
    ]
    intro = "Estimated, not found: a titration or a look settles each. stockroom why tells more."
    intro = intro if points else "Nothing is estimated."
    return Part("What the plan leans on", intro, together(points))
