"""Rows into facts: what stands on the shelves; the record of each bottle is in `records.py`.

Entries put right are left out together with the entries that put them right,
so the picture of any day is as if the slip had never happened.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from functools import cache

from stockroom.planning.facts import Bottle, Drawn, WrittenOff
from stockroom.store.estimates import judged_by_eye
from stockroom.store.kinds import BEGINNINGS, EntryKind, made_note, standing_on
from stockroom.store.reading import Reader, Row
from stockroom.store.records import Books, origin_of, own_checks, record_of
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.temperatures import logs_of
from stockroom.store.unnamed import apart, named_later, nameless_on

# these change the balance alone, and the sums in SQL have them already
_QUIET = (
    EntryKind.DRAWN,
    EntryKind.COUNTED,
    EntryKind.SPILLED,
    EntryKind.LENT,
    EntryKind.DECANTED,
)


@dataclass(frozen=True, slots=True)
class _Shelf:
    """What every bottle's row is read beside."""

    books: Books
    left: dict[int, int]
    lineage: dict[int, tuple[str, ...]]
    about: frozenset[int]
    nameless: frozenset[int]


def bottles_of(
    reader: Reader, as_at: date, known_on: date | None = None, *, gone: bool = False
) -> tuple[Bottle, ...]:
    """Every bottle there on a day, by number; an emptied one stays until it is discarded.

    As it was, by all that is known now; with `known_on`, as it was known by the end of
    that day: nothing entered later counts, what was put right later still stands, and
    what was named later has no name. Lines, places and labels are as they are now, and so
    are temperatures logged. With `gone`, those discarded too: what was found of them still
    teaches.
    """
    rows = reader.rows("bottle", "ORDER BY number")
    shelf = _shelf(reader, as_at, known_on, rows)
    bottles = (_bottle(row, shelf) for row in rows if _begun(shelf, row))
    # gone with something left: the entries disagree, and hiding the bottle would hide that
    return tuple(one for one in bottles if gone or one.left or not one.record.gone)


def bottle_of(
    reader: Reader,
    number: str,
    as_at: date,
    known_on: date | None = None,
    *,
    every_log: bool = False,
) -> Bottle | None:
    """One bottle as at a day, gone or not; None when it was not there yet. `known_on` as above.

    Temperatures logged where it stood come along where something in it ages by
    them, or with `every_log`.
    """
    rows = reader.rows("bottle", "WHERE number = ?", number)
    if not rows:
        return None
    rows += _poured_from(reader, [rows[0]["id"]])
    shelf = _shelf(reader, as_at, known_on, rows, asked=1, every_log=every_log)
    return _bottle(rows[0], shelf) if _begun(shelf, rows[0]) else None


def bottles_put_at(reader: Reader, place_id: int, as_at: date) -> tuple[Bottle, ...]:
    """Every bottle there on a day that was ever put at a place, by number; gone ones too."""
    once = "WHERE id IN (SELECT bottle_id FROM entry WHERE place_id = ?) ORDER BY number"
    rows = reader.rows("bottle", once, place_id)
    if not rows:
        return ()
    all_of = [*rows, *_poured_from(reader, [row["id"] for row in rows])]
    shelf = _shelf(reader, as_at, None, all_of, asked=len(rows))
    return tuple(_bottle(row, shelf) for row in rows if _begun(shelf, row))


def _shelf(
    reader: Reader,
    as_at: date,
    known_on: date | None,
    rows: Sequence[Row],
    *,
    asked: int = 0,
    every_log: bool = False,
) -> _Shelf:
    """What the entries say up to a day of these bottles, by what was known on another.

    With so many `asked` about, the others are there for the first ones to be read from.
    """
    which = standing_on(known_on)
    day, numbered = as_at.isoformat(), {int(row["id"]): row for row in rows}
    # an id is a number, so it may stand in the question itself
    ids = [*map(str, numbered)] if asked else []
    all_of = f"{which} AND bottle_id IN ({', '.join(ids)})" if asked else which
    own = f"{which} AND bottle_id IN ({', '.join(ids[:asked])})" if asked else which
    parents = _parents(reader, [*numbered] if asked else None)
    named = _named(reader, rows, known_on)
    held = {row["line_id"] for row in rows} | {*named.values()} if asked else ()
    only = f"WHERE id IN ({', '.join(str(int(one)) for one in held)}) " if held else ""
    lines = reader.rows("line", f"{only}ORDER BY id")
    books = Books(
        rows=numbered,
        lines={row["id"]: row for row in lines},
        places={row["id"]: row for row in reader.rows("place")},
        events=_events(reader, day, all_of),
        parents=parents,
        logs=logs_of(reader, as_at, bottles=[*numbered] if asked else None, every=every_log),
        poured=cache(lambda one: _poured(reader, numbered[one], parents.get(one, ()), which)),
        rules=cache(lambda key: lines_of(reader, key)[key].rules),
        named=named,
    )
    return _Shelf(
        books,
        _left(reader, day, own),
        _lineage(reader, parents),
        judged_by_eye(reader, day, own),
        nameless_on(reader, day, own),
    )


def _named(reader: Reader, rows: Sequence[Row], known_on: date | None) -> dict[int, int]:
    """The lines, by bottle, that were taken for what is in it; each by its id."""
    keys = named_later(reader, known_on)
    ids = reader.pairs("SELECT key, id FROM line") if keys else {}
    return {row["id"]: ids[keys[row["number"]]] for row in rows if row["number"] in keys}


