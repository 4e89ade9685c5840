"""What a walk writes of one bottle on the list: counted, not found, turned up, seen."""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.planning import facts
from stockroom.service.recount import Round, count_in
from stockroom.service.righting import check_nothing_later
from stockroom.service.standing import told_of_place
from stockroom.service.taking import holds
from stockroom.service.walk_lines import Said, Typed
from stockroom.service.walk_told import Came, Told
from stockroom.service.work import Work, check_at_hand
from stockroom.store import names
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event
from stockroom.store.tables import Bottle


def missing(work: Work, bottle: Bottle, seen: facts.Bottle, walk: Round) -> Told:
    """Write that a bottle is not there; one missed before is told, and nothing is written.

    Raises: NotAllowed when it is gone, or has an entry of a later day, which is named.
    """
    if seen.record.not_found:
        return Told(bottle.number, Came.ALREADY, f"{work.called(bottle)}: still not found.")
    check_at_hand(work, bottle)
    check_nothing_later(work, bottle)
    entry = work.write(bottle, Event(EntryKind.LOST, note=walk.name, walk_id=walk.walk_id))
    held = f", {holds(work, bottle)}" if seen.left else ""
    last = f"; it last stood at {seen.place}" if seen.place else ""
    text = f"Not found: {work.called(bottle)}{held}{last}."
    return Told(bottle.number, Came.MISSING, text, entry.id)


def met(
    work: Work,
    bottle: Bottle,
    seen: facts.Bottle,
    walk: Round,
    typed: Typed,
    along: tuple[str, ...],
) -> Told:
    """Write that a bottle is there, where, and how much is in it where that was said."""
    # one that was missed is at hand again as soon as it is written that it turned up
    if not seen.record.not_found:
        check_at_hand(work, bottle)
    place, entry, details = _stood(work, bottle, seen, walk, typed, along)
    turned_up = seen.record.not_found
    if typed.said is Said.HERE:
        words = "turned up" if turned_up else "seen, not measured"
        text = f"{work.called(bottle)}: {words}{f', at {place}' if place else ''}."
        came = Came.TURNED_UP if turned_up else Came.SEEN
        return Told(bottle.number, came, text, entry, details)
    found = count_in(
        work,
        bottle,
        amount_typed(work, bottle, seen.left, typed),
        walk=walk,
        # what looks the same is no better known than before
        about=typed.about or (typed.said is Said.SAME and seen.about),
        sure=typed.sure,
        confirm=f"the word sure: {bottle.number} … sure",
    )
    came = Came.DIFFERS if found.change else Came.COUNTED
    if turned_up:
        came, details = Came.TURNED_UP, (f"{bottle.number} turned up.", *details)
    return Told(bottle.number, came, f"{found.text}.", found.entry.id, (*found.details, *details))


def _stood(
    work: Work,
    bottle: Bottle,
    seen: facts.Bottle,
    walk: Round,
    typed: Typed,
    along: tuple[str, ...],
) -> tuple[str, int | None, tuple[str, ...]]:
    """Write where a bottle was met, where that is news: its place, the entry, what to say of it."""
    turned_up = seen.record.not_found
    # what turned up stands where it was met: on a walk of one place, there
    place = typed.place or (along[0] if turned_up and len(along) == 1 else seen.place)
    row = names.find_place(work.session, place) if place else None
    short = str(row.place) if row is not None else ""
    moved = short != seen.place
    if not (turned_up or moved or typed.said is Said.HERE):
        return short, None, _elsewhere(bottle, seen, along)
    if row is None and not turned_up:
        raise BadInput(
            f"{bottle.number} is listed at no place: where does it stand?",
            f"Write {bottle.number} here, A2.",
        )
    kind = EntryKind.TURNED_UP if turned_up else EntryKind.MOVED
    event = Event(
        kind, place_id=row.id if row is not None else None, note=walk.name, walk_id=walk.walk_id
    )
    entry = work.write(bottle, event)
    listed = seen.place or "no place"
    apart = ("Set aside until somebody has looked at it.",) if turned_up else ()
    news = (f"It stands at {short} now; it was listed at {listed}.",) if moved else ()
    beside = told_of_place(work, bottle) if moved else ()
    return short, entry.id, (*apart, *news, *beside)


def _elsewhere(bottle: Bottle, seen: facts.Bottle, along: tuple[str, ...]) -> tuple[str, ...]:
    if not along or seen.place in along:
        return ()
    return (
        f"{bottle.number} is listed at {seen.place or 'no place'}, which this walk does not go"
        f" along: if it stands here, stockroom move {bottle.number} {along[0]}.",
    )


def amount_typed(work: Work, bottle: Bottle, left: int, typed: Typed) -> Amount:
    """The amount a line means: as written, as entered, or its part of a full bottle.

    Raises: BadInput for a part of a bottle whose size nobody wrote down.
    """
    if typed.amount is not None:
        return typed.amount
    kind = Kind(work.line(bottle).kind)
    if typed.said is Said.SAME:
        return Amount(kind, left)
    if typed.part and not bottle.size:
        raise BadInput(
            f"{bottle.number}: how much it holds when full is not written down.",
            "Write the amount, with its unit.",
        )
    return Amount(kind, round(typed.part * bottle.size))
