"""A place's logged temperatures: a logger's file brought in, and what is held looked at."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date, datetime
from itertools import pairwise
from pathlib import Path

from stockroom import clock
from stockroom.errors import BadDate, BadInput, NotAllowed
from stockroom.keeping.arrhenius import MKT_EA
from stockroom.keeping.logger_file import LoggerFile, read_logger
from stockroom.keeping.storage_limits import Warmth as Warmth
from stockroom.keeping.storage_limits import with_record
from stockroom.keeping.temperatures import TemperatureLog, moment_of
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_number
from stockroom.service.database import is_practice
from stockroom.settings import StoreAt
from stockroom.store.reading import Reader, Row, reading
from stockroom.store.temperatures import (
    add_readings,
    log_of,
    note_file,
    noted_of,
    place_row,
    span_in_words,
    take_back,
)

# warmer than any place a laboratory stores in: a file that does not say is asked about
_DOUBTED_C, _OFF_C, _NEAR_C = 50.0, 15.0, 8.0
# readings are held in hundredths of a degree
_HELD_TO = 0.0051
_MOST_GAPS = 5


@dataclass(frozen=True, slots=True)
class Meant:
    """What somebody says of a file that it does not say itself; see `read_logger`."""

    day_first: bool | None = None
    scale: str = ""
    column: str = ""
    accept_gaps: bool = False


AS_IT_STANDS = Meant()


def held(
    path: StoreAt,
    place: str,
    *,
    start: date | None = None,
    end: date | None = None,
    energy: float | None = None,
) -> Warmth:
    """What is held of a place, from one day to another, both included.

    Raises: UnknownName with the nearest places; BadDate for days that run backwards.
    """
    if start and end and end < start:
        raise BadDate(f"{start} to {end} runs backwards.", "Swap --from and --to.")
    with reading(path) as reader:
        row = place_row(reader, place)
        days = [day.isoformat() if day else usual for day, usual in ((start, ""), (end, "9999"))]
        log, noted = log_of(reader, row["id"], *days), _noted(reader, row)
    return replace(_warmth(row, log, energy), noted=noted, practice=is_practice(path))


def bring_in(
    path: StoreAt,
    place: str,
    file: Path,
    *,
    meant: Meant = AS_IT_STANDS,
    energy: float | None = None,
    today: date,
    by: str = "",
) -> Warmth:
    """Add a logger's readings to a place: all of them, or none when anything is wrong.

    Readings that are held already are passed over. Raises: BadInput for a file that
    cannot be read; NotAllowed for °F and for gaps, unless they are accepted; BadDate
    for readings to come and for a clock that went back; UnknownName for the place;
    BadInput without initials.
    """
    from stockroom.service.work import initials
    from stockroom.store.engine import reader_in, writing

    whose = initials(by)
    found = read_logger(
        _text(file), day_first=meant.day_first, scale=meant.scale, column=meant.column
    )
    _check_past(found, today)
    log = TemperatureLog.of(found.readings)
    with writing(path) as session:
        reader = reader_in(session)
        row = place_row(reader, place)
        _check_scale(found, log, row)
        before = log_of(reader, row["id"])
        new = _new(before, log)
        _check_gaps(before, new, accept=meant.accept_gaps)
        add_readings(session, row["id"], new)
        if new:
            first, last = (moment_of(new[at][0]).isoformat("T", "minutes") for at in (0, -1))
            told = f"{file.name}: {span_in_words(len(new), first, last)}"
            note_file(session, row["place"], told, by=whose, today=today, at=clock.now())
    return replace(
        _warmth(row, log, energy),
        added=len(new),
        already=len(log.minutes) - len(new),
        told=found.told,
        practice=is_practice(path),
    )


def taken_back(
    path: StoreAt, place: str, start: date, end: date, *, why: str, today: date, by: str
) -> Warmth:
    """Take the readings of some days, both included, out of use; what is left of the place.

    They were brought into the wrong place: they are kept, with who, when and why, and
    the right ones may then be brought in. Raises: UnknownName for the place; BadDate for
    days that run backwards; BadInput without a reason or initials, and where nothing is held.
    """
    from stockroom.service.work import initials
    from stockroom.store.engine import reader_in, writing

    if end < start:
        raise BadDate(f"{start} to {end} runs backwards.", "Swap --from and --to.")
    if not why.strip():
        raise BadInput(
            f"Why are the readings of {place} taken back?", "One word is enough: --why …"
        )
    with writing(path) as session:
        reader = reader_in(session)
        row = place_row(reader, place)
        told = take_back(
            session,
            row,
            (start, end),
            why=why.strip(),
            by=initials(by),
            today=today,
            at=clock.now(),
        )
        if not told:
            raise BadInput(
                f"{row['place']} holds no readings from {start} to {end}.",
                f"What it holds: stockroom logger {row['place']}",
            )
        left = log_of(reader, row["id"])
    return replace(_warmth(row, left, None), taken=told, practice=is_practice(path))


def _noted(reader: Reader, row: Row) -> tuple[str, ...]:
    return tuple(
        f"taken back {one.on} by {one.by}: {one.told}: {one.why}"
        if one.taken_back
        else f"brought in {one.on}{f' by {one.by}' if one.by else ''}: {one.told}"
        for one in noted_of(reader, row["place"])
    )


def _warmth(row: Row, log: TemperatureLog | None, energy: float | None) -> Warmth:
    bare = Warmth(row["place"], row["name"], row["temperature_c"], None, energy or MKT_EA)
    return with_record(bare, log) if log else bare


def _text(file: Path) -> str:
    if not file.is_file():
        raise BadInput(f"There is no file {file}.", "Give the table the logger's program wrote.")
    data = file.read_bytes()
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        return data.decode("utf-16", errors="replace")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError:
        # what Windows programs write, the degree sign included
        return data.decode("cp1252", errors="replace")


def _check_past(found: LoggerFile, today: date) -> None:
    last = found.readings[-1][0]
    if last.date() > today:
        raise BadDate(
            f"Row {found.rows[-1]} is of {spell_day(last.date())}, still to come: today is"
            f" {spell_day(today)}.",
            "Is the logger's clock ahead? Else give the day with --as-at.",
        )


def _check_scale(found: LoggerFile, log: TemperatureLog, row: Row) -> None:
    """Ask where a file says no unit and its numbers read like °F. Raises: NotAllowed."""
    usual, own = sorted(log.celsius)[len(log.celsius) // 2], row["temperature_c"]
    turned = (usual - 32) / 1.8
    doubted = usual > _DOUBTED_C
    if own is not None:
        doubted |= abs(usual - own) > _OFF_C and abs(turned - own) < _NEAR_C
    if doubted and not found.stated:
        stands = f" stands at {own:g} °C" if own is not None else ""
        raise NotAllowed(
            f"The readings are about {usual:g}, no unit is given, and {row['place']}{stands}:"
            f" °F? That would be {turned:.1f} °C.",
            "Add --fahrenheit to turn them, or --celsius if they are °C after all.",
        )


def _new(before: TemperatureLog | None, log: TemperatureLog) -> list[tuple[int, float]]:
    """The readings not held yet. Raises: NotAllowed where another one is held of that time."""
    known = dict(zip(before.minutes, before.celsius, strict=True)) if before else {}
    new = []
    for minute, degrees in zip(log.minutes, log.celsius, strict=True):
        if minute not in known:
            new.append((minute, degrees))
        elif abs(known[minute] - degrees) > _HELD_TO:
            raise NotAllowed(
                f"{_at(moment_of(minute))}: {known[minute]:g} °C is held, and the file says"
                f" {degrees:g} °C. Nothing was added.",
                "Another logger? What was read is never written over. If what is held is the"
                " wrong one: stockroom logger PLACE --take-back.",
            )
    return new


def _check_gaps(
    before: TemperatureLog | None, new: list[tuple[int, float]], *, accept: bool
) -> None:
    """Ask about stretches that nothing tells of and that the new readings end or begin.

    Raises: NotAllowed naming them. Gaps among what is held were asked about before.
    """
    if accept or not new:
        return
    fresh = {minute for minute, _ in new}
    whole = sorted(fresh | set(before.minutes if before else ()))
    limit = TemperatureLog(tuple(whole), (0.0,) * len(whole)).gap_limit
    gaps = [
        f"{_at(moment_of(one))} to {_at(moment_of(two))}"
        for one, two in pairwise(whole)
        if two - one > limit and (one in fresh or two in fresh)
    ]
    if gaps:
        more = f" and {len(gaps) - _MOST_GAPS} more" if len(gaps) > _MOST_GAPS else ""
        raise NotAllowed(
            f"Nothing was logged {', '.join(gaps[:_MOST_GAPS])}{more}; more than"
            f" {format_number(limit / 60)} h is a gap. Nothing was added.",
            "Bring in the file that covers it first, or add --accept-gaps: the place's own"
            " temperature then counts for that time.",
        )


def _at(moment: datetime) -> str:
    return moment.isoformat(" ", "minutes")
