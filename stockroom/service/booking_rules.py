"""When a booking may be made or changed: asked by whoever does it, and by whoever only supposes it.

Light, since supposing writes nothing.
"""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadDate, NotAllowed
from stockroom.measure.days import spell_day
from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import Firmness


def check_day(on: date, calendar: Calendar, *, today: date, keep: bool) -> None:
    """Pass for a day still to come on which the house is open, or is to be kept though closed.

    Raises: BadDate for a day gone by; NotAllowed for a closed one unless `keep`.
    """
    # nothing can be made ready for a day gone by, so another year was meant
    if on < today:
        raise BadDate(
            f"{spell_day(on)} is past: today is {spell_day(today)}.",
            "Check the year, or say with --as-at which day to think of as today.",
        )
    if not keep and not calendar.is_open(on):
        raise NotAllowed(f"{spell_day(on)} is closed. Keep it?", "Add --keep-closed to keep it.")


def check_in_use(number: str, firmness: str) -> None:
    """Pass for a booking the plan counts. Raises: NotAllowed for one dropped or done."""
    if firmness in (Firmness.DROPPED, Firmness.DONE):
        raise NotAllowed(
            f"{number} is {firmness}: the plan no longer counts it.",
            "To bring it back, add --firmness firm.",
        )


def check_may_be_dropped(number: str, firmness: str) -> None:
    """Pass for a booking the plan counts. Raises: NotAllowed for one dropped or done."""
    # dropping twice would leave two answers to who dropped it, and when
    if firmness in (Firmness.DROPPED, Firmness.DONE):
        back = f"Is it wanted? stockroom cancel {number} --undo --why …"
        hint = back if firmness == Firmness.DROPPED else "Book it again if it is wanted."
        raise NotAllowed(f"{number} is {firmness} already.", hint)
