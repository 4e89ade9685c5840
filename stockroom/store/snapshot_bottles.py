"""Rows into facts: what stands on the shelves, and the record of each bottle.

Entries put right are left out together with the entries that put them right,
so the picture of any day is as if the slip had never happened.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.temperatures import TemperatureLog
from stockroom.measure.days import PrintedDate
from stockroom.planning.facts import Bottle, Drawn
from stockroom.store.kinds import BEGINNINGS, DAY_NOT_WRITTEN, STANDING, TURNED_UP, EntryKind
from stockroom.store.reading import Reader, Row
from stockroom.store.temperatures import logs_of

# these change the balance alone, and the sums in SQL have them already
_QUIET = (EntryKind.DRAWN, EntryKind.COUNTED, EntryKind.SPILLED, EntryKind.LENT)
_STAYS = (*BEGINNINGS, EntryKind.MOVED, EntryKind.TURNED_UP)
_CHECKS = {
    EntryKind.FOUND: CheckKind.FOUND,
    EntryKind.LOOKED: CheckKind.LOOKED,
    EntryKind.TESTED: CheckKind.TESTED,
}


@dataclass(frozen=True, slots=True)
class _Shelf:
    """What every bottle's row is read beside."""

    lines: dict[int, Row]
    places: dict[int, Row]
    left: dict[int, int]
    events: dict[int, list[Row]]
    lineage: dict[int, tuple[str, ...]]
    logs: dict[int, TemperatureLog]


def bottles_of(reader: Reader, as_at: date, *, gone: bool = False) -> tuple[Bottle, ...]:
    """Every bottle there on a day, by number; an emptied one stays until it is discarded.

    With `gone`, those discarded too: what was found of them still teaches.
    """
    shelf = _shelf(reader, as_at, logs_of(reader, as_at))
    rows = reader.rows("bottle", "ORDER BY number")
    bottles = (_bottle(row, shelf) for row in rows if _begun(shelf.events.get(row["id"])))
    # gone with something left: the entries disagree, and hiding the bottle would hide that
    return tuple(one for one in bottles if gone or one.left or not one.record.gone)


def bottle_of(
    reader: Reader, number: str, as_at: date, *, every_log: bool = False
) -> Bottle | None:
    """One bottle as at a day, gone or not; None when it was not there yet.

    Temperatures logged where it stood come along where something in it ages by
    them, or with `every_log`.
    """
    rows = reader.rows("bottle", "WHERE number = ?", number)
    if not rows:
        return None
    # an id is a number, so it may stand in the question itself
    row = int(rows[0]["id"])
    logs = logs_of(reader, as_at, bottle=row, every=every_log)
    shelf = _shelf(reader, as_at, logs, f" AND bottle_id = {row}")
    return _bottle(rows[0], shelf) if _begun(shelf.events.get(rows[0]["id"])) else None


def _shelf(reader: Reader, as_at: date, logs: dict[int, TemperatureLog], only: str = "") -> _Shelf:
    day = as_at.isoformat()
    return _Shelf(
        lines={row["id"]: row for row in reader.rows("line")},
        places={row["id"]: row for row in reader.rows("place")},
        left=_left(reader, day, only),
        events=_events(reader, day, only),
        lineage=_lineage(reader),
        logs=logs,
    )


def drawn_of(reader: Reader, as_at: date) -> tuple[Drawn, ...]:
    """What was really drawn up to a day, oldest first; spills, loans and counts are not draws."""
    rows = reader.ask(
        "SELECT bottle.number, line.key, happened_on, -change, entry.booking FROM entry"
        " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
        f" WHERE entry.kind = ? AND happened_on <= ? AND {STANDING}"
        " ORDER BY happened_on, entry.id",
        EntryKind.DRAWN,
        as_at.isoformat(),
    )
    return tuple(
        Drawn(number, line, date.fromisoformat(day), amount, booking)
        for number, line, day, amount, booking in rows
    )


def _left(reader: Reader, day: str, only: str) -> dict[int, int]:
    return reader.pairs(
        "SELECT bottle_id, SUM(change) FROM entry"
        f" WHERE happened_on <= ? AND {STANDING}{only} GROUP BY bottle_id",
        day,
    )


def _events(reader: Reader, day: str, only: str) -> dict[int, list[Row]]:
    marks = ", ".join("?" * len(_QUIET))
    rows = reader.rows(
        "entry",
        f"WHERE happened_on <= ? AND kind NOT IN ({marks}) AND {STANDING}{only}"
        " ORDER BY happened_on, id",
        day,
        *_QUIET,
    )
    found: dict[int, list[Row]] = {}
    for row in rows:
        found.setdefault(row["bottle_id"], []).append(row)
    return found


def _begun(events: list[Row] | None) -> bool:
    return any(row["kind"] in BEGINNINGS for row in events or ())


def _lineage(reader: Reader) -> dict[int, tuple[str, ...]]:
    parents: dict[int, list[int]] = {}
    for row in reader.rows("parent"):
        parents.setdefault(row["bottle_id"], []).append(row["parent_id"])
    numbers = reader.pairs("SELECT id, number FROM bottle")
    return {
        child: tuple(numbers[one] for one in _ancestors(child, parents, numbers))
        for child in parents
    }


