"""Why? The reasons behind a line of a plan, in five lines or fewer of two rows or fewer.

Needs and bookings here; makes, orders, bottles, days, departments and recipes in
`why_things.py`; a stock line, with what covers it, in `why_line.py`; what was not
chosen, in `why_not.py`.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.planning.amounts import say
from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.planning.facts import Facts
from stockroom.planning.whys.in_short import LINES as LINES
from stockroom.planning.whys.in_short import folded as folded
from stockroom.planning.whys.not_line import instead as instead
from stockroom.planning.whys.of_line import by_name, by_part
from stockroom.planning.whys.of_things import (
    bottles,
    checks_of,
    day_rows,
    departments,
    makes,
    noted,
    orders,
    placed,
    recipes,
)


def why(facts: Facts, plan: Plan, ref: str, also: Iterable[str] = ()) -> tuple[str, ...]:
    """Explain one reference: "K08", "K08.2", "M14", "O02", "B01", a day, or a name.

    A check or a note is asked about by its subject: the bottle, the make, the booking,
    the day. `also` are the substances it is another name of ("hypo"), tried before parts of
    names. Empty when nothing of that name is known.
    """
    wanted = ref.strip().lower()
    for lines in (
        _needs(plan, wanted),
        makes(plan, wanted),
        orders(plan, wanted),
        placed(plan, wanted),
        bottles(facts, plan, wanted),
        _standing(facts, plan, wanted),
        departments(facts, plan, wanted),
        recipes(facts, plan, wanted),
        day_rows(facts, plan, wanted),
        # numbers before names: nobody names a substance "M14"
        by_name(facts, plan, wanted),
        *(by_name(facts, plan, name) for name in also),
        by_part(facts, plan, wanted),
    ):
        if lines:
            return folded(lines)
    return ()


def _needs(plan: Plan, wanted: str) -> list[str]:
    for answer in plan.needs:
        if answer.ref.lower() == wanted:
            return [_head(answer), *answer.reasons, *_checks(plan, answer)]
    of_booking = [a for a in plan.needs if a.booking.number.lower() == wanted]
    if not of_booking:
        return []
    booking = of_booking[0].booking
    groups = "1 group" if booking.groups == 1 else f"{booking.groups} groups"
    head = f"{booking.number} {of_booking[0].recipe_title}, {booking.on}, {groups}"
    rows = [head, *_by_outcome(of_booking, plan)]
    # the outcomes are what was asked for: what was noticed besides takes what room is left
    return [*rows, *noted(plan, booking.number)[: max(0, LINES - len(rows))]]


def _checks(plan: Plan, answer: Answer) -> list[str]:
    """The checks that must be done before a need is served: of its bottles, or of its make."""
    subjects = {draw.bottle for draw in answer.draws if draw.bottle} | {answer.make}
    return [
        row
        for subject in sorted(subjects - {""})
        for row in checks_of(plan, subject, booking=answer.booking.number)
    ]


def _by_outcome(answers: list[Answer], plan: Plan) -> Iterable[str]:
    # the worst first, since the fifth line swallows the rest
    for outcome in (Outcome.REFUSED, Outcome.SHORT, Outcome.BUY, Outcome.MAKE, Outcome.HAVE):
        row = [a for a in answers if a.outcome is outcome]
        if not row:
            continue
        words = "; ".join(_briefly(answer, plan) for answer in row)
        yield f"{outcome}: {words}"


def _briefly(answer: Answer, plan: Plan) -> str:
    where = [draw.bottle for draw in answer.draws if draw.bottle]
    where += [made for made in (answer.make, answer.order) if made]
    words = f"{answer.ref} {answer.item} {answer.strength}".rstrip()
    if answer.outcome in (Outcome.SHORT, Outcome.REFUSED):
        reason = next((s.reason for s in plan.short if s.ref == answer.ref), "")
        return f"{words}: {reason}"
    return f"{words} ({', '.join(where)})" if where else words


def _head(answer: Answer) -> str:
    amount = say(answer.amount, answer.kind)
    words = f"{answer.ref} {amount} of {answer.item} {answer.strength}".rstrip()
    return f"{words} for {answer.booking.on}: {answer.outcome}"


def _standing(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """What there is to say of a booking the plan leaves out: dropped, done, over, outside."""
    for booking in facts.bookings:
        number = booking.number.lower()
        # one of its needs, asked about after it is over, has the booking's answer
        if wanted == number or wanted.rpartition(".")[0] == number:
            title = facts.recipes[booking.recipe, booking.version].title
            over = f", over as at {plan.as_at}" if booking.on < plan.as_at else ""
            drawn = _drawn(facts, booking.number)
            return [f"{booking.number} {title}, {booking.on}: {booking.firmness}{over}", *drawn]
    return []


def _drawn(facts: Facts, number: str) -> list[str]:
    row = [draw for draw in facts.drawn if draw.booking == number]
    words = [f"{say(x.amount, facts.lines[x.line].kind)} of {x.bottle} {x.on}" for x in row]
    return [f"drawn for it: {', '.join(words)}"] if words else []
