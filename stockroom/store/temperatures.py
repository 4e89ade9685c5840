"""Rows of the table of readings, and the temperature records made of them.

A reading is kept in hundredths of a degree at a local clock time to the minute.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date, datetime, timedelta
from typing import TYPE_CHECKING

from stockroom.keeping.temperatures import TemperatureLog, midnight, moment_of
from stockroom.measure.formats import format_number
from stockroom.store.kinds import STANDING
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, Row

if TYPE_CHECKING:
    from stockroom.store.engine import Session

_TABLE = "readings"
_SPAN = "WHERE place_id = :place AND at >= :first AND at < :last"

PER_DEGREE = 100
"""A reading counts hundredths of a degree."""


def logs_of(
    reader: Reader, as_at: date, *, bottles: Sequence[int] | None = None, every: bool = False
) -> dict[int, TemperatureLog]:
    """The records of the places bottles have stood in, up to a day, by the place's row number.

    Only places where something ages by its warmth, unless `every` is asked for; with
    `bottles` (their row numbers) only the places of those.
    """
    # most stores hold no reading at all, and then nothing more is asked
    if not reader.ask("SELECT 1 FROM reading LIMIT 1"):
        return {}
    day = as_at.isoformat()
    places = reader.pairs(_stood(bottles, every=every), day)
    logs = {place: log_of(reader, place, _eve(since), day) for place, since in places.items()}
    return {place: log for place, log in logs.items() if log is not None}


def _eve(day: str) -> str:
    # a day begins between two readings, and the one before midnight tells how
    return (date.fromisoformat(day) - timedelta(days=1)).isoformat()


def _stood(bottles: Sequence[int] | None, *, every: bool) -> str:
    """The question for each place and the first day a bottle was put there."""
    warm = (
        " AND line_id IN (SELECT line_id FROM keeping_rule WHERE factor_per_10c IS NOT NULL"
        " OR ea_kj_mol IS NOT NULL OR named_law <> '')"
    )
    # an id is a number, so it may stand in the question itself
    listed = "" if bottles is None else ", ".join(str(int(one)) for one in bottles)
    only = f" AND bottle_id IN ({listed})" if listed else ""
    return (
        "SELECT place_id, MIN(happened_on) FROM entry JOIN bottle ON bottle.id = bottle_id"
        f" WHERE place_id IS NOT NULL AND happened_on <= ? AND {STANDING}{only}"
        f"{'' if every else warm} GROUP BY place_id"
    )


def log_of(
    reader: Reader, place_id: int, since: str = "", until: str = "9999"
) -> TemperatureLog | None:
    """What is held of a place from one ISO day to another, both included; None when nothing is."""
    rows = reader.ask(
        "SELECT at, centi FROM reading WHERE place_id = ? AND at >= ? AND at < ? ORDER BY at",
        place_id,
        since,
        # "T24" comes after every time of its day
        f"{until}T24",
    )
    if not rows:
        return None
    return TemperatureLog(_minutes(rows), tuple(row[1] / PER_DEGREE for row in rows))


def _minutes(rows: list[Row]) -> tuple[int, ...]:
    # a year has 365 days and a day 1 440 minutes: each is worked out once, and not per reading
    texts = [row[0] for row in rows]
    days = {text: midnight(date.fromisoformat(text)) for text in {text[:10] for text in texts}}
    clock = {text: 60 * int(text[1:3]) + int(text[4:6]) for text in {text[10:] for text in texts}}
    return tuple(days[text[:10]] + clock[text[10:]] for text in texts)


def place_row(reader: Reader, text: str) -> Row:
    """The place by its short or its long name. Raises: UnknownName with the nearest three."""
    rows = reader.rows("place")
    for column in ("place", "name"):
        for row in rows:
            if plain(row[column]) == plain(text) != "":
                return row
    raise unknown("place", text, (row["place"] for row in rows))


def add_readings(session: Session, place_id: int, readings: Iterable[tuple[int, float]]) -> None:
    """Append readings of a place, (minute, °C); the caller has left out those that are held."""
    # here, because the reading half of the store never loads the tables
    from sqlmodel import insert

    from stockroom.store.tables import Reading

    rows = [
        {"place_id": place_id, "at": _text(moment_of(minute)), "centi": round(PER_DEGREE * degrees)}
        for minute, degrees in readings
    ]
    if rows:
        session.connection().execute(insert(Reading), rows)


def _text(moment: datetime) -> str:
    return moment.isoformat(timespec="minutes")


@dataclass(frozen=True, slots=True)
class Noted:
    """What was done to a place's readings, as it was recorded: brought in, or taken back."""

    told: str
    taken_back: bool
    why: str
    by: str
    on: str


def noted_of(reader: Reader, place: str) -> tuple[Noted, ...]:
    """What was brought in and taken back of a place, oldest first."""
    rows = reader.rows(
        "row_change", "WHERE table_name = ? AND row_key = ? ORDER BY id", _TABLE, place
    )
    return tuple(
        Noted(row["after"] or row["before"], not row["after"], row["why"], row["by"],
              row["entered_on"])
        for row in rows
    )  # fmt: skip


def note_file(
    session: Session, place: str, told: str, *, by: str, today: date, at: datetime
) -> None:
    """Keep on record which file brought readings of a place, when and by whom."""
    _note(session, place, ("", told), "a logger's file brought in", by=by, today=today, at=at)


def take_back(
    session: Session,
    place: Row,
    days: tuple[date, date],
    *,
    why: str,
    by: str,
    today: date,
    at: datetime,
) -> str:
    """Take a place's readings of some days, both included, out of use: which, in words.

    They are kept, with who, when and why. "" and nothing done where none is held.
    """
    from sqlalchemy import text

    span = {"place": place["id"], "first": days[0].isoformat(), "last": f"{days[1]}T24"}
    link = session.connection()
    count, first, last = link.execute(
        text(f"SELECT count(*), min(at), max(at) FROM reading {_SPAN}"), span
    ).one()
    if not count:
        return ""
    told = span_in_words(count, first, last)
    change = _note(session, place["place"], (told, ""), why, by=by, today=today, at=at)
    kept = "INSERT INTO reading_taken_back (place_id, at, centi, change_id)"
    link.execute(
        text(f"{kept} SELECT place_id, at, centi, :change FROM reading {_SPAN}"),
        span | {"change": change},
    )
    link.execute(text(f"DELETE FROM reading {_SPAN}"), span)
    return told


def span_in_words(count: int, first: str, last: str) -> str:
    """So many readings and from when to when: "2 readings, 2027-01-04 00:00 to …"."""
    readings = f"{format_number(count)} reading{'' if count == 1 else 's'}"
    return f"{readings}, {first.replace('T', ' ')} to {last.replace('T', ' ')}"


def _note(
    session: Session,
    place: str,
    change: tuple[str, str],
    why: str,
    *,
    by: str,
    today: date,
    at: datetime,
) -> int:
    from stockroom.store.tables import RowChange

    row = RowChange(
        table_name=_TABLE,
        row_key=place,
        column_name="at",
        before=change[0],
        after=change[1],
        why=why,
        by=by,
        entered_on=today,
        entered_at=at.isoformat(sep=" "),
    )
    session.add(row)
    # numbered at once: what is taken back names the change that took it
    session.flush()
    assert row.id is not None
    return row.id
