"""The record of one bottle: out of its entries, and of those of the bottles it was poured from.

What was poured keeps what its source was known to be at that moment. It is read through
here and never copied, so that a slip put right on the source is right on both; what is
learnt of one of them later says nothing of the other.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, field, replace
from datetime import date

from stockroom.keeping.record import Blend, Bound, Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.keeping.strength import last_check, strengths_on
from stockroom.keeping.temperatures import TemperatureLog
from stockroom.keeping.verdict import limits_of
from stockroom.measure.days import PrintedDate
from stockroom.store.kinds import BEGINNINGS, DAY_NOT_WRITTEN, POURED, TURNED_UP, EntryKind
from stockroom.store.reading import Row

_STAYS = (*BEGINNINGS, EntryKind.MOVED, EntryKind.TURNED_UP)
_CHECKS = {
    EntryKind.FOUND: CheckKind.FOUND,
    EntryKind.LOOKED: CheckKind.LOOKED,
    EntryKind.TESTED: CheckKind.TESTED,
}

# the dates no check moves: looks and tests of a mixture count from its own
_FIXED = (RuleKind.LIFE, RuleKind.SAME_DAY, RuleKind.NEVER)

Moment = tuple[str, int]
"""A day as ISO text and the number of an entry: what comes first in the ledger is less."""


@dataclass(frozen=True, slots=True)
class Books:
    """What records are read from: rows by id, and by bottle its entries in order of day.

    `poured` gives what went into a mixture of that id by the id of its source; `rules` those
    of a line by its key. `named` is the line of a bottle, by its id, where it was known by
    another one at that time. `worked_out` remembers records: what was topped up a hundred
    times leads a hundred times to the same ones.
    """

    rows: dict[int, Row]
    lines: dict[int, Row]
    places: dict[int, Row]
    events: dict[int, list[Row]]
    parents: dict[int, list[int]]
    logs: dict[int, TemperatureLog]
    poured: Callable[[int], dict[int, int]]
    rules: Callable[[str], tuple[Rule, ...]]
    named: dict[int, int] = field(default_factory=dict)
    worked_out: dict[tuple[int, Moment | None], Record] = field(default_factory=dict)

    def line_of(self, bottle: int) -> Row:
        """The line a bottle was known to hold."""
        return self.lines[self.named.get(bottle, self.rows[bottle]["line_id"])]


def record_of(books: Books, bottle: int, before: Moment | None = None) -> Record:
    """What is known of a bottle; with `before`, what was by the moment of that entry."""
    asked = bottle, before
    if asked not in books.worked_out:
        events = books.events.get(bottle, [])
        if before is not None:
            events = [event for event in events if _by(event, before)]
        books.worked_out[asked] = _grown(_beginning(books, bottle, events), events, books)
    return books.worked_out[asked]


def own_checks(events: Iterable[Row]) -> int:
    """How many of a bottle's checks are its own, and not of the bottle it was poured from."""
    return sum(event["kind"] in _CHECKS for event in events)


def origin_of(books: Books, bottle: int) -> Row | None:
    """The entry that says how what is in a bottle was made up; None for what was bought."""
    events = books.events.get(bottle, ())
    kinds = (EntryKind.MADE, EntryKind.MIXED)
    found = next((event for event in events if event["kind"] in kinds), None)
    source = books.rows[bottle]["decanted_from"]
    return origin_of(books, source) if found is None and source is not None else found


def _by(event: Row, before: Moment) -> bool:
    # what a printed date means does not depend on when somebody said so
    return (str(event["happened_on"]), event["id"]) < before or (
        event["kind"] == EntryKind.DATE_READ
    )


def _beginning(books: Books, bottle: int, events: list[Row]) -> Record:
    """What was known of it before anything happened to it."""
    row = books.rows[bottle]
    nominal = books.line_of(bottle)["strength"]
    poured = next((event for event in events if event["kind"] in POURED), None)
    if poured is None:
        received, made = _day(row["received_on"]), _day(row["made_on"])
        printed = _printed(row, events)
        return Record(received=received, made=made, printed=printed, nominal=nominal)
    moment = (str(poured["happened_on"]), int(poured["id"]))
    if poured["kind"] == EntryKind.MIXED:
        return _mixed(books, row, moment)
    return _decanted(books, row, moment)


def _grown(base: Record, events: list[Row], books: Books) -> Record:
    opened, guessed = _opened(events, base.received)
    if base.opened is not None:
        # the first opening counts, and it was opened to be poured from
        opened, guessed = base.opened, base.opened_guessed
    return replace(
        base,
        opened=opened,
        opened_guessed=guessed,
        checks=(*base.checks, *_checks(events)),
        stays=(*base.stays, *_stays(events, books)),
        set_aside=_set_aside(events, base.set_aside),
        not_found=_not_found(events),
        gone=any(event["kind"] == EntryKind.DISCARDED for event in events),
    )


