"""A plan that may be shown: made, replayed, and held back where it breaks a rule."""

from __future__ import annotations

from collections import deque
from dataclasses import replace
from datetime import date

from stockroom.errors import BrokenPlan
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.plan import shown, whole_plan
from stockroom.planning.replaying.replay import replay

_LAST: deque[tuple[Facts, date | None, Plan]] = deque(maxlen=4)
"""The last plans of this process beside their facts: the same facts give the same plan."""


def forget_plans() -> None:
    """Forget the plans made so far, so that the next is worked out anew."""
    _LAST.clear()


def replayed_plan(known: Facts, *, past_day: date | None = None) -> Plan:
    """The plan of these facts, `past` told for `past_day` or for the day of the facts.

    Asked again of the same facts, the plan made before is given: a page that is looked at
    twice, or an event that asks whom it hits, need not wait for what is known.
    Raises BrokenPlan where the replay finds a rule broken: nothing of it is to be shown.
    """
    for facts, day, made in _LAST:
        if day == past_day and facts == known:
            return made
    made = _replayed(known, past_day)
    _LAST.append((known, past_day, made))
    return made


def _replayed(known: Facts, past_day: date | None) -> Plan:
    whole = whole_plan(known, past_day=past_day)
    # all of it: what a week shows may lean on a bottle opened for another
    last = known.horizon or known.end
    faults = replay(known, replace(whole, start=known.as_at, end=last))
    if not faults:
        return shown(whole)
    first, *more = faults
    others = f", and {len(more)} more like it" if more else ""
    raise BrokenPlan(
        f"The plan as at {known.as_at} breaks a rule at {first.where}: {first.what} "
        f"(the rule: {first.rule}){others}. Nothing of it is shown.",
        "The fault is in the program, not in your tables: report it with this message, a copy "
        f"of the store, and --as-at {known.as_at}.",
    )
