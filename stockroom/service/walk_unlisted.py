"""A bottle met on a walk that is on no list: numbered at once, known to nobody yet."""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.keeping.unnamed import UNKNOWN
from stockroom.service.recount import Round
from stockroom.service.standing import told_of_place
from stockroom.service.unknown import log_in
from stockroom.service.walk_lines import Typed
from stockroom.service.walk_told import Came, Told
from stockroom.service.work import Work
from stockroom.store import names
from stockroom.store import walks as rows
from stockroom.store.kinds import EntryKind
from stockroom.store.likeness import plain
from stockroom.store.tables import Bottle


def unlisted(work: Work, walk: Round, typed: Typed, along: tuple[str, ...], *, again: bool) -> Told:
    """Give it a number; one that looks the same, at the same place, is taken for the same.

    Two jars alike are told apart by `again`. Raises: BadInput where it is not said where it
    stands, or about how much it holds; UnknownName for the place; BadAmount.
    """
    looks = typed.bottle
    place = typed.place or (along[0] if len(along) == 1 else "")
    if not place or typed.amount is None:
        asked = "about how much does it hold" if place else "where does it stand"
        raise BadInput(f'"{looks}": {asked}?', f"Write + {looks}, {place or 'A2'}, 100 g.")
    held = _logged_before(work, walk, looks, place)
    if held and not again:
        return Told(held, Came.ALREADY, f"{looks}: entered already, as {held}.")
    bottle, entry = log_in(work, looks, typed.amount, place, note=walk.name, walk_id=walk.walk_id)
    text = f"{bottle.number}: unknown, {looks}, turned up at {place}."
    details = (
        f'Write on it: {bottle.number} "{UNKNOWN}".',
        *_may_be(work, bottle.number, looks),
        *told_of_place(work, bottle),
    )
    return Told(bottle.number, Came.UNLISTED, text, entry.id, details)


def _may_be(work: Work, number: str, looks: str) -> tuple[str, ...]:
    """One line where it is said to look like a thing the house keeps: then it has a label."""
    try:
        line = names.find_line(work.session, looks)
    except BadInput:
        return ()
    return (
        f"{line.key} is kept here. If its label says so: stockroom unknown {number} --is"
        f' "{line.key}" --evidence "its label".',
    )


def _logged_before(work: Work, walk: Round, looks: str, place: str) -> str:
    """The number this walk gave a bottle that looks so, at that place; "" for none."""
    if walk.walk_id is None:
        return ""
    where = work.place_id(place)
    for bottle, entries in rows.met_by(work.reader, walk.walk_id).items():
        ours = any(
            row["kind"] == EntryKind.ARRIVED
            and row["walk_id"] == walk.walk_id
            and row["place_id"] == where
            for row in entries
        )
        held = work.session.get_one(Bottle, bottle) if ours else None
        if held is not None and plain(held.remark) == plain(looks):
            return held.number
    return ""
