"""The walk sheet: what to count along the shelves, in shelf order, with blanks to write in."""

from __future__ import annotations

import shlex
from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from itertools import groupby

from stockroom.chemistry.water_words import parted
from stockroom.findings import Finding
from stockroom.planning.amounts import say_left
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.walking import Sheet
from stockroom.reports.paper.head import Head, foot_lines, head_for, head_lines, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import columns, page, section, wrap
from stockroom.reports.walk_text import HOW, HOW_UNLISTED, about_walk
from stockroom.reports.words import TIED, marked, raised

VENTED = "vented cap"


@dataclass(frozen=True, slots=True)
class Row:
    """One bottle to count. `form` is told apart where the walk meets two forms, "" else.

    `should` is what the entries come to, `condition` mark and word, `warned` what must be
    known before it is touched, `cap` "vented cap" where its line wants one.
    """

    number: str
    name: str
    form: str
    should: str
    condition: str
    warned: str = ""
    cap: str = ""
    remark: str = ""


@dataclass(frozen=True, slots=True)
class Wrong:
    """A bottle that stands where it should not, and why."""

    number: str
    text: str


@dataclass(frozen=True, slots=True)
class Shelf:
    """One place with its bottles, and what stands wrong there."""

    place: str
    title: str
    rows: tuple[Row, ...]
    wrong: tuple[Wrong, ...]


@dataclass(frozen=True, slots=True)
class WalkSheet:
    """The whole walk; `look_out` are bottles not found when last looked for, and where that was.

    `how` says how a count is written, as it is typed back; `unlisted` how a stranger is.
    `met` are the bottles the walk has met already, which stand in no row.
    """

    head: Head
    shelves: tuple[Shelf, ...]
    look_out: tuple[Wrong, ...]
    how: str
    unlisted: str
    typed: str
    met: tuple[str, ...] = ()


def walk_sheet_of(sheet: Sheet, on: date, wrong: Iterable[Finding] = ()) -> WalkSheet:
    """The paper of a walk under way; `wrong` are the findings of its places."""
    walk, told = sheet.walk, list(wrong)
    head = head_for(
        sheet.house,
        f'Walk "{walk.name}"',
        on,
        about=raised(about_walk(sheet)).replace(TIED, " "),
        practice=sheet.practice,
    )
    rows_left = sheet.again or sheet.to_count
    # by the whole walk, met or not: a copy printed half-way must not say otherwise
    keys = {row.line.key for row in rows_left} | {visit.line for visit in sheet.visits}
    names = Counter(parted(key)[0] for key in keys)
    places = groupby(rows_left, key=lambda row: row.bottle.place)
    return WalkSheet(
        head,
        tuple(_shelf(sheet, place, list(rows), told, names) for place, rows in places),
        tuple(_looked_for(row) for row in sheet.look_out),
        HOW,
        HOW_UNLISTED,
        _typed_back(sheet),
        () if sheet.again else tuple(visit.bottle for visit in sheet.visits),
    )


def _typed_back(sheet: Sheet) -> str:
    walk = sheet.walk
    begun = f"stockroom walk {shlex.quote(walk.name)}"
    again = " --again" if sheet.again else ""
    if walk.by:
        return f"{begun} --enter{again}"
    along = f" --places {shlex.quote(','.join(walk.places))}" if walk.places else ""
    return f"{begun}{along}; {begun} --enter"


def _shelf(
    sheet: Sheet,
    place: str,
    rows: Sequence[OnShelf],
    wrong: Iterable[Finding],
    names: Mapping[str, int],
) -> Shelf:
    title = next((one.title for one in sheet.places if one.name == place), "")
    here = {row.bottle.number for row in rows}
    return Shelf(
        place or "at no place",
        title,
        tuple(_row(row, two_forms=names[parted(row.line.key)[0]] > 1) for row in rows),
        tuple(
            Wrong(each.subject, raised(each.text))
            for each in wrong
            if here & set(each.subject.split(", "))
        ),
    )


def _row(row: OnShelf, *, two_forms: bool) -> Row:
    bottle = row.bottle
    name, form, rest = parted(row.line.key) if two_forms else (row.line.key, "", "")
    # the one without water is the one taken by mistake
    form = form.upper() if form == "anhydrous" else form
    return Row(
        bottle.number,
        raised(f"{name}{rest}"),
        form,
        say_left(bottle, row.line).replace(" ", TIED),
        marked(row.verdict.condition).replace(TIED, " "),
        row.verdict.warning,
        VENTED if row.line.vented_cap else "",
        bottle.remark,
    )


def _looked_for(row: OnShelf) -> Wrong:
    bottle = row.bottle
    return Wrong(bottle.number, raised(f"{bottle.line}, last at {bottle.place or 'no place'}"))


# -- as text ------------------------------------------------------------------------


def walk_sheet_text(sheet: WalkSheet, width: int) -> str:
    """The sheet as text: a place a section, the blanks as dots."""
    parts = [head_lines(sheet.head, width)]
    for shelf in sheet.shelves:
        rows = [
            (f"{mark(sheet.head, row.number)} {row.number}", *_cells(row)) for row in shelf.rows
        ]
        lines = columns(rows, width)
        lines += [wrap(f"! {each.number}: {each.text}", width, indent=2) for each in shelf.wrong]
        parts.append(section(f"{shelf.place} {shelf.title}".strip(), lines))
    looked = columns([(each.number, each.text) for each in sheet.look_out], width)
    parts.append(section("LOOK OUT FOR", looked))
    parts.append(wrap(f"{sheet.how} {sheet.unlisted}", width, hang=0))
    return page([*parts, foot_lines(sheet.head, width)])


def _cells(row: Row) -> tuple[str, str, str]:
    form = f", {row.form}" if row.form else ""
    told = [f"{row.name}{form}", row.condition, row.cap, row.warned]
    remark = f'"{row.remark}"' if row.remark else ""
    return row.should, "......", "; ".join(each for each in (*told, remark) if each)


def walk_sheet_lines(sheet: WalkSheet) -> dict[str, str]:
    """Each bottle by its number: where it stands, what it is, what should be in it.

    One that the walk has met says nothing, so that it is not told as gone from the sheet.
    """
    told = {row.number: _line(shelf, row) for shelf in sheet.shelves for row in shelf.rows}
    looked = {each.number: f"look out for {each.number} {each.text}" for each in sheet.look_out}
    return dict.fromkeys(sheet.met, "") | told | looked


def _line(shelf: Shelf, row: Row) -> str:
    name = f"{row.name}, {row.form}" if row.form else row.name
    should = row.should.replace(TIED, " ")
    return f"{row.number} {name}, at {shelf.place}, should be {should}, {row.condition}"


WALK = Kind("walk", walk_sheet_text, walk_sheet_lines)
"""The sheet a walk is counted by; on A5 it is folded into a pocket."""
