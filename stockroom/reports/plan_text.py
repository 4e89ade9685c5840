"""The plan as a person reads it: what cannot be done first, guesses and cautions last."""

from __future__ import annotations

from collections import Counter
from dataclasses import replace
from itertools import groupby

from stockroom.measure.days import format_time
from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.reports.buying_text import level_section, order_lines
from stockroom.reports.checks_text import check_lines
from stockroom.reports.makes_text import makes_by_day
from stockroom.reports.past_text import past_lines
from stockroom.reports.people_text import load_section, told_apart, watch_section
from stockroom.reports.ready_text import served
from stockroom.reports.sheet import (
    backup_age,
    columns,
    foot,
    guesses,
    head,
    notes,
    page,
    section,
    spanning,
    wrap,
)
from stockroom.reports.words import TIED, amount, counted, day, named

_LONGEST = max(len(outcome) for outcome in Outcome)


def plan_text(plan: Plan, width: int) -> str:
    """The whole plan in sections, empty ones left off; no line longer than `width`."""
    return page(
        [
            head(plan, width, f"Plan {spanning(plan)}", _counts(plan)),
            section("CANNOT BE DONE", cannot_lines(plan, width)),
            section("ORDER BY", order_lines(plan, width)),
            level_section(plan, width),
            section("MAKE", makes_by_day(plan.makes, width)),
            load_section(plan, width),
            section("CHECK", check_lines(plan.checks, width)),
            watch_section(plan, width),
            section("PAST, WEAK, UNDATED", past_lines(plan, width)),
            section("BOOKINGS", booking_lines(plan, width)),
            notes(replace(plan, notes=told_apart(plan)), width),
            guesses(plan, width),
            backup_age(plan, width),
            foot(width, f"stockroom why {_puzzling(plan)}", "stockroom fresh", "stockroom buying"),
        ]
    )


def cannot_lines(plan: Plan, width: int) -> list[str]:
    """What is short or refused, by day, with the reason."""
    answers = {need.ref: need for need in plan.needs}
    told = {short.ref for short in plan.short}
    rows = [
        (
            short.ref,
            day(answers[short.ref].booking.on) if short.ref in answers else "",
            f"{named(short.item, short.strength)}, {amount(short.amount, short.kind)} short: "
            f"{short.reason}",
        )
        for short in plan.short
    ]
    # a refusal without an amount short would else be told nowhere
    rows += [_refused(need) for need in plan.needs if _untold(need, told)]
    return columns(rows, width)


def booking_lines(plan: Plan, width: int) -> list[str]:
    """One line a booking with its outcome counts, and its needs under it."""
    # grouping only joins neighbours
    ordered = sorted(plan.needs, key=lambda need: (need.booking.on, need.booking.number))
    lines: list[str] = []
    for _, group in groupby(ordered, key=lambda need: need.booking.number):
        lines += _booking(list(group), width)
    return lines


def outcome_counts(needs: tuple[Answer, ...]) -> str:
    """How many needs come to what: "have 5, make 2"; outcomes that do not occur are left off."""
    counts = Counter(need.outcome for need in needs)
    tally = [f"{outcome}{TIED}{counts[outcome]}" for outcome in Outcome if counts[outcome]]
    return ", ".join(tally) or "nothing needed"


def _booking(needs: list[Answer], width: int) -> list[str]:
    booking = needs[0].booking
    first = (
        f"{booking.number}  {day(booking.on)} {format_time(booking.minute)}  "
        f"{booking.recipe} {needs[0].recipe_title}, {counted(booking.groups, 'group')}, "
        f"{booking.department}, {booking.firmness}: {outcome_counts(tuple(needs))}"
    )
    return [wrap(first, width, indent=2, hang=7), *_by_outcome(needs, width)]


def _by_outcome(needs: list[Answer], width: int) -> list[str]:
    rows = []
    for outcome in Outcome:
        alike = [served(need) for need in needs if need.outcome is outcome]
        rows += [(outcome.value.ljust(_LONGEST), "; ".join(alike))] if alike else []
    return columns(rows, width, indent=7)


def _counts(plan: Plan) -> str:
    bookings = len({need.booking.number for need in plan.needs})
    tally = outcome_counts(plan.needs)
    return f"{counted(bookings, 'booking')}, {counted(len(plan.needs), 'need')}: {tally}"


def _untold(need: Answer, told: set[str]) -> bool:
    return need.outcome in (Outcome.SHORT, Outcome.REFUSED) and need.ref not in told


def _refused(need: Answer) -> tuple[str, str, str]:
    why = need.reasons[-1] if need.reasons else "no reason was given"
    return need.ref, day(need.booking.on), f"{served(need)}: {need.outcome}, {why}"


def _puzzling(plan: Plan) -> str:
    """The reference most worth asking about: what is short, else what is made, else any."""
    refs = [short.ref for short in plan.short] + [make.id for make in plan.makes]
    return next(iter([*refs, *(need.ref for need in plan.needs)]), "REF")
