"""What is asked about before it is entered: a slip of a unit, or the same made twice."""

from __future__ import annotations

from datetime import datetime, timedelta

from stockroom import clock
from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.formats import format_amount, format_number
from stockroom.planning.facts import Line, Method
from stockroom.service.heel import Meant
from stockroom.service.work import Work
from stockroom.store.kinds import EntryKind
from stockroom.store.tables import Bottle

AGAIN = timedelta(minutes=10)
"""The like of a make within this time is asked about: two windows, two hands. Our choice."""

TOO_MANY_TIMES = 10
"""A make of more than so many times what is planned is asked about. Our choice."""

TOO_FEW_PARTS = 10_000
"""A count of less than one part in so many of the bottle, and not nothing, is asked about.

Our choice: nobody sees so little in a bottle, and a wrong unit gives a thousandth or less.
"""


def check_make(
    work: Work, product: Line, method: Method, volume: Amount, sources: set[str], meant: Meant
) -> None:
    """Pass a make that looks meant. Raises: NotAllowed, which says how to say that it is.

    `sources` are the bottles named for it, `meant` what the plan has of the line next.
    """
    _check_not_twice(work, product, volume, sources)
    planned = meant.planned.volume if meant.planned else 0
    beside = planned or method.smallest_batch
    if beside and volume.micro > TOO_MANY_TIMES * beside:
        times = format_number(round(volume.micro / beside))
        usual = "what is planned" if planned else "the smallest batch"
        raise NotAllowed(
            f"{format_amount(volume)} of {product.key} is {times} times {usual},"
            f" {format_amount(Amount(volume.kind, beside))}: sure?",
            "Check the unit, or confirm with --sure.",
        )


def _check_not_twice(work: Work, product: Line, volume: Amount, sources: set[str]) -> None:
    now = clock.now()
    rows = work.reader.ask(
        _ALIKE, product.key, volume.micro, work.on.isoformat(), (now - AGAIN).isoformat(sep=" ")
    )
    for row in rows:
        gave = {each["number"] for each in work.reader.ask(_PARENTS, row["bottle_id"])}
        # from another bottle it is another make: somebody said so
        if sources - gave:
            continue
        raise NotAllowed(
            f"{row['number']} was made {_ago(now, row['entered_at'])} by {row['by']}:"
            f" {format_amount(volume)} of {product.key} too. Again?",
            "If it was made a second time, confirm with --sure.",
        )


def check_count(work: Work, bottle: Bottle, amount: Amount) -> None:
    """Pass a count that can be seen in the bottle. Raises: NotAllowed."""
    if 0 < amount.micro * TOO_FEW_PARTS < bottle.size:
        raise NotAllowed(
            f"{format_amount(amount)} in {bottle.number}, which holds"
            f" {work.say(bottle, bottle.size)} when full: sure?",
            "Check the unit, write 0 if it is empty, or confirm with --sure.",
        )


def _ago(now: datetime, entered_at: str) -> str:
    minutes = int((now - datetime.fromisoformat(entered_at)).total_seconds() // 60)
    return f"{minutes} min ago" if minutes > 0 else "a moment ago"


_ALIKE = f"""
    SELECT e.bottle_id, e.entered_at, e.by, b.number
    FROM entry e JOIN bottle b ON b.id = e.bottle_id JOIN line l ON l.id = b.line_id
    WHERE e.kind = '{EntryKind.MADE}' AND l.key = ? AND e.change = ? AND e.happened_on = ?
    AND e.entered_at >= ?
    AND NOT EXISTS (SELECT 1 FROM entry r WHERE r.puts_right = e.id)
    ORDER BY e.id DESC
"""

_PARENTS = "SELECT b.number FROM parent p JOIN bottle b ON b.id = p.parent_id WHERE p.bottle_id = ?"
