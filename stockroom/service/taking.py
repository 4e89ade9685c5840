"""What every draw from a bottle goes through, whoever it is for."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta

from stockroom.errors import NotAllowed, NotEnough
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_about
from stockroom.planning import facts
from stockroom.planning.facts import Firmness
from stockroom.planning.on_shelf import set_aside_above
from stockroom.service.answers import Done
from stockroom.service.estimates import of_its_kind
from stockroom.service.work import Work, check_at_hand
from stockroom.store.estimates import judged_by_eye
from stockroom.store.kinds import STANDING, EntryKind, evened_count
from stockroom.store.ledger import Event, entries_of, first_of, left, opened_by_draw, opened_note
from stockroom.store.names import substance_of
from stockroom.store.snapshot_lines import lines_of, methods_of, recipes_of
from stockroom.store.tables import Booking, Bottle, Entry, Recipe


def take(work: Work, bottle: Bottle, event: Event) -> Entry:
    """Write what leaves a bottle. Raises: NotEnough, saying who drew last if entered today."""
    try:
        return work.write(bottle, event)
    except NotEnough as error:
        said = f"Count it: stockroom count {bottle.number} …; the difference is put right for you."
        # the ledger knows the sum, and not that somebody judged it by eye
        exact = f"holds {work.say(bottle, left(work.session, bottle))};"
        message = error.message.replace(exact, f"holds {holds(work, bottle)};")
        raise NotEnough(
            f"{message}{_drawn_today(work, bottle)}",
            # a day gone by is counted as of that day, and the ledger names it
            error.hint if work.on < work.stamp.entered_on else said,
        ) from error


def write_off(
    work: Work,
    bottle: str,
    amount: Amount,
    event: Event,
    verb: str,
    asked: tuple[str, ...] = (),
) -> Done:
    """Take what left a bottle without being drawn: spilled or lent. Raises: as `stock.draw`.

    A sealed bottle is opened by lending a part of it, and not by lending it whole.
    """
    found = work.bottle(bottle)
    went = of_its_kind(work.line(found), amount)
    held = check_at_hand(work, found).left
    note = "; ".join(filter(None, (event.note, went.note)))
    entry = take(work, found, replace(event, change=-went.amount.micro, note=note))
    said = f"{verb} {went.words} of {work.called(found)}"
    to = f" {event.reason}" if event.reason else ""
    lent_of_it = entry.kind == EntryKind.LENT and went.amount.micro < held
    opened = open_if_sealed(work, found, entry) if lent_of_it else ()
    details = (*went.told, *opened, *asked)
    return work.done(f"{said}{to}; {remains(work, found)}.", found, entry, details=details)


def remains(work: Work, bottle: Bottle) -> str:
    """What is left in a bottle now, in words: "640 g left"."""
    return f"{holds(work, bottle)} left"


def holds(work: Work, bottle: Bottle) -> str:
    """What a bottle holds now, in words; "about" while it was judged by eye."""
    held = left(work.session, bottle)
    # as at the day of entry, since a day between may have seen it counted
    of_it = f"{STANDING} AND bottle_id = {int(bottle.id or 0)}"
    if held and judged_by_eye(work.reader, work.stamp.entered_on.isoformat(), of_it):
        return format_about(Amount(Kind(work.line(bottle).kind), held))
    return work.say(bottle, held)


def last_use(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """One line on who drew from a bottle last, and what for; nothing where nobody did."""
    draws = [one for one in entries_of(work.session, bottle) if one.kind == EntryKind.DRAWN]
    if not draws:
        return ()
    last = draws[-1]
    use = f" for {last.booking}" if last.booking else ""
    took = work.say(bottle, -last.change)
    return (f"Last used {spell_day(last.happened_on)}: {last.by} drew {took}{use}.",)


def _drawn_today(work: Work, bottle: Bottle) -> str:
    draws = [
        entry
        for entry in entries_of(work.session, bottle, EntryKind.DRAWN)
        if entry.entered_on == work.stamp.entered_on
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
    return first_of(work.session, bottle, EntryKind.OPENED)


def open_if_sealed(work: Work, bottle: Bottle, drawn: Entry) -> tuple[str, ...]:
    """Write the opening that a draw or a loan from a sealed bought bottle implies, and say so.

    Says so too when the bottle's opening is dated after the draw.
    """
    # what is made here is never sealed
    if bottle.made_here:
        return ()
    opening = opening_of(work, bottle)
    earlier = opening is not None and drawn.happened_on < opening.happened_on
    if opening is not None and not (earlier and opened_by_draw(opening)):
        return _opened_later(bottle, opening, drawn)
    if opening is None and work.seen(bottle).record.opened is not None:
        # poured from another: it was opened with that one
        return ()
    work.write(bottle, Event(EntryKind.OPENED, note=opened_note(drawn.id)))
    how = "was sealed: opened" if opening is None else "was opened earlier than written:"
    return (f"{bottle.number} {how} {spell_day(work.on)}.",)


_TAKING = {EntryKind.LENT: "loan", EntryKind.DECANTED: "decanting"}


def _opened_later(bottle: Bottle, opening: Entry, drawn: Entry) -> tuple[str, ...]:
    if opening.happened_on <= drawn.happened_on:
        return ()
    # not mended here: the draw's day may be the slip, and the first opening is kept
    opened = spell_day(opening.happened_on)
    taking = _TAKING.get(EntryKind(drawn.kind), "draw")
    return (
        f"{bottle.number} {drawn.kind} before it was opened on {opened}: put the opening right"
        f" (entry {opening.id}), or the {taking} (entry {drawn.id}).",
    )


def told_of_count(work: Work, drawn: Entry) -> tuple[str, ...]:
    """One line where a later count takes a draw in already, so that what is left stays so."""
    # the ledger evens it out next to it, and before it where that adds
    for number in ((drawn.id or 0) - 1, (drawn.id or 0) + 1):
        evened = work.session.get(Entry, number)
        count_id = evened_count(evened.note) if evened else None
        if evened is not None and count_id and evened.bottle_id == drawn.bottle_id:
            day = spell_day(evened.happened_on)
            return (f"The count of {day} (entry {count_id}) takes it in: what is left stays so.",)
    return ()


def made_from_doubtful(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """One line where a bottle it was made from, at whatever remove, is set aside by that day."""
    above = [work.seen(work.bottle(number)) for number in work.seen(bottle).lineage]
    doubt = set_aside_above(work.seen(bottle), above)
    return (f"{bottle.number} was {doubt}: look before it is used.",) if doubt else ()


def told_of_use(work: Work, bottle: Bottle, served: Booking | None, stands: str) -> tuple[str, ...]:
    """What is worth knowing of a draw: a doubt, a bottle that still stands, an odd booking."""
    unused = told_if_not_used(work, bottle, served) if served else ()
    told = (*made_from_doubtful(work, bottle), *unused)
    return (*told, f"{stands}: noted") if stands else told


def still_standing(work: Work, bottle: facts.Bottle) -> str:
    """Until when the bottle has yet to stand, in words; "" when it has stood long enough."""
    if bottle.record.made is None or not bottle.made_here:
        return ""
    method = methods_of(work.reader).get(bottle.line)
    if method is None:
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


def told_if_not_used(work: Work, bottle: Bottle, booking: Booking) -> tuple[str, ...]:
    """What is odd about a draw for a booking: told, since the class may have wanted it so."""
    recipe = work.session.get_one(Recipe, booking.recipe_id)
    told = []
    if booking.firmness == Firmness.DROPPED:
        told.append(f"{booking.number} is dropped: the draw is noted for it all the same.")
    if not _uses(work, recipe, work.line(bottle).key):
        told.append(
            f"{booking.number} is {recipe.recipe}, {recipe.title}, which does not ask for"
            f" {work.line(bottle).key}: noted all the same."
        )
    return tuple(told)


def _uses(work: Work, recipe: Recipe, key: str) -> bool:
    """Whether a recipe takes a line: asked for, swapped in, or gone into what is asked for."""
    lines, methods = lines_of(work.reader), methods_of(work.reader)
    known = recipes_of(work.reader)[recipe.recipe, recipe.version]
    asked = [one.line for one in known.requirements] + [one.instead for one in known.swaps]
    seen: set[str] = set()
    while asked:
        line = asked.pop()
        if line not in seen and line in lines:
            seen.add(line)
            method = methods.get(line)
            asked += [each for part in method.ingredients for each in part.lines] if method else []
    # a method left empty is worked out from the substance, in whatever form and strength
    substances = {lines[line].substance for line in seen} - {""}
    return key in seen or lines[key].substance in substances
