"""A walk along the shelves: started, counted line by line, and ended.

Each line is a unit of work of its own, saved at once: whoever stops, or is stopped, in
the middle has lost nothing, and the same lines may be entered again.
"""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadAmount, BadInput, NotAllowed
from stockroom.measure.amounts import BASE_UNIT, Kind
from stockroom.measure.days import spell_day
from stockroom.planning import facts
from stockroom.service.answers import Done
from stockroom.service.recount import Round, check_first, counted_before
from stockroom.service.walk import check_not_ended, no_walk, walk_from
from stockroom.service.walk_lines import Said, Typed, numbered, read_typed
from stockroom.service.walk_meeting import amount_typed, met, missing
from stockroom.service.walk_told import Came, Told
from stockroom.service.walk_unlisted import unlisted
from stockroom.service.work import Work, working
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store import walks as rows
from stockroom.store.kinds import EntryKind
from stockroom.store.reading import Row
from stockroom.store.tables import Bottle, Walk, WalkEnd

LONGEST = 60
"""Letters in the name of a walk, so that it stands in a column. Our choice."""


def start(
    path: StoreAt, name: str, *, places: tuple[str, ...] = (), on: date | None, today: date, by: str
) -> Done:
    """Start a walk along some places, () for all of them; one of that name is taken up again.

    Raises: BadInput for no name, or one too long; UnknownName for a place; NotAllowed when the
    walk of that name was ended, or goes along other places.
    """
    wanted = _name(name)
    with working(path, on=on, today=today, by=by) as work:
        along = tuple(str(names.find_place(work.session, place).place) for place in places)
        row = rows.walk_named(work.reader, wanted)
        if row is not None:
            check_not_ended(walk_from(work.reader, row))
            _check_places(row, along)
            return Done(f'The walk "{row["name"]}" is taken up again.', practice=work.practice)
        stamp = work.stamp
        walk = Walk(
            name=wanted,
            places=";".join(dict.fromkeys(along)),
            started_on=stamp.happened_on,
            entered_on=stamp.entered_on,
            entered_at=stamp.entered_at.isoformat(sep=" "),
            by=by.strip(),
        )
        work.session.add(walk)
        where = f"along {', '.join(dict.fromkeys(along))}" if along else "along every shelf"
        text = f'Started the walk "{wanted}" {where}.'
        return Done(text, next=f'stockroom walk "{wanted}" --enter', practice=work.practice)


def _name(name: str) -> str:
    wanted = " ".join(name.split())
    if not wanted:
        raise BadInput(f'A walk named "{name}"?', "Give it a name: stockroom walk Jan-A2.")
    if len(wanted) > LONGEST:
        raise BadInput(f'"{wanted}" is over {LONGEST} letters.', "Give the walk a shorter name.")
    return wanted


def _check_places(row: Row, along: tuple[str, ...]) -> None:
    held = tuple(filter(None, row["places"].split(";")))
    if along and set(along) != set(held):
        raise NotAllowed(
            f'The walk "{row["name"]}" goes along {", ".join(held) or "every shelf"},'
            f" not {', '.join(along)}.",
            "Leave --places out to take it up again, or give the other round a name of its own.",
        )


def end(path: StoreAt, name: str, *, note: str = "", on: date | None, today: date, by: str) -> Done:
    """Finish a walk: it is not taken up again, and what nobody counted stays as entered.

    Raises: UnknownName; NotAllowed when it was ended already.
    """
    with working(path, on=on, today=today, by=by) as work:
        row = _open_walk(work, name)
        stamp = work.stamp
        ending = WalkEnd(
            walk_id=row["id"],
            ended_on=stamp.happened_on,
            entered_on=stamp.entered_on,
            entered_at=stamp.entered_at.isoformat(sep=" "),
            by=by.strip(),
            note=note.strip(),
        )
        work.session.add(ending)
        text = f'Ended the walk "{row["name"]}" on {spell_day(work.on)}.'
        return Done(text, practice=work.practice)


def take_up(path: StoreAt, name: str, *, on: date | None, today: date, by: str) -> None:
    """Pass when counts may be entered at all, before the first line is read.

    Raises: BadInput without initials; BadDate for a day to come; UnknownName; NotAllowed for a
    walk that was ended; StoreTrouble for a store that cannot be written.
    """
    # else each line of sixty would be refused for the same reason
    with working(path, on=on, today=today, by=by) as work:
        _open_walk(work, name)


def enter_line(
    path: StoreAt,
    walk: str,
    line: str,
    *,
    again: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Told | None:
    """Save what one line says, under the walk's name; None for a line that says nothing yet.

    What was entered before and says the same is told as that, and nothing is written: so the
    lines of a round that was cut off may be entered once more, whole.
    Raises: BadInput, BadAmount and UnknownName for what cannot be read; NotAllowed for a bottle
    counted in this walk already, unless `again`, and for one that is gone; StoreTrouble.
    """
    with working(path, on=on, today=today, by=by) as work:
        typed = _read(work, line)
        if typed is None:
            return None
        again = again or typed.again
        row = _open_walk(work, walk)
        walked = Round(row["name"], row["id"])
        places = tuple(filter(None, row["places"].split(";")))
        if typed.said is Said.UNLISTED:
            return unlisted(work, walked, typed, places, again=again)
        bottle = work.bottle(typed.bottle)
        seen = work.seen(bottle)
        before = counted_before(work, bottle, walked)
        # one that was missed on this walk may be met further along
        if before is not None and not again and not _met_after_all(seen, typed):
            if _says_the_same(work, bottle, before, typed):
                return Told(bottle.number, Came.ALREADY, f"{bottle.number}: entered already.")
            check_first(work, bottle, walked, "end the line with the word again")
        if typed.said is Said.MISSING:
            return missing(work, bottle, seen, walked)
        return met(work, bottle, seen, walked, typed, places)


def _read(work: Work, line: str) -> Typed | None:
    """A line as it is meant, None where it says nothing yet. Raises: as `enter_line`."""
    number = numbered(line)
    try:
        typed = read_typed(line)
    except BadAmount as error:
        if not number:
            raise
        # nobody weighs what a hint asks for in cm³
        unit = BASE_UNIT[Kind(work.line(work.bottle(number)).kind)]
        raise BadAmount(error.message, error.hint.replace("cm3", unit)) from error
    if typed is None and number:
        # not yet, of a bottle that is there: else it is no line of a count
        work.bottle(number)
    return typed


def _open_walk(work: Work, name: str) -> Row:
    row = rows.walk_named(work.reader, name)
    if row is None:
        raise no_walk(name, [str(each["name"]) for each in rows.walks(work.reader)])
    check_not_ended(walk_from(work.reader, row))
    return row


def _met_after_all(seen: facts.Bottle, typed: Typed) -> bool:
    return seen.record.not_found and typed.said is not Said.MISSING


def _says_the_same(work: Work, bottle: Bottle, before: Row, typed: Typed) -> bool:
    """Whether a line says what the walk's last entry for the bottle says already."""
    if before["kind"] != EntryKind.COUNTED:
        missing = before["kind"] == EntryKind.LOST
        return missing if typed.said is Said.MISSING else typed.said is Said.HERE
    if typed.said is Said.MISSING:
        return False
    if typed.said in (Said.HERE, Said.SAME):
        return True
    assert bottle.id is not None
    held = rows.left_after(rows.entries_for(work.reader, bottle.id), before)
    return held == amount_typed(work, bottle, 0, typed).micro