def _ancestors(child: int, parents: dict[int, list[int]], numbers: dict[int, str]) -> list[int]:
    """Parents, then grandparents and so on; within a generation by number."""
    seen: list[int] = []
    generation = [child]
    while generation:
        above = {one for bottle in generation for one in parents.get(bottle, ())}
        # child and seen left out: a loop in the lineage would otherwise never end
        generation = sorted(above - {child, *seen}, key=lambda one: numbers[one])
        seen += generation
    return seen


def _bottle(row: Row, shelf: _Shelf) -> Bottle:
    events = shelf.events[row["id"]]
    line = shelf.lines[row["line_id"]]
    record = _record(row, events, line, shelf)
    return Bottle(
        number=row["number"],
        line=line["key"],
        left=shelf.left[row["id"]],
        size=row["size"],
        record=record,
        place=record.stays[-1].place if record.stays else "",
        remark=row["remark"],
        cap=row["cap"],
        made_here=bool(row["made_here"]),
        lineage=shelf.lineage.get(row["id"], ()),
        meant_for=_meant_for(events),
        known_by=_known_by(events),
    )


def _made(events: list[Row]) -> Row | None:
    return next((event for event in events if event["kind"] == EntryKind.MADE), None)


def _meant_for(events: list[Row]) -> tuple[str, ...]:
    made = _made(events)
    return tuple(filter(None, made["booking"].split(";"))) if made else ()


def _known_by(events: list[Row]) -> str:
    # no check of the bottle's own, so it dates nothing: only the words of how it is known
    made = _made(events)
    return str(made["strength_text"]) if made else ""


def _record(row: Row, events: list[Row], line: Row, shelf: _Shelf) -> Record:
    kinds = {event["kind"] for event in events}
    received = _day(row["received_on"])
    opened, guessed = _opened(events, received)
    return Record(
        received=received,
        opened=opened,
        opened_guessed=guessed,
        made=_day(row["made_on"]),
        printed=_printed(row, events),
        nominal=line["strength"],
        checks=tuple(_checks(events)),
        stays=tuple(_stays(events, shelf)),
        set_aside=_set_aside(events),
        not_found=_not_found(events),
        gone=EntryKind.DISCARDED in kinds,
    )


def _day(written: str | None) -> date | None:
    return date.fromisoformat(written) if written else None


def _opened(events: list[Row], received: date | None) -> tuple[date | None, bool]:
    # the first opening counts; one without a day counts as opened when it was received
    for event in events:
        if event["kind"] == EntryKind.OPENED:
            guessed = event["note"] == DAY_NOT_WRITTEN
            return (received, True) if guessed else (_day(event["happened_on"]), False)
    return None, False


def _printed(row: Row, events: list[Row]) -> PrintedDate | None:
    if not row["printed_text"]:
        return None
    # the last word counts: whoever settled it wrongly may settle it again
    settled = [_day(event["note"]) for event in events if event["kind"] == EntryKind.DATE_READ]
    if settled and settled[-1]:
        return PrintedDate(row["printed_text"], (settled[-1],))
    readings = tuple(date.fromisoformat(day) for day in row["printed_readings"].split(";") if day)
    return PrintedDate(row["printed_text"], readings)


def _checks(events: list[Row]) -> Iterator[Check]:
    for event in events:
        if event["kind"] in _CHECKS:
            kind = _CHECKS[EntryKind(event["kind"])]
            # a found strength is a result, neither passed nor failed
            passed = event["passed"] is None or bool(event["passed"])
            yield Check(
                date.fromisoformat(event["happened_on"]),
                kind,
                passed,
                event["strength"],
                event["uncertainty"],
                event["peroxide_mg_kg"],
            )


def _stays(events: list[Row], shelf: _Shelf) -> Iterator[Stay]:
    for event in events:
        place_id = event["place_id"]
        if event["kind"] in _STAYS and place_id is not None:
            place = shelf.places[place_id]
            since = date.fromisoformat(event["happened_on"])
            yield Stay(since, place["place"], place["temperature_c"], shelf.logs.get(place_id))


def _set_aside(events: list[Row]) -> str:
    """Why it stands apart: the last reason no good look or test has cleared since."""
    reason = ""
    for event in events:
        looked = event["kind"] in (EntryKind.LOOKED, EntryKind.TESTED)
        if event["kind"] == EntryKind.SET_ASIDE or (looked and not event["passed"]):
            reason = event["reason"] or event["note"] or "did not pass when looked at"
        elif event["kind"] == EntryKind.TURNED_UP:
            # what was wrong with it before it went is no better for its absence
            reason = reason or TURNED_UP
        elif looked or (event["kind"] == EntryKind.FOUND and reason == TURNED_UP):
            reason = ""
    return reason


def _not_found(events: list[Row]) -> bool:
    last = [row["kind"] for row in events if row["kind"] in (EntryKind.LOST, EntryKind.TURNED_UP)]
    return bool(last) and last[-1] == EntryKind.LOST