def _decanted(books: Books, row: Row, moment: Moment) -> Record:
    """As its source was; its own label may say less."""
    source = record_of(books, row["decanted_from"], moment)
    on = date.fromisoformat(moment[0])
    first = source.opened or (None if row["made_here"] else on)
    label = _label(row)
    bounds = [bound for bound in (source.bound, label) if bound]
    return replace(
        source,
        opened=first,
        opened_guessed=source.opened_guessed and source.opened is not None,
        bound=min(bounds, key=lambda bound: bound.until, default=None),
        from_undated=source.undated_on(on),
    )


def _label(row: Row) -> Bound | None:
    if not row["printed_readings"]:
        return None
    until = date.fromisoformat(row["printed_readings"])
    return Bound(until, f"good until {until} written on it when it was decanted")


def _mixed(books: Books, row: Row, moment: Moment) -> Record:
    """What several bottles come to: dated by the older in everything, and in doubt with either."""
    on, line = date.fromisoformat(moment[0]), books.line_of(row["id"])
    rules = books.rules(line["key"])
    parts = {one: record_of(books, one, moment) for one in books.parents.get(row["id"], ())}
    records = list(parts.values())
    # one without any day makes the whole undated: how old it is nobody knows
    dated = not any(one.undated_on(on) for one in records)
    printed = [one.printed for one in records if one.printed and one.printed.day]
    bounds = [_bound(books.rows[one]["number"], record, rules, on) for one, record in parts.items()]
    opened = [one for one in records if one.opened]
    first = min(opened, key=lambda one: one.opened or on, default=None)
    return Record(
        received=min(filter(None, map(_received, records)), default=None) if dated else None,
        opened=first.opened if first else None,
        opened_guessed=bool(first and first.opened_guessed),
        made=min((one.made for one in records if one.made), default=None) if dated else None,
        printed=min(printed, key=lambda one: one.day or date.max, default=None),
        nominal=line["strength"],
        checks=tuple(_checks_together(records, on)),
        set_aside="; ".join(dict.fromkeys(one.set_aside for one in records if one.set_aside)),
        blend=_blend(books.poured(row["id"]), parts, rules, on),
        bound=min(filter(None, bounds), key=lambda bound: bound.until, default=None),
        from_undated=not dated,
    )


def _received(record: Record) -> date | None:
    # undated but looked at: it counts from the look, as its own life did
    return record.received or (None if record.made else record.first_passed(date.max))


def _bound(number: str, record: Record, rules: tuple[Rule, ...], on: date) -> Bound | None:
    fixed = tuple(rule for rule in rules if rule.kind in _FIXED)
    limits = limits_of(record, fixed, on)
    first = min(limits, key=lambda limit: (limit.until, limit.because), default=None)
    if first is None:
        return None
    safety = any(limit.safety for limit in limits if limit.until == first.until)
    return Bound(first.until, f"mixed with {number}, {first.because}", safety)


def _checks_together(records: list[Record], on: date) -> Iterator[Check]:
    """The older of the last looks and tests, where each was looked at or tested; what failed.

    A strength found of one part says nothing of the whole.
    """
    failed = [check for one in records for check in one.checks if not check.passed]
    seen = {
        CheckKind.LOOKED: (CheckKind.LOOKED, CheckKind.FOUND),
        CheckKind.TESTED: (CheckKind.TESTED,),
    }
    passed = []
    for kind, kinds in seen.items():
        last = [last_check(one, on, *kinds) for one in records]
        days = [check.on for check in last if check]
        passed += [Check(min(days), kind)] if len(days) == len(records) else []
    return iter(sorted([*failed, *passed], key=lambda check: check.on))


def _blend(
    poured: dict[int, int], parts: dict[int, Record], rules: tuple[Rule, ...], on: date
) -> Blend | None:
    """The strengths expected that day, each by its share; volumes are taken to add up."""
    total = solute = 0.0
    for one, amount in poured.items():
        strength = strengths_on(parts[one], rules, on).expected if one in parts else None
        if strength is None:
            return None
        total, solute = total + amount, solute + amount * strength
    return Blend(on, solute / total) if total else None


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


def _stays(events: list[Row], books: Books) -> Iterator[Stay]:
    for event in events:
        place_id = event["place_id"]
        if event["kind"] in _STAYS and place_id is not None:
            place = books.places[place_id]
            since = date.fromisoformat(event["happened_on"])
            yield Stay(since, place["place"], place["temperature_c"], books.logs.get(place_id))


def _set_aside(events: list[Row], reason: str) -> str:
    """Why it stands apart: the last reason no good look or test has cleared since."""
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
