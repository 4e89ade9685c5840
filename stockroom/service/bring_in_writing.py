"""Rows that are settled, written: bottles with their numbers, and the entries that tell of them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from datetime import date

from stockroom.bringing.outcome import RowRead
from stockroom.bringing.row import Incoming
from stockroom.measure.amounts import Amount
from stockroom.service.work import Work
from stockroom.store.brought_in import NewBottle, add_bottles
from stockroom.store.brought_in_marks import source_of
from stockroom.store.kinds import DAY_NOT_WRITTEN, EntryKind
from stockroom.store.ledger import Event

MISSED = "not found: so the list it was brought in from says"
"""Why a bottle of a list is not found from the first day on."""


def write_rows(work: Work, file: str, rows: Sequence[RowRead]) -> dict[int, tuple[str, ...]]:
    """Write the bottles of the rows, in their order; the numbers each row's bottles got."""
    lines = work.reader.pairs("SELECT key, id FROM line")
    places = work.reader.pairs("SELECT place, id FROM place")
    new, of_row = [], []
    for row in rows:
        assert row.incoming is not None
        bottle = _bottle(work, file, row, row.incoming, lines, places)
        new += [bottle] * row.incoming.count
        of_row += [row.row] * row.incoming.count
    written: dict[int, tuple[str, ...]] = {}
    for number, place in zip(add_bottles(work.session, new, work.stamp), of_row, strict=True):
        written[place] = (*written.get(place, ()), number)
    return written


def _bottle(
    work: Work,
    file: str,
    row: RowRead,
    said: Incoming,
    lines: Mapping[str, int],
    places: Mapping[str, int],
) -> NewBottle:
    # only whole rows go in
    assert said.line is not None and said.left is not None
    printed = said.printed
    made_here = said.line.made and said.received is None
    values: dict[str, object] = {
        "line_id": lines[said.line.key],
        # 0 where nobody wrote how much it holds when full, which tells nothing
        "size": said.size.micro if said.size is not None else 0,
        "received_on": said.received,
        "made_on": said.made,
        "printed_text": printed.text if printed else "",
        "printed_readings": ";".join(day.isoformat() for day in printed.readings)
        if printed
        else "",
        "remark": said.note,
        "made_here": made_here,
        "lot": said.lot,
        "assay": said.assay,
        "source": source_of(file, row.row, row.mark, row.reading),
    }
    place = places.get(said.place) if said.place else None
    kind = EntryKind.MADE if made_here else EntryKind.ARRIVED
    return NewBottle(made_here, values, tuple(_events(said, said.left, kind, place, work.on)))


def _events(
    said: Incoming, left: Amount, kind: EntryKind, place: int | None, seen: date
) -> list[tuple[date, Event]]:
    # what was opened was there by then, though nobody wrote when it came
    begun = said.received or said.made or said.opened or seen
    full = left if said.size is None else said.size
    day = "it was made" if kind is EntryKind.MADE else "it came"
    note = "" if said.received or said.made else f"from a list: the day {day} is not known"
    eyed = said.about and full == left
    events = [(begun, Event(kind, change=full.micro, place_id=place, note=note, about=eyed))]
    if said.opened or said.opened_sometime:
        unwritten = "" if said.opened else DAY_NOT_WRITTEN
        events.append((said.opened or begun, Event(EntryKind.OPENED, note=unwritten)))
    change = left.micro - full.micro
    if change:
        events.append((seen, Event(EntryKind.COUNTED, change=change, about=said.about)))
    if said.not_found:
        events.append((seen, Event(EntryKind.LOST, reason=MISSED)))
    return events
