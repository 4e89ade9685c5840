"""What arrives: the numbers, what stands on the labels, and bottles that come opened."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadDate, BadInput
from stockroom.measure.amounts import Amount
from stockroom.measure.days import PrintedDate, parse_printed, spell_day
from stockroom.measure.formats import format_amount, format_number
from stockroom.planning.facts import Form
from stockroom.service.answers import Done
from stockroom.service.coming import came_of, may_be_of
from stockroom.service.estimates import keep_tare
from stockroom.service.last_time import Usual, as_usual
from stockroom.service.standing import cap_of, told_of_place
from stockroom.service.work import Work, check_amount, unsettled, working
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, next_bottle_number
from stockroom.store.tables import Bottle, Entry, Line

MOST_AT_ONCE = 100
_SAME = 1e-9


@dataclass(frozen=True, slots=True)
class Label:
    """What is the bottles' own among those that came together, blank where nobody says.

    `lot` is the maker's; `assay` a fraction, off the label or the certificate; `tare` the mass
    of one empty bottle with its cap.
    """

    lot: str = ""
    assay: float | None = None
    tare: Amount | None = None


_PLAIN = Label()


def arrive(
    path: StoreAt,
    line: str,
    size: Amount | None,
    *,
    printed: str | None,
    place: str | None = None,
    count: int = 1,
    opened: date | None = None,
    cap: str = "",
    note: str = "",
    label: Label = _PLAIN,
    order: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Put bottles that came on the shelf; each gets a number of its own.

    `size` is what one holds, `place` where it is put away: both as last time when None.
    `printed` is the date as printed on it, or "none", which must be said; `opened` the day it
    was opened, if it was; `cap` vented, tight or blank; `order` the order they came of.
    Raises: BadInput, UnknownName, BadAmount, BadDate; NotAllowed for an order of something else.
    """
    on_label, closed_by = _date_printed(printed), cap_of(cap)
    _check_number(count)
    with working(path, on=on, today=today, by=by) as work:
        # the size tells a solid from the solution of the same name
        found = names.find_line(work.session, line, kind="" if size is None else size.kind)
        usual = as_usual(work, found, size, place)
        check_amount(found, usual.size)
        bottles = [_new_bottle(work, found, usual.size, on_label, label) for _ in range(count)]
        for bottle in bottles:
            bottle.cap, bottle.remark = closed_by, note
        entries = _put_away(work, bottles, usual, note, opened)
        came = came_of(work, order, found, entries[:count]) if order else may_be_of(work, found)
        text = f"{_arrived(bottles, found, usual.size)}, at {usual.place}."
        # those that came together are alike, so what is said of one holds for all
        first = bottles[0]
        told = (*_told_of_assay(found, label.assay), *_told_of_printed(work, first))
        details = (*usual.told, *told, *told_of_place(work, first), *came)
        # each of several is a bottle by itself, and its slip is put right by itself
        also = tuple(entry.id for entry in entries[1:count] if entry.id is not None)
        last = entries[-1].id
        return work.done(text, first, entries[0], details=details, last=last, also=also)


def _put_away(
    work: Work, bottles: list[Bottle], usual: Usual, note: str, opened: date | None
) -> list[Entry]:
    """Write the arrival of each bottle, then the day they were opened if they came opened."""
    event = Event(
        EntryKind.ARRIVED,
        change=usual.size.micro,
        place_id=work.place_id(usual.place),
        note=note,
    )
    entries = [work.write(bottle, event) for bottle in bottles]
    if opened is not None:
        entries += _write_openings(work, bottles, opened)
    return entries


def _date_printed(printed: str | None) -> PrintedDate | None:
    """The date printed on a bottle, None when it is said that there is none.

    Raises: BadInput when nothing is said; BadDate.
    """
    # a blank could mean "none" or "not looked", and the plan treats them differently
    if printed is None or not printed.strip():
        raise BadInput(
            'What date is printed on it? Where there is none, "none printed" must be chosen.',
            "Add --printed 03/2027, or --printed none.",
        )
    try:
        return parse_printed(printed)
    except BadDate as error:
        # words without a figure are no slip in a date: they belong in the note
        if any(character.isdigit() for character in printed):
            raise
        noted = f'(--printed none --note "{printed.strip()}")'
        raise BadDate(
            error.message,
            f"Leave the date empty and add a note {noted}; I will ask you to inspect it.",
        ) from error


def _check_number(count: int) -> None:
    """Pass for a number of bottles that may arrive at once. Raises: BadInput."""
    if not 1 <= count <= MOST_AT_ONCE:
        raise BadInput(f"{count} bottles?", f"Give 1 to {MOST_AT_ONCE}.")


def _new_bottle(
    work: Work, line: Line, size: Amount, printed: PrintedDate | None, label: Label
) -> Bottle:
    """A bought bottle with the next number, saved but without entries."""
    assert line.id is not None
    bottle = Bottle(
        number=next_bottle_number(work.session, made_here=False),
        line_id=line.id,
        size=size.micro,
        # the day it came, which may be before the day somebody enters it
        received_on=work.on,
        printed_text=printed.text if printed else "",
        printed_readings=";".join(day.isoformat() for day in printed.readings) if printed else "",
        lot=label.lot.strip(),
        assay=label.assay,
    )
    work.session.add(bottle)
    work.session.flush()
    if label.tare is not None:
        keep_tare(work, bottle, label.tare)
    return bottle


def _arrived(bottles: list[Bottle], line: Line, size: Amount) -> str:
    """What came, in words: "B46, B47: lithium chloride, 100 g each, lot 2231"."""
    each = format_amount(size) + (" each" if len(bottles) > 1 else "")
    lot = f", lot {bottles[0].lot}" if bottles[0].lot else ""
    return f"{', '.join(bottle.number for bottle in bottles)}: {line.key}, {each}{lot}"


def _told_of_assay(line: Line, assay: float | None) -> tuple[str, ...]:
    """What is weighed by, where a bottle's own assay is not the one written for its line."""
    if assay is None or abs(assay - line.assay) < _SAME:
        return ()
    own, usual = format_number(assay * 100), format_number(line.assay * 100)
    if line.form != Form.SOLID:
        return (f"Assay {own} %: kept with the bottle; drawn by the strength on its label.",)
    return (f"Assay {own} %, and {usual} % is written for {line.key}: weighed by {own} %.",)


def _write_openings(work: Work, bottles: list[Bottle], opened: date) -> list[Entry]:
    """Write the day the bottles were opened, when they came opened. Raises: BadDate."""
    if opened < work.on:
        raise BadDate(
            f"Opened {spell_day(opened)} is before it arrived {spell_day(work.on)}.",
            "One of these is wrong.",
        )
    if opened > work.stamp.entered_on:
        raise BadDate(
            f"Opened {spell_day(opened)} is still to come:"
            f" today is {spell_day(work.stamp.entered_on)}.",
            "Leave it sealed, and enter the opening on its day.",
        )
    return [work.write(bottle, Event(EntryKind.OPENED), on=opened) for bottle in bottles]


def _told_of_printed(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """What is worth saying of the printed date: two readings, or past already."""
    printed = work.seen(bottle).record.printed
    if printed is None or printed.day is None:
        return ()
    past = printed.day < work.on
    gone = f'Printed "{printed.text}" is past: good until {spell_day(printed.day)}.'
    return (*unsettled(work, bottle), *((gone,) if past else ()))
