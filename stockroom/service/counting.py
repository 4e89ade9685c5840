"""What a count that differs from the entries may mean; the person who counted decides."""

from __future__ import annotations

from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_about, format_amount, format_number
from stockroom.planning.amounts import label_scale
from stockroom.planning.facts import Form
from stockroom.service.work import Work
from stockroom.store.kinds import BEGINNINGS, EntryKind
from stockroom.store.ledger import entries_of
from stockroom.store.refills import MORE
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle

_SEEN = 0.01
"""The part of a bottle that a count by eye can miss: ours, no source."""

_TAKEN = (EntryKind.DRAWN, EntryKind.DECANTED, EntryKind.SPILLED, EntryKind.LENT)
_KNOWN = (*BEGINNINGS, EntryKind.COUNTED)


def difference(work: Work, bottle: Bottle, change: int, *, about: bool = False) -> str:
    """How a count differs from the entries, in words that end a sentence.

    `about` where either of the two was judged by eye.
    """
    if change == 0:
        return ", as entered"
    amount = Amount(Kind(work.line(bottle).kind), abs(change))
    said = format_about(amount) if about else format_amount(amount)
    return f"; {said} {'more' if change > 0 else 'less'} than entered"


def which_it_was(work: Work, bottle: Bottle, before: int, counted: int) -> tuple[str, ...]:
    """What it may mean that a solution has changed by itself, each with what to do about it.

    Nothing is said of other forms, or where something was drawn since it was last known: then
    a draw written down roughly is the likelier reason. Common practice, no source.
    """
    if work.line(bottle).form != Form.SOLUTION or not counted:
        return ()
    if counted - before > MORE * bottle.size > 0:
        return ("Topped up? Then it is a new make, with a number of its own.",)
    if before - counted < _SEEN * before:
        return ()
    stronger = _stronger(work, bottle, before / counted)
    if not stronger or _taken_since(work, bottle):
        return ()
    return (
        f"Nothing was drawn. Water lost? Then it is ×{before / counted:.3f} by now: {stronger}",
        "Or drawn, not written down? Then its strength is as it was: nothing to do.",
    )


def _taken_since(work: Work, bottle: Bottle) -> bool:
    """True when something left the bottle after it was last counted, made or put there."""
    for entry in reversed(entries_of(work.session, bottle)):
        if entry.kind in _TAKEN:
            return True
        if entry.kind in _KNOWN:
            return False
    return False


def _stronger(work: Work, bottle: Bottle, times: float) -> str:
    """The command that writes the strength down as so many times what is expected."""
    expected = work.verdict(bottle).strengths.expected
    if expected is None:
        return ""
    key = work.line(bottle).key
    scale, unit = label_scale(lines_of(work.reader, key)[key])
    said = f"{format_number(expected * times * scale)} {unit}"
    return f'stockroom found {bottle.number} "{said}" --note "water lost"'