def _poured_from(reader: Reader, bottles: list[int]) -> list[Row]:
    """The bottles these were decanted or mixed from, and what those were poured from in turn."""
    found: dict[int, Row] = {}
    generation = bottles
    while generation:
        listed = ", ".join(map(str, generation))
        rows = reader.rows(
            "bottle",
            f"WHERE id IN (SELECT decanted_from FROM bottle WHERE id IN ({listed}))"
            " OR id IN (SELECT parent_id FROM parent JOIN entry"
            " ON entry.bottle_id = parent.bottle_id"
            f" WHERE parent.bottle_id IN ({listed}) AND entry.kind = ?) ORDER BY id",
            EntryKind.MIXED,
        )
        generation = [row["id"] for row in rows if row["id"] not in found]
        found |= {row["id"]: row for row in rows}
    return list(found.values())


def _poured(reader: Reader, into: Row, parents: Iterable[int], which: str) -> dict[int, int]:
    """How much went into a mixture, by the id of the bottle it came from."""
    # by the parents' own entries: no index knows a note, and the ledger is long
    only = ", ".join(str(int(one)) for one in parents)
    return reader.pairs(
        f"SELECT bottle_id, -SUM(change) FROM entry WHERE bottle_id IN ({only or 'NULL'})"
        f" AND kind = ? AND note = ? AND {which} GROUP BY bottle_id ORDER BY bottle_id",
        EntryKind.DECANTED,
        made_note(into["number"]),
    )


def drawn_of(reader: Reader, as_at: date, known_on: date | None = None) -> tuple[Drawn, ...]:
    """What was really drawn up to a day, oldest first; spills, loans and counts are not draws."""
    rows = reader.ask(
        "SELECT bottle.number, line.key, happened_on, -change, entry.booking FROM entry"
        " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
        f" WHERE entry.kind = ? AND happened_on <= ? AND {standing_on(known_on)}"
        " ORDER BY happened_on, entry.id",
        EntryKind.DRAWN,
        as_at.isoformat(),
    )
    return tuple(
        Drawn(number, line, date.fromisoformat(day), amount, booking)
        for number, line, day, amount, booking in rows
    )


def written_off_of(
    reader: Reader, as_at: date, known_on: date | None = None
) -> tuple[WrittenOff, ...]:
    """What was spilled or lent up to a day, oldest first; what came back is below zero."""
    rows = reader.ask(
        "SELECT bottle.number, line.key, happened_on, -change, entry.kind FROM entry"
        " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
        f" WHERE entry.kind IN (?, ?) AND happened_on <= ? AND {standing_on(known_on)}"
        " ORDER BY happened_on, entry.id",
        EntryKind.SPILLED,
        EntryKind.LENT,
        as_at.isoformat(),
    )
    return tuple(
        WrittenOff(number, line, date.fromisoformat(day), amount, how)
        for number, line, day, amount, how in rows
    )


def _left(reader: Reader, day: str, which: str) -> dict[int, int]:
    return reader.pairs(
        "SELECT bottle_id, SUM(change) FROM entry"
        f" WHERE happened_on <= ? AND {which} GROUP BY bottle_id",
        day,
    )


def _events(reader: Reader, day: str, which: str) -> dict[int, list[Row]]:
    marks = ", ".join("?" * len(_QUIET))
    rows = reader.rows(
        "entry",
        f"WHERE happened_on <= ? AND kind NOT IN ({marks}) AND {which} ORDER BY happened_on, id",
        day,
        *_QUIET,
    )
    found: dict[int, list[Row]] = {}
    for row in rows:
        found.setdefault(row["bottle_id"], []).append(row)
    return found


def _begun(shelf: _Shelf, bottle: Row) -> bool:
    return any(row["kind"] in BEGINNINGS for row in shelf.books.events.get(bottle["id"], ()))


def _parents(reader: Reader, only: list[int] | None) -> dict[int, list[int]]:
    """The parents of every bottle, or of these and of all they come from."""
    listed = ", ".join(map(str, only or ()))
    # UNION keeps each once, so that a loop in the lineage ends
    above = (
        "WHERE bottle_id IN (WITH RECURSIVE up(id) AS"
        f" (SELECT id FROM bottle WHERE id IN ({listed})"
        " UNION SELECT parent_id FROM parent JOIN up ON parent.bottle_id = up.id)"
        " SELECT id FROM up) ORDER BY id"
    )
    parents: dict[int, list[int]] = {}
    for row in reader.rows("parent", "ORDER BY id" if only is None else above):
        parents.setdefault(row["bottle_id"], []).append(row["parent_id"])
    return parents


def _lineage(reader: Reader, parents: dict[int, list[int]]) -> dict[int, tuple[str, ...]]:
    # most were bought, and one of those has no forebears to name
    numbers = reader.pairs("SELECT id, number FROM bottle") if parents else {}
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
    line = shelf.books.line_of(row["id"])["key"]
    nameless = row["id"] in shelf.nameless
    record = apart(record_of(shelf.books, row["id"]), line, row["remark"], nameless=nameless)
    own = own_checks(shelf.books.events[row["id"]])
    origin = origin_of(shelf.books, row["id"])
    return Bottle(
        number=row["number"],
        line=line,
        left=shelf.left[row["id"]],
        size=row["size"],
        record=record,
        place=record.stays[-1].place if record.stays else "",
        remark=row["remark"],
        cap=row["cap"],
        made_here=bool(row["made_here"]),
        lineage=shelf.lineage.get(row["id"], ()),
        meant_for=tuple(filter(None, origin["booking"].split(";"))) if origin else (),
        # no check of the bottle's own, so it dates nothing: only the words of how it is known
        known_by=str(origin["strength_text"]) if origin else "",
        inherited=len(record.checks) - own,
        about=row["id"] in shelf.about,
        lot=row["lot"],
        assay=row["assay"],
    )
