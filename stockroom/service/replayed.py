"""A plan that may be shown: made, replayed, and held back where it breaks a rule."""

from __future__ import annotations

import threading
from collections import deque
from dataclasses import replace
from datetime import date

from stockroom.errors import BrokenPlan
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.plan import shown, whole_plan
from stockroom.planning.replaying.replay import replay
from stockroom.service.made_once import MadeOnce

_LAST: deque[tuple[Facts, date | None, MadeOnce[Plan]]] = deque(maxlen=4)
"""The last plans of this process beside their facts: the same facts give the same plan."""

_LOCK = threading.Lock()


def forget_plans() -> None:
    """Forget the plans made so far, so that the next is worked out anew."""
    with _LOCK:
        _LAST.clear()


def replayed_plan(known: Facts, *, past_day: date | None = None) -> Plan:
    """The plan of these facts, `past` told for `past_day` or for the day of the facts.

    Asked again of the same facts, the plan made before is given: a page that is looked at
    twice, or an event that asks whom it hits, need not wait for what is known. Two who ask at
    once wait for one.
    Raises BrokenPlan where the replay finds a rule broken: nothing of it is to be shown.
    """
    with _LOCK:
        found = _made_of(known, past_day)
        if found is None:
            mine: MadeOnce[Plan] = MadeOnce()
            _LAST.append((known, past_day, mine))
    if found is not None:
        return found.wait()
    try:
        return mine.make(lambda: _replayed(known, past_day))
    except BaseException:
        _forget(mine)
        raise


def _made_of(known: Facts, past_day: date | None) -> MadeOnce[Plan] | None:
    for facts, day, made in _LAST:
        if day == past_day and (facts is known or facts == known):
            return made
    return None


def _forget(made: MadeOnce[Plan]) -> None:
    with _LOCK:
        left = [each for each in _LAST if each[2] is not made]
        _LAST.clear()
        _LAST.extend(left)


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
