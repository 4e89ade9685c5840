"""What a store holds, as the reading of a spreadsheet wants it: its names, and its bottles."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.bringing.here import SOMETIME, UNOPENED, Here, Standing, standing_by_key
from stockroom.bringing.known import House, KnownLine, KnownPlace
from stockroom.measure.amounts import Kind
from stockroom.store.brought_in_marks import marks_in
from stockroom.store.kinds import BEGINNINGS, DAY_NOT_WRITTEN, STANDING, EntryKind
from stockroom.store.likeness import nearest
from stockroom.store.reading import Reader, Row


def house_in(reader: Reader) -> House:
    """The stock lines and places of a store, with every name they answer to."""
    substances = {row["id"]: row for row in reader.rows("substance")}
    others: dict[int, list[str]] = {}
    for row in reader.rows("other_name"):
        others.setdefault(row["substance_id"], []).append(row["name"])
    made = {row["line_id"] for row in reader.rows("method")}
    lines = [
        _line(row, substances.get(row["substance_id"]), others, made=row["id"] in made)
        for row in reader.rows("line")
    ]
    places = [KnownPlace(row["place"], row["name"]) for row in reader.rows("place")]
    return House(tuple(lines), tuple(places), nearest)


def _line(
    row: Row, substance: Row | None, others: dict[int, list[str]], *, made: bool
) -> KnownLine:
    names = [] if substance is None else [substance["cas"], *others.get(substance["id"], ())]
    formula = row["formula"] or (substance["formula"] if substance is not None else "")
    return KnownLine(
        key=row["key"],
        item=row["item"],
        form=row["form"],
        kind=Kind(row["kind"]),
        substance=substance["substance"] if substance is not None else "",
        names=tuple(name for name in names if name),
        formula=formula,
        strength=row["strength"],
        unit=row["unit"],
        strength_text=row["strength_text"],
        molar_mass=substance["molar_mass"] if substance is not None else None,
        density=row["density"],
        made=made and row["form"] == "solution",
        never_kept=row["never_kept"],
    )


def here_in(reader: Reader) -> Here:
    """The bottles of a store: those brought in from a list by their marks, all by their kind.

    One whose arrival was put right is not here, so its row may be brought in again; one
    that was thrown away since is, and its row is not.
    """
    marks: dict[str, list[str]] = {}
    readings: dict[str, dict[str, list[str]]] = {}
    standing = []
    days = _days_of(reader)
    lines = reader.pairs("SELECT id, key FROM line")
    for row in reader.rows("bottle"):
        if row["id"] not in days.begun:
            continue
        mark, reading = marks_in(row["source"])
        if mark:
            marks.setdefault(mark, []).append(row["number"])
            readings.setdefault(reading, {}).setdefault(mark, []).append(row["number"])
        if mark or row["id"] not in days.gone:
            standing.append(_standing(row, lines[row["line_id"]], days, listed=bool(mark)))
    groups = {
        reading: tuple(tuple(each) for each in of_rows.values())
        for reading, of_rows in readings.items()
    }
    by_mark = {mark: tuple(numbers) for mark, numbers in marks.items()}
    return Here(by_mark, groups, standing_by_key(standing))


@dataclass(frozen=True, slots=True)
class _Days:
    """What the entries tell of bottles by their id; each opening with its day and its note."""

    begun: frozenset[int]
    gone: frozenset[int]
    opened: dict[int, tuple[str, str]]
    places: dict[int, frozenset[str]]


def _days_of(reader: Reader) -> _Days:
    places: dict[int, set[str]] = {}
    asked = (
        "SELECT DISTINCT bottle_id, place.place FROM entry"
        f" JOIN place ON place.id = entry.place_id WHERE {STANDING}"
    )
    for bottle, place in reader.ask(asked):
        places.setdefault(bottle, set()).add(place)
    begun = (one for kind in BEGINNINGS for one in _entries(reader, kind))
    return _Days(
        begun=frozenset(begun),
        gone=frozenset(_entries(reader, EntryKind.DISCARDED)),
        opened=_entries(reader, EntryKind.OPENED),
        places={one: frozenset(each) for one, each in places.items()},
    )


def _entries(reader: Reader, kind: EntryKind) -> dict[int, tuple[str, str]]:
    """Each bottle's first entry of a kind: its day and its note."""
    asked = (
        "SELECT bottle_id, happened_on, note FROM entry"
        f" WHERE kind = ? AND {STANDING} ORDER BY entry.id DESC"
    )
    # the first stands last, and is the one that stays
    return {row[0]: (str(row[1]), row[2]) for row in reader.ask(asked, kind)}


def _standing(row: Row, line: str, days: _Days, *, listed: bool) -> Standing:
    printed = row["printed_readings"].partition(";")[0]
    opened = {UNOPENED}
    if row["id"] in days.opened:
        day, note = days.opened[row["id"]]
        # opened here since, or opened in the list by now: the list and the house may differ
        opened = {SOMETIME if note == DAY_NOT_WRITTEN else day, *([UNOPENED] if listed else ())}
    return Standing(
        number=row["number"],
        line=line,
        places=days.places.get(row["id"], frozenset()),
        size=row["size"],
        opened=frozenset(opened),
        printed=date.fromisoformat(printed) if printed else None,
        listed=listed,
    )
