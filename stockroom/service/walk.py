"""A walk along the shelves as it stands: what is still to be counted, and what it met so far.

Only reads; `walk_entering.py` is where a walk is started, counted and ended.
"""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date

from stockroom.errors import NotAllowed, UnknownName
from stockroom.findings import Finding
from stockroom.measure.amounts import Kind
from stockroom.measure.days import spell_day
from stockroom.planning.facts import Bottle
from stockroom.planning.on_shelf import on_shelf
from stockroom.planning.standing import where_things_stand
from stockroom.planning.walking import Met, Visit, Walk, along

# handed on by name: the command line may not reach into planning
from stockroom.planning.walking import Sheet as Sheet
from stockroom.settings import StoreAt
from stockroom.store import walks as rows
from stockroom.store.kinds import EntryKind
from stockroom.store.likeness import unknown
from stockroom.store.reading import Reader, Row, reading
from stockroom.store.snapshot import places_of
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of

_NOBODYS = 0
"""The number of a walk that was not started: no row has it."""


def sheets(path: StoreAt, *, on: date) -> tuple[Sheet, ...]:
    """Every walk, the earliest first; what a finished one left uncounted is not looked up."""
    with reading(path) as reader:
        found = rows.walks(reader)
        bottles = bottles_of(reader, on) if found else ()
        walks = [walk_from(reader, row) for row in found]
        return tuple(
            _sheet(reader, row["id"], walk, () if walk.ended else bottles, on)
            for row, walk in zip(found, walks, strict=True)
        )


def sheet(path: StoreAt, name: str, *, on: date, again: bool = False) -> Sheet | None:
    """One walk as it stands on a day, a finished one as it was left; None when there is none.

    With `again` what it counted is listed once more.
    """
    with reading(path) as reader:
        row = rows.walk_named(reader, name)
        if row is None:
            return None
        walk = walk_from(reader, row)
        day = walk.ended or on
        return _sheet(reader, row["id"], walk, bottles_of(reader, day), day, again=again)


def sheet_along(path: StoreAt, places: Sequence[str], *, on: date) -> Sheet:
    """What a walk along these places would count, none for every shelf; nobody has started it.

    Raises: UnknownName with the nearest for a place the house has not.
    """
    with reading(path) as reader:
        held = {place.name.lower(): place.name for place in places_of(reader)}
        for place in places:
            if place.lower() not in held:
                raise unknown("place", place, list(held.values()))
        meant = tuple(dict.fromkeys(held[place.lower()] for place in places))
        walk = Walk(", ".join(meant) or "all shelves", meant, on, "")
        return _sheet(reader, _NOBODYS, walk, bottles_of(reader, on), on)


def standing_wrong(path: StoreAt, sheet: Sheet, *, on: date) -> tuple[Finding, ...]:
    """What stands beside what it must not at the places of a walk, and tight caps there."""
    with reading(path) as reader:
        bottles, places = bottles_of(reader, on), places_of(reader)
        here = [one for one in bottles if not sheet.walk.places or one.place in sheet.walk.places]
        return tuple(where_things_stand(here, lines_of(reader), places))


def open_sheet(path: StoreAt, name: str, *, on: date, again: bool = False) -> Sheet:
    """A walk that can be taken up again. Raises: UnknownName; NotAllowed when it was ended."""
    found = sheet(path, name, on=on, again=again)
    if found is None:
        raise no_walk(name, [each.walk.name for each in sheets(path, on=on)])
    check_not_ended(found.walk)
    return found


def no_walk(name: str, held: list[str]) -> UnknownName:
    """The error for a walk that nobody started: the nearest, and how to start it."""
    stranger = unknown("walk", name, held)
    return UnknownName(stranger.message, f'{stranger.hint} To start it: stockroom walk "{name}".')


def check_not_ended(walk: Walk) -> None:
    """Pass while a walk can be taken up again. Raises: NotAllowed, saying its last day."""
    if walk.ended is not None:
        raise NotAllowed(
            f'The walk "{walk.name}" was ended on {spell_day(walk.ended)} by {walk.ended_by};'
            " it is not taken up again.",
            f'Start another under a name of its own: stockroom walk "{walk.name} 2".',
        )


def walk_from(reader: Reader, row: Row) -> Walk:
    """A walk from its row, and when it was ended."""
    end = rows.end_of(reader, row["id"])
    return Walk(
        row["name"],
        tuple(filter(None, row["places"].split(";"))),
        date.fromisoformat(row["started_on"]),
        row["by"],
        date.fromisoformat(end["ended_on"]) if end else None,
        end["by"] if end else "",
    )


def _sheet(
    reader: Reader,
    walk_id: int,
    walk: Walk,
    bottles: tuple[Bottle, ...],
    on: date,
    *,
    again: bool = False,
) -> Sheet:
    visits = visits_of(reader, walk_id)
    places = places_of(reader)
    settings = reader.pairs("SELECT setting, value FROM house")
    met = {visit.bottle for visit in visits}
    left = along(walk, bottles, () if again else met)
    # in the order it was given to walk in, else as the house lists its places
    order = [place for name in walk.places for place in places if place.name == name] or places
    listed = on_shelf(left, lines_of(reader) if left else {}, order, on)
    there = tuple(row for row in listed if not row.bottle.record.not_found)
    return Sheet(
        walk,
        visits,
        tuple(row for row in there if row.bottle.number not in met),
        tuple(row for row in listed if row.bottle.record.not_found),
        places,
        settings.get("name", ""),
        settings.get("practice") == "yes",
        there if again else (),
    )


def visits_of(reader: Reader, walk_id: int) -> tuple[Visit, ...]:
    """Each bottle a walk met, in the order it was met first."""
    met = rows.met_by(reader, walk_id)
    known = {
        row["id"]: row
        for row in reader.ask(
            "SELECT bottle.id, number, line.key, line.kind FROM bottle"
            " JOIN line ON line.id = line_id"
            " WHERE bottle.id IN (SELECT bottle_id FROM entry WHERE walk_id = ?)",
            walk_id,
        )
    }
    found = [_visit(known[bottle], entries, walk_id) for bottle, entries in met.items()]
    return tuple(sorted(found, key=lambda visit: visit.entry))


def _visit(bottle: Row, entries: list[Row], walk_id: int) -> Visit:
    own = sorted((row for row in entries if row["walk_id"] == walk_id), key=lambda row: row["id"])
    counts = [row for row in own if row["kind"] == EntryKind.COUNTED]
    last = counts[-1] if counts else own[-1]
    return Visit(
        bottle["number"],
        bottle["key"],
        Kind(bottle["kind"]),
        how_met([row["kind"] for row in own]),
        rows.left_after(entries, last),
        sum(rows.difference_by(entries, row) for row in counts),
        bool(last["about"]),
        own[-1]["by"],
        date.fromisoformat(own[-1]["happened_on"]),
        own[0]["id"],
    )


def how_met(kinds: list[str]) -> Met:
    """How a walk met a bottle, by the kinds of its entries, the earliest written first."""
    if kinds[-1] == EntryKind.LOST:
        return Met.MISSING
    for kind, how in _HOW:
        if kind in kinds:
            return how
    return Met.SEEN


_HOW = (
    (EntryKind.ARRIVED, Met.UNLISTED),
    (EntryKind.TURNED_UP, Met.TURNED_UP),
    (EntryKind.COUNTED, Met.COUNTED),
)
