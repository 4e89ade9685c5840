"""Readers for bottles and for what happened to them: rows become ledger entries.

The amount left of a bottle is what somebody saw on the day `left_on`; what
happened before that day is already in it, what happened on it or after is not.
So bottles and their history are read together and written in order of day.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from datetime import date

from stockroom.errors import BadAmount, BadDate, BadInput, UnknownName
from stockroom.measure.amounts import Kind
from stockroom.measure.days import PrintedDate, parse_printed
from stockroom.measure.formats import format_amount
from stockroom.measure.parsing import parse_strength
from stockroom.safety.peroxide_formers import outcome
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.kinds import BEGINNINGS, DAY_NOT_WRITTEN, EntryKind
from stockroom.store.ledger import Event, amount_of, append, left, overfull
from stockroom.store.names import find_bottle, find_place, substance_of
from stockroom.store.printed import check_reading
from stockroom.store.rows_house import new_name
from stockroom.store.rows_lines import check_has_strength, number_beside
from stockroom.store.tables import Bottle, Entry, Line, Parent

_TAKES = (EntryKind.DRAWN, EntryKind.SPILLED, EntryKind.LENT)
_LEAVES = (EntryKind.COUNTED, EntryKind.DISCARDED)
# what was poured needs a bottle to stand in, and the old lists tell of none
HISTORY = frozenset(EntryKind) - {*BEGINNINGS, EntryKind.DECANTED}
_ANSWERED = (EntryKind.LOOKED, EntryKind.TESTED)


@dataclass(frozen=True, slots=True)
class Step:
    """One entry still to be written: on which day, in which order within it."""

    on: date
    rank: int
    write: Callable[[], Entry | None]


def read_bottle(desk: Desk, fields: Fields, first_seen: date | None = None) -> list[Step]:
    """A bottle, with the steps that tell its story; the bottle itself is saved at once.

    `first_seen` is the earliest day the history tells of it, for one without dates.
    """
    line = desk.line(fields.need("line"))
    bottle = _bottle(desk, fields, line)
    left_on = fields.day("left_on")
    begun = bottle.made_on or bottle.received_on
    # what happened to it proves that it was there
    undated = min(day for day in (first_seen, left_on or desk.opening_day()) if day)
    return _story(desk, fields, bottle, line, begun or undated, left_on or desk.opening_day())


def _bottle(desk: Desk, fields: Fields, line: Line) -> Bottle:
    number = new_name(desk, Bottle, "number", fields.need("bottle"))
    printed = _printed(fields)
    # our numbers: S for what is made here; but a supplier's jar may be numbered S77 as well
    made, received = fields.day("made"), fields.day("received")
    assert line.id is not None
    bottle = Bottle(
        number=number,
        line_id=line.id,
        size=fields.amount("size", Kind(line.kind)) or 0,
        received_on=received,
        made_on=made,
        printed_text=printed.text if printed else "",
        printed_readings=";".join(day.isoformat() for day in printed.readings) if printed else "",
        cap=fields.text("cap"),
        remark=fields.text("remark"),
        made_here=made is not None or (received is None and number.upper().startswith("S")),
        source=fields.text("source"),
    )
    desk.save(bottle)
    return bottle


def _printed(fields: Fields) -> PrintedDate | None:
    written = fields.text("printed")
    return parse_printed(written, where="printed") if written else None


def _story(
    desk: Desk, fields: Fields, bottle: Bottle, line: Line, begun: date, seen: date
) -> list[Step]:
    place = find_place(desk.session, fields.text("place")).id if fields.text("place") else None
    kind = EntryKind.MADE if bottle.made_here else EntryKind.ARRIVED
    start = Event(kind, change=bottle.size, place_id=place)
    steps = [_step(desk, bottle, start, begun, 0)]
    steps += _opening(desk, fields, bottle, begun)
    held = fields.amount("left", Kind(line.kind))
    if held is not None:
        _check_fits(desk, bottle, held)
        steps.append(Step(max(seen, begun), 2, lambda: _count(desk, bottle, held, seen, begun)))
    reason = fields.text("set_aside")
    if reason:
        dated = bottle.made_on or bottle.received_on
        aside = Event(EntryKind.SET_ASIDE, reason=reason)
        steps.append(_step(desk, bottle, aside, max(seen, begun) if dated else begun, 4))
    return steps


def _check_fits(desk: Desk, bottle: Bottle, held: int) -> None:
    if overfull(bottle, held):
        full, asked = (
            format_amount(amount_of(desk.session, bottle, micro)) for micro in (bottle.size, held)
        )
        raise BadAmount(f"{bottle.number} holds {full} when full; {asked} left?", "Read it again.")


def _opening(desk: Desk, fields: Fields, bottle: Bottle, begun: date) -> list[Step]:
    written = fields.text("opened")
    if not written or written.lower() == "no":
        return []
    # opened by somebody, who did not write when
    if written.lower() == "yes":
        event = Event(EntryKind.OPENED, note=DAY_NOT_WRITTEN)
        return [_step(desk, bottle, event, begun, 1)]
    opened = fields.need_day("opened")
    if bottle.received_on and opened < bottle.received_on:
        raise BadDate(
            f"{bottle.number} opened {opened} is before it arrived {bottle.received_on}.",
            "One of these is wrong.",
        )
    return [_step(desk, bottle, Event(EntryKind.OPENED), opened, 1)]


def _step(desk: Desk, bottle: Bottle, event: Event, on: date, rank: int) -> Step:
    return Step(on, rank, lambda: append(desk.session, bottle, event, desk.stamp(on)))


def _count(desk: Desk, bottle: Bottle, held: int, seen: date, begun: date) -> Entry | None:
    change = held - left(desk.session, bottle)
    # a bottle as full as it came needs no counted entry
    if not change:
        return None
    event = Event(EntryKind.COUNTED, change=change)
    return append(desk.session, bottle, event, desk.stamp(max(seen, begun)))


def read_parents(desk: Desk, fields: Fields) -> None:
    """Link a bottle to those it was made from, once all of them are there."""
    bottle = find_bottle(desk.session, fields.need("bottle"))
    for number in fields.text("parents").split(";"):
        if number.strip():
            parent = find_bottle(desk.session, number)
            if parent.id == bottle.id:
                raise BadInput(f"{bottle.number} would be made from itself.", "Name its source.")
            assert bottle.id is not None and parent.id is not None
            desk.save(Parent(bottle_id=bottle.id, parent_id=parent.id))


def read_history(desk: Desk, fields: Fields) -> Step:
    """One thing that happened, as a step to be written in its turn."""
    happened, entered = fields.need_day("happened"), fields.day("entered")
    if entered and entered < happened:
        raise BadDate(f"Entered {entered} is before it happened, {happened}.", "Swap the days.")
    kind = fields.choice("event", EntryKind)
    # an arrival typed as history would have no line, size or place
    if kind not in HISTORY:
        raise BadInput(f'event "{kind}" belongs to the bottles table.', "Add the bottle there.")
    bottle = find_bottle(desk.session, fields.need("bottle"))
    number, by = fields.text("number"), fields.need("by")
    puts_right = fields.need("puts_right") if kind is EntryKind.PUT_RIGHT else ""
    amount = fields.amount("amount", Kind(desk.session.get_one(Line, bottle.line_id).kind))
    event = _event(desk, fields, kind, bottle, amount)

    def write() -> Entry:
        told = _reversal(desk, puts_right, event) if puts_right else event
        if kind in _LEAVES:
            # only now is it known what the earlier days left in it
            told = replace(event, change=(amount or 0) - left(desk.session, bottle))
        entry = append(desk.session, bottle, told, desk.stamp(happened, entered or happened, by))
        assert entry.id is not None
        desk.numbered[number] = entry.id
        return entry

    return Step(happened, 3, write)


def _event(
    desk: Desk, fields: Fields, kind: EntryKind, bottle: Bottle, amount: int | None
) -> Event:
    line = desk.session.get_one(Line, bottle.line_id)
    if kind in _TAKES and not amount:
        raise BadInput(f"How much of {bottle.number} was {kind}?", "Fill the amount column.")
    if kind is EntryKind.COUNTED and amount is None:
        raise BadInput(f"How much of {bottle.number} was counted?", "Fill the amount column.")
    if kind in _ANSWERED:
        fields.need("passed")
    if kind is EntryKind.DATE_READ:
        # the day chosen stands where other rows give a reason
        return Event(kind, note=check_reading(bottle, fields.need_day("reason")))
    if kind is EntryKind.FOUND:
        check_has_strength(line, bottle.number)
    strength, written, spread = (
        _found(desk, fields, line) if kind is EntryKind.FOUND else (None, "", None)
    )
    place = fields.text("place")
    return Event(
        kind,
        change=-(amount or 0) if kind in _TAKES else 0,
        strength=strength,
        strength_text=written,
        uncertainty=spread,
        peroxide_mg_kg=_peroxide(fields, bottle) if kind is EntryKind.TESTED else None,
        passed=fields.flag("passed") if kind in _ANSWERED else None,
        place_id=find_place(desk.session, place).id if place else None,
        reason=fields.text("reason"),
    )


def _peroxide(fields: Fields, bottle: Bottle) -> float | None:
    """The mg/kg of a test, as H2O2. Raises: BadInput when it says that the test was failed."""
    result = fields.number("peroxide_mg_kg")
    if result is None:
        return None
    means = outcome(result)
    # a number that condemns a bottle must never start its safety date again
    if fields.flag("passed") and not means.passed:
        raise BadInput(
            f"{bottle.number} cannot have passed: {means.words}.",
            "Write passed=no; if the number is a slip, mend it.",
        )
    return result


def _found(desk: Desk, fields: Fields, line: Line) -> tuple[float, str, float | None]:
    """A strength found: its value in the line's unit, as written, and its uncertainty if known."""
    substance = substance_of(desk.session, line)

    def number(column: str, written: str) -> float:
        return number_beside(parse_strength(written, where=column), substance, line)

    written = fields.need("strength")
    value = number("strength", written)
    spread = fields.text("uncertainty")
    known = number("uncertainty", spread) if spread else None
    # as wide as the strength itself says that nothing was found
    if known is not None and not 0 < known < value:
        raise BadAmount(
            f'uncertainty "{spread}" on {written} cannot be.',
            "Give the standard uncertainty, in the strength's own unit.",
        )
    return value, written, known


def _reversal(desk: Desk, number: str, event: Event) -> Event:
    entry = desk.session.get(Entry, desk.numbered.get(number, 0))
    if entry is None:
        raise UnknownName(f'No earlier history row "{number}".', "puts_right names an earlier row.")
    return Event(
        EntryKind.PUT_RIGHT, change=-entry.change, reason=event.reason, puts_right=entry.id
    )
