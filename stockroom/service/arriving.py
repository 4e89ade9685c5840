"""What an arrival settles: the printed date, the numbers, and bottles that come opened."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadDate, BadInput
from stockroom.measure.amounts import Amount
from stockroom.measure.days import PrintedDate, parse_printed, spell_day
from stockroom.measure.formats import format_amount
from stockroom.service.work import Work, unsettled
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, next_bottle_number
from stockroom.store.tables import Bottle, Line

MOST_AT_ONCE = 100


def date_printed(printed: str | None) -> PrintedDate | None:
    """The date printed on a bottle, None when it is said that there is none.

    Raises: BadInput when nothing is said; BadDate.
    """
    # a blank could mean "none" or "not looked", and the plan treats them differently
    if printed is None or not printed.strip():
        raise BadInput(
            f'Printed date "{printed or ""}": "none printed" must be chosen.',
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


def check_number(count: int) -> None:
    """Pass for a number of bottles that may arrive at once. Raises: BadInput."""
    if not 1 <= count <= MOST_AT_ONCE:
        raise BadInput(f"{count} bottles?", f"Give 1 to {MOST_AT_ONCE}.")


def new_bottle(
    work: Work, line: Line, size: Amount, printed: PrintedDate | None, remark: str, cap: str = ""
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
        remark=remark,
        cap=cap,
    )
    work.session.add(bottle)
    work.session.flush()
    return bottle


def arrived(bottles: list[Bottle], line: Line, size: Amount) -> str:
    """What came, in words: "B46, B47: lithium chloride, 100 g each"."""
    each = format_amount(size) + (" each" if len(bottles) > 1 else "")
    return f"{', '.join(bottle.number for bottle in bottles)}: {line.key}, {each}"


def write_openings(work: Work, bottles: list[Bottle], opened: date) -> None:
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
    for bottle in bottles:
        work.write(bottle, Event(EntryKind.OPENED), on=opened)


def told_of_printed(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """What is worth saying of the printed date: two readings, or past already."""
    printed = work.seen(bottle).record.printed
    if printed is None or printed.day is None:
        return ()
    past = printed.day < work.on
    gone = f'Printed "{printed.text}" is past: good until {spell_day(printed.day)}.'
    return (*unsettled(work, bottle), *((gone,) if past else ()))
