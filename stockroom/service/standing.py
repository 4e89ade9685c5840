"""What is said at once of where a bottle was put, and under which cap: never a refusal."""

from __future__ import annotations

from stockroom.errors import BadInput
from stockroom.planning.standing import where_things_stand
from stockroom.service.work import Work
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle

_CAPS = ("", "vented", "tight")


def told_of_place(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """The wrong neighbours a bottle has where it stands now, and a tight cap on what makes gas."""
    reader = work.reader
    # the whole place, as the plan's own notes see it
    found = where_things_stand(bottles_of(reader, work.on), lines_of(reader), places_of(reader))
    return tuple(f"{one.subject}: {one.text}." for one in found if one.subject == bottle.number)


def cap_of(cap: str) -> str:
    """The cap as the store keeps it: vented, tight, or blank for not looked. Raises: BadInput."""
    written = cap.strip().lower()
    if written not in _CAPS:
        raise BadInput(f'Cap "{cap}"?', "Add --cap vented, or --cap tight.")
    return written
