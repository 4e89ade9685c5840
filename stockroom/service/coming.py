"""What comes of an order: summed from the arrivals that name it, and told when they are entered.

An arrival put right is outstanding again.
"""

from __future__ import annotations

from stockroom.errors import BadDate, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Placed as Order
from stockroom.service.work import Work
from stockroom.store import names, orders
from stockroom.store.tables import Entry, Line


def came_of(work: Work, number: str, line: Line, entries: list[Entry]) -> tuple[str, ...]:
    """Write that arrivals came of an order, and say what is still to come of it.

    More than was ordered is accepted, and said. Raises: UnknownName; NotAllowed for an order
    of something else; BadDate for one placed later.
    """
    row = orders.find_order(work.session, number)
    if row.line_id != line.id:
        other = work.session.get_one(Line, row.line_id).key
        raise NotAllowed(
            f"{row.number} is an order of {other}, and {line.key} came.",
            "Give the other order, or leave --order out.",
        )
    if row.ordered_on > work.on:
        raise BadDate(
            f"{row.number} was ordered {spell_day(row.ordered_on)}, after it came.",
            "One of these is wrong.",
        )
    orders.record_came(work.session, row, entries)
    # as known now: an arrival entered late may come after others of it
    stands = orders.as_it_stands(work.session, row, work.stamp.entered_on)
    over = stands.came - stands.amount
    if stands.cancelled:
        return (f"{row.number} was cancelled {spell_day(stands.cancelled)}, and it came: noted.",)
    if over > 0:
        return (f"{say_of(work, stands, over)} more than {row.number} ordered: noted.",)
    if stands.outstanding:
        return (f"{say_of(work, stands, stands.outstanding)} still to come of {row.number}.",)
    return (f"{row.number} has all come.",)


def may_be_of(work: Work, line: Line) -> tuple[str, ...]:
    """One line when an arrival names no order, and one of its line is still to come."""
    still = orders.outstanding_of(work.session, line, work.stamp.entered_on)
    row = [order.number for order in still if order.ordered <= work.on]
    if not row:
        return ()
    return (
        f"{', '.join(row)} is still to come: if this was it, put the arrival right"
        f" and enter it with --order {row[0]}.",
    )


def say_of(work: Work, order: Order, micro: int) -> str:
    """Micro-units of what was ordered, in words."""
    line = names.find_line(work.session, order.line)
    return f"{format_amount(Amount(Kind(line.kind), micro))} of {order.line}"
