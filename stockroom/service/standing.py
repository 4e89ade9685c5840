"""What is said at once of where a bottle was put, and under which cap: never a refusal."""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.planning.standing import where_things_stand
from stockroom.service.work import Work
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_put_at
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle

_CAPS = ("", "vented", "tight")


def told_of_place(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """The wrong neighbours a bottle has where it stands now, and a tight cap on what makes gas."""
    reader = work.reader
    seen = work.seen(bottle)
    here = [place for place in reader.rows("place") if place["place"] == seen.place]
    # all that was ever put there; the rest of the house stands elsewhere
    beside = bottles_put_at(reader, here[0]["id"], work.on) if here else (seen,)
    there = [one for one in beside if one.place == seen.place]
    lines = lines_of(reader, *{one.line for one in there})
    found = where_things_stand(there, lines, places_of(reader))
    return tuple(f"{one.subject}: {one.text}." for one in found if one.subject == bottle.number)


def cap_of(cap: str) -> str:
    """The cap as the store keeps it: vented, tight, or blank for not looked. Raises: BadInput."""
    written = cap.strip().lower()
    if written not in _CAPS:
        raise BadInput(f'Cap "{cap}"?', "Add --cap vented, or --cap tight.")
    return written
