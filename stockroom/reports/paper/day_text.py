"""The page for the day as text, and what of it is held against the copy printed last."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from datetime import date

from stockroom.reports.paper.changes import since_by_booking
from stockroom.reports.paper.day import Day, Part, Standing
from stockroom.reports.paper.day_class import BEGIN, END, Item, Row
from stockroom.reports.paper.day_notes import NO_REFERENCE, Cover
from stockroom.reports.paper.day_strengths import (
    DILUTED,
    FOUND,
    UNCHECKED,
    Known,
    differs,
    how_words,
)
from stockroom.reports.paper.day_times import LATEST
from stockroom.reports.paper.head import Since, foot_lines, head_lines, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import PRACTICE, columns, page, wrap
from stockroom.reports.words import TIED, day_heading

_BLANK = "......"
_TO_FILL = f"local{TIED}assessment{TIED}ref{TIED}________ review{TIED}date{TIED}________"


def day_text(sheet: Day, width: int) -> str:
    """The page as text: YES or NO first, also before the house it is of."""
    first = f"{sheet.verdict}{f'   {PRACTICE}' if sheet.head.practice else ''}"
    # PRACTICE stands behind the answer, so that the answer comes first
    top = head_lines(replace(sheet.head, practice=False), width)
    parts = [f"{wrap(first, width)}\n{top}"]
    parts.append("\n".join(_standing(sheet, each, width) for each in sheet.bookings))
    for part in sheet.parts:
        parts += _part(sheet, part, width)
    return page([*parts, foot_lines(sheet.head, width)])


def _standing(sheet: Day, each: Standing, width: int) -> str:
    several = len(sheet.bookings) > 1 and not each.planned
    told = each.planned or (each.verdict if several else "")
    where = ", ".join(filter(None, (each.room, each.groups)))
    said = f"{each.at}  {each.booking} {each.title}, {where}{f': {told}' if told else ''}"
    return mark(sheet.head, _key(sheet, each.booking)) + wrap(said, width - 1, hang=7)


def _part(sheet: Day, part: Part, width: int) -> list[str]:
    several = len(sheet.parts) > 1
    top = f"{'=' * width}\n{wrap(f'{part.title}: {part.verdict}', width)}" if several else ""
    to_do = [wrap(f"[ ] {each}", width, hang=6, indent=2) for each in part.to_do]
    return [
        top,
        _titled("TO DO", to_do),
        _rows(sheet, part.rows, width),
        _strengths(sheet, part.strengths, width),
        _told("DIFFERENT FROM THE CARD", part.different, "nothing", width),
        _told(_guess_title(part), part.guessed, "nothing guessed", width),
        _told("WASTE", part.waste, "none named", width),
        _covered(part.covered, width),
    ]


def _titled(title: str, lines: list[str]) -> str:
    return "\n".join([title, *lines]) if lines else ""


def _told(title: str, lines: tuple[str, ...], none: str, width: int) -> str:
    if not lines:
        return f"{title}: {none}"
    return _titled(title, [wrap(each, width, indent=2) for each in lines])


def _guess_title(part: Part) -> str:
    return f"GUESSED: {len(part.guessed)}" if part.guessed else "GUESSED"


def _rows(sheet: Day, rows: tuple[Row, ...], width: int) -> str:
    lines = ["THE DAY, and who ticks", wrap(LATEST, width, indent=2)]
    for row in rows:
        lines += _row(sheet, row, width)
    return "\n".join(lines)


def _row(sheet: Day, row: Row, width: int) -> list[str]:
    front = f"{mark(sheet.head, row_key(sheet, row))}{row.at:<11}"
    tick = "" if row.plain else "   <- must be ticked" if row.must else ""
    tick += "" if row.plain else f" {_BLANK}"
    where = f" [{row.where}]" if row.where and not row.plain else ""
    ref = f": {row.ref}" if row.ref else ""
    said = wrap(f"{row.what}{ref}{where}{tick}", width - 12, hang=2).replace("\n", "\n" + " " * 12)
    lines = [front + said]
    items = [_item(each) for each in row.items]
    lines += ["  " + each for each in columns(items, width - 2, indent=12)] if items else []
    lines += [" " * 12 + _under(f"! {each}", width) for each in row.cautions]
    return lines


def _under(text: str, width: int) -> str:
    return wrap(text, width - 12, hang=2).replace("\n", "\n" + " " * 12)


def _item(each: Item) -> tuple[str, str, str]:
    place = f"in {each.place}" if each.place else ""
    return ("[ ]", f"{each.origin} {place}".strip() or "-", each.what)


def _strengths(sheet: Day, strengths: tuple[Known, ...], width: int) -> str:
    if not strengths:
        return "TRUE STRENGTHS: none that matter"
    rows = [_strength(sheet, each) for each in strengths]
    return _titled("TRUE STRENGTHS", columns(rows, width, indent=1))


def _strength(sheet: Day, each: Known) -> tuple[str, ...]:
    front = f"{mark(sheet.head, _key(sheet, each.ref))}{each.booking} {each.item}"
    return (front, each.today or "not checked", how_words(each))


def _covered(covered: tuple[Cover, ...], width: int) -> str:
    lines = [wrap(cover_words(each), width, indent=2) for each in covered]
    return _titled("COVERED BY", lines) if lines else ""


def cover_words(each: Cover) -> str:
    """The local assessment in words, with blanks to fill where none is entered."""
    whose = f"{each.recipe} {each.title} ({', '.join(each.bookings)})"
    if not each.reference:
        return f"{whose}: {NO_REFERENCE}; {_TO_FILL}"
    review = f"; review {each.review}" if each.review else f"; review{TIED}date{TIED}________"
    said = f": {each.said}" if each.said else ""
    return f"{whose}: {each.reference}{review}{said}"


# -- held against the copy printed last ------------------------------------------------------


def _key(sheet: Day, rest: str) -> str:
    # one booking is followed to its new day; a day that is over is held against nothing
    return rest if sheet.single else f"{sheet.on.isoformat()} {rest}"


def row_key(sheet: Day, row: Row) -> str:
    """The key a line of the list is known by from copy to copy."""
    return _key(sheet, row.key)


def day_lines(sheet: Day) -> dict[str, str]:
    """Each booking, each line of the list and each strength, with all it says."""
    lines = {_key(sheet, "ready"): f"ready: {sheet.verdict}"}
    for each in sheet.bookings:
        told = f": {each.planned}" if each.planned else ""
        where = ", ".join(filter(None, (each.room, each.groups)))
        said = f"{each.booking} {each.title}, {day_heading(sheet.on)} {each.at}, {where}{told}"
        lines[_key(sheet, each.booking)] = said
    for part in sheet.parts:
        # when a class begins and ends is in its own line
        rows = [row for row in part.rows if row.step not in (BEGIN, END)]
        lines |= {row_key(sheet, row): _row_words(row) for row in rows}
        telling = [each for each in part.strengths if _worth_telling(each)]
        lines |= {_key(sheet, each.ref): _strength_words(each) for each in telling}
    return lines


def _worth_telling(told: Known) -> bool:
    """Found, or other than the label or the card: a figure taken as it stands is no news."""
    return told.basis in (FOUND, DILUTED, UNCHECKED) or bool(told.label) or differs(told)


def _strength_words(told: Known) -> str:
    today = f"{told.today}, " if told.today else "not checked, "
    return f"{told.booking} {told.item}: {today}{how_words(told, plain=True)}"


def _row_words(row: Row) -> str:
    # makes and orders have other numbers in every plan: only bottles keep theirs
    items = "; ".join(f"{each.what} {_of(each)}".strip() for each in row.items)
    return f"{row.at} {row.what}{f': {items}' if items else ''}"


def _of(item: Item) -> str:
    return item.origin if item.missing else f"of {item.bottles}" if item.bottles else ""


def _more(sheet: Day) -> dict[str, str]:
    return {"latest": LATEST}


def _since(sheet: Day, number: str, before: Mapping[str, str], today: date) -> Since:
    return since_by_booking(number, before, day_lines(sheet), today)


DAY = Kind("day", day_text, day_lines, _more, _since)
