"""What is past, weak, undated, unchecked, set aside or not found on a day."""

from __future__ import annotations

from datetime import date

from stockroom.planning.decisions import PastBottle, Plan
from stockroom.reports.sheet import columns, foot, head, page, section
from stockroom.reports.words import counted, day, listed, marked


def past_text(plan: Plan, on: date, width: int) -> str:
    """The bottles not to be counted on, and the first booking each matters for."""
    about = f"Not sound on {day(on)}, as at {day(plan.as_at)}: {counted(len(plan.past), 'bottle')}"
    body = section("PAST, WEAK, UNDATED", past_lines(plan, width))
    # a command that can be typed as it stands beats one with a gap in it
    one = plan.past[0].bottle if plan.past else "BOTTLE"
    # what must not be opened, or has failed its test, is never to be looked at
    looks = [f"stockroom look {b.bottle} --good" for b in plan.past if b.look_would_do]
    following = foot(width, f"stockroom why {one}", *looks[:1])
    return page([head(plan, width, about), body or "Every bottle is sound.", following])


def past_lines(plan: Plan, width: int) -> list[str]:
    """One bottle a row: number, mark and word, what it is, why, and what it matters for."""
    rows = [(each.bottle, marked(each.condition), _about(each)) for each in plan.past]
    return columns(rows, width)


def _about(bottle: PastBottle) -> str:
    until = f" good until {day(bottle.good_until)}," if bottle.good_until else ""
    matters = f"; matters for {listed(bottle.matters_for)}" if bottle.matters_for else ""
    return f"{bottle.item}:{until} decided by: {bottle.decided_by}{matters}"
