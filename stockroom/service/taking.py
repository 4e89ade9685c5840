"""What every draw from a bottle goes through, whoever it is for."""

from __future__ import annotations

from datetime import timedelta

from stockroom.errors import NotAllowed, NotEnough
from stockroom.measure.amounts import Amount
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning import facts
from stockroom.service.answers import Done
from stockroom.service.work import Work, check_amount, check_at_hand
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, entries_of, left, opened_note
from stockroom.store.names import substance_of
from stockroom.store.snapshot_lines import methods_of, recipes_of
from stockroom.store.tables import Booking, Bottle, Entry, Recipe


def take(work: Work, bottle: Bottle, event: Event) -> Entry:
    """Write what leaves a bottle. Raises: NotEnough, saying who drew last if entered today."""
    try:
        return work.write(bottle, event)
    except NotEnough as error:
        raise NotEnough(f"{error.message}{_drawn_today(work, bottle)}", error.hint) from error


def write_off(work: Work, bottle: str, amount: Amount, event: Event, verb: str) -> Done:
    """Take what left a bottle without being drawn: spilled or lent. Raises: as `stock.draw`."""
    found = work.bottle(bottle)
    check_amount(work.line(found), amount)
    check_at_hand(work, found)
    entry = take(work, found, event)
    said = f"{verb} {format_amount(amount)} of {work.called(found)}"
    to = f" {event.reason}" if event.reason else ""
    return work.done(f"{said}{to}; {remains(work, found)}.", found, entry)


def remains(work: Work, bottle: Bottle) -> str:
    """What is left in a bottle now, in words."""
    return f"{work.say(bottle, left(work.session, bottle))} left"


def _drawn_today(work: Work, bottle: Bottle) -> str:
    draws = [
        entry
        for entry in entries_of(work.session, bottle)
        if entry.kind == EntryKind.DRAWN and entry.entered_on == work.stamp.entered_on
    ]
    # by entry number: of two on one day the later typed is the one to name
    last = max(draws, key=lambda entry: entry.id or 0, default=None)
    if last is None:
        return ""
    # Monday may enter what Friday drew
    dated = last.happened_on != work.stamp.entered_on
    day = f"on {spell_day(last.happened_on)}, entered today" if dated else "today"
    return f" {last.by} drew {work.say(bottle, -last.change)} {day}."


def opening_of(work: Work, bottle: Bottle) -> Entry | None:
    """The entry that opened the bottle, None while it is sealed."""
    opened = (entry for entry in entries_of(work.session, bottle) if entry.kind == EntryKind.OPENED)
    return next(opened, None)


def open_if_sealed(work: Work, bottle: Bottle, drawn: Entry) -> tuple[str, ...]:
    """Write the opening that a draw from a sealed bought bottle implies, and say so.

    Says so too when the bottle's opening is dated after the draw.
    """
    # what is made here is never sealed
    if bottle.made_here:
        return ()
    opening = opening_of(work, bottle)
    if opening is not None:
        return _opened_later(bottle, opening, drawn)
    work.write(bottle, Event(EntryKind.OPENED, note=opened_note(drawn.id)))
    return (f"{bottle.number} was sealed: opened {spell_day(work.on)}.",)


def _opened_later(bottle: Bottle, opening: Entry, drawn: Entry) -> tuple[str, ...]:
    if opening.happened_on <= drawn.happened_on:
        return ()
    # not mended here: the draw's day may be the slip, and the first opening is kept
    opened = spell_day(opening.happened_on)
    return (
        f"{bottle.number} drawn before it was opened on {opened}: put the opening right"
        f" (entry {opening.id}), or the draw (entry {drawn.id}).",
    )


def still_standing(work: Work, bottle: facts.Bottle) -> str:
    """Until when the bottle has yet to stand, in words; "" when it has stood long enough."""
    method = methods_of(work.reader).get(bottle.line)
    if method is None or bottle.record.made is None or not bottle.made_here:
        return ""
    # in whole days, as the plan counts them: under half a day does not count
    ready = bottle.record.made + timedelta(days=round(method.stands_hours / 24))
    return f"still standing until {spell_day(ready)}" if work.on < ready else ""


def check_not_barred(work: Work, bottle: Bottle, booking: Booking) -> None:
    """Pass unless the booking's recipe bars what the bottle holds. Raises: NotAllowed."""
    # the version that was booked, whatever newer one bars or allows
    recipe = work.session.get_one(Recipe, booking.recipe_id)
    substance = substance_of(work.session, work.line(bottle))
    for bar in recipes_of(work.reader)[recipe.recipe, recipe.version].bars:
        if substance is not None and bar.substance == substance.substance:
            raise NotAllowed(
                f"{booking.number} is {recipe.recipe}, {recipe.title}, which bars"
                f" {bar.substance}: {bar.reason}.",
                "Use what the recipe names.",
            )
